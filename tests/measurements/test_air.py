"""Air: barometer, compression, and flow through small holes."""

from math import exp, inf, pi, sqrt

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from scipy.optimize import brentq

from measurements import air
from measurements.published.air import (
    API_520_EXAMPLE,
    INCH,
    LBF,
    ORIFICE_TABLE,
    PSI,
    PUBLISHED,
    SEA_LEVEL,
    api_520_area,
    free_air,
)
from measurements.sentence import Refusal


def taken_as_choked(diameter, gauge_pressure):
    """Free air [ft³/min] if the flow were choked whatever the pressure."""
    kelvin, area = 294.26, pi / 4 * (diameter * INCH) ** 2
    flow = 0.684731 * area * (gauge_pressure + SEA_LEVEL) * PSI / sqrt(287.05287 * kelvin)
    return flow * 287.05287 * kelvin / (SEA_LEVEL * PSI) / 0.3048**3 * 60


WRONG = {  # the wrong formula each published value names
    "120 psi at sea level, read at 5000 ft [psi]": lambda: 120 - (101325 - air.standard_pressure(1524)) / PSI,
    **{f"standard pressure at {h} m [hPa]": lambda h=h: 1013.25 * exp(-h / 8435)
       for h in (500, 1000, 2000, 3000, 5000, 11000)},
    "standard temperature at 0 m [K]": lambda: 20 + 273.15,
    "standard temperature at 11000 m [K]": lambda: 288.15 - 110,
    "240 → 40 cm³ from 1.00e5 Pa [1e5 Pa]": lambda: 240 / 40,
    "240 → 40 cm³ from 293 K [K]": lambda: 293 * 6**1.4,
    "80 psi on a 4.0 in bore [lbf]": lambda: 80 * 4.0**2,
    "critical pressure ratio of air, γ 1.4": lambda: 2 / 2.4,
    "critical pressure of CO2 from 1400 kPa, γ 1.289 [kPa]": lambda: 1400 * 0.528282,
    "choked flow of air, × A p / √(R T)": lambda: sqrt(1.4),
    **{f"hole that holds {r} of 80 psi behind 0.040 in [in]": lambda r=r: 0.040 * ((80 - r) / r) ** 0.25
       for r in (78, 70, 60, 40)},
    "reading of 80 psi with equal holes [psi]": lambda: 80 / 2,
    "free air through 1/16 in at 5 psi [ft³/min]": lambda: taken_as_choked(1 / 16, 5),
    "free air through 1/4 in at 5 psi [ft³/min]": lambda: taken_as_choked(1 / 4, 5),
}  # fmt: skip


@pytest.mark.parametrize("value", PUBLISHED, ids=lambda value: value.what)
def test_published_value_is_reproduced_and_its_wrong_formula_is_caught(value):
    decimals = len(value.printed.partition(".")[2])
    wrong = f"{WRONG[value.what]():.{decimals}f}"

    assert value.agrees(), value.source
    assert wrong != value.printed
    assert wrong in value.catches


@pytest.mark.parametrize(("diameter", "gauge_pressure", "printed"), ORIFICE_TABLE)
def test_flow_law_agrees_with_the_handbook_table_within_its_0_7_percent(diameter, gauge_pressure, printed):
    assert free_air(diameter, gauge_pressure) == pytest.approx(float(printed), rel=0.007)


def test_choked_flow_agrees_with_the_relief_valve_example_of_api_520():
    assert api_520_area() == pytest.approx(float(API_520_EXAMPLE[-1]), rel=1e-4)


def test_a_reading_at_the_reference_barometer_stands():
    assert air.gauge_at_reference(25.0, 1013.25, 1013.25) == 25.0


@given(st.floats(1, 40), st.floats(700, 1080))
def test_scaling_the_gauge_reading_is_the_same_as_scaling_the_absolute_pressure(reading, barometer):
    absolute_share = (reading * 1000 + barometer) / barometer * 1013.25

    assert air.gauge_at_reference(reading * 1000, barometer, 1013.25) == pytest.approx(absolute_share - 1013.25)


def test_gauge_and_absolute_lead_back_to_each_other():
    assert air.absolute(12.0, 1.01325) == pytest.approx(13.01325)
    assert air.gauge(13.01325, 1.01325) == pytest.approx(12.0)
    assert air.absolute(-1.01325, 1.01325) == 0.0


@given(st.floats(0.02, 0.995))
def test_flow_agrees_with_the_energy_equation_solved_step_by_step(share):
    # jet speed from the enthalpy drop, density from the isentrope, throat at the speed of sound at most
    upstream, kelvin, r, cp = 6e5, 293.0, 287.05287, 287.05287 * 1.4 / 0.4
    throat = upstream * max(share, (2 / 2.4) ** 3.5)
    throat_kelvin = kelvin * (throat / upstream) ** (0.4 / 1.4)
    by_energy = throat / (r * throat_kelvin) * sqrt(2 * cp * (kelvin - throat_kelvin))

    ours = air.mass_flow(1.0, upstream, upstream * share, kelvin)

    assert ours == pytest.approx(by_energy, rel=1e-9)


