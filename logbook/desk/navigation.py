"""The line under the title block: where this person may go from here, and no link that would be refused."""

from dataclasses import dataclass

from django.http import HttpRequest
from django.urls import NoReverseMatch, Resolver404, resolve, reverse
from django.utils.translation import gettext_lazy as _

from logbook.people.models import Person

PLACES = (
    ("work:due", _("Due")),
    ("work:jobs", _("Jobs")),
    ("review:to_decide", _("To decide")),
    ("engines:engines", _("Engines")),
    ("engines:parts", _("Parts")),
    ("gauges:gauges", _("Gauges")),
    ("desk:search", _("Search")),
    ("people:people", _("People")),
    ("people:shop", _("Shop")),
)


@dataclass(frozen=True)
class Link:
    """A place, its address, and whether the page shown is it ("page") or lies inside it ("true")."""

    label: str
    address: str
    current: str = ""


def navigation(request: HttpRequest) -> dict[str, object]:
    """Context processor: the links are made only where a page shows them."""
    return {"navigation": lambda: links_for(request)}


def links_for(request: HttpRequest) -> list[Link]:
    """Give the links of whoever is signed in; nobody has none."""
    person = getattr(request, "user", None)
    if person is None or not person.is_authenticated:
        return []
    reached = ((label, address_for(person, name)) for name, label in PLACES)
    return [Link(label, address, current(request.path, address)) for label, address in reached if address]


def address_for(person: Person, name: str, **where: object) -> str:
    """Give the address of a page if it exists and the person has a role that opens it; else nothing."""
    try:
        address = reverse(name, kwargs=where)
        roles = getattr(resolve(address).func, "open_to", ())
    except (NoReverseMatch, Resolver404):
        return ""
    return address if not roles or person.has_role(*roles) else ""


def current(path: str, address: str) -> str:
    """Tell how the page shown stands to a link."""
    if path == address:
        return "page"
    return "true" if path.startswith(address) else ""
