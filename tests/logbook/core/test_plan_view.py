"""The plan view and the crank dial: everything where it really is, told in words as well."""

import re
from xml.etree import ElementTree

import pytest

from logbook.core.plan_layout import Layout
from logbook.core.plan_view import StationMark, dial, plan_view
from measurements.barring import plan
from measurements.engine import Engine
from measurements.stations import bore_stations, cylinder_stations, valve_stations

FOUR = Engine("inline", 4, (1, 3, 4, 2), turning="clockwise")
V6 = Engine("vee", 6, banks=((1, 2, 3), (4, 5, 6)))


def parts(svg: str, selector: str) -> list[ElementTree.Element]:
    """Elements of a drawing whose class begins so."""
    return [one for one in ElementTree.fromstring(svg).iter() if (one.get("class") or "").split(" ")[0] == selector]


def words(svg: str) -> str:
    return ElementTree.fromstring(svg).get("aria-label")


def xs(svg: str) -> dict[str, float]:
    """How far right each cylinder's number stands."""
    return {one.text: float(one.get("x")) for one in parts(svg, "number")}


def rows(engine: Engine, **turned: str) -> dict[int, float]:
    """How far down each cylinder lies."""
    layout = Layout(engine, valve_stations(engine), turned.pop("left", engine.numbered_from), **turned)
    return {number: layout.cylinder(number).y for row in layout.rows for number in row}


def test_an_inline_engine_is_a_row_with_cylinder_1_at_the_left_hand():
    placed = xs(plan_view(FOUR))
    assert sorted(placed, key=placed.get) == ["1", "2", "3", "4"]


def test_a_person_on_the_other_side_sees_the_row_the_other_way_round():
    placed = xs(plan_view(FOUR, left="flywheel"))
    assert sorted(placed, key=placed.get) == ["4", "3", "2", "1"]


def test_numbers_start_from_the_flywheel_where_they_do():
    placed = xs(plan_view(Engine("inline", 3, numbered_from="flywheel"), left="free_end"))
    assert sorted(placed, key=placed.get) == ["3", "2", "1"]


@pytest.mark.parametrize(
    ("left", "first_bank", "lower"),
    [
        # geometry: at a flywheel on the right edge, an eye that looks along the engine has the near row at its left
        ("free_end", "left", {1, 2, 3}),
        ("free_end", "right", {4, 5, 6}),
        ("flywheel", "left", {4, 5, 6}),
        ("flywheel", "right", {1, 2, 3}),
    ],
)
def test_the_banks_of_a_vee_lie_on_the_side_they_are_on_seen_from_the_flywheel(left, first_bank, lower):
    placed = rows(V6, left=left, first_bank=first_bank)
    middle = sum(placed.values()) / len(placed)
    assert {number for number, y in placed.items() if y > middle} == lower


def test_a_flat_engines_rows_lie_further_apart_than_a_vees():
    flat = rows(Engine("flat", 4, banks=((1, 3), (2, 4))))
    vee = rows(Engine("vee", 4, banks=((1, 3), (2, 4))))
    assert max(flat.values()) - min(flat.values()) > max(vee.values()) - min(vee.values())


def test_unknown_banks_are_drawn_by_number_and_said():
    svg = plan_view(Engine("vee", 6))
    placed = xs(svg)
    assert sorted(placed, key=placed.get) == list("123456")
    assert [one.get("class") for one in parts(svg, "block")] == ["block unknown"]
    assert "Which cylinder stands where is not known." in words(svg)


@pytest.mark.parametrize(
    ("turning", "seen_from", "left", "up"),
    [
        # geometry: the top of what turns clockwise moves to the right hand of the eye that looks at it
        ("clockwise", "flywheel", "free_end", True),
        ("anticlockwise", "flywheel", "free_end", False),
        ("clockwise", "free_end", "free_end", False),
        ("clockwise", "flywheel", "flywheel", False),
        ("anticlockwise", "free_end", "free_end", True),
        ("anticlockwise", "flywheel", "flywheel", True),
    ],
)
def test_the_turning_arrow_points_where_the_top_of_the_crank_goes(turning, seen_from, left, up):
    svg = plan_view(Engine("inline", 4, turning=turning, seen_from=seen_from), left=left)
    (head,) = parts(svg, "turns-head")
    *base, tip = (float(point.split(",")[1]) for point in head.get("points").split())
    assert (tip < min(base)) is up


def test_an_unknown_direction_is_drawn_as_unknown_and_said():
    svg = plan_view(Engine("inline", 4))
    assert parts(svg, "turns-head") == []
    assert [one.get("class") for one in parts(svg, "turns")] == ["turns unknown"]
    assert "turning direction not known" in words(svg)


@pytest.mark.parametrize("engine", [FOUR, V6, Engine("vee", 6), Engine("single", 1), Engine("flat", 2)])
def test_flywheel_free_end_and_turning_arrow_are_always_drawn(engine):
    svg = plan_view(engine)
    assert [len(parts(svg, name)) for name in ("flywheel", "stub", "turns")] == [1, 1, 1]
    assert [one.text for one in parts(svg, "end") if one.text != "?"] == ["free end", "flywheel"]


