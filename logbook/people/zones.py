"""Time zones to choose from: a handful that stand for most shops first, then every other one by continent."""

from itertools import groupby
from zoneinfo import available_timezones

from django.utils.translation import gettext as _

USUAL = (
    "UTC", "America/Los_Angeles", "America/Denver", "America/Chicago", "America/New_York", "America/Sao_Paulo",
    "Europe/London", "Europe/Berlin", "Europe/Helsinki", "Africa/Johannesburg", "Asia/Dubai", "Asia/Kolkata",
    "Asia/Singapore", "Asia/Tokyo", "Australia/Sydney", "Pacific/Auckland",
)  # fmt: skip
PLACES = {"Africa", "America", "Antarctica", "Arctic", "Asia", "Atlantic", "Australia", "Europe", "Indian", "Pacific"}

Choices = list[tuple[str, str | list[tuple[str, str]]]]


def zone_choices() -> Choices:
    """Give the choices of the form: nothing chosen, the usual ones, then all by continent."""
    every = sorted(zone for zone in available_timezones() if zone.split("/")[0] in PLACES and "/" in zone)
    grouped = [(place, [named(zone) for zone in zones]) for place, zones in groupby(every, key=continent)]
    return [("", _("choose …")), (_("often chosen"), [named(zone) for zone in USUAL]), *grouped]


def continent(zone: str) -> str:
    """Give the first part of a zone's name.

    >>> continent("America/Argentina/Ushuaia")
    'America'
    """
    return zone.split("/")[0]


def named(zone: str) -> tuple[str, str]:
    """Give a zone with its name as people read it.

    >>> named("America/New_York")
    ('America/New_York', 'America/New York')
    """
    return zone, zone.replace("_", " ")
