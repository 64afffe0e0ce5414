"""Valve lash: the gap in the valve train with the valve shut, by feeler, and how it moved since it was set."""

from collections.abc import Iterable

from measurements.check_value import CheckValue
from measurements.engine import Engine
from measurements.kind import (
    COMMON_CONDITIONS,
    TURNED_BY_HAND,
    Caution,
    Characteristic,
    Derived,
    Kind,
    Measured,
    MethodCondition,
    Pass,
)
from measurements.sentence import Sentence, say
from measurements.stations import parse_valve_station, valve_stations
from measurements.units import Unit, convert_difference


def lash_characteristic(station: str, dimension: str | None) -> str:
    """Name what is entered at a valve's station: intake or exhaust lash, or a bridge's balance."""
    if station.endswith(".bridge"):
        return "valve_lash.bridge"
    return f"valve_lash.{station.split('.')[1]}"


def lash_change(*, now: float, before: float) -> float:
    """Change of lash [unit of both]: below zero the gap has closed.

    Source: common practice: lash that shrinks tells of a valve or seat wearing in, lash that grows of a worn train.

    >>> round(lash_change(now=0.33, before=0.40), 2)
    -0.07
    """
    return now - before


def rate_per_1000_h(change: float, hours: float) -> float:
    """Change per 1000 running hours.

    >>> round(rate_per_1000_h(-0.07, 412), 2)
    -0.17
    """
    return 1000 * change / hours


def derive(done: Pass) -> Iterable[Derived | Sentence]:
    """Give the change since the last as-left (else the last as-found) of each station found."""
    if done.phase != "as_found":
        return
    for station, found in done.measured.items():
        last = None if found.bound else last_at(station, done)
        if last is None:
            continue
        before_pass, before = last
        if differs("state", before_pass, done):
            yield say("Change of lash at {station} is left out: it was {before} before and is {now} now.", station=station,
                      before=before_pass.conditions["state"], now=done.conditions["state"])  # fmt: skip
            continue
        unit = found.unit
        earlier = convert_difference(before.value, before.unit, unit)
        change = lash_change(now=found.value, before=earlier)
        extra, notes = {}, []
        if None not in (done.hours, before_pass.hours) and done.hours > before_pass.hours:
            extra["rate_per_1000_h"] = rate_per_1000_h(change, done.hours - before_pass.hours)
        else:
            notes.append(say("No rate: the running hours between the two readings are not known or not above zero."))
        if differs("method", before_pass, done):
            notes.append(say("Measured by {before} before and by {now} now: a difference between the two is in it.",
                             before=before_pass.conditions["method"], now=done.conditions["method"]))  # fmt: skip
        yield Derived(
            "valve_lash.change", station, change, unit.symbol,
            sensitivities=((1.0, found), (-scale(before.unit, unit), before)),
            working=(say("change = {now} − {before} {unit} ({phase})", now=found.value, before=earlier,
                         unit=unit.symbol, phase=before_pass.phase.replace("_", " ")),),
            notes=tuple(notes), extra=extra,
        )  # fmt: skip


def differs(condition: str, before: Pass, done: Pass) -> bool:
    """Tell whether two passes state a condition, and not the same."""
    told = [one.conditions.get(condition) for one in (before, done)]
    return None not in told and told[0] != told[1]


def last_at(station: str, done: Pass) -> tuple[Pass, Measured] | None:
    """Last as-left reading of a station before this pass, else its last as-found."""
    for phase in ("as_left", "as_found"):
        for before in reversed(done.earlier):
            if before.phase == phase and station in before.comparable():
                return before, before.measured[station]
    return None


def scale(from_: Unit, to: Unit) -> float:
    """Size of one unit in another."""
    return convert_difference(1.0, from_, to)


def notes(measured: Measured, done: Pass) -> Iterable[Sentence]:
    """Say what a censored lash asks for."""
    if measured.bound == "below":
        yield say("The thinnest leaf did not enter: open up and measure again; no turn is computed.")
    elif measured.bound == "above":
        yield say("Wider than the leaves at hand: close down and measure again; no turn is computed.")


def stations(engine: Engine) -> list[str]:
    """List the valves in the order of the hands."""
    return valve_stations(engine)


PUBLISHED = (
    CheckValue("lash change since as-left, 0.33 found, 0.40 left [mm]", "-0.07",
               lambda: lash_change(now=0.33, before=0.40),
               "change = now − before, closing is negative", "common practice",
               "before − now: gives +0.07, a closing gap shown as opening"),
    CheckValue("rate of that change over 412 h [mm per 1000 h]", "-0.17",
               lambda: rate_per_1000_h(-0.07, 412),
               "1000 h rate, arithmetic of the trade", "common practice",
               "dividing by 1000 h instead of the hours between: gives −0.07"),
)  # fmt: skip

KIND = Kind(
    name="valve_lash",
    title="Valve lash",
    entered=(
        Characteristic("valve_lash.intake", "Intake lash", "length", "mm"),
        Characteristic("valve_lash.exhaust", "Exhaust lash", "length", "mm"),
        Characteristic("valve_lash.bridge", "Bridge balance", "length", "mm"),
    ),
    derived=(Characteristic("valve_lash.change", "Change of lash since it was set", "length", "mm", signed=True),),
    stations=stations,
    characteristic_of=lash_characteristic,
    station_name=parse_valve_station,
    lock_state=TURNED_BY_HAND,
    conditions=(
        *COMMON_CONDITIONS,
        MethodCondition("method", "Feeler method", "choice", choices=("drag", "bracket", "dial")),
    ),
    cautions=(
        Caution("DANGER", "Fuel shut off and vented, ignition off, starting air and starter locked out before barring: "
                          "a hot engine can fire when it is turned."),
        Caution("WARNING", "Before every turn of the crank: feeler out, hands clear, helper answers."),
        Caution("CAUTION", "Valve covers, manifolds and oil are hot after a run."),
        Caution("NOTICE", "A dished rocker pad reads low: the flat leaf bridges the dish, the true gap is wider."),
    ),
    derive=derive,
    notes=notes,
    acts=("turn_screw", "fit_shim"),
    words={"station": "valve", "value": "lash", "as_found": "found", "as_left": "left, locknut tight"},
    published=PUBLISHED,
)  # fmt: skip
