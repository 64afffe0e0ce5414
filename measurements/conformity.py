"""Conformity: the chance of being within limits, the decision rule's guard band, the verdict, what would settle it."""

from collections.abc import Callable
from dataclasses import dataclass
from math import inf

from measurements.distributions import coverage_factor, student_cdf, student_quantile

GUARDED, EXPANDED, SIMPLE = RULES = ("guarded", "expanded", "simple")
WITHIN, BEYOND, TOO_CLOSE, NO_LIMIT = "within", "beyond", "too_close", "no_limit"
GUARDED_CONFIDENCE = 0.95
MOST_REPEATS = 50  # nobody repeats a reading more often than this; past it only another gauge helps


@dataclass(frozen=True)
class Zone:
    """What a value is judged against: `lower` and `upper` in one unit, either may be missing, and the decision rule."""

    lower: float | None
    upper: float | None
    rule: str = GUARDED

    @property
    def is_open(self) -> bool:
        """Tell whether there is nothing to compare with."""
        return self.lower is None and self.upper is None


@dataclass(frozen=True)
class Judgement:
    """A verdict with its grounds.

    Attributes
    ----------
    verdict : str
        "within", "beyond", "too_close" or "no_limit".
    probability_within : float or None
        Chance that the true value lies within the limits; None where it isn't known (no limit, censored).
    guard_band : float or None
        w, in the unit of the value.
    margin : float or None
        Distance to the nearest limit in units of U, below zero outside; None without U.
    vanished : bool
        The acceptance zone is empty: no reading can be proven within.
    """

    verdict: str
    probability_within: float | None = None
    guard_band: float | None = None
    margin: float | None = None
    vanished: bool = False


def chance_within(value: float, *, u: float, lower: float | None, upper: float | None, dof: float = inf) -> float:
    """Chance [1] that the true value lies between the limits, edges counted.

    Parameters
    ----------
    value, u, lower, upper : float
        Reading, its standard uncertainty and the limits, all in one unit; a missing limit is None.
    dof : float
        Degrees of freedom of `u`; Student's t is used where they are finite.

    Source: JCGM 106:2012, 7.4 (from memory): oil viscosity 13.6 mm2/s, u 1.8, limits 12.5 to 16.3, chance 0.66.

    >>> round(chance_within(13.6, u=1.8, lower=12.5, upper=16.3), 2)
    0.66
    """
    low = -inf if lower is None else lower
    high = inf if upper is None else upper
    if u == 0:
        return float(low <= value <= high)
    above_lower, above_upper = (low - value) / u, (high - value) / u
    if above_lower > 0:  # both edges in the same tail: subtract the small tail chances, not numbers near one
        return student_cdf(-above_lower, dof) - student_cdf(-above_upper, dof)
    return student_cdf(above_upper, dof) - student_cdf(above_lower, dof)


def guard_band(rule: str, *, u: float, dof: float = inf) -> float:
    """Guard band w, in the unit of `u`, by which a decision rule shrinks the zone that accepts.

    Source: ISO 14253-1:2017, 95 % one-sided (`guarded`); ILAC-G8:09/2019, w = U (`expanded`) and w = 0 (`simple`).

    >>> [round(guard_band(rule, u=0.01), 4) for rule in RULES]
    [0.0164, 0.02, 0.0]
    """
    if rule == GUARDED:
        return student_quantile(GUARDED_CONFIDENCE, dof) * u
    if rule == EXPANDED:
        return coverage_factor(dof) * u
    if rule == SIMPLE:
        return 0.0
    raise ValueError(f"{rule!r} is no decision rule; there are {', '.join(RULES)}")


def judge(value: float, *, u: float, zone: Zone, dof: float = inf, bound: str | None = None) -> Judgement:
    """Compare a value with its limits under the zone's decision rule.

    Parameters
    ----------
    value, u : float
        Reading and standard uncertainty in the unit of the zone.
    dof : float
        Degrees of freedom of `u`.
    bound : str or None
        "below" when the true value is only known to be under `value`, "above" when only known to be over it;
        such a reading is judged on the side it proves, and no chance is given.
    """
    if zone.is_open:
        return Judgement(NO_LIMIT)
    w = guard_band(zone.rule, u=u, dof=dof)
    vanished = w > 0 and _vanishes(zone, u, dof)
    if bound:
        return Judgement(_censored_verdict(value, w, zone, bound), guard_band=w, vanished=vanished)
    p = chance_within(value, u=u, lower=zone.lower, upper=zone.upper, dof=dof)
    return Judgement(
        _verdict(value, w, zone, p, vanished), p, w, _margin(value, coverage_factor(dof) * u, zone), vanished
    )


