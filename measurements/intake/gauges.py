"""The gauges of a document, their figures brought to SI units."""

from measurements.document import Node
from measurements.entry import Field
from measurements.gauge import Gauge
from measurements.intake.shop import Shop
from measurements.units import DIMENSIONS

GAUGE_FIELDS = (
    "id", "quantity", "resolution", "expanded_uncertainty", "coverage_factor", "calibrated_on", "due_on",
    "max_permissible_error", "repeatability", "repeatability_degrees_of_freedom", "drift_allowance", "range", "errors",
    "failed",
)  # fmt: skip


def read_gauges(node: Node, shop: Shop) -> dict[str, Gauge]:
    """Read the gauges, by id."""
    found = {}
    for one in node.items(1000):
        gauge = read_gauge(one, shop)
        if gauge is None:
            continue
        if gauge.name in found:
            one.child("id").wrong("Gauge {gauge} is described twice.", gauge=gauge.name)
        found[gauge.name] = gauge
    return found


def read_gauge(node: Node, shop: Shop) -> Gauge | None:
    """Read one gauge; its figures go to SI units."""
    if not node.is_object(GAUGE_FIELDS, ("id", "quantity")):
        return None
    name = node.child("id").text(100) if node.has("id") else None
    quantity = node.child("quantity").choice(DIMENSIONS) if node.has("quantity") else None
    if name is None or quantity is None:
        return Gauge(name, quantity or "unread") if name else None
    told = {}
    for figure in ("resolution", "expanded_uncertainty", "max_permissible_error", "repeatability", "drift_allowance"):
        if node.has(figure):
            told[figure] = gauge_figure(node.child(figure), quantity, shop)
    if node.has("coverage_factor"):
        told["coverage_factor"] = node.child("coverage_factor").number(1, 5)
    if node.has("repeatability_degrees_of_freedom"):
        told["repeatability_dof"] = node.child("repeatability_degrees_of_freedom").whole(1, 100_000)
    for day in ("calibrated_on", "due_on"):
        if node.has(day):
            told[day] = node.child(day).day()
    if None not in (told.get("calibrated_on"), told.get("due_on")) and told["due_on"] < told["calibrated_on"]:
        node.child("due_on").wrong("Due {due} lies before calibrated {calibrated}.", due=told["due_on"].isoformat(),
                                   calibrated=told["calibrated_on"].isoformat())  # fmt: skip
    if node.has("failed"):
        told["failed"] = node.child("failed").flag()
    told |= read_range(node, quantity, shop)
    told["errors"] = read_gauge_errors(node.child("errors"), quantity, shop) if node.has("errors") else ()
    return Gauge(name, quantity, **{key: value for key, value in told.items() if value is not None})


def gauge_figure(node: Node, quantity: str, shop: Shop, signed: bool = False) -> float | None:
    """One figure of a gauge in SI units; of temperatures a difference."""
    dimension = "temperature_difference" if quantity == "temperature" else quantity
    field_ = Field(dimension, DIMENSIONS[dimension][0].symbol, "figure", signed=signed)
    reading = node.quantity(field_, shop.decimal_mark)
    if reading is not None and reading.absolute:
        node.wrong("Read {read}: a gauge's figures are gauge pressures; leave abs out.", read=node.told())
        return None
    return None if reading is None else reading.si_value


def read_range(node: Node, quantity: str, shop: Shop) -> dict[str, float]:
    """Read a gauge's range, two rising figures."""
    if not node.has("range"):
        return {}
    ends = node.child("range").items(2)
    figures = [gauge_figure(end, quantity, shop, signed=True) for end in ends]
    if len(figures) != 2 or None in figures:
        if len(figures) != 2:
            node.child("range").wrong("A range has two figures, lowest and highest.")
        return {}
    if not figures[0] < figures[1]:
        node.child("range").wrong("The first figure of a range must be the lower one.")
        return {}
    return {"range_lower": figures[0], "range_upper": figures[1]}


def read_gauge_errors(node: Node, quantity: str, shop: Shop) -> tuple[tuple[float, float], ...]:
    """Read the errors found at calibration, each at its point."""
    found = []
    for one in node.items(200):
        if one.is_object(("at", "error"), ("at", "error")):
            at = gauge_figure(one.child("at"), quantity, shop, signed=True)
            error = gauge_figure(one.child("error"), quantity, shop, signed=True)
            if None not in (at, error):
                found.append((at, error))
    if len({at for at, _ in found}) < len(found):
        node.wrong("Two errors are given at the same point; give one.")
    return tuple(found)
