"""What the bench page shows: the station in hand, the reading just kept, the plan view, the title block."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import datetime

from django.utils.safestring import SafeString
from django.utils.translation import gettext as _
from django.utils.translation import gettext_lazy

from logbook.core.figures import uncertainty
from logbook.core.plan_view import StationMark, dial, plan_view
from logbook.core.ruler import Mark, ruler
from measurements.units import convert, find_unit

from .at_work import AS_FOUND, AtWork
from .judging import day_in
from .models import Finding, Measurement, Reading
from .queries import last_visit
from .steps import Step
from .words import act_words, ago_words, limit_words, station_title, value_as_typed, value_words, verdict_words

PHASES = {Measurement.Phase.AS_FOUND: gettext_lazy("as found"), Measurement.Phase.AS_LEFT: gettext_lazy("as left")}


@dataclass(frozen=True)
class Last:
    """What a station was on the job before: its value for the ghost on the ruler, and the same in words."""

    finding: Finding
    words: str

    def in_unit(self, unit: str) -> float | None:
        """Its value in a unit; None where it is of another dimension."""
        value, own = self.finding.judgement["value"], find_unit(self.finding.judgement["unit"])
        other = find_unit(unit)
        return convert(value, own, other) if own.dimension == other.dimension else None


def last_of(work: AtWork, station: str, at: datetime) -> Last | None:
    """Look a station's last visit up and say it: "left at 0.40 mm, 412 h ago"."""
    pass_ = work.current
    found = last_visit(work.task, station, pass_.opened_at if pass_ else at)
    if found is None:
        return None
    shop, judgement = work.task.work_order.shop, found.judgement
    earlier = found.measurement
    hours = None
    if pass_ and None not in (pass_.engine_hours, earlier.engine_hours):
        hours = pass_.engine_hours - earlier.engine_hours
    told = {"value": f"{value_as_typed(judgement, shop.decimal_mark)} {judgement['unit']}",
            "ago": ago_words(hours, (day_in(shop, at) - day_in(shop, earlier.opened_at)).days)}  # fmt: skip
    said = _("found at %(value)s, %(ago)s") if earlier.phase == AS_FOUND else _("left at %(value)s, %(ago)s")
    return Last(found, said % told)


@dataclass(frozen=True)
class Station:
    """A station in hand: what is entered there, against what, and what stands there already."""

    work: AtWork
    name: str
    phase: str
    last: Last | None

    @property
    def title(self) -> str:
        """Its name, the largest thing on the page after the value."""
        return station_title(self.name)

    @property
    def characteristic(self) -> object:
        """What is entered."""
        return self.work.characteristic(self.name)

    @property
    def unit(self) -> str:
        """Unit taken where none is typed: the limit's, else the kind's own."""
        found = self.work.limit(self.name)
        return found[0].unit.symbol if found else self.characteristic.unit

    @property
    def told(self) -> list[str]:
        """Setting zone, limits and the last visit."""
        found = self.work.limit(self.name)
        limits = [limit_words(found[1])] if found else [_("no limit given")]
        return limits + ([self.last.words] if self.last else [])

    @property
    def readings(self) -> Sequence[Reading]:
        """What stands here in this phase."""
        return self.work.answered(self.phase).get(self.name, [])

    @property
    def finding(self) -> Finding | None:
        """What it was found to be so far."""
        return self.work.finding(self.phase, self.name)

    @property
    def is_witnessed(self) -> bool:
        """Tell whether somebody from outside is to see this reading."""
        return self.name in self.work.task.witnessed_stations

    @property
    def picture(self) -> SafeString:
        """The ruler: what stands here with its whisker, the last visit as a ghost; before a reading the limits alone."""
        if self.finding is not None and self.finding.judgement["value"] is not None:
            return picture_of(self.finding, self.last)
        found = self.work.limit(self.name)
        if found is None:
            return SafeString("")
        limit, line = found
        ends = ("set_lower", "set_upper") if self.phase != AS_FOUND and limit.has_setting_zone else ("lower", "upper")
        lower, upper = (limit.figure(name, limit.unit) for name in ends)
        label = f"{self.title}: {limit_words(line)}" + (f"; {self.last.words}" if self.last else "")
        return ruler(lower, upper, 0.0, ghosts(self.last, limit.unit.symbol), label)


