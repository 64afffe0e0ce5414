"""The limit ruler draws what was judged: limits, the zone that accepts, the reading with its whisker."""

import re
from xml.etree import ElementTree

import pytest

from logbook.core.figures import figure, uncertainty
from logbook.core.ruler import Mark, Scale, ruler, scale_for


def shapes(drawing: str, name: str) -> list[dict[str, str]]:
    return [
        one.attrib
        for one in ElementTree.fromstring(drawing).iter()
        if one.attrib.get("class", "").split()[:1] == [name]
    ]


def test_without_a_limit_nothing_is_drawn():
    assert ruler(None, None, 0.0, [Mark(0.3)], "") == ""


def test_the_drawing_says_itself_in_words_and_has_no_inline_style():
    drawing = ruler(0.25, 0.35, 0.008, [Mark(0.3, 0.01)], "Cylinder 1 <intake>")

    assert 'role="img" aria-label="Cylinder 1 &lt;intake&gt;"' in drawing
    assert "style=" not in drawing


def test_the_acceptance_zone_lies_inside_the_limits_by_the_guard_band():
    drawing = ruler(0.25, 0.35, 0.01, [Mark(0.3)], "")
    [zone], scale = shapes(drawing, "accepts"), scale_for(0.25, 0.35, [])

    assert float(zone["x"]) == scale.at(0.26)
    assert float(zone["x"]) + float(zone["width"]) == pytest.approx(scale.at(0.34))


def test_a_vanished_zone_is_not_drawn():
    assert shapes(ruler(0.25, 0.35, 0.05, [Mark(0.3)], ""), "accepts") == []


@pytest.mark.parametrize(("value", "tip"), [(0.20, "left"), (0.40, "right")])
def test_beyond_points_out_of_the_zone(value, tip):
    [arrow] = shapes(ruler(0.25, 0.35, 0.01, [Mark(value, 0.01, "beyond")], ""), "mark")
    xs = [float(pair.split(",")[0]) for pair in arrow["points"].split()]

    assert xs[0] == (min(xs) if tip == "left" else max(xs))


def test_a_reading_off_the_scale_stands_at_the_edge_with_its_value():
    drawing = ruler(0.25, 0.35, 0.01, [Mark(3.0, 0.1, "beyond")], "")

    assert ">3</text>" in drawing
    [arrow] = shapes(drawing, "mark")
    assert max(float(pair.split(",")[0]) for pair in arrow["points"].split()) <= 440


def test_too_close_is_a_dot_split_by_a_line():
    drawing = ruler(0.25, 0.35, 0.01, [Mark(0.25, 0.01, "too_close")], "")

    assert len(shapes(drawing, "split-line")) == 1


def test_last_visits_reading_is_a_ghost_under_the_rest():
    drawing = ruler(0.25, 0.35, 0.01, [Mark(0.3), Mark(0.31, role="last")], "")

    assert re.search("ghost.*mark within", drawing)


def test_one_limit_gets_as_much_room_as_the_readings_need():
    scale = scale_for(None, 25.0, [Mark(60.0, 2.0)])

    assert scale.holds(62.0)
    assert Scale(0, 10).at(5) == 220


@pytest.mark.parametrize(
    ("value", "expanded", "written", "about"),
    [
        (100.02147, 0.00079, "100.02147", "0.00079"),  # JCGM 100:2008, 7.2.2: ms = 100.021 47 g ± 0.000 79 g
        (10.057_62, 0.027, "10.058", "0.027"),  # JCGM 100:2008, 7.2.6: 10.057 62 Ω with 27 mΩ is rounded to 10.058 Ω
        (-0.07, 0.0996, "\u22120.07", "0.10"),
        (1234.6, 17.0, "1235", "17"),
    ],
)
def test_a_value_is_written_to_the_place_its_uncertainty_bears(value, expanded, written, about):
    assert (figure(value, expanded), uncertainty(expanded)) == (written, about)


def test_the_shops_decimal_mark_is_used():
    assert (figure(0.413, 0.013, ","), uncertainty(0.013, ",")) == ("0,413", "0,013")
