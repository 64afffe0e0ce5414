"""The tape: the slide stands where now is, and over the end an arrowhead points out."""

import re
from xml.etree import ElementTree

import pytest

from logbook.core.tape import LEFT, RIGHT, tape

SVG = {"length": 500.0, "window": 50.0, "begins": "last done", "ends": "500 h", "label": "410 h of 500 h"}


def drawn(gone, **more):
    return ElementTree.fromstring(tape(**{**SVG, "gone": gone, **more}))


def with_class(picture, name):
    return [part for part in picture if part.get("class") == name]


def slide_at(picture):
    (slide,) = with_class(picture, "tape-slide")
    return float(slide.get("x")) + float(slide.get("width")) / 2


@pytest.mark.parametrize(
    ("gone", "place"), [(0, LEFT), (250, (LEFT + RIGHT) / 2), (500, RIGHT), (-20, LEFT), (400, LEFT + 264)]
)
def test_the_slide_stands_at_the_share_that_is_gone(gone, place):
    """The tape is 330 units long: 400 of 500 is 264 of them."""
    assert slide_at(drawn(gone)) == place


def test_over_the_end_but_inside_the_window_the_slide_stands_in_the_rest_of_the_window():
    """A window of 50 in 500 h is 33 of 330 units on both sides of the end: 525 h is 16.5 past it."""
    picture = drawn(525)
    assert slide_at(picture) == RIGHT + 16.5
    assert [float(rest.get("x")) for rest in with_class(picture, "tape-window")] == [RIGHT - 33, RIGHT]
    assert with_class(picture, "mark beyond") == []


def test_past_the_window_an_arrowhead_stands_outside_and_no_slide():
    picture = drawn(562)
    (arrow,) = with_class(picture, "mark beyond")
    assert min(float(x) for x in re.findall(r"([\d.]+),", arrow.get("points"))) > RIGHT
    assert with_class(picture, "tape-slide") == []


def test_the_window_is_the_last_part_of_the_tape():
    (window,) = with_class(drawn(100), "tape-window")
    assert (float(window.get("x")), float(window.get("width"))) == (RIGHT - 33, 33)  # a tenth of 330
    (all_of_it,) = with_class(drawn(100, window=900), "tape-window")
    assert float(all_of_it.get("x")) == LEFT


def test_it_is_told_in_words_and_what_a_shop_typed_stays_text():
    picture = drawn(100, ends="<b>&500 h")
    assert picture.get("aria-label") == "410 h of 500 h"
    assert [text.text for text in with_class(picture, "figure")] == ["last done", "<b>&500 h"]


@pytest.mark.parametrize("length", [0, -1, float("nan")])
def test_a_tape_without_length_is_refused(length):
    with pytest.raises(ValueError, match="its length must be above zero"):
        drawn(1, length=length)
