"""Gathers what the room prints, as plain data: the job sheet, the work order, the blank bench sheet."""

from .blank import blank_sheet
from .job import job_sheet, signed_sheet
from .order import work_order_sheet

__all__ = ["blank_sheet", "job_sheet", "signed_sheet", "work_order_sheet"]
