"""The entries of a measurement by station, and the answers "not measured"."""

from collections.abc import Mapping, Sequence

from measurements.document import Node
from measurements.engine import Engine
from measurements.entry import Entry, Field
from measurements.gauge import Gauge
from measurements.intake.shop import Shop
from measurements.kind import Characteristic, Kind
from measurements.limits import Limit, limit_for
from measurements.sentence import Refusal
from measurements.units import convert, find_unit


def read_entries(
    node: Node, kind: Kind, engine: Engine | None, shop: Shop, limits: Sequence[Limit], conditions: Mapping[str, object],
    gauge: Gauge | None,
) -> dict[str, tuple[str, Entry, Limit | None]]:  # fmt: skip
    """Read the entries by station: bare numbers take the unit of their limit, else the kind's own."""
    found = {}
    for name, one in node.fields():
        station = station_of(name, one, kind, engine)
        if one.value is None:
            one.wrong(
                'Read null: a reading is a text such as "0.30 mm"; say not_measured with a reason where there is none.'
            )
            continue
        if station is None:
            continue
        if station in found:
            one.wrong("Station {station} is given twice; one of the two would be lost.", station=station)
            continue
        typed = entry_of(one, station, kind, shop, limits, conditions, limit_for)
        if typed is None:
            continue
        characteristic, entry, limit = typed
        refuse_foreign_gauge(one, characteristic, gauge, kind)
        if characteristic.most is not None:
            for reading in entry.readings:
                if convert(reading.value, reading.unit, find_unit(characteristic.unit)) > characteristic.most:
                    one.wrong("Read {read}; {title} can't be over {most} {unit}.", read=one.told(),
                              title=characteristic.title.lower(), most=characteristic.most, unit=characteristic.unit)  # fmt: skip
                    break
        found[station] = (characteristic.name, entry, limit)
    return found


def entry_of(node, station, kind, shop, limits, conditions, limit_for):  # noqa: ANN001, ANN201
    """Read one station's entry with its characteristic and limit.

    A kind whose stations take two quantities (a pressure or a loss) is asked by the unit typed.
    """
    state, temperature = conditions.get("state"), conditions.get("part_temperature")
    usual = kind.characteristic(kind.characteristic_of(station, None))
    for characteristic in (usual, *(one for one in kind.entered if one.dimension != usual.dimension)):
        if kind.characteristic_of(station, characteristic.dimension) != characteristic.name:
            continue
        limit, _ = limit_for(limits, characteristic.name, station, state, temperature)
        unit = limit.unit.symbol if limit else characteristic.unit
        signed = characteristic.signed or "set_size" in conditions
        field_ = Field(characteristic.dimension, unit, characteristic.title.lower(), signed=signed)
        probe = Node(node.value, node.path, [])
        entry = probe.entry(field_, shop.decimal_mark)
        if entry is not None:
            return characteristic, entry, limit
        first_errors = probe.errors if characteristic is usual else first_errors  # noqa: F821 - usual goes first
    node.errors.extend(first_errors)
    return None


def station_of(name: str, node: Node, kind: Kind, engine: Engine | None) -> str | None:
    """Read a station's name."""
    if engine is None:
        return None
    try:
        return kind.station_name(name, engine)
    except Refusal as refusal:
        node.errors.append((node.path, refusal.sentence))
        return None


def refuse_foreign_gauge(node: Node, characteristic: Characteristic, gauge: Gauge | None, kind: Kind) -> None:
    """Refuse an entry that this gauge can't have shown."""
    dimension = characteristic.dimension
    if gauge and gauge.quantity != dimension and (gauge.quantity, dimension) not in kind.reads_through:
        node.wrong("Read {read}, a {dimension}, but gauge {gauge} shows {quantity}.", read=node.told(),
                   dimension=dimension, gauge=gauge.name, quantity=gauge.quantity)  # fmt: skip


def read_not_measured(node: Node, kind: Kind, engine: Engine | None, entries: Mapping[str, object]) -> dict[str, str]:
    """Read the stations not measured, each with its reason."""
    found = {}
    for name, one in node.fields():
        station = station_of(name, one, kind, engine)
        reason = one.text()
        if station in entries:
            one.wrong(
                "Station {station} has a reading and is said not to be measured; give one of the two.", station=station
            )
        elif station is not None and reason is not None:
            found[station] = reason
    return found
