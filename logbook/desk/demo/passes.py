"""Measures the tasks of a visit: as found, the act where one is called for, as left.

Passes of a visit that is still open go through the bench's own services, reading by reading; those of a visit long
signed are kept at once by `history`.
"""

from uuid import uuid4

from logbook.bench.guards import judged
from logbook.bench.judging import Judgement, engine_of, kinds
from logbook.bench.models import Measurement, Reading
from logbook.bench.queries import answers_of, standing_at, with_its_job
from logbook.bench.services import close_measurement, open_measurement, record_act, record_reading, strike_reading
from logbook.bench.slips import AS_TYPED
from logbook.work.models import Task

from .bench import A_READING, AN_ACT, Visit
from .history import keep_pass
from .wear import typed

CONDITIONS = {
    "valve_lash": {"state": "cold", "method": "drag"},
    "compression": {"state": "hot", "strokes": 6, "throttle_open": True, "all_plugs_out": True},
    "leak_down": {"state": "hot"},
    "bore": {"part_temperature": "20 °C", "gauge_temperature": "20 °C"},
}
Typed = dict[str, list[str]]  # by station, the repeats as typed


def measure(visit: Visit, task: Task) -> None:
    """Take a task's passes; those of a visit that is finished are closed."""
    stations = visit.told.get("only") or every_station(visit, task)
    told = taken(visit, task, "as_found", found(visit, task, stations))
    acts = acts_called_for(visit, told) if task.kind == "valve_lash" else {}
    for station, what in acts.items():
        record_act(task, by=visit.measures, at=visit.later(AN_ACT), client_id=uuid4(), station=station, what=what)
    again = [station for station in acts if station not in visit.told.get("waits_for_left", ())]
    if again:
        taken(visit, task, "as_left", left(visit, task, again))


def every_station(visit: Visit, task: Task) -> list[str]:
    """The stations of a task in the order of the hands; of some cylinders where only those were opened."""
    stations, opened = kinds()[task.kind].stations(engine_of(task.work_order)), visit.told.get("cylinders")
    return [station for station in stations if opened is None or int(station.split(".")[0]) in opened]


def found(visit: Visit, task: Task, stations: list[str]) -> Typed:
    """What is read at each station: as the engine's wear has it, or as the visit's file says."""
    said, step = visit.told.get("found", {}), visit.gauge_for(task.kind).resolution
    read, hours = visit.bench.wear.read, visit.bench.run.since_first(visit.days)
    return {
        station: said.get(f"{task.kind} {station}") or said.get(station)
        or [typed(read(task.kind, station, hours), step)]
        for station in stations
    }  # fmt: skip


def left(visit: Visit, task: Task, stations: list[str]) -> Typed:
    """What is read after a screw was turned, its locknut tight."""
    said, step = visit.told.get("left", {}), visit.gauge_for(task.kind).resolution
    set_lash, hours = visit.bench.wear.set_lash, visit.bench.run.since_first(visit.days)
    return {station: [said.get(station) or typed(set_lash(station, hours), step)] for station in stations}


def acts_called_for(visit: Visit, told: Judgement) -> dict[str, str]:
    """What is done at each valve that lies outside its setting zone, in the words of the advice."""
    turned = {}
    for station, advice in told.advice.items():
        act = next((one for one in advice if one["act"] == "turn_screw" and one.get("turns")), None)
        if station not in visit.told.get("leaves", ()):
            turned[station] = f"{act['direction']} {act['turns']:g} turn" if act else "set by feel"
    return turned


def taken(visit: Visit, task: Task, phase: str, answers: Typed) -> Judgement:
    """Take a pass; gives what it was judged to be."""
    heard = {"escapes": visit.told["escapes"]} if task.kind == "leak_down" and "escapes" in visit.told else {}
    conditions = {**CONDITIONS[task.kind], **heard}
    if visit.ends == "signed":
        return keep_pass(visit, task, phase, conditions, answers)
    return taken_live(visit, task, phase, conditions, answers)


def taken_live(visit: Visit, task: Task, phase: str, conditions: dict, answers: Typed) -> Judgement:
    """Take a pass reading by reading, with what is struck and what can't be measured."""
    one = open_measurement(
        task, by=visit.keys, at=visit.later(AN_ACT), phase=phase, gauge=visit.gauge_for(task.kind), conditions=conditions,
        engine_hours=visit.bench.run.total(visit.days),
    )  # fmt: skip
    is_first = phase == Measurement.Phase.AS_FOUND
    for told in visit.told.get("struck", ()) if is_first else ():
        if told["kind"] == task.kind:
            spoilt = keep(visit, one, told["station"], typed=told["typed"])
            strike_reading(spoilt, by=visit.keys, at=visit.later(A_READING), client_id=uuid4(), reason=told["reason"])
    for station, texts in answers.items():
        for text in texts:
            keep(visit, one, station, typed=text)
    for station, reason in visit.told.get("not_measured", {}).items() if is_first else ():
        keep(visit, one, station, not_measured=reason)
    if visit.is_finished:
        close_measurement(one, by=visit.keys, at=visit.clock)
    one = with_its_job(Measurement.objects).get(pk=one.pk)
    return judged(one, answers_of(standing_at(one)), at=visit.clock)


def keep(visit: Visit, one: Measurement, station: str, **answer: str) -> Reading:
    """Keep one answer as it lands; what looks like a slip is answered to be as typed."""
    return record_reading(one, by=visit.keys, at=visit.later(A_READING), client_id=uuid4(), station=station,
                          measured_by=visit.measures, slip_answer=AS_TYPED, **answer)  # fmt: skip
