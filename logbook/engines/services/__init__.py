"""What may be done to engines, meters, parts and limit sheets: by whom, when, and what is refused."""

from .engines import (
    EngineRefused,
    add_engine,
    change_engine,
    change_out_of_service,
    record_out_of_service,
)
from .guards import EngineryRefused
from .limits import (
    LimitRefused,
    add_line,
    begin_sheet,
    bring_into_force_uncompared,
    change_line,
    compare_sheet,
    give_up_sheet,
    withdraw_line,
)
from .meters import (
    MeterAsks,
    MeterRefused,
    fit_meter,
    read_meter,
    replace_meter,
    supersede_reading,
)
from .parts import PartRefused, add_part, fit_part, move_part, take_off_part

__all__ = [
    "EngineRefused", "EngineryRefused", "LimitRefused", "MeterAsks", "MeterRefused", "PartRefused", "add_engine",
    "add_line", "add_part", "begin_sheet", "bring_into_force_uncompared", "change_engine", "change_line",
    "change_out_of_service", "compare_sheet", "fit_meter", "fit_part", "give_up_sheet", "move_part", "read_meter",
    "record_out_of_service", "replace_meter", "supersede_reading", "take_off_part", "withdraw_line",
]  # fmt: skip
