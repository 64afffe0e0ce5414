"""Whether the evidence is good enough: what a budget lacks, and whether the gauge is fine enough for the limits."""

from collections.abc import Sequence

from measurements.entry import Reading
from measurements.gauge import FEWEST_OWN_REPEATS, Gauge
from measurements.sentence import Sentence, say

NOTED_SHARE, UNSUITABLE_SHARE = 1 / 8, 1 / 3  # of the tolerance zone, by the gauge's U


def evidence_gaps(readings: Sequence[Reading], gauge: Gauge | None) -> list[Sentence]:
    """Say what the budget lacks, so that u is a lower bound."""
    missing = []
    if gauge is None:
        missing.append("no gauge is named")
    elif not gauge.has_calibration:
        missing.append("the gauge has neither certificate nor permissible error")
    if len(readings) < FEWEST_OWN_REPEATS and (gauge is None or gauge.repeatability is None):
        missing.append("there are fewer than four repeats and no repeat study")
    told = [say("u is a lower bound: {why}.", why=" and ".join(missing))] if missing else []
    if gauge and gauge.expanded_uncertainty is not None and gauge.coverage_factor is None:
        told.append(say("The certificate of gauge {gauge} is given without its coverage factor; k = 2 is taken.",
                        gauge=gauge.name))  # fmt: skip
    return told


def suitability(expanded: float, lower: float | None, upper: float | None, nominal: float | None) -> Sentence | None:
    """Note a gauge whose U is over an eighth of the tolerance zone, and call it unsuitable over a third.

    One-sided limits are measured from the nominal; without one nothing is said.
    """
    if lower is not None and upper is not None:
        width = upper - lower
    elif nominal is not None and (lower is not None or upper is not None):
        width = abs((lower if upper is None else upper) - nominal)
    else:
        return None
    if not width:
        return None
    share = expanded / width
    if share > UNSUITABLE_SHARE:
        return say(
            "This gauge is unsuitable here: its U is {share} % of the tolerance zone, over a third.",
            share=round(100 * share),
        )
    if share > NOTED_SHARE:
        return say("The gauge's U is {share} % of the tolerance zone, over an eighth.", share=round(100 * share))
    return None
