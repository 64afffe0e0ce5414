"""How far to turn a lash screw, and which way."""

from dataclasses import dataclass
from math import floor, isfinite
from typing import Literal

from measurements.sentence import Refusal, Sentence, say

TURN_STEP, DEGREE_STEP = 0.01, 5  # as fine as a hand can turn a screw and read it


@dataclass(frozen=True)
class ScrewTurn:
    """A turn of a lash screw.

    Attributes
    ----------
    turns, degrees : float, int
        Rounded to 0.01 turn and to 5°.
    exact_turns : float
        Before rounding.
    direction : str or None
        "loosen" opens the gap, "tighten" closes it; None when there is nothing to turn.
    hand : str or None
        "clockwise" or "anticlockwise", seen from the head of the screw.
    predicted_change_mm : float
        Change of the gap [mm] that the rounded turns make; above zero it opens.
    working : list of Sentence
        Formula with its figures, then the steps at the screw.
    """

    turns: float
    degrees: int
    exact_turns: float
    direction: Literal["loosen", "tighten"] | None
    hand: Literal["clockwise", "anticlockwise"] | None
    predicted_change_mm: float
    working: list[Sentence]


def turn_for(
    change_mm: float, pitch_mm: float, ratio: float = 1.0, thread: str = "right", inward_closes: bool = True
) -> ScrewTurn:
    """Turn of a screw that changes a gap.

    Parameters
    ----------
    change_mm : float
        Wanted less measured [mm]: above zero the gap opens.
    pitch_mm : float
        Thread pitch [mm per turn].
    ratio : float
        Movement at the valve per movement of the screw.
    thread : str
        "right" or "left".
    inward_closes : bool
        Whether the gap closes when the screw goes in.

    Raises
    ------
    Refusal
        When pitch or ratio is not above zero, a figure is no number, or the thread is neither.

    Source: common practice: a screw moves its pitch in a turn.

    >>> turn = turn_for(0.10, pitch_mm=1.0, ratio=1.5)   # screw at the pushrod end of a 1.5 rocker: 24°
    >>> turn.direction, turn.hand, round(360 * turn.exact_turns, 6)
    ('loosen', 'anticlockwise', 24.0)
    """
    _refuse_impossible(change_mm, pitch_mm, ratio, thread)
    exact = abs(change_mm) / (pitch_mm * ratio)
    turns = _to_step(exact / TURN_STEP) / 100
    degrees = DEGREE_STEP * _to_step(360 * exact / DEGREE_STEP)
    formula = say("turns = {change} mm / ({pitch} mm × {ratio}) = {turns}, that is {degrees}°",
                  change=abs(change_mm), pitch=pitch_mm, ratio=ratio, turns=turns, degrees=degrees)  # fmt: skip
    if not change_mm:
        return ScrewTurn(0.0, 0, 0.0, None, None, 0.0, [say("The gap is where it should be: leave the screw.")])
    opens = change_mm > 0
    inward = opens != inward_closes
    clockwise = inward == (thread == "right")
    predicted = turns * pitch_mm * ratio * (1 if opens else -1)
    return ScrewTurn(
        turns, degrees, exact, "loosen" if opens else "tighten", "clockwise" if clockwise else "anticlockwise",
        predicted, [formula, *_steps(turns, opens, clockwise)],
    )  # fmt: skip


def _steps(turns: float, opens: bool, clockwise: bool) -> list[Sentence]:
    if not turns:
        return [say("Less than a hundredth of a turn: finer than a hand can set, leave the screw.")]
    if opens:
        way = (say("Loosen: the gap opens, clockwise seen from the head.") if clockwise
               else say("Loosen: the gap opens, anticlockwise seen from the head."))  # fmt: skip
    else:
        way = (say("Tighten: the gap closes, clockwise seen from the head.") if clockwise
               else say("Tighten: the gap closes, anticlockwise seen from the head."))  # fmt: skip
    return [way, say("Locknut loose, turn, hold the screw, tighten the locknut, measure again.")]


def _refuse_impossible(change_mm: float, pitch_mm: float, ratio: float, thread: str) -> None:
    if not isfinite(change_mm):
        raise Refusal("Read a change of {read} mm, which is no size: measure the gap again.", read=change_mm)
    if not (isfinite(pitch_mm) and pitch_mm > 0):
        raise Refusal("Read a screw pitch of {read} mm; it must be above zero: measure it over several threads.",
                      read=pitch_mm)  # fmt: skip
    if not (isfinite(ratio) and ratio > 0):
        raise Refusal("Read a screw ratio of {read}; it must be above zero: valve movement per screw movement.",
                      read=ratio)  # fmt: skip
    if thread not in ("right", "left"):
        raise Refusal("Read {read} for the thread; write right or left.", read=thread)


def _to_step(steps: float) -> int:
    """Nearest whole number of steps, a half up; twelve digits keep 0.285 / 0.01 a half in spite of binary."""
    return floor(float(f"{steps:.12g}") + 0.5)
