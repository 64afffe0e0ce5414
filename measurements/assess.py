"""The whole judgement: engine, limits, gauges and measurements in, findings, advice and crank plan out, as plain data."""

from collections.abc import Mapping, Sequence
from dataclasses import replace

from measurements.advice import advise
from measurements.barring import plan
from measurements.document import Node, Unjudgeable, load
from measurements.doubt import beside, slip_of
from measurements.engine import Engine
from measurements.finding import Finding, plain
from measurements.intake.document import Document, read_document
from measurements.intake.measurement import Measurement
from measurements.judging import STANDARD_BAROMETER, derived_finding, judged, take, unlimited_finding
from measurements.kind import Derived, Kind, Pass, find_kinds
from measurements.limits import AS_LEFT, limit_for
from measurements.sentence import Sentence, say

__all__ = ["assess", "assess_bytes", "beside"]


def assess(document: object, kinds: Mapping[str, Kind] | None = None) -> dict[str, object]:
    """Judge a document of plain data (what JSON gives) and return the judgement as plain data.

    Raises
    ------
    Unjudgeable
        When the document can't be judged; all its errors at once, each with its path.
    """
    kinds = find_kinds() if kinds is None else kinds
    root = Node(document, "", [])
    read = read_document(root, kinds)
    if read is None or root.errors:
        raise Unjudgeable(root.errors)
    return judge_document(read)


def assess_bytes(raw: bytes, kinds: Mapping[str, Kind] | None = None) -> dict[str, object]:
    """Judge a JSON document; see `assess`."""
    return assess(load(raw), kinds)


def judge_document(document: Document) -> dict[str, object]:
    """Judge every measurement in the order of time, so that each can look back on those before."""
    warnings = [warning for one in document.measurements for warning in one.warnings]
    passes: list[Pass] = []
    told: dict[int, tuple[list[Finding], list[Finding]]] = {}
    for measurement in in_time_order(document.measurements):
        done, findings, derived, more = judge_measurement(measurement, document, passes)
        passes.append(done)
        told[measurement.place] = (findings, derived)
        warnings += more
    warnings += [*untold_order(document.measurements), *backward_meter(document.measurements)]
    advice, more = all_advice(document, told)
    barring, unplanned = barring_plan(document.engine)
    return {
        "findings": [line(one, place, document) for place in sorted(told) for one in told[place][0]],
        "derived": [line(one, place, document) for place in sorted(told) for one in told[place][1]],
        "forecasts": [],
        "advice": advice,
        "suspects": [],
        "barring_plan": barring,
        "engine": engine_figures(document.engine),
        "warnings": [str(warning) for warning in unique([*warnings, *more, *unplanned, *not_yet(document)])],
    }


def in_time_order(measurements: Sequence[Measurement]) -> list[Measurement]:
    """Measurements by day where all have one, else by running hours; those that say neither keep their place.

    The day goes first because a meter can be replaced. Within a visit found comes before left, and dry before wet, in
    whichever order they were written down.
    """

    def within_visit(one: Measurement) -> tuple[bool, bool, int]:
        return one.phase == AS_LEFT, bool(one.conditions.get("wet")), one.place

    if all(one.taken_on is not None for one in measurements):
        metered = all(one.hours is not None for one in measurements)
        return sorted(measurements, key=lambda one: (one.taken_on, one.hours if metered else 0, *within_visit(one)))
    if all(one.hours is not None for one in measurements):
        return sorted(measurements, key=lambda one: (one.hours, *within_visit(one)))
    return list(measurements)


def untold_order(measurements: Sequence[Measurement]) -> list[Sentence]:
    """Say so where the order in time of two measurements of a kind isn't told by all days or all hours."""
    kinds = [one.kind.name for one in measurements]
    told = any(all(getattr(one, name) is not None for one in measurements) for name in ("taken_on", "hours"))
    if told or len(set(kinds)) == len(kinds):
        return []
    return [
        say("Not every measurement has its day, nor every one its running hours: they are taken in the order written.")
    ]


