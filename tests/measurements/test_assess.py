"""`assess` gives every field its description promises, judged from the document alone."""

import json
from copy import deepcopy
from math import pi, sqrt
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

from measurements.assess import assess, assess_bytes
from measurements.schema import schema_in, schema_out

DOCUMENTS = Path(__file__).parents[2] / "fixtures" / "demo"
EXAMPLE = json.loads((DOCUMENTS / "example.json").read_text())

# --- the example that assess was described with


def test_the_example_gives_the_figures_it_was_described_with():
    found = assess(EXAMPLE)["findings"][0]

    told = {name: found[name] for name in ("characteristic", "station", "phase", "as_typed", "value", "unit", "si_value",
                                           "coverage_factor", "lower", "upper", "decision_rule", "verdict",
                                           "probability_within", "needs", "slip")}  # fmt: skip
    assert told == {
        "characteristic": "valve_lash.intake", "station": "1.intake", "phase": "as_found", "as_typed": "0.18 mm",
        "value": 0.18, "unit": "mm", "si_value": 0.00018, "coverage_factor": 2.0, "lower": 0.25, "upper": 0.35,
        "decision_rule": "guarded", "verdict": "beyond", "probability_within": 0.0, "needs": None, "slip": None,
    }  # fmt: skip
    assert round(found["standard_uncertainty"], 5) == 0.00493
    assert round(found["expanded_uncertainty"], 4) == 0.0099
    assert round(found["guard_band"], 4) == 0.0081


def test_the_example_gives_its_turn_its_crank_plan_and_its_engine():
    judgement = assess(EXAMPLE)

    [turn] = judgement["advice"]
    assert {name: turn[name] for name in ("station", "act", "turns", "degrees", "direction", "predicted", "unit")} == {
        "station": "1.intake", "act": "turn_screw", "turns": 0.12, "degrees": 45, "direction": "loosen", "predicted": 0.30,
        "unit": "mm",
    }  # fmt: skip
    stops = judgement["barring_plan"]["stops"]
    assert [(stop["crank_angle"], stop["mark"]) for stop in stops] == [(0, "TDC 1 firing"), (360, "TDC 4 firing")]
    assert stops[0]["valves"] == ["1.intake", "1.exhaust", "2.intake", "3.exhaust"]
    engine = judgement["engine"]
    assert (round(engine["displacement"]["value"], 2), engine["displacement"]["unit"]) == (2.98, "L")
    assert (engine["mean_piston_speed"], round(engine["rod_ratio"], 1)) == ({"value": 5.15, "unit": "m/s"}, 1.6)
    assert (engine["proportions"], engine["notes"]) == ("undersquare", [])


def test_what_comes_with_a_later_issue_is_empty_and_said():
    judgement = assess(EXAMPLE)

    assert (judgement["forecasts"], judgement["suspects"]) == ([], [])
    assert [warning for warning in judgement["warnings"] if "not judged yet" in warning] == [
        "Forecasts: not judged yet.", "Suspects: not judged yet.", "Shim advice: not judged yet.",
    ]  # fmt: skip


# --- the schema


@pytest.mark.parametrize("name", ["example.json", "four_kinds.json"])
def test_the_schema_accepts_the_examples_and_its_own_output(name):
    document = json.loads((DOCUMENTS / name).read_text())

    Draft202012Validator.check_schema(schema_in())
    Draft202012Validator.check_schema(schema_out())
    Draft202012Validator(schema_in()).validate(document)
    Draft202012Validator(schema_out()).validate(assess_bytes((DOCUMENTS / name).read_bytes()))


@pytest.mark.parametrize(
    "path", [("engine", "layout"), ("engine", "cylinders"), ("measurements", 0, "kind"), ("gauges", 0, "quantity")]
)
def test_the_schema_refuses_a_document_without_what_is_required(path):
    document = deepcopy(EXAMPLE)
    place = document
    for step in path[:-1]:
        place = place[step]
    del place[path[-1]]

    assert not Draft202012Validator(schema_in()).is_valid(document)


