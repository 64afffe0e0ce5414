"""What is typed about engines, meters, parts and limit sheets, each figure read where it stands."""

from .engine import EngineForm, OutOfServiceForm
from .limits import BeginSheetForm, LineForm, WhyForm
from .meters import CorrectReadingForm, FitMeterForm, ReadMeterForm, ReplaceMeterForm
from .parts import FitPartForm, MovePartForm, PartForm, TakeOffForm

__all__ = [
    "BeginSheetForm", "CorrectReadingForm", "EngineForm", "FitMeterForm", "FitPartForm", "LineForm", "MovePartForm",
    "OutOfServiceForm", "PartForm", "ReadMeterForm", "ReplaceMeterForm", "TakeOffForm", "WhyForm",
]  # fmt: skip
