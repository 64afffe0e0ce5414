"""The plan view: the engine from above, each station with its number in the order of the hands, its value and mark."""

from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass

from django.utils.html import format_html, format_html_join
from django.utils.safestring import SafeString
from django.utils.translation import gettext as _
from django.utils.translation import gettext_lazy

from logbook.core.crank_dial import dial
from logbook.core.plan_layout import VALVE, Layout, Place
from logbook.core.ruler import verdict_mark
from measurements.engine import Engine
from measurements.stations import valve_stations

__all__ = ["StationMark", "dial", "plan_view", "spoken", "turning_in_words"]

SHORT = {  # what stands in a station as long as it has no value
    "intake": gettext_lazy("In"), "exhaust": gettext_lazy("Ex"), "bridge": gettext_lazy("Br"),
    "thrust": gettext_lazy("Th"), "axial": gettext_lazy("Ax"),
}  # fmt: skip
ENDS = {"free_end": gettext_lazy("free end"), "flywheel": gettext_lazy("flywheel")}
TURNS = {"clockwise": gettext_lazy("clockwise"), "anticlockwise": gettext_lazy("anticlockwise")}
LAYOUTS = {"inline": gettext_lazy("inline"), "vee": gettext_lazy("vee"), "flat": gettext_lazy("flat"),
           "single": gettext_lazy("single")}  # fmt: skip
VERDICTS = {"within": gettext_lazy("within"), "beyond": gettext_lazy("beyond"),
            "too_close": gettext_lazy("too close to call")}  # fmt: skip


@dataclass(frozen=True)
class StationMark:
    """What was found at a station: its value as written, its verdict, and whether it lies below the zone."""

    value: str
    verdict: str = "no_limit"
    is_below: bool = False


def plan_view(
    engine: Engine, marks: Mapping[str, StationMark] | None = None, reach: Collection[str] = (),
    current: str | None = None, *, order: Sequence[str] = (), left: str = "", first_bank: str = "left",
) -> SafeString:  # fmt: skip
    """Draw the engine from above as SVG.

    Parameters
    ----------
    engine : Engine
        One that `problems` has nothing against; unknown banks are drawn as a row by number, and said.
    marks : mapping of station to StationMark
        What was found so far.
    reach : collection of str
        Stations that this crank stop reaches: drawn with a heavy ring.
    current : str or None
        The station that is measured now: drawn filled.
    order : sequence of str
        Stations in the order of the hands; without it every valve. Those not at a cylinder are left out.
    left : "free_end", "flywheel" or ""
        The end at the left hand of the person; without it that of cylinder 1.
    first_bank : "left" or "right"
        Side of the bank given first, seen from the flywheel.
    """
    marks = marks or {}
    stations = list(order) or valve_stations(engine)
    layout = Layout(engine, stations, left or engine.numbered_from, first_bank)
    numbers = {name: place for place, name in enumerate(stations, start=1)}
    parts = [block(layout), free_end(layout), flywheel(layout)]
    for row, cylinders in enumerate(layout.rows):
        for number in cylinders:
            parts.append(cylinder(layout, number, is_lower=row == 1))
            parts += [
                station(name, place, numbers[name], marks.get(name), name in reach, name == current)
                for name, place in layout.at_cylinder(number)
            ]
    parts.append(caption(layout))
    return format_html(
        '<svg class="plan-view {}" viewBox="0 0 {} {}" width="{}" height="{}" role="img" aria-label="{}">{}</svg>',
        long_class(layout.width), layout.width, layout.height, layout.width, layout.height,
        in_words(layout, marks, reach, current), format_html_join("", "{}", ((part,) for part in parts)),
    )  # fmt: skip


def long_class(width: float) -> str:
    """How wide the picture must at least stay to be read: the page gives it a box that can be pushed sideways."""
    return "short" if width < 800 else "middling" if width < 1150 else "long" if width < 1700 else "longest"


