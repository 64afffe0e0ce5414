"""A work order goes from one state to another: guarded by the one table, and kept as a Move."""

from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import Person

from ..models import ClosingItem, Lock, Move, WorkOrder
from ..roles import needs
from ..states import MOVES, NEEDS_REASON, OPEN, State


class NotNow(Refused):
    """What was asked doesn't fit the state the job is in."""


def held(work_order: WorkOrder) -> WorkOrder:
    """The work order as it stands now, kept from others until the transaction ends."""
    return WorkOrder.objects.select_for_update().get(pk=work_order.pk)


@transaction.atomic
def move(work_order: WorkOrder, to_state: str, *, by: Person, at: datetime, reason: str = "") -> Move:
    """Move a work order to another state, if the table lets this person do it.

    Raises
    ------
    NotNow
        No such move from the state it is in, or the reason is missing.
    NotTheirs
        The move takes another role.
    """
    current, reason = held(work_order), reason.strip()
    way = MOVES[current.state].get(to_state)
    if way is None:
        told = {"job": current, "state": current.get_state_display(), "to": State(to_state).label}
        raise NotNow(_("Job %(job)s is “%(state)s”; from there it can't become “%(to)s”.") % told)
    roles, _meaning = way
    needs(by, current, *roles)
    if to_state in NEEDS_REASON and not reason:
        raise NotNow(_("Say why in a sentence: it stands on the job's sheet."))
    done = Move(shop=current.shop, work_order=current, from_state=current.state, to_state=to_state, reason=reason,
                moved_by=by, moved_at=at)  # fmt: skip
    done.full_clean()
    done.save()
    moments = {State.AT_THE_BENCH: {"at_bench_since": at, "finished_at": None}, State.TO_DECIDE: {"finished_at": at}}
    for told_to in (current, work_order):
        for name, value in ({"state": to_state} | moments.get(to_state, {})).items():
            setattr(told_to, name, value)
    current.save(update_fields=["state", "at_bench_since", "finished_at"])
    return done


@transaction.atomic
def stop_short(work_order: WorkOrder, *, by: Person, at: datetime, reason: str) -> Move:
    """Stop a job before its end; what is open stays on its closing-up list."""
    return move(work_order, State.STOPPED_SHORT, by=by, at=at, reason=reason)


@transaction.atomic
def resume(work_order: WorkOrder, *, by: Person, at: datetime) -> Move:
    """Go on with a job that was stopped short; its locks are checked again at each task."""
    if held(work_order).state != State.STOPPED_SHORT:
        raise NotNow(_("Job %(job)s wasn't stopped short, so there is nothing to go on with.") % {"job": work_order})
    return move(work_order, State.AT_THE_BENCH, by=by, at=at)


@transaction.atomic
def finish_measuring(work_order: WorkOrder, *, by: Person, at: datetime) -> Move:
    """Hand a job to whoever decides: everything closed up or explained, and no lock left on."""
    refuse_while_open(held(work_order))
    return move(work_order, State.TO_DECIDE, by=by, at=at)


@transaction.atomic
def drop(work_order: WorkOrder, *, by: Person, at: datetime, reason: str) -> Move:
    """Give a job up, with its reason: everything closed up or explained, and no lock left on."""
    refuse_while_open(held(work_order))
    return move(work_order, State.DROPPED, by=by, at=at, reason=reason)


def refuse_over(work_order: WorkOrder) -> None:
    """Refuse to change a job that is signed or was dropped: its sheet stands as it is."""
    if work_order.state not in OPEN:
        told = {"job": work_order, "state": work_order.get_state_display()}
        raise NotNow(_("Job %(job)s is “%(state)s”; nothing on it changes any more.") % told)


def refuse_while_open(work_order: WorkOrder) -> None:
    """Refuse when something is still open and unexplained, or a lock still on; name all of it."""
    items = ClosingItem.objects.filter(work_order=work_order, closed_at=None, explanation="")
    locks = Lock.objects.filter(work_order=work_order, lifted_at=None).select_related("person")
    left = [item.what for item in items]
    left += [_("the lock of %(person)s on: %(point)s") % {"person": lock.person, "point": lock.point} for lock in locks]
    if left:
        raise NotNow(_("Still open: %(left)s. Close each up, or say why it stays open.") % {"left": "; ".join(left)})
