"""Tasks are started under their locks, and finished with the time they took; parts are used up on them."""

from collections.abc import Sequence
from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.people.models import Person

from ..models import PartUsed, Task, WorkOrder
from ..queries import engine_locks
from ..roles import needs
from ..states import State
from .lock_guard import refuse_without_locks
from .moves import NotNow, held, move, refuse_over

AT_WORK = (State.PLANNED, State.AT_THE_BENCH)


@transaction.atomic
def start_task(task: Task, *, by: Person, at: datetime) -> Task:
    """Start a task, or go on with it: the person's locks for its state are on, and nothing stands in their way.

    The first task that is started brings the work order to the bench.
    """
    needs(by, task, "technician")
    order = held(task.work_order)
    if order.state not in AT_WORK:
        told = {"job": order, "state": order.get_state_display()}
        raise NotNow(_("Job %(job)s is “%(state)s”: no task can be started on it now.") % told)
    refuse_done(task)
    if order.engine_id:
        refuse_without_locks(task.lock_state, by, engine_locks(order))
    if order.state == State.PLANNED:
        move(order, State.AT_THE_BENCH, by=by, at=at)
        task.work_order.state, task.work_order.at_bench_since = order.state, order.at_bench_since
    if task.started_at is None:
        task.started_at = at
        task.save(update_fields=["started_at"])
    return task


@transaction.atomic
def finish_task(task: Task, *, by: Person, at: datetime, minutes: int | None = None) -> Task:
    """Finish a task, with the time it took [min] where it is told."""
    needs(by, task, "technician")
    order = held(task.work_order)
    if order.state != State.AT_THE_BENCH:
        told = {"job": order, "state": order.get_state_display()}
        raise NotNow(_("Job %(job)s is “%(state)s”, not at the bench: no task is finished on it now.") % told)
    refuse_done(task)
    if task.started_at is None:
        raise NotNow(_("“%(task)s” hasn't been started: start it first, under its locks.") % {"task": task})
    if minutes is not None and minutes < 0:
        raise NotNow(_("Read %(minutes)s minutes: a task takes no time or more.") % {"minutes": minutes})
    task.done_at, task.done_by, task.minutes = at, by, minutes
    task.full_clean()
    task.save(update_fields=["done_at", "done_by", "minutes"])
    return task


def refuse_done(task: Task) -> None:
    """Refuse a task that is finished; somebody else may just have finished it."""
    task.refresh_from_db(fields=["started_at", "done_at", "done_by"])
    if task.done_at:
        raise NotNow(_("“%(task)s” was finished by %(person)s already.") % {"task": task, "person": task.done_by})


@transaction.atomic
def name_witnessed(task: Task, *, by: Person, at: datetime, stations: Sequence[str]) -> Task:
    """Name the stations of a task that somebody from outside is to witness."""
    needs(by, task, "supervisor", "technician")
    order = held(task.work_order)
    refuse_over(order)
    task.witnessed_stations = list(dict.fromkeys(station.strip() for station in stations if station.strip()))
    task.save(update_fields=["witnessed_stations"])
    return task


@transaction.atomic
def use_part(
    work_order: WorkOrder, *, by: Person, at: datetime, what: str, count: float = 1.0, task: Task | None = None
) -> PartUsed:
    """Write down a part used up on a job; a wrong line is answered by another, with a count below zero refused."""
    needs(by, work_order, "technician", "supervisor")
    order = held(work_order)
    refuse_over(order)
    if not count > 0:
        raise NotNow(_("Read a count of %(count)s: write how many were used, more than none.") % {"count": count})
    if task is not None and task.work_order_id != order.pk:
        raise NotNow(_("“%(task)s” is a task of another job.") % {"task": task})
    used = PartUsed(
        shop=order.shop, work_order=order, task=task, what=what.strip(), count=count, used_by=by, used_at=at
    )
    used.full_clean()
    used.save()
    return used
