"""Finds what is to be decided and what was decided, with a count of queries that doesn't grow with the rows."""

from collections.abc import Iterable, Sequence
from datetime import date, datetime
from zoneinfo import ZoneInfo

from django.db.models import Q

from logbook.bench.models import Finding, Measurement, Reading
from logbook.engines.models import MeterReading
from logbook.people.models import Person, Shop
from logbook.work.models import Task, WorkOrder
from measurements.conformity import NO_LIMIT, WITHIN

from .cases import Case, Derived, Outcome, build_cases
from .models import Decision, RunningUndecided

MOST_LOOKED_BACK = 120  # passes of one kind on an engine: twenty years of two visits a year with three passes each
OPEN = (WorkOrder.State.AT_THE_BENCH, WorkOrder.State.STOPPED_SHORT, WorkOrder.State.TO_DECIDE)


def orders_open_to(person: Person):
    """Work orders a person may look into: their shop's; for somebody who only witnesses, those with readings to witness."""
    seen = WorkOrder.objects.seen_by(person).select_related("shop", "engine", "part")
    if person.has_role("technician", "supervisor", "toolroom"):
        return seen
    witnessed = Task.objects.seen_by(person).exclude(witnessed_stations=[])
    return seen.filter(pk__in=witnessed.values("work_order"))


def rows_of(work_orders: Sequence[WorkOrder]) -> tuple[list[Measurement], list[Finding], list[Reading]]:
    """Passes, standing findings and all readings of some work orders; three queries."""
    passes = Measurement.objects.filter(task__work_order__in=work_orders).order_by("opened_at", "pk")
    measurements = list(passes.select_related("task__work_order__engine", "task__work_order__shop", "gauge"))
    findings = Finding.objects.standing().filter(measurement__in=measurements).order_by("pk")
    findings = findings.select_related("limit_sheet__compared_by")
    readings = Reading.objects.filter(measurement__in=measurements).order_by("recorded_at", "pk")
    return measurements, list(findings), list(readings.select_related("measurement", "measured_by", "keyed_by"))


def outcomes_by_pass(measurements: Sequence[Measurement], findings: Sequence[Finding]) -> dict[int, list[Outcome]]:
    """What each station was found to be, by pass."""
    passes, told = {one.pk: one for one in measurements}, {}
    for finding in findings:
        outcome = Outcome(passes[finding.measurement_id], finding.judgement, finding)
        told.setdefault(finding.measurement_id, []).append(outcome)
    return told


def cases_of(work_orders: Sequence[WorkOrder], at: datetime) -> list[Case]:
    """Every station and derived value measured on some work orders, with what was decided; five queries in all."""
    cases = build_cases(work_orders, *rows_of(work_orders), list(decisions_on(work_orders)))
    totals = engine_hours(one.engine_id for one in work_orders if one.engine_id)
    for case in cases:
        hours = totals.get(case.work_order.engine_id)
        case.is_past_end = case.decision is not None and is_past_end(case.decision, at, hours)
    return cases


def decisions_on(work_orders: Iterable[WorkOrder]):
    """Decisions made on some work orders, in the order they were made."""
    found = Decision.objects.filter(work_order__in=work_orders).select_related("decided_by", "shop", "finding")
    return found.order_by("decided_at", "pk")


def case_on(work_order: WorkOrder, on: Finding | Derived, at: datetime) -> Case | None:
    """The case whose found or left reading this is; None when it was struck or replaced meanwhile."""
    key = on.key if isinstance(on, Derived) else f"finding {on.pk}"
    return next((one for one in cases_of([work_order], at) if one.subject.key == key), None)


def engine_hours(engines: Iterable[int]) -> dict[int, float]:
    """What each engine has run in all [h], by its meter's last reading; engines without one are left out."""
    readings = MeterReading.objects.filter(
        meter__engine__in=set(engines), meter__unit="h", superseded_by=None
    ).select_related("meter")
    return {one.meter.engine_id: one.total for one in readings.order_by("taken_at", "pk")}


def engine_totals(work_order: WorkOrder) -> dict[str, float]:
    """What the engine of a job has run in all, by unit ("h", "starts", "km"), by its meters' last readings."""
    readings = MeterReading.objects.filter(meter__engine=work_order.engine_id, superseded_by=None)
    rows = readings.select_related("meter").order_by("taken_at", "pk") if work_order.engine_id else []
    return {one.meter.unit: one.total for one in rows}


