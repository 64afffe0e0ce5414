"""What a reading rests on is said where it is thin, and nothing is taken for granted that was not given."""

from math import sqrt

import pytest

from measurements.assess import assess
from measurements.document import Unjudgeable

DIAL = {
    "id": "P",
    "quantity": "pressure",
    "resolution": "0.1 bar",
    "expanded_uncertainty": "0.2 bar",
    "coverage_factor": 2,
}
LEAF = {
    "id": "G",
    "quantity": "length",
    "resolution": "0.01 mm",
    "expanded_uncertainty": "0.008 mm",
    "coverage_factor": 2,
}


@pytest.mark.parametrize(("entry", "value"), [("<0.05; <0.10 mm", 0.05), (">0.40; >0.50 mm", 0.50)])
def test_bounds_are_never_averaged(entry, value, judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.07 mm", "upper": "0.46 mm"}]
    found = finding(judged("valve_lash", {"1.intake": entry}, limits=limit, gauges=[LEAF], gauge="G"), "1.intake")

    assert (found["value"], found["verdict"]) == (value, "beyond")
    assert found["standard_uncertainty"] == pytest.approx(sqrt(0.01**2 / 12 + 0.004**2))


def test_a_nominal_on_its_limit_leaves_no_zone_to_compare_the_gauge_with(judged, finding):
    limit = [{"characteristic": "compression.pressure", "lower": "10 bar", "nominal": "10 bar"}]
    found = finding(judged("compression", {"1": "10.5 bar"}, limits=limit, gauges=[DIAL], gauge="P"), "1")

    assert found["verdict"] == "within"


def test_a_loss_in_percent_carries_the_scatter_of_its_dial(judged, finding):
    dial = {**DIAL, "repeatability": "0.1 bar"}
    found = finding(
        judged("leak_down", {"1": "12 %"}, gauges=[dial], gauge="P", conditions={"supply_pressure": "5 bar"}), "1"
    )

    assert found["standard_uncertainty"] == pytest.approx(sqrt((0.1 / 5 * 100) ** 2 * 2 + 1 / 12))


def test_a_loss_in_percent_without_supply_says_that_the_dial_is_missing_from_u(judged, finding):
    found = finding(judged("leak_down", {"1": "12 %"}, gauges=[DIAL], gauge="P"), "1")

    assert any("can't be told without the supply pressure" in note for note in found["notes"])


def test_a_supply_given_as_absolute_is_brought_to_gauge_pressure(judged, derived):
    conditions = {"supply_pressure": "6.5 bar abs", "barometer": "1000 hPa"}

    assert derived(judged("leak_down", {"1": "4.4 bar"}, conditions=conditions), "leak_down.loss", "1")["value"] == 20.0


def test_an_absolute_supply_without_a_barometer_is_refused(judged):
    with pytest.raises(Unjudgeable) as refused:
        judged("leak_down", {"1": "4 bar"}, conditions={"supply_pressure": "6 bar abs"})

    assert [path for path, _ in refused.value.errors] == ["measurements[0].conditions.supply_pressure"]


def test_a_certificate_without_its_coverage_factor_is_said(judged, finding):
    gauge = {name: value for name, value in LEAF.items() if name != "coverage_factor"}
    found = finding(judged("valve_lash", {"1.intake": "0.30"}, gauges=[gauge], gauge="G"), "1.intake")

    assert "The certificate of gauge G is given without its coverage factor; k = 2 is taken." in found["notes"]


def test_without_a_day_it_is_said_that_the_gauge_may_be_past_due(judged):
    judgement = judged("valve_lash", {"1.intake": "0.30"}, gauges=[{**LEAF, "due_on": "2020-01-01"}], gauge="G")

    told = "Measurement 0: its day is not given, so it can't be told whether gauge G, due 2020-01-01, was past due."
    assert told in judgement["warnings"]


def test_every_repeat_has_to_lie_in_the_range_of_the_gauge(judged, finding):
    gauge = {**LEAF, "range": ["0.05 mm", "0.40 mm"]}
    found = finding(judged("valve_lash", {"1.intake": "0.39; 0.42"}, gauges=[gauge], gauge="G"), "1.intake")

    assert "The reading is outside the range of gauge G." in found["notes"]


def test_a_bore_gauges_range_is_that_of_the_sizes_it_is_set_to(judged, finding):
    gauge = {**LEAF, "range": ["50 mm", "150 mm"]}
    judgement = judged("bore", {"1.top.thrust": "+0.05"}, gauges=[gauge], gauge="G", conditions={"set_size": "100 mm"})

    assert "The reading is outside the range of gauge G." not in finding(judgement, "1.top.thrust")["notes"]


def test_a_zero_that_moved_less_than_the_gauges_step_is_not_reproached(judged, finding):
    conditions = {"set_size": "100.000 mm", "zero_before": "0.000", "zero_after": "+0.010"}
    found = finding(
        judged("bore", {"1.top.thrust": "+0.05"}, gauges=[LEAF], gauge="G", conditions=conditions), "1.top.thrust"
    )

    assert not any("zero moved" in note for note in found["notes"])


def test_visits_without_a_common_measure_of_time_are_said_to_stand_as_written(engine):
    first = {"kind": "valve_lash", "phase": "as_left", "taken_on": "2026-01-01", "readings": {"1.intake": "0.30"}}
    second = {"kind": "valve_lash", "phase": "as_found", "hours": 12, "readings": {"1.intake": "0.33"}}

    told = "Not every measurement has its day, nor every one its running hours: they are taken in the order written."
    assert told in assess({"engine": engine, "measurements": [first, second]})["warnings"]


def test_large_sizes_are_spelled_out_to_the_last_digit_read(judged, finding):
    limit = [{"characteristic": "bore.diameter", "upper": "250.0145 mm"}]
    found = finding(judged("bore", {"1.top.thrust": "250.0135 mm"}, limits=limit), "1.top.thrust")

    assert found["working"][-1] == "250.0135 mm: within"
    assert found["working"][-3].endswith("at limits open to 250.0145")
