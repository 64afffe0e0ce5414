"""Judging a pass: the document that `assess` reads is gathered from rows, and its judgement handed back by station."""

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from datetime import date, datetime
from functools import cache
from zoneinfo import ZoneInfo

from logbook.engines.models import LimitSheet
from logbook.gauges.models import Gauge
from logbook.gauges.queries import gauge_document
from measurements.assess import assess, beside
from measurements.document import Node, Unjudgeable
from measurements.engine import Engine
from measurements.intake.engine import read_engine
from measurements.intake.shop import Shop
from measurements.kind import Kind, find_kinds

from .models import Measurement
from .queries import Answer, earlier_readings, last_passes, lines_for, sheet_in_force

_FIGURE = re.compile(r"[0-9]+\.[0-9]+ [a-z]+")
LOOSE_PART = {"layout": "single", "cylinders": 1}  # a part on the bench is measured as the one cylinder it is


@cache
def kinds() -> dict[str, Kind]:
    """Every kind by name."""
    return find_kinds()


@dataclass(frozen=True)
class Judgement:
    """What a pass was found to be: findings and acts by station, derived values, warnings, the sheet it was judged by."""

    findings: Mapping[str, dict] = field(default_factory=dict)
    derived: tuple[dict, ...] = ()
    advice: Mapping[str, list[dict]] = field(default_factory=dict)
    warnings: tuple[str, ...] = ()
    sheet: LimitSheet | None = None


def engine_document(order: object) -> dict[str, object]:
    """The engine of a work order as `assess` reads it; a loose part's stand-in."""
    told = order.engine.as_document() if order.engine else dict(LOOSE_PART)
    return in_marks(told, order.shop.decimal_mark)


def in_marks(told: object, decimal_mark: str) -> object:
    """Figures with the shop's decimal mark, as assess will read them: under a comma, 95.995 is read as thousands."""
    if isinstance(told, dict):
        return {name: in_marks(value, decimal_mark) for name, value in told.items()}
    is_figure = isinstance(told, str) and _FIGURE.fullmatch(told)
    return told.replace(".", decimal_mark) if is_figure else told


def engine_of(order: object) -> Engine | None:
    """The engine of a work order as the measuring library knows it; None where its papers contradict one another."""
    return read_engine(Node(engine_document(order), "engine", []), Shop(order.shop.decimal_mark))


def day_in(shop: object, at: datetime) -> date:
    """The day it is in the shop."""
    return at.astimezone(ZoneInfo(shop.time_zone)).date()


def near(station: str, stations: Iterable[str]) -> list[str]:
    """Stations that one could be mistaken for, and itself."""
    return [other for other in stations if other == station or _side_by_side(other, station)]


def _side_by_side(one: str, other: str) -> bool:
    """Tell whether two stations lie beside each other; places of the whole engine have no neighbour."""
    numbered = all(name.split(".")[0].isdigit() for name in (one, other))
    return numbered and beside(one, other)


def judge(
    measurement: Measurement, answers: Mapping[str, Answer], *, at: datetime, station: str | None = None
) -> Judgement:
    """Judge a pass by the limits in force at a moment, against the visits before it.

    Parameters
    ----------
    measurement : Measurement
        With its job (`queries.with_its_job`).
    answers : mapping of station to Answer
        What stands there, with the answer that is being given.
    station : str, optional
        The only one whose own finding is asked for: history is looked up at it and its neighbours alone.

    Raises
    ------
    Unjudgeable
        When an answer can't be read; earlier readings that can't be read any more are left out.
    """
    order = measurement.task.work_order
    shop, today = order.shop, day_in(order.shop, at)
    sheet = sheet_in_force(order.engine_id, at)
    passes = last_passes(earlier_readings(measurement, near(station, answers) if station else None))
    document = {
        "engine": engine_document(order), "shop": shop.as_document(),
        "limits": [line.as_document() for line in lines_for(sheet, measurement.kind, today)],
    }  # fmt: skip
    told, place = assessed(document, measurement, answers, passes)
    mine = [one for one in told["findings"] if one["measurement"] == place]
    advice: dict[str, list[dict]] = {}
    for act in told["advice"]:
        advice.setdefault(act["station"], []).append(act)
    derived = tuple(one for one in told["derived"] if one["measurement"] == place)
    return Judgement({one["station"]: one for one in mine}, derived, advice, tuple(told["warnings"]), sheet)


def assessed(
    document: dict, measurement: Measurement, answers: Mapping[str, Answer], passes: Mapping[Measurement, Mapping]
) -> tuple[dict, int]:
    """The judgement of a document with its passes, and the place of this one in it."""
    shop, gauges, told = measurement.task.work_order.shop, Gauges(), []
    name = gauges.name_of(measurement.gauge, day_in(shop, measurement.opened_at))
    for earlier, kept in passes.items():
        told.append(pass_document(earlier, kept, gauges.name_of(earlier.gauge, day_in(shop, earlier.opened_at)), shop))
    told.append(pass_document(measurement, answers, name, shop))
    place = len(told) - 1
    whole = {**document, "gauges": gauges.documents, "measurements": told}
    try:
        return assess(whole, kinds()), place
    except Unjudgeable as error:
        if not passes or any(not _is_of_the_past(path, place) for path, _ in error.errors):
            raise
    return assessed(document, measurement, answers, {})


def _is_of_the_past(path: str, place: int) -> bool:
    return path.startswith("measurements[") and not path.startswith(f"measurements[{place}]")


def pass_document(
    one: Measurement, answers: Mapping[str, Answer], gauge: str | None, shop: object
) -> dict[str, object]:
    """A pass as `assess` reads it."""
    told: dict[str, object] = {
        "kind": one.kind, "phase": one.phase, "taken_on": day_in(shop, one.opened_at).isoformat(),
        "conditions": one.conditions,
    }  # fmt: skip
    readings = {station: answer.typed for station, answer in answers.items() if answer.texts}
    reasons = {station: answer.not_measured for station, answer in answers.items() if answer.not_measured}
    told |= {"readings": readings} if readings or not reasons else {}
    told |= {"not_measured": reasons} if reasons else {}
    told |= {"hours": one.engine_hours} if one.engine_hours is not None else {}
    return told | ({"gauge": gauge} if gauge else {})


class Gauges:
    """The gauges of a document; one that was calibrated again between visits stands in it once for each calibration."""

    def __init__(self) -> None:
        self._named: dict[tuple[int, date], str] = {}
        self._told: dict[str, dict[str, object]] = {}

    @property
    def documents(self) -> list[dict[str, object]]:
        """All of them as `assess` reads them."""
        return [{**told, "id": name} for name, told in self._told.items()]

    def name_of(self, gauge: Gauge | None, on: date) -> str | None:
        """Name a gauge as it was on a day, and see that it is told; the first asked for keeps its plain mark."""
        if gauge is None:
            return None
        if (gauge.pk, on) not in self._named:
            told = gauge_document(gauge, on)
            same = next((name for name, other in self._told.items() if other == told), None)
            dated = f"{gauge.mark} ({told.get('calibrated_on', '–')})" if gauge.mark in self._told else gauge.mark
            self._named[gauge.pk, on] = same or dated
            self._told[same or dated] = told
        return self._named[gauge.pk, on]
