"""A finding: a value with its verdict and its grounds, and its plain-data form with the names that `assess` promises."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from math import isinf

from measurements.conformity import Judgement, Zone
from measurements.limits import Limit
from measurements.sentence import Sentence
from measurements.slip import Slip
from measurements.units import Unit, to_si


@dataclass(frozen=True)
class Finding:
    """A value with its verdict; `assess` writes its fields, a page shows them."""

    characteristic: str
    station: str | None
    value: float | None
    unit: Unit
    u: float | None
    k: float
    dof: float
    zone: Zone
    judgement: Judgement
    limit: Limit | None = None
    as_typed: str | None = None
    bound: str | None = None
    needs: Mapping[str, object] | None = None
    slip: Slip | None = None
    notes: Sequence[Sentence] = ()
    working: Sequence[Sentence] = ()
    not_measured: str | None = None
    extra: Mapping[str, object] = field(default_factory=dict)


def plain(finding: Finding) -> dict[str, object]:
    """A finding as plain data, with the names that `assess` promises."""
    unit, verdict = finding.unit, finding.judgement
    expanded = None if finding.u is None else finding.k * finding.u
    return {
        "characteristic": finding.characteristic,
        "station": finding.station,
        "as_typed": finding.as_typed,
        "value": tidy(finding.value),
        "unit": unit.symbol,
        "si_value": None if finding.value is None else tidy(to_si(finding.value, unit)),
        "standard_uncertainty": tidy(finding.u),
        "expanded_uncertainty": tidy(expanded),
        "coverage_factor": None if finding.u is None else tidy(finding.k),
        "degrees_of_freedom": None if isinf(finding.dof) else finding.dof,
        "lower": tidy(finding.zone.lower),
        "upper": tidy(finding.zone.upper),
        "decision_rule": finding.zone.rule,
        "guard_band": tidy(verdict.guard_band),
        "verdict": verdict.verdict,
        "probability_within": None if verdict.probability_within is None else round(verdict.probability_within, 9),
        "margin": tidy(verdict.margin),
        "needs": plain_needs(finding.needs),
        "slip": plain_slip(finding.slip),
        "source": finding.limit.source if finding.limit else None,
        **({"bound": finding.bound} if finding.bound else {}),
        **({"not_measured": finding.not_measured} if finding.not_measured else {}),
        **{name: tidy(value) if isinstance(value, float) else value for name, value in finding.extra.items()},
        "notes": [str(note) for note in finding.notes],
        "working": [str(step) for step in finding.working],
    }  # fmt: skip


def plain_needs(needs: Mapping[str, object] | None) -> dict[str, object] | None:
    """What would settle a close call, as plain data."""
    if needs is None:
        return None
    expanded = tidy(needs["expanded_uncertainty"])
    return {**needs, "expanded_uncertainty": expanded, "sentence": str(needs["sentence"])}


def plain_slip(slip: Slip | None) -> dict[str, object] | None:
    """What a reading would be if it were a slip, as plain data."""
    return slip and {"would_be": tidy(slip.would_be), "unit": slip.unit, "if": str(slip.reason)}


def tidy(value: float | None) -> float | None:
    """Round to 12 significant digits: the noise of binary arithmetic is not a reading."""
    return None if value is None else float(f"{value:.12g}")
