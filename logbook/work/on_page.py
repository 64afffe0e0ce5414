"""A job's tasks as its page shows them: cautions first, then the state of the engine and its locks by name."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime

from django.utils.translation import gettext as _

from logbook.people.models import Person
from measurements.kind import Caution, find_kinds

from .addresses import address_for
from .lockout import HOW, STATES, AskedFor
from .models import Lock, Task, WorkOrder
from .states import State


@dataclass(frozen=True)
class Point:
    """A point of the lockout: whose locks are on it, the person's own among them."""

    name: str
    how: str
    mine: Lock | None
    others: tuple[Lock, ...]
    must_be_free: bool


@dataclass(frozen=True)
class TaskRow:
    """A task with what stands before it."""

    task: Task
    asked: AskedFor
    cautions: tuple[Caution, ...]
    points: tuple[Point, ...]
    bench: str
    blank: str
    is_next: bool

    @property
    def missing(self) -> list[str]:
        """Points on which the person's lock is missing."""
        return [point.name for point in self.points if not point.must_be_free and point.mine is None]

    @property
    def in_the_way(self) -> list[Point]:
        """Points that are locked and must be free."""
        return [point for point in self.points if point.must_be_free and (point.mine or point.others)]

    @property
    def is_locked_out(self) -> bool:
        """Tell whether the engine is in the task's state as far as this person's locks say so."""
        return not self.missing and not self.in_the_way

    @property
    def is_under_way(self) -> bool:
        return self.task.started_at is not None and self.task.done_at is None


def task_rows(order: WorkOrder, person: Person, locks: Sequence[Lock]) -> list[TaskRow]:
    """The tasks of a job for its page."""
    tasks = list(order.tasks.all())
    first = next((task for task in tasks if task.done_at is None), None)
    return [
        task_row(task, order, person, locks, is_next=task is first or task.started_at is not None) for task in tasks
    ]


def task_row(task: Task, order: WorkOrder, person: Person, locks: Sequence[Lock], *, is_next: bool) -> TaskRow:
    """One task: a loose part has no engine to lock. What isn't next folds its cautions and locks away."""
    asked, kind = STATES[task.lock_state], find_kinds().get(task.kind)
    cautions = kind.cautions if kind else asked.cautions
    points = ()
    if order.engine_id:
        points = (
            *(point_of(name, person, locks, must_be_free=False) for name in asked.locked),
            *(point_of(name, person, locks, must_be_free=True) for name in asked.free),
        )
    blank = address_for(person, "review:blank_sheet", order.number, task.pk) if task.kind else ""
    return TaskRow(task, asked, tuple(cautions), points, bench_page(order, task, person), blank, is_next)


def point_of(name: str, person: Person, locks: Sequence[Lock], *, must_be_free: bool) -> Point:
    """A point with the locks that are on it."""
    on_it = [lock for lock in locks if lock.point == name]
    mine = next((lock for lock in on_it if lock.person_id == person.pk), None)
    others = tuple(lock for lock in on_it if lock.person_id != person.pk)
    return Point(name, HOW[name], mine, others, must_be_free)


def bench_page(order: WorkOrder, task: Task, person: Person) -> str:
    """The task's page at the bench, once its job has come there."""
    if not task.kind or order.state == State.PLANNED:
        return ""
    return address_for(person, "bench:bench", order.number, task.pk)


@dataclass(frozen=True)
class Event:
    """Something that happened to a job: a move, or a hand-over."""

    at: datetime
    what: str
    who: Person
    words: str


def history(order: WorkOrder) -> list[Event]:
    """A job's moves and hand-overs, as they came."""
    events = [
        Event(move.moved_at, move.get_to_state_display(), move.moved_by, move.reason) for move in order.moves.all()
    ]
    for one in order.hand_overs.all():
        to = one.to_person.name if one.to_person else _("whoever comes next")
        events.append(Event(one.handed_at, _("handed over to %(person)s") % {"person": to}, one.from_person, one.told))
        if one.taken_at:
            events.append(Event(one.taken_at, _("taken over"), one.to_person, ""))
    return sorted(events, key=lambda event: event.at)