def witnessed_stations(work_order: WorkOrder) -> list[str]:
    """Stations of a job that somebody from outside is to witness."""
    named = [station for task in work_order.tasks.all() for station in task.witnessed_stations]
    return list(dict.fromkeys(named))


def is_past_end(decision: Decision, at: datetime, hours: float | None) -> bool:
    """Tell whether a concession has run out: its last day is over in the shop, or its hours are reached."""
    if decision.choice != Decision.Choice.MAY_RUN_UNTIL:
        return False
    over = decision.ends_on is not None and day_in(decision.shop, at) > decision.ends_on
    return over or (decision.ends_at_hours is not None and hours is not None and hours >= decision.ends_at_hours)


def day_in(shop: Shop, at: datetime) -> date:
    """The day it is in the shop."""
    return at.astimezone(ZoneInfo(shop.time_zone)).date()


def signed_with_concessions(person: Person):
    """Signed jobs of a shop on which a concession still runs, or has run out."""
    running = Decision.objects.seen_by(person).filter(choice=Decision.Choice.MAY_RUN_UNTIL, extended_by=None)
    return orders_open_to(person).filter(state=WorkOrder.State.SIGNED, pk__in=running.values("work_order"))


def measured_anew(cases: Sequence[Case]) -> list[Case]:
    """Those of some cases whose station was judged again on a later job: what was found there then counts."""
    later = (
        Measurement.objects.filter(
            Q(task__work_order__engine__in={one.work_order.engine_id for one in cases} - {None})
            | Q(task__work_order__part__in={one.work_order.part_id for one in cases} - {None})
        )
        .exclude(task__work_order__state=WorkOrder.State.DROPPED)
        .select_related("task__work_order")
        .order_by("opened_at")
    )
    passes = list(later) if cases else []
    standing = Finding.objects.standing().filter(measurement__in=passes).exclude(verdict=NO_LIMIT)
    findings = standing.filter(characteristic__in={one.characteristic for one in cases})
    judged = {(one.measurement_id, one.characteristic, one.station) for one in findings} | {
        (one.pk, told["characteristic"], told["station"])
        for one in passes for told in one.derived if told["verdict"] != NO_LIMIT
    }  # fmt: skip
    return [case for case in cases if any(is_later(one, case, judged) for one in passes)]


def is_later(measurement: Measurement, case: Case, judged: set[tuple]) -> bool:
    """Tell whether a pass of another job judged a case's station after the case was measured."""
    order = measurement.task.work_order
    return (
        order.pk != case.work_order.pk
        and (order.engine_id, order.part_id) == (case.work_order.engine_id, case.work_order.part_id)
        and measurement.opened_at > case.subject.measurement.opened_at
        and (measurement.pk, case.characteristic, case.station) in judged
    )


def concession_at(case: Case) -> Decision | None:
    """The concession that a new one at this station would extend: the last, if nothing was put right or within since."""
    same = Q(finding__characteristic=case.characteristic, finding__station=case.station)
    if case.subject.finding is None:
        same = Q(derived__startswith=f"{case.characteristic} @ {case.station or 'engine'} # ")
    order = case.work_order
    made = Decision.objects.filter(same, work_order__engine=order.engine_id, work_order__part=order.part_id)
    last = made.filter(choice=Decision.Choice.MAY_RUN_UNTIL, extended_by=None).order_by("decided_at", "pk").last()
    if last is None or made.filter(choice=Decision.Choice.PUT_RIGHT, decided_at__gt=last.decided_at).exists():
        return None
    earlier = earlier_outcomes([case]).get((case.characteristic, case.station), ())
    since = [one for one in earlier if one.measurement.opened_at > last.decided_at]
    return None if any(one.verdict == WITHIN for one in since) else last


def undecided_runs(work_orders: Iterable[WorkOrder]) -> dict[int, RunningUndecided]:
    """Engines put back before a decision, by work order."""
    found = RunningUndecided.objects.filter(work_order__in=work_orders, ended_at=None)
    return {one.work_order_id: one for one in found}


