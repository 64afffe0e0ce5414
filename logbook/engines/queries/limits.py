"""Which limits hold, and how a sheet came to be."""

from datetime import date, datetime
from functools import cache

from django.db.models import QuerySet

from logbook.engines.models import Engine, LimitLine, LimitSheet
from measurements.kind import Characteristic, Kind, find_kinds


def sheet_in_force(engine: Engine, on: datetime) -> LimitSheet | None:
    """The limit sheet that judges an engine at a moment: the newest version in force by then."""
    return engine.limit_sheets.filter(in_force_at__lte=on).order_by("-version").first()


def sheet_at(engine: Engine, version: int) -> QuerySet[LimitSheet]:
    """One version of an engine's sheets, with who entered and compared it."""
    return engine.limit_sheets.filter(version=version).select_related("engine__shop", "entered_by", "compared_by")


def lines_with_their_past(sheet: LimitSheet) -> list[LimitLine]:
    """Every line of a sheet in the order of typing, those replaced or withdrawn too."""
    rows = LimitLine.every.filter(sheet=sheet).select_related("replaces", "replaced_by")
    return list(rows.order_by("pk"))


def provisional_past_end(sheet: LimitSheet, today: date) -> list[LimitLine]:
    """Provisional lines whose last day is over: they judge nothing any more."""
    return list(sheet.lines.filter(provisional_until__lt=today))


@cache
def kinds() -> dict[str, Kind]:
    """Every kind of measurement by name."""
    return find_kinds()


@cache
def characteristics() -> dict[str, tuple[Kind, Characteristic]]:
    """Everything a limit can be given for, by name, kind by kind."""
    return {
        one.name: (kind, one) for kind in kinds().values() for one in (*kind.entered, *kind.derived)
    }  # fmt: skip
