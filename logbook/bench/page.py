"""Gathers the bench page: one look at the task's rows, then the step in hand and what stands around it."""

from collections.abc import Mapping
from datetime import datetime
from uuid import uuid4

from django.db.models import QuerySet
from django.utils.translation import gettext as _
from django.utils.translation import gettext_lazy

from logbook.core.figures import figure
from logbook.engines.models import MeterReading
from logbook.gauges.models import Gauge
from logbook.gauges.queries import with_standing
from logbook.people.models import Person
from logbook.work.models import Task, WorkOrder
from logbook.work.queries import engine_locks
from measurements.kind import CRANKED, TURNED_BY_HAND, UNDER_AIR
from measurements.limits import read_condition

from .at_work import AS_FOUND, AS_LEFT, PHASE_OF, AtWork, at_work
from .forms import REASONS, PassForm
from .judging import day_in, judge, kinds
from .models import Measurement
from .queries import answers_of, lines_for, sheet_in_force
from .shown import PHASES, Kept, Station, conditions_words, drawn_dial, drawn_plan, gauge_words, last_of
from .slips import SlipAsked
from .steps import ACT, FOUND, LEFT, OPEN, OVER, TURN, Step
from .words import act_words, done_words, station_title, value_words, verdict_words

SIGNS = (
    ("<", gettext_lazy("less than")), (">", gettext_lazy("more than")), ("..", gettext_lazy("to, of a bracket")),
    (";", gettext_lazy("and again")), ("+", gettext_lazy("leaf on leaf")), ("-", gettext_lazy("minus")),
    ("/", gettext_lazy("divided by")),
)  # fmt: skip
BEFORE_TURNING = {
    TURNED_BY_HAND: gettext_lazy("feeler out, hands clear, helper answers"),
    UNDER_AIR: gettext_lazy(
        "air off and its line empty, crank hold off, hands clear, helper answers; hold it again before the air"
    ),
    CRANKED: gettext_lazy("bar out, everybody clear, called and answered"),
}  # fmt: skip


def measurers(person: Person) -> QuerySet[Person]:
    """Who may have measured what a person keys."""
    return Person.objects.seen_by(person).filter(is_active=True).exclude(is_technician=False, is_supervisor=False)


def bench_page(
    task: Task, person: Person, *, now: datetime, measured_by: int | None = None, station: str = "", step: str = "",
    kept: object = "", ask: str = "", slip: SlipAsked | None = None, refused: str = "",
    said: Mapping[str, str] | None = None, **more: object,
) -> dict[str, object]:  # fmt: skip
    """Everything that the page of a task at the bench shows."""
    order = task.work_order
    sheet = sheet_in_force(order.engine_id, now)
    work = at_work(task, lines_for(sheet, task.kind, day_in(order.shop, now)))
    told = {
        "task": task, "order": order, "kind": kinds()[task.kind], "locks": locks_by_person(order),
        "keys": person.has_role("technician"), "may_enter": person.has_role("technician") and is_open(task),
        "sheet": sheet, "slip": slip, "refused": refused, "ask": ask, **more,
    }  # fmt: skip
    if work is None:
        return told | {"contradicts": True, "stations": []}
    if said:
        station, step = said.get("station", ""), step_said(said)
    current = step_asked(work, station, step) if work.passes else Step(OPEN)
    if task.done_at and not station:
        current = Step(OVER)
    kept_row = kept_reading(work, kept, now)
    if kept_row and kept_row.wants_another and not station:
        current = Step(FOUND if kept_row.reading.measurement.phase == AS_FOUND else LEFT,
                       work.route.stop_of(kept_row.reading.station), kept_row.reading.station)  # fmt: skip
    here = bool(kept_row) and kept_row.reading.station == current.station
    told |= {"work": work, "kept": kept_row, "kept_here": here} | around(work)
    return told | in_hand(work, current, person, measured_by, now, said)


def is_open(task: Task) -> bool:
    """Tell whether anything can be entered on a task now."""
    states = (WorkOrder.State.PLANNED, WorkOrder.State.AT_THE_BENCH)
    return task.done_at is None and task.work_order.state in states