def extensions_of(decisions: Iterable[Decision]) -> dict[int, int]:
    """How often each concession extends an earlier one; one query for each link of the longest chain."""
    counts = {one.pk: 0 for one in decisions}
    at_link = {one.pk: one.extends_id for one in decisions if one.extends_id}
    while at_link:
        for pk in at_link:
            counts[pk] += 1
        further = dict(Decision.objects.filter(pk__in=set(at_link.values())).values_list("pk", "extends_id"))
        at_link = {pk: further[earlier] for pk, earlier in at_link.items() if further.get(earlier)}
    return counts


def supervisors_besides(person: Person, took: Iterable[Person]) -> list[Person]:
    """Supervisors of the shop who could decide instead: neither this person nor anybody who took the readings."""
    barred = {person.pk, *(one.pk for one in took)}
    return list(Person.objects.seen_by(person).who_may_decide().exclude(pk__in=barred))


def has_second_person(person: Person) -> bool:
    """Tell whether somebody else works in the shop; a witness comes from outside."""
    works = Q(is_technician=True) | Q(is_supervisor=True) | Q(is_toolroom=True)
    return Person.objects.seen_by(person).filter(works, is_active=True).exclude(pk=person.pk).exists()


def readings_of(work_order: WorkOrder):
    """Every reading of a work order, struck ones too, in the order of recording."""
    found = Reading.objects.filter(measurement__task__work_order=work_order)
    return found.select_related("measured_by", "keyed_by", "superseded_by").order_by("recorded_at", "pk")


def took_readings(work_order: WorkOrder) -> dict[int, Person]:
    """Who measured or keyed on a work order."""
    people = [(one.measured_by, one.keyed_by) for one in readings_of(work_order)]
    return {person.pk: person for pair in people for person in pair}


def earlier_outcomes(cases: Sequence[Case]) -> dict[tuple[str, str | None], list[Outcome]]:
    """What the stations of one job were found and left to be on earlier jobs of its engine or part, oldest first.

    Two queries, however many stations and visits; bounded to the last passes.
    """
    if not cases:
        return {}
    order, begun = cases[0].work_order, min(case.subject.measurement.opened_at for case in cases)
    wanted = {(case.characteristic, case.station) for case in cases}
    passes = Measurement.objects.filter(
        task__work_order__engine=order.engine_id, task__work_order__part=order.part_id, shop_id=order.shop_id,
        kind__in={case.task.kind for case in cases}, opened_at__lt=begun,
    ).exclude(task__work_order=order).exclude(task__work_order__state=WorkOrder.State.DROPPED)  # fmt: skip
    newest = list(passes.select_related("task__work_order", "gauge").order_by("-opened_at", "-pk")[:MOST_LOOKED_BACK])
    findings: dict[int, list[Finding]] = {}
    for finding in Finding.objects.standing().filter(measurement__in=newest).order_by("pk"):
        findings.setdefault(finding.measurement_id, []).append(finding)
    told: dict[tuple[str, str | None], list[Outcome]] = {}
    for one in reversed(newest):
        outcomes = [Outcome(one, finding.judgement, finding) for finding in findings.get(one.pk, ())]
        for outcome in [*outcomes, *(Outcome(one, derived) for derived in one.derived)]:
            name = outcome.judgement["characteristic"], outcome.judgement["station"]
            if name in wanted:
                told.setdefault(name, []).append(outcome)
    return told


def last_left(task: Task) -> dict[str, dict]:
    """What each station of a task was left at on the last earlier job that left it, by station."""
    order = task.work_order
    passes = Measurement.objects.filter(
        task__work_order__engine=order.engine_id, task__work_order__part=order.part_id, shop_id=order.shop_id,
        kind=task.kind, phase=Measurement.Phase.AS_LEFT,
    ).exclude(task__work_order=order).exclude(task__work_order__state=WorkOrder.State.DROPPED)  # fmt: skip
    newest = list(passes.order_by("-opened_at", "-pk")[:MOST_LOOKED_BACK])
    place = {one.pk: number for number, one in enumerate(newest)}
    findings = sorted(
        Finding.objects.standing().filter(measurement__in=newest), key=lambda one: -place[one.measurement_id]
    )
    return {one.station: one.judgement for one in findings if one.judgement["value"] is not None}
