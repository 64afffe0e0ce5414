"""A document that can't be judged is refused with every error at once, each with its path and a sentence to act on."""

import json
from copy import deepcopy

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from measurements.assess import assess, assess_bytes
from measurements.document import MOST_BYTES, Unjudgeable

SOUND = {
    "engine": {"layout": "inline", "cylinders": 4, "firing_order": [1, 3, 4, 2], "bore": "96 mm", "stroke": "103 mm",
               "rod_length": "165 mm", "ignition": "compression",
               "valve_train": {"events": {"intake_opens_btdc": 12, "intake_closes_abdc": 48, "exhaust_opens_bbdc": 52,
                                          "exhaust_closes_atdc": 10}}},
    "shop": {"decimal_mark": ".", "decision_rule": "guarded", "barometer": "1013 hPa"},
    "limits": [{"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm"}],
    "gauges": [{"id": "FG-2", "quantity": "length", "resolution": "0.01 mm", "expanded_uncertainty": "0.008 mm",
                "coverage_factor": 2, "calibrated_on": "2026-03-01", "due_on": "2027-03-01"},
               {"id": "CG-1", "quantity": "pressure"}],
    "measurements": [{"kind": "valve_lash", "taken_on": "2026-05-02", "hours": 4210, "phase": "as_found", "gauge": "FG-2",
                      "conditions": {"state": "cold"}, "readings": {"1.intake": "0.18 mm"}},
                     {"kind": "compression", "gauge": "CG-1", "readings": {"1": "24 bar"}, "conditions": {"strokes": 6}},
                     {"kind": "leak_down", "gauge": "CG-1", "readings": {"1": "10 %"},
                      "conditions": {"supply_pressure": "5 bar", "escapes": {"1": ["exhaust"]}}},
                     {"kind": "bore", "gauge": "FG-2", "readings": {"1.top.thrust": "96.02 mm"},
                      "conditions": {"oversizes": ["0.25 mm"], "piston_diameters": {"1": "95.9 mm"}}}],
    "shims": {"fitted": {"1.intake": "2.70 mm"}, "stock": ["2.55 mm"], "step": "0.05 mm"},
}  # fmt: skip
GONE = "gone: the field is taken out"

