"""Judging: a reading or a derived value, its budget and its limit become a finding; a close call says what settles it."""

from collections.abc import Sequence
from dataclasses import replace
from math import inf

from measurements.conformity import (
    NO_LIMIT,
    TOO_CLOSE,
    Judgement,
    Zone,
    judge,
    over,
)
from measurements.distributions import coverage_factor
from measurements.entry import Entry
from measurements.evidence import evidence_gaps, suitability
from measurements.finding import Finding
from measurements.gauge import (
    Budget,
    Gauge,
    Line,
    calibration_lines,
    mean_value,
    reading_budget,
    repeatability_line,
    tightest,
)
from measurements.intake.document import Document
from measurements.intake.measurement import Measurement
from measurements.intake.shop import Shop
from measurements.kind import Derived, Kind, Measured, Pass
from measurements.limits import Limit, limit_for, rivals
from measurements.sentence import Sentence, say
from measurements.sentence import plain as readable
from measurements.settling import settle, settle_derived, zone_notes
from measurements.slip import Slip
from measurements.units import Unit, find_unit, to_si

STANDARD_BAROMETER = 101_325.0  # Pa; ISO 2533:1975


def take(measurement: Measurement, station: str, done: Pass) -> tuple[Measured | None, list[Sentence], list[Sentence]]:
    """Bring one station's entry to the value judged: mean, gauge error, reference conditions; with notes and working.

    The value is None where an absolute pressure can't be brought to gauge pressure for want of a barometer.
    """
    name, entry, _ = measurement.entries[station]
    characteristic = measurement.kind.characteristic(name)
    gauge, readings, unit = measurement.gauge, entry.readings, entry.unit
    mean, correction = mean_value(readings, gauge)
    working = told_mean(entry, mean - correction, correction)
    notes = list(evidence_gaps(readings, gauge)) + coarse_typing(entry, gauge)
    if readings[0].absolute:
        barometer = done.conditions.get("barometer")
        if barometer is None:
            return None, [say("An absolute pressure can't be judged without the barometer.")], working
        mean -= barometer / float(unit.scale)
        working.append(say("gauge pressure = absolute − barometer = {mean} {unit}", mean=mean, unit=unit.symbol))
    reference = measurement.kind.refer(characteristic, unit, with_size(done, mean, unit))
    value = mean * reference.factor + reference.shift
    own, gaps = through(measurement, readings, done)
    budget = Budget((*own.times(abs(reference.factor)).lines, *reference.lines))
    notes += [*gaps, *reference.notes]
    measured = Measured(name, station, value, unit, budget, readings[0].bound, mean, any(map(lacks_evidence, notes)))
    return measured, notes, working + list(reference.working)


def lacks_evidence(note: Sentence) -> bool:
    """Tell whether a note says that u is a lower bound."""
    return note.template.startswith("u is a lower bound")


def with_size(done: Pass, value: float, unit: Unit) -> Pass:
    """Hand a kind's reference the value it refers, in SI, among the conditions."""
    return replace(done, conditions={**done.conditions, "value": to_si(value, unit)})


def through(measurement: Measurement, readings: Sequence, done: Pass) -> tuple[Budget, list[Sentence]]:
    """Budget of a reading, also where the gauge measures another quantity than was entered (a loss on a pressure dial).

    The gauge's own resolution then gives way to the decimals typed; its calibration and its scatter count.
    """
    gauge, unit = measurement.gauge, readings[0].unit
    budget = reading_budget(readings, gauge)
    if gauge is None or gauge.quantity == unit.dimension:
        return budget, []
    scale = measurement.kind.gauge_scale(gauge.quantity, done)
    if scale is None:
        return budget, [say("u is a lower bound: what gauge {gauge} adds to it can't be told without the supply pressure.",
                            gauge=gauge.name)]  # fmt: skip
    scale *= float(unit.scale)
    values = [reading.value for reading in tightest(readings)]
    kept = [line for line in budget.lines if not line.name.startswith("repeatability")]
    scatter = repeatability_line(values, gauge, scale)
    notes = [say("The errors found at the calibration of gauge {gauge} are not corrected in a reading in {unit}.",
                 gauge=gauge.name, unit=unit.symbol)] if gauge.errors else []  # fmt: skip
    return Budget((*kept, *([scatter] if scatter else ()), *calibration_lines(gauge, scale))), notes


def told_mean(entry: Entry, mean: float, correction: float) -> list[Sentence]:
    """Say how the value came from what was typed."""
    unit, told = entry.unit.symbol, []
    if entry.readings[0].bound and len(entry.readings) > 1:
        told.append(
            say("of {n} bounds the one that proves most: {mean} {unit}", n=len(entry.readings), mean=mean, unit=unit)
        )
    elif len(entry.readings) > 1:
        told.append(say("mean of {n} repeats = {mean} {unit}", n=len(entry.readings), mean=mean, unit=unit))
    if entry.readings[0].half_width is not None:
        told.append(say("middle of the bracket = {mean} {unit}, half-width {half}", mean=mean, unit=unit,
                        half=entry.readings[0].half_width))  # fmt: skip
    if correction:
        told.append(
            say(
                "corrected by {correction} {unit} for the gauge's error at this point", correction=correction, unit=unit
            )
        )
    return told


