"""How far to turn a lash screw, and which way."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from measurements.published.screw import PUBLISHED
from measurements.screw import turn_for
from measurements.sentence import Refusal

WRONG = {  # the wrong formula each published value names
    "0.10 mm on a 1.0 mm pitch [deg]": lambda: 180 * 0.10 / 1.0,
    "0.05 mm on a 0.75 mm pitch [deg]": lambda: 360 * 0.05 * 0.75,
    "0.10 mm, 1.0 mm pitch, screw at the pushrod end of a 1.5 rocker [deg]": lambda: 360 * 0.10 / 1.0 * 1.5,
    "gap too small, right-hand thread: which way, seen from the head": lambda: turn_for(-0.10, 1.0).hand,
    "gap too small: what it takes": lambda: turn_for(0.18 - 0.30, 1.0).direction,
}


@pytest.mark.parametrize("value", PUBLISHED, ids=lambda value: value.what)
def test_published_value_is_reproduced_and_its_wrong_formula_is_caught(value):
    wrong = WRONG[value.what]()
    if not isinstance(wrong, str):
        wrong = f"{wrong:.10g}"

    assert value.agrees(), value.source
    assert wrong != value.printed
    assert wrong in value.catches


def test_turns_come_to_the_hundredth_and_degrees_to_five():
    turn = turn_for(0.12, pitch_mm=1.0)

    assert (turn.turns, turn.degrees) == (0.12, 45)  # 43.2°
    assert turn.predicted_change_mm == pytest.approx(0.12, abs=1e-12)


def test_predicted_change_is_what_the_rounded_turns_make():
    turn = turn_for(-0.05, pitch_mm=0.75, ratio=1.3)  # 0.0513 turn

    assert turn.turns == 0.05
    assert turn.predicted_change_mm == pytest.approx(-0.05 * 0.75 * 1.3, abs=1e-12)


@pytest.mark.parametrize(("change", "turns"), [(0.125, 0.13), (0.285, 0.29), (0.005, 0.01), (0.0049, 0.0)])
def test_half_a_hundredth_is_rounded_up_in_spite_of_binary(change, turns):
    assert turn_for(change, pitch_mm=1.0).turns == turns


@pytest.mark.parametrize(
    ("change", "thread", "inward_closes", "direction", "hand"),
    [
        (0.1, "right", True, "loosen", "anticlockwise"),
        (-0.1, "right", True, "tighten", "clockwise"),
        (0.1, "left", True, "loosen", "clockwise"),
        (-0.1, "left", True, "tighten", "anticlockwise"),
        (0.1, "right", False, "loosen", "clockwise"),
        (-0.1, "right", False, "tighten", "anticlockwise"),
        (0.1, "left", False, "loosen", "anticlockwise"),
        (-0.1, "left", False, "tighten", "clockwise"),
    ],
)
def test_hand_follows_thread_and_which_way_closes(change, thread, inward_closes, direction, hand):
    turn = turn_for(change, 1.0, thread=thread, inward_closes=inward_closes)

    assert (turn.direction, turn.hand) == (direction, hand)


def test_working_shows_formula_way_and_locknut():
    told = [str(step) for step in turn_for(-0.08, pitch_mm=1.0, ratio=1.6).working]

    assert told == [
        "turns = 0.08 mm / (1 mm × 1.6) = 0.05, that is 20°",
        "Tighten: the gap closes, clockwise seen from the head.",
        "Locknut loose, turn, hold the screw, tighten the locknut, measure again.",
    ]


def test_a_gap_that_is_right_leaves_the_screw_alone():
    turn = turn_for(0.0, 1.0)

    assert (turn.turns, turn.degrees, turn.direction, turn.hand) == (0.0, 0, None, None)
    assert [str(step) for step in turn.working] == ["The gap is where it should be: leave the screw."]


def test_less_than_a_hand_can_set_is_said_so():
    turn = turn_for(0.004, 1.0)

    assert turn.turns == 0.0
    assert str(turn.working[-1]) == "Less than a hundredth of a turn: finer than a hand can set, leave the screw."


@pytest.mark.parametrize(
    ("figures", "sentence"),
    [
        ({"pitch_mm": 0.0}, "Read a screw pitch of 0 mm; it must be above zero: measure it over several threads."),
        ({"pitch_mm": -1.0}, "Read a screw pitch of -1 mm; it must be above zero: measure it over several threads."),
        ({"pitch_mm": 1.0, "ratio": 0.0},
         "Read a screw ratio of 0; it must be above zero: valve movement per screw movement."),
        ({"pitch_mm": 1.0, "thread": "metric"}, "Read metric for the thread; write right or left."),
    ],
)  # fmt: skip
def test_impossible_screws_are_refused_with_what_was_read(figures, sentence):
    with pytest.raises(Refusal) as refused:
        turn_for(0.1, **figures)

    assert str(refused.value) == sentence


def test_a_change_that_is_no_number_is_refused():
    with pytest.raises(Refusal, match="Read a change of nan mm"):
        turn_for(float("nan"), 1.0)


@given(st.floats(-2, 2), st.floats(0.25, 3), st.floats(0.5, 3))
def test_what_is_predicted_lies_within_half_a_hundredth_of_a_turn(change, pitch, ratio):
    turn = turn_for(change, pitch, ratio)

    assert abs(turn.predicted_change_mm - change) <= 0.005 * pitch * ratio * (1 + 1e-6) + 1e-12
    assert abs(turn.degrees - 360 * turn.exact_turns) <= 2.5 * (1 + 1e-6)
