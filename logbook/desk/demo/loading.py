"""Loads the demo: every file's happenings in the order of their days, in one transaction."""

from datetime import datetime, timedelta
from functools import partial

from django.db import transaction

from logbook.core.refusal import Refused
from logbook.people.models import Person, Shop
from logbook.work.services import open_work_order

from .bench import Bench, Visit
from .days import Days, Event
from .deciding import end_job, put_back
from .jobs import open_job, work_on
from .meters import meter_events, run_told
from .papers import (
    done_events,
    out_of_service_events,
    write_engine,
    write_gauges,
    write_intervals,
    write_parts,
    write_shop,
)
from .story import read_story
from .wear import Wear


class AnotherShop(Refused):
    """The database holds a shop already that isn't the demo's."""


def demo_is_here() -> bool:
    """Tell whether the demo is loaded.

    Raises
    ------
    AnotherShop
        The database holds another shop, or persons of one.
    """
    if other := Shop.objects.filter(is_demo=False).first():
        raise AnotherShop(
            f"This database holds the shop “{other}”: the demo goes into a database of its own, and nothing was loaded. "
            "`make serve` opens this one; `make run` opens the demo's."
        )
    return Shop.objects.exists()


@transaction.atomic
def load_demo(now: datetime) -> Shop:
    """Load the demo into an empty database; everything in it lies before `now`."""
    story, days = read_story(), Days(now)
    people = write_shop(story, days)
    supervisor, keeper = people["Supervisor A"], people["Toolroom A"]
    gauges = write_gauges(story, keeper, days)
    engines, events = {}, []
    for told in story.engines:
        engine = engines[told["engine"]["name"]] = write_engine(told, people, days)
        kept = write_intervals(told, engine, supervisor, days)
        bench = Bench(engine, told, run_told(told["meters"]), Wear(engine.name, told["wear"]), kept, gauges, people)
        events += engine_events(bench, days)
    parts, moves = write_parts(story, engines, supervisor, days)
    events += moves
    for told in story.part_jobs:
        at = days.before(told["opened_days"], hour=13)
        events.append((at, partial(open_work_order, by=supervisor, at=at, part=parts[told["part"]], title=told["title"],
                                   kinds=told["kinds"])))  # fmt: skip
    for _at, happens in sorted(events, key=lambda event: event[0]):
        happens()
    return supervisor.shop


def engine_events(bench: Bench, days: Days) -> list[Event]:
    """Everything that happens on one engine."""
    told, people = bench.told, bench.people
    visits = [visit["days"] for visit in told["visits"] if "days" in visit]
    events = meter_events(bench.run, bench.engine, visits, people, days)
    events += done_events(told, bench.intervals, bench.run, people, days)
    events += out_of_service_events(told, bench.engine, people["Supervisor A"], days)
    for place, visit in enumerate(told["visits"]):
        events += visit_events(bench, visit, people["Supervisor A" if place % 2 else "Supervisor B"], days)
    return events


def visit_events(bench: Bench, told: dict, by: Person, days: Days) -> list[Event]:
    """A visit: its job opened, worked on, and ended on the next day."""
    orders: list = []
    opened_at = days.before(told.get("opened_days", told.get("days", 0) + 2), hour=13)
    events: list[Event] = [(opened_at, lambda: orders.append(open_job(bench, told, by, opened_at)))]
    if told.get("ends") == "planned":
        return events
    at = days.minutes(told["minutes"]) if "minutes" in told else days.before(told["days"])
    visit = Visit(bench, told, days.ago(at) if "minutes" in told else told["days"], at)
    events.append((at, lambda: work_on(visit, orders[0])))
    if "running_undecided" in told:
        events.append((at + timedelta(hours=3), lambda: put_back(visit, orders[0])))
    if visit.ends == "signed":
        decides = bench.people[told["decides"]["by"]] if "decides" in told else by
        ended_at = days.before(told["days"] - 1, hour=10)
        events.append((ended_at, lambda: end_job(visit, orders[0], decides, ended_at, days)))
    return events
