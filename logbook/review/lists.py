"""The list of what is to be decided: jobs with something beyond or too close, the most pressing first."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime

from django.urls import reverse
from django.utils.translation import gettext as _

from logbook.people.models import Person
from logbook.work.models import WorkOrder

from .cases import Case
from .models import RunningUndecided
from .queries import OPEN, cases_of, measured_anew, orders_open_to, signed_with_concessions, undecided_runs
from .sheets.decisions import end_words
from .words import case_words


@dataclass
class Entry:
    """A job on the list, with its open cases, worst first."""

    work_order: WorkOrder
    cases: list[Case]
    running: RunningUndecided | None = None

    @property
    def worst(self) -> Case | None:
        """The case that puts it where it stands."""
        return self.cases[0] if self.cases else None

    @property
    def about(self) -> str:
        """The engine or the part."""
        return str(self.work_order.engine or self.work_order.part)

    @property
    def duty(self) -> str:
        """The engine's duty, in words."""
        return str(self.work_order.engine.get_duty_display()) if self.work_order.engine else ""

    @property
    def address(self) -> str:
        """Where it is decided."""
        return reverse("review:decide", args=[self.work_order.number])

    @property
    def past_end_words(self) -> str:
        """Which concession has run out, and when it ended."""
        case = self.past_end
        end = end_words(case.decision, self.work_order.shop)
        return _("%(where)s was let run until %(end)s; it is undecided again.") % {
            "where": case_words(case),
            "end": end,
        }

    @property
    def more(self) -> int:
        """Open cases besides the worst."""
        return len(self.cases) - 1

    @property
    def past_end(self) -> Case | None:
        """A concession on it that has run out."""
        return next((case for case in self.cases if case.is_past_end), None)

    @property
    def pressing(self) -> tuple:
        """Sorts entries: concessions past their end, engines running undecided, then worst first, then by age."""
        badness = self.worst.badness if self.worst else (9.0, 0.0, 0.0)
        return self.past_end is None, self.running is None, badness, self.work_order.number

    @property
    def is_at_the_bench(self) -> bool:
        """Tell whether measuring isn't finished yet."""
        return self.work_order.state != WorkOrder.State.TO_DECIDE and not self.past_end


@dataclass
class ToDecide:
    """Everything that waits for a decision or a signature."""

    entries: list[Entry]
    again: list[WorkOrder]
    to_sign: list[WorkOrder]


def to_decide(person: Person, at: datetime) -> ToDecide:
    """Gather what waits in a person's shop; the count of queries doesn't grow with jobs, stations or visits."""
    orders = list(orders_open_to(person).filter(state__in=OPEN).order_by("number"))
    signed = list(signed_with_concessions(person))
    cases = cases_of([*orders, *signed], at)
    open_orders = {order.pk for order in orders}
    over = [case for case in cases if case.is_past_end and case.work_order.pk not in open_orders]
    settled = {id(case) for case in measured_anew(over)}
    wanted = [case for case in cases if case.is_undecided and case.work_order.pk in open_orders]
    wanted += [case for case in over if id(case) not in settled]
    entries = gathered(wanted, undecided_runs(orders), orders)
    busy = {entry.work_order.pk for entry in entries}
    waiting = [one for one in orders if one.state == WorkOrder.State.TO_DECIDE and one.pk not in busy]
    again = {case.work_order.pk for case in cases if case.is_to_be_measured_again}
    return ToDecide(
        entries, [one for one in waiting if one.pk in again], [one for one in waiting if one.pk not in again]
    )


def gathered(cases: Sequence[Case], running: dict[int, RunningUndecided], orders: Sequence[WorkOrder]) -> list[Entry]:
    """One entry a job, most pressing first; an engine that runs undecided is on the list whatever its readings say."""
    entries: dict[int, Entry] = {}
    for case in sorted(cases, key=lambda case: (not case.is_past_end, case.badness)):
        entries.setdefault(case.work_order.pk, Entry(case.work_order, [])).cases.append(case)
    for order in orders:
        if order.pk in running:
            entries.setdefault(order.pk, Entry(order, [])).running = running[order.pk]
    return sorted(entries.values(), key=lambda entry: entry.pressing)
