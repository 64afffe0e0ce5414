"""Compression: the highest cranking pressure of each cylinder, dry or wet, at a reference barometer."""

from collections.abc import Iterable, Mapping
from dataclasses import replace

from measurements.air import end_pressure, gauge_at_reference
from measurements.check_value import CheckValue
from measurements.engine import Engine
from measurements.evenness import adjacent_low_pair, lowest_share, spread
from measurements.kind import (
    COMMON_CONDITIONS,
    CRANKED,
    Caution,
    Characteristic,
    Derived,
    Kind,
    Measured,
    MethodCondition,
    Pass,
    Reference,
)
from measurements.sentence import Sentence, say
from measurements.stations import cylinder_stations, parse_cylinder_station
from measurements.units import Unit, convert_difference, find_unit

SLOW_CRANKING = 140  # rpm; common practice: under it a compression-ignition reading is doubtful


def wet_gain(dry: float, wet: float) -> float:
    """Gain [%] by oil on the rings = (wet − dry) / dry.

    >>> wet_gain(100.0, 125.0)
    25.0
    """
    return 100 * (wet - dry) / dry


def barometer_of(done: Pass) -> float | None:
    """Station pressure [Pa] of the pass."""
    return done.conditions.get("barometer")


def refer(characteristic: Characteristic, unit: Unit, done: Pass) -> Reference:
    """Bring gauge pressures to the reference barometer: p_g · p0 / p, which scales the absolute pressure."""
    barometer, reference = barometer_of(done), done.conditions.get("reference_barometer")
    if barometer is None or reference is None:
        return Reference(
            notes=(say("Barometer not given: the reading stands as taken, not at the reference barometer."),)
        )
    factor = gauge_at_reference(1.0, barometer, reference)
    whose = "the shop's usual barometer" if done.conditions.get("barometer_is_usual") else "barometer of the day"
    told = say("at the reference barometer: reading × {reference} / {barometer} hPa = reading × {factor} ({whose})",
               whose=whose, reference=reference / 100, barometer=barometer / 100, factor=factor)  # fmt: skip
    return Reference(factor=factor, working=(told,))


def derive(done: Pass) -> Iterable[Derived | Sentence]:
    """Give evenness of a dry pass, or each cylinder's gain of a wet one."""
    if done.conditions.get("wet"):
        yield from derive_wet_gain(done)
        return
    yield from derive_evenness(done)
    if done.engine.compression_ratio and barometer_of(done):
        yield expected(done)


def derive_evenness(done: Pass) -> Iterable[Derived | Sentence]:
    """Spread, difference and lowest share over the cylinders measured."""
    readings = done.comparable()
    if len(readings) < 2:
        return
    bounded = [one for one in done.measured.values() if one.bound]
    if bounded:
        told = ", ".join(f"{one.station} ({one.bound} {one.value:g} {one.unit.symbol})" for one in bounded)
        yield say("Evenness is left out: of cylinder {told} only a bound is known, and it may be the lowest or highest.",
                  told=told)  # fmt: skip
        return
    top = max(readings.values(), key=lambda one: one.value)
    low = min(readings.values(), key=lambda one: one.value)
    if top.value <= 0:
        yield say("Evenness is left out: the highest reading is not above zero.")
        return
    unit, h, l = top.unit.symbol, top.value, low.value  # noqa: E741
    refer_to = difference_factor(done)
    told = say("highest {h} {unit} (cylinder {top}), lowest {l} {unit} (cylinder {low})", h=h, l=l, unit=unit,
               top=top.station, low=low.station)  # fmt: skip
    notes = no_figure(done, readings)
    yield Derived("compression.spread", None, spread(h, l), "%", ((100 * l / h**2, top), (-100 / h, low)),
                  (told, say("spread = (highest − lowest) / highest")), notes,
                  {station: spread(h, one.value) for station, one in readings.items()})  # fmt: skip
    yield Derived("compression.difference", None, refer_to * (h - l), unit, ((refer_to, top), (-refer_to, low)),
                  (told, say("difference = highest − lowest")), (*gasket_notes(done, readings), *notes),
                  {station: refer_to * (h - one.value) for station, one in readings.items()})  # fmt: skip
    yield Derived("compression.lowest_share", None, lowest_share(h, l), "%", ((-100 * l / h**2, top), (100 / h, low)),
                  (told, say("lowest share = lowest / highest")), notes,
                  {station: lowest_share(h, one.value) for station, one in readings.items()})  # fmt: skip


