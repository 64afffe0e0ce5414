"""Settling: what it would take to call a value that stands too close to its limit."""

from dataclasses import replace
from math import floor, log10, sqrt

from measurements.conformity import Judgement, Zone, settling_expanded_uncertainty, settling_repeats, zone_uncertainty
from measurements.gauge import Budget
from measurements.kind import Measured
from measurements.sentence import Sentence, say
from measurements.units import Unit

REPEATABILITY = "repeatability"  # how the names of the budget lines begin that more repeats shrink


def with_repeats(budget: Budget, taken: int, n: int) -> tuple[float, float]:
    """Uncertainty and degrees of freedom of the mean if there were `n` repeats instead of `taken`, of the same scatter."""
    lines = []
    for line in budget.lines:
        if line.name.startswith(REPEATABILITY):
            own = line.name == REPEATABILITY  # a pooled scatter keeps the degrees of freedom of its study
            line = replace(line, u=line.u * sqrt(taken / n), dof=n - 1 if own else line.dof)
        lines.append(line)
    after = Budget(tuple(lines))
    return after.u, after.dof


def settle(measured: Measured, zone: Zone, taken: int) -> dict[str, object]:
    """Say what would settle a close call: how many readings in all, else the expanded uncertainty it takes."""
    repeats = settling_repeats(
        measured.value, zone=zone, combined=lambda n: with_repeats(measured.budget, taken, n), taken=taken
    )
    if repeats:
        return {"repeats": repeats, "expanded_uncertainty": None,
                "sentence": say("{n} readings in all would settle it, if their mean stays.", n=repeats)}  # fmt: skip
    return settle_by_gauge(measured.value, zone, measured.unit)


def settle_by_gauge(value: float, zone: Zone, unit: Unit) -> dict[str, object]:
    """Say what expanded uncertainty would settle a close call."""
    expanded = settling_expanded_uncertainty(value, zone=zone)
    if expanded is None:
        told = say("The value stands on its limit: no gauge settles that.")
    else:
        told = say("Repeats can't settle it; a reading with U of {expanded} {unit} or less would.",
                   expanded=two_digits_down(expanded), unit=unit.symbol)  # fmt: skip
    return {"repeats": None, "expanded_uncertainty": expanded, "sentence": told}


def settle_derived(value: float, zone: Zone, unit: Unit) -> dict[str, object]:
    """Say what would settle a derived value that is too close to call."""
    told = settle_by_gauge(value, zone, unit)
    if told["expanded_uncertainty"] is not None:
        told["sentence"] = say("A value with U of {expanded} {unit} or less would settle it.",
                               expanded=two_digits_down(told["expanded_uncertainty"]), unit=unit.symbol)  # fmt: skip
    return told


def zone_notes(verdict: Judgement, zone: Zone, unit: Unit) -> list[Sentence]:
    """Say so where no reading can be proven within."""
    if not verdict.vanished:
        return []
    return [say("With this uncertainty no reading can be proven within these limits: it takes a U under {expanded} {unit}.",
                expanded=two_digits_down(zone_uncertainty(zone)), unit=unit.symbol)]  # fmt: skip


def two_digits_down(value: float) -> float:
    """Two significant digits, never more than the value: what is said to do must do.

    >>> two_digits_down(0.006099), two_digits_down(0.0061)
    (0.006, 0.0061)
    """
    if value <= 0:
        return 0.0
    step = 10.0 ** (floor(log10(value)) - 1)
    return float(f"{floor(value / step * (1 + 1e-12)) * step:.2g}")