BAD = [
    # path to change, what to put there (GONE removes it), the path told, words the sentence must hold
    ("engine", GONE, "engine", "missing"),
    ("measurements", GONE, "measurements", "missing"),
    ("engine.layout", GONE, "engine.layout", "missing"),
    ("engine.cylinders", GONE, "engine.cylinders", "missing"),
    ("engine.layout", "radial", "engine.layout", "inline, vee, flat"),
    ("engine.cylinders", 0, "engine.cylinders", "whole number from 1"),
    ("engine.cylinders", 4.5, "engine.cylinders", "whole number"),
    ("engine.cylinders", True, "engine.cylinders", "whole number"),
    ("engine.firing_order", [1, 3, 4], "engine.firing_order", ""),
    ("engine.firing_order", [1, 3, 3, 2], "engine.firing_order", "3"),
    ("engine.firing_order", "1-3-4-2", "engine.firing_order", "list in brackets"),
    ("engine.firing_angles", [0, 180, 170, 540], "engine.firing_angles", ""),
    ("engine.banks", [[1, 2], [2, 3]], "engine.banks", ""),
    ("engine.bore", "0 mm", "engine.bore", "above 0"),
    ("engine.bore", "96 bar", "engine.bore", "bar"),
    ("engine.bore", "ninety", "engine.bore", "ninety"),
    ("engine.rod_length", "40 mm", "engine.rod_length", "rod"),
    ("engine.compression_ratio", 0.5, "engine.compression_ratio", "above 1"),
    ("engine.rated_speed", "-1500 rpm", "engine.rated_speed", ""),
    ("engine.colour", "blue", "engine.colour", "no field here"),
    ("engine.valve_train.screw_pitch", "1 °C", "engine.valve_train.screw_pitch", "°C"),
    ("engine.valve_train.adjustment", "glue", "engine.valve_train.adjustment", "screw, shim, hydraulic"),
    ("engine.valve_train.events.intake_opens_btdc", "12", "engine.valve_train.events.intake_opens_btdc", "number"),
    ("engine.valve_train.events.exhaust_closes_atdc", GONE, "engine.valve_train.events.exhaust_closes_atdc", "missing"),
    ("engine.ignition", "steam", "engine.ignition", "spark, compression"),
    ("shop.decimal_mark", ";", "shop.decimal_mark", ""),
    ("shop.decision_rule", "strict", "shop.decision_rule", "guarded, expanded, simple"),
    ("shop.barometer", "2 bar", "shop.barometer", "between 300 and 1100 hPa"),
    ("limits.0.lower", "0.40 mm", "limits[0].lower", "not below"),
    ("limits.0.characteristic", "valve_lash.inlet", "limits[0].characteristic", "no kind"),
    ("limits.0.characteristic", "noise.level", "limits[0].characteristic", "no kind"),
    ("limits.0.upper", "0.35 bar", "limits[0].upper", "bar"),
    ("limits.0.upper", "<0.35 mm", "limits[0].upper", "one figure"),
    ("limits.0.condition", "30..15 °C", "limits[0].condition", "lower one"),
    ("limits.0.stations", ["9.intake"], "limits[0].stations[0]", "cylinder 9"),
    ("gauges.0.quantity", "weight", "gauges[0].quantity", "length"),
    ("gauges.0.resolution", "0.01 bar", "gauges[0].resolution", "bar"),
    ("gauges.0.coverage_factor", 0, "gauges[0].coverage_factor", "from 1"),
    ("gauges.0.due_on", "2025-03-01", "gauges[0].due_on", "before calibrated"),
    ("gauges.0.due_on", "1 March 2027", "gauges[0].due_on", "year-month-day"),
    ("gauges.1.id", "FG-2", "gauges[1].id", "described twice"),
    ("measurements.0.kind", "noise", "measurements[0].kind", "no kind"),
    ("measurements.0.phase", "found", "measurements[0].phase", "as_found, as_left"),
    ("measurements.0.gauge", "FG-9", "measurements[0].gauge", "No gauge has the id"),
    ("measurements.0.gauge", "CG-1", "measurements[0].gauge", "measures pressure"),
    ("gauges.1.quantity", "ratio", "measurements[1].gauge", "measures ratio"),
    ("measurements.0.taken_on", "2026-02-30", "measurements[0].taken_on", "year-month-day"),
    ("measurements.0.hours", -5, "measurements[0].hours", "from 0"),
    ("measurements.0.hours", "many", "measurements[0].hours", "many"),
    ("measurements.0.readings", {"1.intake": None}, "measurements[0].readings.1.intake", "not_measured"),
    ("measurements.0.readings", {"1.inlet": "0.18"}, "measurements[0].readings.1.inlet", "1.intake"),
    ("measurements.0.readings", {"7.intake": "0.18"}, "measurements[0].readings.7.intake", "cylinder 7"),
    ("measurements.0.readings", {"1.intake.3": "0.18"}, "measurements[0].readings.1.intake.3", "valve 3"),
    ("measurements.0.readings", {"1.intake": "0.18", "1.intake.1": "0.2"}, "measurements[0].readings.1.intake.1", "twice"),
    ("measurements.0.readings", {"1.intake": ""}, "measurements[0].readings.1.intake", ""),
    ("measurements.0.readings", {"1.intake": "-0.18"}, "measurements[0].readings.1.intake", "-0.18"),
    ("measurements.0.readings", {"1.intake": "1.8e-1 mm"}, "measurements[0].readings.1.intake", "1.8e-1"),
    ("measurements.0.readings", {"1.intake": "0.18 bar"}, "measurements[0].readings.1.intake", "bar"),
    ("measurements.0.readings", {"1.intake": ["0.18"]}, "measurements[0].readings.1.intake", "where a reading"),
    ("measurements.0.readings", [], "measurements[0].readings", "object in braces"),
    ("measurements.0.readings", GONE, "measurements[0].readings", "missing"),
    ("measurements.0.not_measured", {"1.intake": "seized"}, "measurements[0].not_measured.1.intake", "give one of the two"),
    ("measurements.0.not_measured", {"2.intake": " "}, "measurements[0].not_measured.2.intake", "text"),
    ("measurements.0.conditions.state", "lukewarm", "measurements[0].conditions.state", "cold, hot"),
    ("measurements.0.conditions.cranking_speed", "200 rpm", "measurements[0].conditions.cranking_speed", "no field here"),
    ("measurements.1.conditions.wet", True, "measurements[1].conditions.wet", "spark-ignited"),
    ("measurements.1.conditions.wet", "yes", "measurements[1].conditions.wet", "true or false"),
    ("measurements.1.conditions.strokes", 0, "measurements[1].conditions.strokes", "whole number from 1"),
    ("measurements.1.conditions.cranking_speed", "200 mm", "measurements[1].conditions.cranking_speed", "mm"),
    ("measurements.2.readings", {"1": "110 %"}, "measurements[2].readings.1", "can't be over 100"),
    ("measurements.2.conditions.supply_pressure", "0 bar", "measurements[2].conditions.supply_pressure", "above zero"),
    ("measurements.2.conditions.escapes", {"1": ["radio"]}, "measurements[2].conditions.escapes.1[0]", "exhaust"),
    ("measurements.2.conditions.escapes", {"9": ["exhaust"]}, "measurements[2].conditions.escapes.9", "no cylinder"),
    ("measurements.3.readings", {"1.top": "96.02"}, "measurements[3].readings.1.top", "3.top.thrust"),
    ("measurements.3.conditions.oversizes", ["0 mm"], "measurements[3].conditions.oversizes[0]", "above 0"),
    ("measurements.3.conditions.piston_diameters", {"x": "9 mm"}, "measurements[3].conditions.piston_diameters.x", "no cylinder"),
    ("shims.fitted", {"9.intake": "2.70 mm"}, "shims.fitted.9.intake", "cylinder 9"),
    ("shims.step", "0 mm", "shims.step", "above 0"),
    ("shims.stock", ["thick"], "shims.stock[0]", "thick"),
    ("forecast", {}, "forecast", "no field here"),
]  # fmt: skip


