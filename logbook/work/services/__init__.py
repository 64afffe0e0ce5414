"""What can be done with work orders and intervals: each a named action, in one transaction, guarded first."""

from .closing import close_item, explain_item, open_item
from .hand_over import hand_over, take_over
from .intervals import defer, keep_interval, record_done, stop_interval
from .locks import lift_lock, take_lock
from .moves import NotNow, drop, finish_measuring, move, resume, stop_short
from .orders import add_task, open_work_order
from .tasks import finish_task, name_witnessed, start_task, use_part

__all__ = [
    "NotNow", "add_task", "close_item", "defer", "drop", "explain_item", "finish_measuring",
    "finish_task", "hand_over", "keep_interval", "lift_lock", "move", "name_witnessed", "open_item", "open_work_order",
    "record_done", "resume", "start_task", "stop_interval", "stop_short", "take_lock", "take_over", "use_part",
]  # fmt: skip
