"""What a reading is expected to be, before it is taken: from its limits, nominal, last visit and sibling stations."""

from dataclasses import dataclass
from functools import cached_property
from math import exp

# Shapes, in widths of the expected zone. Chosen so that honest worn readings stay believable up to about three
# widths beyond a limit while a point moved one place does not; tests/measurements/test_slip.py counts both.
WORN = 0.1  # share of belief kept for readings outside the zone
WORN_SPAN = 3.0
OPEN_END_FADE = 0.25  # away from the limit nothing wears: a compression doesn't rise far above nominal
SINCE_LAST = 0.2
AMONG_SIBLINGS = 0.3
LEAST_REACH = 0.02  # of what was read there; a narrow zone mustn't make a last reading narrower than this


@dataclass(frozen=True)
class Zone:
    """Where a healthy reading lies, and over what distance a worn one fades out below and above."""

    start: float
    end: float
    fade_below: float
    fade_above: float

    @property
    def width(self) -> float:
        return self.end - self.start

    def worn(self, value: float) -> float:
        """Give 1 inside the zone, falling with the distance outside."""
        return exp(-max(self.start - value, 0.0) / self.fade_below - max(value - self.end, 0.0) / self.fade_above)


@dataclass(frozen=True)
class Expectation:
    """What is known of a station before it is read, all in one unit.

    Attributes
    ----------
    lower, upper, nominal : float or None
        Its limits and nominal.
    last : float or None
        What was read there at the last visit.
    siblings : float or None
        Median of the same pass's other stations of that characteristic.
    """

    lower: float | None = None
    upper: float | None = None
    nominal: float | None = None
    last: float | None = None
    siblings: float | None = None

    @cached_property
    def zone(self) -> Zone | None:
        """The span of healthy readings; None where nothing is known, or no engine could have it so narrow or wide."""
        zone = self._span()
        return zone if zone and 1e-100 < zone.width < 1e100 else None

    def _span(self) -> Zone | None:
        lower, upper, nominal = self.lower, self.upper, self.nominal
        if lower is not None and upper is not None:
            return Zone(lower, upper, upper - lower, upper - lower)
        if lower is not None:
            return _one_sided(lower, nominal, 1)
        if upper is not None:
            return _one_sided(upper, nominal, -1)
        centre = next((known for known in (self.last, nominal, self.siblings) if known), None)
        if centre is None:
            return None
        reach = abs(centre) / 4
        return Zone(centre - reach, centre + reach, 2 * reach, 2 * reach)

    def belief(self, value: float) -> float:
        """Give how readily `value` is believed, per unit of the reading; only for comparing, not a probability."""
        zone = self.zone
        if zone is None:
            return 0.0
        healthy = [1 / zone.width if zone.start <= value <= zone.end else 0.0]
        for known, share in ((self.last, SINCE_LAST), (self.siblings, AMONG_SIBLINGS)):
            if known is not None:
                reach = max(share * zone.width, LEAST_REACH * abs(known))
                healthy.append(exp(-abs(value - known) / reach) / (2 * reach))
        return (1 - WORN) * sum(healthy) / len(healthy) + WORN * zone.worn(value) / (WORN_SPAN * zone.width)


def _one_sided(limit: float, nominal: float | None, inward: int) -> Zone | None:
    """Give the zone of a single limit: past the nominal by half its distance, else as far as readings usually go."""
    if nominal is not None and (nominal - limit) * inward > 0:
        end = nominal + (nominal - limit) / 2
        if inward < 0:
            end = max(end, nominal - abs(nominal) / 2)  # a gap that wears open began above zero
    elif limit == 0:
        return None
    elif inward > 0:
        end = limit + 0.6 * abs(limit)
    else:
        end = 0.0 if limit > 0 else 1.6 * limit
    start, end = sorted((limit, end))
    width = end - start
    worn, open_end = width, OPEN_END_FADE * width
    return Zone(start, end, worn, open_end) if inward > 0 else Zone(start, end, open_end, worn)