def changed(path: str, value: object) -> dict:
    document = deepcopy(SOUND)
    place, steps = document, [int(step) if step.isdigit() else step for step in path.split(".")]
    for step in steps[:-1]:
        place = place[step]
    if value is GONE:
        del place[steps[-1]]
    else:
        place[steps[-1]] = value
    return document


def errors_of(document: object) -> dict[str, str]:
    with pytest.raises(Unjudgeable) as refused:
        assess(document)
    return {path: str(sentence) for path, sentence in refused.value.errors}


def test_the_sound_document_is_judged():
    assert len(assess(SOUND)["findings"]) == 4


@pytest.mark.parametrize(("path", "value", "told_at", "words"), BAD, ids=[f"{row[0]}={row[1]!r:.40}" for row in BAD])
def test_bad_input_is_told_at_its_path(path, value, told_at, words):
    errors = errors_of(changed(path, value))

    assert told_at in errors, errors
    assert words.lower() in errors[told_at].lower()
    assert errors[told_at].endswith((".", "?"))


def test_all_errors_are_told_at_once():
    document = changed("engine.layout", "radial")
    document["shop"]["decimal_mark"] = ";"
    document["gauges"][0]["quantity"] = "weight"
    document["measurements"][0]["phase"] = "found"

    assert {"engine.layout", "shop.decimal_mark", "gauges[0].quantity", "measurements[0].phase"} <= errors_of(
        document
    ).keys()