def test_each_valve_carries_its_number_in_the_order_of_the_hands():
    order = [station for stop in plan(FOUR).stops for station in stop.stations]
    svg = plan_view(FOUR, order=order)
    layout = Layout(FOUR, order, "free_end")
    drawn = [name for number in (1, 2, 3, 4) for name, _place in layout.at_cylinder(number)]
    numbered = {name: one.text for name, one in zip(drawn, parts(svg, "hand"), strict=True)}
    # TM 5-3805-258-24-1 prints the two stops of a four: 1 in, 1 ex, 2 in, 3 ex; then 2 ex, 3 in, 4 in, 4 ex
    assert numbered == {"1.intake": "1", "1.exhaust": "2", "2.intake": "3", "3.exhaust": "4",
                        "2.exhaust": "5", "3.intake": "6", "4.intake": "7", "4.exhaust": "8"}  # fmt: skip


def test_what_the_stop_reaches_has_a_heavy_ring_and_the_current_station_is_filled():
    svg = plan_view(FOUR, reach={"1.intake", "3.exhaust"}, current="3.exhaust")
    classes = [one.get("class").strip() for one in parts(svg, "valve")]
    assert sorted(classes) == ["valve"] * 6 + ["valve reached", "valve reached current"]


def test_a_station_shows_its_value_and_its_verdicts_mark():
    marks = {
        "1.intake": StationMark("0.30", "within"), "1.exhaust": StationMark("0.33", "beyond", is_below=True),
        "2.intake": StationMark("0.26", "too_close"), "2.exhaust": StationMark("–"),
    }  # fmt: skip
    svg = plan_view(FOUR, marks)
    shown = [one.text for one in parts(svg, "value")]
    assert sorted(shown) == sorted(["0.30", "0.33", "0.26", "–", "In", "Ex", "In", "Ex"])
    assert sorted(one.get("class") for one in parts(svg, "mark")) == [
        "mark beyond", "mark split", "mark too_close", "mark within"
    ]  # fmt: skip


def test_an_arrowhead_points_out_of_the_zone_on_the_side_it_lies():
    def tip_is_left(mark: StationMark) -> bool:
        (head,) = parts(plan_view(FOUR, {"1.intake": mark}), "mark")
        x = [float(point.split(",")[0]) for point in head.get("points").split()]
        return x[0] == min(x)

    assert tip_is_left(StationMark("0.18", "beyond", is_below=True))
    assert not tip_is_left(StationMark("0.40", "beyond"))


def test_the_picture_is_told_in_words():
    svg = plan_view(FOUR, {"1.intake": StationMark("0.30", "within")}, {"1.intake", "1.exhaust"}, "1.exhaust")
    assert words(svg) == (
        "Plan view: inline engine, cylinders 4, free end at the left, flywheel at the right; turns clockwise, seen from "
        "the flywheel. Now: 1 exhaust. Within reach at this crank stop: 1 intake, 1 exhaust. Found: 1 intake 0.30 within."
    )
    assert ElementTree.fromstring(svg).get("role") == "img"


@pytest.mark.parametrize(
    ("engine", "order"),
    [
        (Engine("vee", 20, banks=(tuple(range(1, 11)), tuple(range(11, 21))), intake_valves=2, exhaust_valves=2), ()),
        (Engine("vee", 16, banks=(tuple(range(1, 9)), tuple(range(9, 17))), intake_valves=2, bridges=True), ()),
        (Engine("inline", 3), bore_stations(Engine("inline", 3))),
        (Engine("flat", 4, banks=((1, 3), (2, 4))), cylinder_stations(Engine("flat", 4, banks=((1, 3), (2, 4))))),
        (Engine("inline", 40), ()),
    ],
    ids=["vee 20, four valves", "vee 16, bridges", "bores", "cylinders only", "forty in a row"],
)
def test_no_two_stations_overlap_and_all_lie_inside_the_picture(engine, order):
    svg = plan_view(engine, order=order)
    placed = [tuple(float(one.get(name)) for name in ("cx", "cy", "r")) for one in parts(svg, "valve")]
    wide, high = (float(side) for side in ElementTree.fromstring(svg).get("viewBox").split()[2:])
    assert len(placed) == len(order or valve_stations(engine))
    assert all(r <= x <= wide - r and r <= y <= high - r for x, y, r in placed)
    apart = [
        ((x - a) ** 2 + (y - b) ** 2) ** 0.5 - r - c for n, (x, y, r) in enumerate(placed) for a, b, c in placed[:n]
    ]
    assert min(apart, default=1) > 0


def test_a_station_that_is_at_no_cylinder_is_left_out():
    svg = plan_view(Engine("inline", 2), order=["engine", "1", "2", "main.1.front"])
    assert [one.text for one in parts(svg, "hand")] == ["2", "3"]


def test_nothing_typed_gets_into_the_drawing_unescaped():
    svg = plan_view(FOUR, {"1.intake": StationMark('<script>"', "within")})
    assert "<script" not in svg
    assert [one.text for one in parts(svg, "value")][0] == '<script>"'


def test_no_drawing_carries_a_style_of_its_own():
    assert re.findall(r"style|<script", plan_view(FOUR) + dial(plan(FOUR).stops)) == []


def test_the_dial_lays_two_turns_of_the_crank_on_one_circle():
    svg = dial(plan(FOUR).stops, 0)
    first, second = parts(svg, "stop")
    # 360 crank degrees are half of a 720° dial: the second stop of a four lies opposite the first
    assert (first.get("class"), first.get("cx"), second.get("cx")) == ("stop current", "80.0", "80.0")
    assert float(first.get("cy")) < 80 < float(second.get("cy"))


def test_the_dial_is_told_in_words():
    assert words(dial(plan(FOUR).stops, 1)) == (
        "Crank dial over two turns, 720°. Stops: 1 TDC 1 firing; 2 TDC 4 firing. The crank stands at stop 2 of 2."
    )


def test_without_stops_there_is_no_dial():
    assert dial(()) == ""
