"""The closing-up list of a job: what was opened, and closed or explained before the job goes on to be decided."""

from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.people.models import Person

from ..models import ClosingItem, WorkOrder
from ..roles import needs
from ..states import State
from .moves import NotNow, held, refuse_over

WORKED_ON = (State.AT_THE_BENCH, State.STOPPED_SHORT, State.PLANNED)


@transaction.atomic
def open_item(work_order: WorkOrder, *, by: Person, at: datetime, what: str) -> ClosingItem:
    """Put something on the closing-up list; what is on it already stays one item."""
    needs(by, work_order, "technician")
    order, what = held(work_order), what.strip()
    if order.state not in WORKED_ON:
        told = {"job": order, "state": order.get_state_display()}
        raise NotNow(_("Job %(job)s is “%(state)s”: nothing is opened on it any more.") % told)
    if already := order.closing_items.filter(what=what, closed_at=None).first():
        return already
    item = ClosingItem(shop=order.shop, work_order=order, what=what, since_at=at, opened_by=by)
    item.full_clean()
    item.save()
    return item


@transaction.atomic
def close_item(item: ClosingItem, *, by: Person, at: datetime) -> ClosingItem:
    """Close something up; closed twice, the first one stands."""
    needs(by, item, "technician")
    refuse_over(held(item.work_order))
    current = ClosingItem.objects.select_for_update().get(pk=item.pk)
    if current.closed_at is None:
        current.closed_at, current.closed_by = at, by
        current.full_clean()
        current.save(update_fields=["closed_at", "closed_by"])
    item.closed_at, item.closed_by = current.closed_at, current.closed_by
    return item


@transaction.atomic
def explain_item(item: ClosingItem, *, by: Person, at: datetime, explanation: str) -> ClosingItem:
    """Say why something stays open; the name of who said so and the day stand with it."""
    needs(by, item, "technician")
    refuse_over(held(item.work_order))
    current = ClosingItem.objects.select_for_update().get(pk=item.pk)
    if current.closed_at is not None:
        raise NotNow(_("“%(what)s” is closed up already: there is nothing to explain.") % {"what": current.what})
    if not explanation.strip():
        raise NotNow(_("Say in a sentence why “%(what)s” stays open.") % {"what": current.what})
    current.explanation, current.explained_at, current.explained_by = explanation.strip(), at, by
    current.full_clean()
    current.save(update_fields=["explanation", "explained_at", "explained_by"])
    item.explanation, item.explained_at, item.explained_by = current.explanation, at, by
    return item
