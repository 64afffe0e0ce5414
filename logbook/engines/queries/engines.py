"""What is asked about engines themselves: how they stand now, and whether anything was measured on them."""

from datetime import datetime

from django.db.models import Exists, F, OuterRef, Q, QuerySet, Subquery

from logbook.engines.models import Engine, LimitSheet, MeterReading, OutOfService


def with_standing(engines: QuerySet[Engine], at: datetime) -> QuerySet[Engine]:
    """Engines with their hours in all, the version of the limit sheet in force, and whether they are out of service."""
    readings = MeterReading.objects.standing().filter(
        meter__engine=OuterRef("pk"), meter__unit="h", taken_at__lte=at
    ).order_by("-taken_at", "-pk")  # fmt: skip
    total = F("meter__engine_before") + F("shows") - F("meter__shows_at_fitting")
    sheets = LimitSheet.objects.filter(engine=OuterRef("pk"), in_force_at__lte=at).order_by("-version")
    return engines.annotate(
        hours=Subquery(readings.annotate(in_all=total).values("in_all")[:1]),
        hours_read_at=Subquery(readings.values("taken_at")[:1]),
        sheet_version=Subquery(sheets.values("version")[:1]),
        is_out=Exists(now_out(at).filter(engine=OuterRef("pk"))),
    )


def now_out(at: datetime) -> QuerySet[OutOfService]:
    """Times out of service that a moment falls into."""
    return OutOfService.objects.filter(Q(until_at=None) | Q(until_at__gt=at), from_at__lte=at)


def out_now(engine: Engine, at: datetime) -> OutOfService | None:
    """The time out of service that an engine is in at a moment."""
    return now_out(at).filter(engine=engine).first()


def was_measured(engine: Engine) -> bool:
    """Tell whether a reading was taken on an engine: its stations then have a history."""
    return engine.work_orders.filter(tasks__measurements__isnull=False).exists()
