"""Average use: how much an engine runs a day, from what its meters showed; or why that can't be told."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime, timedelta

from measurements.sentence import Sentence, say

LOOKED_BACK = timedelta(days=365)
A_DAY = timedelta(days=1)


@dataclass(frozen=True)
class Shown:
    """What an engine had run in all at a moment."""

    at: datetime
    total: float


@dataclass(frozen=True)
class Use:
    """Average use [unit a day] between the first and the last reading that were looked at."""

    per_day: float
    first: Shown
    last: Shown


def average_use(shown: Sequence[Shown]) -> Use | Sentence:
    """Average use over the year before the last reading; where that holds only one, since the one before it.

    Parameters
    ----------
    shown : sequence of Shown
        Totals of one unit, oldest first, superseded readings left out.

    Returns
    -------
    Use or Sentence
        The sentence says why nothing can be projected.

    Source: arithmetic of the trade: hours run over days passed.

    >>> from datetime import UTC
    >>> read = [Shown(datetime(2025, 1, 10, tzinfo=UTC), 1200.0), Shown(datetime(2025, 4, 20, tzinfo=UTC), 1650.0)]
    >>> average_use(read).per_day
    4.5
    """
    if not shown:
        return say("no meter reading")
    if len(shown) == 1:
        return say("one meter reading only")
    looked_at = [one for one in shown if one.at >= shown[-1].at - LOOKED_BACK]
    if len(looked_at) == 1:
        looked_at = list(shown[-2:])
    for before, after in zip(looked_at, looked_at[1:], strict=False):
        if after.total < before.total:
            return say("the meter ran backward, from {before} to {after}", before=before.total, after=after.total)
    first, last = looked_at[0], looked_at[-1]
    if last.at - first.at < A_DAY:
        return say("the meter readings are less than a day apart")
    if last.total == first.total:
        return say("no running between the meter readings")
    return Use((last.total - first.total) / ((last.at - first.at) / A_DAY), first, last)
