"""What leaves the logbook as CSV: time per task and parts used. No prices."""

import csv
from collections.abc import Iterable, Iterator
from io import StringIO

from logbook.people.models import Person

from .models import PartUsed, Task, WorkOrder

RUNS_IN_A_SPREADSHEET = ("=", "+", "-", "@", "\t", "\r")
BYTE_ORDER_MARK = "\ufeff"  # spreadsheets take a file without it for one of another alphabet


def time_rows(person: Person, order: WorkOrder | None = None) -> Iterator[list[object]]:
    """Tasks that were finished, each with who, when and how long; of one job or of the whole shop."""
    yield ["job", "engine or part", "task", "measures", "started", "done", "done by", "minutes"]
    tasks = Task.objects.seen_by(person).filter(done_at__isnull=False)
    tasks = tasks.select_related("work_order__engine", "work_order__part", "done_by").order_by("done_at", "pk")
    for task in tasks if order is None else tasks.filter(work_order=order):
        yield [
            task.work_order.number, task.work_order.engine or task.work_order.part, task.title, task.kind,
            f"{task.started_at:%Y-%m-%dT%H:%MZ}", f"{task.done_at:%Y-%m-%dT%H:%MZ}", task.done_by,
            "" if task.minutes is None else task.minutes,
        ]  # fmt: skip


def parts_rows(person: Person, order: WorkOrder | None = None) -> Iterator[list[object]]:
    """Parts used up, each with how many, who and when; of one job or of the whole shop."""
    yield ["job", "engine or part", "task", "part used", "how many", "used", "used by"]
    used = PartUsed.objects.seen_by(person)
    used = used.select_related("work_order__engine", "work_order__part", "task", "used_by").order_by("used_at", "pk")
    for one in used if order is None else used.filter(work_order=order):
        yield [
            one.work_order.number, one.work_order.engine or one.work_order.part, one.task or "", one.what,
            f"{one.count:g}", f"{one.used_at:%Y-%m-%dT%H:%MZ}", one.used_by,
        ]  # fmt: skip


def as_csv(rows: Iterable[Iterable[object]]) -> str:
    """Write rows as CSV (RFC 4180); what a spreadsheet would take for a formula begins with an apostrophe.

    >>> as_csv([["=1+1", 2]])
    "\\ufeff'=1+1,2\\r\\n"
    """
    text = StringIO()
    writer = csv.writer(text)
    for row in rows:
        cells = [str(cell) for cell in row]
        writer.writerow([f"'{cell}" if cell.startswith(RUNS_IN_A_SPREADSHEET) else cell for cell in cells])
    return BYTE_ORDER_MARK + text.getvalue()
