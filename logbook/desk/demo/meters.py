"""The invented engines' meters: read about once a month and at every visit, one replaced, one misread and put right."""

from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import datetime
from functools import partial

from logbook.engines.models import Engine, Meter, MeterReading
from logbook.engines.services import fit_meter, read_meter, replace_meter, supersede_reading
from logbook.people.models import Person

from .days import Days, Event
from .wear import run_between

ROUND = 30  # days between two rounds of the meters


@dataclass
class Counter:
    """One meter of an engine's file, and the meter it becomes once it is fitted."""

    told: dict
    engine_before: float
    meter: Meter | None = None

    def shows(self, days: float) -> float:
        """What it shows some days ago, in whole hours or starts."""
        return round(self.told["shows"] + run_between(self.told["runs_per_day"], self.told["days"], days))

    def total(self, days: float) -> float:
        """What the engine has run in all by then."""
        return self.engine_before + self.shows(days) - self.told["shows"]


@dataclass
class Run:
    """What an engine has run in all, by what its meters count."""

    counters: dict[str, list[Counter]] = field(default_factory=dict)

    def total(self, days: float, unit: str = "h") -> float:
        """What it had run in all some days ago [h or starts]."""
        was_on = [one for one in self.counters[unit] if one.told["days"] >= days] or self.counters[unit][:1]
        return was_on[-1].total(days)

    def totals(self, days: float) -> dict[str, float]:
        """The same for everything counted."""
        return {unit: self.total(days, unit) for unit in self.counters}

    def since_first(self, days: float) -> float:
        """Hours run since the demo's beginning [h]."""
        return self.total(days) - self.counters["h"][0].engine_before


def run_told(told: list[dict]) -> Run:
    """How an engine runs, from its file's meters; the first of a unit shows what the engine has run."""
    run = Run()
    for each in told:
        counters = run.counters.setdefault(each["unit"], [])
        counters.append(Counter(each, counters[-1].total(each["days"]) if counters else each["shows"]))
    return run


def meter_events(run: Run, engine: Engine, visits: Iterable[int], people: dict[str, Person], days: Days) -> list[Event]:
    """Meters fitted and replaced, read on rounds and at visits, one figure written down wrong and put right."""
    supervisor, reader = people["Supervisor A"], people["Technician B"]
    events: list[Event] = []
    for counters in run.counters.values():
        for place, one in enumerate(counters):
            at = days.before(one.told["days"], hour=7)
            before = counters[place - 1] if place else None
            events.append((at, partial(_fitted, one, before, engine, supervisor, at)))
            until = counters[place + 1].told["days"] if place + 1 < len(counters) else 0
            read_on = {*range(until + ROUND // 2, one.told["days"], ROUND), *visits}
            for day in sorted(day for day in read_on if until < day < one.told["days"]):
                at = days.before(day, hour=7, minute=40)
                if day != one.told.get("misread", {}).get("days"):
                    events.append((at, partial(_read, one, one.shows(day), reader, at)))
            if "misread" in one.told:
                events += _misread(one, reader, days)
    return events


def _misread(one: Counter, reader: Person, days: Days) -> list[Event]:
    told = one.told["misread"]
    at, noticed_at = days.before(told["days"], hour=7, minute=40), days.before(told["noticed_days"])
    right, kept = one.shows(told["days"]), []
    return [
        (at, lambda: kept.append(read_meter(
            by=reader, at=at, meter=one.meter, shows=right + told["added"], taken_at=at, remark=told["remark"]))),
        (noticed_at, lambda: supersede_reading(by=reader, at=noticed_at, reading=kept[0], shows=right,
                                               reason=told["reason"])),
    ]  # fmt: skip


def _fitted(one: Counter, before: Counter | None, engine: Engine, by: Person, at: datetime) -> None:
    told = one.told
    if before:
        one.meter = replace_meter(by=by, at=at, meter=before.meter, replaced_at=at, last_shows=before.shows(told["days"]),
                                  new_shows=told["shows"], new_mark=told["mark"])  # fmt: skip
    else:
        one.meter = fit_meter(by=by, at=at, engine=engine, unit=told["unit"], fitted_at=at, shows=told["shows"],
                              engine_before=told["shows"], mark=told["mark"])  # fmt: skip


def _read(one: Counter, shows: float, by: Person, at: datetime) -> MeterReading:
    return MeterReading.objects.create(shop=one.meter.shop, meter=one.meter, shows=shows, taken_at=at, recorded_at=at,
                                       recorded_by=by)  # fmt: skip
