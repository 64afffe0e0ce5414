"""What is asked about engines, meters, parts and limit sheets."""

from .carried import Carried, Dependants, carried_over, depends_on, read_by, standing_readings
from .engines import out_now, was_measured, with_standing
from .limits import characteristics, lines_with_their_past, provisional_past_end, sheet_at, sheet_in_force
from .meters import hours_at, latest_total, meters_of, neighbours, shown, total_at, usage, usages
from .parts import PartHours, hours_of, occupant, parts_with_places, positions_of, sitting_in

__all__ = [
    "Carried", "Dependants", "PartHours", "carried_over", "characteristics", "depends_on", "hours_at", "hours_of",
    "latest_total", "lines_with_their_past", "meters_of", "neighbours", "occupant", "out_now", "parts_with_places",
    "positions_of", "provisional_past_end", "read_by", "sheet_at", "sheet_in_force", "shown", "sitting_in",
    "standing_readings", "total_at", "usage", "usages", "was_measured", "with_standing",
]  # fmt: skip