def coarse_typing(entry: Entry, gauge: Gauge | None) -> list[Sentence]:
    """Note decimals coarser than the gauge can show."""
    typed = max((reading.resolution or 0.0 for reading in entry.readings), default=0.0)
    if gauge is None or gauge.quantity != entry.unit.dimension or not gauge.resolution:
        return []
    step = gauge.resolution / float(entry.unit.scale)
    if typed <= step * (1 + 1e-9):
        return []
    return [say("Typed to {typed} {unit}, the gauge shows {step}: type every digit it shows.", typed=typed,
                unit=entry.unit.symbol, step=float(f"{step:.6g}"))]  # fmt: skip


def zone_of(
    limits: Sequence[Limit], characteristic: str, station: str | None, done: Pass, unit: Unit, shop: Shop
) -> tuple[Zone, Limit | None, list[Sentence], Sentence | None]:
    """Find what a value is judged against: zone, limit, notes, and a warning where the limit is for another condition."""
    limit, holds = limit_for(limits, characteristic, station, done.conditions.get("state"),
                             done.conditions.get("part_temperature"))  # fmt: skip
    if limit is None:
        return Zone(None, None, shop.decision_rule), None, [], None
    zone = limit.zone(done.phase, unit, shop_rule=shop.decision_rule, shop_setting_rule=shop.setting_rule)
    if holds is False:
        warning = say("{station}: its limit holds {condition}, the reading was taken otherwise; no verdict.",
                      station=station or characteristic, condition=limit.condition.text)  # fmt: skip
        return Zone(None, None, zone.rule), None, [], warning
    others = rivals(limits, limit, station, done.conditions.get("state"), done.conditions.get("part_temperature"))
    if others:
        held = [one.condition.text for one in (limit, *others)]
        warning = say("{station}: it has one limit each for {conditions}, and the reading doesn't say which it was; "
                      "no verdict.", station=station or characteristic, conditions=", ".join(held))  # fmt: skip
        return Zone(None, None, zone.rule), None, [], warning
    notes = []
    if holds is None:
        if limit.condition.is_span:
            notes.append(say("The limit holds {condition}; the temperature of the part is not given.",
                             condition=limit.condition.text))  # fmt: skip
        else:
            notes.append(say("The limit holds {condition}; the reading doesn't say its own state.",
                             condition=limit.condition.text))  # fmt: skip
    return zone, limit, notes, None


def judged(
    measured: Measured, measurement: Measurement, done: Pass, document: Document,
    notes: list[Sentence], working: list[Sentence], slip: Slip | None,
) -> tuple[Finding, list[Sentence]]:  # fmt: skip
    """Judge a reading; warnings beside the finding."""
    unit, budget, shop = measured.unit, measured.budget, document.shop
    exempt = measurement.kind.unlimited(done)
    if exempt:
        zone, limit, more, warning = Zone(None, None, shop.decision_rule), None, [exempt], None
    else:
        zone, limit, more, warning = zone_of(
            document.limits, measured.characteristic, measured.station, done, unit, shop
        )
    verdict = judge(measured.value, u=budget.u, zone=zone, dof=budget.dof, bound=measured.bound)
    entry = measurement.entries[measured.station][1]
    needs = None
    if verdict.verdict == TOO_CLOSE and measured.bound is None:
        needs = settle(measured, zone, len(entry.readings))
    notes = [*notes, *more, *gauge_notes(measured, measurement, done, zone, limit), *measurement.kind.notes(measured, done),
             *zone_notes(verdict, zone, unit)]  # fmt: skip
    working = [*working, *budget.working(unit.symbol), *told_verdict(measured.value, zone, verdict, unit)]
    finding = Finding(
        measured.characteristic, measured.station, measured.value, unit, budget.u, budget.k, budget.dof, zone, verdict,
        limit, entry.text, measured.bound, needs, slip, notes, working,
    )  # fmt: skip
    return finding, [warning] if warning else []


def gauge_notes(
    measured: Measured, measurement: Measurement, done: Pass, zone: Zone, limit: Limit | None
) -> list[Sentence]:  # fmt: skip
    """Say what speaks against the gauge for this reading."""
    if measurement.gauge is None:
        return []
    readings = measurement.entries[measured.station][1].readings
    gauge = measurement.gauge
    if gauge.quantity != readings[0].unit.dimension:
        gauge = replace(gauge, range_lower=None, range_upper=None)
    shown = [min(reading.si_value for reading in readings), max(reading.si_value for reading in readings)]
    if "set_size" in done.conditions:  # a bore gauge's range is told in the sizes it can be set to
        shown = [to_si(measured.value, measured.unit)]
    found = list(
        {str(one): one for si_value in shown for one in gauge.complaints(si_value, measurement.taken_on)}.values()
    )
    nominal = limit.figure("nominal", measured.unit) if limit else None
    unsuited = suitability(measured.budget.expanded, zone.lower, zone.upper, nominal)
    return found + ([unsuited] if unsuited and not zone.is_open else [])