@given(st.floats(0.005, 0.2), st.floats(5, 120), st.floats(8, 16))
def test_hole_and_reading_lead_back_to_each_other(hole, supply, barometer):
    reading = air.reading_for(hole, 0.040, supply, barometer)
    assume(0 < reading < supply)

    assert air.equivalent_diameter(0.040, supply, reading, barometer) == pytest.approx(hole, rel=1e-6)


def test_reading_agrees_with_a_general_root_finder():
    def surplus(reading):
        return air.mass_flow(0.0016, 94.696, reading + 14.696, 1) - air.mass_flow(0.0025, reading + 14.696, 14.696, 1)

    assert air.reading_for(0.050, 0.040, 80, 14.696) == pytest.approx(brentq(surplus, 1e-9, 80 - 1e-9), abs=1e-9)


def test_nothing_lost_is_no_hole_and_nothing_held_an_endless_one():
    assert air.equivalent_diameter(1.0, 5.5, 5.5, 1.013) == 0.0
    assert air.equivalent_diameter(1.0, 5.5, 0.0, 1.013) == inf


@given(st.floats(1, 8), st.floats(0.02, 0.98), st.floats(0.7, 1.08))
def test_slopes_agree_with_small_differences(supply, share, barometer):
    reading, orifice, step = supply * share, 1.0, 1e-6
    for wanted, upstream, downstream in ((supply, supply, reading), (reading, reading, 0.0)):  # not across the choke
        assume(abs((downstream + barometer) / (upstream + barometer) - air.critical_ratio()) > 1e-4 and wanted > step)

    def hole(d=orifice, s=supply, r=reading, b=barometer):
        return air.equivalent_diameter(d, s, r, b)

    slopes = air.equivalent_diameter_slopes(orifice, supply, reading, barometer)

    assert slopes.orifice == pytest.approx((hole(d=1 + step) - hole(d=1 - step)) / (2 * step), rel=1e-5)
    assert slopes.supply == pytest.approx((hole(s=supply + step) - hole(s=supply - step)) / (2 * step), rel=1e-4)
    assert slopes.reading == pytest.approx((hole(r=reading + step) - hole(r=reading - step)) / (2 * step), rel=1e-4)
    ours, differences = slopes.barometer, (hole(b=barometer + step) - hole(b=barometer - step)) / (2 * step)
    assert ours == pytest.approx(differences, rel=1e-4, abs=1e-6)


def test_thrust_on_a_metric_piston():
    # 5.5 bar on 96 mm: 550000 × 0.0072382 m² = 3981 N, about the weight of 400 kg
    assert air.thrust(5.5e5, 0.096) == pytest.approx(550000 * 0.00723823, rel=1e-5)
    assert air.thrust(80 * PSI, 5.0 * INCH) / LBF == pytest.approx(1570.8, abs=0.1)


@pytest.mark.parametrize(
    ("call", "sentence"),
    [
        (lambda: air.gauge_at_reference(25, 0.0),
         "Read a barometer of 0; it must be above zero: give the station pressure."),
        (lambda: air.gauge_at_reference(25, 1013.25, float("nan")),
         "Read a barometer of nan; it must be above zero: give the station pressure."),
        (lambda: air.absolute(-2.0, 1.0),
         "Read -2 gauge, which is below an absolute vacuum at a barometer of 1: check the unit, or write abs."),
        (lambda: air.gauge(-0.5, 1.0), "Read -0.5 absolute; an absolute pressure can't be below zero."),
        (lambda: air.standard_pressure(12000),
         "Read an altitude of 12000 m; the standard atmosphere is known here from −2000 to 11000 m."),
        (lambda: air.mass_flow(1, 1.0, 2.0, 300),
         "Read 1 before and 2 behind a hole; air flows to the lower absolute pressure."),
        (lambda: air.equivalent_diameter(1, 0.0, 0.0, 1.0), "Read a supply of 0; it must be above zero."),
        (lambda: air.equivalent_diameter(1, 5.5, 5.6, 1.0),
         "Read 5.6 behind the orifice at a supply of 5.5; it must lie between 0 and the supply."),
        (lambda: air.equivalent_diameter_slopes(1, 5.5, 5.5, 1.0),
         "Read 5.5 behind the orifice at a supply of 5.5; at nothing or all there is no telling how sure the hole is."),
    ],
)  # fmt: skip
def test_what_air_cannot_do_is_refused_with_what_was_read(call, sentence):
    with pytest.raises(Refusal) as refused:
        call()

    assert str(refused.value) == sentence
