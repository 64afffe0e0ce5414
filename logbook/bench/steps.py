"""The order of the hands: at each stop of the crank everything in reach, as found, then the act, then as left; then turn."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field

from django.utils.translation import gettext as _

from measurements.barring import plan
from measurements.engine import Engine
from measurements.kind import UNDER_AIR, Kind

OPEN, TURN, FOUND, ACT, LEFT, OVER = "open", "turn", "found", "act", "left", "over"


@dataclass(frozen=True)
class Stop:
    """A place to stop the crank and the stations done there; without a mark the crank doesn't matter."""

    mark: str
    crank_angle: float | None
    stations: tuple[str, ...]


@dataclass(frozen=True)
class Route:
    """The stops in turning order; `note` says what the plan takes for granted or can't give."""

    stops: tuple[Stop, ...]
    note: str = ""

    @property
    def stations(self) -> tuple[str, ...]:
        """Every station, in the order of the stops."""
        return tuple(station for stop in self.stops for station in stop.stations)

    def stop_of(self, station: str) -> Stop | None:
        """The stop at which a station is done."""
        return next((stop for stop in self.stops if station in stop.stations), None)


@dataclass(frozen=True)
class Step:
    """The next thing to do: turn the crank to a stop, or measure or act at a station; or nothing is left."""

    what: str
    stop: Stop | None = None
    station: str = ""


@dataclass(frozen=True)
class Progress:
    """How far a task is: stations answered as found and as left, acted on, and those that call for an act."""

    found: frozenset[str] = frozenset()
    left: frozenset[str] = frozenset()
    acted: frozenset[str] = frozenset()
    calls: frozenset[str] = frozenset()
    crank_at: str = ""
    leaves_all: bool = field(default=False)  # every station is to be measured as left, act or no act


def route(kind: Kind, engine: Engine) -> Route:
    """The stops of a kind on an engine: the crank plan for valves, each cylinder's firing TDC under air, else no turning."""
    stations = tuple(kind.stations(engine))
    found = plan(engine)
    planned = {station for stop in found.stops for station in stop.stations} | set(found.unreachable)
    if planned and planned.issuperset(stations):
        stops = [Stop(str(one.place), one.crank_angle, one.stations) for one in found.stops]
        stops += _cylinder_by_cylinder(engine, tuple(found.unreachable))
        notes = [str(why) for why in found.unreachable.values()]
        if found.assumed_events:
            notes.append(
                _("Valve events are not given: see that each valve is on its base circle before measuring it.")
            )
        return Route(tuple(stops), " ".join(notes))
    if "turn_screw" in kind.acts or kind.lock_state == UNDER_AIR:
        note = str(found.why_not) if found.why_not and "turn_screw" in kind.acts else ""
        return Route(tuple(_cylinder_by_cylinder(engine, stations)), note)
    return Route((Stop("", None, stations),))


def _cylinder_by_cylinder(engine: Engine, stations: Sequence[str]) -> list[Stop]:
    """Each cylinder at its own firing TDC, in firing order where it is known."""
    cylinders = sorted({int(station.split(".")[0]) for station in stations})
    known = engine.firing_order is not None
    if known:
        cylinders.sort(key=engine.firing_angle)
    return [
        Stop(
            _("TDC %(cylinder)s firing") % {"cylinder": cylinder}, engine.firing_angle(cylinder) if known else None,
            tuple(station for station in stations if station.split(".")[0] == str(cylinder)),
        )
        for cylinder in cylinders
    ]  # fmt: skip


def next_step(route: Route, progress: Progress, *, all_found_first: bool = False) -> Step:
    """The next thing to do; it starts at the stop where the crank stands.

    Parameters
    ----------
    all_found_first : bool
        With shims every as-found comes before any act, and the stops are gone round again.
    """
    rounds = ((FOUND,), (ACT, LEFT)) if all_found_first else ((FOUND, ACT, LEFT),)
    for phases in rounds:
        for stop in _from_where_it_stands(route.stops, progress.crank_at):
            step = next(_open_at(stop, progress, phases), None)
            if step is not None:
                must_turn = stop.mark and stop.mark != progress.crank_at
                return Step(TURN, stop) if must_turn else step
    return Step(OVER)


def _from_where_it_stands(stops: Sequence[Stop], crank_at: str) -> list[Stop]:
    """Stops in turning order, the one where the crank stands first."""
    places = [stop.mark for stop in stops]
    at = places.index(crank_at) if crank_at in places else 0
    return [*stops[at:], *stops[:at]]


def _open_at(stop: Stop, progress: Progress, phases: Sequence[str]) -> Iterator[Step]:
    """What is open at a stop: every as-found, then station by station the act and what is left."""
    if FOUND in phases:
        yield from (Step(FOUND, stop, station) for station in stop.stations if station not in progress.found)
    if ACT in phases:
        for station in stop.stations:
            if station in progress.left:
                continue
            if station in progress.calls and station not in progress.acted:
                yield Step(ACT, stop, station)
            elif station in progress.acted or progress.leaves_all:
                yield Step(LEFT, stop, station)


def order_numbers(route: Route) -> Mapping[str, int]:
    """Each station's number in the order of the hands."""
    return {station: number for number, station in enumerate(route.stations, 1)}
