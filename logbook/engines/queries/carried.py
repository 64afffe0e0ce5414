"""What was carried over from meter readings: hours at which parts were fitted, and what ran before a later meter."""

from collections.abc import Sequence
from dataclasses import dataclass, field
from datetime import datetime

from logbook.engines.models import Engine, Fitting, Meter, MeterReading

MOMENTS = {"fitted_total": "fitted_at", "taken_off_total": "taken_off_at"}


@dataclass(frozen=True)
class Carried:
    """Totals of an engine that were carried over from a reading of a unit.

    Attributes
    ----------
    fittings : list of (Fitting, name of the total, MeterReading)
    meters : list of (Meter, MeterReading)
        Meters that took another's place, in the order of fitting, with the reading they took over at.
    """

    fittings: list[tuple[Fitting, str, MeterReading]] = field(default_factory=list)
    meters: list[tuple[Meter, MeterReading]] = field(default_factory=list)


def standing_readings(engine: Engine, unit: str) -> list[MeterReading]:
    """Standing readings of an engine's meters for a unit, oldest first."""
    rows = MeterReading.objects.standing().filter(meter__engine=engine, meter__unit=unit)
    return list(rows.select_related("meter").order_by("taken_at", "pk"))


def read_by(readings: Sequence[MeterReading], at: datetime | None) -> MeterReading | None:
    """The last of some readings before or at a moment."""
    return next((one for one in reversed(readings) if at and one.taken_at <= at), None)


def carried_over(engine: Engine, unit: str) -> Carried:
    """Find the totals that say what a reading says; one typed otherwise was not carried over."""
    readings = standing_readings(engine, unit)
    meters, last_of = [], None
    for meter in Meter.objects.filter(engine=engine, unit=unit).order_by("fitted_at", "pk"):
        if last_of and meter.engine_before == last_of.total:
            meters.append((meter, last_of))
        last_of = next((one for one in reversed(readings) if one.meter_id == meter.pk), None)
    if unit != Meter.Unit.HOURS:
        return Carried(meters=meters)
    fittings = []
    for fitting in Fitting.objects.filter(engine=engine).select_related("part", "engine").order_by("fitted_at", "pk"):
        for total, moment in MOMENTS.items():
            reading = read_by(readings, getattr(fitting, moment))
            if reading and getattr(fitting, total) == reading.total:
                fittings.append((fitting, total, reading))
    return Carried(fittings, meters)


@dataclass(frozen=True)
class Dependants:
    """What stands on one meter reading.

    Attributes
    ----------
    fitted, taken_off : list of Fitting
        Parts whose hours at fitting, or at taking off, follow from it.
    meters : list of Meter
        Later meters: what the engine had run before them follows from it.
    jobs : list of str
        Jobs counted in its unit, whose dates are projected from it.
    """

    fitted: list[Fitting] = field(default_factory=list)
    taken_off: list[Fitting] = field(default_factory=list)
    meters: list[Meter] = field(default_factory=list)
    jobs: list[str] = field(default_factory=list)

    def __bool__(self) -> bool:
        return bool(self.fitted or self.taken_off or self.meters or self.jobs)


def depends_on(reading: MeterReading) -> Dependants:
    """Find what stands on a reading: totals carried over from it or from one that follows from it, jobs counted by it."""
    meter = reading.meter
    carried = carried_over(meter.engine, meter.unit)
    hit, later = {reading.pk}, []
    if reading.taken_at == meter.fitted_at and reading.shows == meter.shows_at_fitting:
        hit |= set(meter.readings.standing().values_list("pk", flat=True))  # all are counted from what it showed first
    for fitted, took_over_at in carried.meters:
        if took_over_at.pk in hit:
            later.append(fitted)
            hit |= set(fitted.readings.standing().values_list("pk", flat=True))
    of = {
        name: [fitting for fitting, total, at in carried.fittings if total == name and at.pk in hit] for name in MOMENTS
    }
    jobs = [one.title for one in meter.engine.intervals.filter(is_stopped=False).order_by("title")
            if getattr(one, one.LENGTHS[meter.unit]) is not None]  # fmt: skip
    return Dependants(of["fitted_total"], of["taken_off_total"], later, jobs)
