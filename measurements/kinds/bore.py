"""Cylinder bore: its diameters at three depths in two directions, and what they say of taper, roundness and wear."""

from collections.abc import Callable, Iterable, Mapping, Sequence

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
    Reference,
)
from measurements.reference import comparator_reference, size_reference
from measurements.sentence import Sentence, say
from measurements.stations import BORE_DEPTHS, BORE_DIRECTIONS, bore_stations, parse_bore_station
from measurements.thermal import MATERIALS
from measurements.units import Unit

Sizes = Mapping[str, Mapping[str, float]]  # depth → direction → diameter


def taper(sizes: Sizes) -> tuple[float, tuple[str, str], tuple[str, str]]:
    """Larger, over the directions, of (largest − smallest) over the depths; with the two places it lies between.

    Source: NAVEDTRA 14076, cylinder measurement; example in PUBLISHED.

    >>> round(taper(EXAMPLE)[0], 3)
    0.042
    """
    found = []
    for direction in BORE_DIRECTIONS:
        places = [(depth, direction) for depth in BORE_DEPTHS if direction in sizes.get(depth, ())]
        if len(places) > 1:
            found.append(widest(places, sizes))
    return max(found, default=(0.0, None, None), key=lambda one: one[0])


def out_of_round(sizes: Sizes) -> tuple[float, tuple[str, str], tuple[str, str]]:
    """Larger, over the depths, of the difference between the directions; two-point diameters can't see odd lobes.

    >>> round(out_of_round(EXAMPLE)[0], 3)
    0.026
    """
    found = []
    for depth in BORE_DEPTHS:
        places = [(depth, direction) for direction in BORE_DIRECTIONS if direction in sizes.get(depth, ())]
        if len(places) > 1:
            found.append(widest(places, sizes))
    return max(found, default=(0.0, None, None), key=lambda one: one[0])


def widest(places: Sequence[tuple[str, str]], sizes: Sizes) -> tuple[float, tuple[str, str], tuple[str, str]]:
    """Largest less smallest of the places, with both."""
    order = sorted(places, key=lambda place: sizes[place[0]][place[1]])
    low, high = order[0], order[-1]
    return sizes[high[0]][high[1]] - sizes[low[0]][low[1]], high, low


def oversize_for(wear: float, allowance: float, offered: Iterable[float], *, one_sided: bool = False) -> float | None:
    """Smallest oversize that cleans a bore up; None where none offered does. All in one unit, on diameter.

    `one_sided`: bored on the original axis with all the wear on one side, which then counts twice.

    >>> oversize_for(0.21, 0.10, (0.25, 0.50, 0.75)), oversize_for(0.21, 0.10, (0.25, 0.50, 0.75), one_sided=True)
    (0.5, 0.75)
    """
    needed = (2 * wear if one_sided else wear) + allowance
    return min((size for size in offered if size >= needed - 1e-12), default=None)


def cylinders_of(done: Pass) -> dict[str, dict[str, dict[str, Measured]]]:
    """Group the readings that can be computed with: cylinder → depth → direction."""
    grouped = {}
    for station, measured in done.comparable().items():
        cylinder, depth, direction = station.split(".")
        grouped.setdefault(cylinder, {}).setdefault(depth, {})[direction] = measured
    return grouped


def derive(done: Pass) -> Iterable[Derived | Sentence]:
    """Give each cylinder's taper, out-of-round, wear, piston clearance and oversize, as far as measured."""
    oversizes = []
    yield from left_out(done)
    for cylinder, places in cylinders_of(done).items():
        sizes = {depth: {way: one.value for way, one in ways.items()} for depth, ways in places.items()}
        yield from between_places("bore.taper", taper, cylinder, places, sizes)
        yield from between_places("bore.out_of_round", out_of_round, cylinder, places, sizes)
        yield from worn(cylinder, places, done)
        yield from clearance(cylinder, places, done)
        oversizes.extend(one for one in oversize(cylinder, places, done))
    yield from oversizes
    sized = [one for one in oversizes if isinstance(one, Derived)]
    if len(sized) > 1 and len(sized) == len(oversizes):
        largest = max(sized, key=lambda one: one.value)
        yield Derived("bore.oversize", None, largest.value, largest.unit,
                      working=(say("All cylinders of an engine to one size: the largest any of them needs."),))  # fmt: skip


