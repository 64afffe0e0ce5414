"""The engine: firing, banks, geometry, and the names of its stations."""

from cmath import exp as turned
from math import pi, radians, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq

from measurements import geometry
from measurements.engine import Engine, ValveEvents
from measurements.published.engine import EIGHT, PUBLISHED, SIX
from measurements.sentence import Refusal
from measurements.stations import (
    bore_stations,
    cylinder_stations,
    parse_bore_station,
    parse_cylinder_station,
    parse_valve_station,
    valve_stations,
)


def angle_without_rod(depth):
    """Crank angle [deg] of a depth [mm], stroke 90, as if the rod were endless."""
    return brentq(lambda degrees: 45 * (1 - turned(1j * radians(degrees)).real) - depth, 0, 180)


WRONG = {  # the wrong formula each published value names
    "displacement of six cylinders 4 × 4 in [in³]": lambda: 6 * pi * 4**2 * 4,
    "compression ratio, swept 823.70, clearance 100.00 cm³": lambda: 823.70 / 100,
    "rod ratio, rod 6.0, stroke 3.5 in": lambda: 3.5 / 6,
    "mean piston speed, stroke 90 mm at 3000 rpm [m/s]": lambda: "4.5",
    "mean piston speed, stroke 85 mm at 5500 rpm [m/s]": lambda: 0.085 * 5500 / 60,
    "piston below TDC at 10° [mm]": lambda: 45 * (1 - turned(1j * radians(10)).real),
    "piston below TDC at 90° [mm]": lambda: 45.0,
    "crank angle of half the stroke [deg]": lambda: angle_without_rod(45),
    "crank angle of 0.01 mm below TDC [deg]": lambda: angle_without_rod(0.01),
    "rise from BDC when the intake shuts 70° after it, stroke 3.48, rod 5.70 in [in]":
        lambda: 1.74 * (1 - turned(1j * radians(70)).real),
    "4.00 in bore, 3.48 in stroke": lambda: geometry.proportions(3.48, 4.00),
    "4 in bore, 4 in stroke": lambda: geometry.proportions(4, 2),
    "firing interval of an even six [deg]": lambda: 360 / 6,
    "companions of 1-5-3-6-2-4": lambda: " ".join(f"{a}/{b}" for a, b in ((1, 5), (5, 3), (3, 6))),
    "companions of 1-8-4-3-6-5-7-2": lambda: " ".join(f"{k}/{9 - k}" for k in EIGHT.firing_order[:4]),
}  # fmt: skip


@pytest.mark.parametrize("value", PUBLISHED, ids=lambda value: value.what)
def test_published_value_is_reproduced_and_its_wrong_formula_is_caught(value):
    wrong = WRONG[value.what]()
    if not isinstance(wrong, str):
        decimals = len(value.printed.partition(".")[2])
        wrong = f"{wrong:.{decimals}f}"

    assert value.agrees(), value.source
    assert wrong != value.printed
    assert wrong in value.catches


# --- firing


def test_firing_angles_follow_the_order_from_cylinder_1_wherever_the_order_starts():
    engine = Engine("inline", 4, (4, 2, 1, 3))  # 1-3-4-2 told from cylinder 4

    assert [engine.firing_angle(cylinder) for cylinder in (1, 3, 4, 2)] == [0, 180, 360, 540]


def test_given_firing_angles_are_counted_from_cylinder_1():
    twin = Engine("vee", 2, (2, 1), firing_angles=(0, 405), banks=((1,), (2,)))  # 45° vee twin, one crankpin

    assert [twin.firing_angle(cylinder) for cylinder in (1, 2)] == [0, 315]
    assert not twin.fires_evenly()
    assert twin.firing_interval() is None


def test_given_angles_that_are_even_count_as_even():
    engine = Engine("inline", 4, (1, 3, 4, 2), firing_angles=(0, 180, 360, 540))

    assert engine.fires_evenly()
    assert engine.companion(3) == 2


def test_companions_do_not_depend_on_where_the_order_starts():
    engine = Engine("inline", 6, (3, 6, 2, 4, 1, 5))

    assert [engine.companion(cylinder) for cylinder in range(1, 7)] == [6, 5, 4, 3, 2, 1]


@pytest.mark.parametrize(
    "engine",
    [
        Engine("inline", 5, (1, 2, 4, 5, 3)),  # odd number
        Engine("vee", 4, (1, 3, 2, 4), firing_angles=(0, 90, 450, 630)),  # uneven
        Engine("inline", 4),  # order not known
    ],
)
def test_without_even_number_and_firing_there_is_no_companion(engine):
    assert engine.companion(1) is None


def test_a_single_fires_at_0_without_being_told():
    assert Engine("single", 1).firing_angle(1) == 0


def test_without_an_order_the_firing_angle_is_refused_with_what_to_do():
    with pytest.raises(Refusal) as refused:
        Engine("inline", 4).firing_angle(2)

    assert str(refused.value) == "The firing order is not known: bar the engine through two turns to find it."


