"""The shop's ways: decimal mark, decision rules, usual barometer."""

from dataclasses import dataclass

from measurements.conformity import GUARDED, RULES, SIMPLE
from measurements.document import Node
from measurements.entry import Field


@dataclass(frozen=True)
class Shop:
    """Ways of the shop: decimal mark, decision rules, and its usual barometer [Pa]."""

    decimal_mark: str | None = None
    decision_rule: str = GUARDED
    setting_rule: str = SIMPLE
    barometer: float | None = None


def read_shop(node: Node) -> Shop:
    """Read the shop's ways."""
    if not node.is_object(("decimal_mark", "decision_rule", "setting_decision_rule", "barometer")):
        return Shop()
    mark = node.child("decimal_mark").choice((".", ",")) if node.has("decimal_mark") else None
    rule = node.child("decision_rule").choice(RULES) if node.has("decision_rule") else GUARDED
    setting = node.child("setting_decision_rule").choice(RULES) if node.has("setting_decision_rule") else SIMPLE
    barometer = read_barometer(node.child("barometer"), mark) if node.has("barometer") else None
    return Shop(mark, rule, setting, barometer)


def read_barometer(node: Node, mark: str | None) -> float | None:
    """Read a station pressure [Pa]; one that no place on earth has is refused."""
    reading = node.quantity(Field("pressure", "hPa", "barometer", reference="absolute"), mark)
    if reading is None:
        return None
    if not 30_000 <= reading.si_value <= 110_000:
        node.wrong("Read {read}; a barometer stands between 300 and 1100 hPa.", read=node.told())
        return None
    return reading.si_value