def settling_repeats(
    value: float, *, zone: Zone, combined: Callable[[int], tuple[float, float]], taken: int
) -> int | None:
    """Fewest readings in all that would settle a value too close to call, if its mean stays; None if none can.

    Parameters
    ----------
    combined : callable
        Takes a number of repeats, gives (u, degrees of freedom) of their mean.
    taken : int
        How many readings there are already.
    """
    for n in range(taken + 1, MOST_REPEATS + 1):
        u, dof = combined(n)
        if judge(value, u=u, zone=zone, dof=dof).verdict != TOO_CLOSE:
            return n
    return None


def settling_expanded_uncertainty(value: float, *, zone: Zone) -> float | None:
    """Largest expanded uncertainty U (k = 2) at which `value` would no longer be too close; None on the limit itself."""
    distances = [abs(value - limit) for limit in (zone.lower, zone.upper) if limit is not None]
    low, high = 0.0, 4 * max(distances, default=0.0)
    for _ in range(60):
        middle = (low + high) / 2
        settled = middle and judge(value, u=middle, zone=zone).verdict != TOO_CLOSE
        low, high = (middle, high) if settled else (low, middle)
    return 2 * low if low > 1e-9 * max(abs(value), *distances) else None


def zone_uncertainty(zone: Zone) -> float | None:
    """Expanded uncertainty U (k = 2) under which a two-sided zone can accept any reading at all; None when it always can."""
    if None in (zone.lower, zone.upper) or zone.rule == SIMPLE:
        return None
    return 2 * (zone.upper - zone.lower) / _narrowest(zone.rule)


def _narrowest(rule: str, dof: float = inf) -> float:
    """Width of a two-sided zone, in units of u, under which no reading can be proven within.

    `guarded` asks for 95 % between both limits, which in the middle of the zone takes the two-sided quantile.
    """
    if rule == GUARDED:
        return 2 * student_quantile((1 + GUARDED_CONFIDENCE) / 2, dof)
    return 2 * guard_band(rule, u=1.0, dof=dof)


def _vanishes(zone: Zone, u: float, dof: float) -> bool:
    if None in (zone.lower, zone.upper):
        return False
    return not over(zone.upper - zone.lower, _narrowest(zone.rule, dof) * u)


def _verdict(value: float, w: float, zone: Zone, p: float, vanished: bool) -> str:
    low, high = _ends(zone)
    accepted = not over(low + w, value) and not over(value, high - w)
    # at a single limit the guard band is the 95 %; asking again would let binary noise flip its edge
    proven = zone.rule != GUARDED or None in (zone.lower, zone.upper) or p >= GUARDED_CONFIDENCE
    if accepted and not vanished and proven:
        return WITHIN
    return BEYOND if over(low - w, value) or over(value, high + w) else TOO_CLOSE


def _censored_verdict(value: float, w: float, zone: Zone, bound: str) -> str:
    """A true value under `value` is proven beyond a lower limit, or within an upper one; likewise above."""
    low, high = _ends(zone)
    if bound == "below":
        if not over(value, low - w):
            return BEYOND
        return WITHIN if zone.lower is None and not over(value, high - w) else TOO_CLOSE
    if not over(high + w, value):
        return BEYOND
    return WITHIN if zone.upper is None and not over(low + w, value) else TOO_CLOSE


def _ends(zone: Zone) -> tuple[float, float]:
    return (-inf if zone.lower is None else zone.lower), (inf if zone.upper is None else zone.upper)


def _margin(value: float, expanded: float, zone: Zone) -> float | None:
    low, high = _ends(zone)
    return min(value - low, high - value) / expanded if expanded else None


def over(a: float, b: float) -> bool:
    """Tell whether a > b once both are rounded to 12 significant digits, so that a change of unit can't flip an edge."""
    return float(f"{a:.12g}") > float(f"{b:.12g}")