def judge_measurement(
    measurement: Measurement, document: Document, before: Sequence[Pass]
) -> tuple[Pass, list[Finding], list[Finding], list[Sentence]]:
    """Judge one measurement: its pass, its findings, its derived values, its warnings."""
    done = open_pass(measurement, document, before)
    measured, told, warnings, findings, own = {}, {}, [], [], {}
    for station in measurement.entries:
        at_limits = at_barometer_of_limit(done, station, measurement, document)
        value, notes, working = take(measurement, station, at_limits)
        if value is None:
            warnings += [
                say(
                    "Measurement {place}, {station}: {why}", place=measurement.place, station=station, why=str(notes[0])
                )
            ]
            continue
        own[station], told[station] = value, (notes, working)
        measured[station] = value if at_limits is done else take(measurement, station, done)[0]
    done = replace(done, measured=measured)
    for station, value in own.items():
        notes, working = told[station]
        slip = slip_of(value, measurement, done, document)
        finding, more = judged(value, measurement, done, document, list(notes), list(working), slip)
        findings.append(finding)
        warnings += more
    findings += [
        unlimited_finding(station, reason, measurement) for station, reason in measurement.not_measured.items()
    ]
    derived = []
    for one in measurement.kind.derive(done):
        if isinstance(one, Derived):
            finding, more = derived_finding(one, measurement.kind, done, document)
            derived.append(finding)
            warnings += more
        else:
            warnings.append(one)
    return done, findings, derived, warnings


def open_pass(measurement: Measurement, document: Document, before: Sequence[Pass]) -> Pass:
    """Start the pass of a measurement, with what came before it of the same kind."""
    same = [one for one in before if one.kind == measurement.kind.name]
    conditions = dict(measurement.conditions)
    conditions["reference_barometers"] = {
        one.name: reference_barometer(one.name, None, measurement, document)
        for one in (*measurement.kind.entered, *measurement.kind.derived)
        if one.dimension == "pressure"
    }
    entered = measurement.kind.entered[0].name
    conditions["reference_barometer"] = conditions["reference_barometers"].get(entered, STANDARD_BAROMETER)
    if measurement.gauge and measurement.gauge.resolution is not None:
        conditions["gauge_resolution"] = measurement.gauge.resolution
    return Pass(
        measurement.place, measurement.kind.name, measurement.phase, document.engine, conditions, measurement.typed_units, {},
        measurement.taken_on, measurement.hours, measurement.gauge.name if measurement.gauge else None, earlier=same,
    )  # fmt: skip


def reference_barometer(
    characteristic: str, station: str | None, measurement: Measurement, document: Document
) -> float:
    """Barometer [Pa] that the limit of a characteristic is stated for."""
    state, temperature = measurement.conditions.get("state"), measurement.conditions.get("part_temperature")
    limit, _ = limit_for(document.limits, characteristic, station, state, temperature)
    return limit.reference_barometer if limit and limit.reference_barometer else STANDARD_BAROMETER


def at_barometer_of_limit(done: Pass, station: str, measurement: Measurement, document: Document) -> Pass:
    """The pass as one station's own limit wants it: at that limit's reference barometer, where it has another."""
    if not any(limit.reference_barometer for limit in document.limits):
        return done
    reference = reference_barometer(measurement.entries[station][0], station, measurement, document)
    if reference == done.conditions["reference_barometer"]:
        return done
    return replace(done, conditions={**done.conditions, "reference_barometer": reference})


def all_advice(
    document: Document, told: Mapping[int, tuple[list[Finding], list[Finding]]]
) -> tuple[list[dict], list[Sentence]]:
    """Acts for the last reading of every station, kind by kind."""
    advice, warnings = [], []
    by_kind: dict[str, dict[str, Finding]] = {}
    acts: dict[str, Sequence[str]] = {}
    for measurement in in_time_order(document.measurements):
        if measurement.kind.acts:
            acts[measurement.kind.name] = measurement.kind.acts
            latest = by_kind.setdefault(measurement.kind.name, {})
            latest.update({one.station: one for one in told[measurement.place][0] if one.value is not None})
    for name, latest in by_kind.items():
        some, more = advise(latest, acts[name], document.engine)
        advice += some
        warnings += more
    return advice, warnings


