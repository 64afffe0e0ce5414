"""What is done about people: a logbook opened, persons added and changed, passwords chosen, the shop's ways changed."""

from collections.abc import Mapping
from datetime import datetime
from pathlib import Path

from django.db import IntegrityError, transaction
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused

from . import start_code
from .models import ROLES, FirstStart, Person, Shop
from .tries import forget_tries

CHANGED_ONLY_WHILE_EMPTY = "decimal_mark"


class NotOpened(Refused):
    """The first start's code isn't right."""


class OpenAlready(Refused):
    """Somebody exists: this logbook isn't to be opened again."""


class NobodyWouldDecide(Refused):
    """The change would leave the shop without a supervisor who may sign in."""


class NotTheirs(Refused):
    """Somebody asks for what only a supervisor of the shop may do."""


class WrongPassword(Refused):
    """The password given as proof isn't the person's."""


class FiguresTyped(Refused):
    """The decimal mark can't change under figures that are kept as typed."""


@transaction.atomic
def open_logbook(
    *, home: Path, code: str, at: datetime, shop: Mapping[str, str], supervisor: Mapping[str, object], password: str
) -> Person:
    """Make the shop and its first supervisor; the code is used up.

    Parameters
    ----------
    home : Path
        Where the code's hash is kept.
    code : str
        As typed.
    shop, supervisor : Mapping
        Fields of the shop, and of the person without password.

    Raises
    ------
    OpenAlready, NotOpened, ValidationError
    """
    if Person.objects.exists():
        raise OpenAlready(open_already())
    if not start_code.is_right(home, code):
        raise NotOpened(
            _("This isn't the code that the program printed last: it stands where the program was started.")
        )
    try:
        with transaction.atomic():
            FirstStart.objects.create(opened_at=at)  # of two tablets at one moment the second waits here, then fails
    except IntegrityError:
        raise OpenAlready(open_already()) from None
    kept = Shop(**shop, created_at=at)
    kept.full_clean()
    kept.save()
    first = Person(**{**supervisor, "is_supervisor": True}, shop=kept)
    keep_person(first, password)
    transaction.on_commit(lambda: start_code.use_up(home))
    return first


def open_already() -> str:
    """Say that another tablet was quicker."""
    return _("This logbook was opened already, perhaps a moment ago from another tablet.")


@transaction.atomic
def add_person(*, by: Person, person: Person, password: str) -> Person:
    """Add a person to a supervisor's shop, with a password that the person is asked to replace.

    Raises
    ------
    NotTheirs, ValidationError
    """
    only_a_supervisor(by)
    person.shop = by.shop
    person.password_is_given = True
    keep_person(person, password)
    return person


@transaction.atomic
def change_person(*, by: Person, person: Person, roles: Mapping[str, bool], may_sign_in: bool) -> None:
    """Give a person other roles, and let them sign in or not.

    Raises
    ------
    NotTheirs, NobodyWouldDecide, ValidationError
    """
    only_a_supervisor(by, over=person)
    Shop.objects.select_for_update().get(pk=person.shop_id)  # two supervisors who dismiss each other go one by one
    others = Person.objects.filter(shop_id=person.shop_id).exclude(pk=person.pk)
    if not (roles.get("supervisor") and may_sign_in) and not others.who_may_decide().exists():
        raise NobodyWouldDecide(
            _("%(name)s is the only supervisor who may sign in; without one nobody could decide or add people. Make "
              "somebody else a supervisor first.") % {"name": person.name}
        )  # fmt: skip
    for role in ROLES:
        setattr(person, f"is_{role}", bool(roles.get(role)))
    person.is_active = may_sign_in
    person.full_clean()
    person.save()


@transaction.atomic
def give_password(*, by: Person, person: Person, password: str) -> None:
    """Give a person a new password; it ends their sessions, and a wait after wrong tries.

    Raises
    ------
    NotTheirs
    """
    only_a_supervisor(by, over=person)
    person.set_password(password)
    person.password_is_given = by != person
    person.save()
    forget_tries(name=person.name)


@transaction.atomic
def choose_password(*, person: Person, current: str, password: str) -> None:
    """Let a person choose their own password, which signs for them.

    Raises
    ------
    WrongPassword
    """
    if not person.check_password(current):
        raise WrongPassword(_("This isn't your password now; ask a supervisor for a new one if it is lost."))
    person.set_password(password)
    person.password_is_given = False
    person.save()


@transaction.atomic
def change_shop(*, by: Person, ways: Mapping[str, str]) -> Shop:
    """Change the shop's ways; what was judged before stays as it was judged.

    Raises
    ------
    NotTheirs, FiguresTyped, ValidationError
    """
    only_a_supervisor(by)
    shop = Shop.objects.select_for_update().get(pk=by.shop_id)
    if ways.get(CHANGED_ONLY_WHILE_EMPTY, shop.decimal_mark) != shop.decimal_mark and shop.keeps_rows():
        raise FiguresTyped(
            _("The decimal mark stays as it is: figures are kept as typed here, and would be read otherwise.")
        )
    for way, value in ways.items():
        setattr(shop, way, value)
    shop.full_clean()
    shop.save()
    return shop


def only_a_supervisor(by: Person, over: Person | None = None) -> None:
    """Refuse anybody who isn't a supervisor of the shop."""
    if not by.is_active or not by.has_role("supervisor") or (over is not None and over.shop_id != by.shop_id):
        raise NotTheirs(_("%(name)s can't do that: a supervisor of this shop can.") % {"name": by.name})


def keep_person(person: Person, password: str) -> None:
    """Write a new person once all that must hold holds."""
    person.set_password(password)
    person.full_clean()
    person.save()
