"""What the pages of this room look up: what is due, what is open, whose locks are on an engine."""

from collections import defaultdict
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from datetime import date, datetime
from zoneinfo import ZoneInfo

from django.db.models import OuterRef, Prefetch, Q, QuerySet, Subquery

from logbook.engines.models import Engine, OutOfService
from logbook.engines.queries import shown as meters_shown
from logbook.engines.use import Shown, Use, average_use
from logbook.people.models import Person, Shop
from measurements.sentence import Sentence, say

from .due import (
    DAYS,
    STAGES,
    UNKNOWN,
    Count,
    counted_days,
    counted_meter,
    soonest,
    starts_kept,
    used_share,
)
from .models import Deferral, Done, Interval, Lock, WorkOrder
from .states import OPEN

DUTY_WEIGHS = (Engine.Duty.LIFE_SAVING, Engine.Duty.STANDBY, Engine.Duty.SERVICE)


@dataclass(frozen=True)
class DueJob:
    """A job of the due list: its counts, the one that decides, and what is known about it besides."""

    interval: Interval
    counts: tuple[Count, ...]
    last_done: Done | None
    deferral: Deferral | None
    orders: tuple[WorkOrder, ...]
    out_since: datetime | None
    today: date

    @property
    def first(self) -> Count:
        """The count that comes first."""
        return soonest(self.counts)

    @property
    def others(self) -> list[Count]:
        """The counts that come later."""
        return [count for count in self.counts if count is not self.first]

    @property
    def stage(self) -> str:
        """Over, unknown, due or later: the worst that its counts tell for certain."""
        if self.last_done is None:
            return UNKNOWN
        stages = {count.stage for count in self.counts}
        return min(stages - {UNKNOWN}, key=STAGES.index, default=UNKNOWN) if self.first.stage != UNKNOWN else UNKNOWN

    @property
    def is_put_off(self) -> bool:
        return self.deferral is not None and self.deferral.until_on >= self.today

    @property
    def worst_first(self) -> tuple:
        """Key for sorting: stage, then duty, then days left, then how much is used up."""
        return (
            self.is_put_off, STAGES.index(self.stage), DUTY_WEIGHS.index(self.interval.engine.duty),
            self.first.days_left, -used_share(self.first), self.interval.engine.name, self.interval.title,
        )  # fmt: skip


@dataclass
class Stop:
    """Jobs of one engine that share a cover or a stop, worst first; mostly it is one job alone."""

    opens: str
    jobs: list[DueJob] = field(default_factory=list)


def due_list(person: Person, at: datetime, engine: Engine | None = None) -> list[DueJob]:
    """List what comes due, worst first; the number of queries doesn't grow with engines, jobs or their history."""
    kept = Interval.objects.seen_by(person).filter(is_stopped=False).select_related("engine")
    intervals = list(kept if engine is None else kept.filter(engine=engine))
    if not intervals:
        return []
    today = shop_day(person.shop, at)
    engines = {interval.engine_id for interval in intervals}
    last_done = latest(Done.objects.filter(done_at__lte=at), "-done_at", intervals)
    deferrals = latest(Deferral.objects.filter(deferred_at__lte=at), "-deferred_at", intervals)
    orders = open_orders(intervals)
    shown, out = meters_shown(engines, at), out_since(engines, at)
    uses: dict[tuple[int, str], Use | Sentence] = {key: average_use(readings) for key, readings in shown.items()}
    jobs = [
        DueJob(
            interval, counts_of(interval, last_done.get(interval.pk), shown, uses, today), last_done.get(interval.pk),
            deferrals.get(interval.pk), tuple(orders[interval.pk]), out.get(interval.engine_id), today,
        )
        for interval in intervals
    ]  # fmt: skip
    return sorted(jobs, key=lambda job: job.worst_first)


def counts_of(
    interval: Interval, done: Done | None, shown: Mapping[tuple[int, str], list[Shown]],
    uses: Mapping[tuple[int, str], Use | Sentence], today: date,
) -> tuple[Count, ...]:  # fmt: skip
    """Count every length that a job is kept by."""
    starts = starts_kept(done.counts_from) if done else {}
    counts = []
    for unit, length in lengths_of(interval).items():
        window, start, key = length * interval.window_percent / 100, starts.get(unit), (interval.engine_id, unit)
        if unit == DAYS:
            counts.append(counted_days(length, window, start, today))
            continue
        total = shown[key][-1].total if key in shown else None
        counts.append(counted_meter(unit, length, window, start, total, uses.get(key, say("no meter reading")), today))
    return tuple(counts)


