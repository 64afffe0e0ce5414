"""The engine as a document describes it; what isn't given stays unknown."""

from collections.abc import Sequence

from measurements.document import Node
from measurements.engine import MOST_CYLINDERS, Engine, ValveEvents
from measurements.engine_problems import problems
from measurements.entry import Field
from measurements.intake.shop import Shop
from measurements.units import convert, find_unit

LAYOUTS = ("inline", "vee", "flat", "single")
ENGINE_FIELDS = (
    "name", "layout", "ignition", "cylinders", "firing_order", "firing_angles", "banks", "bore", "stroke", "rod_length",
    "compression_ratio", "rated_speed", "valves_per_cylinder", "valve_train", "service", "turning", "seen_from",
    "numbered_from",
)  # fmt: skip
VALVE_TRAIN_FIELDS = (
    "adjustment", "screw_pitch", "screw_ratio", "shim_ratio", "thread", "inward_closes", "events", "margin", "bridges",
)  # fmt: skip
EVENTS = ("intake_opens_btdc", "intake_closes_abdc", "exhaust_opens_bbdc", "exhaust_closes_atdc")


def read_engine(node: Node, shop: Shop) -> Engine | None:
    """Read the engine; what isn't given stays unknown."""
    if not node.is_object(ENGINE_FIELDS, ("layout", "cylinders")):
        return None
    before = len(node.errors)
    mark = shop.decimal_mark
    told = {}
    if node.has("layout"):
        told["layout"] = node.child("layout").choice(LAYOUTS)
    if node.has("cylinders"):
        told["cylinders"] = node.child("cylinders").whole(1, MOST_CYLINDERS)
    words = {"ignition": ("spark", "compression"), "turning": ("clockwise", "anticlockwise"),
             "seen_from": ("flywheel", "free_end"), "numbered_from": ("free_end", "flywheel")}  # fmt: skip
    told |= {name: node.child(name).choice(choices) for name, choices in words.items() if node.has(name)}
    for name in ("name", "service"):
        if node.has(name):
            told[name] = node.child(name).text(200)
    told |= sizes_of(node, ("bore", "stroke", "rod_length"), mark)
    if node.has("compression_ratio"):
        told["compression_ratio"] = node.child("compression_ratio").number(1, 40, above=True)
    if node.has("rated_speed"):
        speed = node.child("rated_speed").quantity(Field("rotational_speed", "rpm", "rated speed"), mark, above=0)
        told["rated_speed"] = speed and convert(speed.value, speed.unit, find_unit("rpm"))
    told |= read_order(node)
    if node.has("valves_per_cylinder"):
        valves = node.child("valves_per_cylinder")
        if valves.is_object(("intake", "exhaust")):
            for side in ("intake", "exhaust"):
                if valves.has(side):
                    told[f"{side}_valves"] = valves.child(side).whole(1, 4)
    if node.has("valve_train"):
        told |= read_valve_train(node.child("valve_train"), mark)
    if len(node.errors) > before or None in (told.get("layout"), told.get("cylinders")):
        return None
    return sound_engine(node, told)


def sound_engine(node: Node, told: dict[str, object]) -> Engine | None:
    """Build the engine unless its figures contradict one another."""
    told.pop("name", None)
    engine = Engine(**{name: value for name, value in told.items() if value is not None})
    found = problems(engine)
    node.errors.extend((f"{node.path}.{suffix}" if suffix else node.path, sentence) for suffix, sentence in found)
    return None if found else engine


def sizes_of(node: Node, names: Sequence[str], mark: str | None) -> dict[str, float | None]:
    """Lengths of an object in mm, each above zero."""
    mm = find_unit("mm")
    found = {}
    for name in names:
        if node.has(name):
            length = node.child(name).quantity(Field("length", "mm", name.replace("_", " ")), mark, above=0)
            found[name] = length and convert(length.value, length.unit, mm)
    return found


def read_order(node: Node) -> dict[str, object]:
    """Read firing order, firing angles and banks as lists of numbers."""
    told = {}
    if node.has("firing_order"):
        told["firing_order"] = tuple(
            one.whole(1, MOST_CYLINDERS) for one in node.child("firing_order").items(MOST_CYLINDERS)
        )
    if node.has("firing_angles"):
        told["firing_angles"] = tuple(one.number(0, 720) for one in node.child("firing_angles").items(MOST_CYLINDERS))
    if node.has("banks"):
        banks = node.child("banks").items(MOST_CYLINDERS)
        told["banks"] = tuple(
            tuple(one.whole(1, MOST_CYLINDERS) for one in bank.items(MOST_CYLINDERS)) for bank in banks
        )
    return told


def read_valve_train(node: Node, mark: str | None) -> dict[str, object]:
    """Read how the lash is adjusted and when the valves open."""
    if not node.is_object(VALVE_TRAIN_FIELDS):
        return {}
    told = {}
    if node.has("adjustment"):
        told["adjustment"] = node.child("adjustment").choice(("screw", "shim", "hydraulic"))
    if node.has("thread"):
        told["thread"] = node.child("thread").choice(("right", "left"))
    told |= {name: node.child(name).flag() for name in ("bridges", "inward_closes") if node.has(name)}
    told |= sizes_of(node, ("screw_pitch",), mark)
    for name, most in (("screw_ratio", 10), ("shim_ratio", 10)):
        if node.has(name):
            told[name] = node.child(name).number(0, most, above=True)
    if node.has("margin"):
        told["margin"] = node.child("margin").number(0, 90)
    if node.has("events"):
        events = node.child("events")
        if events.is_object(EVENTS, EVENTS):
            degrees = {name: events.child(name).number(-180, 180) for name in EVENTS if events.has(name)}
            if len(degrees) == len(EVENTS) and None not in degrees.values():
                told["events"] = ValveEvents(**degrees)
    return told
