"""What can be done at the bench: open a pass, keep a reading, correct it, write down an act, close the pass."""

from collections.abc import Mapping
from datetime import datetime
from uuid import UUID, uuid5

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.gauges.models import Gauge
from logbook.gauges.queries import tester_conditions
from logbook.people.models import Person
from logbook.work.models import Task, WorkOrder
from logbook.work.roles import needs
from logbook.work.services import finish_task, start_task

from .closing_up import note_act, note_left, note_opened
from .guards import (
    NotAtThisStage,
    NotKept,
    held,
    judged,
    keep,
    keep_finding,
    kept_before,
    refuse_before_found,
    refuse_if_over,
    refuse_out_of_turn,
    said_before,
    station_named,
)
from .judging import Judgement, engine_of, kinds
from .models import Act, Measurement, Reading, Tablet
from .queries import Answer, answers_of, is_acted_on, standing_at, with_its_job
from .slips import ANSWERS, AS_MEANT, AS_TYPED, SlipAsked, meant
from .steps import route
from .words import station_title

AS_FOUND, AS_LEFT = Measurement.Phase.AS_FOUND, Measurement.Phase.AS_LEFT


@transaction.atomic
def open_measurement(
    task: Task, *, by: Person, at: datetime, phase: str, gauge: Gauge | None = None,
    conditions: Mapping[str, object] | None = None, engine_hours: float | None = None,
) -> Measurement:  # fmt: skip
    """Open a pass over a task's stations, by one method; the task is started by it, under its locks."""
    needs(by, task, "technician")
    kind = kinds().get(task.kind)
    if kind is None:
        raise NotAtThisStage(_("“%(task)s” measures nothing: there is no pass to open.") % {"task": task})
    if gauge is not None and gauge.shop_id != task.shop_id:
        raise NotKept(_("Gauge %(gauge)s isn't one of this shop.") % {"gauge": gauge.mark})
    if task.started_at is None or task.work_order.state == WorkOrder.State.PLANNED:
        start_task(task, by=by, at=at)
    refuse_if_over(task)
    declared = {condition.name for condition in kind.conditions}
    own = {name: value for name, value in (tester_conditions(gauge) if gauge else {}).items() if name in declared}
    opened = Measurement(
        shop=task.shop, task=task, kind=kind.name, phase=phase, gauge=gauge, conditions={**own, **(conditions or {})},
        engine_hours=engine_hours, opened_at=at, opened_by=by,
    )  # fmt: skip
    keep(opened, ("shop", "task", "gauge", "opened_by", "derived"))
    judged(opened, {}, at=at)  # conditions that can't be read are refused here, not at the first reading
    note_opened(opened, kind, by=by, at=at)
    return opened


@transaction.atomic
def record_reading(
    measurement: Measurement, *, by: Person, at: datetime, client_id: UUID, station: str, typed: str = "",
    not_measured: str = "", measured_by: Person | None = None, taken_at: datetime | None = None,
    tablet: Tablet | None = None, sequence: int = 0, slip_answer: str = "", supersedes: Reading | None = None,
    reason: str = "",
) -> Reading:  # fmt: skip
    """Keep one answer at one station, judged as it lands: a value, or why nothing was measured.

    The same `client_id` again gives the same reading. A further value at a station is a repeat; a correction
    supersedes one reading, with a reason; a value after “not measured” takes its place.

    Raises
    ------
    SlipAsked
        The reading looks like a slip and `slip_answer` doesn't say what to take it for; nothing is kept.
    Refused
        Anything else against it, in a sentence; nothing is kept.
    """
    needs(by, measurement, "technician")
    measured_by = measured_by or by
    needs(measured_by, measurement, "technician", "supervisor")
    pass_ = held(measurement)
    station = station_named(pass_, station)
    if already := kept_before(pass_, client_id, by, station, typed, not_measured):
        return already
    refuse_if_over(pass_.task, pass_)
    standing = standing_at(pass_)
    refuse_out_of_turn(pass_, station, supersedes)
    answered = said_before(standing, station, supersedes, not_measured)
    stands = [one for one in standing if one != answered]
    asked, told = None, None
    if typed.strip():
        typed, asked, told = slip_answered(pass_, stands, station, typed.strip(), slip_answer, at)
    reading = Reading(
        shop_id=pass_.shop_id, measurement=pass_, client_id=client_id, station=station, typed=typed.strip(),
        not_measured=not_measured.strip(), measured_by=measured_by, keyed_by=by, taken_at=taken_at or at, recorded_at=at,
        tablet=tablet, sequence=sequence, supersedes=answered,
        reason=reason.strip() or (_("answered again") if answered and answered.not_measured else ""),
        slip_asked=asked, slip_answer=slip_answer if asked else "",
    )  # fmt: skip
    keep(reading, ("shop", "measurement", "measured_by", "keyed_by", "tablet"))
    keep_finding(reading, told or judged(pass_, answers_of([*stands, reading]), at=at, station=station))
    if pass_.phase == AS_LEFT and reading.typed:
        note_left(pass_.task, station, by=by, at=at)
    return reading


