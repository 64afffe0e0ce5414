"""Nobody decides on what they took: who may decide instead, and what the page says where nobody else can."""

from collections.abc import Sequence

from django.utils.translation import gettext as _
from django.utils.translation import ngettext

from logbook.people.models import Person

from .queries import has_second_person, supervisors_besides


def is_unchecked(by: Person, took: Sequence[Person]) -> bool:
    """Tell whether this person may decide on their own readings, for the shop has nobody else; the sheet then says so."""
    return by in took and not has_second_person(by)


def why_not(by: Person, took: Sequence[Person]) -> str:
    """Say why this person can't decide on readings, and who can; empty when they may."""
    if not by.has_role("supervisor"):
        return _("Only a supervisor decides; %(who)s") % {"who": who_can(by, took)}
    if by not in took or not has_second_person(by):
        return ""
    return _("You measured or keyed this yourself, so you can't decide on it; %(who)s") % {"who": who_can(by, took)}


def who_can(by: Person, took: Sequence[Person]) -> str:
    """Say who can decide on readings, or who is missing and how to add them."""
    able = supervisors_besides(by, took)
    if able:
        return _("%(names)s can.") % {"names": listed(able, _("or"))}
    return _("no other supervisor is here: add one on the page “People”, or give the role to somebody there.")


def barred_in_words(took: Sequence[Person]) -> str:
    """Say who can't decide on readings, for they took them."""
    told = ngettext(
        "%(names)s measured or keyed this and can't decide on it.",
        "%(names)s measured or keyed this and can't decide on it.",
        len(took),
    )
    return told % {"names": listed(took, _("and"))} if took else ""


def listed(people: Sequence[Person], joiner: str) -> str:
    """Names in a row, the last joined by a word."""
    names = [person.name for person in people]
    return names[0] if len(names) == 1 else f"{', '.join(names[:-1])} {joiner} {names[-1]}"
