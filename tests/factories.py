"""Invented rows for tests: a shop, its persons, an engine with limits and a gauge; each takes what the test cares about."""

from datetime import UTC, date, datetime

from logbook.engines.models import Engine, LimitLine, LimitSheet, Meter, MeterReading
from logbook.gauges.models import Calibration, Gauge
from logbook.people.models import Person, Shop

NOW = datetime(2026, 5, 2, 9, 30, tzinfo=UTC)
PASSWORD = "a feeler of 0.18"


def make_shop(name: str = "Reed Lake workshop", **more: object) -> Shop:
    return Shop.objects.create(name=name, created_at=NOW, **more)


def make_person(shop: Shop, name: str, *roles: str, password: str | None = None) -> Person:
    """A person with roles; a password costs a tenth of a second, so only tests that sign in ask for one."""
    person = Person(shop=shop, name=name, **{f"is_{role}": True for role in roles or ("technician",)})
    person.set_password(password)
    person.full_clean()
    person.save()
    return person


def make_engine(shop: Shop, name: str = "North pump", **more: object) -> Engine:
    told = {
        "layout": "inline", "cylinders": 4, "firing_order": [1, 3, 4, 2], "ignition": "compression", "bore_mm": 96.0,
        "stroke_mm": 103.0, "rod_length_mm": 165.0, "compression_ratio": 17.5, "rated_speed_rpm": 1500.0,
        "adjustment": "screw", "screw_pitch_mm": 1.0, "intake_opens_btdc": 12, "intake_closes_abdc": 48,
        "exhaust_opens_bbdc": 52, "exhaust_closes_atdc": 10,
    }  # fmt: skip
    return Engine.objects.create(shop=shop, name=name, created_at=NOW, **{**told, **more})


def make_meter(engine: Engine, by: Person, shows: float = 4210.0, at: datetime = NOW) -> Meter:
    meter = Meter.objects.create(shop=engine.shop, engine=engine, fitted_at=datetime(2023, 1, 1, tzinfo=UTC))
    MeterReading.objects.create(shop=engine.shop, meter=meter, shows=shows, taken_at=at, recorded_at=at, recorded_by=by)
    return meter


def make_limits(
    engine: Engine, entered_by: Person, compared_by: Person | None = None, **lines: dict[str, str]
) -> LimitSheet:
    """A sheet in force since 2023; lines by characteristic, `__` for the point in its name."""
    sheet = LimitSheet.objects.create(
        shop=engine.shop, engine=engine, version=engine.limit_sheets.count() + 1, entered_by=entered_by,
        entered_at=datetime(2023, 1, 2, tzinfo=UTC), compared_by=compared_by,
        nobody_compared="" if compared_by else "one-person shop", in_force_at=datetime(2023, 1, 3, tzinfo=UTC),
    )  # fmt: skip
    told = lines or {
        "valve_lash__intake": {"lower": "0.25 mm", "upper": "0.35 mm", "set_lower": "0.28 mm", "set_upper": "0.32 mm",
                               "nominal": "0.30 mm", "condition": "cold"},
        "valve_lash__exhaust": {"lower": "0.35 mm", "upper": "0.45 mm", "set_lower": "0.38 mm", "set_upper": "0.42 mm",
                                "nominal": "0.40 mm", "condition": "cold"},
    }  # fmt: skip
    for name, figures in told.items():
        characteristic = name.replace("__", ".")
        LimitLine.objects.create(
            shop=engine.shop, sheet=sheet, characteristic=characteristic, source="sheet 3", **figures
        )
    return sheet


def make_gauge(shop: Shop, by: Person, mark: str = "FG-2", **more: object) -> Gauge:
    told = {"title": "feeler gauge", "quantity": "length", "resolution": "0.01 mm"}
    gauge = Gauge.objects.create(shop=shop, mark=mark, created_at=NOW, **{**told, **more})
    Calibration.objects.create(
        shop=shop, gauge=gauge, calibrated_on=date(2026, 3, 1), due_on=date(2027, 3, 1), certificate="C-118",
        expanded_uncertainty="0.008 mm", coverage_factor=2, recorded_by=by, recorded_at=NOW,
    )  # fmt: skip
    return gauge
