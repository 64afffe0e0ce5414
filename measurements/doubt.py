"""Whether a reading is to be asked about: what its station should read, and which neighbour it could belong to."""

from dataclasses import replace
from statistics import median

from measurements.intake.document import Document
from measurements.intake.measurement import Measurement
from measurements.kind import Measured, Pass
from measurements.limits import limit_for
from measurements.slip import Expectation, Slip, find_slip
from measurements.units import Unit, convert


def slip_of(value: Measured, measurement: Measurement, done: Pass, document: Document) -> Slip | None:
    """Ask whether a reading would make sense otherwise: another unit, the point moved, the neighbour's station."""
    if value.bound or measurement.kind.unlimited(done):
        return None
    entry = measurement.entries[value.station][1]
    own = expectation(value.characteristic, value.station, value.unit, done, document)
    neighbours = {
        station: known_of(other.characteristic, station, value.unit, done, document)
        for station, other in done.measured.items()
        if station != value.station and beside(station, value.station) and other.unit.dimension == value.unit.dimension
    }
    fitting = {station: there for station, there in neighbours.items() if fits(value.value, there)}
    return find_slip(value.value, value.unit, own, unit_typed=entry.unit_typed, neighbours=fitting)


def fits(value: float, there: Expectation) -> bool:
    """Tell whether a value would be at home at a station: it keeps what is known of it, and something is known."""
    if {there.lower, there.upper, there.nominal, there.last} == {None}:
        return False
    return (there.lower is None or value >= there.lower) and (there.upper is None or value <= there.upper)


def beside(one: str, other: str) -> bool:
    """Tell whether two stations could be mistaken for each other: the same cylinder's, or the same place's next door.

    >>> beside("1.intake", "1.exhaust"), beside("1.intake", "2.intake"), beside("1.intake", "2.exhaust")
    (True, True, False)
    """
    first, second = one.split("."), other.split(".")
    if first[0] == second[0]:
        return True
    numbered = first[0].isdigit() and second[0].isdigit()
    return numbered and first[1:] == second[1:] and abs(int(first[0]) - int(second[0])) == 1


def expectation(characteristic: str, station: str, unit: Unit, done: Pass, document: Document) -> Expectation:
    """What a station's reading should look like: what is known of it, and the rest of this pass."""
    siblings = [
        convert(one.value, one.unit, unit)
        for name, one in done.comparable().items()
        if name != station and one.characteristic == characteristic
    ]
    known = known_of(characteristic, station, unit, done, document)
    return replace(known, siblings=median(siblings) if len(siblings) > 1 else None)


def known_of(characteristic: str, station: str, unit: Unit, done: Pass, document: Document) -> Expectation:
    """What is known of a station beforehand: its limits, nominal and last visit.

    A neighbour is asked for no more than that, for the reading in doubt is one of its siblings.
    """
    limit, _ = limit_for(document.limits, characteristic, station, done.conditions.get("state"),
                         done.conditions.get("part_temperature"))  # fmt: skip
    figures = {name: limit.figure(name, unit) if limit else None for name in ("lower", "upper", "nominal")}
    last = next((one.measured[station] for one in reversed(done.earlier) if station in one.comparable()), None)
    comparable = last is not None and last.unit.dimension == unit.dimension
    return Expectation(**figures, last=convert(last.value, last.unit, unit) if comparable else None)
