"""Engines taken into the logbook and changed; times out of service."""

from datetime import datetime

from django.db import transaction
from django.db.models import Q
from django.utils.translation import gettext as _

from logbook.engines import queries
from logbook.engines.models import Engine, OutOfService
from logbook.engines.papers import contradictions
from logbook.engines.words import in_words
from logbook.people.models import Person

from .guards import SUPERVISORS, EngineryRefused, checked, refuse_moments_to_come, refuse_others, saved

STATIONS_HANG_ON = ("layout", "cylinders", "intake_valves", "exhaust_valves", "bridges")


class EngineRefused(EngineryRefused):
    """An engine's papers that contradict themselves, or a change that would orphan what was measured."""


@transaction.atomic
def add_engine(*, by: Person, at: datetime, **papers: object) -> Engine:
    """Take an engine into the logbook; `papers` are the fields of `Engine`, what isn't known left out."""
    refuse_others(by, SUPERVISORS, EngineRefused)
    return _checked_and_saved(Engine(shop=by.shop, created_at=at, **papers))


@transaction.atomic
def change_engine(*, by: Person, engine: Engine, **papers: object) -> Engine:
    """Change an engine's papers; what was judged before keeps its judgement."""
    refuse_others(by, SUPERVISORS, EngineRefused, engine)
    kept = Engine.objects.select_for_update().get(pk=engine.pk)
    changed = [name for name in STATIONS_HANG_ON if name in papers and papers[name] != getattr(kept, name)]
    if changed and queries.was_measured(kept):
        said = _("Readings were taken on this engine, and its stations hang on this: it stays as it is. An engine that "
                 "was described wrongly is added anew under another name.")  # fmt: skip
        raise EngineRefused(at_fields=[(name, said) for name in changed])
    for name, value in papers.items():
        setattr(kept, name, value)
    return _checked_and_saved(kept)


def _checked_and_saved(engine: Engine) -> Engine:
    checked(engine, EngineRefused)
    if found := contradictions(engine):
        raise EngineRefused(at_fields=[(field, in_words(sentence)) for field, sentence in found])
    engine.save()
    return engine


@transaction.atomic
def record_out_of_service(
    *, by: Person, at: datetime, engine: Engine, from_at: datetime, who_was_told: str,
    until_at: datetime | None = None, what_stood_in: str = "",
) -> OutOfService:  # fmt: skip
    """Record a time out of service: from when, who was told, what stood in; its end when it is known."""
    refuse_others(by, SUPERVISORS, EngineRefused, engine)
    time_out = OutOfService(shop=engine.shop, engine=engine)
    return _written(time_out, by, at, from_at=from_at, until_at=until_at, who_was_told=who_was_told,
                    what_stood_in=what_stood_in)  # fmt: skip


@transaction.atomic
def change_out_of_service(*, by: Person, at: datetime, time_out: OutOfService, **told: object) -> OutOfService:
    """End a time out of service, or mend what was recorded of it."""
    refuse_others(by, SUPERVISORS, EngineRefused, time_out)
    return _written(OutOfService.objects.select_for_update().get(pk=time_out.pk), by, at, **told)


def _written(time_out: OutOfService, by: Person, at: datetime, **told: object) -> OutOfService:
    for name, value in told.items():
        setattr(time_out, name, value)
    time_out.recorded_by, time_out.recorded_at = by, at
    refuse_moments_to_come(time_out.from_at, at, "from_at", EngineRefused)
    if other := _overlapping(time_out):
        raise EngineRefused(at_fields=[("from_at", _("The engine is out of service already then, since %(from)s.")
                                        % {"from": f"{other.from_at:%Y-%m-%d}"})])  # fmt: skip
    return saved(time_out, EngineRefused)


def _overlapping(time_out: OutOfService) -> OutOfService | None:
    others = OutOfService.objects.filter(engine=time_out.engine_id).exclude(pk=time_out.pk)
    others = others.filter(Q(until_at=None) | Q(until_at__gt=time_out.from_at))
    if time_out.until_at:
        others = others.filter(from_at__lt=time_out.until_at)
    return others.first()