def test_a_cylinder_that_is_not_there_has_no_firing_angle():
    with pytest.raises(Refusal, match="Cylinder 7 is not on this engine: write 1 to 6"):
        SIX.firing_angle(7)


# --- banks and stations


def test_neighbours_stand_beside_in_their_bank():
    vee = Engine("vee", 6, banks=((1, 3, 5), (2, 4, 6)))

    assert [vee.neighbours(cylinder) for cylinder in (1, 3, 6)] == [(3,), (1, 5), (4,)]
    assert Engine("inline", 3).neighbours(2) == (1, 3)


def test_neighbours_of_unknown_banks_are_not_guessed():
    assert Engine("vee", 6).neighbours(3) == ()


def test_hands_walk_down_one_bank_then_the_other():
    vee = Engine("vee", 4, banks=((1, 3), (2, 4)))

    assert cylinder_stations(vee) == ["1", "3", "2", "4"]
    assert cylinder_stations(Engine("vee", 4)) == ["1", "2", "3", "4"]


def test_a_bridge_comes_before_its_lash_and_a_lone_valve_has_none():
    engine = Engine("single", 1, intake_valves=2, exhaust_valves=1, bridges=True)

    assert valve_stations(engine) == ["1.intake.bridge", "1.intake", "1.exhaust"]


def test_each_valve_without_a_bridge_is_a_station():
    engine = Engine("single", 1, intake_valves=3, exhaust_valves=2)

    assert valve_stations(engine) == ["1.intake", "1.intake.2", "1.intake.3", "1.exhaust", "1.exhaust.2"]


def test_a_bore_is_measured_at_three_depths_in_two_directions():
    assert bore_stations(Engine("inline", 2))[6:] == [
        "2.top.thrust", "2.top.axial", "2.middle.thrust", "2.middle.axial", "2.bottom.thrust", "2.bottom.axial",
    ]  # fmt: skip


FOUR_VALVES = Engine("inline", 4, intake_valves=2, exhaust_valves=2)
BRIDGED = Engine("inline", 4, intake_valves=2, exhaust_valves=2, bridges=True)


@pytest.mark.parametrize("engine", [FOUR_VALVES, BRIDGED, Engine("inline", 4), Engine("vee", 12)])
def test_every_station_is_read_as_itself(engine):
    for parse, stations in (
        (parse_valve_station, valve_stations(engine)),
        (parse_cylinder_station, cylinder_stations(engine)),
        (parse_bore_station, bore_stations(engine)),
    ):
        assert [parse(station, engine) for station in stations] == stations


@pytest.mark.parametrize(
    ("typed", "name"), [("1.intake.1", "1.intake"), (" 2.EXHAUST ", "2.exhaust"), ("4.intake.2", "4.intake.2")]
)
def test_other_ways_to_write_a_valve_lead_to_its_one_name(typed, name):
    assert parse_valve_station(typed, FOUR_VALVES) == name


PATTERN = "is no valve station: write cylinder and valve, such as 1.intake, 1.exhaust or 1.intake.2."


@pytest.mark.parametrize(
    ("typed", "engine", "sentence"),
    [
        ("", FOUR_VALVES, f"“” {PATTERN}"),
        ("intake", FOUR_VALVES, f"“intake” {PATTERN}"),
        ("01.intake", FOUR_VALVES, f"“01.intake” {PATTERN}"),
        ("1.intake\n2.intake", FOUR_VALVES, f"“1.intake\n2.intake” {PATTERN}"),
        ("٣.intake", FOUR_VALVES, f"“٣.intake” {PATTERN}"),
        ("9" * 5000 + ".intake", FOUR_VALVES, f"“{'9' * 39}…” {PATTERN}"),
        ("5.intake", FOUR_VALVES, "“5.intake” names cylinder 5; this engine has cylinders 1 to 4."),
        ("0.intake", FOUR_VALVES, f"“0.intake” {PATTERN}"),
        ("1.intake.3", FOUR_VALVES,
         "“1.intake.3” names valve 3, which this cylinder does not have: there is 1.intake, 1.intake.2."),
        ("1.intake.bridge", FOUR_VALVES,
         "“1.intake.bridge” names a bridge, but these valves have none: there is 1.intake, 1.intake.2."),
        ("1.intake.2", BRIDGED,
         "“1.intake.2”: valves under a bridge share one lash: there is 1.intake.bridge, 1.intake."),
    ],
)  # fmt: skip
def test_a_valve_station_that_is_none_is_refused_with_what_there_is(typed, engine, sentence):
    with pytest.raises(Refusal) as refused:
        parse_valve_station(typed, engine)

    assert str(refused.value) == sentence