@transaction.atomic
def strike_reading(reading: Reading, *, by: Person, at: datetime, client_id: UUID, reason: str) -> Reading:
    """Strike a reading that was spoilt at the gauge; it stays on the sheet, with the reason."""
    needs(by, reading, "technician")
    pass_ = held(reading.measurement)
    if already := kept_before(pass_, client_id, by, reading.station, "", ""):
        return already
    refuse_if_over(pass_.task, pass_)
    if pass_.phase == AS_FOUND and is_acted_on(pass_, reading.station):
        raise NotAtThisStage(
            _("What was found at %(station)s is closed: something was done there since. Correct the entry instead, "
              "with the reason.") % {"station": station_title(reading.station)}
        )  # fmt: skip
    return strike(pass_, reading, by=by, at=at, client_id=client_id, reason=reason)


@transaction.atomic
def move_reading(reading: Reading, *, by: Person, at: datetime, client_id: UUID, station: str, reason: str) -> Reading:
    """Move a reading to the station where it was really taken: struck there, kept here as it was typed."""
    pass_ = held(reading.measurement)
    if station_named(pass_, station) == reading.station:
        raise NotKept(_("It is at %(station)s already.") % {"station": station_title(reading.station)})
    if not reading.typed:
        raise NotKept(_("Only a value can be moved; “not measured” is said at its own station."))
    strike_reading(reading, by=by, at=at, client_id=uuid5(client_id, "struck"), reason=reason)
    return record_reading(
        reading.measurement, by=by, at=at, client_id=client_id, station=station, typed=reading.typed,
        measured_by=reading.measured_by, taken_at=reading.taken_at, tablet=reading.tablet, sequence=reading.sequence,
        slip_answer=AS_TYPED,
    )  # fmt: skip


@transaction.atomic
def record_act(
    task: Task, *, by: Person, at: datetime, client_id: UUID, station: str, what: str, done_at: datetime | None = None
) -> Act:
    """Write down what was done at a station, once what was found there is kept; readings left before it are struck."""
    needs(by, task, "technician")
    task = Task.objects.select_for_update().get(pk=task.pk)
    found = with_its_job(task.measurements.filter(phase=AS_FOUND, kind=task.kind)).first()
    if found is None:
        raise NotAtThisStage(_("Nothing was measured as found yet: that comes before anything is done."))
    station = station_named(found, station)
    if already := Act.objects.filter(client_id=client_id).first():
        if (already.task_id, already.station, already.done_by_id) != (task.pk, station, by.pk):
            raise NotKept(_("This form was used already; load the page anew and write the act down again."))
        return already
    refuse_if_over(task)
    refuse_before_found(found, station)
    if not what.strip():
        raise NotKept(_("Write in a few words what was done at %(station)s.") % {"station": station_title(station)})
    act = Act(shop_id=task.shop_id, task=task, client_id=client_id, station=station, what=what.strip(), done_by=by,
              done_at=done_at or at, recorded_at=at)  # fmt: skip
    keep(act, ("shop", "task", "done_by"))
    left = Reading.objects.standing().filter(measurement__task=task, measurement__phase=AS_LEFT, station=station)
    for reading in left.select_related("measurement"):
        told = (_("set again: %(what)s") % {"what": act.what})[:300]
        strike(
            held(reading.measurement), reading, by=by, at=at, client_id=uuid5(client_id, str(reading.pk)), reason=told
        )
    engine = found.task.work_order.engine
    note_act(act, kinds()[found.kind], engine.adjustment if engine else "", by=by, at=at)
    return act


@transaction.atomic
def close_measurement(measurement: Measurement, *, by: Person, at: datetime) -> Measurement:
    """Close a pass; the values derived from it are kept once, as they stand now. Closed twice, the first one stands."""
    needs(by, measurement, "technician")
    pass_ = held(measurement)
    if pass_.task.work_order.state in (WorkOrder.State.SIGNED, WorkOrder.State.DROPPED):
        raise NotAtThisStage(_("Job %(job)s is over: nothing on it changes any more.") % {"job": pass_.task.work_order})
    if pass_.closed_at is None:
        pass_.derived = list(judged(pass_, answers_of(standing_at(pass_)), at=at).derived)
        pass_.closed_at = at
        pass_.save(update_fields=["derived", "closed_at"])
    measurement.derived, measurement.closed_at = pass_.derived, pass_.closed_at
    return measurement


