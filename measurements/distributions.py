"""The normal and Student's t distribution, without a statistics library: `assess` starts in a fraction of its import time."""

from functools import lru_cache
from math import erf, erfc, exp, inf, isinf, lgamma, log, log1p, sqrt
from statistics import NormalDist

TWO_SIGMA = erf(sqrt(2))  # 95.45 %, the share of a normal distribution within two standard deviations
_NORMAL = NormalDist()


def normal_cdf(z: float) -> float:
    """Chance that a standard normal value is at most `z`.

    Source: JCGM 106:2012, 7.2.2 (Phi); handbook tables print Phi(1) = 0.8413.

    >>> round(normal_cdf(1.0), 4)
    0.8413
    """
    return erfc(-z / sqrt(2)) / 2


def student_cdf(t: float, dof: float) -> float:
    """Chance that Student's t with `dof` degrees of freedom is at most `t`.

    By the incomplete beta function; the lower tail keeps its relative precision, so tiny chances are not lost.

    Raises
    ------
    ValueError
        When `dof` is not above zero.
    """
    if not dof > 0:
        raise ValueError(f"degrees of freedom must be above zero, not {dof}")
    if isinf(dof):
        return normal_cdf(t)
    if isinf(t):
        return float(t > 0)
    tail = _incomplete_beta(dof / 2, 0.5, dof / (dof + t * t), t * t / (dof + t * t)) / 2
    return 1 - tail if t > 0 else tail


@lru_cache(maxsize=4096)
def student_quantile(p: float, dof: float = inf) -> float:
    """Value that Student's t with `dof` degrees of freedom stays under with chance `p`, 0 < p < 1.

    Source: JCGM 100:2008, table G.2 prints t for 95 % two-sided, 10 degrees of freedom: 2.23.

    >>> round(student_quantile(0.975, 10), 2)
    2.23
    """
    if not 0 < p < 1:
        raise ValueError(f"a chance lies between 0 and 1, not {p}")
    if isinf(dof):
        return _NORMAL.inv_cdf(p)
    if p == 0.5:
        return 0.0
    if p < 0.5:
        return -student_quantile(1 - p, dof)
    low, high = 0.0, 2.0
    while student_cdf(high, dof) < p:
        low, high = high, 2 * high
    while high - low > 1e-13 * high:
        middle = (low + high) / 2
        if middle in (low, high):
            break
        low, high = (middle, high) if student_cdf(middle, dof) < p else (low, middle)
    return (low + high) / 2


def coverage_factor(dof: float = inf) -> float:
    """Coverage factor k for 95.45 %: 2 when the degrees of freedom are many.

    Source: JCGM 100:2008, table G.2, column 95.45 %: 2.28 at 10 degrees of freedom.

    >>> coverage_factor(), round(coverage_factor(10), 2)
    (2.0, 2.28)
    """
    return 2.0 if isinf(dof) else student_quantile(0.5 + TWO_SIGMA / 2, dof)


def _incomplete_beta(a: float, b: float, x: float, complement: float) -> float:
    """Regularised incomplete beta I_x(a, b); `complement` is 1 - x, given apart so that it keeps its digits.

    Source: NIST Digital Library of Mathematical Functions, 8.17.22 (continued fraction), evaluated from the front.
    """
    if x <= 0 or complement >= 1:
        return 0.0
    if complement <= 0 or x >= 1:
        return 1.0
    log_front = lgamma(a + b) - lgamma(a) - lgamma(b) + a * _log(x, complement) + b * _log(complement, x)
    if x < (a + 1) / (a + b + 2):
        return exp(log_front) / a * _beta_fraction(a, b, x)
    return 1 - exp(log_front) / b * _beta_fraction(b, a, complement)


def _log(x: float, complement: float) -> float:
    return log1p(-complement) if complement < 0.5 else log(x)


def _beta_fraction(a: float, b: float, x: float) -> float:
    tiny = 1e-300
    numerator_ratio, denominator = 1.0, 1 / ((1 - (a + b) * x / (a + 1)) or tiny)
    fraction = denominator
    for m in range(1, 10_000):
        for term in (
            m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m)),
            -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1)),
        ):
            denominator = 1 / ((1 + term * denominator) or tiny)
            numerator_ratio = (1 + term / numerator_ratio) or tiny
            step = numerator_ratio * denominator
            fraction *= step
        if abs(step - 1) < 1e-15:
            break
    return fraction
