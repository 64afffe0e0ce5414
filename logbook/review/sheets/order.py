"""The work order on paper: what is to be done, with the cautions before each task and the locks it stands under."""

from django.utils.translation import gettext as _

from logbook.bench.closing_up import opened_by_pass
from logbook.bench.judging import kinds
from logbook.bench.words import station_title
from logbook.paper.shapes import Caution, WorkOrderSheet
from logbook.paper.shapes import Task as Told
from logbook.work.lockout import HOW, STATES
from logbook.work.models import Task, WorkOrder

from .head import facts, head, moment


def work_order_sheet(work_order: WorkOrder) -> WorkOrderSheet:
    """The work order to take to the engine."""
    order = WorkOrder.objects.select_related("shop", "engine__shop", "part", "opened_by").get(pk=work_order.pk)
    tasks = list(order.tasks.order_by("place"))
    opened = _("%(when)s by %(person)s") % {"when": moment(order.opened_at, order.shop), "person": order.opened_by.name}
    due = ", ".join(interval.title for interval in order.intervals.order_by("title"))
    return {
        **head(order), "facts": facts([(_("opened"), opened), (_("for what is due"), due)]),
        "cautions": [{"signal": "NOTICE", "text": _(
            "Each takes their own lock and lifts it alone: nobody lifts another person's lock."
        )}],
        "tasks": [task_told(task, locked=order.engine_id is not None) for task in tasks],
        "closing": to_close(tasks) if order.engine_id else [],
        "ink": [_("measured"), _("locks lifted, engine turned by hand twice, covers on")],
    }  # fmt: skip


def task_told(task: Task, *, locked: bool) -> Told:
    """A task with the state of the engine it needs; a loose part has nothing to lock."""
    asked, kind = STATES.get(task.lock_state), kinds().get(task.kind)
    cautions = kind.cautions if kind else asked.cautions if asked and locked else ()  # a kind's say its state's too
    told: Told = {
        "title": task.title, "cautions": [caution(one) for one in cautions],
        "facts": facts([
            (_("measures"), kind.title if kind else ""),
            (_("to be witnessed"), ", ".join(station_title(one) for one in task.witnessed_stations)),
        ]),
    }  # fmt: skip
    if asked and locked:
        told |= {"state": str(asked.title), "locks": list(asked.locked)}
        told["facts"] += facts([
            *((point, HOW[point]) for point in asked.locked), (_("free of any lock"), ", ".join(asked.free)),
            (_("look first"), " ".join(map(str, asked.checks))),
        ])  # fmt: skip
    return told


def caution(one: object) -> Caution:
    """A caution as the sheet prints it."""
    return {"signal": one.signal, "text": str(one.text)}


def to_close(tasks: list[Task]) -> list[str]:
    """What these tasks open and must be closed up again, to tick at the end."""
    every = kinds()
    opened = [what for task in tasks if task.kind in every for what in opened_by_pass(every[task.kind])]
    return [*dict.fromkeys(opened), _("own locks lifted")]
