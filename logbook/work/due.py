"""When a job comes due: each length it is kept by counted from where it was last done, with its window; no database.

Days are counted as numbers (`date.toordinal`), so that hours, days, starts and kilometres go through the same sums.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date, timedelta
from math import ceil, floor

from logbook.engines.use import Use
from measurements.sentence import Sentence, say

DAYS = "d"
OVER, DUE, UNKNOWN, LATER = "over", "due", "unknown", "later"
STAGES = (OVER, UNKNOWN, DUE, LATER)  # worst first: what can't be told may be over


@dataclass(frozen=True)
class Count:
    """One length of a job, counted.

    Attributes
    ----------
    unit : str
        "h", "d", "starts" or "km".
    length, window : float
        How often, and how far from its due point it may be done without moving the next one [unit].
    start, now : float or None
        Where it is counted from, and where it stands [unit; for days the day's number]; None where not known.
    due_on : date or None
        Day it comes due; by average use where a meter counts.
    why_not : Sentence or None
        Why no day can be told.
    """

    unit: str
    length: float
    window: float
    start: float | None
    now: float | None
    today: date
    due_on: date | None = None
    why_not: Sentence | None = None

    @property
    def left(self) -> float | None:
        """What is left until it is due [unit]; below zero it is over."""
        return None if None in (self.start, self.now) else self.start + self.length - self.now

    @property
    def days_left(self) -> float:
        """Days until it is due; without end where that can't be told."""
        return (self.due_on - self.today).days if self.due_on else float("inf")

    @property
    def is_over(self) -> bool:
        return self.left is not None and self.left < 0

    @property
    def is_past_window(self) -> bool:
        return self.left is not None and self.left < -self.window

    @property
    def is_probably_over(self) -> bool:
        """By average use it would be over by now, but the meter hasn't been read since."""
        return not self.is_over and self.due_on is not None and self.due_on < self.today

    @property
    def stage(self) -> str:
        """Where it stands: over, due (in its window, or over by average use), later, or unknown."""
        if self.left is None:
            return UNKNOWN
        if self.is_over:
            return OVER
        if self.left <= self.window or self.is_probably_over:
            return DUE
        return LATER

    @property
    def can_be_drawn(self) -> bool:
        """A tape is drawn where a day can be told, and where it is over whatever the day."""
        return self.left is not None and (self.is_over or self.due_on is not None)

    @property
    def window_days(self) -> tuple[date, date] | None:
        """First and last day on which doing the job doesn't move the next due date; for days only."""
        if self.unit != DAYS or self.start is None:
            return None
        due = self.start + self.length
        return date.fromordinal(ceil(due - self.window)), date.fromordinal(floor(due + self.window))


def next_start(*, start: float | None, length: float, window: float, done: float) -> float:
    """Where the next turn of a job is counted from: its due point when done inside the window, else where it was done.

    Source: DA PAM 750-8: a service done within its ten-percent variance doesn't change the next due date.

    >>> next_start(start=1000.0, length=150.0, window=15.0, done=1162.0)
    1150.0
    >>> next_start(start=1000.0, length=150.0, window=15.0, done=1170.0)
    1170.0
    """
    if start is None:
        return done
    due = start + length
    return due if abs(done - due) <= window else done


def counted_days(length: float, window: float, start: float | None, today: date) -> Count:
    """Count a job's calendar days."""
    if start is None:
        return Count(DAYS, length, window, None, today.toordinal(), today, why_not=say("never done here"))
    due_on = date.fromordinal(floor(start + length))
    return Count(DAYS, length, window, start, today.toordinal(), today, due_on)


def counted_meter(
    unit: str, length: float, window: float, start: float | None, last_total: float | None, use: Use | Sentence, today: date,
) -> Count:  # fmt: skip
    """Count a job by a meter, projected from average use."""
    known = Count(unit, length, window, start, last_total, today)
    if start is None:
        return Count(unit, length, window, None, last_total, today, why_not=say("not known where it was last done"))
    if not isinstance(use, Use) or last_total is None:
        why = use if isinstance(use, Sentence) else say("no meter reading")
        return Count(unit, length, window, start, last_total, today, why_not=why)
    days = min(known.left / use.per_day, 36500.0)
    due_on = use.last.at.date() + timedelta(days=floor(days))
    return Count(unit, length, window, start, last_total, today, due_on)


def soonest(counts: Sequence[Count]) -> Count:
    """The count that decides: whichever comes first; one that is over stands before one whose day is told."""
    return min(counts, key=lambda count: (not count.is_over, count.days_left, -used_share(count)))


def used_share(count: Count) -> float:
    """Share of its length that is used up; below zero where it isn't known."""
    return -1.0 if count.left is None else 1 - count.left / count.length


def starts_kept(counts_from: Mapping[str, object]) -> dict[str, float]:
    """Read where each length is counted from, as a Done keeps it: days as dates, meters as totals."""
    return {
        unit: float(date.fromisoformat(value).toordinal()) if unit == DAYS else float(value)
        for unit, value in counts_from.items()
    }


def starts_to_keep(starts: Mapping[str, float]) -> dict[str, object]:
    """Write where each length is counted from, as a Done keeps it.

    >>> starts_to_keep({"d": 732418.0, "h": 1350.0})
    {'d': '2006-04-17', 'h': 1350.0}
    """
    return {
        unit: date.fromordinal(floor(value)).isoformat() if unit == DAYS else value for unit, value in starts.items()
    }
