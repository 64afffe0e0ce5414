"""The states of a work order and every move between them: one table, and the drawing made from it."""

from collections.abc import Iterator

from django.utils.html import format_html, format_html_join
from django.utils.safestring import SafeString
from django.utils.translation import gettext_lazy as _

from .models import WorkOrder

State = WorkOrder.State
BEGINS_AS = State.PLANNED

# from → {to: (roles that may, what it means)}
MOVES: dict[str, dict[str, tuple[tuple[str, ...], str]]] = {
    State.PLANNED: {
        State.AT_THE_BENCH: (("technician",), _("The first task is started.")),
        State.DROPPED: (("supervisor",), _("The job is not done after all, and why.")),
    },
    State.AT_THE_BENCH: {
        State.STOPPED_SHORT: (("technician",), _("Work stops before its end, and why; the closing-up list stays.")),
        State.TO_DECIDE: (("technician",), _("Measuring is finished, everything closed up, no lock left on.")),
        State.DROPPED: (("supervisor",), _("The job is given up, everything closed up, and why.")),
    },
    State.STOPPED_SHORT: {
        State.AT_THE_BENCH: (("technician",), _("Work goes on where it stopped.")),
        State.TO_DECIDE: (("technician",), _("It is left at what was measured, everything closed up.")),
        State.DROPPED: (("supervisor",), _("The job is given up, everything closed up, and why.")),
    },
    State.TO_DECIDE: {
        State.AT_THE_BENCH: (("supervisor",), _("Something is to be measured again.")),
        State.SIGNED: (("supervisor",), _("Every finding is decided, and the sheet signed.")),
    },
    State.SIGNED: {},
    State.DROPPED: {},
}
NEEDS_REASON = {State.STOPPED_SHORT, State.DROPPED}
OPEN = (State.PLANNED, State.AT_THE_BENCH, State.STOPPED_SHORT, State.TO_DECIDE)


def every_move() -> Iterator[tuple[str, str, tuple[str, ...], str]]:
    """Give each move of the table: from, to, roles, what it means."""
    for from_state, ways in MOVES.items():
        for to_state, (roles, meaning) in ways.items():
            yield from_state, to_state, roles, meaning


def drawn_as_text() -> str:
    """Draw the table with letters, for DEVELOPERS.md."""
    lines = [f"{'(opened)':<13} → {State(BEGINS_AS).label:<13}  supervisor"]
    for from_state, to_state, roles, meaning in every_move():
        lines.append(f"{State(from_state).label:<13} → {State(to_state).label:<13}  {', '.join(roles)}: {meaning}")
    return "\n".join(lines)


PLACES = {  # centre of each state's box in the drawing
    State.PLANNED: (100, 130), State.AT_THE_BENCH: (350, 130), State.TO_DECIDE: (620, 130), State.SIGNED: (860, 130),
    State.STOPPED_SHORT: (485, 30), State.DROPPED: (485, 240),
}  # fmt: skip
WIDTH, HEIGHT, BOX = 960, 280, (150, 44)


def drawn_as_picture() -> SafeString:
    """Draw the table as SVG: a box for each state, an arrow for each move."""
    arrows = format_html_join("", "{}", ((arrow(from_, to),) for from_, to, _roles, _meaning in every_move()))
    boxes = format_html_join("", "{}", ((box(state),) for state in MOVES))
    label = "; ".join(f"{State(from_).label} → {State(to).label}" for from_, to, _roles, _meaning in every_move())
    return format_html(
        '<svg class="states" viewBox="0 0 {} {}" role="img" aria-label="{}">{}{}</svg>',
        WIDTH,
        HEIGHT,
        label,
        arrows,
        boxes,
    )


def box(state: str) -> SafeString:
    """A state: its word in a box; a heavy one where nothing leads on."""
    (x, y), (width, height) = PLACES[state], BOX
    return format_html(
        '<rect class="state{}" x="{}" y="{}" width="{}" height="{}" rx="3"/>'
        '<text x="{}" y="{}" text-anchor="middle">{}</text>',
        "" if MOVES[state] else " last", x - width / 2, y - height / 2, width, height, x, y + 6, State(state).label,
    )  # fmt: skip


def arrow(from_state: str, to_state: str) -> SafeString:
    """A move: a line from box to box with its head; there and back lie side by side."""
    (x1, y1), (x2, y2) = PLACES[from_state], PLACES[to_state]
    length = ((x2 - x1) ** 2 + (y2 - y1) ** 2) ** 0.5
    ux, uy = (x2 - x1) / length, (y2 - y1) / length
    aside = 9 if from_state in MOVES[to_state] else 0
    x1, y1, x2, y2 = x1 - uy * aside, y1 + ux * aside, x2 - uy * aside, y2 + ux * aside
    inside = min(way_in(x2, PLACES[to_state][0], BOX[0], ux), way_in(y2, PLACES[to_state][1], BOX[1], uy)) + 3
    tip, back = (x2 - ux * inside, y2 - uy * inside), (x2 - ux * (inside + 12), y2 - uy * (inside + 12))
    points = " ".join(
        f"{x:.1f},{y:.1f}" for x, y in (tip, (back[0] - uy * 6, back[1] + ux * 6), (back[0] + uy * 6, back[1] - ux * 6))
    )
    return format_html(
        '<line class="move" x1="{}" y1="{}" x2="{}" y2="{}"/><polygon class="move-head" points="{}"/>',
        f"{x1:.1f}", f"{y1:.1f}", f"{back[0]:.1f}", f"{back[1]:.1f}", points,
    )  # fmt: skip


def way_in(end: float, centre: float, size: float, direction: float) -> float:
    """How far a line runs inside a box, along one axis, before it comes to its end."""
    if abs(direction) < 1e-9:
        return float("inf")
    edge = centre - size / 2 if direction > 0 else centre + size / 2
    return (end - edge) / direction
