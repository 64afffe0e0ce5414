"""What every service of this room asks first: may this person, is it their shop, is the moment past."""

from collections.abc import Mapping, Sequence
from datetime import datetime
from typing import TypeVar

from django.core.exceptions import ValidationError
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import OfShop, Person

Row = TypeVar("Row", bound=OfShop)
SUPERVISORS = ("supervisor",)
AT_THE_ENGINE = ("technician", "supervisor")
KEEP_LIMITS = ("toolroom", "supervisor")
KEEP_PARTS = ("technician", "supervisor", "toolroom")
WHO_COMPARES = ("technician", "toolroom", "supervisor")


class EngineryRefused(Refused):
    """Something asked of this room that can't be done.

    Attributes
    ----------
    at_fields : list of (field, sentence)
        What is wrong at which field of the form; empty when it is wrong as a whole.
    asks : bool
        Whether it is a question: with a remark it is done all the same.
    """

    asks = False

    def __init__(self, said: str = "", at_fields: Sequence[tuple[str, str]] = ()) -> None:
        self.at_fields = list(at_fields)
        super().__init__(said or " ".join(sentence for _field, sentence in self.at_fields))

    def at(self, fields: Mapping[str, str], refused: type["EngineryRefused"]) -> "EngineryRefused":
        """The same as another act refuses it, whose fields have other names."""
        told = [(fields.get(field, field), said) for field, said in self.at_fields]
        other = refused(str(self), told)
        other.asks = self.asks
        return other


def refuse_others(by: Person, roles: Sequence[str], refused: type[EngineryRefused], *rows: OfShop) -> None:
    """Refuse a person without one of the roles, and rows of another shop."""
    if not by.has_role(*roles):
        said = {"who": by, "roles": _(" or ").join(roles)}
        raise refused(_("This is done by a %(roles)s; %(who)s has no such role.") % said)
    if any(row.shop_id != by.shop_id for row in rows):
        raise refused(_("This belongs to another shop."))


def refuse_moments_to_come(moment: datetime, at: datetime, field: str, refused: type[EngineryRefused]) -> None:
    """Refuse a moment that is still to come."""
    if moment > at:
        raise refused(at_fields=[(field, _("That moment is still to come; write when it happened."))])


def checked(row: Row, refused: type[EngineryRefused]) -> Row:
    """Give a row back when all that must hold of it holds; else refuse, each sentence at its field."""
    try:
        row.full_clean()
    except ValidationError as error:
        told = [(field, said) for field, sentences in error.message_dict.items() for said in sentences]
        raise refused(at_fields=told) from error
    return row


def saved(row: Row, refused: type[EngineryRefused]) -> Row:
    """Check a row and save it."""
    checked(row, refused).save()
    return row
