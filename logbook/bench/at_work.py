"""A task at the bench as it stands: its passes, what is answered, done and called for, and the next step."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

from logbook.engines.models import LimitLine
from logbook.work.models import Task
from measurements.document import Node
from measurements.engine import Engine
from measurements.intake.limits import read_limit
from measurements.intake.shop import read_shop
from measurements.kind import Characteristic, Kind
from measurements.limits import Limit, limit_for

from .judging import engine_of, kinds
from .models import Act, Finding, Measurement, Reading
from .steps import ACT, FOUND, LEFT, Progress, Route, Step, next_step, order_numbers, route

AS_FOUND, AS_LEFT = Measurement.Phase.AS_FOUND, Measurement.Phase.AS_LEFT
PHASE_OF = {FOUND: AS_FOUND, LEFT: AS_LEFT}


@dataclass(frozen=True)
class AtWork:
    """A task with all that was done on it; made by `at_work`, with a count of queries that doesn't grow."""

    task: Task
    engine: Engine
    passes: Sequence[Measurement]
    readings: Sequence[Reading]
    findings: Sequence[Finding]
    acts: Sequence[Act]
    lines: Sequence[LimitLine]

    @property
    def kind(self) -> Kind:
        """The kind of measurement."""
        return kinds()[self.task.kind]

    @cached_property
    def route(self) -> Route:
        """The stops in turning order."""
        return route(self.kind, self.engine)

    @cached_property
    def numbers(self) -> Mapping[str, int]:
        """Each station's number in the order of the hands."""
        return order_numbers(self.route)

    def open_pass(self, phase: str) -> Measurement | None:
        """The pass that a reading of a phase goes to now: the last one that isn't closed."""
        return next((one for one in reversed(self.passes) if one.phase == phase and one.closed_at is None), None)

    @cached_property
    def current(self) -> Measurement | None:
        """The as-found pass that is worked on, else the as-left."""
        return self.open_pass(AS_FOUND) or self.open_pass(AS_LEFT)

    def alike(self, phase: str) -> set[int]:
        """Passes of a phase under the conditions of the one worked on: another gauge goes on where the first stopped."""
        now = self.open_pass(phase) or next((one for one in reversed(self.passes) if one.phase == phase), None)
        return {one.pk for one in self.passes if now and one.phase == phase and one.conditions == now.conditions}

    def answered(self, phase: str) -> dict[str, list[Reading]]:
        """Standing readings of a phase by station."""
        found: dict[str, list[Reading]] = {}
        alike = self.alike(phase)
        for reading in self.readings:
            if reading.measurement_id in alike:
                found.setdefault(reading.station, []).append(reading)
        return found

    def finding(self, phase: str, station: str) -> Finding | None:
        """What stands at a station in a phase."""
        alike = self.alike(phase)
        return next((one for one in reversed(self.findings)
                     if one.station == station and one.measurement_id in alike), None)  # fmt: skip

    @cached_property
    def judged(self) -> dict[str, Finding]:
        """What each station is now: as left where a value was left, else as found."""
        told: dict[str, Finding] = {}
        for phase in (AS_FOUND, AS_LEFT):
            alike = self.alike(phase)
            for one in self.findings:
                if one.measurement_id in alike and (one.judgement["value"] is not None or one.station not in told):
                    told[one.station] = one
        return told

    @cached_property
    def progress(self) -> Progress:
        """How far the task is."""
        found, left = self.answered(AS_FOUND), self.answered(AS_LEFT)
        alike = self.alike(AS_FOUND)
        calls = {one.station for one in self.findings if one.measurement_id in alike and self.calls_for_act(one)}
        return Progress(
            frozenset(found), frozenset(left), frozenset(act.station for act in self.acts), frozenset(calls),
            self.task.work_order.crank_at, leaves_all=not self.kind.acts and self.open_pass(AS_LEFT) is not None,
        )  # fmt: skip

    def calls_for_act(self, finding: Finding) -> bool:
        """Tell whether something is to be done: an act was worked out, or a shim's station isn't within."""
        return bool(finding.judgement.get("acts")) or (
            self.all_found_first and finding.verdict in ("beyond", "too_close")
        )

    @property
    def all_found_first(self) -> bool:
        """Tell whether every as-found comes before any act: with shims."""
        return self.engine.adjustment == "shim" and "fit_shim" in self.kind.acts

    def next_step(self, answered: Step | None = None) -> Step:
        """The next thing to do; with `answered`, the one after that step."""
        told = self.progress
        if answered and answered.station:
            name = {FOUND: "found", ACT: "acted", LEFT: "left"}[answered.what]
            told = Progress(**{**told.__dict__, name: getattr(told, name) | {answered.station}})
        return next_step(self.route, told, all_found_first=self.all_found_first)

    def characteristic(self, station: str) -> Characteristic:
        """What is entered at a station."""
        return self.kind.characteristic(self.kind.characteristic_of(station, None))

    def limit(self, station: str) -> tuple[Limit, LimitLine] | None:
        """The limit of a station under the conditions of the pass, with its line as typed."""
        shop = read_shop(Node(self.task.work_order.shop.as_document(), "shop", []))
        pairs = [
            (read_limit(Node(line.as_document(), "", []), shop, kinds(), self.engine), line) for line in self.lines
        ]
        state = self.current.conditions.get("state") if self.current else None
        limits = [limit for limit, _ in pairs if limit]
        found, _holds = limit_for(limits, self.characteristic(station).name, station, state, None)
        return next(((limit, line) for limit, line in pairs if limit is found), None) if found else None


def at_work(task: Task, lines: Sequence[LimitLine]) -> AtWork | None:
    """Look up a task at the bench; None where the engine's figures contradict one another."""
    engine = engine_of(task.work_order)
    if engine is None:
        return None
    mine = {"measurement__task": task}
    readings = Reading.objects.standing().filter(**mine).select_related("measured_by", "keyed_by")
    return AtWork(
        task, engine, list(task.measurements.select_related("gauge")), list(readings),
        list(Finding.objects.standing().filter(**mine)), list(task.acts.all()), lines,
    )  # fmt: skip
