"""The whole document of `assess`, read and checked before anything is judged."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from measurements.document import Node
from measurements.engine import Engine
from measurements.entry import Field
from measurements.gauge import Gauge
from measurements.intake.engine import read_engine
from measurements.intake.gauges import read_gauges
from measurements.intake.limits import read_limits
from measurements.intake.measurement import Measurement, read_measurement
from measurements.intake.shop import Shop, read_shop
from measurements.kind import Kind
from measurements.limits import Limit
from measurements.sentence import Refusal

MOST_MEASUREMENTS = 1000


@dataclass(frozen=True)
class Document:
    """Everything the document says, read and checked."""

    engine: Engine
    shop: Shop
    limits: Sequence[Limit]
    gauges: Mapping[str, Gauge]
    measurements: Sequence[Measurement]
    shims: Mapping[str, object] = field(default_factory=dict)


def read_document(root: Node, kinds: Mapping[str, Kind]) -> Document | None:
    """Read a whole document; None where it can't be judged, with the errors in `root.errors`."""
    if not root.is_object(("engine", "shop", "limits", "gauges", "measurements", "shims"), ("engine", "measurements")):
        return None
    shop = read_shop(root.child("shop")) if root.has("shop") else Shop()
    engine = read_engine(root.child("engine"), shop) if root.has("engine") else None
    gauges = read_gauges(root.child("gauges"), shop) if root.has("gauges") else {}
    limits = read_limits(root.child("limits"), shop, kinds, engine) if root.has("limits") else ()
    shims = read_shims(root.child("shims"), shop, kinds, engine) if root.has("shims") else {}
    measurements = []
    if root.has("measurements"):
        nodes = root.child("measurements").items(MOST_MEASUREMENTS)
        measurements = [
            read_measurement(node, place, engine, shop, limits, gauges, kinds) for place, node in enumerate(nodes)
        ]
    if root.errors or engine is None:
        return None
    return Document(engine, shop, limits, gauges, measurements, shims)


def read_shims(node: Node, shop: Shop, kinds: Mapping[str, Kind], engine: Engine | None) -> dict[str, object]:
    """Read shims fitted and in stock: checked now, swapped when shims are judged."""
    if not node.is_object(("fitted", "stock", "step")):
        return {}
    thickness = Field("length", "mm", "shim thickness")
    if node.has("fitted"):
        for name, one in node.child("fitted").fields():
            one.quantity(thickness, shop.decimal_mark, above=0)
            if engine and "valve_lash" in kinds:
                try:
                    kinds["valve_lash"].station_name(name, engine)
                except Refusal as refusal:
                    node.errors.append((one.path, refusal.sentence))
    if node.has("stock"):
        for one in node.child("stock").items(10_000):
            one.quantity(thickness, shop.decimal_mark, above=0)
    if node.has("step"):
        node.child("step").quantity(thickness, shop.decimal_mark, above=0)
    return node.value