def left_out(done: Pass) -> Iterable[Sentence]:
    """Say what can't be derived for want of a figure."""
    wanted = [name for name in ("original_diameter", "cleanup_allowance") if name not in done.conditions]
    if "oversizes" in done.conditions and wanted:
        yield say("Oversizes are left out: {wanted} not given.", wanted=" and ".join(wanted).replace("_", " "))
    if "set_size" not in done.conditions and {"zero_before", "zero_after", "set_uncertainty"} & done.conditions.keys():
        yield say("The comparator's zero and master count only where set_size is given; readings are taken as sizes.")
    grouped = cylinders_of(done)
    for cylinder in done.conditions.get("piston_diameters", {}):
        if not any("thrust" in ways for ways in grouped.get(str(cylinder), {}).values()):
            yield say("Piston clearance of cylinder {cylinder} is left out: no thrust diameter was read.",
                      cylinder=cylinder)  # fmt: skip


def between_places(
    name: str, rule: Callable, cylinder: str, places: Mapping[str, Mapping[str, Measured]], sizes: Sizes
) -> Iterable[Derived]:
    """Give a difference between two places of one bore; the gauge's calibration cancels in it."""
    value, high, low = rule(sizes)
    if high is None:
        return
    top, bottom = places[high[0]][high[1]], places[low[0]][low[1]]
    notes = [say("Two-point diameters can't see odd lobes.")] if name == "bore.out_of_round" else []
    notes += unseen(places)
    told = say(
        "{top} ({high}) − {bottom} ({low})", top=top.value, bottom=bottom.value, high=" ".join(high), low=" ".join(low)
    )
    yield Derived(name, cylinder, value, top.unit.symbol, ((1.0, top), (-1.0, bottom)), (told,), tuple(notes))


def unseen(places: Mapping[str, Mapping[str, Measured]], ways: Sequence[str] = BORE_DIRECTIONS) -> tuple[Sentence, ...]:
    """Name the places of a bore without a figure, which may be its worst."""
    missing = [f"{depth} {way}" for depth in BORE_DEPTHS for way in ways if way not in places.get(depth, ())]
    if not missing:
        return ()
    return (say("Without a figure: {missing}; the true value can be larger.", missing=", ".join(missing)),)


def all_readings(places: Mapping[str, Mapping[str, Measured]]) -> list[Measured]:
    """All readings of one bore."""
    return [one for ways in places.values() for one in ways.values()]


def worn(cylinder: str, places: Mapping[str, Mapping[str, Measured]], done: Pass) -> Iterable[Derived]:
    """Wear: the largest diameter less the original, which is taken as stated."""
    original = done.conditions.get("original_diameter")
    if original is None:
        return
    largest = max(all_readings(places), key=lambda one: one.value)
    original /= float(largest.unit.scale)
    yield Derived("bore.wear", cylinder, largest.value - original, largest.unit.symbol, ((1.0, largest),),
                  (say("largest {largest} ({place}) − original {original}, as stated", largest=largest.value,
                       place=largest.station, original=original),), unseen(places))  # fmt: skip


def clearance(cylinder: str, places: Mapping[str, Mapping[str, Measured]], done: Pass) -> Iterable[Derived]:
    """Piston clearance: the largest thrust diameter less the skirt, the smallest beside it."""
    skirt = done.conditions.get("piston_diameters", {}).get(int(cylinder))
    thrust = [ways["thrust"] for ways in places.values() if "thrust" in ways]
    if skirt is None or not thrust:
        return
    largest, smallest = max(thrust, key=lambda one: one.value), min(thrust, key=lambda one: one.value)
    skirt /= float(largest.unit.scale)
    yield Derived("bore.piston_clearance", cylinder, largest.value - skirt, largest.unit.symbol, ((1.0, largest),),
                  (say("largest thrust diameter {largest} ({place}) − skirt {skirt}, as stated", largest=largest.value,
                       place=largest.station, skirt=skirt),), unseen(places, ("thrust",)),
                  extra={"smallest": smallest.value - skirt})  # fmt: skip


