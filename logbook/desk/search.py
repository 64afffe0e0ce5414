"""Finds engines, parts, jobs and gauges of a person's shop by name, serial, mark, number or title."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from django.db.models import Model, Prefetch, Q, QuerySet
from django.utils.translation import gettext as _

from logbook.engines.models import Engine, Fitting, Part
from logbook.gauges.models import Gauge
from logbook.people.models import Person
from logbook.review.queries import orders_open_to

from .navigation import address_for

MOST_SHOWN = 25  # of a sort; with more, the page asks for another word
MOST_WORDS = 8
LONGEST = 120  # signs of what is looked for
LARGEST_NUMBER = 10**9  # no job's number is above it


@dataclass(frozen=True)
class Hit:
    """Something found: its address, what it is called, and what is worth knowing beside."""

    address: str
    title: str
    beside: str


@dataclass(frozen=True)
class Sort:
    """What was found of one sort; `has_more` when not all of it is shown."""

    title: str
    hits: Sequence[Hit]
    has_more: bool


def search(person: Person, text: str) -> list[Sort]:
    """Find what has every word in it; the number of queries doesn't grow with what is found.

    Parameters
    ----------
    text : str
        As typed; capitals don't matter. Without a word in it nothing is found.
    """
    words = text[:LONGEST].split()[:MOST_WORDS]
    found = [sort(person, words) for sort in (engines, parts, jobs, gauges)] if words else []
    return [one for one in found if one.hits]


def engines(person: Person, words: Sequence[str]) -> Sort:
    """Engines by name or serial."""
    rows = Engine.objects.seen_by(person).filter(every_word(words, "name", "serial"))
    return shown(_("Engines"), rows, lambda one: Hit(
        address_for(person, "engines:engine", pk=one.pk), one.name,
        joined(one.serial, one.get_layout_display(), one.get_duty_display()),
    ))  # fmt: skip


def parts(person: Person, words: Sequence[str]) -> Sort:
    """Parts by what they are, their serial or mark, or the engine that they sit in."""
    sits = Fitting.objects.filter(taken_off_at=None).select_related("engine")

    def in_engine_or_kind(word: str) -> Q:
        return of_kind(word) | Q(pk__in=sits.filter(engine__name__icontains=word).values("part"))

    rows = Part.objects.seen_by(person).filter(every_word(words, "mark", "note", also=in_engine_or_kind))
    return shown(_("Parts"), rows.prefetch_related(Prefetch("fittings", sits, to_attr="sits")), lambda one: Hit(
        address_for(person, "engines:part", pk=one.pk), str(one),
        joined(*(f"{sat.engine}, {sat.position}" for sat in one.sits)) or _("sits in no engine"),
    ))  # fmt: skip


def jobs(person: Person, words: Sequence[str]) -> Sort:
    """Jobs by number or title, or by their engine or part, the newest first."""
    told = every_word(words, "title", "engine__name", "engine__serial", "part__mark", also=numbered)
    return shown(_("Jobs"), orders_open_to(person).filter(told).order_by("-number"), lambda one: Hit(
        address_for(person, "work:job", number=one.number), str(one),
        joined(str(one.engine or one.part), one.get_state_display(), f"{one.opened_at:%Y-%m-%d}"),
    ))  # fmt: skip


def gauges(person: Person, words: Sequence[str]) -> Sort:
    """Gauges by mark or title."""
    rows = Gauge.objects.seen_by(person).filter(every_word(words, "mark", "title"))
    return shown(_("Gauges"), rows, lambda one: Hit(
        address_for(person, "gauges:gauge", pk=one.pk), str(one),
        joined(one.get_quantity_display(), _("retired") if one.retired_at else ""),
    ))  # fmt: skip


def every_word(words: Sequence[str], *fields: str, also: Callable[[str], Q] | None = None) -> Q:
    """Each word stands in one of the fields, or is matched otherwise."""
    told = Q()
    for word in words:
        either = also(word) if also else Q()
        for field in fields:
            either |= Q(**{f"{field}__icontains": word})
        told &= either
    return told


def of_kind(word: str) -> Q:
    """Parts of a kind that is called so."""
    named = [kind for kind, label in Part.Kind.choices if word.casefold() in str(label).casefold()]
    return Q(kind__in=named)


def numbered(word: str) -> Q:
    """The job of a number, when the word is one."""
    is_number = word.isascii() and word.isdigit() and int(word) < LARGEST_NUMBER
    return Q(number=int(word)) if is_number else Q()


def shown(title: str, rows: QuerySet, hit: Callable[[Model], Hit]) -> Sort:
    """The first of the rows as hits; one more is looked up to know whether there are more."""
    found = list(rows[: MOST_SHOWN + 1])
    return Sort(title, [hit(one) for one in found[:MOST_SHOWN]], len(found) > MOST_SHOWN)


def joined(*told: str) -> str:
    """What is known, with dots between."""
    return " · ".join(str(one) for one in told if one)
