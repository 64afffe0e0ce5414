"""An invented engine at the bench: all that a visit needs at hand, and the clock of its day."""

from dataclasses import dataclass, field
from datetime import datetime, timedelta

from logbook.engines.models import Engine
from logbook.gauges.models import Gauge
from logbook.people.models import Person
from logbook.work.models import Interval

from .meters import Run
from .wear import Wear

A_READING, A_LOCK, AN_ACT = timedelta(seconds=25), timedelta(seconds=40), timedelta(minutes=2)


@dataclass
class Bench:
    """An engine, its file, how it runs and wears, its intervals, the shop's gauges and people."""

    engine: Engine
    told: dict
    run: Run
    wear: Wear
    intervals: dict[str, Interval]
    gauges: dict[str, Gauge]
    people: dict[str, Person]


@dataclass
class Visit:
    """One visit of an engine's file: whose hands are on it, how many days ago, and what time it is there."""

    bench: Bench
    told: dict
    days: float
    clock: datetime
    hands: list[Person] = field(init=False)

    def __post_init__(self) -> None:
        self.hands = [self.bench.people[name] for name in self.told.get("hands", ["Technician A"])]

    @property
    def keys(self) -> Person:
        """Who keys the readings in."""
        return self.hands[0]

    @property
    def measures(self) -> Person:
        """Who measures and calls."""
        return self.hands[-1]

    def gauge_for(self, kind: str) -> Gauge:
        """The engine's gauge for a kind, or the one that this visit took."""
        return self.bench.gauges[self.told.get("gauge", {}).get(kind) or self.bench.told["gauges"][kind]]

    @property
    def ends(self) -> str:
        """The state it is left in."""
        return self.told.get("ends", "signed")

    @property
    def is_finished(self) -> bool:
        """Tell whether everything was measured."""
        return self.ends in ("to_decide", "signed")

    def later(self, by: timedelta) -> datetime:
        """Let some time pass; gives the time it is then."""
        self.clock += by
        return self.clock
