"""Locks are taken by name on a point, and lifted by nobody but their own person."""

from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import Person

from ..lockout import STATES
from ..models import Lock, WorkOrder
from ..roles import needs
from ..states import OPEN
from .moves import NotNow, held


class NotYourLock(Refused):
    """Somebody tried to lift another person's lock."""


@transaction.atomic
def take_lock(work_order: WorkOrder, *, by: Person, at: datetime, state: str, point: str) -> Lock:
    """Put a person's lock on a point of the engine, for a state it is to be in; twice on the same point is one lock."""
    needs(by, work_order, "technician")
    order, point = held(work_order), point.strip()
    if order.state not in OPEN:
        told = {"job": order, "state": order.get_state_display()}
        raise NotNow(_("Job %(job)s is “%(state)s”: no lock is taken for it any more.") % told)
    if order.engine_id is None:
        raise NotNow(_("Job %(job)s is for a loose part: there is no engine to lock.") % {"job": order})
    if state not in STATES:
        told = {"state": state, "states": ", ".join(STATES)}
        raise NotNow(_("“%(state)s” is no state of an engine; it is one of: %(states)s.") % told)
    if already := order.locks.filter(person=by, point=point, lifted_at=None).first():
        return already
    lock = Lock(shop=order.shop, work_order=order, state=state, point=point, person=by, taken_at=at)
    lock.full_clean()
    lock.save()
    return lock


@transaction.atomic
def lift_lock(lock: Lock, *, by: Person, at: datetime, lifted_for: str = "") -> Lock:
    """Lift one's own lock; `lifted_for` says which state or task it made way for."""
    needs(by, lock, "technician")
    current = Lock.objects.select_for_update().get(pk=lock.pk)
    if current.person_id != by.pk:
        told = {"person": current.person, "point": current.point}
        raise NotYourLock(_("The lock on %(point)s is %(person)s's: nobody else lifts it. Ask them.") % told)
    if current.lifted_at is None:
        current.lifted_at, current.lifted_for = at, lifted_for.strip()
        current.full_clean()
        current.save(update_fields=["lifted_at", "lifted_for"])
    lock.lifted_at, lock.lifted_for = current.lifted_at, current.lifted_for
    return lock
