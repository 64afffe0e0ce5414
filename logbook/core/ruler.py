"""The limit ruler: a number line with the limits as scribed marks, the zone that accepts, and a reading with its whisker."""

from collections.abc import Sequence
from dataclasses import dataclass

from django.utils.html import format_html, format_html_join
from django.utils.safestring import SafeString

WIDTH, HEIGHT, LINE = 440, 66, 26  # units of the drawing; LINE is how far down the number line lies
MARGIN = 26  # kept at both ends, so that a mark at the edge and its value stay inside
BESIDE = 0.6  # of the zone shown outside each limit


@dataclass(frozen=True)
class Mark:
    """A reading on the ruler: value and expanded uncertainty in the ruler's unit; `role` is "now", "last" or "left"."""

    value: float
    expanded: float | None = None
    verdict: str = "within"
    role: str = "now"


@dataclass(frozen=True)
class Scale:
    """Where values lie on the drawing, from `low` at the left end to `high` at the right."""

    low: float
    high: float

    def at(self, value: float) -> float:
        """Place [drawing units] of a value; outside values lie at the edge."""
        share = (value - self.low) / (self.high - self.low)
        return round(MARGIN + min(1.0, max(0.0, share)) * (WIDTH - 2 * MARGIN), 1)

    def holds(self, value: float) -> bool:
        """Tell whether a value lies on the drawing."""
        return self.low <= value <= self.high


def ruler(
    lower: float | None,
    upper: float | None,
    guard_band: float,
    marks: Sequence[Mark],
    label: str,
    decimal_mark: str = ".",
) -> SafeString:
    """Draw the ruler as SVG; empty without a limit.

    Parameters
    ----------
    lower, upper, guard_band : float
        Limits and guard band in one unit with the marks; a missing limit is None.
    label : str
        The same in words, for who can't see it.
    decimal_mark : str
        The shop's.
    """
    if lower is None and upper is None:
        return SafeString("")
    scale = scale_for(lower, upper, marks)
    parts = [
        format_html('<line class="scribe" x1="0" x2="{}" y1="{}" y2="{}"/>', WIDTH, LINE, LINE),
        accepting(lower, upper, guard_band, scale),
        *(
            limit_mark(edge, scale, side, decimal_mark)
            for edge, side in ((lower, "lower"), (upper, "upper"))
            if edge is not None
        ),
        *(drawn(mark, lower, scale, decimal_mark) for mark in sorted(marks, key=lambda mark: mark.role != "last")),
    ]
    return format_html(
        '<svg class="ruler" viewBox="0 0 {} {}" role="img" aria-label="{}">{}</svg>',
        WIDTH, HEIGHT, label, format_html_join("", "{}", ((part,) for part in parts)),
    )  # fmt: skip


def scale_for(lower: float | None, upper: float | None, marks: Sequence[Mark]) -> Scale:
    """Show the zone with some room beside it; with one limit, as much room as the readings need."""
    if None not in (lower, upper):
        room = BESIDE * (upper - lower)
        return Scale(lower - room, upper + room)
    limit = upper if lower is None else lower
    reach = [abs(mark.value - limit) + (mark.expanded or 0) for mark in marks]
    room = 1.25 * max([*reach, abs(limit) * 0.02, 1e-12])
    return Scale(limit - room, limit + room)


def accepting(lower: float | None, upper: float | None, guard_band: float, scale: Scale) -> SafeString:
    """The acceptance zone: what lies inside the limits by a guard band or more."""
    left = 0 if lower is None else scale.at(lower + guard_band)
    right = WIDTH if upper is None else scale.at(upper - guard_band)
    if right <= left:
        return SafeString("")
    width = round(right - left, 1)
    return format_html('<rect class="accepts" x="{}" y="{}" width="{}" height="18"/>', left, LINE - 9, width)


def limit_mark(edge: float, scale: Scale, side: str, decimal_mark: str) -> SafeString:
    """A limit: a scribed line with its forbidden side hatched, and its figure."""
    x = scale.at(edge)
    out = -7 if side == "lower" else 7
    hatching = format_html_join(
        "", '<line class="hatch" x1="{}" x2="{}" y1="{}" y2="{}"/>',
        ((x, x + out, y + 7, y) for y in range(LINE - 18, LINE + 13, 10)),
    )  # fmt: skip
    line = format_html('<line class="limit" x1="{}" x2="{}" y1="{}" y2="{}"/>', x, x, LINE - 18, LINE + 18)
    told = format_html(
        '<text class="figure" x="{}" y="{}" text-anchor="middle">{}</text>', x, HEIGHT - 6, written(edge, decimal_mark)
    )
    return format_html("{}{}{}", hatching, line, told)


def drawn(mark: Mark, lower: float | None, scale: Scale, decimal_mark: str) -> SafeString:
    """A reading: its whisker and its mark; off the drawing, its value beside the mark at the edge."""
    x = scale.at(mark.value)
    if mark.role == "last":
        return format_html('<circle class="ghost" cx="{}" cy="{}" r="6"/>', x, LINE)
    parts = []
    if mark.expanded:
        ends = scale.at(mark.value - mark.expanded), scale.at(mark.value + mark.expanded)
        parts.append(format_html('<line class="whisker {}" x1="{}" x2="{}" y1="{}" y2="{}"/>',
                                 mark.verdict, *ends, LINE, LINE))  # fmt: skip
    under = lower is not None and mark.value < lower
    parts.append(verdict_mark(mark.verdict, x, LINE, points_left=under))
    if not scale.holds(mark.value):
        parts.append(format_html('<text class="figure off" x="{}" y="{}" text-anchor="{}">{}</text>', x + (-22 if under else 22),
                                 LINE - 13, "start" if under else "end", written(mark.value, decimal_mark)))  # fmt: skip
    return format_html_join("", "{}", ((part,) for part in parts))


def written(value: float, decimal_mark: str) -> str:
    """A figure on the drawing."""
    return f"{value:.6g}".replace(".", decimal_mark)


def verdict_mark(verdict: str, x: float, y: float, *, points_left: bool = False) -> SafeString:
    """A verdict as a mark: a dot within, a dot split by the scribed line too close, an arrowhead out of the zone beyond."""
    if verdict == "within":
        return format_html('<circle class="mark within" cx="{}" cy="{}" r="7.5"/>', x, y)
    if verdict == "too_close":
        half = f"M{x},{y - 7.5} A7.5,7.5 0 0 0 {x},{y + 7.5} Z"
        return format_html(
            '<circle class="mark split" cx="{}" cy="{}" r="7.5"/><path class="mark too_close" d="{}"/>'
            '<line class="split-line" x1="{}" x2="{}" y1="{}" y2="{}"/>',
            x, y, half, x, x, y - 12, y + 12,
        )  # fmt: skip
    way = -1 if points_left else 1
    points = f"{x + 11 * way},{y} {x - 8 * way},{y - 9} {x - 3 * way},{y} {x - 8 * way},{y + 9}"
    return format_html('<polygon class="mark beyond" points="{}"/>', points)
