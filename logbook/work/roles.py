"""Who may do what on a work order: the guard that every service begins with."""

from django.utils.translation import gettext as _
from django.utils.translation import ngettext

from logbook.core.refusal import Refused
from logbook.people.models import OfShop, Person


class NotTheirs(Refused):
    """Somebody asked for what their roles don't give them."""


def needs(by: Person, row: OfShop, *roles: str) -> None:
    """Refuse a person of another shop, one who left, or one without any of some roles."""
    if not by.is_active or by.shop_id != row.shop_id:
        raise NotTheirs(_("%(person)s has no say in this shop.") % {"person": by.name})
    if not by.has_role(*roles):
        told = {"person": by.name, "roles": ", ".join(roles)}
        raise NotTheirs(
            ngettext(
                "%(person)s can't do that: it takes the role %(roles)s.",
                "%(person)s can't do that: it takes one of the roles %(roles)s.",
                len(roles),
            )
            % told
        )
