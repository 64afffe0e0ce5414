"""A kind is one declaration: an invented one gets its form fields, verdict, schema and print words from it alone."""

import types

import pytest
from jsonschema import Draft202012Validator

from measurements.assess import assess
from measurements.document import Unjudgeable
from measurements.engine import Engine
from measurements.kind import (
    AT_REST,
    COMMON_CONDITIONS,
    Caution,
    Characteristic,
    Derived,
    Kind,
    MethodCondition,
    find_kinds,
    form_fields,
)
from measurements.schema import schema_in, schema_out
from measurements.sentence import say
from measurements.stations import cylinder_stations, parse_cylinder_station


def derive_evenness(done):
    """Highest less lowest flange temperature."""
    readings = sorted(done.comparable().values(), key=lambda one: one.value)
    if len(readings) > 1:
        low, high = readings[0], readings[-1]
        yield Derived("flange.evenness", None, high.value - low.value, "K", ((1.0, high), (-1.0, low)),
                      (say("hottest less coldest"),))  # fmt: skip


FLANGE = Kind(
    name="flange",
    title="Flange temperature",
    entered=(Characteristic("flange.temperature", "Flange temperature", "temperature", "°C", signed=True),),
    derived=(Characteristic("flange.evenness", "Hottest less coldest", "temperature_difference", "K", shape="upper"),),
    stations=cylinder_stations,
    characteristic_of=lambda station, dimension: "flange.temperature",
    station_name=parse_cylinder_station,
    lock_state=AT_REST,
    conditions=(*COMMON_CONDITIONS, MethodCondition("load", "Load", "quantity", "ratio", "%")),
    cautions=(Caution("CAUTION", "Flanges burn."),),
    derive=derive_evenness,
    words={"station": "flange", "value": "temperature"},
)
KINDS = {"flange": FLANGE}
DOCUMENT = {
    "engine": {"layout": "inline", "cylinders": 3},
    "limits": [{"characteristic": "flange.temperature", "upper": "120 °C"},
               {"characteristic": "flange.evenness", "upper": "20 K"}],
    "gauges": [{"id": "T-1", "quantity": "temperature", "resolution": "1 °C", "expanded_uncertainty": "2 °C",
                "coverage_factor": 2}],
    "measurements": [{"kind": "flange", "gauge": "T-1", "phase": "as_found", "conditions": {"load": "80 %"},
                      "readings": {"1": "101 °C", "2": "230 °F", "3": "140"}}],
}  # fmt: skip


def test_an_invented_kind_is_judged_in_every_unit_of_its_dimension():
    judgement = assess(DOCUMENT, KINDS)

    assert [(one["value"], one["unit"], one["verdict"]) for one in judgement["findings"]] == [
        (101.0, "°C", "within"), (230.0, "°F", "within"), (140.0, "°C", "beyond"),
    ]  # fmt: skip
    [evenness] = judgement["derived"]
    assert (evenness["value"], evenness["verdict"]) == (pytest.approx(39.0), "beyond")


def test_an_invented_kind_gets_its_form_fields_in_the_order_of_the_hands():
    fields = form_fields(FLANGE, Engine("inline", 3))

    assert [(field.station, field.characteristic.title, field.unit) for field in fields] == [
        ("1", "Flange temperature", "°C"), ("2", "Flange temperature", "°C"), ("3", "Flange temperature", "°C"),
    ]  # fmt: skip


def test_an_invented_kind_is_in_the_schema_of_both_directions():
    Draft202012Validator(schema_in(KINDS)).validate(DOCUMENT)
    Draft202012Validator(schema_out(KINDS)).validate(assess(DOCUMENT, KINDS))
    assert not Draft202012Validator(schema_in(find_kinds())).is_valid(DOCUMENT)


def test_an_invented_kind_says_its_own_words_cautions_and_lock():
    assert (FLANGE.words["station"], FLANGE.cautions[0].signal, FLANGE.lock_state) == ("flange", "CAUTION", "at rest")


def test_a_kind_that_is_not_there_is_refused_with_those_that_are():
    with pytest.raises(Unjudgeable) as refused:
        assess({**DOCUMENT, "limits": []})

    [(path, sentence)] = refused.value.errors
    assert path == "measurements[0].kind"
    assert "there are bore, compression, leak_down, valve_lash" in str(sentence)


def test_kinds_are_found_by_walking_their_folder(tmp_path, monkeypatch):
    (tmp_path / "invented_kinds").mkdir()
    (tmp_path / "invented_kinds" / "__init__.py").write_text("")
    (tmp_path / "invented_kinds" / "flange.py").write_text("class KIND:\n    name = 'flange'\n")
    monkeypatch.syspath_prepend(tmp_path)
    folder = types.ModuleType("invented_kinds")
    folder.__path__ = [str(tmp_path / "invented_kinds")]

    assert list(find_kinds(folder)) == ["flange"]


@pytest.mark.parametrize("kind", find_kinds().values(), ids=lambda kind: kind.name)
def test_every_kind_says_what_the_form_the_verdict_and_the_print_need(kind):
    engine = Engine("inline", 4, (1, 3, 4, 2))

    assert form_fields(kind, engine)
    assert all(kind.station_name(station, engine) == station for station in kind.stations(engine))
    assert all(one.name.startswith(f"{kind.name}.") for one in (*kind.entered, *kind.derived))
    assert kind.cautions
    assert {caution.signal for caution in kind.cautions} <= {"DANGER", "WARNING", "CAUTION", "NOTICE"}
    assert {"station", "value", "as_found", "as_left"} <= kind.words.keys()
    assert kind.lock_state
