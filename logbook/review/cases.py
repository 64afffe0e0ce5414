"""A case: one thing a supervisor decides on, as found and as left side by side, with what was decided on it."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from logbook.bench.models import Finding, Measurement
from logbook.people.models import Person
from logbook.work.models import Task, WorkOrder
from measurements.conformity import BEYOND, NO_LIMIT, TOO_CLOSE, WITHIN

from .models import Decision

FLAGGED = (BEYOND, TOO_CLOSE)
Choice = Decision.Choice


@dataclass(frozen=True)
class Derived:
    """A derived value of a pass, named the way a decision on it is kept; the engine's own has no station."""

    measurement: Measurement
    characteristic: str
    station: str | None = None

    @property
    def key(self) -> str:
        """Its name in `Decision.derived`.

        >>> Derived(Measurement(pk=7), "compression.difference").key
        'compression.difference @ engine # 7'
        """
        return f"{self.characteristic} @ {self.station or 'engine'} # {self.measurement.pk}"


@dataclass(frozen=True)
class Outcome:
    """What a station was found to be in one pass: the judgement, and the finding row where there is one."""

    measurement: Measurement
    judgement: Mapping[str, object]
    finding: Finding | None = None

    @property
    def verdict(self) -> str:
        """Its verdict."""
        return self.judgement["verdict"]

    @property
    def is_flagged(self) -> bool:
        """Tell whether it is beyond or too close to call."""
        return self.verdict in FLAGGED

    @property
    def decided_on(self) -> Finding | Derived:
        """What a decision on it names."""
        told = self.judgement
        return self.finding or Derived(self.measurement, told["characteristic"], told["station"])

    @property
    def key(self) -> str:
        """One word for it, for addresses and forms."""
        on = self.decided_on
        return f"finding {on.pk}" if isinstance(on, Finding) else on.key


@dataclass
class Case:
    """A station, or a derived value, of a task: what it was found and left to be, who took it, what was decided."""

    work_order: WorkOrder
    task: Task
    characteristic: str
    station: str | None
    found: Outcome | None = None
    left: Outcome | None = None
    took: list[Person] = field(default_factory=list)
    decisions: list[Decision] = field(default_factory=list)
    is_past_end: bool = False

    @property
    def subject(self) -> Outcome:
        """What is decided on: as found where it is beyond or too close, else as left where that is."""
        if self.left and self.left.is_flagged and not (self.found and self.found.is_flagged):
            return self.left
        return self.found or self.left

    @property
    def now(self) -> Outcome:
        """How the station stands now: as left where it was measured against a limit, else as found."""
        return self.left if self.left and self.left.verdict != NO_LIMIT else self.found or self.left

    @property
    def is_flagged(self) -> bool:
        """Tell whether something here is beyond or too close to call."""
        return self.subject.is_flagged

    @property
    def is_left_within(self) -> bool:
        """Tell whether it was left within."""
        return self.left is not None and self.left.verdict == WITHIN

    @property
    def decision(self) -> Decision | None:
        """The decision that stands: the last one on what is decided on now."""
        return self.decisions[-1] if self.decisions else None

    @property
    def is_undecided(self) -> bool:
        """Tell whether a decision is still wanted, or wanted again."""
        if not self.is_flagged:
            return False
        decision = self.decision
        if decision is None or self.is_past_end:
            return True
        return decision.choice == Choice.PUT_RIGHT and not self.is_left_within

    @property
    def is_to_be_measured_again(self) -> bool:
        """Tell whether it was sent back and has not been measured again."""
        return self.is_flagged and self.decision is not None and self.decision.choice == Choice.MEASURE_AGAIN

    @property
    def badness(self) -> tuple[float, float, float]:
        """Sorts cases, worst first: by how it stands now, the engine's duty weighing in, then by chance and margin."""
        told = self.now.judgement
        rank = {BEYOND: 0.0, TOO_CLOSE: 1.0}.get(self.now.verdict, 2.0) - weight_of(self.work_order)
        chance = told["probability_within"]
        return rank, -1.0 if chance is None else chance, told["margin"] if told.get("margin") is not None else 0.0


def weight_of(work_order: WorkOrder) -> float:
    """How much an engine's duty weighs: too close on a life-saving engine stands beside beyond on another."""
    duty = work_order.engine.duty if work_order.engine_id else ""
    return {"life_saving": 1.0, "standby": 0.5}.get(duty, 0.0)


def build_cases(
    work_orders: Sequence[WorkOrder],
    measurements: Sequence[Measurement],
    findings: Sequence[Finding],
    readings: Sequence,
    decisions: Sequence[Decision],
) -> list[Case]:
    """Put the rows of some work orders together into cases, in the order they were measured.

    The newest finding of a station counts; one without a limit never hides one that was judged.
    """
    orders = {order.pk: order for order in work_orders}
    by_pass: dict[int, list[Finding]] = {}
    for finding in findings:
        by_pass.setdefault(finding.measurement_id, []).append(finding)
    cases: dict[tuple, Case] = {}
    for measurement in measurements:
        outcomes = [Outcome(measurement, one.judgement, one) for one in by_pass.get(measurement.pk, ())]
        for outcome in [*outcomes, *(Outcome(measurement, one) for one in measurement.derived)]:
            name = measurement.task_id, outcome.judgement["characteristic"], outcome.judgement["station"]
            case = cases.get(name) or Case(orders[measurement.task.work_order_id], measurement.task, *name[1:])
            cases[name] = case
            take_in(case, outcome)
    for case in cases.values():
        case.took = takers(case, readings)
        case.decisions = [one for one in decisions if is_on(one, case)]
    return list(cases.values())


def take_in(case: Case, outcome: Outcome) -> None:
    """Let a newer outcome stand for its phase, unless it would hide a judged one behind an unjudged."""
    side = "left" if outcome.measurement.phase == Measurement.Phase.AS_LEFT else "found"
    before = getattr(case, side)
    if before is None or outcome.verdict != NO_LIMIT or before.verdict == NO_LIMIT:
        setattr(case, side, outcome)


def takers(case: Case, readings: Sequence) -> list[Person]:
    """Who measured or keyed the readings behind a case, struck ones counted."""
    people: dict[int, Person] = {}
    for reading in readings:
        if reading.measurement.task_id == case.task.pk and is_behind(reading.station, case.station):
            people |= {person.pk: person for person in (reading.measured_by, reading.keyed_by)}
    return list(people.values())


def is_behind(reading_at: str, station: str | None) -> bool:
    """Tell whether a reading's station lies under a station: 3.top.thrust under 3, everything under the engine.

    >>> is_behind("3.top.thrust", "3"), is_behind("13", "3"), is_behind("13", None)
    (True, False, True)
    """
    return station is None or reading_at == station or reading_at.startswith(f"{station}.")


def is_on(decision: Decision, case: Case) -> bool:
    """Tell whether a decision was made on what the case is decided on now."""
    on = case.subject.decided_on
    return decision.finding_id == on.pk if isinstance(on, Finding) else decision.derived == on.key
