"""A job passes from one technician to the next, with what stood open then."""

from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import Person

from ..models import HandOver, WorkOrder
from ..queries import open_now
from ..roles import needs
from ..states import State
from .moves import NotNow, held, refuse_over


class NotForYou(Refused):
    """A job was handed to somebody else."""


@transaction.atomic
def hand_over(
    work_order: WorkOrder, *, by: Person, at: datetime, told: str = "", to_person: Person | None = None
) -> HandOver:
    """Hand a job over, to a named technician or to whoever comes next; the closing-up list of now is kept with it."""
    needs(by, work_order, "technician")
    order = held(work_order)
    if order.state not in (State.AT_THE_BENCH, State.STOPPED_SHORT):
        said = {"job": order, "state": order.get_state_display()}
        raise NotNow(_("Job %(job)s is “%(state)s”: there is nothing to hand over.") % said)
    if to_person is not None:
        needs(to_person, order, "technician")
        if to_person.pk == by.pk:
            raise NotForYou(_("You have this job already; hand it to somebody else, or leave the name open."))
    handed = HandOver(shop=order.shop, work_order=order, from_person=by, to_person=to_person, told=told.strip(),
                      open_items=open_now(order), handed_at=at)  # fmt: skip
    handed.full_clean(exclude=["open_items"])
    handed.save()
    return handed


@transaction.atomic
def take_over(hand_over: HandOver, *, by: Person, at: datetime) -> HandOver:
    """Take a job over; from then it is known whose hands it is in."""
    needs(by, hand_over, "technician")
    refuse_over(held(hand_over.work_order))
    current = HandOver.objects.select_for_update().get(pk=hand_over.pk)
    if current.taken_at is not None:
        raise NotNow(_("%(person)s has taken this job over already.") % {"person": current.to_person})
    if current.to_person_id not in (None, by.pk):
        raise NotForYou(_("This job was handed to %(person)s, who must take it over.") % {"person": current.to_person})
    current.to_person, current.taken_at = by, at
    current.save(update_fields=["to_person", "taken_at"])
    hand_over.to_person, hand_over.taken_at = by, at
    return hand_over
