"""Earlier visits of a station, and in words what changed since."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import datetime

from django.utils.translation import gettext as _

from measurements.units import convert, find_unit

from .cases import Case, Outcome
from .words import plain, value_words


@dataclass(frozen=True)
class Visit:
    """One earlier job at the same station: when, at how many hours, what was found and left."""

    at: datetime
    hours: float | None
    job: int
    found: Mapping[str, object] | None = None
    left: Mapping[str, object] | None = None

    @property
    def last(self) -> Mapping[str, object]:
        """What it was when the job was over."""
        return self.left or self.found


def visits(outcomes: Sequence[Outcome]) -> list[Visit]:
    """Put earlier outcomes of a station together by job, oldest first; what has no value is left out."""
    by_job: dict[int, dict[str, object]] = {}
    for one in outcomes:
        if one.judgement["value"] is None:
            continue
        measurement = one.measurement
        told = by_job.setdefault(measurement.task.work_order_id, {"job": measurement.task.work_order.number})
        told |= {"at": measurement.opened_at, "hours": measurement.engine_hours}
        told["left" if measurement.phase == "as_left" else "found"] = one.judgement
    return [Visit(**told) for told in by_job.values()]


def change(now: Mapping[str, object], hours: float | None, visit: Visit) -> tuple[float, float | None] | None:
    """Change of a value since a visit, in its own unit, and the hours between; None where it can't be told."""
    then = visit.last
    if now["value"] is None or now.get("bound") or then.get("bound") or now["unit"] is None:
        return None
    earlier = convert(then["value"], find_unit(then["unit"]), find_unit(now["unit"]))
    between = None if None in (hours, visit.hours) else hours - visit.hours
    return now["value"] - earlier, between if between and between > 0 else None


def change_words(case: Case, earlier: Sequence[Visit], mark: str) -> str:
    """What changed since the last visit, per 1000 h where the hours are known, and what earlier visits changed."""
    if not earlier or case.found is None:
        return ""
    told = change(case.found.judgement, case.found.measurement.engine_hours, earlier[-1])
    if told is None:
        return ""
    amount, hours = told
    unit, step = case.found.judgement["unit"], rounded_like(case.found.judgement)
    words = {"by": moved(amount, step, mark), "unit": unit}
    if hours is None:
        first = _("%(by)s %(unit)s since the last visit.") % words
    else:
        rate = plain(float(f"{abs(amount) * 1000 / hours:.2g}"), mark)
        first = _("%(by)s %(unit)s in %(hours)s h (%(rate)s per 1000 h).") % {
            **words, "hours": plain(hours, mark), "rate": rate
        }  # fmt: skip
    return " ".join(filter(None, [first, before_words(earlier, step, unit, mark)]))


def before_words(earlier: Sequence[Visit], step: int, unit: str, mark: str) -> str:
    """What the visits before lost or gained, as a span."""
    steps = [
        change(later.found, later.hours, before)
        for before, later in zip(earlier, earlier[1:], strict=False)
        if later.found
    ]
    amounts = sorted(round(one[0], step) for one in steps if one)
    if not amounts:
        return ""
    low, high = (
        f"{amount:+.{step}f}".replace("-", "\u2212").replace(".", mark) for amount in (amounts[0], amounts[-1])
    )
    if low == high:
        return _("The visits before changed it by %(low)s %(unit)s.") % {"low": low, "unit": unit}
    return _("The visits before changed it by %(low)s to %(high)s %(unit)s.") % {"low": low, "high": high, "unit": unit}


def moved(amount: float, step: int, mark: str) -> str:
    """A change in words: lost, gained, or none."""
    size = f"{abs(amount):.{step}f}".replace(".", mark)
    if round(amount, step) == 0:
        return _("Changed by %(size)s") % {"size": size}
    return (_("Gained %(size)s") if amount > 0 else _("Lost %(size)s")) % {"size": size}


def rounded_like(judgement: Mapping[str, object]) -> int:
    """Decimals a change is told to: those of the value as it is shown."""
    return len(value_words(judgement, ".").partition(".")[2])