def locks_by_person(order: WorkOrder) -> list[tuple[Person, list[str]]]:
    """Who holds which locks on the engine, each point once."""
    held: dict[Person, dict[str, None]] = {}
    for lock in engine_locks(order):
        held.setdefault(lock.person, {})[lock.point] = None
    return [(person, list(points)) for person, points in held.items()]


def step_said(said: Mapping[str, str]) -> str:
    """The step that a form was posted from."""
    if "what" in said:
        return ACT
    return next((name for name, phase in PHASE_OF.items() if phase == said.get("phase")), "")


def step_asked(work: AtWork, station: str, step: str) -> Step:
    """The step at a station that was asked for; without one, the next in the order of the hands."""
    stop = work.route.stop_of(station) if station else None
    if stop is None:
        return work.next_step()
    if step not in (FOUND, ACT, LEFT):
        done = station in work.progress.left or station in work.progress.acted
        step = LEFT if done else FOUND
    return Step(step, stop, station)


def kept_reading(work: AtWork, pk: object, now: datetime) -> Kept | None:
    """The reading that was just kept."""
    reading = next((one for one in work.readings if str(one.pk) == str(pk)), None)
    if reading is None:
        return None
    reading.measurement = next(one for one in work.passes if one.pk == reading.measurement_id)
    finding = next((one for one in reversed(work.findings) if one.measurement_id == reading.measurement_id
                    and one.station == reading.station), None)  # fmt: skip
    mark = work.task.work_order.shop.decimal_mark
    return Kept(reading, finding, last_of(work, reading.station, now), mark)


def around(work: AtWork) -> dict[str, object]:
    """What stands around the step: the plan of the way round, the passes, what was kept in this phase."""
    titles = {one.name: one.title for one in work.kind.conditions}
    pass_ = work.current
    return {
        "stations": [(station, station_title(station)) for station in work.route.stations],
        "current_pass": pass_,
        "conditions": conditions_words(pass_, titles) if pass_ else [],
        "note": work.route.note, "before_turning": BEFORE_TURNING.get(work.task.lock_state, ""),
        "count": len(work.route.stations), "phase_words": PHASES[pass_.phase] if pass_ else "",
    }  # fmt: skip


def in_hand(
    work: AtWork, step: Step, person: Person, measured_by: int | None, now: datetime, said: Mapping[str, str] | None
) -> dict[str, object]:
    """The step in hand, with its form's fields."""
    told: dict[str, object] = {
        "step": step.what, "stop": step.stop, "plan": drawn_plan(work, step), "dial": drawn_dial(work),
        "stop_number": work.route.stops.index(step.stop) + 1 if step.stop else None, "stops": len(work.route.stops),
        "here": chips(work, step), "then": then(work, step), "client_id": (said or {}).get("client_id") or uuid4(),
        "typed": (said or {}).get("typed", ""), "reasons": REASONS, "signs": SIGNS,
    }  # fmt: skip
    people = list(measurers(person)) if step.what in (FOUND, LEFT) else []
    who = next((one for one in people if one.pk == measured_by), person)
    told |= {"people": people, "who": who, "gauge": gauge_words(work, work.judged.get(step.station))}
    if step.what in (FOUND, LEFT):
        phase = PHASE_OF[step.what]
        told["station"] = Station(work, step.station, phase, last_of(work, step.station, now))
        told |= {"phase": phase, "phase_words": PHASES[phase], "number": work.numbers[step.station]}
        told["needs_pass"] = work.open_pass(AS_FOUND) is None and work.open_pass(phase) is None
    elif step.what == ACT:
        mark = work.task.work_order.shop.decimal_mark
        finding = work.finding(AS_LEFT, step.station) or work.finding(AS_FOUND, step.station)
        calls = finding.judgement.get("acts", []) if finding else []
        told["station"] = Station(work, step.station, AS_FOUND, last_of(work, step.station, now))
        told["calls"] = [
            {**act, "words": act_words(act, mark),
             "expected": f"{figure(act['predicted'], decimal_mark=mark)} {act['unit']}" if "predicted" in act else ""}
            for act in calls
        ]  # fmt: skip
        told["phase_words"] = PHASES[AS_FOUND]
        told["by_shim"] = work.all_found_first and step.station in work.progress.calls
        told |= {"what": done_words(calls[0], mark) if calls else "", "number": work.numbers[step.station]}
        told["what"] = (said or {}).get("what", told["what"])
    elif step.what == OVER:
        told["open_passes"] = [one for one in work.passes if one.closed_at is None]
        told |= {"derived": follows(work, now), "open_questions": open_questions(work)}
    return told


