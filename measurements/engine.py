"""The engine itself: layout, firing order, banks, sizes, and what is impossible about them."""

from dataclasses import dataclass
from math import isclose
from typing import Literal

from measurements import geometry
from measurements.geometry import CYCLE
from measurements.sentence import Refusal, Sentence, say

MOST_CYLINDERS = 40  # twice the largest four-stroke in common use: beyond it, a slip of the finger
BRISK = 10.0  # mean piston speed [m/s] that industrial engines stay about (common practice)


@dataclass(frozen=True)
class ValveEvents:
    """When the valves open and shut [crank degrees]; below zero on the other side of the dead centre."""

    intake_opens_btdc: float
    intake_closes_abdc: float
    exhaust_opens_bbdc: float
    exhaust_closes_atdc: float

    def open_for(self, side: str) -> float:
        """Crank degrees that the "intake" or the "exhaust" is open.

        >>> ValveEvents(12, 48, 52, 10).open_for("intake")
        240
        """
        if side == "intake":
            return 180 + self.intake_opens_btdc + self.intake_closes_abdc
        return 180 + self.exhaust_opens_bbdc + self.exhaust_closes_atdc


@dataclass(frozen=True)
class Engine:
    """A four-stroke engine as its papers describe it; what is None is not known and not assumed.

    Nothing is checked on making one: `engine_problems.problems` says what is impossible, all at once.

    Attributes
    ----------
    firing_order : tuple of int or None
        Cylinders in firing sequence, from any of them.
    firing_angles : tuple of float or None
        Firing TDC of each [crank deg], in firing sequence, the first 0; None is even firing.
    banks : tuple of tuples of int or None
        Cylinders of each bank, from the end they are numbered from; an inline engine's one bank is filled in.
    bore, stroke, rod_length, screw_pitch : float or None
        [mm]
    rated_speed : float or None
        [rpm]
    margin : float
        Kept clear of each end of a base circle [crank deg].
    bridges : bool
        Two valves of a side are worked by one rocker over a bridge.
    """

    layout: Literal["inline", "vee", "flat", "single"]
    cylinders: int
    firing_order: tuple[int, ...] | None = None
    firing_angles: tuple[float, ...] | None = None
    banks: tuple[tuple[int, ...], ...] | None = None
    bore: float | None = None
    stroke: float | None = None
    rod_length: float | None = None
    compression_ratio: float | None = None
    rated_speed: float | None = None
    intake_valves: int = 1
    exhaust_valves: int = 1
    adjustment: Literal["screw", "shim", "hydraulic"] | None = None
    screw_pitch: float | None = None
    screw_ratio: float | None = None
    shim_ratio: float = 1.0
    thread: Literal["right", "left"] = "right"
    inward_closes: bool = True
    events: ValveEvents | None = None
    margin: float = 20.0
    bridges: bool = False
    turning: Literal["clockwise", "anticlockwise"] | None = None
    seen_from: Literal["flywheel", "free_end"] = "flywheel"
    numbered_from: Literal["free_end", "flywheel"] = "free_end"
    ignition: Literal["compression", "spark"] | None = None
    service: str | None = None

    def __post_init__(self) -> None:
        one_row = self.layout in ("inline", "single") and 1 <= self.cylinders <= MOST_CYLINDERS
        if self.banks is None and one_row:
            object.__setattr__(self, "banks", (tuple(range(1, self.cylinders + 1)),))
        if self.firing_order is None and self.cylinders == 1:
            object.__setattr__(self, "firing_order", (1,))

    # --- who fires when

    def firing_interval(self) -> float | None:
        """Crank degrees between firings, 720/n; None when they are uneven."""
        return CYCLE / self.cylinders if self.fires_evenly() else None

    def fires_evenly(self) -> bool:
        """Tell whether firings are 720/n apart, which is taken for granted unless angles are given."""
        even = (place * CYCLE / self.cylinders for place in range(self.cylinders))
        return self.firing_angles is None or all(
            isclose(given, want, abs_tol=1e-6) for given, want in zip(self.firing_angles, even, strict=True)
        )

    def firing_angle(self, cylinder: int) -> float:
        """Firing TDC [crank deg, 0 to 720] of a cylinder after that of cylinder 1, in turning direction.

        Raises
        ------
        Refusal
            When the order is not known, or the cylinder is not on this engine.

        >>> Engine("inline", 6, (1, 5, 3, 6, 2, 4)).firing_angle(3)
        240.0
        """
        places = self._places(cylinder)
        if self.firing_angles is None:
            return places * CYCLE / self.cylinders
        start = self.firing_angles[self.firing_order.index(1)]
        return (self.firing_angles[self.firing_order.index(cylinder)] - start) % CYCLE

    def companion(self, cylinder: int) -> int | None:
        """The cylinder at its other TDC when this one fires: half the order away, with even number and firing.

        >>> [Engine("inline", 6, (1, 5, 3, 6, 2, 4)).companion(n) for n in (1, 5, 3)]
        [6, 2, 4]
        """
        if self.firing_order is None or self.cylinders % 2 or not self.fires_evenly():
            return None
        place = self._places(cylinder) + self.firing_order.index(1)
        return self.firing_order[(place + self.cylinders // 2) % self.cylinders]

    def neighbours(self, cylinder: int) -> tuple[int, ...]:
        """Cylinders beside this one in its bank; empty where the banks are not known.

        >>> Engine("vee", 6, banks=((1, 2, 3), (4, 5, 6))).neighbours(3)
        (2,)
        """
        for bank in self.banks or ():
            if cylinder in bank:
                place = bank.index(cylinder)
                return bank[max(place - 1, 0) : place] + bank[place + 1 : place + 2]
        return ()

    def _places(self, cylinder: int) -> int:
        """Places in the order from cylinder 1 to this one."""
        if self.firing_order is None:
            raise Refusal("The firing order is not known: bar the engine through two turns to find it.")
        if cylinder not in self.firing_order:
            raise Refusal("Cylinder {cylinder} is not on this engine: write 1 to {cylinders}.",
                          cylinder=cylinder, cylinders=self.cylinders)  # fmt: skip
        return (self.firing_order.index(cylinder) - self.firing_order.index(1)) % self.cylinders

    # --- sizes; each is None when what it needs is not known

    def displacement(self) -> float | None:
        """Volume [mm³] that all pistons sweep."""
        if None in (self.bore, self.stroke):
            return None
        return self.cylinders * geometry.swept_volume(self.bore, self.stroke)

    def mean_piston_speed(self) -> float | None:
        """Mean piston speed [m/s] at rated speed."""
        if None in (self.stroke, self.rated_speed):
            return None
        return geometry.mean_piston_speed(self.stroke, self.rated_speed)

    def rod_ratio(self) -> float | None:
        """Rod length over stroke; the longer the rod, the less it pushes the piston aside."""
        return None if None in (self.rod_length, self.stroke) else self.rod_length / self.stroke

    def proportions(self) -> str | None:
        """Give "square", "oversquare" or "undersquare"."""
        return None if None in (self.bore, self.stroke) else geometry.proportions(self.bore, self.stroke)

    def piston_depth(self, angle: float) -> float | None:
        """Distance [mm] of a piston below its TDC at a crank angle after it [deg]."""
        if None in (self.stroke, self.rod_length):
            return None
        return geometry.piston_depth(angle, self.stroke, self.rod_length)

    def angle_at_depth(self, depth: float) -> float | None:
        """Crank angle [deg] either side of TDC at which a piston is `depth` [mm] down."""
        if None in (self.stroke, self.rod_length):
            return None
        return geometry.angle_at_depth(depth, self.stroke, self.rod_length)

    def trapped_ratio(self) -> float | None:
        """Compression ratio from the moment the intake shuts."""
        if None in (self.compression_ratio, self.stroke, self.rod_length, self.events):
            return None
        shut = self.events.intake_closes_abdc
        return geometry.trapped_ratio(self.compression_ratio, shut, self.stroke, self.rod_length)

    def notes(self) -> list[Sentence]:
        """Say what is out of the usual about this engine."""
        speed = self.mean_piston_speed()
        if self.service != "industrial" or speed is None or speed <= BRISK:
            return []
        return [say("The mean piston speed at rated speed is {speed} m/s; industrial engines stay about {usual} m/s. "
                    "Check the stroke and the rated speed.", speed=round(speed, 2), usual=BRISK)]  # fmt: skip
