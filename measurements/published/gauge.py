"""Published values for uncertainty budgets: combination, degrees of freedom, type B distributions."""

from math import sqrt

from measurements.check_value import CheckValue
from measurements.distributions import student_quantile
from measurements.gauge import Budget, Line, display_step, effective_dof, rectangular

GAUGE_BLOCK = Budget(tuple(
    Line("", "", u, dof)
    for u, dof in ((25, 18), (5.8, 24), (3.9, 5), (6.7, 8), (2.9, 50), (16.6, 2))
))  # fmt: skip
H1 = "JCGM 100:2008, H.1 (end-gauge calibration)"
MASS = Budget(tuple(Line("", "", u) for u in (22.5, 8.66, 14.4, 5.77, 5.77)))  # rounded as printed
S2 = "EA-4/02 M:2022, S2 (10 kg weight)"

PUBLISHED = [
    CheckValue("combined standard uncertainty of the end gauge [nm]", "32", lambda: GAUGE_BLOCK.u, H1, "seen",
               "plain sum of the contributions: 61"),
    CheckValue("the same, unrounded [nm]", "31.7", lambda: GAUGE_BLOCK.u, f"{H1}, recomputed from its contributions", "seen",
               "mean square instead of sum: 12.93"),
    CheckValue("effective degrees of freedom of the end gauge, truncated", "16", lambda: GAUGE_BLOCK.dof, H1, "seen",
               "rounded: 17; sum of the degrees of freedom: 107"),
    CheckValue("expanded uncertainty at 99 %, u rounded to 32 [nm]", "93", lambda: student_quantile(0.995, GAUGE_BLOCK.dof) * 32,
               H1, "seen", "normal quantile 2.58: 82"),
    CheckValue("expanded uncertainty at 99 %, u unrounded [nm]", "92.5",
               lambda: student_quantile(0.995, GAUGE_BLOCK.dof) * GAUGE_BLOCK.u, f"{H1}, recomputed", "seen", "k = 2: 63.3"),
    CheckValue("Welch-Satterthwaite, four equal contributions of 10 degrees of freedom", "40",
               lambda: effective_dof([(1, 10)] * 4), "JCGM 100:2008, G.4.1 (arithmetic)", "seen",
               "smallest, or mean, degrees of freedom: 10"),
    CheckValue("rectangular, half-width 15 mg [mg]", "8.66", lambda: rectangular(15), S2, "seen", "15/3: 5.00; 15/2√3: 4.33"),
    CheckValue("rectangular, half-width 10 mg [mg]", "5.77", lambda: rectangular(10), S2, "seen", "triangular, 10/√6: 4.08"),
    CheckValue("pooled s = 25 mg over three weighings [mg]", "14.4", lambda: 25 / sqrt(3), S2, "seen", "s not divided: 25.0"),
    CheckValue("combined standard uncertainty of the weight [mg]", "29.2", lambda: MASS.u, S2, "seen",
               "U = 45 taken for u: 48.7; s = 25 not divided by √3: 35.7"),
    CheckValue("expanded uncertainty of the weight, k = 2 [mg]", "58", lambda: MASS.expanded, S2, "seen", "u for U: 29"),
    CheckValue("display step 1 [of the step]", "0.29", lambda: display_step(1), "JCGM 100:2008, F.2.2.1", "seen",
               "whole step as half-width, 1/√3: 0.58"),
    CheckValue("standard uncertainty of a leaf step of 0.05 mm [mm]", "0.0144", lambda: display_step(0.05),
               "JCGM 100:2008, 4.3.7 and F.2.2.1 (arithmetic)", "seen", "step over √3: 0.0289"),
]  # fmt: skip
