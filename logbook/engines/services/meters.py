"""Meters fitted, read, replaced; a wrong reading superseded, with what stood on it carried along."""

from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.engines import queries
from logbook.engines.models import Engine, Fitting, Meter, MeterReading
from logbook.engines.use import Use
from logbook.people.models import Person

from .guards import AT_THE_ENGINE, SUPERVISORS, EngineryRefused, refuse_moments_to_come, refuse_others, saved

FAR_ABOVE = 5  # times the average use: a digit too many, or the point left out, makes ten
MOST_HOURS_A_DAY = 24


class MeterRefused(EngineryRefused):
    """Something asked of a meter that can't be done."""


class MeterAsks(MeterRefused):
    """A reading that is likely a slip: it is kept only with a remark that says why it stands all the same."""

    asks = True


@transaction.atomic
def fit_meter(
    *, by: Person, at: datetime, engine: Engine, unit: str, fitted_at: datetime, shows: float = 0.0,
    engine_before: float = 0.0, mark: str = "",
) -> Meter:  # fmt: skip
    """Fit a meter to an engine that has none for this unit; what it shows then is its first reading.

    Parameters
    ----------
    shows : float
        What the meter shows when fitted [unit].
    engine_before : float
        What the engine had run in all by then [unit].
    """
    refuse_others(by, SUPERVISORS, MeterRefused, engine)
    refuse_moments_to_come(fitted_at, at, "fitted_at", MeterRefused)
    meter = saved(Meter(shop=engine.shop, engine=engine, unit=unit, mark=mark, shows_at_fitting=shows,
                         engine_before=engine_before, fitted_at=fitted_at), MeterRefused)  # fmt: skip
    saved(_reading(by, at, meter, shows, fitted_at), MeterRefused)
    return meter


@transaction.atomic
def read_meter(
    *, by: Person, at: datetime, meter: Meter, shows: float, taken_at: datetime, remark: str = ""
) -> MeterReading:
    """Record what a meter shows; one that runs backward or far ahead is asked about, and kept with a remark.

    Raises
    ------
    MeterAsks
        When it is likely a slip and nothing was remarked.
    """
    refuse_others(by, AT_THE_ENGINE, MeterRefused, meter)
    refuse_moments_to_come(taken_at, at, "taken_at", MeterRefused)
    _refuse_while_not_fitted(meter, taken_at)
    question = slip_question(meter, shows, taken_at)
    if question and not remark.strip():
        raise MeterAsks(at_fields=[("shows", question)])
    return saved(_reading(by, at, meter, shows, taken_at, remark=remark.strip() if question else ""), MeterRefused)


@transaction.atomic
def replace_meter(
    *, by: Person, at: datetime, meter: Meter, replaced_at: datetime, last_shows: float, new_shows: float = 0.0,
    new_mark: str = "", remark: str = "",
) -> Meter:  # fmt: skip
    """Put another meter in a meter's place, with the old one's last reading and the new one's first, in one act."""
    refuse_others(by, SUPERVISORS, MeterRefused, meter)
    meter = Meter.objects.select_for_update().get(pk=meter.pk)
    if meter.replaced_at:
        raise MeterRefused(_("This meter was replaced already, on %(on)s.") % {"on": f"{meter.replaced_at:%Y-%m-%d}"})
    refuse_moments_to_come(replaced_at, at, "replaced_at", MeterRefused)
    if meter.readings.standing().filter(taken_at__gt=replaced_at).exists():
        said = _("The meter was read after that moment; it can't have been replaced before.")
        raise MeterRefused(at_fields=[("replaced_at", said)])
    try:
        last = read_meter(by=by, at=at, meter=meter, shows=last_shows, taken_at=replaced_at, remark=remark)
    except MeterRefused as refused:
        raise refused.at({"shows": "last_shows", "taken_at": "replaced_at"}, MeterRefused) from refused
    meter.replaced_at = replaced_at
    meter.save(update_fields=["replaced_at"])
    new = saved(Meter(shop=meter.shop, engine=meter.engine, unit=meter.unit, mark=new_mark, shows_at_fitting=new_shows,
                       engine_before=last.total, fitted_at=replaced_at), MeterRefused)  # fmt: skip
    saved(_reading(by, at, new, new_shows, replaced_at), MeterRefused)
    return new


@transaction.atomic
def supersede_reading(
    *, by: Person, at: datetime, reading: MeterReading, shows: float, reason: str, taken_at: datetime | None = None,
    remark: str = "",
) -> MeterReading:  # fmt: skip
    """Record the right reading in place of a wrong one, which stays to be seen with the reason.

    What was carried over from the wrong one (hours at which parts were fitted or taken off, what the engine had run
    before a later meter) is carried over from the right one.
    """
    refuse_others(by, AT_THE_ENGINE, MeterRefused, reading)
    if later := MeterReading.objects.filter(supersedes=reading).first():
        raise MeterRefused(_("This reading was corrected already, to %(shows)s; correct that one instead.")
                           % {"shows": f"{later.shows:.12g}"})  # fmt: skip
    if not reason.strip():
        raise MeterRefused(at_fields=[("reason", _("Nothing was written; say why the earlier reading was wrong."))])
    meter, taken_at = reading.meter, taken_at or reading.taken_at
    refuse_moments_to_come(taken_at, at, "taken_at", MeterRefused)
    _refuse_while_not_fitted(meter, taken_at)
    question = slip_question(meter, shows, taken_at, besides=reading)
    if question and not remark.strip():
        raise MeterAsks(at_fields=[("shows", question)])
    carried = queries.carried_over(meter.engine, meter.unit)
    right = saved(_reading(by, at, meter, shows, taken_at, supersedes=reading, reason=reason.strip(),
                            remark=remark.strip() if question else ""), MeterRefused)  # fmt: skip
    if reading.taken_at == meter.fitted_at and reading.shows == meter.shows_at_fitting:
        meter.shows_at_fitting = shows  # the engine's total at the fitting stays what it was
        meter.save(update_fields=["shows_at_fitting"])
    _carry_over_again(meter.engine, meter.unit, carried)
    return right


