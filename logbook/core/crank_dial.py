"""The crank dial: two turns of the crank as one circle of 720°, with the stops of the crank plan on it."""

from collections.abc import Sequence
from math import cos, radians, sin
from typing import Protocol

from django.utils.html import format_html, format_html_join
from django.utils.safestring import SafeString
from django.utils.translation import gettext as _

SIZE, MIDDLE, RADIUS = 160, 80, 52


class OnDial(Protocol):
    """A stop as `measurements.barring` gives it: its angle [crank deg] and the mark to find it by."""

    crank_angle: float
    mark: str


def dial(stops: Sequence[OnDial], current: int | None = None) -> SafeString:
    """Draw the dial as SVG; empty without stops.

    Parameters
    ----------
    stops : sequence of CrankStop
        In turning order.
    current : int or None
        Place of the stop the crank stands at, the first being 0.
    """
    if not stops:
        return SafeString("")
    ticks = format_html_join(
        "", '<line class="tick" x1="{}" y1="{}" x2="{}" y2="{}"/>',
        ((*at(angle, RADIUS), *at(angle, RADIUS - (9 if angle % 180 == 0 else 5))) for angle in range(0, 720, 30)),
    )  # fmt: skip
    marks = format_html_join(
        "", "{}", ((stop_mark(stop, place, place == current),) for place, stop in enumerate(stops))
    )
    return format_html(
        '<svg class="crank-dial" viewBox="0 0 {} {}" width="{}" height="{}" role="img" aria-label="{}">'
        '<circle class="rim" cx="{}" cy="{}" r="{}"/>{}'
        '<text class="turns-told" x="{}" y="{}" text-anchor="middle">720°</text>{}</svg>',
        SIZE, SIZE, SIZE, SIZE, in_words(stops, current), MIDDLE, MIDDLE, RADIUS, ticks, MIDDLE, MIDDLE + 5, marks,
    )  # fmt: skip


def at(angle: float, radius: float) -> tuple[float, float]:
    """Place on the dial of a crank angle: 0 at the top, a full round of the dial being two turns of the crank.

    >>> at(0, 52), at(180, 52), at(360, 52)
    ((80.0, 28.0), (132.0, 80.0), (80.0, 132.0))
    """
    turned = radians(angle / 2)
    return round(MIDDLE + radius * sin(turned), 1), round(MIDDLE - radius * cos(turned), 1)


def stop_mark(stop: OnDial, place: int, is_current: bool) -> SafeString:
    """A stop on the rim with its number outside; the one the crank stands at is filled."""
    x, y = at(stop.crank_angle, RADIUS)
    out_x, out_y = at(stop.crank_angle, RADIUS + 17)
    return format_html(
        '<circle class="stop{}" cx="{}" cy="{}" r="8"/><text class="hand" x="{}" y="{}" text-anchor="middle">{}</text>',
        " current" if is_current else "", x, y, out_x, round(out_y + 5, 1), place + 1,
    )  # fmt: skip


def in_words(stops: Sequence[OnDial], current: int | None) -> str:
    """The dial for who can't see it."""
    listed = "; ".join(f"{place} {stop.mark}" for place, stop in enumerate(stops, start=1))
    said = _("Crank dial over two turns, 720°. Stops: %(stops)s.") % {"stops": listed}
    if current is None:
        return said
    return (
        said + " " + _("The crank stands at stop %(place)s of %(count)s.") % {"place": current + 1, "count": len(stops)}
    )
