"""What meters showed: totals over replaced meters, and average use."""

from collections import defaultdict
from collections.abc import Iterable
from datetime import datetime

from django.db.models import Prefetch, QuerySet

from logbook.engines.models import Engine, Meter, MeterReading
from logbook.engines.use import Shown, Use, average_use
from measurements.sentence import Sentence


def shown(engines: Iterable[int], at: datetime) -> dict[tuple[int, str], list[Shown]]:
    """What engines had run in all, by engine and unit, oldest first; without superseded readings."""
    readings = MeterReading.objects.standing().filter(meter__engine__in=list(engines), taken_at__lte=at)
    found: dict[tuple[int, str], list[Shown]] = defaultdict(list)
    for reading in readings.select_related("meter").order_by("taken_at", "pk"):
        found[reading.meter.engine_id, reading.meter.unit].append(Shown(reading.taken_at, reading.total))
    return dict(found)


def total_at(engine: Engine, unit: str, at: datetime) -> float | None:
    """What an engine had run in all by the last reading before or at a moment; None without one."""
    rows = MeterReading.objects.standing().filter(meter__engine=engine, meter__unit=unit, taken_at__lte=at)
    last = rows.select_related("meter").order_by("taken_at", "pk").last()
    return last.total if last else None


def hours_at(engine: Engine, at: datetime) -> float | None:
    """Hours an engine had run in all by its last reading before or at a moment; None without one."""
    return total_at(engine, Meter.Unit.HOURS, at)


def latest_total(engine: Engine, unit: str) -> float | None:
    """What an engine has run in all by its last reading; None without one."""
    last = MeterReading.objects.standing().filter(meter__engine=engine, meter__unit=unit)
    reading = last.select_related("meter").order_by("taken_at", "pk").last()
    return reading.total if reading else None


def usage(engine: Engine, unit: str, at: datetime) -> Use | Sentence:
    """Average use a day as it is known at a moment; the sentence says why it can't be told."""
    return average_use(shown([engine.pk], at).get((engine.pk, unit), []))


def usages(engines: Iterable[int], at: datetime) -> dict[tuple[int, str], Use | Sentence]:
    """Average use of several engines by engine and unit, in one query; what has no reading is left out."""
    return {key: average_use(readings) for key, readings in shown(engines, at).items()}


def meters_of(engine: Engine) -> QuerySet[Meter]:
    """An engine's meters with every reading, the newest first, those now fitted before those replaced."""
    readings = MeterReading.objects.select_related("recorded_by", "supersedes", "superseded_by", "meter")
    newest_first = Prefetch("readings", readings.order_by("-taken_at", "-pk"))
    return engine.meters.prefetch_related(newest_first).order_by("unit", "-fitted_at")


def neighbours(meter: Meter, at: datetime, besides: MeterReading | None = None) -> tuple[
    MeterReading | None, MeterReading | None
]:  # fmt: skip
    """The standing readings of a meter just before or at a moment, and just after it."""
    rows = meter.readings.standing().exclude(pk=besides.pk if besides else None).select_related("meter")
    before = rows.filter(taken_at__lte=at).order_by("taken_at", "pk").last()
    return before, rows.filter(taken_at__gt=at).order_by("taken_at", "pk").first()