def slip_question(meter: Meter, shows: float, taken_at: datetime, besides: MeterReading | None = None) -> str:
    """Ask about a reading that runs backward, or further ahead than the engine can have run; empty when all is well."""
    before, after = queries.neighbours(meter, taken_at, besides)
    for other, is_wrong in ((before, before and shows < before.shows), (after, after and shows > after.shows)):
        if is_wrong:
            said = {"read": f"{shows:.12g}", "other": f"{other.shows:.12g}", "on": f"{other.taken_at:%Y-%m-%d}",
                    "unit": meter.get_unit_display()}  # fmt: skip
            return (
                _(
                    "Read %(read)s, but the meter showed %(other)s on %(on)s. Was a digit misread? If the meter was replaced, "
                    "record that; if the other reading is wrong, correct it. Else say why this one stands all the same."
                )
                % said
            )
    return _runs_too_far(meter, shows, taken_at, before) if before else ""


def _runs_too_far(meter: Meter, shows: float, taken_at: datetime, before: MeterReading) -> str:
    days = (taken_at - before.taken_at).total_seconds() / 86400
    ran, usual = shows - before.shows, queries.usage(meter.engine, meter.unit, taken_at)
    said = {"read": f"{shows:.12g}", "ran": f"{ran:.6g}", "other": f"{before.shows:.12g}", "days": f"{days:.3g}",
            "on": f"{before.taken_at:%Y-%m-%d}", "unit": meter.unit}  # fmt: skip
    if meter.unit == Meter.Unit.HOURS and ran > MOST_HOURS_A_DAY * days + 1:
        return (
            _(
                "Read %(read)s: that is %(ran)s h more than the %(other)s of %(on)s, in %(days)s days, which have fewer hours. "
                "Was a digit misread? Else say why it stands all the same."
            )
            % said
        )
    if isinstance(usual, Use) and days > 0 and ran > FAR_ABOVE * usual.per_day * max(days, 1.0):
        return _(
            "Read %(read)s: that is %(ran)s %(unit)s since %(on)s; by its usual use of %(usual)s a day it would be about "
            "%(likely)s. Was a digit misread? Else say why it stands all the same."
        ) % (said | {"usual": f"{usual.per_day:.3g}", "likely": f"{usual.per_day * days:.3g}"})
    return ""


def _carry_over_again(engine: Engine, unit: str, carried: queries.Carried) -> None:
    for meter, took_over_at in carried.meters:
        last = took_over_at.meter.readings.standing().select_related("meter").order_by("taken_at", "pk").last()
        meter.engine_before = last.total
        meter.save(update_fields=["engine_before"])
    readings = queries.standing_readings(engine, unit)
    changed: dict[int, Fitting] = {}
    for fitting, total, _reading_before in carried.fittings:
        fitting = changed.setdefault(fitting.pk, fitting)
        moment = fitting.fitted_at if total == "fitted_total" else fitting.taken_off_at
        source = queries.read_by(readings, moment)
        setattr(fitting, total, source.total if source else None)
    for fitting in changed.values():
        _refuse_fewer_hours(fitting)
        fitting.save(update_fields=["fitted_total", "taken_off_total"])


def _refuse_fewer_hours(fitting: Fitting) -> None:
    if None not in (fitting.fitted_total, fitting.taken_off_total) and fitting.taken_off_total < fitting.fitted_total:
        said = {"part": fitting.part, "off": f"{fitting.taken_off_total:.12g}", "on": f"{fitting.fitted_total:.12g}"}
        raise MeterRefused(at_fields=[("shows", _(
            "By this reading %(part)s would have been taken off at %(off)s h and fitted at %(on)s h. Was a digit misread?"
        ) % said)])  # fmt: skip


def _refuse_while_not_fitted(meter: Meter, taken_at: datetime) -> None:
    if taken_at < meter.fitted_at:
        said = _("The meter was fitted on %(on)s; it can't have been read before.")
        raise MeterRefused(at_fields=[("taken_at", said % {"on": f"{meter.fitted_at:%Y-%m-%d}"})])
    if meter.replaced_at and taken_at > meter.replaced_at:
        said = _("The meter was replaced on %(on)s; read the one that took its place.")
        raise MeterRefused(at_fields=[("taken_at", said % {"on": f"{meter.replaced_at:%Y-%m-%d}"})])


def _reading(
    by: Person, at: datetime, meter: Meter, shows: float, taken_at: datetime, **more: object
) -> MeterReading:  # fmt: skip
    return MeterReading(
        shop=meter.shop, meter=meter, shows=shows, taken_at=taken_at, recorded_at=at, recorded_by=by, **more
    )