def told_verdict(value: float, zone: Zone, verdict: Judgement, unit: Unit) -> list[Sentence]:
    """Spell the comparison out."""
    if zone.is_open:
        return []
    limits = " to ".join("open" if edge is None else str(readable(edge)) for edge in (zone.lower, zone.upper))
    told = [say("rule {rule}: guard band {w} {unit} at limits {limits}", rule=zone.rule, w=verdict.guard_band, unit=unit.symbol,
                limits=limits)]  # fmt: skip
    if verdict.probability_within is not None:
        told.append(say("chance of being within {p}", p=chance_in_words(verdict.probability_within)))
    return [
        *told,
        say("{value} {unit}: {verdict}", value=value, unit=unit.symbol, verdict=verdict.verdict.replace("_", " ")),
    ]


def chance_in_words(p: float) -> str:
    """A chance as a person reads it; never 0 or 1, for no measurement proves that."""
    return "under 0.001" if p < 0.001 else "over 0.999" if p > 0.999 else f"{p:.3f}"


def derived_finding(derived: Derived, kind: Kind, done: Pass, document: Document) -> tuple[Finding, list[Sentence]]:
    """Judge a derived value: its uncertainty is propagated, errors shared between its readings kept together."""
    unit = find_unit(derived.unit, kind.characteristic(derived.characteristic).dimension)
    lines = propagated(derived.sensitivities)
    budget = Budget(lines)
    zone, limit, notes, warning = zone_of(
        document.limits, derived.characteristic, derived.station, done, unit, document.shop
    )
    u = budget.u if derived.sensitivities else None
    if u is None:
        zone = replace(zone, rule="simple") if not zone.is_open else zone
    verdict = judge(derived.value, u=u or 0.0, zone=zone, dof=budget.dof)
    needs = settle_derived(derived.value, zone, unit) if verdict.verdict == TOO_CLOSE else None
    working = [*derived.working, *(budget.working(derived.unit) if u is not None else ()),
               *told_verdict(derived.value, zone, verdict, unit)]  # fmt: skip
    finding = Finding(
        derived.characteristic, derived.station, derived.value, unit, u, budget.k, budget.dof, zone, verdict, limit,
        needs=needs, notes=[*derived.notes, *notes, *zone_notes(verdict, zone, unit), *inherited(derived, zone, unit)],
        working=working, extra=derived.extra,
    )  # fmt: skip
    return finding, [warning] if warning else []


def inherited(derived: Derived, zone: Zone, unit: Unit) -> list[Sentence]:
    """Say what a derived value takes over from its readings, and which stations its limit singles out."""
    told = []
    if any(measured.u_is_lower_bound for _, measured in derived.sensitivities):
        told.append(say("u is a lower bound, as that of its readings."))
    for edge, side in ((zone.upper, "over"), (zone.lower, "under")):
        out = [
            station for station, value in derived.by_station.items() if edge is not None and outside(value, edge, side)
        ]
        if out:
            told.append(say("This limit singles out {stations}: {side} {edge} {unit}.", stations=", ".join(out), side=side,
                            edge=edge, unit=unit.symbol))  # fmt: skip
    return told


def outside(value: float, edge: float, side: str) -> bool:
    """Tell whether a value lies past an edge."""
    return over(value, edge) if side == "over" else over(edge, value)


def propagated(sensitivities: Sequence[tuple[float, Measured]]) -> tuple[Line, ...]:
    """Budget lines of a derived value: independent errors by root-sum-square, shared ones added with their signs.

    Source: JCGM 100:2008, 5.1.2 and 5.2.2 (correlated inputs, correlation +1 for one gauge's calibration).
    """
    lines, shared = [], {}
    for slope, measured in sensitivities:
        for line in measured.budget.lines:
            if line.shared:
                total, _ = shared.get(line.shared, (0.0, line))
                shared[line.shared] = (total + slope * line.u, line)
            else:
                lines.append(replace(line.times(slope), name=f"{line.name} at {measured.station}"))
    common = [replace(line, u=abs(total)) for total, line in shared.values()]
    return (*common, *lines)


def unlimited_finding(station: str, reason: str, measurement: Measurement) -> Finding:
    """The answer "not measured", kept and shown."""
    name = measurement.kind.characteristic_of(station, None)
    unit = find_unit(measurement.kind.characteristic(name).unit)
    told = say("Not measured: {reason}", reason=reason)
    return Finding(name, station, None, unit, None, coverage_factor(), inf, Zone(None, None), Judgement(NO_LIMIT),
                   notes=(told,), not_measured=reason)  # fmt: skip