@pytest.mark.parametrize("document", [None, [], "text", 3, True])
def test_what_is_no_object_is_refused(document):
    assert errors_of(document) == {"": f"Read {json.dumps(document)} where an object in braces belongs."}


@pytest.mark.parametrize(
    ("raw", "words"),
    [
        (b"", "not JSON"),
        (b"{", "not JSON"),
        (b'{"engine": NaN}', "NaN"),
        (b'{"engine": {}, "engine": {}}', "stands twice"),
        (b"\xff\xfe", "not UTF-8"),
        (b"[" * 100_000, "nested too deeply"),
        (b" " * (MOST_BYTES + 1), f"at most {MOST_BYTES}"),
    ],
)
def test_what_is_no_json_is_refused_with_one_sentence(raw, words):
    with pytest.raises(Unjudgeable) as refused:
        assess_bytes(raw)

    [(path, sentence)] = refused.value.errors
    assert path == ""
    assert words in str(sentence)


def test_more_than_a_thousand_measurements_are_refused():
    document = changed("measurements", [SOUND["measurements"][0]] * 1001)

    assert errors_of(document) == {"measurements": "There are 1001; at most 1000 are judged at once."}


def test_two_limits_for_the_same_thing_are_refused():
    document = changed("limits", [SOUND["limits"][0]] * 2)

    assert "limits[1]" in errors_of(document)


def test_a_comma_that_could_mean_two_things_is_refused_with_both():
    document = changed("measurements.1.readings", {"1": "1,234 psi"})
    del document["shop"]["decimal_mark"]

    told = errors_of(document)["measurements[1].readings.1"]
    assert "1.234" in told
    assert "1234" in told


def test_with_the_shops_comma_a_comma_is_read():
    document = changed("measurements.0.readings", {"1.intake": "0,30 mm"})
    document["shop"]["decimal_mark"] = ","
    # the shop's mark holds for every figure typed in the document
    text = (
        json.dumps(document).replace("0.25 mm", "0,25 mm").replace("0.35 mm", "0,35 mm").replace("0.01 mm", "0,01 mm")
    )
    text = (
        text.replace("0.008 mm", "0,008 mm").replace("96.02", "96,02").replace("95.9", "95,9").replace("2.70", "2,70")
    )
    text = text.replace("2.55", "2,55").replace("0.05", "0,05")

    assert assess(json.loads(text))["findings"][0]["value"] == 0.30


ANY_JSON = st.recursive(
    st.none() | st.booleans() | st.integers(-(10**20), 10**20) | st.floats() | st.text(max_size=12)
    | st.sampled_from(["0.30 mm", "<0.05", "1,234", "12 bar abs", "1 3/8 in", "0.3..0.35", "٣", "1e9", "9" * 40, "true"]),
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(st.text(max_size=8), inner, max_size=3),
    max_leaves=6,
)  # fmt: skip


def places(value: object, path: tuple = ()):
    """Every place of a document that something else could stand in."""
    yield path
    if isinstance(value, dict):
        for name in value:
            yield from places(value[name], (*path, name))
    elif isinstance(value, list):
        for index in range(len(value)):
            yield from places(value[index], (*path, index))


@settings(max_examples=400, deadline=None)
@given(path=st.sampled_from(list(places(SOUND))), value=ANY_JSON)
def test_whatever_stands_anywhere_is_judged_or_refused_never_a_crash(path, value):
    document = deepcopy(SOUND)
    if path:
        place = document
        for step in path[:-1]:
            place = place[step]
        place[path[-1]] = value
    else:
        document = value

    try:
        judgement = assess(document)
    except Unjudgeable as refused:
        assert all(str(sentence) for _, sentence in refused.errors)
    else:
        json.dumps(judgement, allow_nan=False)