@pytest.mark.parametrize(
    ("parse", "typed", "sentence"),
    [
        (parse_cylinder_station, "1.intake", "“1.intake” is no cylinder: write its number alone, 1 to 4."),
        (parse_cylinder_station, "5", "“5” names cylinder 5; this engine has cylinders 1 to 4."),
        (parse_cylinder_station, "-1", "“-1” is no cylinder: write its number alone, 1 to 4."),
        (parse_bore_station, "3.top", "“3.top” is no place in a bore: write cylinder, depth (top, middle, bottom) and "
                                      "direction (thrust, axial), such as 3.top.thrust."),
        (parse_bore_station, "7.top.axial", "“7.top.axial” names cylinder 7; this engine has cylinders 1 to 4."),
    ],
)  # fmt: skip
def test_other_stations_that_are_none_are_refused_too(parse, typed, sentence):
    with pytest.raises(Refusal) as refused:
        parse(typed, FOUR_VALVES)

    assert str(refused.value) == sentence


@given(st.text(max_size=30) | st.from_regex(r"[0-9]{1,3}\.(intake|exhaust|top)(\.[0-9a-z]{1,6})?", fullmatch=True))
def test_any_text_is_a_station_of_the_engine_or_a_sentence(text):
    for parse, stations in ((parse_valve_station, valve_stations), (parse_cylinder_station, cylinder_stations),
                            (parse_bore_station, bore_stations)):  # fmt: skip
        try:
            assert parse(text, FOUR_VALVES) in stations(FOUR_VALVES)
        except Refusal as refused:
            assert str(refused)


# --- geometry


@given(st.floats(0, 360), st.floats(50, 500), st.floats(0.51, 4))
def test_piston_depth_agrees_with_the_triangle_drawn_in_the_plane(angle, stroke, rod_share):
    rod = stroke * rod_share
    pin = stroke / 2 * turned(1j * radians(angle))  # crank axis at 0, cylinder along the real axis
    piston = pin.real + sqrt(rod**2 - pin.imag**2)

    assert geometry.piston_depth(angle, stroke, rod) == pytest.approx(stroke / 2 + rod - piston, abs=stroke * 1e-9)


@given(st.floats(0, 180), st.floats(1.2, 4))
def test_angle_and_depth_lead_back_to_each_other(angle, rod_share):
    depth = geometry.piston_depth(angle, 100, 100 * rod_share)

    assert geometry.angle_at_depth(depth, 100, 100 * rod_share) == pytest.approx(angle, abs=1e-5)


def test_a_depth_outside_the_stroke_is_refused():
    with pytest.raises(Refusal) as refused:
        geometry.angle_at_depth(91, 90, 145)

    assert str(refused.value) == (
        "A piston depth of 91 mm is not between 0 and the stroke of 90 mm: measure from TDC down."
    )


def test_trapped_ratio_is_the_volume_over_the_clearance_when_the_intake_shuts():
    engine = Engine("inline", 1, stroke=103, rod_length=165, compression_ratio=17.5, events=ValveEvents(12, 48, 52, 10))
    pin = 51.5 * turned(1j * radians(180 + 48))
    depth = 51.5 + 165 - (pin.real + sqrt(165**2 - pin.imag**2))
    clearance = 103 / (17.5 - 1)  # per area of the bore

    assert engine.trapped_ratio() == pytest.approx((depth + clearance) / clearance, rel=1e-12)
    assert engine.trapped_ratio() < 17.5


def test_figures_of_the_example_engine():
    # by hand: 72.3823 cm² × 10.3 cm × 4 = 2982.15 cm³; 2 × 0.103 × 1500/60 = 5.15 m/s; 165/103 = 1.602
    engine = Engine("inline", 4, (1, 3, 4, 2), bore=96, stroke=103, rod_length=165, rated_speed=1500)

    assert engine.displacement() == pytest.approx(2_982_151, rel=1e-6)
    assert engine.mean_piston_speed() == pytest.approx(5.15)
    assert engine.rod_ratio() == pytest.approx(1.601942, rel=1e-6)
    assert engine.proportions() == "undersquare"


def test_figures_not_given_are_missing_not_assumed():
    engine = Engine("inline", 4)

    assert [engine.displacement(), engine.mean_piston_speed(), engine.rod_ratio(), engine.proportions(),
            engine.piston_depth(10), engine.angle_at_depth(10), engine.trapped_ratio(), engine.notes()] == [
        None, None, None, None, None, None, None, []]  # fmt: skip


def test_a_brisk_industrial_piston_gets_a_note():
    brisk = Engine("inline", 4, stroke=150, rated_speed=2100, service="industrial")

    assert [str(note) for note in brisk.notes()] == [
        "The mean piston speed at rated speed is 10.5 m/s; industrial engines stay about 10 m/s. Check the stroke and "
        "the rated speed."
    ]
    assert Engine("inline", 4, stroke=150, rated_speed=2000, service="industrial").notes() == []  # 10 m/s exactly
    assert Engine("inline", 4, stroke=150, rated_speed=2100, service="road").notes() == []
