"""One measurement of a document: kind, phase, gauge, day and hours, conditions and entries."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date

from measurements.document import Node, named
from measurements.engine import Engine
from measurements.entry import Entry, Field
from measurements.gauge import Gauge
from measurements.intake.conditions import read_conditions
from measurements.intake.entries import read_entries, read_not_measured
from measurements.intake.shop import Shop
from measurements.kind import Kind
from measurements.limits import AS_FOUND, PHASES, Limit
from measurements.sentence import Sentence, say
from measurements.units import Unit


@dataclass(frozen=True)
class Measurement:
    """One measurement of the document: a kind, a phase, a gauge, its conditions, and entries by station."""

    place: int
    kind: Kind
    phase: str
    gauge: Gauge | None
    conditions: Mapping[str, object]
    typed_units: Mapping[str, Unit]
    entries: Mapping[str, tuple[str, Entry, Limit | None]]  # station → characteristic, entry, limit
    not_measured: Mapping[str, str]
    taken_on: date | None = None
    hours: float | None = None
    warnings: Sequence[Sentence] = ()


MEASUREMENT_FIELDS = (
    "kind", "taken_on", "hours", "phase", "gauge", "conditions", "readings", "not_measured", "measured_by", "keyed_by",
)  # fmt: skip


def read_measurement(
    node: Node, place: int, engine: Engine | None, shop: Shop, limits: Sequence[Limit], gauges: Mapping[str, Gauge],
    kinds: Mapping[str, Kind],
) -> Measurement | None:  # fmt: skip
    """Read one measurement; None when it can't be."""
    if not node.is_object(MEASUREMENT_FIELDS, ("kind",)):
        return None
    kind = kinds.get(node.value.get("kind")) if isinstance(node.value.get("kind"), str) else None
    if node.has("kind") and kind is None:
        node.child("kind").wrong(
            "There is no kind {read}; there are {known}.", read=node.child("kind").told(), known=named(kinds)
        )
    warnings = []
    phase = node.child("phase").choice(PHASES) if node.has("phase") else AS_FOUND
    if not node.has("phase"):
        warnings.append(say("Measurement {place}: its phase is not given; judged as found.", place=place))
    taken_on = node.child("taken_on").day() if node.has("taken_on") else None
    hours = read_hours(node.child("hours"), shop) if node.has("hours") else None
    gauge = read_gauge_name(node, gauges, kind)
    if gauge is None and not node.has("gauge"):
        warnings.append(
            say("Measurement {place}: no gauge is named, so its calibration is missing from u.", place=place)
        )
    if gauge and gauge.due_on and not node.has("taken_on"):
        warnings.append(say("Measurement {place}: its day is not given, so it can't be told whether gauge {gauge}, due {due}, "
                            "was past due.", place=place, gauge=gauge.name, due=gauge.due_on.isoformat()))  # fmt: skip
    for name in ("measured_by", "keyed_by"):
        if node.has(name):
            node.child(name).text(200)
    if kind is None:
        return None
    conditions, typed_units = (
        read_conditions(node.child("conditions"), kind, engine, shop, limits) if node.has("conditions") else ({}, {})
    )
    if shop.barometer is not None and "barometer" not in conditions:
        conditions |= {"barometer": shop.barometer, "barometer_is_usual": True}
    if engine:
        node.errors.extend((f"{node.path}.conditions.{name}", told) for name, told in kind.refused(conditions, engine))
    if not (node.has("readings") or node.has("not_measured")):
        node.child("readings").wrong("readings is missing: give at least one reading, or say not_measured and why.")
    entries = (
        read_entries(node.child("readings"), kind, engine, shop, limits, conditions, gauge)
        if node.has("readings")
        else {}
    )
    unmeasured = (
        read_not_measured(node.child("not_measured"), kind, engine, entries) if node.has("not_measured") else {}
    )
    return Measurement(
        place, kind, phase, gauge, conditions, typed_units, entries, unmeasured, taken_on, hours, warnings
    )


def read_hours(node: Node, shop: Shop) -> float | None:
    """Read running hours: a number or a text with unit h."""
    if isinstance(node.value, str):
        reading = node.quantity(Field("time", "h", "running hours"), shop.decimal_mark)
        return None if reading is None else reading.si_value / 3600
    return node.number(0, 10_000_000)


def read_gauge_name(node: Node, gauges: Mapping[str, Gauge], kind: Kind | None) -> Gauge | None:
    """Find the gauge a measurement names; one of another quantity is an error."""
    if not node.has("gauge"):
        return None
    name = node.child("gauge")
    if not isinstance(name.value, str) or name.value not in gauges:
        name.wrong("No gauge has the id {read}; there are {known}.", read=name.told(), known=named(gauges) or "none")
        return None
    gauge = gauges[name.value]
    if kind and gauge.quantity not in kind.gauge_quantities():
        name.wrong("Gauge {gauge} measures {quantity}; {kind} is measured with a gauge of {fitting}.", gauge=gauge.name,
                   quantity=gauge.quantity, kind=kind.title.lower(),
                   fitting=" or ".join(sorted(kind.gauge_quantities())))  # fmt: skip
        return None
    return gauge
