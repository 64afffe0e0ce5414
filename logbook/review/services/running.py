"""An engine put back before a decision: since when, on whose word, and its end."""

from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.people.models import Person
from logbook.work.models import WorkOrder

from ..models import RunningUndecided
from ..queries import OPEN
from .guards import Frozen, NotDecided, held, kept, refuse_stranger


@transaction.atomic
def running_undecided(work_order: WorkOrder, *, by: Person, at: datetime, on_whose_word: str) -> RunningUndecided:
    """Keep that an engine was put back before a decision: since when, on whose word."""
    order = held(work_order)
    refuse_stranger(by, order)
    if not by.has_role("technician", "supervisor"):
        raise NotDecided(
            _("%(person)s can't put an engine back; a technician or supervisor can.") % {"person": by.name}
        )
    if order.state not in OPEN:
        told = {"job": order, "state": order.get_state_display()}
        raise Frozen(_("Job %(job)s is “%(state)s”: its engine doesn't run undecided.") % told)
    if already := order.running_undecided.filter(ended_at=None).first():
        raise NotDecided(_("It stands as running undecided already, since %(since)s, on the word of %(word)s.")
                         % {"since": f"{already.since_at:%Y-%m-%d %H:%M} UTC", "word": already.on_whose_word})  # fmt: skip
    if not on_whose_word.strip():
        raise NotDecided(_("Say on whose word the engine runs before a decision."))
    return kept(RunningUndecided(shop=order.shop, work_order=order, since_at=at, on_whose_word=on_whose_word.strip(),
                                 recorded_by=by, recorded_at=at))  # fmt: skip


@transaction.atomic
def end_running_undecided(work_order: WorkOrder, *, by: Person, at: datetime) -> RunningUndecided:
    """Keep that an engine no longer runs undecided: it was stopped, or the decision came."""
    order = held(work_order)
    refuse_stranger(by, order)
    if not by.has_role("technician", "supervisor"):
        raise NotDecided(_("%(person)s can't say that; a technician or supervisor can.") % {"person": by.name})
    running = order.running_undecided.select_for_update().filter(ended_at=None).first()
    if running is None:
        raise NotDecided(_("Job %(job)s has no engine running undecided.") % {"job": order})
    running.ended_at = at
    running.save(update_fields=["ended_at"])
    return running
