"""What can be done here: decide on a finding, sign a sheet, let an engine run undecided; each a guarded action."""

from .deciding import decide
from .guards import Frozen, NotDecided, is_frozen
from .running import end_running_undecided, running_undecided
from .sealing import SheetLost, job_sheet_pdf, sealed_sheet
from .signing import NotSigned, WrongPassword, sign

__all__ = [
    "Frozen", "NotDecided", "NotSigned", "SheetLost", "WrongPassword", "decide", "end_running_undecided", "is_frozen",
    "job_sheet_pdf", "running_undecided", "sealed_sheet", "sign",
]  # fmt: skip
