"""What the pages and the bench ask about gauges: which may be used, what speaks against one, what it was used for."""

from datetime import UTC, date, datetime

from django.db.models import BooleanField, Exists, F, OuterRef, Prefetch, QuerySet, Subquery, Value
from django.db.models.functions import Coalesce
from django.utils.translation import gettext as _

from logbook.people.clock import zone_named
from logbook.people.models import Person, Shop

from .models import Calibration, Gauge

FIGURES = ("resolution", "max_permissible_error", "repeatability")


def day_of(at: datetime, shop: Shop) -> date:
    """The day of a moment by the shop's own clock."""
    return at.astimezone(zone_named(shop.time_zone) or UTC).date()


def standing_calibrations() -> QuerySet[Calibration]:
    """Calibrations that no correction has taken the place of, the latest first."""
    return Calibration.objects.filter(superseded_by__isnull=True).order_by("-calibrated_on", "-pk")


def with_standing(gauges: QuerySet[Gauge]) -> QuerySet[Gauge]:
    """Add what the latest standing calibration says: `is_calibrated`, `standing_due_on`, `standing_failed`."""
    latest = standing_calibrations().filter(gauge=OuterRef("pk"))
    return gauges.annotate(
        is_calibrated=Exists(latest),
        standing_due_on=Subquery(latest.values("due_on")[:1]),
        standing_failed=Coalesce(
            Subquery(latest.values("has_failed")[:1]), Value(False), output_field=BooleanField()
        ),
    )  # fmt: skip


def neediest_first(person: Person) -> QuerySet[Gauge]:
    """A person's gauges for the list: failed, then the longest past due, then as they come due; retired ones last."""
    rows = with_standing(Gauge.objects.seen_by(person))
    return rows.order_by(
        F("retired_at").asc(nulls_first=True), "-standing_failed", F("standing_due_on").asc(nulls_last=True), "mark"
    )


def usable_for(quantity: str, person: Person) -> QuerySet[Gauge]:
    """Gauges to pick from for a quantity, those in date first; a failed one is shown last, for the complaint beside it.

    Without retired gauges and setting masters, which aren't read. A calibration without a due day never runs out.
    """
    rows = with_standing(Gauge.objects.seen_by(person))
    return rows.filter(quantity=quantity, retired_at=None, is_setting_master=False).order_by(
        "standing_failed", "-is_calibrated", F("standing_due_on").desc(nulls_first=True), "mark"
    )


def with_calibrations(person: Person) -> QuerySet[Gauge]:
    """A person's gauges with every calibration, who recorded it, and what took its place."""
    told = Calibration.objects.select_related("recorded_by", "superseded_by", "supersedes")
    return Gauge.objects.seen_by(person).prefetch_related(Prefetch("calibrations", queryset=told))


def in_force(gauge: Gauge, on: date) -> Calibration | None:
    """The calibration that held on a day: the latest done by then that wasn't superseded."""
    return standing_calibrations().filter(gauge=gauge, calibrated_on__lte=on).first()


def gauge_document(gauge: Gauge, on: date) -> dict[str, object]:
    """The gauge as `assess` reads it, with the calibration in force on a day.

    Without one in force, its permissible error speaks for it, when it has one.
    """
    calibration = in_force(gauge, on)
    return own_figures(gauge) | (calibration_fields(calibration) if calibration else {})


def own_figures(gauge: Gauge) -> dict[str, object]:
    """What a gauge's own papers say, as `assess` reads it."""
    told: dict[str, object] = {"id": gauge.mark, "quantity": gauge.quantity}
    told |= {name: getattr(gauge, name) for name in FIGURES if getattr(gauge, name)}
    if gauge.repeatability and gauge.repeatability_dof:
        told["repeatability_degrees_of_freedom"] = gauge.repeatability_dof
    if gauge.range_lower and gauge.range_upper:
        told["range"] = [gauge.range_lower, gauge.range_upper]
    return told


def calibration_fields(calibration: Calibration) -> dict[str, object]:
    """A calibration's part of the gauge as `assess` reads it."""
    told: dict[str, object] = {"calibrated_on": calibration.calibrated_on.isoformat()}
    if calibration.due_on:
        told["due_on"] = calibration.due_on.isoformat()
    if calibration.expanded_uncertainty:
        told["expanded_uncertainty"] = calibration.expanded_uncertainty
        told["coverage_factor"] = calibration.coverage_factor
    if calibration.errors:
        told["errors"] = calibration.errors
    return told | ({"failed": True} if calibration.has_failed else {})


