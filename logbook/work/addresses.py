"""Addresses in the rooms above this one, which it links to without knowing them."""

from django.urls import NoReverseMatch, Resolver404, resolve, reverse

from logbook.people.models import Person


def address_for(person: Person, name: str, *parts: object) -> str:
    """The address of a page, if it is there and this person's roles open it; else nothing.

    Parameters
    ----------
    name : str
        The page's name, such as "review:decide".
    parts : object
        What its address is made of, in its order.
    """
    try:
        address = reverse(name, args=parts)
        roles = getattr(resolve(address).func, "open_to", ())
    except (NoReverseMatch, Resolver404):
        return ""
    return address if not roles or person.has_role(*roles) else ""