def barring_plan(engine: Engine) -> tuple[dict[str, object] | None, list[Sentence]]:
    """The crank plan as plain data; None with a warning where the firing order isn't known."""
    found = plan(engine)
    if found.why_not:
        return None, [found.why_not]
    stops = [
        {
            "crank_angle": whole(stop.crank_angle),
            "mark": stop.mark,
            "valves": list(stop.stations),
            "in_reach": list(stop.in_reach),
        }
        for stop in found.stops
    ]
    unreachable = [{"station": station, "why": str(why)} for station, why in found.unreachable.items()]
    told = {
        "stops": stops,
        "assumed_events": found.assumed_events,
        "margin": whole(engine.margin),
        "unreachable": unreachable,
    }
    warnings = []
    if found.assumed_events:
        warnings.append(say("Valve events are not given: the crank plan takes arcs that are safe for common cams; "
                            "check that each valve is on its base circle before measuring."))  # fmt: skip
    return told, warnings


def whole(angle: float) -> float | int:
    """Write a whole number of degrees as one."""
    return int(angle) if float(angle).is_integer() else float(f"{angle:.12g}")


def engine_figures(engine: Engine) -> dict[str, object]:
    """Sizes that follow from the engine's own; what needs a figure not given is left out."""
    figures = {
        "displacement": measured_figure(engine.displacement(), 1e-6, "L"),
        "mean_piston_speed": measured_figure(engine.mean_piston_speed(), 1.0, "m/s"),
        "rod_ratio": rounded(engine.rod_ratio()),
        "proportions": engine.proportions(),
        "trapped_compression_ratio": rounded(engine.trapped_ratio()),
    }
    return {name: value for name, value in figures.items() if value is not None} | {
        "notes": [str(note) for note in engine.notes()]
    }


def measured_figure(value: float | None, factor: float, unit: str) -> dict[str, object] | None:
    """A figure with its unit."""
    return None if value is None else {"value": rounded(value * factor), "unit": unit}


def rounded(value: float | None) -> float | None:
    """Six significant digits: more than any of the figures it comes from."""
    return None if value is None else float(f"{value:.6g}")


def line(finding: Finding, place: int, document: Document) -> dict[str, object]:
    """One line of the judgement, with the measurement it belongs to."""
    measurement = document.measurements[place]
    return {
        "measurement": place, "kind": measurement.kind.name, "phase": measurement.phase, **plain(finding),
        "gauge": measurement.gauge.name if measurement.gauge else None,
        "taken_on": measurement.taken_on.isoformat() if measurement.taken_on else None, "hours": measurement.hours,
    }  # fmt: skip


def backward_meter(measurements: Sequence[Measurement]) -> list[Sentence]:
    """Say so where the running hours fall while the days pass."""
    dated = sorted(
        (one for one in measurements if None not in (one.hours, one.taken_on)),
        key=lambda one: (one.taken_on, one.place),
    )
    for first, second in zip(dated, dated[1:], strict=False):
        if second.hours < first.hours and second.taken_on > first.taken_on:
            told = {
                "h1": first.hours,
                "d1": first.taken_on.isoformat(),
                "h2": second.hours,
                "d2": second.taken_on.isoformat(),
            }
            return [say("The meter runs backward: {h1} h on {d1}, {h2} h on {d2}. Was it replaced? Rates across it are wrong.",
                        **told)]  # fmt: skip
    return []


def not_yet(document: Document) -> list[Sentence]:
    """Say plainly what this judgement leaves out."""
    left_out = [say("Forecasts: not judged yet."), say("Suspects: not judged yet.")]
    if document.shims or document.engine.adjustment == "shim":
        left_out.append(say("Shim advice: not judged yet."))
    return left_out


def unique(sentences: Sequence[Sentence]) -> list[Sentence]:
    """Drop what is said twice."""
    return list({str(one): one for one in sentences}.values())
