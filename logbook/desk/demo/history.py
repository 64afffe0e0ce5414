"""Keeps what was measured and signed long ago, a pass and a sheet at a time.

Three years of it through the bench's and review's services would take minutes, for those judge a pass anew at each
reading and draw up the sheet twice for each name. The rows here are the ones they would leave, by the same judgement.
"""

from datetime import datetime
from uuid import uuid4

from logbook.bench.closing_up import note_left, note_opened
from logbook.bench.guards import judged
from logbook.bench.judging import Judgement, kinds
from logbook.bench.models import Finding, Measurement, Reading
from logbook.bench.queries import Answer
from logbook.gauges.queries import tester_conditions
from logbook.paper.services import fingerprint
from logbook.people.models import Person
from logbook.review.models import Signature
from logbook.review.services.signing import close
from logbook.review.sheets import job_sheet
from logbook.work.models import Task, WorkOrder

from .bench import A_READING, AN_ACT, Visit


def keep_pass(visit: Visit, task: Task, phase: str, conditions: dict, answers: dict[str, list[str]]) -> Judgement:
    """Keep a whole pass, one reading a station, each with its finding; gives the judgement."""
    gauge = visit.gauge_for(task.kind)
    own = tester_conditions(gauge) if task.kind == "leak_down" else {}
    one = Measurement.objects.create(
        shop=task.shop, task=task, kind=task.kind, phase=phase, gauge=gauge, conditions={**own, **conditions},
        engine_hours=visit.bench.run.total(visit.days), opened_at=visit.later(AN_ACT), opened_by=visit.keys,
    )  # fmt: skip
    note_opened(one, kinds()[task.kind], by=visit.keys, at=visit.clock)
    told = judged(one, {station: Answer(tuple(texts)) for station, texts in answers.items()}, at=visit.clock)
    readings = Reading.objects.bulk_create(
        Reading(shop_id=one.shop_id, measurement=one, client_id=uuid4(), station=station, typed=text,
                taken_at=visit.later(A_READING), recorded_at=visit.clock, measured_by=visit.measures, keyed_by=visit.keys)
        for station, texts in answers.items() for text in texts
    )  # fmt: skip
    Finding.objects.bulk_create(finding_of(reading, told) for reading in readings)
    if phase == Measurement.Phase.AS_LEFT:
        for station in answers:
            note_left(task, station, by=visit.keys, at=visit.clock)
    one.derived, one.closed_at = list(told.derived), visit.clock
    one.save(update_fields=["derived", "closed_at"])
    return told


def finding_of(reading: Reading, told: Judgement) -> Finding:
    """What a reading's station was found to be."""
    finding = told.findings[reading.station]
    return Finding(
        shop_id=reading.shop_id, measurement=reading.measurement, reading=reading, station=reading.station,
        characteristic=finding["characteristic"], verdict=finding["verdict"], chance_within=finding["probability_within"],
        limit_sheet=told.sheet, judgement={**finding, "acts": told.advice.get(reading.station, [])},
    )  # fmt: skip


def keep_name(order: WorkOrder, role: str, by: Person, at: datetime, stations: list[str] | None = None) -> None:
    """Keep a name under a sheet as it stood; the deciding one ends the job."""
    shown = job_sheet(order)
    Signature.objects.create(
        shop=order.shop, work_order=order, role=role, person=by, signed_at=at, shown_sha256=fingerprint(shown), shown=shown,
        stations=stations or [],
    )  # fmt: skip
    if role == Signature.Role.DECIDED:
        close(order, by, at)
