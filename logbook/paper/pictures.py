"""Pictures on paper: the same SVG as on screen, its classes turned into inks, its label into a text that PDF readers say.

WeasyPrint doesn't apply a page's style sheet inside an SVG, and takes an SVG's text for who can't see it from a
<title> in it. So the classes of `core/pictures.css` are written out as presentation attributes here; a test holds the
two together.
"""

import re
from collections.abc import Mapping
from functools import cache
from pathlib import Path

from django.conf import settings
from django.utils.html import escape
from django.utils.safestring import SafeString, mark_safe

from logbook.core.ruler import Mark, ruler, verdict_mark

TOKENS = Path(settings.BASE) / "logbook" / "core" / "static" / "core" / "tokens.css"
FIGURES = "font-family='Hyperlegible Mono, DejaVu Sans' font-weight='700' font-size='19'"  # a ruler is small here
INKED = {  # class: presentation attributes, inks by the names they have in tokens.css
    "scribe": "stroke='{scribe}' stroke-width='1.5'",
    "accepts": "fill='{wash}'",
    "limit": "stroke='{ink}' stroke-width='2.5'",
    "hatch": "stroke='{ink}' stroke-width='1.2'",
    "figure": "fill='{ink}' " + FIGURES,
    "figure off": "fill='{ink}' " + FIGURES,
    "ghost": "fill='none' stroke='{soft}' stroke-width='2' stroke-dasharray='3 2'",
    "whisker within": "stroke='{within}' stroke-width='6' stroke-opacity='0.45'",
    "whisker beyond": "stroke='{beyond}' stroke-width='6' stroke-opacity='0.45'",
    "whisker too_close": "stroke='{near}' stroke-width='6' stroke-opacity='0.45'",
    "mark within": "fill='{within}'",
    "mark beyond": "fill='{beyond}'",
    "mark too_close": "fill='{near}'",
    "mark split": "fill='{sheet}' stroke='{near}' stroke-width='2.5'",
    "split-line": "stroke='{near}' stroke-width='2.5'",
}


@cache
def inks() -> dict[str, str]:
    """The inks of print, by name, from the one place that sets them."""
    printed = TOKENS.read_text(encoding="utf-8").partition("@media print")[2]
    return dict(re.findall(r"--([a-z]+): (#[0-9a-f]{6});", printed))


@cache
def attributes_of(name: str) -> str:
    """Presentation attributes that stand for a class on paper.

    Raises
    ------
    KeyError
        A picture has a class that nobody said how to draw on paper.
    """
    return INKED[name].format(**inks())


def ruler_on_paper(told: Mapping[str, object] | None) -> SafeString:
    """The limit ruler of a row; empty without one."""
    if not told:
        return SafeString("")
    marks = [Mark(**mark) for mark in told["marks"]]
    drawn = ruler(told["lower"], told["upper"], told["guard_band"], marks, told["label"], told.get("decimal_mark", "."))
    return on_paper(drawn, told["label"])


def mark_on_paper(verdict: str, words: str, *, is_under: bool = False) -> SafeString:
    """The mark of a verdict, to stand before its words; empty where there is no verdict."""
    if verdict not in ("within", "too_close", "beyond"):
        return SafeString("")
    drawn = verdict_mark(verdict, 13, 13, points_left=is_under)
    return on_paper(f'<svg class="ruler" viewBox="0 0 26 26">{drawn}</svg>', words)


def is_under(told: Mapping[str, object] | None) -> bool:
    """Tell whether a row's reading lies under its lower limit: its mark then points to the left."""
    if not told or told["lower"] is None:
        return False
    return any(mark["role"] == "now" and mark["value"] < told["lower"] for mark in told["marks"])


def on_paper(svg: str, label: str) -> SafeString:
    """An SVG of ours with its classes as inks, and its label where PDF takes it from.

    The markup is ours; whatever a person typed is in it escaped already.
    """
    drawn = re.sub(r'class="(?!ruler")([^"]*)"', lambda found: attributes_of(found[1]), svg)
    return mark_safe(drawn.replace(">", f"><title>{escape(label)}</title>", 1))
