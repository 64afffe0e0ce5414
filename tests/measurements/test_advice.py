"""What to do at a station: a turn only where all of it is known, for the last reading, outside the setting zone."""

import pytest

from measurements.assess import assess
from measurements.document import Unjudgeable

LASH = {"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm", "set_lower": "0.28 mm",
        "set_upper": "0.32 mm"}  # fmt: skip
SCREW = {"valve_train": {"adjustment": "screw", "screw_pitch": "1 mm", "screw_ratio": 1}}


def told(judgement: dict) -> list[tuple]:
    return [(act["station"], act["act"], act["direction"]) for act in judgement["advice"]]


def warned(judgement: dict, words: str) -> bool:
    return any(words in warning for warning in judgement["warnings"])


def test_a_screw_ratio_that_is_not_given_is_not_assumed(judged):
    screw = {"valve_train": {"adjustment": "screw", "screw_pitch": "1 mm"}}
    judgement = judged("valve_lash", {"1.intake": "0.18 mm"}, limits=[LASH], engine=screw)

    assert judgement["advice"] == []
    assert warned(judgement, "No turn for 1.intake: the screw ratio is not given")


def test_a_screw_that_opens_the_gap_inward_can_be_declared(judged):
    screw = {"valve_train": {**SCREW["valve_train"], "inward_closes": False}}
    [act] = judged("valve_lash", {"1.intake": "0.18 mm"}, limits=[LASH], engine=screw)["advice"]

    assert (act["direction"], act["hand"]) == ("loosen", "clockwise")


def test_a_limit_that_only_says_where_to_set_still_asks_for_the_turn(judged):
    only = {name: LASH[name] for name in ("characteristic", "set_lower", "set_upper")}

    assert told(judged("valve_lash", {"1.intake": "0.18 mm"}, limits=[only], engine=SCREW)) == [
        ("1.intake", "turn_screw", "loosen")
    ]


def test_a_station_without_a_target_is_said(judged):
    only = {"characteristic": "valve_lash.intake", "set_lower": "0.28 mm"}
    judgement = judged("valve_lash", {"1.intake": "0.18 mm"}, limits=[only], engine=SCREW)

    assert judgement["advice"] == []
    assert warned(
        judgement, "No act for 1.intake: it is outside its setting zone, but no nominal says where to set it."
    )


@pytest.mark.parametrize(
    ("entry", "act"),
    [
        ("<0.05", "open_up_and_measure_again"),
        ("<0.30", None),
        (">0.50", "close_down_and_measure_again"),
        (">0.30", None),
    ],
)
def test_a_censored_gap_is_opened_or_closed_only_where_it_proves_to_be_outside(entry, act, judged):
    acts = judged("valve_lash", {"1.intake": entry}, limits=[LASH], engine=SCREW)["advice"]

    assert [one["act"] for one in acts] == ([act] if act else [])


def test_a_bridge_is_not_set_with_the_turn_of_the_lash_screw(judged):
    bridged = {**SCREW, "valves_per_cylinder": {"intake": 2, "exhaust": 2}}
    bridged["valve_train"] = {**SCREW["valve_train"], "bridges": True}
    limit = {"characteristic": "valve_lash.bridge", "set_lower": "0.00 mm", "set_upper": "0.03 mm"}
    judgement = judged("valve_lash", {"1.intake.bridge": "0.10 mm"}, limits=[limit], engine=bridged)

    assert judgement["advice"] == []
    assert warned(judgement, "No turn for 1.intake.bridge: a bridge has its own screw.")


def test_not_measured_afterwards_leaves_the_turn_that_was_asked_for(engine):
    found = {"kind": "valve_lash", "phase": "as_found", "hours": 90, "readings": {"1.intake": "0.10 mm"}}
    left = {"kind": "valve_lash", "phase": "as_left", "hours": 90, "not_measured": {"1.intake": "no time"}}

    judgement = assess({"engine": {**engine, **SCREW}, "limits": [LASH], "measurements": [found, left]})

    assert told(judgement) == [("1.intake", "turn_screw", "loosen")]


def test_after_a_meter_was_replaced_the_last_day_counts(engine):
    found = {
        "kind": "valve_lash",
        "phase": "as_found",
        "taken_on": "2025-01-01",
        "hours": 9000,
        "readings": {"1.intake": "0.10"},
    }
    left = {
        "kind": "valve_lash",
        "phase": "as_left",
        "taken_on": "2026-01-01",
        "hours": 100,
        "readings": {"1.intake": "0.30"},
    }

    judgement = assess({"engine": {**engine, **SCREW}, "limits": [LASH], "measurements": [found, left]})

    assert judgement["advice"] == []


def test_a_reading_in_another_state_than_its_limit_asks_for_no_turn(judged):
    cold = {**LASH, "condition": "cold"}

    assert (
        judged("valve_lash", {"1.intake": "0.18"}, limits=[cold], engine=SCREW, conditions={"state": "hot"})["advice"]
        == []
    )


@pytest.mark.parametrize(
    ("figures", "path"),
    [
        ({"nominal": "0.50 mm"}, "limits[0].nominal"),
        ({"nominal": "0.26 mm"}, "limits[0].nominal"),
        ({"set_lower": "0.20 mm"}, "limits[0].set_lower"),
        ({"set_upper": "0.40 mm"}, "limits[0].set_upper"),
    ],
)
def test_a_target_outside_its_own_limits_is_refused(figures, path, judged):
    with pytest.raises(Unjudgeable) as refused:
        judged("valve_lash", {"1.intake": "0.18 mm"}, limits=[{**LASH, **figures}], engine=SCREW)

    assert [place for place, _ in refused.value.errors] == [path]
    assert str(refused.value.errors[0][1]).endswith("one of the two is wrong.")


def test_a_slip_is_confirmed_before_the_turn_in_a_whole_sentence(judged):
    [act] = judged("valve_lash", {"1.intake": "0.012"}, limits=[LASH], engine=SCREW)["advice"]

    assert act["confirm_first"] == "Confirm the reading first: it would make sense if typed in inches."
