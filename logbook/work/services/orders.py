"""Work orders are opened, with a number and their tasks."""

from collections.abc import Iterable, Sequence
from datetime import datetime

from django.db import transaction
from django.db.models import Max
from django.utils.translation import gettext as _

from logbook.engines.models import Engine, Part
from logbook.people.models import Person, Shop
from measurements.kind import AT_REST, find_kinds

from ..lockout import STATES
from ..models import Interval, Move, Task, WorkOrder
from ..roles import needs
from ..states import BEGINS_AS, OPEN
from .moves import NotNow, held


@transaction.atomic
def open_work_order(
    *, by: Person, at: datetime, engine: Engine | None = None, part: Part | None = None, title: str,
    kinds: Sequence[str], intervals: Iterable[Interval] = (),
) -> WorkOrder:  # fmt: skip
    """Open a work order under the shop's next number: a task for each kind, and for each interval's other work."""
    for about in (by, engine, part, *intervals):
        if about is not None:
            needs(by, about, "supervisor")
    known, intervals = find_kinds(), list(intervals)
    asked = list(dict.fromkeys([*kinds, *(interval.kind for interval in intervals if interval.kind)]))
    refuse_unfit(asked, known, intervals, engine)
    order = WorkOrder(shop=by.shop, number=next_number(by.shop), engine=engine, part=part, title=title.strip(),
                      state=BEGINS_AS, opened_by=by, opened_at=at)  # fmt: skip
    order.full_clean()
    order.save()
    order.intervals.set(intervals)
    Move.objects.create(shop=by.shop, work_order=order, to_state=BEGINS_AS, moved_by=by, moved_at=at)
    for name in asked:
        add_task(order, by=by, at=at, title=known[name].title, kind=name,
                 lock_state=known[name].lock_state if engine else AT_REST)  # fmt: skip
    for interval in intervals:
        if not interval.kind:
            add_task(order, by=by, at=at, title=interval.title, lock_state=AT_REST)
    return order


def refuse_unfit(
    asked: Sequence[str], known: Iterable[str], intervals: Sequence[Interval], engine: Engine | None
) -> None:
    """Refuse kinds nobody knows, and intervals that belong to another engine."""
    if unknown := [name for name in asked if name not in known]:
        raise NotNow(_("There is no kind of measurement called “%(kind)s”.") % {"kind": unknown[0]})
    for interval in intervals:
        if engine is None or interval.engine_id != engine.pk:
            told = {"job": interval.title, "engine": interval.engine}
            raise NotNow(_("“%(job)s” belongs to %(engine)s; open a work order for that engine.") % told)


def next_number(shop: Shop) -> int:
    """The shop's next number: whoever comes at the same moment waits for the shop's row, then gets the one after."""
    Shop.objects.select_for_update().get(pk=shop.pk)
    return (WorkOrder.objects.filter(shop=shop).aggregate(last=Max("number"))["last"] or 0) + 1


@transaction.atomic
def add_task(work_order: WorkOrder, *, by: Person, at: datetime, title: str, lock_state: str, kind: str = "") -> Task:
    """Add a task at the end of a work order that is still open; other work has no kind."""
    needs(by, work_order, "supervisor", "technician")
    current = held(work_order)
    if current.state not in OPEN[:3]:
        told = {"job": current, "state": current.get_state_display()}
        raise NotNow(_("Job %(job)s is “%(state)s”: no task can be added any more.") % told)
    if lock_state not in STATES:
        told = {"state": lock_state, "states": ", ".join(STATES)}
        raise NotNow(_("“%(state)s” is no state of an engine; it is one of: %(states)s.") % told)
    if kind and kind not in find_kinds():
        raise NotNow(_("There is no kind of measurement called “%(kind)s”.") % {"kind": kind})
    place = (current.tasks.aggregate(last=Max("place"))["last"] or 0) + 1
    task = Task(
        shop=current.shop, work_order=current, place=place, title=title.strip(), kind=kind, lock_state=lock_state
    )
    task.full_clean()
    task.save()
    return task
