"""Sizes at 20 °C."""

from math import sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st

from measurements.published.thermal import PUBLISHED
from measurements.thermal import factor_to_reference, size_at_reference, temperature_lines

WRONG = {  # the wrong formula each published value names
    "500.035 mm read at 23.7 °C, steel: at 20 °C [mm]": lambda: 500.035 * (1 + 11.7e-6 * 3.7),
    "u of 50 mm from ±0.05 °C between part and gauge, 11.5e-6 [nm]": lambda: 50e6 * 11.5e-6 * 0.05,
    "u of 50 mm, 0.1 °C off 20, expansion within ±1e-6 (10 % of 10e-6) [nm]": lambda: 50e6 * 1e-6 * 0.1,
}


@pytest.mark.parametrize("value", PUBLISHED, ids=lambda value: value.what)
def test_published_value_is_reproduced_and_its_wrong_formula_is_caught(value):
    per_fahrenheit = float(value.printed) / 1.8  # the other column of the table of expansions
    decimals = len(value.printed.partition(".")[2])
    wrong = f"{WRONG.get(value.what, lambda: per_fahrenheit)():.{decimals}f}"

    assert value.agrees(), value.source
    assert wrong != value.printed
    assert any(abs(float(wrong) - float(word)) < 0.11 for word in value.catches.split() if word[0].isdigit())


def test_part_and_gauge_of_one_material_and_temperature_cancel():
    assert size_at_reference(100.0, 11.7e-6, 35.0, 11.7e-6, 35.0) == pytest.approx(100.0, abs=1e-12)


def test_a_warm_part_under_a_gauge_at_20_is_smaller_at_20():
    # grey iron bore at 30 °C: 100 mm × 11.4e-6 × 10 = 0.0114 mm
    assert size_at_reference(100.0, 11.4e-6, 30.0) == pytest.approx(100.0 - 0.0114, abs=1e-12)


def test_a_warm_gauge_reads_small():
    # a steel scale at 30 °C has grown, so it shows less than the size: 100 mm × 11.7e-6 × 10
    assert size_at_reference(100.0, 11.4e-6, 20.0, 11.7e-6, 30.0) == pytest.approx(100.0 + 0.0117, abs=1e-12)


@given(st.floats(-20, 60), st.floats(-20, 60))
def test_first_order_stays_within_a_millionth_of_the_exact_ratio(part_temperature, gauge_temperature):
    part, scale = 23.6e-6, 11.7e-6
    exact = (1 + scale * (gauge_temperature - 20)) / (1 + part * (part_temperature - 20))

    ours = factor_to_reference(part, part_temperature, scale, gauge_temperature)

    assert abs(ours - exact) < 1.5e-6


def test_every_line_is_told_with_its_rectangular_share():
    lines = temperature_lines(200, 20e-6, 25, 10e-6, 22, part_half_width=1, gauge_half_width=2)

    assert lines == [
        ("temperature of the part", pytest.approx(200 * 20e-6 * 1 / sqrt(3))),
        ("temperature of the gauge", pytest.approx(200 * 10e-6 * 2 / sqrt(3))),
        ("expansion of the part", pytest.approx(200 * 2e-6 * 5 / sqrt(3))),
        ("expansion of the gauge", pytest.approx(200 * 1e-6 * 2 / sqrt(3))),
    ]


def test_at_20_degrees_known_exactly_nothing_is_left():
    assert temperature_lines(200, 20e-6, 20, 10e-6, 20) == []


def test_below_20_degrees_an_uncertainty_is_still_above_zero():
    assert all(u > 0 for _, u in temperature_lines(200, 20e-6, 5, 10e-6, 5, 1, 1))