def test_the_schema_lists_every_characteristic():
    listed = schema_in()["properties"]["limits"]["items"]["properties"]["characteristic"]["enum"]

    assert set(listed) >= {
        "valve_lash.intake", "valve_lash.exhaust", "compression.pressure", "leak_down.pressure", "leak_down.loss",
        "bore.diameter", "valve_lash.change", "compression.spread", "compression.difference", "compression.lowest_share",
        "compression.wet_gain", "leak_down.equivalent_orifice", "bore.taper", "bore.out_of_round", "bore.wear",
        "bore.piston_clearance",
    }  # fmt: skip


# --- readings, units, limits


def test_only_engine_and_measurements_are_required(finding):
    judgement = assess({"engine": {"layout": "inline", "cylinders": 1},
                        "measurements": [{"kind": "valve_lash", "readings": {"1.intake": "0.30"}}]})  # fmt: skip

    found = finding(judgement, "1.intake")
    assert (found["value"], found["unit"], found["verdict"], found["phase"]) == (0.3, "mm", "no_limit", "as_found")
    assert "Measurement 0: no gauge is named, so its calibration is missing from u." in judgement["warnings"]


def test_a_number_without_unit_takes_the_unit_of_its_limit_else_the_kinds_own(judged, finding):
    inches = [{"characteristic": "valve_lash.intake", "lower": "0.010 in", "upper": "0.014 in"}]
    judgement = judged("valve_lash", {"1.intake": "0.012", "1.exhaust": "0.40"}, limits=inches)

    assert (finding(judgement, "1.intake")["unit"], finding(judgement, "1.exhaust")["unit"]) == ("in", "mm")
    assert finding(judgement, "1.intake")["si_value"] == pytest.approx(0.012 * 0.0254)


def test_limits_come_back_in_the_unit_of_the_entry(judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.254 mm", "upper": "0.381 mm"}]
    found = finding(judged("valve_lash", {"1.intake": "0.012 in"}, limits=limit), "1.intake")

    assert (found["lower"], found["upper"], found["unit"]) == (0.01, 0.015, "in")


def test_a_json_number_keeps_the_digits_it_was_written_with():
    raw = (b'{"engine": {"layout": "inline", "cylinders": 1}, '
           b'"measurements": [{"kind": "valve_lash", "readings": {"1.intake": 0.30}}]}')  # fmt: skip
    found = assess_bytes(raw)["findings"][0]

    assert found["as_typed"] == "0.30"
    assert found["standard_uncertainty"] == pytest.approx(0.01 / sqrt(12))


def test_as_left_is_judged_by_the_setting_zone_and_simply(judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm", "set_lower": "0.28 mm",
              "set_upper": "0.32 mm"}]  # fmt: skip
    found = finding(judged("valve_lash", {"1.intake": "0.32 mm"}, limits=limit, phase="as_left"), "1.intake")

    assert (found["lower"], found["upper"], found["decision_rule"], found["verdict"]) == (
        0.28,
        0.32,
        "simple",
        "within",
    )


