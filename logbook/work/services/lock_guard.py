"""The guard before a task: the person's own locks are on, and no lock stands where the state needs a point free."""

from collections.abc import Iterable

from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import Person

from ..lockout import STATES, change_to
from ..models import Lock


class LocksMissing(Refused):
    """A task asks for locks that aren't on, or for a point that is locked."""


def refuse_without_locks(state: str, person: Person, locks: Iterable[Lock]) -> None:
    """Refuse, naming each lock that is missing and each that is in the way, with whose it is.

    Parameters
    ----------
    state : str
        State of the engine that the task needs.
    locks : iterable of Lock
        Every lock that is on this engine, whichever job it was taken for.
    """
    locks = list(locks)
    asked = STATES[state]
    missing = change_to(state, [lock.point for lock in locks if lock.person_id == person.pk]).take
    in_the_way = [lock for lock in locks if lock.point in asked.free]
    told = []
    if missing:
        told.append(_("your lock is missing on: %(points)s") % {"points": ", ".join(missing)})
    told += [
        _("the lock of %(person)s on %(point)s must be lifted by them") % {"person": lock.person, "point": lock.point}
        for lock in in_the_way
    ]
    if told:
        raise LocksMissing(_("For “%(state)s” %(told)s.") % {"state": state, "told": "; ".join(told)})
