"""The blank bench sheet: empty boxes for one task in the order of the hands, stop by stop where the crank is turned."""

from datetime import datetime

from django.utils.translation import gettext as _

from logbook.bench.judging import day_in, engine_of, kinds
from logbook.bench.queries import lines_for, sheet_in_force
from logbook.bench.words import station_title
from logbook.core.refusal import Refused
from logbook.engines.models import LimitLine
from logbook.paper.shapes import BlankSheet, BlankStation, Stop
from logbook.work.models import Task
from measurements.barring import plan
from measurements.kind import Kind

from ..queries import last_left
from ..words import value_words
from .head import facts, head
from .order import caution


class NothingToMeasure(Refused):
    """A blank sheet was asked for of a task that measures nothing."""


def blank_sheet(task: Task, at: datetime) -> BlankSheet:
    """Empty boxes for every station of a task; limits are those in force at a moment.

    Raises
    ------
    NothingToMeasure
        The task measures nothing.
    """
    order, kind = task.work_order, kinds().get(task.kind)
    if kind is None:
        raise NothingToMeasure(_("“%(task)s” measures nothing, so there are no boxes to fill in.") % {"task": task})
    lines = lines_for(sheet_in_force(order.engine_id, at), kind.name, day_in(order.shop, at))
    told = Told(task, kind, {line.characteristic: line for line in reversed(lines)})
    columns = [_("as found"), _("what was done"), _("as left")] if kind.acts else [_("first"), _("second"), _("third")]
    return {
        **head(order), "facts": facts([(_("engine must be"), kind.lock_state)]), "task": task.title,
        "unit": kind.entered[0].unit, "columns": columns, "cautions": [caution(one) for one in kind.cautions],
        "blanks": [_("date"), _("measured by"), _("gauge"), _("engine hours"), *(one.title for one in kind.conditions)],
        "stops": told.stops(), "ink": [_("measured"), _("keyed")],
    }  # fmt: skip


class Told:
    """A task's stations, with what is known about each beforehand."""

    def __init__(self, task: Task, kind: Kind, lines: dict[str, LimitLine]) -> None:
        self.task, self.kind, self.lines = task, kind, lines
        self.engine = engine_of(task.work_order)
        self.mark = task.work_order.shop.decimal_mark
        self.left = last_left(task)

    def stops(self) -> list[Stop]:
        """Crank stops where the kind goes round the valves; else all stations in one go."""
        stations = list(self.kind.stations(self.engine)) if self.engine else []
        found = plan(self.engine) if self.engine and self.kind.acts else None
        if not found:
            return [{"mark": self.kind.title, "stations": [self.station(one) for one in stations]}]
        turn = {"signal": "WARNING", "text": _("Before the crank is turned: feeler out, hands clear, helper answers.")}
        stops: list[Stop] = [
            {
                "mark": stop.mark, "angle": f"{stop.crank_angle:g}°", "cautions": [turn],
                "stations": [self.station(one) for one in stop.stations if one in stations],
            }
            for stop in found.stops
        ]  # fmt: skip
        reached = {one for stop in found.stops for one in stop.stations}
        if left_over := [one for one in stations if one not in reached]:
            stops.append({"mark": _("at its own firing TDC"), "stations": [self.station(one) for one in left_over]})
        return [stop for stop in stops if stop["stations"]]

    def station(self, name: str) -> BlankStation:
        """One station with its limits, its setting and what it was left at the last time."""
        told: BlankStation = {"station": station_title(name)}
        line = self.lines.get(self.kind.characteristic_of(name, None))
        if line is not None:
            told |= {"limits": span(line.lower, line.upper), "setting": span(line.set_lower, line.set_upper)}
        if name in self.left:
            told["last"] = value_words(self.left[name], self.mark)
        return told


def span(low: str, high: str) -> str:
    """Two figures as typed on the limit sheet."""
    if low and high:
        return _("%(low)s to %(high)s") % {"low": low, "high": high}
    if low:
        return _("%(low)s at least") % {"low": low}
    return _("%(high)s at most") % {"high": high} if high else ""
