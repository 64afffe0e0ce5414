"""An engine's papers as the measuring library reads them: what contradicts itself, and what follows from them."""

from collections.abc import Sequence
from dataclasses import dataclass, field

from measurements.assess import assess
from measurements.barring import BarringPlan, plan
from measurements.document import Node
from measurements.engine import Engine as Measured
from measurements.intake.engine import read_engine
from measurements.intake.shop import Shop
from measurements.sentence import Sentence, say
from measurements.stations import valve_stations

from .models import Engine

FIELDS = {  # path in the document → field of the form, where the two have different names
    "bore": "bore_mm", "stroke": "stroke_mm", "rod_length": "rod_length_mm", "rated_speed": "rated_speed_rpm",
    "valves_per_cylinder": "intake_valves", "valves_per_cylinder.intake": "intake_valves",
    "valves_per_cylinder.exhaust": "exhaust_valves", "valve_train.adjustment": "adjustment",
    "valve_train.screw_pitch": "screw_pitch_mm", "valve_train.screw_ratio": "screw_ratio",
    "valve_train.thread": "left_hand_thread", "valve_train.bridges": "bridges",
    "valve_train.events": "intake_opens_btdc",
}  # fmt: skip


def contradictions(engine: Engine) -> list[tuple[str, Sentence]]:
    """Say everything impossible about an engine's papers, each with the field of the form it belongs to."""
    errors: list[tuple[str, Sentence]] = []
    read_engine(Node(engine.as_document(), "engine", errors), Shop())
    found = [(field_at(path), sentence) for path, sentence in errors]
    given = [name for name in Engine.EVENTS if getattr(engine, name) is not None]
    if given and len(given) < len(Engine.EVENTS):
        missing = next(name for name in Engine.EVENTS if name not in given)
        found.append((missing, say("Some valve events are given and this one isn't: give all four, or none.")))
    return found


def field_at(path: str) -> str:
    """The form's field for a path such as "engine.valve_train.events.intake_opens_btdc" or "engine.banks[1]"."""
    inside = path.removeprefix("engine.").partition("[")[0]
    return FIELDS.get(inside, inside.rpartition(".")[2])


def as_measured(engine: Engine) -> Measured | None:
    """The engine as the measuring library knows it; None where its papers contradict themselves."""
    return read_engine(Node(engine.as_document(), "engine", []), Shop())


@dataclass(frozen=True)
class Follows:
    """What follows from an engine's papers: its figures, the crank plan, and what the plan leaves to be said."""

    measured: Measured | None
    figures: dict[str, object] = field(default_factory=dict)
    crank_plan: BarringPlan | None = None

    @property
    def by_hand(self) -> list[str]:
        """Valves in the order of the hands: stop by stop, then what no stop reaches; without a plan along the banks."""
        if self.measured is None:
            return []
        planned = [station for stop in self.crank_plan.stops for station in stop.stations] if self.crank_plan else []
        return planned + [station for station in valve_stations(self.measured) if station not in planned]


def by_cylinder(stations: Sequence[str]) -> str:
    """Valves of a crank stop as they are called out: cylinder by cylinder, with its sides.

    >>> by_cylinder(["1.intake", "1.exhaust", "2.intake", "2.intake.2", "3.exhaust.bridge", "3.exhaust"])
    '1 intake + exhaust, 2 intake, 3 exhaust'
    """
    sides: dict[str, dict[str, None]] = {}
    for station in stations:
        cylinder, side, *_which = station.split(".")
        sides.setdefault(cylinder, {})[side] = None
    return ", ".join(f"{cylinder} {' + '.join(named)}" for cylinder, named in sides.items())


def follows(engine: Engine) -> Follows:
    """Work out what follows from an engine's papers."""
    measured = as_measured(engine)
    if measured is None:
        return Follows(None)
    told = assess({"engine": engine.as_document(), "measurements": []})
    return Follows(measured, told["engine"], plan(measured))
