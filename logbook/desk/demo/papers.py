"""What the invented shop begins with: its people, gauges and parts, and each engine with its limits and intervals."""

from functools import partial

from logbook.engines.models import Engine, Part
from logbook.engines.services import (
    add_engine,
    add_line,
    add_part,
    begin_sheet,
    bring_into_force_uncompared,
    compare_sheet,
    fit_part,
    record_out_of_service,
    take_off_part,
)
from logbook.gauges.models import Gauge
from logbook.gauges.services import add_gauge, record_calibration, retire_gauge
from logbook.people.models import Person, Shop
from logbook.work.models import Interval
from logbook.work.services import defer, keep_interval, record_done

from .days import Days, Event
from .meters import Run
from .story import Story

OPENED = 1200  # days ago; the shop's first day here


def write_shop(story: Story, days: Days) -> dict[str, Person]:
    """The shop, marked as invented, and everybody in it, each with the demo's one password."""
    shop = Shop(**story.shop, is_demo=True, created_at=days.before(OPENED))
    shop.full_clean()
    shop.save()
    people = {}
    for told in story.people:
        person = Person(shop=shop, name=told["name"], **{f"is_{role}": True for role in told["roles"]})
        person.set_password(story.password)
        person.full_clean()
        person.save()
        people[person.name] = person
    return people


def write_gauges(story: Story, keeper: Person, days: Days) -> dict[str, Gauge]:
    """The gauges with their calibrations."""
    gauges = {}
    for told in story.gauges:
        figures = {name: value for name, value in told.items() if name not in ("calibrations", "retired_days")}
        gauge = gauges[told["mark"]] = add_gauge(by=keeper, at=days.before(OPENED), **figures)
        for each in told["calibrations"]:
            figures = {name: value for name, value in each.items() if name != "days"}
            record_calibration(by=keeper, at=days.before(each["days"], hour=15), gauge=gauge,
                               calibrated_on=days.day(each["days"]), **figures)  # fmt: skip
        if "retired_days" in told:
            retire_gauge(by=keeper, at=days.before(told["retired_days"]), gauge=gauge)
    return gauges


def write_engine(told: dict, people: dict[str, Person], days: Days) -> Engine:
    """An engine with its limit sheets."""
    engine = add_engine(by=people["Supervisor A"], at=days.before(OPENED), **told["engine"])
    for sheet in told["limits"]:
        write_limits(engine, sheet, people, days)
    return engine


def write_limits(engine: Engine, told: dict, people: dict[str, Person], days: Days) -> None:
    """A limit sheet, typed on one day and in force from the next; a later one takes over the lines of the one before."""
    by, at = people[told["entered_by"]], days.before(told["days"])
    sheet = begin_sheet(by=by, at=at, engine=engine, note=told.get("note", ""))
    for characteristic, line in told["lines"].items():
        figures = dict(line)
        if (in_days := figures.pop("provisional_until_in", None)) is not None:
            figures["provisional_until"] = days.day(-in_days)
        add_line(by=by, sheet=sheet, characteristic=characteristic, **figures)
    in_force_at = days.before(told["days"] - 1)
    if "compared_by" in told:
        compare_sheet(by=people[told["compared_by"]], at=in_force_at, sheet=sheet)
    else:
        bring_into_force_uncompared(by=by, at=in_force_at, sheet=sheet, why=told["nobody_compared"])


def write_intervals(told: dict, engine: Engine, by: Person, days: Days) -> dict[str, Interval]:
    """The jobs that come due on an engine, by title."""
    kept = {}
    for each in told["intervals"]:
        figures = {name: value for name, value in each.items() if name not in ("done_days", "deferral")}
        interval = Interval(shop=engine.shop, engine=engine, **figures)
        kept[each["title"]] = keep_interval(interval, by=by, at=days.before(OPENED))
    return kept


def done_events(told: dict, kept: dict[str, Interval], run: Run, people: dict[str, Person], days: Days) -> list[Event]:
    """Jobs done without a work order, and those put off."""
    events = []
    for each in told["intervals"]:
        interval = kept[each["title"]]
        for day in each.get("done_days", ()):
            at = days.before(day, hour=16)
            events.append(
                (at, partial(record_done, interval, by=people["Technician A"], at=at, totals=run.totals(day)))
            )
        if put_off := each.get("deferral"):
            at = days.before(put_off["days"], hour=11)
            events.append((at, partial(defer, interval, by=people[put_off["by"]], at=at,
                                       until_on=days.day(-put_off["until_in"]), reason=put_off["reason"])))  # fmt: skip
    return events


def out_of_service_events(told: dict, engine: Engine, by: Person, days: Days) -> list[Event]:
    """Times the engine was out of service."""
    events = []
    for out in told.get("out_of_service", ()):
        at = days.before(out["days"], hour=9)
        until_at = days.before(out["until_days"]) if "until_days" in out else None
        events.append((at, partial(
            record_out_of_service, by=by, at=at, engine=engine, from_at=days.before(out["days"], hour=7), until_at=until_at,
            who_was_told=out["who_was_told"], what_stood_in=out["what_stood_in"],
        )))  # fmt: skip
    return events


def write_parts(
    story: Story, engines: dict[str, Engine], by: Person, days: Days
) -> tuple[dict[str, Part], list[Event]]:
    """The parts, and their moves in and out of engines."""
    parts, events = {}, []
    for told in story.parts:
        figures = {name: value for name, value in told.items() if name != "fittings"}
        part = parts[told["mark"]] = add_part(by=by, at=days.before(OPENED), **figures)
        for each in told["fittings"]:
            at = days.before(each["days"], hour=14)
            events.append((at, partial(fit_part, by=by, at=at, part=part, engine=engines[each["engine"]],
                                       position=each["position"], fitted_at=at)))  # fmt: skip
            if "off_days" in each:
                at = days.before(each["off_days"], hour=10)
                events.append((at, partial(take_off_part, by=by, at=at, part=part, taken_off_at=at)))
    return parts, events