def tester_conditions(gauge: Gauge) -> dict[str, str]:
    """A leak-down tester's own part of a measurement's conditions, as `assess` names them; empty for other gauges."""
    told = {"supply_pressure": gauge.supply_pressure, "orifice_diameter": gauge.orifice_diameter}
    return {name: value for name, value in told.items() if value}


def complaints(gauge: Gauge, on: date, quantity: str | None = None) -> list[str]:
    """Say what speaks against using a gauge on a day, for a quantity where one is asked for; empty when nothing does."""
    said = []
    calibration = in_force(gauge, on)
    named = {"gauge": gauge.mark}
    if gauge.retired_at and day_of(gauge.retired_at, gauge.shop) <= on:
        said.append(_("Gauge %(gauge)s is retired; take another.") % named)
    if quantity and gauge.quantity != quantity:
        wanted = {**named, "has": gauge.get_quantity_display(), "wanted": quantity_in_words(quantity)}
        said.append(_("Gauge %(gauge)s measures %(has)s; this needs %(wanted)s.") % wanted)
    if calibration and calibration.has_failed:
        failed = {**named, "on": calibration.calibrated_on.isoformat()}
        said.append(_("Gauge %(gauge)s failed its calibration of %(on)s: its readings can't be relied on.") % failed)
    elif calibration and calibration.due_on and on > calibration.due_on:
        due = {**named, "due": calibration.due_on.isoformat()}
        said.append(_("Gauge %(gauge)s is past due: its next calibration was due %(due)s.") % due)
    elif calibration is None and not gauge.max_permissible_error:
        said.append(
            _("Gauge %(gauge)s has neither a calibration nor a permissible error: how wrong it can be isn't known.")
            % named
        )
    return said


def quantity_in_words(quantity: str) -> str:
    """A quantity as the pages name it."""
    return str(dict(Gauge.Quantity.choices).get(quantity, quantity.replace("_", " ")))


def last_good_on(gauge: Gauge) -> date | None:
    """The day of the last calibration that the gauge passed; None when it never passed one."""
    passed = standing_calibrations().filter(gauge=gauge, has_failed=False).first()
    return passed.calibrated_on if passed else None


def has_failed(gauge: Gauge) -> bool:
    """Tell whether the latest standing calibration was failed."""
    latest = standing_calibrations().filter(gauge=gauge).first()
    return bool(latest and latest.has_failed)


def used_since(gauge: Gauge, since: datetime | None) -> QuerySet:
    """Measurements taken with a gauge from a moment on, the latest first; all of them without one."""
    used = gauge.measurements.select_related("task__work_order__engine", "task__work_order__part", "opened_by")
    return (used.filter(opened_at__gte=since) if since else used).order_by("-opened_at", "-pk")


def was_used(gauge: Gauge) -> bool:
    """Tell whether anything stands on this gauge: a measurement taken with it, or a calibration."""
    return Gauge.objects.filter(pk=gauge.pk).filter(
        Exists(gauge.measurements.model.objects.filter(gauge=OuterRef("pk")))
        | Exists(Calibration.objects.filter(gauge=OuterRef("pk")))
    ).exists()  # fmt: skip


def state_of(gauge: Gauge, on: date) -> tuple[str, str]:
    """How a gauge from `with_standing` stands on a day: a word for the page's mark, and the sentence beside it."""
    if gauge.retired_at:
        return "retired", _("retired %(on)s") % {"on": day_of(gauge.retired_at, gauge.shop).isoformat()}
    if gauge.standing_failed:
        return "failed", _("failed its calibration: not to be used")
    if not gauge.is_calibrated:
        if gauge.max_permissible_error:
            return "uncalibrated", _("no calibration; its permissible error speaks for it")
        return "unknown", _("neither calibration nor permissible error")
    if gauge.standing_due_on is None:
        return "in_date", _("calibrated; no day set for the next")
    days = (gauge.standing_due_on - on).days
    said = {"due": gauge.standing_due_on.isoformat(), "days": abs(days)}
    if days < 0:
        return "past_due", _("past due since %(due)s, %(days)s days") % said
    return "in_date", _("next calibration %(due)s, in %(days)s days") % said