def block(layout: Layout) -> SafeString:
    """The block with its crank; dashed where it isn't known which cylinder stands where."""
    x1, y1, x2, y2 = layout.block
    outline = format_html('<rect class="block{}" x="{}" y="{}" width="{}" height="{}"/>',
                          "" if layout.is_placed else " unknown", x1, y1, round(x2 - x1, 1), round(y2 - y1, 1))  # fmt: skip
    y = layout.crank_line
    return format_html('{}<line class="crank" x1="{}" x2="{}" y1="{}" y2="{}"/>', outline, x1, x2, y, y)


def free_end(layout: Layout) -> SafeString:
    """The free end: a stub of the crank, and the arrow that runs over its top the way it turns."""
    edge, out = layout.end("free_end")
    x, y = edge + 34 * out, layout.crank_line
    stub = format_html(
        '<line class="stub" x1="{}" x2="{}" y1="{}" y2="{}"/><text class="end" x="{}" y="{}" text-anchor="middle">{}</text>',
        edge, edge + 56 * out, y, y, edge + 62 * out, y + 56, ENDS["free_end"],
    )  # fmt: skip
    return format_html("{}{}", stub, turning_arrow(layout, x, y, out))


def turning_arrow(layout: Layout, x: float, y: float, out: int) -> SafeString:
    """An arc over the crank with its head where the top goes; a dashed one with a question mark when it isn't known."""
    up = layout.top_goes_up()
    bulges_out = 1 if (out < 0) == (up is not False) else 0  # SVG's sweep: drawn upward and clockwise passes the left
    if up is None:
        return format_html(
            '<path class="turns unknown" d="M{},{} A10,26 0 0 {} {},{}"/>'
            '<text class="end" x="{}" y="{}" text-anchor="middle">?</text>',
            x, y + 26, bulges_out, x, y - 26, x + 22 * out, y - 20,
        )  # fmt: skip
    way = -1 if up else 1
    start, tip = y - 26 * way, y + 26 * way
    head = f"{x - 9},{tip - 3 * way} {x + 9},{tip - 3 * way} {x},{tip + 12 * way}"
    return format_html(
        '<path class="turns" d="M{},{} A10,26 0 0 {} {},{}"/><polygon class="turns-head" points="{}"/>',
        x, start, bulges_out, x, tip, head,
    )  # fmt: skip


def flywheel(layout: Layout) -> SafeString:
    """The flywheel, with its teeth: that is where the bar goes."""
    edge, out = layout.end("flywheel")
    y, half = layout.crank_line, min(96, (layout.block[3] - layout.block[1]) / 2 + 10)
    x = edge + 4 * out if out > 0 else edge - 26
    teeth = format_html_join(
        "", '<line class="tooth" x1="{}" x2="{}" y1="{}" y2="{}"/>',
        ((x + 11, x + 22, y + step, y + step) for step in range(-int(half) + 12, int(half), 12)),
    )  # fmt: skip
    return format_html(
        '<rect class="flywheel" x="{}" y="{}" width="22" height="{}"/>{}'
        '<text class="end" x="{}" y="{}" text-anchor="{}">{}</text>',
        x, y - half, 2 * half, teeth, edge + 36 * out, y + 5, "start" if out > 0 else "end", ENDS["flywheel"],
    )  # fmt: skip


def cylinder(layout: Layout, number: int, *, is_lower: bool) -> SafeString:
    """A cylinder and its number, outside the block."""
    place = layout.cylinder(number)
    y = layout.block[3] + 26 if is_lower else layout.block[1] - 12
    return format_html(
        '<circle class="cylinder" cx="{}" cy="{}" r="{}"/><text class="number" x="{}" y="{}" text-anchor="middle">{}</text>',
        place.x, place.y, layout.radius, place.x, y, number,
    )  # fmt: skip