def ghosts(last: Last | None, unit: str) -> list[Mark]:
    """The last visit's reading as a ghost."""
    value = last.in_unit(unit) if last else None
    return [] if value is None else [Mark(value, role="last")]


def picture_of(finding: Finding, last: Last | None) -> SafeString:
    """The ruler of a finding."""
    told = finding.judgement
    if told["value"] is None or told["verdict"] == "no_limit":
        return SafeString("")
    mark = Mark(told["value"], told["expanded_uncertainty"], told["verdict"])
    label = f"{station_title(finding.station)}: {value_words(told)}, {verdict_words(told)}"
    return ruler(told["lower"], told["upper"], told["guard_band"], [*ghosts(last, told["unit"]), mark], label)


@dataclass(frozen=True)
class Kept:
    """A reading just kept, with what it was found to be."""

    reading: Reading
    finding: Finding | None
    last: Last | None
    mark: str

    @property
    def title(self) -> str:
        return station_title(self.reading.station)

    @property
    def phase(self) -> str:
        return PHASES[self.reading.measurement.phase]

    @property
    def value(self) -> str:
        return value_words(self.finding.judgement, self.mark)

    @property
    def verdict(self) -> str:
        return verdict_words(self.finding.judgement, self.mark)

    @property
    def acts(self) -> list[str]:
        """The acts it calls for, in words."""
        return [act_words(act, self.mark) for act in self.finding.judgement.get("acts", [])]

    @property
    def picture(self) -> SafeString:
        return picture_of(self.finding, self.last)

    @property
    def wants_another(self) -> bool:
        """Tell whether a second look would settle a close call."""
        needs = self.finding.judgement["needs"] if self.finding else None
        return bool(needs and needs["repeats"])


def drawn_plan(work: AtWork, step: Step) -> SafeString:
    """The plan view with what was found so far; heavy rings are what this stop reaches."""
    mark = work.task.work_order.shop.decimal_mark
    marks = {station: mark_of(finding, mark) for station, finding in work.judged.items()}
    reach = step.stop.stations if step.stop and step.stop.mark else ()
    return plan_view(work.engine, marks, reach, step.station or None, order=work.route.stations)


def mark_of(finding: Finding, mark: str) -> StationMark:
    """A finding as the plan view shows it."""
    told = finding.judgement
    below = None not in (told["value"], told["lower"]) and told["value"] < told["lower"]
    return StationMark(value_as_typed(told, mark), told["verdict"], bool(below))


def drawn_dial(work: AtWork) -> SafeString:
    """The dial with the stops, the one where the crank stands filled."""
    stops = [stop for stop in work.route.stops if stop.crank_angle is not None]
    places = [stop.mark for stop in stops]
    at = work.task.work_order.crank_at
    return dial(stops, places.index(at) if at in places else None)


def gauge_words(work: AtWork, finding: Finding | None) -> str:
    """The gauge, and what it leaves open of this reading."""
    pass_ = work.current
    if pass_ is None or pass_.gauge is None:
        return "–" if work.task.done_at else _("none named")
    told = finding.judgement if finding else {}
    if not told.get("expanded_uncertainty"):
        return str(pass_.gauge)
    wide = uncertainty(told["expanded_uncertainty"], work.task.work_order.shop.decimal_mark)
    return _("%(gauge)s, ±%(wide)s %(unit)s this reading") % {"gauge": pass_.gauge, "wide": wide, "unit": told["unit"]}


def conditions_words(measurement: Measurement, titles: Mapping[str, str]) -> list[tuple[str, str]]:
    """How a pass is taken, in words."""
    return [(titles.get(name, name), plain(value)) for name, value in measurement.conditions.items()]


def plain(value: object) -> str:
    """A condition as a person reads it."""
    if isinstance(value, bool):
        return _("yes") if value else _("no")
    if isinstance(value, Mapping):
        return "; ".join(f"{name}: {plain(inner)}" for name, inner in value.items())
    return ", ".join(map(str, value)) if isinstance(value, list) else str(value).replace("_", " ")