def oversize(cylinder: str, places: Mapping[str, Mapping[str, Measured]], done: Pass) -> Iterable[Derived | Sentence]:
    """Smallest oversize that cleans a bore up, by the way it will be bored."""
    told = done.conditions
    if not {"oversizes", "original_diameter", "cleanup_allowance"} <= told.keys():
        return
    largest = max(all_readings(places), key=lambda one: one.value)
    scale = float(largest.unit.scale)
    wear = largest.value - told["original_diameter"] / scale
    offered = [size / scale for size in told["oversizes"]]
    allowance = told["cleanup_allowance"] / scale
    centred = oversize_for(wear, allowance, offered)
    one_sided = oversize_for(wear, allowance, offered, one_sided=True)
    way = told.get("bored_on")
    chosen = {"worn_hole": centred, "original_axis": one_sided}.get(way, centred if centred == one_sided else None)
    unit = largest.unit.symbol
    if chosen is None and way is None and centred is not None:
        yield say("Oversize of cylinder {cylinder} is left open: {centred} {unit} bored on the worn hole, {one_sided} on "
                  "the original axis. Say bored_on.", cylinder=cylinder, centred=centred, unit=unit,
                  one_sided=f"{one_sided:g} {unit}" if one_sided else "none offered")  # fmt: skip
    elif chosen is None:
        yield say("No oversize offered cleans cylinder {cylinder} up: its wear is {wear} {unit}.", cylinder=cylinder,
                  wear=wear, unit=unit)  # fmt: skip
    else:
        yield Derived("bore.oversize", cylinder, chosen, unit, notes=unseen(places), working=(
            say("wear {wear}{twice} + allowance {allowance} {unit}: smallest offered size that reaches it", wear=wear,
                twice=" × 2" if way == "original_axis" else "", allowance=allowance, unit=unit),))  # fmt: skip


def refer(characteristic: Characteristic, unit: Unit, done: Pass) -> Reference:
    """Add a comparator's set size, and refer the size to 20 °C where temperatures are given."""
    return size_reference(unit, done.conditions, comparator_reference(unit, done.conditions, done.typed_units))


def refused(conditions: Mapping[str, object], engine: Engine) -> Iterable[tuple[str, Sentence]]:
    """Refuse sizes that are none."""
    for name in ("original_diameter", "set_size"):
        if name in conditions and not conditions[name] > 0:
            yield name, say("Read 0 for {name}: it must be above zero.", name=name.replace("_", " "))


EXAMPLE = {
    "top": {"thrust": 100.058, "axial": 100.032},
    "middle": {"thrust": 100.034, "axial": 100.021},
    "bottom": {"thrust": 100.016, "axial": 100.010},
}
SIZES = (0.25, 0.50, 0.75, 1.00)
_FORM = "NAVEDTRA 14076, three levels and two directions; figures of the worked example"

