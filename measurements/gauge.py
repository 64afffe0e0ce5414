"""What a gauge can tell: the lines of its uncertainty budget, and their standard and expanded uncertainty."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from datetime import date
from math import floor, inf, isinf, sqrt
from statistics import fmean, stdev

from measurements.distributions import coverage_factor
from measurements.entry import Reading
from measurements.sentence import Sentence, say

FEWEST_OWN_REPEATS = 4  # an s from fewer gives way to the gauge's pooled s


@dataclass(frozen=True)
class Gauge:
    """A gauge as its papers state it; lengths, pressures and so on in SI units of its `quantity`.

    Attributes
    ----------
    expanded_uncertainty, coverage_factor : float or None
        U of the calibration certificate and its k.
    max_permissible_error : float or None
        Half-width a of the permissible error ±a, used when there is no certificate.
    repeatability, repeatability_dof : float or None
        Pooled s of one reading from the gauge's repeat study, and its degrees of freedom.
    errors : tuple of (at, error)
        Errors found at calibration (indication minus true); corrected at the reading, straight between points.
    drift_allowance : float or None
        Half-width of what the gauge may have drifted since its calibration.
    """

    name: str
    quantity: str
    resolution: float | None = None
    expanded_uncertainty: float | None = None
    coverage_factor: float | None = None
    max_permissible_error: float | None = None
    repeatability: float | None = None
    repeatability_dof: float = inf
    errors: tuple[tuple[float, float], ...] = ()
    drift_allowance: float | None = None
    range_lower: float | None = None
    range_upper: float | None = None
    calibrated_on: date | None = None
    due_on: date | None = None
    failed: bool = False

    @property
    def has_calibration(self) -> bool:
        """Tell whether something says how wrong the gauge can be."""
        return self.expanded_uncertainty is not None or self.max_permissible_error is not None

    def error_at(self, si_value: float) -> float:
        """Error of the gauge at `si_value`, straight between calibration points, level beyond the outermost."""
        points = sorted(self.errors)
        if not points:
            return 0.0
        if si_value <= points[0][0]:
            return points[0][1]
        for (x1, e1), (x2, e2) in zip(points, points[1:], strict=False):
            if si_value <= x2:
                return e1 + (e2 - e1) * (si_value - x1) / (x2 - x1)
        return points[-1][1]

    def complaints(self, si_value: float, on: date | None) -> list[Sentence]:
        """Say what speaks against the gauge for a reading of `si_value` taken on a day."""
        found = []
        if self.failed:
            found.append(say("Gauge {gauge} has failed its check: its readings can't be relied on.", gauge=self.name))
        if on and self.due_on and on > self.due_on:
            found.append(say("Gauge {gauge} was past due: due {due}, reading taken {on}.", gauge=self.name,
                             due=self.due_on.isoformat(), on=on.isoformat()))  # fmt: skip
        if on and self.calibrated_on and on < self.calibrated_on:
            found.append(say("Gauge {gauge} was calibrated {calibrated}, after this reading of {on}.", gauge=self.name,
                             calibrated=self.calibrated_on.isoformat(), on=on.isoformat()))  # fmt: skip
        low = -inf if self.range_lower is None else self.range_lower
        high = inf if self.range_upper is None else self.range_upper
        if not low <= si_value <= high:
            found.append(say("The reading is outside the range of gauge {gauge}.", gauge=self.name))
        return found


@dataclass(frozen=True)
class Line:
    """One line of a budget: where it comes from, its distribution, its standard uncertainty and degrees of freedom.

    `shared` names an error common to several readings (a gauge's calibration): it does not average out between them.
    """

    name: str
    distribution: str
    u: float
    dof: float = inf
    shared: str | None = None

    def times(self, factor: float) -> "Line":
        """Give the line for a value `factor` times as large."""
        return replace(self, u=abs(factor) * self.u)


@dataclass(frozen=True)
class Budget:
    """Lines combined by root-sum-square.

    Source: JCGM 100:2008, 5.1.2 and G.4 (Welch-Satterthwaite); H.1 prints 32 nm from these contributions.

    >>> gauge_block = [Line("", "", u) for u in (25, 5.8, 3.9, 6.7, 2.9, 16.6)]
    >>> f"{Budget(gauge_block).u:.0f}"
    '32'
    """

    lines: Sequence[Line] = field(default_factory=tuple)

    @property
    def u(self) -> float:
        """Combined standard uncertainty."""
        return sqrt(sum(line.u**2 for line in self.lines))

    @property
    def dof(self) -> float:
        """Effective degrees of freedom, cut to a whole number, at least one."""
        return effective_dof((line.u, line.dof) for line in self.lines)

    @property
    def k(self) -> float:
        """Coverage factor for 95.45 %."""
        return coverage_factor(self.dof)

    @property
    def expanded(self) -> float:
        """Expanded uncertainty U = k u."""
        return self.k * self.u

    def times(self, factor: float) -> "Budget":
        """Give the budget of a value `factor` times as large."""
        return Budget(tuple(line.times(factor) for line in self.lines))

    def working(self, unit: str) -> list[Sentence]:
        """Spell the lines out, the result last."""
        told = [
            say(
                "u({name}) = {u} {unit} ({distribution})",
                name=line.name,
                u=line.u,
                unit=unit,
                distribution=line.distribution,
            )  # fmt: skip
            for line in self.lines
        ]
        if len(told) > 1 or not told:
            told.append(say("u = root of the sum of squares = {u} {unit}", u=self.u, unit=unit))
        if not isinf(self.dof):
            told.append(say("effective degrees of freedom {dof} (Welch-Satterthwaite)", dof=int(self.dof)))
        told.append(say("U = {k} × u = {expanded} {unit}", k=float(f"{self.k:.4g}"), expanded=self.expanded, unit=unit))
        return told


def effective_dof(contributions: Iterable[tuple[float, float]]) -> float:
    """Effective degrees of freedom of uncertainties (u, dof) by Welch-Satterthwaite, cut to a whole number.

    Source: JCGM 100:2008, G.4.1 and G.4.2 note 1 (16.75 is truncated to 16).

    >>> effective_dof([(1, 10)] * 4)
    40
    """
    contributions = list(contributions)
    total = sum(u**2 for u, _ in contributions)
    spent = sum(u**4 / dof for u, dof in contributions if u and not isinf(dof))
    if not spent:
        return inf
    dof = total**2 / spent
    return inf if isinf(dof) or dof > 1e6 else max(1, floor(dof * (1 + 1e-12)))


def rectangular(half_width: float) -> float:
    """Standard uncertainty of a value anywhere within ±half_width. Source: JCGM 100:2008, 4.3.7."""
    return half_width / sqrt(3)


def display_step(step: float) -> float:
    """Standard uncertainty of a reading rounded to `step`. Source: JCGM 100:2008, F.2.2.1: 0.29 of the step.

    >>> round(display_step(1), 2)
    0.29
    """
    return step / (2 * sqrt(3))


def calibration_lines(gauge: Gauge | None, scale: float, leaves: int = 1) -> list[Line]:
    """Lines that say how wrong the gauge itself can be, in a unit of `scale` SI units; stacked leaves each bring theirs."""
    if gauge is None:
        return []
    lines = []
    stack = sqrt(leaves) / scale
    shared = f"calibration of {gauge.name}"
    if gauge.expanded_uncertainty is not None:
        u = gauge.expanded_uncertainty / (gauge.coverage_factor or 2)
        lines.append(Line(shared, f"certificate, k = {gauge.coverage_factor or 2:g}", u * stack, shared=shared))
    elif gauge.max_permissible_error is not None:
        name = f"permissible error of {gauge.name}"
        lines.append(Line(name, "rectangular", rectangular(gauge.max_permissible_error) * stack, shared=name))
    if gauge.drift_allowance:
        name = f"drift of {gauge.name} since calibration"
        lines.append(Line(name, "rectangular", rectangular(gauge.drift_allowance) * stack, shared=name))
    return lines


def resolution_line(readings: Sequence[Reading], gauge: Gauge | None, scale: float) -> Line | None:
    """Line for the coarser of the gauge's step and the decimals typed; a bracket's half-width takes its place."""
    widths = [reading.half_width for reading in readings if reading.half_width is not None]
    if widths:
        return Line("bracket between leaves", "rectangular", rectangular(max(widths)))
    typed = max((reading.resolution or 0.0 for reading in readings), default=0.0)
    stated = (gauge.resolution or 0.0) / scale if gauge else 0.0
    step = typed if typed > stated * (1 + 1e-9) else stated
    return Line(f"resolution {step:g}", "rectangular", display_step(step)) if step else None


def repeatability_line(values: Sequence[float], gauge: Gauge | None, scale: float) -> Line | None:
    """Line for the mean of repeats: own s from four repeats on, else the gauge's pooled s, else the few there are."""
    count = len(values)
    if len(values) < FEWEST_OWN_REPEATS and gauge and gauge.repeatability is not None:
        pooled = gauge.repeatability / scale
        return Line("repeatability, pooled", f"normal, n = {count}", pooled / sqrt(count), gauge.repeatability_dof)
    if len(values) < 2:
        return None
    return Line("repeatability", f"normal, n = {count}", stdev(values) / sqrt(count), count - 1)


def reading_budget(readings: Sequence[Reading], gauge: Gauge | None) -> Budget:
    """Uncertainty budget of the mean of repeats, in their unit.

    The resolution and the calibration don't shrink with repeats: the same leaf twice is not new evidence.
    """
    scale = float(readings[0].unit.scale)
    leaves = max(reading.leaves for reading in readings)
    own_quantity = gauge is None or gauge.quantity == readings[0].unit.dimension
    # censored readings only bound the value: their scatter tells nothing
    values = [reading.value for reading in readings if reading.bound is None] or [readings[0].value]
    lines = [
        resolution_line(readings, gauge if own_quantity else None, scale),
        repeatability_line(values, gauge if own_quantity else None, scale),
        *(calibration_lines(gauge, scale, leaves) if own_quantity else ()),
    ]
    return Budget(tuple(line for line in lines if line is not None))


def mean_value(readings: Sequence[Reading], gauge: Gauge | None) -> tuple[float, float]:
    """Mean of repeats in their unit (of censored ones the tightest bound), corrected for the gauge's error there; and by what."""
    judged = tightest(readings)
    mean = fmean(reading.value for reading in judged)
    if gauge is None or not gauge.errors or gauge.quantity != readings[0].unit.dimension:
        return mean, 0.0
    scale = float(readings[0].unit.scale)
    correction = -gauge.error_at(fmean(reading.si_value for reading in judged)) / scale
    return mean + correction, correction


def tightest(readings: Sequence[Reading]) -> Sequence[Reading]:
    """Readings that make up the value: all repeats, or of censored ones the one that proves most; they are never averaged."""
    if readings[0].bound is None:
        return readings
    pick = min if readings[0].bound == "below" else max
    return [pick(readings, key=lambda reading: reading.value)]
