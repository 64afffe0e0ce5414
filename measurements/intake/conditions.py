"""How a measurement was taken: its conditions, read by what its kind declares."""

from collections.abc import Sequence

from measurements.document import Node
from measurements.engine import Engine
from measurements.entry import Field
from measurements.intake.shop import Shop, read_barometer
from measurements.kind import Kind, MethodCondition
from measurements.limits import Limit
from measurements.units import Unit


def read_conditions(
    node: Node, kind: Kind, engine: Engine | None, shop: Shop, limits: Sequence[Limit]
) -> tuple[dict[str, object], dict[str, Unit]]:
    """Read a measurement's conditions by what the kind declares: quantities in SI, with the unit each was typed in."""
    declared = {condition.name: condition for condition in kind.conditions}
    values, units = {}, {}
    if not node.is_object(declared):
        return values, units
    # the barometer first: an absolute pressure beside it is brought to gauge with it
    for name, condition in sorted(declared.items(), key=lambda one: one[0] != "barometer"):
        if node.has(name):
            value, unit = read_one_condition(node.child(name), condition, engine, shop, limits)
            if value is not None and unit is not None and is_absolute(node.child(name), condition, shop):
                value = to_gauge(node.child(name), value, values.get("barometer", shop.barometer))
            if value is not None:
                values[name] = value
            if unit is not None:
                units[name] = unit
    return values, units


def is_absolute(node: Node, condition: MethodCondition, shop: Shop) -> bool:
    """Tell whether a gauge pressure was typed as an absolute one."""
    if condition.form != "quantity" or condition.dimension != "pressure" or condition.absolute:
        return False
    entry = Node(node.value, node.path, []).entry(Field("pressure", condition.unit), shop.decimal_mark)
    return entry is not None and entry.readings[0].absolute


def to_gauge(node: Node, absolute: float, barometer: float | None) -> float | None:
    """Gauge pressure [Pa] of an absolute one."""
    if barometer is None:
        node.wrong(
            "Read {read}, an absolute pressure: give the barometer too, or the gauge pressure.", read=node.told()
        )
        return None
    return absolute - barometer


def read_one_condition(
    node: Node, condition: MethodCondition, engine: Engine | None, shop: Shop, limits: Sequence[Limit]
) -> tuple[object, Unit | None]:
    """Read one condition by its form."""
    if condition.name == "barometer":
        return read_barometer(node, shop.decimal_mark), None
    if condition.name == "state":
        named_states = {limit.condition.name for limit in limits if limit.condition and not limit.condition.is_span}
        return node.choice([*condition.choices, *sorted(named_states - set(condition.choices))]), None
    if condition.form == "flag":
        return node.flag(), None
    if condition.form == "count":
        return node.whole(1, 1000), None
    if condition.form == "choice":
        return node.choice(condition.choices), None
    reference = "absolute" if condition.absolute else "gauge"
    signed = condition.signed or condition.dimension == "temperature"
    field_ = Field(condition.dimension, condition.unit, condition.title.lower(), signed=signed, reference=reference)
    if condition.form == "quantity":
        reading = node.quantity(field_, shop.decimal_mark)
        return (reading.si_value, reading.unit) if reading else (None, None)
    if condition.form == "quantities":
        readings = [one.quantity(field_, shop.decimal_mark, above=0) for one in node.items(200)]
        return (
            (None, None) if None in readings or not readings else ([one.si_value for one in readings], readings[0].unit)
        )
    found = {}
    for name, one in node.fields():
        cylinder = read_cylinder(name, one, engine)
        if condition.form == "choices_by_cylinder":
            value = tuple(choice.choice(condition.choices) for choice in one.items(len(condition.choices)))
        else:
            reading = one.quantity(field_, shop.decimal_mark, above=0)
            value = reading and reading.si_value
        if cylinder is not None:
            found[cylinder] = value
    return found, None


def read_cylinder(name: str, node: Node, engine: Engine | None) -> int | None:
    """Read a cylinder's number used as a name."""
    if name.isascii() and name.isdigit() and len(name) < 4 and engine and 1 <= int(name) <= engine.cylinders:
        return int(name)
    if engine:
        node.wrong("There is no cylinder {name!r}; the engine has 1 to {n}.", name=name[:30], n=engine.cylinders)
    return None
