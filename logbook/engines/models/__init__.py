"""Engines, their meters, the parts that sit in them for a while, and their limit sheets."""

from .engine import Engine, OutOfService
from .limits import LimitLine, LimitSheet
from .meter import Meter, MeterReading
from .part import Fitting, Part

__all__ = ["Engine", "Fitting", "LimitLine", "LimitSheet", "Meter", "MeterReading", "OutOfService", "Part"]