PUBLISHED = (
    CheckValue("out-of-round of the worked bore [mm]", "0.026", lambda: out_of_round(EXAMPLE)[0], _FORM, "seen",
               "largest less smallest of all six: 0.048"),
    CheckValue("taper of the worked bore [mm]", "0.042", lambda: taper(EXAMPLE)[0], _FORM, "seen",
               "largest less smallest of all six: 0.048; mean of the directions: 0.032"),
    CheckValue("wear of the worked bore from 100.000 [mm]", "0.058",
               lambda: max(max(ways.values()) for ways in EXAMPLE.values()) - 100, _FORM, "seen",
               "mean diameter less original: 0.029"),
    CheckValue("oversize for wear .058, worn hole [mm]", "0.25", lambda: oversize_for(0.058, 0.10, SIZES),
               "0.10 mm allowance on diameter, bar centred on the worn hole", "common practice",
               "allowance on radius, 0.058 + 0.20: 0.50"),
    CheckValue("oversize for wear .21, worn hole [mm]", "0.50", lambda: oversize_for(0.21, 0.10, SIZES),
               "0.10 mm allowance on diameter, bar centred on the worn hole", "common practice",
               "without allowance, .21: 0.25"),
    CheckValue("oversize for wear .30, worn hole [mm]", "0.50", lambda: oversize_for(0.30, 0.10, SIZES),
               "0.10 mm allowance on diameter, bar centred on the worn hole", "common practice",
               "wear counted twice, .70: 0.75"),
    CheckValue("oversize for wear .21 all on one side, original axis [mm]", "0.75",
               lambda: oversize_for(0.21, 0.10, SIZES, one_sided=True),
               "one-sided wear counts twice on the original axis", "common practice",
               "wear counted once, .31: 0.50"),
    CheckValue("wear limit of a 4.000 in sleeve at 0.001 per inch [in]", "4.0040", lambda: 4.000 * (1 + 0.001),
               "TM 10-3930-647-14&P, wear limits per inch of diameter", "seen", "adding 0.001 once: 4.0010"),
)  # fmt: skip

KIND = Kind(
    name="bore",
    title="Cylinder bore",
    entered=(Characteristic("bore.diameter", "Bore diameter", "length", "mm", is_size=True),),
    derived=(
        Characteristic("bore.taper", "Taper", "length", "mm", shape="upper"),
        Characteristic("bore.out_of_round", "Out of round", "length", "mm", shape="upper"),
        Characteristic("bore.wear", "Wear", "length", "mm", shape="upper", signed=True),
        Characteristic("bore.piston_clearance", "Piston clearance", "length", "mm", signed=True),
        Characteristic("bore.oversize", "Oversize that cleans up", "length", "mm", shape="upper"),
    ),
    stations=bore_stations,
    characteristic_of=lambda station, dimension: "bore.diameter",
    station_name=parse_bore_station,
    lock_state=TURNED_BY_HAND,
    conditions=(
        *COMMON_CONDITIONS,
        MethodCondition("part_material", "Material of the bore", "choice", choices=tuple(MATERIALS)),
        MethodCondition("gauge_material", "Material of the gauge", "choice", choices=tuple(MATERIALS)),
        MethodCondition("temperature_half_width", "Temperatures known to within ±", "quantity",
                        "temperature_difference", "K"),
        MethodCondition("division", "Division of the comparator", "quantity", "length", "mm"),
        MethodCondition("set_size", "Size the comparator was set to", "quantity", "length", "mm"),
        MethodCondition("set_uncertainty", "Expanded uncertainty (k = 2) of the setting master", "quantity", "length", "mm"),
        MethodCondition("zero_before", "Comparator on its master before", "quantity", "length", "mm", signed=True),
        MethodCondition("zero_after", "Comparator on its master after", "quantity", "length", "mm", signed=True),
        MethodCondition("piston_diameters", "Piston skirt diameters", "quantity_by_cylinder", "length", "mm"),
        MethodCondition("original_diameter", "Original diameter", "quantity", "length", "mm"),
        MethodCondition("oversizes", "Oversizes offered", "quantities", "length", "mm"),
        MethodCondition("cleanup_allowance", "Allowance to clean up, on diameter", "quantity", "length", "mm"),
        MethodCondition("bored_on", "Bored on", "choice", choices=("worn_hole", "original_axis")),
    ),
    cautions=(
        Caution("DANGER", "Fuel, ignition, starting air and starter locked out: the crank is turned to bring pistons down."),
        Caution("WARNING", "Before every turn of the crank: gauge out, hands clear, helper answers."),
        Caution("CAUTION", "Bores have sharp ridges and edges: wipe with a held cloth, not with fingers."),
    ),
    derive=derive,
    refer=refer,
    refused=refused,
    words={"station": "place in the bore", "value": "diameter", "as_found": "found", "as_left": "after machining"},
    published=PUBLISHED,
)  # fmt: skip
