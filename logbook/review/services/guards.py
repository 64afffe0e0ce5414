"""What every action of this room asks first, and how it keeps a row."""

from django.core.exceptions import ValidationError
from django.db import models
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import Person
from logbook.work.models import WorkOrder


class NotDecided(Refused):
    """A decision that can't be made: not by this person, not on this finding, or not in this way."""


class Frozen(Refused):
    """Something was to be changed on a sheet that is signed, or on a job that was dropped."""


def is_frozen(work_order: WorkOrder) -> bool:
    """Tell whether nothing is measured or decided on a work order any more: it is signed or was dropped."""
    return work_order.state in (WorkOrder.State.SIGNED, WorkOrder.State.DROPPED)


def refuse_stranger(by: Person, work_order: WorkOrder) -> None:
    """Refuse somebody of another shop, or who left."""
    if by.shop_id != work_order.shop_id or not by.is_active:
        raise NotDecided(_("%(person)s has no say in this shop.") % {"person": by.name})


def held(work_order: WorkOrder) -> WorkOrder:
    """The work order as it stands now, kept from others until the transaction ends."""
    return (
        WorkOrder.objects.select_related("shop", "engine", "part").select_for_update(of=("self",)).get(pk=work_order.pk)
    )


def kept(row: models.Model) -> models.Model:
    """Save a new row; a constraint it breaks becomes a sentence."""
    try:
        row.full_clean()
    except ValidationError as broken:
        raise NotDecided(" ".join(broken.messages)) from broken
    row.save(force_insert=True)
    return row