def lengths_of(interval: Interval) -> dict[str, float]:
    """How often a job is due, by unit."""
    told = {unit: getattr(interval, name) for unit, name in Interval.LENGTHS.items()}
    return {unit: length for unit, length in told.items() if length is not None}


def in_stops(jobs: Iterable[DueJob]) -> list[Stop]:
    """Put jobs that share a cover or stop of one engine together, where the worst of them stands."""
    stops: dict[tuple, Stop] = {}
    for job in jobs:
        shared = job.interval.opens.strip()
        key = (job.interval.engine_id, shared.casefold(), job.is_put_off) if shared else (job.interval.pk,)
        stops.setdefault(key, Stop(shared)).jobs.append(job)
    return list(stops.values())


def latest(rows: QuerySet, order: str, intervals: Iterable[Interval]) -> dict[int, Done | Deferral]:
    """The latest row of each interval, in one query."""
    newest = rows.filter(interval=OuterRef("interval")).order_by(order, "-pk").values("pk")[:1]
    found = rows.filter(interval__in=[interval.pk for interval in intervals], pk=Subquery(newest))
    return {row.interval_id: row for row in found}


def open_orders(intervals: Iterable[Interval]) -> dict[int, list[WorkOrder]]:
    """Open work orders by the interval they answer."""
    found = defaultdict(list)
    links = Interval.work_orders.through.objects.filter(
        interval__in=[interval.pk for interval in intervals], workorder__state__in=OPEN
    )
    for link in links.select_related("workorder"):
        found[link.interval_id].append(link.workorder)
    return found


def meter_totals(engine: Engine, at: datetime) -> dict[str, float]:
    """What an engine had run in all at its last meter readings, by unit: what `record_done` takes as totals."""
    return {unit: readings[-1].total for (_engine, unit), readings in meters_shown([engine.pk], at).items()}


def out_since(engines: Iterable[int], at: datetime) -> dict[int, datetime]:
    """Since when engines are out of service now."""
    now_out = OutOfService.objects.filter(engine__in=engines, from_at__lte=at)
    return dict(now_out.filter(Q(until_at=None) | Q(until_at__gt=at)).values_list("engine", "from_at"))


def shop_day(shop: Shop, at: datetime) -> date:
    """The day it is at the shop."""
    return at.astimezone(ZoneInfo(shop.time_zone)).date()


def engine_locks(order: WorkOrder) -> list[Lock]:
    """Every lock that is on a work order's engine now, whichever job it was taken for."""
    on_it = Q(work_order=order) if order.engine_id is None else Q(work_order__engine=order.engine_id)
    return list(Lock.objects.filter(on_it, lifted_at=None).select_related("person", "work_order").order_by("taken_at"))


def open_now(order: WorkOrder) -> list[dict[str, str]]:
    """What stands open on a job, as a hand-over keeps it: things opened, locks by name, where the crank stands."""
    items = order.closing_items.filter(closed_at=None).select_related("opened_by")
    listed = [
        {"what": item.what, "by": item.opened_by.name, "explanation": item.explanation, "form": "item"}
        for item in items
    ]
    locks = order.locks.filter(lifted_at=None).select_related("person")
    listed += [{"what": lock.point, "by": lock.person.name, "explanation": "", "form": "lock"} for lock in locks]
    if order.crank_at:
        listed.append({"what": order.crank_at, "by": "", "explanation": "", "form": "crank"})
    return listed


def with_job_page(orders: QuerySet) -> QuerySet:
    """Fetch with work orders all that their page shows."""
    return orders.select_related("engine", "part", "opened_by").prefetch_related(
        Prefetch("intervals", Interval.objects.select_related("engine")),
        "tasks__done_by", "moves__moved_by", "closing_items__opened_by", "closing_items__closed_by",
        "closing_items__explained_by", "hand_overs__from_person", "hand_overs__to_person", "parts_used__used_by",
        "parts_used__task", "locks__person",
    )  # fmt: skip