@pytest.mark.parametrize(
    ("conditions", "verdict", "told"),
    [
        ({"state": "cold"}, "within", None),
        ({"state": "hot"}, "no_limit", "1.intake: its limit holds cold, the reading was taken otherwise; no verdict."),
        ({}, "within", None),
    ],
)
def test_a_limit_is_for_its_condition(conditions, verdict, told, judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm", "condition": "cold"}]
    judgement = judged("valve_lash", {"1.intake": "0.30 mm"}, limits=limit, conditions=conditions)

    assert finding(judgement, "1.intake")["verdict"] == verdict
    assert (told in judgement["warnings"]) is (told is not None)
    if not conditions:
        note = "The limit holds cold; the reading doesn't say its own state."
        assert note in finding(judgement, "1.intake")["notes"]


def test_a_condition_can_be_a_span_of_temperatures(judged, finding):
    limit = [{"characteristic": "bore.diameter", "upper": "100.1 mm", "condition": "15..30 °C"}]
    warm = judged("bore", {"1.top.thrust": "100.05 mm"}, limits=limit, conditions={"part_temperature": "41 °C"})
    mild = judged("bore", {"1.top.thrust": "100.05 mm"}, limits=limit, conditions={"part_temperature": "77 °F"})

    assert finding(warm, "1.top.thrust")["verdict"] == "no_limit"
    assert finding(mild, "1.top.thrust")["verdict"] == "within"


def test_of_two_limits_the_one_for_the_readings_state_judges(judged, finding):
    limits = [{"characteristic": "valve_lash.exhaust", "lower": "0.40 mm", "upper": "0.43 mm", "condition": "cold"},
              {"characteristic": "valve_lash.exhaust", "lower": "0.36 mm", "upper": "0.40 mm", "condition": "hot"}]  # fmt: skip
    hot = judged("valve_lash", {"1.exhaust": "0.38 mm"}, limits=limits, conditions={"state": "hot"})

    assert finding(hot, "1.exhaust")["upper"] == 0.40


def test_not_measured_is_an_answer_with_its_reason(judged, finding):
    judgement = judged("valve_lash", {"1.intake": "0.30 mm"}, not_measured={"2.intake": "seized"})

    found = finding(judgement, "2.intake")
    assert (found["value"], found["verdict"], found["not_measured"]) == (None, "no_limit", "seized")
    assert found["notes"] == ["Not measured: seized"]


def test_a_censored_entry_carries_its_bound_and_asks_for_no_turn(judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm", "set_lower": "0.28 mm",
              "set_upper": "0.32 mm"}]  # fmt: skip
    judgement = judged("valve_lash", {"1.intake": "<0.05 mm"}, limits=limit,
                       engine={"valve_train": {"adjustment": "screw", "screw_pitch": "1 mm"}})  # fmt: skip

    found = finding(judgement, "1.intake")
    assert (found["bound"], found["verdict"], found["probability_within"]) == ("below", "beyond", None)
    assert [(act["act"], act["direction"], "turns" in act) for act in judgement["advice"]] == [
        ("open_up_and_measure_again", "loosen", False)
    ]


def test_a_close_call_says_what_would_settle_it(judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm"}]
    gauge = {
        "id": "G",
        "quantity": "length",
        "resolution": "0.01 mm",
        "expanded_uncertainty": "0.008 mm",
        "coverage_factor": 2,
    }
    found = finding(judged("valve_lash", {"1.intake": "0.255 mm"}, limits=limit, gauges=[gauge], gauge="G"), "1.intake")

    assert found["verdict"] == "too_close"
    assert found["needs"]["repeats"] is None
    assert found["needs"]["expanded_uncertainty"] == pytest.approx(2 * 0.005 / 1.6449, rel=1e-3)  # d = w = 1.645 U/2


def test_a_slip_is_judged_as_read_and_spelled_out(judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm", "nominal": "0.30 mm"}]
    found = finding(judged("valve_lash", {"1.intake": "0.012"}, limits=limit), "1.intake")

    assert (found["value"], found["verdict"]) == (0.012, "beyond")
    assert (round(found["slip"]["would_be"], 4), found["slip"]["unit"], found["slip"]["if"]) == (
        0.3048,
        "mm",
        "typed in inches",
    )


# --- the engine


def test_displacement_is_the_sum_of_all_cylinders(judged):
    engine = judged("valve_lash", {"1.intake": "0.3"}, engine={"bore": "96 mm", "stroke": "103 mm"})["engine"]

    assert engine["displacement"]["value"] == pytest.approx(4 * pi / 4 * 0.96**2 * 1.03, rel=1e-5)
    assert "rod_ratio" not in engine


def test_without_a_firing_order_there_is_no_plan_and_a_warning():
    judgement = assess({"engine": {"layout": "inline", "cylinders": 4}, "measurements": []})

    assert judgement["barring_plan"] is None
    assert any("firing order is not known" in warning for warning in judgement["warnings"])


def test_without_events_the_plan_says_that_it_assumes_common_cams(engine):
    judgement = assess({"engine": engine, "measurements": []})

    assert judgement["barring_plan"]["assumed_events"] is True
    assert any("safe for common cams" in warning for warning in judgement["warnings"])


def test_a_meter_that_runs_backward_is_said(lash_visits):
    document = lash_visits
    document["measurements"][0] |= {"taken_on": "2026-01-01", "hours": 100}
    document["measurements"][1] |= {"taken_on": "2025-01-01"}

    assert any(
        "The meter runs backward: 3798 h on 2025-01-01, 100 h on 2026-01-01" in one
        for one in assess(document)["warnings"]
    )
