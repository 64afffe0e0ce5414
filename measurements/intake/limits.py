"""The limit lines of a document."""

from collections.abc import Mapping

from measurements.conformity import RULES
from measurements.document import Node
from measurements.engine import Engine
from measurements.entry import Field
from measurements.intake.shop import Shop, read_barometer
from measurements.kind import Characteristic, Kind
from measurements.limits import Limit, read_condition, repeated
from measurements.sentence import Refusal
from measurements.units import Unit, convert, find_unit

LIMIT_FIELDS = (
    "characteristic", "lower", "upper", "set_lower", "set_upper", "nominal", "condition", "source", "decision_rule",
    "setting_decision_rule", "allows_for_gauge", "reference_barometer", "stations",
)  # fmt: skip
FIGURES = ("lower", "upper", "set_lower", "set_upper", "nominal")


def read_limits(node: Node, shop: Shop, kinds: Mapping[str, Kind], engine: Engine | None) -> list[Limit]:
    """Read the limit lines; two for the same thing are an error."""
    nodes = node.items(5000)
    found = [(one, read_limit(one, shop, kinds, engine)) for one in nodes]
    sound = [(one, limit) for one, limit in found if limit is not None]
    for place in repeated([limit for _, limit in sound]):
        sound[place][0].wrong("{name} has this limit twice for the same condition and stations; which one holds?",
                              name=sound[place][1].characteristic)  # fmt: skip
    return [limit for _, limit in sound]


def read_limit(node: Node, shop: Shop, kinds: Mapping[str, Kind], engine: Engine | None) -> Limit | None:
    """Read one limit line; bare numbers are in the kind's own unit."""
    if not node.is_object(LIMIT_FIELDS, ("characteristic",)):
        return None
    name = node.child("characteristic").text(100) if node.has("characteristic") else None
    kind = kinds.get(name.partition(".")[0]) if name else None
    characteristic = kind.characteristic(name) if kind else None
    if characteristic is None:
        if name:
            every = [one.name for kind in kinds.values() for one in (*kind.entered, *kind.derived)]
            node.child("characteristic").wrong("No kind has the characteristic {name!r}; there are {known}.",
                                               name=name[:60], known=", ".join(every))  # fmt: skip
        return None
    before = len(node.errors)
    told = limit_words(node, shop)
    told["stations"] = read_stations(node.child("stations"), kind, engine) if node.has("stations") else frozenset()
    unit, figures = limit_figures(node, characteristic, shop)
    if len(node.errors) > before:
        return None
    limit = Limit(name, unit, **figures, **{key: value for key, value in told.items() if value is not None})
    for at_fault, sentence in limit.contradictions():
        node.errors.append((f"{node.path}.{at_fault}" if at_fault else node.path, sentence))
    return limit


def limit_words(node: Node, shop: Shop) -> dict[str, object]:
    """Read what a limit says besides its figures."""
    told = {}
    if node.has("source"):
        told["source"] = node.child("source").text()
    if node.has("decision_rule"):
        told["rule"] = node.child("decision_rule").choice(RULES)
    if node.has("setting_decision_rule"):
        told["setting_rule"] = node.child("setting_decision_rule").choice(RULES)
    if node.has("allows_for_gauge"):
        told["allows_for_gauge"] = node.child("allows_for_gauge").flag()
    if node.has("reference_barometer"):
        told["reference_barometer"] = read_barometer(node.child("reference_barometer"), shop.decimal_mark)
    condition = node.child("condition").text() if node.has("condition") else None
    if condition:
        try:
            told["condition"] = read_condition(condition)
        except Refusal as refusal:
            node.errors.append((f"{node.path}.condition", refusal.sentence))
    return told


def limit_figures(node: Node, characteristic: Characteristic, shop: Shop) -> tuple[Unit, dict[str, float]]:
    """Read a limit's figures, all brought to the unit of the first."""
    field_ = Field(
        characteristic.dimension, characteristic.unit, characteristic.title.lower(), signed=characteristic.signed
    )
    readings = {name: node.child(name).quantity(field_, shop.decimal_mark) for name in FIGURES if node.has(name)}
    given = {name: reading for name, reading in readings.items() if reading is not None}
    unit = next((reading.unit for reading in given.values()), find_unit(characteristic.unit, characteristic.dimension))
    for name, reading in given.items():
        if reading.absolute and characteristic.dimension == "pressure":
            node.child(name).wrong(
                "Read {read}: limits are gauge pressures; take the barometer off.", read=node.child(name).told()
            )
    return unit, {name: convert(reading.value, reading.unit, unit) for name, reading in given.items()}


def read_stations(node: Node, kind: Kind, engine: Engine | None) -> frozenset[str]:
    """Read the stations a limit is narrowed to."""
    found = set()
    for one in node.items(1000):
        name = one.text(60)
        if name and engine:
            try:
                found.add(kind.station_name(name, engine))
            except Refusal as refusal:
                node.errors.append((one.path, refusal.sentence))
    return frozenset(found)