def difference_factor(done: Pass) -> float:
    """What brings a difference to the barometer its own limit is stated for."""
    if barometer_of(done) is None or "reference_barometers" not in done.conditions:
        return 1.0
    return done.conditions["reference_barometers"]["compression.difference"] / done.conditions["reference_barometer"]


def gasket_notes(done: Pass, readings: Mapping[str, Measured]) -> tuple[Sentence, ...]:
    """Point at two low neighbours."""
    neighbours = {int(station): done.engine.neighbours(int(station)) for station in readings}
    pair = adjacent_low_pair({int(station): one.value for station, one in readings.items()}, neighbours)
    if not pair:
        return ()
    return (say("Neighbours {first} and {second} both stand well below the others: the gasket between them "
                "is the first thing to look at.", first=pair[0], second=pair[1]),)  # fmt: skip


def no_figure(done: Pass, readings: Mapping[str, Measured]) -> tuple[Sentence, ...]:
    """Name the cylinders that the evenness leaves out."""
    missing = [str(cylinder) for cylinder in range(1, done.engine.cylinders + 1) if str(cylinder) not in readings]
    return (say("No figure to compare from cylinder {missing}.", missing=", ".join(missing)),) if missing else ()


def derive_wet_gain(done: Pass) -> Iterable[Derived | Sentence]:
    """Gain of each cylinder over its last dry reading at this visit or before."""
    dry_passes = [one for one in done.earlier if not one.conditions.get("wet")]
    for station, read in done.measured.items():
        if read.bound:
            continue
        before_pass = next((one for one in reversed(dry_passes) if station in one.comparable()), None)
        if before_pass is None or before_pass.measured[station].value <= 0:
            yield say(
                "Wet gain of cylinder {station} is left out: it has no dry reading above zero to compare.",
                station=station,
            )
            continue
        dry, wet, notes = at_one_barometer(before_pass, done, station)
        before = convert_difference(dry.value, dry.unit, wet.unit)
        per_dry = -100 * wet.value / before**2 * convert_difference(1.0, dry.unit, wet.unit)
        if done.engine.layout in ("vee", "flat"):
            notes.append(say("Weak evidence here: on a vee or flat engine the oil lies on one side; "
                             "no gain is no evidence."))  # fmt: skip
        yield Derived(
            "compression.wet_gain", station, wet_gain(before, wet.value), "%",
            ((100 / before, wet), (per_dry, dry)),
            (say("wet gain = ({wet} − {dry}) / {dry}", wet=wet.value, dry=before),),
            (*notes, *other_visit(before_pass, done)),
        )  # fmt: skip


def at_one_barometer(before: Pass, done: Pass, station: str) -> tuple[Measured, Measured, list[Sentence]]:
    """Dry and wet reading of a cylinder at one barometer; both as taken where either day's is not known."""
    dry, wet = before.measured[station], done.measured[station]
    known = [barometer_of(one) is not None for one in (before, done)]
    if all(known):
        factor = done.conditions["reference_barometer"] / before.conditions["reference_barometer"]
        return scaled(dry, factor), wet, []
    if not any(known):
        return dry, wet, []
    note = say("The barometer is known for only one of the two passes: compared as taken.")
    return *(scaled(one, one.raw_value / one.value) if one.value else one for one in (dry, wet)), [note]


