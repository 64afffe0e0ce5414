"""Wrong tries: five for one name from one address, then a quarter of an hour's wait.

By name and address together: behind one router a whole shop has one address, and a stranger elsewhere who tries a name
must not lock its owner out. A try is counted before it is looked at, in a transaction of its own, so that many tries at
one moment are no more than five either.
"""

from datetime import datetime, timedelta
from math import ceil

from django.db import transaction
from django.utils.translation import gettext as _
from django.utils.translation import ngettext

from logbook.core.refusal import Refused

from .models import WrongTries

MOST = 5
WAIT = timedelta(minutes=15)
FIRST_START = ""  # the name that tries of the first start's code are counted under: nobody has it


class TooManyTries(Refused):
    """The next try has to wait."""


@transaction.atomic(durable=True)
def count_try(*, name: str, address: str, at: datetime) -> None:
    """Count a try, taken for wrong until `forget_tries` says it was right.

    Raises
    ------
    TooManyTries
        After five, until a quarter of an hour has gone by since the fifth.
    """
    WrongTries.objects.filter(last_at__lte=at - WAIT).delete()
    tries, _made = WrongTries.objects.select_for_update().get_or_create(
        name=same(name), address=address, defaults={"last_at": at}
    )
    if tries.count >= MOST:
        raise TooManyTries(wait_told(tries.last_at + WAIT - at))
    tries.count += 1
    tries.last_at = at
    tries.save()


def forget_tries(*, name: str, address: str | None = None) -> None:
    """Forget wrong tries for a name, from one address or from everywhere."""
    tries = WrongTries.objects.filter(name=same(name))
    (tries if address is None else tries.filter(address=address)).delete()


def wait_told(left: timedelta) -> str:
    """Say how long it takes."""
    minutes = max(1, ceil(left / timedelta(minutes=1)))
    return ngettext(
        "There were %(most)s wrong tries from here; the next one can be made in %(minutes)s minute.",
        "There were %(most)s wrong tries from here; the next one can be made in %(minutes)s minutes.",
        minutes,
    ) % {"most": MOST, "minutes": minutes} + (" " + _("Nothing was looked at now."))


def same(name: str) -> str:
    """Give a name the way it is counted: capitals don't matter."""
    return name.casefold()[:80]
