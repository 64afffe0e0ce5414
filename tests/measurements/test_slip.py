"""The slip guard: single slips by name, and found and false rates counted over a model of credible readings.

The model is ours (invented stations, fixed seed): most readings healthy, one in twenty worn, most of these just beyond
a limit and few up to three tolerance widths; with or without a last visit and siblings, now and then without limits.
"""

import random
from collections import Counter
from dataclasses import dataclass

import pytest
from hypothesis import given
from hypothesis import strategies as st

from measurements.sentence import Refusal
from measurements.slip import Expectation, Slip, find_slip
from measurements.units import DIMENSIONS, convert, find_unit

MM, BAR, THOU = find_unit("mm"), find_unit("bar"), find_unit("thou")
INTAKE, EXHAUST = Expectation(0.25, 0.35, 0.30), Expectation(0.40, 0.50, 0.45)


NAMED = [
    (0.0118, MM, Expectation(0.25, 0.35), 0.29972, "typed in inches"),
    (12.0, MM, Expectation(0.25, 0.35), 0.3048, "typed in thousandths of an inch"),
    (300.0, MM, Expectation(0.25, 0.35), 0.3, "typed in µm"),
    (0.3, THOU, Expectation(10.0, 14.0), 0.3 / 0.0254, "typed in mm"),
    (3.0, MM, Expectation(0.25, 0.35), 0.3, "the point is moved one place"),
    (0.03, MM, Expectation(0.25, 0.35, last=0.31), 0.3, "the point is moved one place"),
    (30.0, MM, Expectation(0.25, 0.35), 0.3, "the point is moved 2 places"),
    (145.0, BAR, Expectation(10.0, nominal=12.0), 9.997398075094124, "typed in psi"),
    (1200.0, BAR, Expectation(10.0, nominal=12.0), 12.0, "typed in kPa"),
    (1.2, BAR, Expectation(10.0, nominal=12.0), 12.0, "the point is moved one place"),
    (120.0, BAR, Expectation(last=12.1), 12.0, "the point is moved one place"),
    (180.0, find_unit("°C"), Expectation(70.0, 95.0), (180 - 32) / 1.8, "typed in °F"),
    (66.0, find_unit("N·m"), Expectation(88.0, 98.0), 66 * 1.3558179483314003, "typed in lbf·ft"),
    (0.08, find_unit("%"), Expectation(upper=25.0, last=9.0), 8.0, "typed in parts of one"),
]


@pytest.mark.parametrize(("value", "unit", "own", "would_be", "reason"), NAMED, ids=lambda given: str(given)[:30])
def test_slip_is_named(value, unit, own, would_be, reason):
    slip = find_slip(value, unit, own, unit_typed=False)

    assert (slip.would_be, slip.unit, str(slip.reason)) == (pytest.approx(would_be, rel=1e-12), unit.symbol, reason)


GENUINE = [
    (0.18, MM, Expectation(0.25, 0.35)),
    (0.30, MM, INTAKE),
    (0.60, MM, INTAKE),
    (0.05, MM, Expectation(0.25, 0.35, last=0.08)),
    (6.0, BAR, Expectation(10.0, nominal=12.0)),
    (14.0, BAR, Expectation(10.0)),
    (100.35, MM, Expectation(100.0, 100.1)),
    (233.0, BAR, Expectation(220.0, 230.0)),
    (5e5, MM, Expectation(0.25, 0.35)),
    (0.0, MM, INTAKE),
    (-0.03, MM, Expectation(-0.02, 0.02)),
    (4.0, MM, Expectation()),
    (4.0, MM, Expectation(0.35, 0.25)),
    (float("nan"), MM, INTAKE),
    (float("inf"), MM, INTAKE),
]


@pytest.mark.parametrize(("value", "unit", "own"), GENUINE)
def test_reading_that_can_be_so_or_means_nothing_otherwise_is_not_asked_about(value, unit, own):
    assert find_slip(value, unit, own, unit_typed=False) is None


def test_reading_that_fits_the_neighbour_is_asked_about():
    own, neighbour = Expectation(0.25, 0.35, 0.30, last=0.29), Expectation(0.40, 0.50, 0.45, last=0.46)

    slip = find_slip(0.45, MM, own, unit_typed=True, neighbours={"1.exhaust": neighbour})

    assert (slip.would_be, str(slip.reason)) == (0.45, "it belongs to 1.exhaust")


