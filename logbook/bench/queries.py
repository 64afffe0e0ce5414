"""Which readings stand at a pass, and what was read at the same stations before."""

from collections.abc import Collection, Iterable
from dataclasses import dataclass
from datetime import datetime

from django.db.models import Q, QuerySet

from logbook.engines.models import LimitLine, LimitSheet
from logbook.work.models import Task, WorkOrder

from .models import Act, Finding, Measurement, Reading

MOST_PASSES_A_VISIT = 6
MOST_LOOKED_BACK = 1000  # readings; assess bounds its document likewise


@dataclass(frozen=True)
class Answer:
    """What stands at a station: the repeats as typed, or why nothing was measured."""

    texts: tuple[str, ...] = ()
    not_measured: str = ""

    @property
    def typed(self) -> str:
        """The repeats as one entry of the grammar."""
        return "; ".join(self.texts)

    def with_another(self, text: str) -> "Answer":
        """The answer with one more repeat."""
        return Answer((*self.texts, text))


def answers_of(readings: Iterable[Reading]) -> dict[str, Answer]:
    """Gather standing readings by station, in the order they were recorded."""
    found: dict[str, Answer] = {}
    for reading in readings:
        if reading.not_measured:
            found[reading.station] = Answer(not_measured=reading.not_measured)
        else:
            found[reading.station] = found.get(reading.station, Answer()).with_another(reading.typed)
    return found


def with_its_job(measurements: QuerySet[Measurement]) -> QuerySet[Measurement]:
    """Passes with everything a judgement starts from: gauge, job, engine or part, shop."""
    return measurements.select_related(
        "gauge", "task__work_order__engine", "task__work_order__part", "task__work_order__shop"
    )


def standing_at(measurement: Measurement) -> list[Reading]:
    """Readings that stand at a pass, in the order they were recorded."""
    return list(measurement.readings.standing().order_by("recorded_at", "pk"))


def earlier_readings(measurement: Measurement, stations: Collection[str] | None = None) -> list[Reading]:
    """Values read before a pass at the same engine or part by the same kind, newest pass first; bounded.

    Parameters
    ----------
    stations : collection of str, optional
        Only these; without it every station.
    """
    order = measurement.task.work_order
    rows = Reading.objects.standing().filter(
        Q(measurement__opened_at__lt=measurement.opened_at)
        | Q(measurement__opened_at=measurement.opened_at, measurement__pk__lt=measurement.pk),
        shop_id=measurement.shop_id, measurement__kind=measurement.kind, not_measured="",
        measurement__task__work_order__engine=order.engine_id, measurement__task__work_order__part=order.part_id,
    )  # fmt: skip
    rows = rows.exclude(measurement__task__work_order__state=WorkOrder.State.DROPPED)
    if stations is not None:
        rows = rows.filter(station__in=stations)
    rows = rows.select_related("measurement__gauge", "measurement__task")
    return list(rows.order_by("-measurement__opened_at", "-measurement_id", "recorded_at", "pk")[:MOST_LOOKED_BACK])


def last_passes(readings: Iterable[Reading]) -> dict[Measurement, dict[str, Answer]]:
    """Of earlier readings, newest pass first, keep each station's last as found and last as left, dry and wet apart.

    Gives passes, oldest first, with the answers kept of each.
    """
    owner: dict[tuple[str, str, bool], int] = {}
    kept: dict[Measurement, list[Reading]] = {}
    for reading in readings:
        one = reading.measurement
        taken = owner.setdefault((reading.station, one.phase, bool(one.conditions.get("wet"))), one.pk)
        if taken == one.pk:
            kept.setdefault(one, []).append(reading)
    return {one: answers_of(kept[one]) for one in reversed(kept)}


def sheet_in_force(engine_id: int | None, at: object) -> LimitSheet | None:
    """The limit sheet that judges an engine at a moment: the newest that is in force by then."""
    if engine_id is None:
        return None
    return LimitSheet.objects.filter(engine=engine_id, in_force_at__lte=at).order_by("-version").first()


def lines_for(sheet: LimitSheet | None, kind: str, on: object) -> list[LimitLine]:
    """A sheet's lines for a kind; a provisional one leaves after its last day."""
    if sheet is None:
        return []
    lines = sheet.lines.filter(characteristic__startswith=f"{kind}.")
    return list(lines.filter(Q(provisional_until=None) | Q(provisional_until__gte=on)))


def stations_found(task: Task) -> set[str]:
    """Stations of a task whose as-found is answered, by a value or by why there is none."""
    found = Reading.objects.standing().filter(measurement__task=task, measurement__phase=Measurement.Phase.AS_FOUND)
    return set(found.values_list("station", flat=True))


def is_acted_on(measurement: Measurement, station: str) -> bool:
    """Tell whether something was done at a station of this task, or a value left there: its as-found is closed then."""
    if Act.objects.filter(task=measurement.task_id, station=station).exists():
        return True
    left = Reading.objects.standing().filter(measurement__task=measurement.task_id, station=station)
    return left.filter(measurement__phase=Measurement.Phase.AS_LEFT).exists()


def last_visit(task: Task, station: str, before: datetime) -> Finding | None:
    """What a station was left at on the job before this one, else found at; None where nothing was ever read."""
    order = task.work_order
    rows = Finding.objects.standing().filter(
        shop_id=task.shop_id, station=station, measurement__kind=task.kind, measurement__opened_at__lt=before,
        measurement__task__work_order__engine=order.engine_id, measurement__task__work_order__part=order.part_id,
        judgement__value__isnull=False,
    )  # fmt: skip
    rows = rows.exclude(measurement__task__work_order=order).exclude(
        measurement__task__work_order__state=WorkOrder.State.DROPPED
    )
    newest = rows.select_related("measurement").order_by("-measurement__opened_at", "-pk")[:MOST_PASSES_A_VISIT]
    found = [one for one in newest if one.measurement.task_id == newest[0].measurement.task_id]
    left = [one for one in found if one.measurement.phase == Measurement.Phase.AS_LEFT]
    return next(iter([*left, *found]), None)