def scaled(measured: Measured, factor: float) -> Measured:
    """A reading `factor` times as large."""
    return replace(measured, value=measured.value * factor, budget=measured.budget.times(factor))


def other_visit(before: Pass, done: Pass) -> tuple[Sentence, ...]:
    """Say so where the dry reading is of another day."""
    if None in (before.taken_on, done.taken_on) or before.taken_on == done.taken_on:
        return ()
    return (say("The dry reading is of another visit, {day}.", day=before.taken_on.isoformat()),)


def expected(done: Pass) -> Derived:
    """Ceiling of a reading: isentropic compression from the reference barometer over the compression ratio."""
    start = done.conditions.get("reference_barometer") or barometer_of(done)
    ratio = done.engine.trapped_ratio() or done.engine.compression_ratio
    ceiling = end_pressure(start, ratio) - start
    unit = next((one.unit for one in done.measured.values()), find_unit("bar"))
    return Derived("compression.expected", None, ceiling / float(unit.scale), unit.symbol, working=(
        say("p · r^1.4 − p with p = {p} hPa, r = {ratio}: isentropic and without leaks, a ceiling a cold cranked engine "
            "stays well under; a reading above it is a slip or oil in the chamber", p=start / 100, ratio=ratio),
    ))  # fmt: skip


def notes(measured: Measured, done: Pass) -> Iterable[Sentence]:
    """Doubt a compression-ignition reading at slow cranking."""
    speed = done.conditions.get("cranking_speed")
    rpm = None if speed is None else speed * 60 / 6.283185307179586
    if done.engine.ignition == "compression" and rpm is not None and rpm < SLOW_CRANKING:
        yield say("Cranked at {rpm} rpm: under about {slow} rpm a compression-ignition reading is doubtful.",
                  rpm=round(rpm), slow=SLOW_CRANKING)  # fmt: skip
    if done.conditions.get("throttle_open") is False:
        yield say("Taken with the throttle shut: it reads low.")
    if done.conditions.get("all_plugs_out") is False:
        yield say("Taken with the other plugs in: the engine cranks slower and reads low.")


def unlimited(done: Pass) -> Sentence | None:
    """A wet reading is evidence beside the dry one, never judged."""
    return say("Wet readings have no limit.") if done.conditions.get("wet") else None


def refused(conditions: Mapping[str, object], engine: Engine) -> Iterable[tuple[str, Sentence]]:
    """Refuse a wet pass on an engine not stated to be spark-ignited."""
    if conditions.get("wet") and engine.ignition != "spark":
        yield "wet", say("A wet pass is refused: the engine is not stated to be spark-ignited, and oil in a "
                         "compression-ignition cylinder can fire or lock it. Measure dry.")  # fmt: skip


PSI = {1: 445.0, 2: 440.0, 3: 405.0, 4: 435.0}
EVEN = {1: 160.0, 2: 128.0, 3: 168.0, 4: 154.0, 5: 120.0, 6: 159.0}
IN_LINE = {n: tuple(m for m in (n - 1, n + 1) if 1 <= m <= 4) for n in range(1, 5)}


def under_share(values: Mapping[int, float], share: float) -> list[int]:
    """Cylinders under a share [%] of the highest."""
    return [n for n, value in values.items() if lowest_share(max(values.values()), value) < share]


def under_difference(values: Mapping[int, float], difference: float) -> list[int]:
    """Cylinders more than a difference under the highest."""
    return [n for n, value in values.items() if max(values.values()) - value > difference]


