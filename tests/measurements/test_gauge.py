"""A budget has a line for each thing that can be wrong, and repeats shrink only what varies between them."""

import math
from datetime import date

import pytest

from measurements.entry import Field, read_entry
from measurements.evidence import evidence_gaps, suitability
from measurements.gauge import Gauge, mean_value, reading_budget

MM = Field("length", "mm", "lash")
FEELER = Gauge("FG-2", "length", resolution=1e-5, expanded_uncertainty=8e-6, coverage_factor=2)


def readings(text: str):
    return read_entry(text, MM).readings


def lines(budget) -> dict[str, float]:
    return {line.name: round(line.u, 6) for line in budget.lines}


def test_certificate_and_resolution_make_the_budget_of_a_single_reading():
    budget = reading_budget(readings("0.18"), FEELER)

    assert lines(budget) == {"resolution 0.01": 0.002887, "calibration of FG-2": 0.004}
    assert budget.u == pytest.approx(math.hypot(0.01 / math.sqrt(12), 0.004))
    assert budget.expanded == pytest.approx(2 * budget.u)


def test_the_permissible_error_stands_in_only_where_there_is_no_certificate():
    by_class = Gauge("FG-3", "length", max_permissible_error=6e-6)
    both = Gauge("FG-4", "length", max_permissible_error=6e-6, expanded_uncertainty=8e-6, coverage_factor=2)

    assert lines(reading_budget(readings("0.18"), by_class))["permissible error of FG-3"] == 0.003464  # 6/√3 µm
    assert "permissible error of FG-4" not in lines(reading_budget(readings("0.18"), both))


def test_decimals_coarser_than_the_gauge_count():
    assert lines(reading_budget(readings("0.2"), FEELER))["resolution 0.1"] == 0.028868


def test_four_repeats_bring_their_own_scatter():
    # 0.30 0.31 0.29 0.30: s = √(0.0002/3) = 0.008165, s/√4 = 0.004082
    budget = reading_budget(readings("0.30; 0.31; 0.29; 0.30"), FEELER)

    assert lines(budget)["repeatability"] == 0.004082
    assert [line.dof for line in budget.lines if line.name == "repeatability"] == [3]


def test_fewer_repeats_give_way_to_the_pooled_scatter():
    studied = Gauge("FG-5", "length", 1e-5, 8e-6, 2, repeatability=6e-6, repeatability_dof=38)
    budget = reading_budget(readings("0.30; 0.31; 0.29"), studied)

    assert lines(budget)["repeatability, pooled"] == round(0.006 / math.sqrt(3), 6)
    assert evidence_gaps(readings("0.30; 0.31; 0.29"), studied) == []


def test_resolution_and_calibration_do_not_shrink_with_repeats():
    once, often = reading_budget(readings("0.30"), FEELER), reading_budget(readings("; ".join(["0.30"] * 9)), FEELER)

    assert often.u == pytest.approx(once.u)


def test_a_bracket_replaces_the_resolution_by_its_half_width():
    budget = reading_budget(readings("0.30..0.35"), FEELER)

    assert lines(budget) == {"bracket between leaves": 0.014434, "calibration of FG-2": 0.004}  # 0.025/√3


def test_stacked_leaves_bring_one_calibration_each():
    budget = reading_budget(readings("0.30+0.05"), FEELER)

    assert lines(budget)["calibration of FG-2"] == round(0.004 * math.sqrt(2), 6)


def test_a_budget_is_the_same_in_inches():
    millimetres = reading_budget(readings("0.3048 mm"), Gauge("G", "length", 2.54e-5, 8e-6, 2))
    inches = reading_budget(read_entry("0.012 in", MM).readings, Gauge("G", "length", 2.54e-5, 8e-6, 2))

    assert inches.u * 25.4 == pytest.approx(millimetres.u, rel=1e-9)


def test_the_error_at_the_point_is_corrected_straight_between_calibration_points():
    gauge = Gauge("P-1", "length", errors=((0.0, 0.0), (1e-3, 1e-5)))

    value, correction = mean_value(readings("0.50"), gauge)

    assert (round(value, 6), round(correction, 6)) == (0.495, -0.005)


@pytest.mark.parametrize(
    ("gauge", "text", "why"),
    [
        (None, "0.30", "u is a lower bound: no gauge is named and there are fewer than four repeats and no repeat study."),
        (FEELER, "0.30", "u is a lower bound: there are fewer than four repeats and no repeat study."),
        (Gauge("X", "length"), "0.30; 0.30; 0.31; 0.30",
         "u is a lower bound: the gauge has neither certificate nor permissible error."),
    ],
)  # fmt: skip
def test_what_the_budget_lacks_is_said(gauge, text, why):
    assert [str(one) for one in evidence_gaps(readings(text), gauge)] == [why]


@pytest.mark.parametrize(
    ("gauge", "on", "told"),
    [
        (Gauge("G", "length", due_on=date(2026, 3, 1)), date(2026, 3, 2),
         "Gauge G was past due: due 2026-03-01, reading taken 2026-03-02."),
        (Gauge("G", "length", due_on=date(2026, 3, 1)), date(2026, 3, 1), None),
        (Gauge("G", "length", calibrated_on=date(2026, 3, 1)), date(2026, 2, 1),
         "Gauge G was calibrated 2026-03-01, after this reading of 2026-02-01."),
        (Gauge("G", "length", failed=True), None, "Gauge G has failed its check: its readings can't be relied on."),
        (Gauge("G", "length", range_lower=5e-5, range_upper=2e-4), None, "The reading is outside the range of gauge G."),
    ],
)  # fmt: skip
def test_what_speaks_against_the_gauge_is_said(gauge, on, told):
    assert [str(one) for one in gauge.complaints(3e-4, on)] == ([told] if told else [])


@pytest.mark.parametrize(
    ("expanded", "lower", "upper", "nominal", "told"),
    [
        (0.012, 0.25, 0.35, None, None),
        (0.013, 0.25, 0.35, None, "The gauge's U is 13 % of the tolerance zone, over an eighth."),
        (0.034, 0.25, 0.35, None, "This gauge is unsuitable here: its U is 34 % of the tolerance zone, over a third."),
        (0.013, None, 0.35, 0.25, "The gauge's U is 13 % of the tolerance zone, over an eighth."),
        (0.5, None, 0.35, None, None),  # one-sided without nominal: not judged
    ],
)
def test_a_gauge_too_coarse_for_the_zone_is_noted_then_unsuitable(expanded, lower, upper, nominal, told):
    found = suitability(expanded, lower, upper, nominal)

    assert (None if found is None else str(found)) == told
