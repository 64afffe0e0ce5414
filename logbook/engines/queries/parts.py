"""Where parts sit, and the hours they have run, which follow them from engine to engine."""

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import datetime

from django.db.models import Prefetch, QuerySet
from django.utils.translation import gettext as _

from logbook.engines.models import Engine, Fitting, Part
from logbook.people.models import Person

from .engines import with_standing

BY_CYLINDER = (Part.Kind.LINER, Part.Kind.PISTON, Part.Kind.INJECTOR)


@dataclass(frozen=True)
class PartHours:
    """Hours a part has run; None, with the reason, where they can't be told."""

    hours: float | None
    why_not: str = ""


def parts_with_places(person: Person) -> QuerySet[Part]:
    """A person's parts with every fitting and its engine, the newest first."""
    fittings = Fitting.objects.select_related("engine").order_by("-fitted_at", "-pk")
    return Part.objects.seen_by(person).prefetch_related(Prefetch("fittings", fittings))


def sitting_in(engine: Engine) -> QuerySet[Fitting]:
    """What sits in an engine now, by position."""
    return engine.fittings.filter(taken_off_at=None).select_related("part").order_by("position", "part__kind")


def occupant(engine: Engine, kind: str, position: str) -> Fitting | None:
    """The part of a kind that sits at a position now."""
    rows = engine.fittings.filter(taken_off_at=None, part__kind=kind, position__iexact=position)
    return rows.select_related("part").first()


def hours_of(parts: Iterable[Part], at: datetime) -> dict[int, PartHours]:
    """Hours that parts have run by a moment: what they had when they came, and each stay in an engine.

    Fittings are taken from the parts (`parts_with_places` fetches them); one query for all meters.
    """
    parts = list(parts)
    engines = {fitting.engine_id for part in parts for fitting in part.fittings.all() if fitting.taken_off_at is None}
    totals = dict(with_standing(Engine.objects.filter(pk__in=engines), at).values_list("pk", "hours"))
    return {part.pk: _added(part, totals) for part in parts}


def _added(part: Part, totals: dict[int, float]) -> PartHours:
    hours = part.hours_when_new_here
    for fitting in part.fittings.all():
        ends = totals.get(fitting.engine_id) if fitting.taken_off_at is None else fitting.taken_off_total
        if None in (ends, fitting.fitted_total):
            return PartHours(None, _("no hours are known of its time in %(engine)s") % {"engine": fitting.engine})
        if ends < fitting.fitted_total:
            said = {"engine": fitting.engine, "now": f"{ends:.12g}", "then": f"{fitting.fitted_total:.12g}"}
            return PartHours(None, _("%(engine)s stands at %(now)s h, below the %(then)s h it was fitted at") % said)
        hours += ends - fitting.fitted_total
    return PartHours(hours)


def positions_of(engine: Engine, kind: str) -> list[str]:
    """Positions that a kind of part usually has on an engine, to pick from; any other may be typed."""
    cylinders = [f"cylinder {number}" for number in range(1, engine.cylinders + 1)]
    if kind in BY_CYLINDER:
        return cylinders
    if kind == Part.Kind.HEAD:
        banks = [f"bank {'AB'[place]}" for place in range(2)] if engine.layout != Engine.Layout.INLINE else ["engine"]
        return cylinders + banks
    if kind == Part.Kind.SHELL:
        pins = range(1, engine.cylinders + 1)
        mains = range(1, engine.cylinders + 2)
        halves = ("upper", "lower")
        return [f"main {n} {half}" for n in mains for half in halves] + [
            f"crankpin {n} {half}" for n in pins for half in halves
        ]
    return [*cylinders, "engine"]