def slip_answered(
    measurement: Measurement, stands: list[Reading], station: str, typed: str, answer: str, at: datetime
) -> tuple[str, dict | None, Judgement | None]:
    """What a value is taken for, the slip that was asked about, and its judgement where it already is the station's.

    A slip not answered yet is asked.

    The value is judged by itself: among its repeats a slip would hide in their mean.
    """
    others = answers_of(one for one in stands if one.station != station)
    mark = measurement.task.work_order.shop.decimal_mark
    is_alone = all(one.station != station for one in stands)
    told = judged(measurement, {**others, station: Answer((typed,))}, at=at, station=station)
    finding = told.findings.get(station)
    if finding is None or finding["slip"] is None:
        return typed, None, told if is_alone else None
    if answer not in ANSWERS:
        raise SlipAsked(finding, mark)
    asked = {**finding["slip"], "typed": typed}
    if answer == AS_MEANT:
        return meant(finding, mark), asked, None
    return typed, asked, told if is_alone else None


def strike(
    measurement: Measurement, reading: Reading, *, by: Person, at: datetime, client_id: UUID, reason: str
) -> Reading:
    """Put a strike in a reading's place; what is left at its station is judged anew."""
    standing = standing_at(measurement)
    if reading not in standing:
        raise NotKept(_("This entry was replaced or struck already; look what stands there now."))
    row = Reading(
        shop_id=reading.shop_id, measurement=measurement, client_id=client_id, station=reading.station,
        measured_by=reading.measured_by, keyed_by=by, taken_at=at, recorded_at=at, supersedes=reading,
        reason=reason.strip(), is_strike=True,
    )  # fmt: skip
    keep(row, ("shop", "measurement", "measured_by", "keyed_by"))
    left = [one for one in standing if one != reading]
    if any(one.station == reading.station for one in left):
        keep_finding(row, judged(measurement, answers_of(left), at=at, station=reading.station))
    return row


@transaction.atomic
def turn_crank(task: Task, *, by: Person, at: datetime, to: str) -> WorkOrder:
    """Write down that the crank was turned, and where it stands now: at one of the stops of this task's way round."""
    needs(by, task, "technician")
    engine = engine_of(task.work_order)
    stops = route(kinds()[task.kind], engine).stops if engine else ()
    if to not in [stop.mark for stop in stops if stop.mark]:
        raise NotKept(_("“%(to)s” is no stop of this task.") % {"to": to})
    order = WorkOrder.objects.select_for_update().get(pk=task.work_order_id)
    task.work_order.state = order.state
    refuse_if_over(task)
    order.crank_at = task.work_order.crank_at = to
    order.save(update_fields=["crank_at"])
    return order


@transaction.atomic
def finish_at_bench(task: Task, *, by: Person, at: datetime, minutes: int | None = None) -> Task:
    """Finish a measuring task: its passes are closed, with what was derived from them, then the task itself.

    Of a task that was finished already the passes are closed all the same.
    """
    task.refresh_from_db(fields=["done_at", "done_by"])
    for measurement in task.measurements.filter(closed_at=None):
        close_measurement(measurement, by=by, at=at)
    return task if task.done_at else finish_task(task, by=by, at=at, minutes=minutes)


@transaction.atomic
def state_conditions(
    measurement: Measurement, *, by: Person, at: datetime, conditions: Mapping[str, object]
) -> Measurement:
    """Say how a pass is taken, better than when it was opened; what was kept and judged already must stay as it is."""
    needs(by, measurement, "technician")
    pass_ = held(measurement)
    refuse_if_over(pass_.task, pass_)
    answers = answers_of(standing_at(pass_))
    before = judged(pass_, answers, at=at).findings
    pass_.conditions = dict(conditions)
    after = judged(pass_, answers, at=at).findings
    if turned := [station for station in before if outcome(before[station]) != outcome(after.get(station))]:
        told = {"stations": ", ".join(station_title(one) for one in turned[:6])}
        raise NotAtThisStage(
            _("That would turn what is kept at %(stations)s. Open another pass that is taken this way.") % told
        )
    pass_.save(update_fields=["conditions"])
    measurement.conditions = pass_.conditions
    return measurement


def outcome(finding: Mapping[str, object] | None) -> tuple | None:
    """What of a finding may not change behind a reading that is kept."""
    return finding and (finding["value"], finding["expanded_uncertainty"], finding["verdict"])
