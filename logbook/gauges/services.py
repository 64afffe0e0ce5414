"""What may be done to gauges and their calibrations: by whom, when, and what is refused."""

from datetime import date, datetime, timedelta

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import OfShop, Person, Shop
from measurements.document import Node
from measurements.intake.gauges import read_gauge
from measurements.intake.shop import Shop as Ways

from . import queries
from .models import Calibration, Gauge

KEEPERS = ("toolroom", "supervisor")


class GaugeRefused(Refused):
    """Something asked of a gauge that can't be done."""


@transaction.atomic
def add_gauge(*, by: Person, at: datetime, **figures: object) -> Gauge:
    """Take a gauge or setting master into the shop; `figures` are the fields of `Gauge`, as typed."""
    _refuse_others(by)
    gauge = Gauge(shop=by.shop, created_at=at, **figures)
    gauge.full_clean()
    _refuse_unreadable(queries.own_figures(gauge), by.shop)
    gauge.save()
    return gauge


@transaction.atomic
def change_gauge(*, by: Person, gauge: Gauge, **figures: object) -> Gauge:
    """Change a gauge's papers; what was judged with it before keeps its judgement."""
    _refuse_others(by, gauge)
    quantity = figures.get("quantity", gauge.quantity)
    kept = Gauge.objects.get(pk=gauge.pk)
    if quantity != kept.quantity and queries.was_used(kept):
        raise GaugeRefused(
            _("Gauge %(gauge)s measures %(has)s and was used or calibrated so; add another gauge for %(wanted)s.")
            % {"gauge": kept.mark, "has": kept.get_quantity_display(), "wanted": queries.quantity_in_words(quantity)}
        )
    for name, value in figures.items():
        setattr(gauge, name, value)
    gauge.full_clean()
    _refuse_unreadable(queries.own_figures(gauge), by.shop)
    gauge.save()
    return gauge


@transaction.atomic
def record_calibration(
    *, by: Person, at: datetime, gauge: Gauge, calibrated_on: date, due_on: date | None = None, **figures: object
) -> Calibration:
    """Record a calibration; without a due day, the gauge's interval says when the next one is due."""
    _refuse_others(by, gauge)
    _refuse_days_to_come(calibrated_on, at, by.shop)
    return _written(by, at, gauge, calibrated_on=calibrated_on, due_on=due_on, **figures)


@transaction.atomic
def supersede_calibration(
    *, by: Person, at: datetime, calibration: Calibration, reason: str, calibrated_on: date,
    due_on: date | None = None, **figures: object,
) -> Calibration:  # fmt: skip
    """Record the right calibration in place of a wrong entry, which stays to be seen with the reason."""
    _refuse_others(by, calibration)
    _refuse_days_to_come(calibrated_on, at, by.shop)
    if later := Calibration.objects.filter(supersedes=calibration).first():
        raise GaugeRefused(
            _("The calibration of %(on)s was corrected already, by %(who)s; correct that entry instead.")
            % {"on": calibration.calibrated_on.isoformat(), "who": later.recorded_by}
        )
    if not reason.strip():
        raise GaugeRefused(_("Nothing was written in the reason; say why the earlier entry was wrong."))
    return _written(by, at, calibration.gauge, supersedes=calibration, reason=reason.strip(),
                    calibrated_on=calibrated_on, due_on=due_on, **figures)  # fmt: skip


@transaction.atomic
def retire_gauge(*, by: Person, at: datetime, gauge: Gauge) -> Gauge:
    """Take a gauge out of use: it can't be picked any more, and what it measured stays."""
    _refuse_others(by, gauge)
    if gauge.retired_at:
        raise GaugeRefused(_("Gauge %(gauge)s is retired already.") % {"gauge": gauge.mark})
    gauge.retired_at = at
    gauge.save(update_fields=["retired_at"])
    return gauge


@transaction.atomic
def bring_back_gauge(*, by: Person, gauge: Gauge) -> Gauge:
    """Put a retired gauge back into use."""
    _refuse_others(by, gauge)
    if not gauge.retired_at:
        raise GaugeRefused(_("Gauge %(gauge)s isn't retired.") % {"gauge": gauge.mark})
    gauge.retired_at = None
    gauge.save(update_fields=["retired_at"])
    return gauge


def _written(by: Person, at: datetime, gauge: Gauge, **figures: object) -> Calibration:
    calibration = Calibration(shop=gauge.shop, gauge=gauge, recorded_by=by, recorded_at=at, **figures)
    if calibration.due_on is None and gauge.interval_days and not calibration.has_failed:
        calibration.due_on = calibration.calibrated_on + timedelta(days=gauge.interval_days)
    calibration.full_clean()
    _refuse_unreadable(queries.own_figures(gauge) | queries.calibration_fields(calibration), gauge.shop)
    calibration.save()
    return calibration


def _refuse_others(by: Person, row: OfShop | None = None) -> None:
    if not by.has_role(*KEEPERS):
        raise GaugeRefused(_("Gauges are kept by the toolroom or a supervisor; %(who)s is neither.") % {"who": by})
    if row is not None and row.shop_id != by.shop_id:
        raise GaugeRefused(_("This gauge belongs to another shop."))


def _refuse_days_to_come(calibrated_on: date, at: datetime, shop: Shop) -> None:
    today = queries.day_of(at, shop)
    if calibrated_on > today:
        raise GaugeRefused(
            _("Read %(on)s as the day of the calibration, which is still to come; today is %(today)s.")
            % {"on": calibrated_on.isoformat(), "today": today.isoformat()}
        )


def _refuse_unreadable(document: dict[str, object], shop: Shop) -> None:
    """Refuse figures that the judgement couldn't read later: what is kept here is what `assess` is given."""
    errors: list = []
    read_gauge(Node(document, "", errors), Ways(shop.decimal_mark))
    if errors:
        raise GaugeRefused(" ".join(_(sentence.template).format(**sentence.values) for _path, sentence in errors))