def test_neighbour_with_the_same_limits_is_not_asked_about():
    assert find_slip(0.40, MM, INTAKE, unit_typed=False, neighbours={"2.intake": INTAKE}) is None


def test_unit_that_was_typed_is_doubted_only_where_nothing_else_makes_sense():
    worn, absurd = Expectation(0.25, 0.35, last=0.30), Expectation(10.0, nominal=10.0)

    doubted = find_slip(0.0118, MM, worn, unit_typed=True)
    surely = find_slip(145.0, BAR, absurd, unit_typed=True)

    assert "inches" not in str(doubted and doubted.reason)
    assert str(surely.reason) in ("meant in psi", "the point is moved one place")


def test_moved_point_between_two_good_readings_is_told_only_by_the_last_visit():
    # said in the open: 8 % may be 80 % typed short, or be so; 20 % under a limit of 25 % may be 2.0 %, or be so
    percent = find_unit("%")

    assert find_slip(20.0, percent, Expectation(upper=25.0), unit_typed=False) is None
    assert find_slip(80.0, percent, Expectation(upper=25.0, last=8.0), unit_typed=False).would_be == 8.0


@dataclass(frozen=True)
class Station:
    """A station of the model: its limits, its gauge's step, and the units that are mistaken for its own."""

    name: str
    dimension: str
    unit: str
    lower: float | None
    upper: float | None
    nominal: float
    step: float
    mistaken: tuple[str, ...] = ()
    nominal_told: bool = True
    neighbour: Expectation | None = None
    always_last: bool = False

    @property
    def width(self) -> float:
        """Tolerance; of a single limit the distance to nominal and half as much beyond."""
        if self.lower is not None and self.upper is not None:
            return self.upper - self.lower
        return 1.5 * abs(self.nominal - (self.lower if self.lower is not None else self.upper))


STATIONS = [
    Station("intake lash", "length", "mm", 0.25, 0.35, 0.30, 0.01, ("in", "thou"), neighbour=EXHAUST),
    Station("exhaust lash", "length", "mm", 0.40, 0.50, 0.45, 0.01, ("in", "thou"), neighbour=INTAKE),
    Station("lash in thousandths", "length", "thou", 10, 14, 12, 1, ("mm", "in")),
    Station("lash in inches", "length", "in", 0.010, 0.014, 0.012, 0.001, ("mm", "thou")),
    Station("oil clearance", "length", "mm", 0.03, 0.09, 0.05, 0.001, ("in", "thou")),
    Station("end float", "length", "mm", 0.10, 0.30, 0.20, 0.01, ("in", "thou"), nominal_told=False),
    Station("ring gap", "length", "mm", None, 1.0, 0.40, 0.05, ("in", "thou")),
    Station("bore", "length", "mm", 100.0, 100.1, 100.02, 0.001, ("in",)),
    Station("free length", "length", "mm", 47.5, None, 48.6, 0.05, ("in",)),
    Station("compression, spark", "pressure", "bar", 9, None, 12, 0.1, ("psi", "kPa", "MPa")),
    Station("compression, no nominal", "pressure", "bar", 10, None, 13, 0.1, ("psi", "kPa"), nominal_told=False),
    Station("compression, diesel", "pressure", "bar", 24, None, 30, 0.5, ("psi", "kPa")),
    Station("compression in psi", "pressure", "psi", 130, None, 170, 1, ("bar", "kgf/cm2", "kPa")),
    Station("compression in kgf/cm2", "pressure", "kgf/cm2", 9.5, None, 12.5, 0.1, ("psi", "kPa")),
    Station("compression in kPa", "pressure", "kPa", 900, None, 1250, 10, ("bar", "psi", "kgf/cm2")),
    Station("injector opening", "pressure", "bar", 220, 235, 228, 1, ("psi", "kPa"), nominal_told=False),
    Station("oil pressure", "pressure", "bar", 2.5, 5.0, 3.8, 0.1, ("psi", "kPa"), nominal_told=False),
    Station("oil temperature", "temperature", "°C", 70, 95, 82, 1, ("°F",), nominal_told=False),
    Station("bolt torque", "torque", "N·m", 88, 98, 93, 1, nominal_told=False),
    Station("leak-down loss", "ratio", "%", None, 25, 8, 1, nominal_told=False, always_last=True),
]


