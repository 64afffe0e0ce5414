"""A job at the bench: an invented engine's valve lash, its technician with the locks on, a feeler gauge."""

from dataclasses import dataclass, field
from datetime import datetime, timedelta
from uuid import uuid4

from logbook.bench.models import Act, Measurement, Reading
from logbook.bench.services import open_measurement, record_act, record_reading
from logbook.engines.models import Engine
from logbook.gauges.models import Gauge
from logbook.people.models import Person, Shop
from logbook.work.lockout import STATES
from logbook.work.models import Task
from logbook.work.services import open_work_order, take_lock
from tests.factories import NOW, make_engine, make_gauge, make_limits, make_person, make_shop

COLD = {"state": "cold"}


@dataclass
class Bench:
    """A task with what is needed to work on it, and short ways to do so."""

    shop: Shop
    technician: Person
    supervisor: Person
    engine: Engine
    gauge: Gauge
    task: Task
    passes: dict[str, Measurement] = field(default_factory=dict)
    now: datetime = NOW

    def pass_of(self, phase: str = "as_found", **more: object) -> Measurement:
        if phase not in self.passes:
            told = {"gauge": self.gauge, "conditions": COLD, "engine_hours": 4210.0} | more
            self.passes[phase] = open_measurement(self.task, by=self.technician, at=self.now, phase=phase, **told)
        return self.passes[phase]

    def read(self, station: str, typed: str = "", phase: str = "as_found", **more: object) -> Reading:
        self.now += timedelta(seconds=20)
        told = {"by": self.technician, "at": self.now, "client_id": uuid4(), "station": station, "typed": typed} | more
        return record_reading(self.pass_of(phase), **told)

    def act(self, station: str, what: str = "screw loosened 0.12 turn", **more: object) -> Act:
        self.now += timedelta(seconds=20)
        told = {"by": self.technician, "at": self.now, "client_id": uuid4(), "station": station, "what": what} | more
        return record_act(self.task, **told)

    def next_visit(self, days: int = 90, kind: str = "valve_lash") -> "Bench":
        """The same engine, shop and gauge, some days later on a job of its own."""
        self.now += timedelta(days=days)
        return job_for(self.shop, self.technician, self.supervisor, self.engine, self.gauge, kind, self.now)


def job_for(shop, technician, supervisor, engine, gauge, kind, at) -> Bench:
    order = open_work_order(by=supervisor, at=at, engine=engine, title="Half-yearly service", kinds=[kind])
    task = order.tasks.get(kind=kind)
    for point in STATES[task.lock_state].locked:
        take_lock(order, by=technician, at=at, state=task.lock_state, point=point)
    return Bench(shop, technician, supervisor, engine, gauge, task, now=at)


def make_bench(
    shop_name: str = "Reed Lake workshop",
    kind: str = "valve_lash",
    limits: dict | None = None,
    shop: dict | None = None,
    **engine,
):
    """A shop with everything on it, ready for a task of one kind."""
    shop = make_shop(shop_name, **(shop or {}))
    technician, supervisor = (
        make_person(shop, f"{role} of {shop_name}", role) for role in ("technician", "supervisor")
    )
    about = make_engine(shop, **engine)
    make_limits(about, supervisor, **(limits or {}))
    return job_for(shop, technician, supervisor, about, make_gauge(shop, technician), kind, NOW)
