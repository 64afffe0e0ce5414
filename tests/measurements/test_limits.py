"""Which limit judges a reading, at which barometer, and when none may."""

import pytest

from measurements.document import Unjudgeable

EXHAUST = {"characteristic": "valve_lash.exhaust"}
COLD_AND_HOT = [{**EXHAUST, "lower": "0.40 mm", "upper": "0.43 mm", "condition": "cold"},
                {**EXHAUST, "lower": "0.36 mm", "upper": "0.40 mm", "condition": "hot"}]  # fmt: skip


def test_between_a_cold_and_a_hot_limit_nothing_is_guessed(judged, finding):
    judgement = judged("valve_lash", {"1.exhaust": "0.38 mm"}, limits=COLD_AND_HOT)

    assert finding(judgement, "1.exhaust")["verdict"] == "no_limit"
    told = "1.exhaust: it has one limit each for cold, hot, and the reading doesn't say which it was; no verdict."
    assert told in judgement["warnings"]


def test_a_side_that_the_setting_zone_leaves_open_is_closed_by_the_service_limit(judged, finding):
    limit = {"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm", "set_upper": "0.32 mm"}
    found = finding(judged("valve_lash", {"1.intake": "0.10 mm"}, limits=[limit], phase="as_left"), "1.intake")

    assert (found["lower"], found["upper"], found["verdict"]) == (0.25, 0.32, "beyond")


def test_two_limits_for_one_station_are_refused_though_their_lists_differ(judged):
    limits = [{"characteristic": "valve_lash.intake", "lower": "0.2", "stations": ["1.intake", "2.intake"]},
              {"characteristic": "valve_lash.intake", "lower": "0.1", "stations": ["2.intake", "3.intake"]}]  # fmt: skip
    with pytest.raises(Unjudgeable) as refused:
        judged("valve_lash", {"2.intake": "0.3"}, limits=limits)

    assert [path for path, _ in refused.value.errors] == ["limits[1]"]


def test_a_limit_for_some_stations_judges_at_its_own_barometer(judged, finding, derived):
    limit = {
        "characteristic": "compression.pressure",
        "lower": "9 bar",
        "reference_barometer": "900 hPa",
        "stations": ["1"],
    }
    judgement = judged(
        "compression", {"1": "10.0 bar", "2": "9.0 bar"}, limits=[limit], conditions={"barometer": "900 hPa"}
    )

    assert finding(judgement, "1")["value"] == 10.0
    assert finding(judgement, "2")["value"] == pytest.approx(9 * 1013.25 / 900)
    assert derived(judgement, "compression.spread")["value"] == pytest.approx(10.0)  # both at one barometer


def test_a_difference_is_brought_to_the_barometer_of_its_own_limit(judged, derived):
    limit = {"characteristic": "compression.difference", "upper": "1 bar", "reference_barometer": "900 hPa",
             "decision_rule": "simple"}  # fmt: skip
    judgement = judged(
        "compression", {"1": "10.0 bar", "2": "9.0 bar"}, limits=[limit], conditions={"barometer": "900 hPa"}
    )

    found = derived(judgement, "compression.difference")
    assert (found["value"], found["verdict"]) == (1.0, "within")
    assert not any("singles out" in note for note in found["notes"])


def test_a_span_of_temperatures_that_was_not_told_is_called_one(judged, finding):
    limit = {"characteristic": "bore.diameter", "upper": "100.1 mm", "condition": "15..30 °C"}
    found = finding(judged("bore", {"1.top.thrust": "100.05 mm"}, limits=[limit]), "1.top.thrust")

    assert "The limit holds 15..30 °C; the temperature of the part is not given." in found["notes"]