def follows(work: AtWork, now: datetime) -> list[dict[str, object]]:
    """What follows from the readings: live while a pass is open, as it was kept once it is closed."""
    mark, found = work.task.work_order.shop.decimal_mark, []
    for one in work.passes:
        one.task = work.task
        answers = answers_of(reading for reading in work.readings if reading.measurement_id == one.pk)
        derived = one.derived if one.closed_at else judge(one, answers, at=now).derived if answers else ()
        found += [
            {"title": work.kind.characteristic(told["characteristic"]).title,
             "where": station_title(told["station"]) if told["station"] else _("Engine"), "phase": PHASES[one.phase],
             "value": value_words(told, mark), "verdict": verdict_words(told, mark), "told": told,
             "notes": [note for note in told["notes"] if not note.startswith("u is")]}
            for told in derived
        ]  # fmt: skip
    return found


def open_questions(work: AtWork) -> list[dict[str, object]]:
    """Stations that stand beyond or too close, with what would settle them."""
    mark = work.task.work_order.shop.decimal_mark
    return [
        {"name": name, "title": station_title(name), "finding": finding, "verdict": verdict_words(finding.judgement, mark),
         "needs": (finding.judgement["needs"] or {}).get("sentence", "")}
        for name, finding in work.judged.items() if finding.verdict in ("beyond", "too_close")
    ]  # fmt: skip


def chips(work: AtWork, step: Step) -> list[dict[str, object]]:
    """The stations of this stop as links, each with its number, value and verdict."""
    names = step.stop.stations if step.stop else work.route.stations
    return [
        {"name": name, "title": station_title(name), "number": work.numbers[name], "finding": work.judged.get(name),
         "now": name == step.station}
        for name in names
    ]  # fmt: skip


def then(work: AtWork, step: Step) -> str:
    """What comes after the step in hand, in a few words for its button."""
    if step.what not in (FOUND, LEFT, ACT):
        return ""
    after = work.next_step(step)
    if after.what == TURN:
        return _("turn the crank")
    if after.what == OVER:
        return _("all measured")
    name = station_title(after.station)
    return {FOUND: name, ACT: _("set %(station)s"), LEFT: _("%(station)s as left")}[after.what] % {"station": name}


def pass_form(
    task: Task, person: Person, now: datetime, data: Mapping[str, str] | None, opened: Measurement | None = None
) -> PassForm:
    """The form of a new pass, or of how an open one is taken."""
    kind, order = kinds()[task.kind], task.work_order
    today = day_in(order.shop, now)
    lines = lines_for(sheet_in_force(order.engine_id, now), task.kind, today)
    states = [line.condition for line in lines if line.condition and not read_condition(line.condition).is_span]
    if opened is not None:
        return PassForm.of(opened, kind, data, states=states)
    quantities = {one.dimension for one in kind.entered}
    gauges = with_standing(Gauge.objects.seen_by(person)).filter(
        quantity__in=quantities, retired_at=None, is_setting_master=False
    )
    last = MeterReading.objects.filter(meter__engine=order.engine_id, meter__unit="h", superseded_by=None)
    read = last.select_related("meter").order_by("-taken_at", "-pk").first() if order.engine_id else None
    fresh = read and day_in(order.shop, read.taken_at) == today
    form = PassForm(kind, gauges.order_by("standing_failed", "mark"), today, data, states=states,
                    initial={"engine_hours": f"{read.total:g}"} if fresh else {})  # fmt: skip
    if read and not fresh:
        told = {"hours": f"{read.total:g}", "on": day_in(order.shop, read.taken_at).isoformat()}
        form.fields["engine_hours"].help_text = _("last read: %(hours)s h on %(on)s") % told
    return form
