"""The barring plan: the fewest crank stops at which every valve can be set on its base circle."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import NamedTuple

from measurements.crank_stops import Arc, Stop, fewest_stops
from measurements.engine import Engine, ValveEvents
from measurements.geometry import CYCLE
from measurements.sentence import Sentence, say
from measurements.stations import SIDES, cylinders_by_hand, side_stations

__all__ = ["COMMON_EVENTS", "Arc", "BarringPlan", "CrankStop", "base_circle", "fewest_stops", "plan"]

# later and longer than nearly all cams of engines whose lash is set by hand (common practice)
COMMON_EVENTS = ValveEvents(intake_opens_btdc=30, intake_closes_abdc=70, exhaust_opens_bbdc=70, exhaust_closes_atdc=30)


@dataclass(frozen=True)
class CrankStop:
    """A place to stop the crank.

    Attributes
    ----------
    crank_angle : float
        Degrees [0 to 720] after cylinder 1's firing TDC, in turning direction.
    place : Sentence
        How to find it: "TDC 1 firing", "47° after TDC 3 firing".
    stations : tuple of str
        Stations that no stop before it reaches, in the order of the hands.
    in_reach : tuple of str
        All stations it reaches, in the order of the hands.
    """

    crank_angle: float
    place: Sentence
    stations: tuple[str, ...]
    in_reach: tuple[str, ...]

    @property
    def mark(self) -> str:
        """How to find it, in English."""
        return str(self.place)


@dataclass(frozen=True)
class BarringPlan:
    """Crank stops in turning order; false when there are none, with `why_not` or `unreachable` saying why.

    Attributes
    ----------
    assumed_events : bool
        The engine's valve events are not known; arcs safe for common cams were taken.
    margin : float
        Kept clear of each end of a base circle [crank deg].
    unreachable : mapping of station to Sentence
        Stations without a safe arc, and what to do about them.
    why_not : Sentence or None
        Why no plan could be made.
    """

    stops: tuple[CrankStop, ...]
    assumed_events: bool
    margin: float
    unreachable: Mapping[str, Sentence] = field(default_factory=dict)
    why_not: Sentence | None = None

    def __bool__(self) -> bool:
        return bool(self.stops)


class Tdc(NamedTuple):
    """A dead centre that a person can find: of which cylinder, and whether it is the firing one."""

    cylinder: int
    fires: bool


def plan(engine: Engine, settings: Mapping[str, Arc | tuple[Arc, ...]] | None = None) -> BarringPlan:
    """Plan the smallest set of crank stops that reaches every valve, and every other setting, of an engine.

    Parameters
    ----------
    engine : Engine
        One that `problems` has nothing against.
    settings : mapping of name to Arc or Arcs
        Other settings done at crank stops, by name such as "injector" (every cylinder's) or "3.injector" (one
        cylinder's); degrees after that cylinder's own firing TDC.

    Source: each valve is set on the base circle of its cam; TM 5-3805-258-24-1 prints the two stops of a four.

    >>> for stop in plan(Engine("inline", 4, (1, 3, 4, 2))).stops:
    ...     print(stop.mark, *stop.stations)
    TDC 1 firing 1.intake 1.exhaust 2.intake 3.exhaust
    TDC 4 firing 2.exhaust 3.intake 4.intake 4.exhaust
    """
    assumed = engine.events is None
    if engine.firing_order is None:
        told = say("The firing order is not known, so there is no crank plan: set the lash cylinder by cylinder at its "
                   "firing TDC, until the order is found by barring through two turns.")  # fmt: skip
        return BarringPlan((), assumed, engine.margin, why_not=told)
    arcs, unreachable = {}, {}
    for station, cylinder, arc in _arcs_by_hand(engine, settings or {}):
        if arc is None:
            unreachable[station] = _no_safe_arc(station, cylinder, engine)
        else:
            arcs[station] = arc
    # cylinder 1's own mark is the one every engine has; a full turn brings it back
    stops = tuple(_crank_stop(stop) for stop in fewest_stops(arcs, _marks(engine), favoured=(0, 360)))
    return BarringPlan(stops, assumed, engine.margin, unreachable)


def base_circle(events: ValveEvents, side: str, margin: float) -> Arc | None:
    """Where a cylinder's valve is on its base circle, `margin` clear of both ends; None when nothing is left.

    Parameters
    ----------
    events : ValveEvents
        Of that valve.
    side : str
        "intake" or "exhaust".
    margin : float
        [crank deg]

    Returns
    -------
    Arc
        Degrees after the cylinder's own firing TDC.

    >>> base_circle(ValveEvents(12, 48, 52, 10), "intake", 20)   # from 68° after BDC to 32° before the overlap TDC
    Arc(start=608, end=1048.0)
    """
    if side == "intake":
        start, end = 540 + events.intake_closes_abdc, CYCLE + 360 - events.intake_opens_btdc
    else:
        start, end = 360 + events.exhaust_closes_atdc, CYCLE + 180 - events.exhaust_opens_bbdc
    start, end = start + margin, end - margin
    return Arc(start, end) if start <= end else None


def _arcs_by_hand(engine: Engine, settings: Mapping[str, Arc | tuple[Arc, ...]]):
    """Every station with its cylinder and its arc over the engine's cycle, in the order of the hands."""
    events = engine.events or COMMON_EVENTS
    circles = {side: base_circle(events, side, engine.margin) for side in SIDES}
    for cylinder in cylinders_by_hand(engine):
        fires_at = engine.firing_angle(cylinder)
        for side, arc in circles.items():
            turned = arc and arc.turned(fires_at)
            for station in side_stations(engine, cylinder, side):
                yield station, cylinder, turned
        for name, given in settings.items():
            owner, dot, setting = name.partition(".")
            if not dot or owner == str(cylinder):
                arcs = (given,) if isinstance(given, Arc) else given
                yield f"{cylinder}.{setting if dot else name}", cylinder, tuple(arc.turned(fires_at) for arc in arcs)


def _marks(engine: Engine) -> dict[float, Tdc]:
    """Dead centres of all cylinders; an angle is named by the cylinder that fires there, if one does."""
    marks = {engine.firing_angle(cylinder): Tdc(cylinder, True) for cylinder in range(1, engine.cylinders + 1)}
    taken = {round(angle, 6) for angle in marks}
    for cylinder in range(1, engine.cylinders + 1):
        overlap = (engine.firing_angle(cylinder) + 360) % CYCLE
        if round(overlap, 6) not in taken:
            marks[overlap] = Tdc(cylinder, False)
    return marks


def _crank_stop(stop: Stop) -> CrankStop:
    cylinder, fires = stop.mark
    degrees = int(stop.after) if stop.after.is_integer() else stop.after
    if not degrees:
        firing = say("TDC {cylinder} firing", cylinder=cylinder)
        overlap = say("TDC {cylinder} overlap", cylinder=cylinder)
    else:
        firing = say("{degrees}° after TDC {cylinder} firing", degrees=degrees, cylinder=cylinder)
        overlap = say("{degrees}° after TDC {cylinder} overlap", degrees=degrees, cylinder=cylinder)
    return CrankStop(stop.angle, firing if fires else overlap, stop.stations, stop.in_reach)


def _no_safe_arc(station: str, cylinder: int, engine: Engine) -> Sentence:
    events = engine.events or COMMON_EVENTS
    side = "intake" if ".intake" in station else "exhaust"
    return say(
        "{station} has no safe stop: open for {open}° with {margin}° kept clear each side, nothing is left of 720°. "
        "Check the events or the margin; until then set it at TDC {cylinder} firing, when the valve is seen shut.",
        station=station, open=events.open_for(side), margin=engine.margin, cylinder=cylinder,
    )  # fmt: skip