def station(
    name: str, place: Place, number: int, found: StationMark | None, is_reached: bool, is_current: bool
) -> SafeString:
    """A station: ring, number in the order of the hands, value or short name, and the verdict's mark."""
    states = [word for word, holds in (("reached", is_reached), ("current", is_current)) if holds]
    text = found.value if found else short_name(name)
    size = "" if len(text) <= 4 else " long" if len(text) <= 5 else " longest"
    mark = SafeString("")
    if found and found.verdict in VERDICTS:
        drawn = verdict_mark(found.verdict, 0, 0, points_left=found.is_below)
        mark = format_html('<g class="beside" transform="translate({} {}) scale(0.8)"><circle class="halo" r="10"/>{}</g>',
                           place.x + 20, place.y - 19, drawn)  # fmt: skip
    return format_html(
        '<circle class="valve {}" cx="{}" cy="{}" r="{}"/><text class="value{}{}" x="{}" y="{}" text-anchor="middle">{}</text>'
        '<text class="hand" x="{}" y="{}" text-anchor="end">{}</text>{}',
        " ".join(states), place.x, place.y, VALVE, size, " on-ink" if is_current else "", place.x, place.y + 5, text,
        place.x - 19, place.y - 17, number, mark,
    )  # fmt: skip


def short_name(name: str) -> str:
    """What stands in a station without a value: In, Ex, with the number of a second valve; a cylinder's own is empty."""
    *_cylinder, last = name.split(".")
    if not _cylinder:
        return ""
    if last.isdecimal():
        return f"{SHORT.get(_cylinder[-1], '')}{last}"
    return str(SHORT.get(last, last))


def caption(layout: Layout) -> SafeString:
    """Say how it turns, and what isn't known about where things are."""
    lines = [turning_in_words(layout.engine)]
    if not layout.is_placed:
        lines.append(_("banks not known: drawn by number"))
    lowest = layout.height - 10
    return format_html_join(
        "", '<text class="caption" x="{}" y="{}" text-anchor="middle">{}</text>',
        ((layout.width / 2, lowest - 18 * place, line) for place, line in enumerate(reversed(lines))),
    )  # fmt: skip


def turning_in_words(engine: Engine) -> str:
    """How the engine turns, seen from where."""
    if engine.turning is None:
        return _("turning direction not known")
    return _("turns %(way)s, seen from the %(end)s") % {"way": TURNS[engine.turning], "end": ENDS[engine.seen_from]}


def in_words(layout: Layout, marks: Mapping[str, StationMark], reach: Collection[str], current: str | None) -> str:
    """The picture for who can't see it: where things are, what is reached, what was found."""
    engine = layout.engine
    right = "flywheel" if layout.left == "free_end" else "free_end"
    said = [
        _("Plan view: %(layout)s engine, cylinders %(count)s, %(left)s at the left, %(right)s at the right; %(turns)s.")
        % {"layout": LAYOUTS[engine.layout], "count": engine.cylinders, "left": ENDS[layout.left], "right": ENDS[right],
           "turns": turning_in_words(engine)}
    ]  # fmt: skip
    if not layout.is_placed:
        said.append(_("Which cylinder stands where is not known."))
    elif len(layout.rows) == 2:
        listed = {"upper": ", ".join(map(str, layout.rows[0])), "lower": ", ".join(map(str, layout.rows[1]))}
        said.append(_("Far row: cylinders %(upper)s; near row: %(lower)s.") % listed)
    if current:
        said.append(_("Now: %(station)s.") % {"station": spoken(current)})
    if reached := [spoken(name) for name in layout.stations if name in reach]:
        said.append(_("Within reach at this crank stop: %(stations)s.") % {"stations": ", ".join(reached)})
    if found := [f"{spoken(name)} {told(marks[name])}" for name in layout.stations if name in marks]:
        said.append(_("Found: %(values)s.") % {"values": "; ".join(found)})
    return " ".join(said)


def told(found: StationMark) -> str:
    """A value with its verdict."""
    return f"{found.value} {VERDICTS[found.verdict]}" if found.verdict in VERDICTS else found.value


def spoken(name: str) -> str:
    """A station as it is called out at the engine: "3 exhaust"."""
    return name.replace(".", " ")