PUBLISHED = (
    CheckValue("445 440 405 435 psi with a 25 psi spread limit: cylinders singled out", "[3]",
               lambda: str(under_difference(PSI, 25)), "TM 5-3895-359-14&P, compression test", "seen",
               "a 75 % share rule in its place: singles out nobody"),
    CheckValue("445 440 405 435 psi: lowest share [%]", "91",
               lambda: lowest_share(445, 405), "TM 5-3895-359-14&P, same figures: 405/445", "seen",
               "lowest over mean: 94"),
    CheckValue("160 128 168 154 120 159: 75 % of the highest", "126",
               lambda: 0.75 * max(EVEN.values()), "TM text of the 75 % rule", "seen",
               "75 % of the mean: 111, which passes every cylinder"),
    CheckValue("160 128 168 154 120 159 by the 75 % rule: cylinders low", "[5]",
               lambda: str(under_share(EVEN, 75)), "TM text of the 75 % rule: 5 is low, 2 passes", "seen",
               "share of the mean instead of the highest: none low"),
    CheckValue("120 psi at sea level read at 5000 ft (843.07 hPa) [psi]", "99.85",
               lambda: gauge_at_reference(120, 1013.25, 843.07), "ISO 2533:1975 pressure at 1524 m, arithmetic", "seen",
               "subtracting the loss of barometer (2.47 psi): 117.53"),
    CheckValue("two low neighbours of four: the pair between which to look", "(2, 3)",
               lambda: str(adjacent_low_pair({1: 12.1, 2: 8.0, 3: 8.4, 4: 12.0}, IN_LINE)),
               "two adjacent low speak for the gasket between", "common practice",
               "neighbours taken from the firing order 1-3-4-2, where 2 and 3 are none: None"),
    CheckValue("two low cylinders that are no neighbours: no pair", "None",
               lambda: str(adjacent_low_pair({1: 8.0, 2: 12.0, 3: 8.4, 4: 12.1}, IN_LINE)),
               "the gasket lies between neighbours only", "common practice",
               "taking the two lowest whether neighbours or not: (1, 3)"),
)  # fmt: skip

KIND = Kind(
    name="compression",
    title="Compression",
    entered=(Characteristic("compression.pressure", "Cranking pressure", "pressure", "bar", shape="lower"),),
    derived=(
        Characteristic("compression.spread", "Spread", "ratio", "%", shape="upper"),
        Characteristic("compression.difference", "Highest less lowest", "pressure", "bar", shape="upper"),
        Characteristic("compression.lowest_share", "Lowest as a share of the highest", "ratio", "%", shape="lower"),
        Characteristic("compression.wet_gain", "Gain with oil", "ratio", "%", shape="upper", signed=True),
        Characteristic("compression.expected", "Ceiling for the compression ratio", "pressure", "bar", shape="upper"),
    ),
    stations=cylinder_stations,
    characteristic_of=lambda station, dimension: "compression.pressure",
    station_name=parse_cylinder_station,
    lock_state=CRANKED,
    conditions=(
        *COMMON_CONDITIONS,
        MethodCondition("wet", "With oil on the rings", "flag"),
        MethodCondition("oil_quantity", "Oil in each cylinder", "quantity", "volume", "mL"),
        MethodCondition("cranking_speed", "Cranking speed", "quantity", "rotational_speed", "rpm"),
        MethodCondition("strokes", "Compression strokes, alike for all", "count"),
        MethodCondition("throttle_open", "Throttle wide open", "flag"),
        MethodCondition("all_plugs_out", "All plugs or injectors out", "flag"),
    ),
    cautions=(
        Caution("DANGER", "Ignition and fuel off, barring tool out, everybody clear: the starter turns the engine."),
        Caution("WARNING", "Never put oil into a compression-ignition cylinder for a wet test: it can fire, "
                           "or lock hydraulically."),
        Caution("WARNING", "Gas and fuel mist leave open plug and injector holes: no flame, no sparks, eyes protected."),
        Caution("CAUTION", "Plugs, adapters and manifolds are hot after a run."),
    ),
    derive=derive,
    refer=refer,
    notes=notes,
    unlimited=unlimited,
    refused=refused,
    words={"station": "cylinder", "value": "pressure", "as_found": "found", "as_left": "after work"},
    published=PUBLISHED,
)  # fmt: skip
