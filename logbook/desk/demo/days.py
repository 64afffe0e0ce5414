"""The demo's calendar: everything lies some days or minutes before the moment it is loaded."""

from collections.abc import Callable
from dataclasses import dataclass
from datetime import date, datetime, timedelta

Event = tuple[datetime, Callable[[], object]]  # when, and what is done then

BEGINS_WORK = 8  # o'clock


@dataclass(frozen=True)
class Days:
    """Moments counted back from a moment."""

    now: datetime

    def before(self, days: float, hour: int = BEGINS_WORK, minute: int = 10) -> datetime:
        """A time of day some days ago."""
        at = (self.now - timedelta(days=days)).replace(hour=hour, minute=minute, second=0, microsecond=0)
        return min(at, self.now)

    def minutes(self, minutes: float) -> datetime:
        """Some minutes ago."""
        return self.now - timedelta(minutes=minutes)

    def day(self, days: float) -> date:
        """The day some days ago; below zero, a day to come."""
        return (self.now - timedelta(days=days)).date()

    def ago(self, at: datetime) -> float:
        """How many days ago a moment was."""
        return (self.now - at) / timedelta(days=1)
