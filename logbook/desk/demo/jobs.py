"""Plays a visit as the file of its engine tells it: opened, locked out, measured, closed up, decided, signed.

Everything goes through the rooms' own services, so that each guard holds for the demo as for a real shop.
"""

from datetime import datetime, timedelta

from logbook.people.models import Person
from logbook.work.lockout import change_to
from logbook.work.models import Task, WorkOrder
from logbook.work.queries import engine_locks
from logbook.work.services import (
    close_item,
    finish_measuring,
    finish_task,
    hand_over,
    lift_lock,
    name_witnessed,
    open_work_order,
    start_task,
    stop_short,
    take_lock,
)

from .bench import A_LOCK, A_READING, Bench, Visit
from .passes import measure


def open_job(bench: Bench, told: dict, by: Person, at: datetime) -> WorkOrder:
    """Open the work order of a visit."""
    order = open_work_order(
        by=by, at=at, engine=bench.engine, title=told["title"], kinds=told["kinds"],
        intervals=[bench.intervals[title] for title in told.get("does", ())],
    )  # fmt: skip
    for kind, stations in told.get("witnessed", {}).items():
        name_witnessed(order.tasks.get(kind=kind), by=by, at=at, stations=stations)
    return order


def work_on(visit: Visit, order: WorkOrder) -> None:
    """Take a job as far as its file says: measured to its end, stopped short, or still at the bench."""
    for task in order.tasks.all():
        lock_out(visit, order, task)
        start_task(task, by=visit.keys, at=visit.clock)
        measure(visit, task)
        if visit.is_finished:
            minutes = round((visit.clock - task.started_at) / timedelta(minutes=1))
            finish_task(task, by=visit.keys, at=visit.clock, minutes=minutes)
    if visit.is_finished:
        for item in order.closing_items.filter(closed_at=None):
            close_item(item, by=visit.keys, at=visit.later(A_READING))
        lift_all(visit, order)
        finish_measuring(order, by=visit.keys, at=visit.later(A_LOCK))
    else:
        leave(visit, order)


def lock_out(visit: Visit, order: WorkOrder, task: Task) -> None:
    """Lift and take locks until everybody's stand as the task's state asks."""
    on = engine_locks(order)
    for person in visit.hands:
        own = {lock.point: lock for lock in on if lock.person_id == person.pk}
        change = change_to(task.lock_state, own)
        for point in change.lift:
            lift_lock(own[point], by=person, at=visit.later(A_LOCK), lifted_for=task.title)
        for point in change.take:
            take_lock(order, by=person, at=visit.later(A_LOCK), state=task.lock_state, point=point)


def lift_all(visit: Visit, order: WorkOrder) -> None:
    """Everybody lifts their own locks."""
    for lock in engine_locks(order):
        lift_lock(lock, by=lock.person, at=visit.later(A_LOCK))


def leave(visit: Visit, order: WorkOrder) -> None:
    """Leave a job half way: where the crank stands, and when it is stopped short, why and what to know."""
    order.refresh_from_db()
    order.crank_at = visit.told["crank_at"]
    order.save(update_fields=["crank_at"])
    if visit.ends == "stopped_short":
        lift_all(visit, order)
        hand_over(order, by=visit.keys, at=visit.later(A_LOCK), told=visit.told["hand_over"])
        stop_short(order, by=visit.keys, at=visit.later(A_LOCK), reason=visit.told["reason"])
