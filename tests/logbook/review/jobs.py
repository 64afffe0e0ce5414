"""Invented jobs to decide on: an engine with limits and a gauge, readings judged as the bench judges them."""

from datetime import UTC, datetime, timedelta
from uuid import uuid4

from logbook.bench.judging import judge
from logbook.bench.models import Finding, Measurement, Reading
from logbook.bench.queries import answers_of
from logbook.engines.models import Engine
from logbook.people.models import Person
from logbook.work.models import Task, WorkOrder
from tests.factories import NOW, PASSWORD, make_engine, make_gauge, make_limits, make_meter, make_person, make_shop

EARLIER = datetime(2025, 12, 2, 8, 0, tzinfo=UTC)


class Bench:
    """A shop with two technicians, two supervisors, a witness, and jobs on its engine."""

    def __init__(self) -> None:
        self.shop = make_shop()
        self.measures = make_person(self.shop, "Technician 3")
        self.keys = make_person(self.shop, "Technician 5")
        self.decides = make_person(self.shop, "Supervisor 1", "supervisor", password=PASSWORD)
        self.other = make_person(self.shop, "Supervisor 2", "supervisor")
        self.witness = make_person(self.shop, "Surveyor 1", "witness", password=PASSWORD)
        self.engine = self.new_engine("North pump")
        self.gauge = make_gauge(self.shop, self.decides)

    def new_engine(self, name: str, **more: object) -> Engine:
        engine = make_engine(self.shop, name, **more)
        make_meter(engine, self.decides)
        make_limits(engine, self.decides, self.other)
        return engine

    def job(
        self, title: str = "valve lash", engine: Engine | None = None, state: str = "to_decide", **more: object
    ) -> Task:
        """A job with one task of valve lash."""
        number = WorkOrder.objects.filter(shop=self.shop).count() + 118
        order = WorkOrder.objects.create(
            shop=self.shop, number=number, engine=engine or self.engine, title=title, state=state, opened_by=self.decides,
            opened_at=NOW - timedelta(hours=2), finished_at=NOW,
        )  # fmt: skip
        return Task.objects.create(shop=self.shop, work_order=order, place=1, title=title, lock_state="turned by hand",
                                   **{"kind": "valve_lash", **more})  # fmt: skip

    def open_pass(
        self, task: Task, phase: str = "as_found", at: datetime = NOW, hours: float = 4210.0, **more: object
    ) -> Measurement:
        conditions = {"state": "cold"} if task.kind == "valve_lash" else {}
        return Measurement.objects.create(
            shop=self.shop, task=task, kind=task.kind, phase=phase, engine_hours=hours, opened_at=at,
            opened_by=self.measures, **{"gauge": self.gauge, "conditions": conditions, **more},
        )  # fmt: skip

    def read(
        self, measurement: Measurement, station: str, typed: str, by: Person | None = None, **more: object
    ) -> Finding:
        """Keep a reading, judged with what stands at the pass."""
        reading = Reading.objects.create(
            shop=self.shop, measurement=measurement, client_id=uuid4(), station=station, typed=typed,
            measured_by=by or self.measures, keyed_by=by or self.keys, taken_at=measurement.opened_at,
            recorded_at=measurement.opened_at, **more,
        )  # fmt: skip
        standing = measurement.readings.standing().order_by("recorded_at", "pk")
        judged = judge(measurement, answers_of(standing), at=measurement.opened_at)
        told = judged.findings[station]
        return Finding.objects.create(
            shop=self.shop, measurement=measurement, reading=reading, station=station, judgement=told,
            characteristic=told["characteristic"], verdict=told["verdict"], chance_within=told["probability_within"],
            limit_sheet=judged.sheet,
        )  # fmt: skip

    def close(self, measurement: Measurement) -> None:
        """Close a pass: what follows from its readings is kept with it."""
        standing = measurement.readings.standing().order_by("recorded_at", "pk")
        measurement.derived = list(judge(measurement, answers_of(standing), at=measurement.opened_at).derived)
        measurement.closed_at = measurement.opened_at
        measurement.save()

    def visit(self, at: datetime, hours: float, found: str, left: str, station: str = "3.exhaust") -> None:
        """An earlier job at a station, signed."""
        task = self.job("earlier valve lash", state="signed")
        self.read(self.open_pass(task, at=at, hours=hours), station, found)
        self.read(self.open_pass(task, "as_left", at=at + timedelta(hours=1), hours=hours), station, left)

    def beyond(self, left: str = "", station: str = "3.exhaust", typed: str = "0.33 mm", **more: object) -> Finding:
        """A job with one station found beyond, and left as told."""
        task = self.job(**more)
        finding = self.read(self.open_pass(task), station, typed)
        if left:
            self.read(self.open_pass(task, "as_left", at=NOW + timedelta(minutes=20)), station, left)
        return finding
