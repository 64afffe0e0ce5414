"""Pictures on paper have the inks of the screen's style sheet."""

import re
from pathlib import Path

import pytest

from logbook.paper.pictures import INKED, attributes_of, inks, is_under, mark_on_paper, ruler_on_paper

CORE = Path(__file__).resolve().parents[3] / "logbook" / "core"
SCREEN = (CORE / "static" / "core" / "pictures.css").read_text(encoding="utf-8")
DRAWN = (CORE / "ruler.py").read_text(encoding="utf-8")
RULER = {"lower": 0.25, "upper": 0.35, "guard_band": 0.008, "label": "<b>Cylinder 1</b> & more",
         "marks": [{"value": 0.18, "expanded": 0.01, "verdict": "beyond", "role": "now"}]}  # fmt: skip


def test_every_class_of_the_ruler_can_be_drawn_on_paper():
    classes = {name for name in re.findall(r'class="([^"{]+)"', DRAWN)} - {"ruler"}
    assert classes <= set(INKED)
    assert {f"whisker {verdict}" for verdict in ("within", "beyond", "too_close")} <= set(INKED)


@pytest.mark.parametrize("name", ["scribe", "limit", "hatch", "accepts", "mark within", "mark beyond", "mark too_close",
                                  "split-line", "ghost"])  # fmt: skip
def test_the_inks_and_strokes_are_those_of_the_screen(name):
    selector = r"(?:\.ruler )?" + "".join(rf"\.{part}" for part in name.split())
    rule = re.search(rf"^{selector} {{ (.*) }}$", SCREEN, re.MULTILINE)[1]
    wanted = {what: value.strip() for what, value in re.findall(r"([a-z-]+): ([^;]+);", rule)}
    inked = dict(re.findall(r"([a-z-]+)='([^']*)'", attributes_of(name)))
    assert inked == {
        what: re.sub(r"var\(--([a-z]+)\)", lambda ink: inks()[ink[1]], value) for what, value in wanted.items()
    }


def test_no_class_is_left_and_the_label_is_where_pdf_takes_it_from():
    drawn = ruler_on_paper(RULER)
    assert re.findall(r'class="([^"]*)"', drawn) == ["ruler"]
    assert "<title>&lt;b&gt;Cylinder 1&lt;/b&gt; &amp; more</title>" in drawn


def test_a_class_nobody_described_is_an_error_and_not_black():
    with pytest.raises(KeyError):
        attributes_of("mark unheard-of")


def test_without_a_ruler_or_verdict_nothing_is_drawn():
    assert (ruler_on_paper(None), mark_on_paper("no_limit", "no limit given")) == ("", "")


def test_beyond_points_to_the_side_it_lies_on():
    above = {**RULER, "marks": [{**RULER["marks"][0], "value": 0.4}]}
    assert (is_under(RULER), is_under(above), is_under(None), is_under({**RULER, "lower": None})) == (
        True,
        False,
        False,
        False,
    )
    left, right = (mark_on_paper("beyond", "beyond", is_under=under) for under in (True, False))
    assert 'points="2,13' in left and 'points="24,13' in right
