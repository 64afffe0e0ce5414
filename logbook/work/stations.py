"""The stations of a task, as its kind lists them for the engine."""

from measurements.document import Node
from measurements.intake.engine import read_engine
from measurements.intake.shop import Shop
from measurements.kind import find_kinds

from .models import Task


def stations_of(task: Task) -> list[str]:
    """Stations in the order of the hands; none for other work, for a loose part, or for papers that can't be read."""
    kind, engine = find_kinds().get(task.kind), task.work_order.engine
    if kind is None or engine is None:
        return []
    told = read_engine(Node(engine.as_document(), "engine", []), Shop())
    return list(kind.stations(told)) if told else []