def healthy(chance: random.Random, station: Station) -> float:
    """Between the limits; of a single limit from new on the way to it."""
    if station.lower is not None and station.upper is not None:
        return min(max(chance.gauss(station.nominal, station.width / 6), station.lower), station.upper)
    limit = station.lower if station.lower is not None else station.upper
    return station.nominal + (limit - station.nominal) * chance.triangular(-0.25, 1, 0.2)


def credible(chance: random.Random, station: Station) -> tuple[float, Expectation, dict[str, Expectation]]:
    """Draw a reading, what was known before it, and the neighbour."""
    before = value = healthy(chance, station)
    if is_worn := chance.random() < 0.05:
        beyond = station.width * chance.triangular(0, 3, 0)  # most just beyond, few far
        at_lower = station.upper is None or (station.lower is not None and chance.random() < 0.5)
        value = station.lower - beyond if at_lower else station.upper + beyond
    value = round(value / station.step) * station.step
    if value < station.step:
        return credible(chance, station)
    last = siblings = None
    if station.always_last or chance.random() < 0.6:
        last = before if is_worn and chance.random() < 0.3 else value + chance.gauss(0, 0.12 * station.width)
        last = max(round(last / station.step), 1) * station.step
    if chance.random() < 0.5:
        siblings = healthy(chance, station)
    nominal = station.nominal if station.nominal_told else None
    limits = (station.lower, station.upper, nominal) if last is None or chance.random() < 0.9 else (None, None, None)
    neighbours = {"1.other": station.neighbour} if station.neighbour else {}
    return value, Expectation(*limits, last, siblings), neighbours


@pytest.fixture(scope="module")
def counted() -> Counter:
    """Count, per station: readings, false alarms, slips made, slips found."""
    count: Counter = Counter()
    for station in STATIONS:
        chance, unit = random.Random(station.name), find_unit(station.unit, station.dimension)
        others = [find_unit(symbol, station.dimension) for symbol in station.mistaken]
        for _ in range(1500):
            value, own, neighbours = credible(chance, station)
            slips = [value * 10, value / 10, *(convert(value, unit, other) for other in others)]
            asked = [find_slip(one, unit, own, unit_typed=False, neighbours=neighbours) for one in (value, *slips)]
            count[station.name, "read"] += 1
            count[station.name, "false"] += asked[0] is not None
            count[station.name, "slips"] += len(slips)
            count[station.name, "found"] += sum(slip is not None for slip in asked[1:])
    return count


def share(counted: Counter, part: str, whole: str) -> float:
    totals = Counter()
    for (_, what), number in counted.items():
        totals[what] += number
    return totals[part] / totals[whole]


def test_gross_slips_are_found(counted):
    assert share(counted, "found", "slips") >= 0.995


def test_credible_readings_are_left_alone(counted):
    assert share(counted, "false", "read") <= 0.005


@pytest.mark.parametrize("station", [station.name for station in STATIONS])
def test_no_single_station_is_far_from_the_aim(counted, station):
    # a loss runs from nothing to the limit and far beyond, so that most of its moved points are good readings too
    least_found = 0.97 if station == "leak-down loss" else 0.99

    assert counted[station, "found"] / counted[station, "slips"] >= least_found
    assert counted[station, "false"] / counted[station, "read"] <= 0.015


def test_intake_and_exhaust_read_the_wrong_way_round_are_found():
    chance, found = random.Random(5), 0
    for _ in range(1000):
        intake = Expectation(0.25, 0.35, 0.30, last=round(chance.gauss(0.30, 0.02), 2))
        exhaust = Expectation(0.40, 0.50, 0.45, last=round(chance.gauss(0.45, 0.02), 2))
        value = round(exhaust.last + chance.gauss(0, 0.012), 2)
        slip = find_slip(value, MM, intake, unit_typed=True, neighbours={"1.exhaust": exhaust})
        found += slip is not None and str(slip.reason) == "it belongs to 1.exhaust"

    assert found >= 950


known = st.none() | st.floats(allow_nan=False, allow_infinity=False)


@given(
    st.floats(),
    st.sampled_from([unit for units in DIMENSIONS.values() for unit in units]),
    st.builds(Expectation, known, known, known, known, known),
    st.booleans(),
)
def test_any_reading_gets_an_answer(value, unit, own, unit_typed):
    try:
        slip = find_slip(value, unit, own, unit_typed=unit_typed, neighbours={"1.other": INTAKE})
    except Refusal:
        pytest.fail("a reading can't be refused here")

    assert slip is None or (isinstance(slip, Slip) and slip.unit == unit.symbol)
