"""Published values for the chance of being within limits, guard bands and the distributions behind them."""

from math import erf, sqrt

from measurements.check_value import CheckValue
from measurements.conformity import Zone, chance_within, guard_band, judge
from measurements.distributions import coverage_factor, normal_cdf, student_quantile

JCGM = "JCGM 106:2012"
ILAC = "ILAC-G8:09/2019"


def false_accept(guard_in_expanded: float) -> float:
    """Largest chance [%] of accepting wrongly at a guard band given in units of U."""
    return 100 * (1 - chance_within(-guard_in_expanded * 2, u=1, lower=None, upper=0))


PUBLISHED = [
    CheckValue("oil viscosity 13.6, u 1.8, limits 12.5 to 16.3: chance within", "0.66",
               lambda: chance_within(13.6, u=1.8, lower=12.5, upper=16.3), f"{JCGM}, 7.4 (inputs seen)", "from memory",
               "uniform instead of normal: 0.61; upper side only: 0.93"),
    CheckValue("-5.47 V, u 0.05, upper limit -5.40: chance within", "0.92",
               lambda: chance_within(-5.47, u=0.05, lower=None, upper=-5.40), f"{JCGM}, 7.3.3", "from memory",
               "U taken for u, 0.07/0.10: 0.76"),
    CheckValue("509.7 kPa, u 8.6, lower limit 490: chance within", "0.99",
               lambda: chance_within(509.7, u=8.6, lower=490, upper=None), f"{JCGM}, breaking pressure example", "from memory",
               "side mistaken: 0.01"),
    CheckValue("guard band U: largest chance of a false accept [%]", "2.3", lambda: false_accept(1.0),
               f"{ILAC}, table of decision rules: under 2.5 % (0.02275)", "from memory", "two-sided tail: 4.6"),
    CheckValue("guard band 0.83 U: largest chance of a false accept [%]", "4.8", lambda: false_accept(0.83),
               f"{ILAC}, table of decision rules: under 5 % (0.048457)", "from memory", "0.83 u instead of 0.83 U: 20.3"),
    CheckValue("no guard band: largest chance of a false accept [%]", "50", lambda: false_accept(0.0),
               f"{ILAC}, table of decision rules: up to 50 %", "from memory", "two-sided tail: 100"),
    CheckValue("rule expanded: w in units of u, many degrees of freedom", "2.000", lambda: guard_band("expanded", u=1),
               f"{ILAC}: w = U with k = 2", "seen", "1.96 of the 95 % two-sided quantile"),
    CheckValue("rule guarded: w in units of u, many degrees of freedom", "1.645", lambda: guard_band("guarded", u=1),
               "ISO 14253-1:2017, one-sided 95 % (printed as 1.65)", "from memory", "two-sided 95 %: 1.960"),
    CheckValue("60 of 80 psi, loss 25 % at limit 25 %, rule simple", "within",
               lambda: judge(25.0, u=0.6, zone=Zone(None, 25.0, "simple")).verdict,
               "FAA AC 43.13-1B, 8-14: a loss over 25 % is suspect; 60/80 is not over", "seen",
               "edge counted as over: beyond"),
    CheckValue("the same 60 of 80 psi, rule guarded", "too_close",
               lambda: judge(25.0, u=0.6, zone=Zone(None, 25.0, "guarded")).verdict,
               "ISO 14253-1:2017: on the limit neither conformity nor non-conformity is proven", "from memory",
               "no guard band: within"),
    CheckValue("Phi(1)", "0.8413", lambda: normal_cdf(1), "normal table of any statistics handbook", "seen",
               "erf(1) for Phi: 0.8427"),
    CheckValue("Phi(-2.5)", "0.0062", lambda: normal_cdf(-2.5), "normal table of any statistics handbook", "seen",
               "tail of the two-sided table: 0.0124"),
    CheckValue("share within two standard deviations [%]", "95.45", lambda: 100 * erf(2 / sqrt(2)),
               "JCGM 100:2008, table G.1", "from memory", "95 % at k = 2: 95.00"),
    *(
        CheckValue(f"t, 95.45 % two-sided, {dof} degrees of freedom", printed, lambda dof=dof: coverage_factor(dof),
                   "JCGM 100:2008, table G.2, column 95.45 %", "from memory",
                   "the 95 % column: 12.71, 4.30, 2.57, 2.23, 2.09, 2.01")
        for dof, printed in ((1, "13.97"), (2, "4.53"), (5, "2.65"), (10, "2.28"), (20, "2.13"), (50, "2.05"))
    ),
    *(
        CheckValue(f"t, 95 % one-sided, {dof} degrees of freedom", printed, lambda dof=dof: student_quantile(0.95, dof),
                   "NIST/SEMATECH e-Handbook 1.3.6.7.2, table of t", "from memory",
                   "the two-sided 95 % column: 12.706, 4.303, 2.571, 2.228, 2.042")
        for dof, printed in ((1, "6.314"), (2, "2.920"), (5, "2.015"), (10, "1.812"), (30, "1.697"))
    ),
    CheckValue("t, 99 % two-sided, 16 degrees of freedom", "2.92", lambda: student_quantile(0.995, 16),
               "JCGM 100:2008, H.1.6", "seen", "normal quantile: 2.58; one-sided 99 %: 2.58"),
]  # fmt: skip
