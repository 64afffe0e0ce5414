"""The tape: a thing that comes due, scribed from last done to its limit in its own unit, with now as the slide."""

from django.utils.html import format_html, format_html_join
from django.utils.safestring import SafeString

WIDTH, HEIGHT = 400, 62  # units of the drawing
LEFT, RIGHT = 6, 336  # where the tape begins and ends; beyond it is room for what is over
TOP, THICK = 18, 16
TENTHS = 10


def tape(*, length: float, gone: float, window: float, begins: str, ends: str, label: str) -> SafeString:
    """Draw the tape as SVG.

    Parameters
    ----------
    length, gone, window : float
        How long it runs, how much of that is gone, and the window on both sides of its end, in one unit. Over its end
        but inside its window the slide stands in the window drawn past the end; past the window it is an arrowhead;
        `gone` below zero is a slide at the beginning.
    begins, ends : str
        Words under its two ends.
    label : str
        The same in words, for who can't see it.

    Raises
    ------
    ValueError
        The length isn't above zero.
    """
    if not length > 0:
        raise ValueError(f"A tape of length {length} can't be drawn: its length must be above zero.")
    parts = [
        window_on(min(1.0, max(0.0, window / length))),
        format_html('<rect class="tape-edge" x="{}" y="{}" width="{}" height="{}"/>', LEFT, TOP, RIGHT - LEFT, THICK),
        graduations(),
        *now_on(gone, length, window),
        format_html('<text class="figure" x="{}" y="{}">{}</text>', LEFT, HEIGHT - 8, begins),
        format_html('<text class="figure" x="{}" y="{}" text-anchor="end">{}</text>', RIGHT, HEIGHT - 8, ends),
    ]
    return format_html(
        '<svg class="tape" viewBox="0 0 {} {}" role="img" aria-label="{}">{}</svg>',
        WIDTH, HEIGHT, label, format_html_join("", "{}", ((part,) for part in parts)),
    )  # fmt: skip


def at(share: float) -> float:
    """Place [drawing units] of a share of the tape."""
    return round(LEFT + share * (RIGHT - LEFT), 1)


def window_on(share: float) -> SafeString:
    """The last part of the tape, in which the job may be done."""
    x = at(1 - share)
    return format_html(
        '<rect class="tape-window" x="{}" y="{}" width="{}" height="{}"/>', x, TOP, round(RIGHT - x, 1), THICK
    )


def now_on(gone: float, length: float, window: float) -> list[SafeString]:
    """The slide; over the end but inside the window in the rest of the window; past the window the arrowhead."""
    if gone <= length:
        return [slide(max(0.0, gone / length))]
    if gone > length + window:
        return [past_the_end()]
    ends = min(at(1 + window / length), WIDTH - 4.0)
    rest = format_html(
        '<rect class="tape-window" x="{}" y="{}" width="{}" height="{}"/>', RIGHT, TOP, round(ends - RIGHT, 1), THICK
    )
    return [rest, slide(1 + (gone - length) / window * (ends - RIGHT) / (RIGHT - LEFT))]


def graduations() -> SafeString:
    """Scribed lines at every tenth; longer at both ends and in the middle."""
    lines = [(at(tenth / TENTHS), 5 if tenth % 5 == 0 else 0) for tenth in range(TENTHS + 1)]
    return format_html_join(
        "", '<line class="tape-scribe" x1="{}" x2="{}" y1="{}" y2="{}"/>',
        ((x, x, TOP - more, TOP + THICK) for x, more in lines),
    )  # fmt: skip


def slide(share: float) -> SafeString:
    """Where it stands now."""
    return format_html(
        '<rect class="tape-slide" x="{}" y="{}" width="6" height="{}"/>', round(at(share) - 3, 1), TOP - 8, THICK + 16
    )


def past_the_end() -> SafeString:
    """Over: the arrowhead points out of the tape, as a reading beyond its limit points out of its zone."""
    y, tip = TOP + THICK / 2, RIGHT + 46
    points = f"{tip},{y} {tip - 22},{y - 11} {tip - 15},{y} {tip - 22},{y + 11}"
    return format_html(
        '<line class="tape-over" x1="{}" x2="{}" y1="{}" y2="{}"/><polygon class="mark beyond" points="{}"/>',
        RIGHT + 4, tip - 16, y, y, points,
    )  # fmt: skip
