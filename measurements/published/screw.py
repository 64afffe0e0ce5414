"""Published values for lash screws."""

from measurements.check_value import CheckValue
from measurements.screw import turn_for

_PITCH = "a screw moves its pitch in a turn"

PUBLISHED = [
    CheckValue("0.10 mm on a 1.0 mm pitch [deg]", "36", lambda: 360 * turn_for(0.10, 1.0).exact_turns, _PITCH,
               "common practice", "half a turn a pitch: 18"),
    CheckValue("0.05 mm on a 0.75 mm pitch [deg]", "24", lambda: 360 * turn_for(0.05, 0.75).exact_turns, _PITCH,
               "common practice", "times the pitch: 13.5"),
    CheckValue("0.10 mm, 1.0 mm pitch, screw at the pushrod end of a 1.5 rocker [deg]", "24",
               lambda: 360 * turn_for(0.10, 1.0, ratio=1.5).exact_turns,
               "the valve moves 1.5 times as far as the screw", "common practice", "times the ratio: 54"),
    CheckValue("gap too small, right-hand thread: which way, seen from the head", "anticlockwise",
               lambda: turn_for(0.10, 1.0).hand, "backing the screw out opens the gap", "common practice",
               "turning the screw in to open the gap: clockwise"),
    CheckValue("gap too small: what it takes", "loosen", lambda: turn_for(0.30 - 0.18, 1.0).direction,
               "a tight gap is loosened", "common practice", "measured less wanted: tighten"),
]  # fmt: skip
