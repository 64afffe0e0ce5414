"""The worked example of the first page: an invented engine's readings, typed over by the visitor and judged, kept nowhere."""

import json
from collections.abc import Mapping
from copy import deepcopy
from dataclasses import dataclass
from functools import cache
from pathlib import Path

from django.conf import settings
from django.utils.functional import cached_property
from django.utils.safestring import SafeString

from logbook.core.figures import figure, uncertainty
from logbook.core.ruler import Mark, ruler
from measurements.assess import assess
from measurements.document import Unjudgeable
from measurements.kind import Kind, find_kinds

EXAMPLE = Path(settings.BASE) / "fixtures" / "demo" / "first_page.json"
VERDICTS = {"within": "within", "beyond": "beyond", "too_close": "too close to call", "no_limit": "no limit given"}


@cache
def example() -> dict[str, object]:
    """The example document."""
    return json.loads(EXAMPLE.read_text(encoding="utf-8"))


@cache
def kinds() -> dict[str, Kind]:
    """Kinds that the example has a measurement of, in its order."""
    every = find_kinds()
    return {name: every[name] for name in dict.fromkeys(one["kind"] for one in example()["measurements"])}


@dataclass(frozen=True)
class Row:
    """One station on the page: what was typed there, and what became of it."""

    station: str
    title: str
    typed: str
    unit: str
    finding: Mapping[str, object] | None = None
    error: str = ""

    @property
    def field(self) -> str:
        """Name of its field in the form."""
        return f"at-{self.station}"

    @property
    def verdict(self) -> str:
        """The verdict in words."""
        return VERDICTS[self.finding["verdict"]] if self.finding else ""

    @property
    def value(self) -> str:
        """The value judged and its expanded uncertainty, as a person reads them."""
        return "" if self.finding is None or self.finding["value"] is None else measured(self.finding)

    @property
    def picture(self) -> SafeString:
        """Its limit ruler."""
        return SafeString("") if self.finding is None else picture_of(self.finding, self.title)


def picture_of(finding: Mapping[str, object], title: str) -> SafeString:
    """Draw the limit ruler of a finding."""
    if finding["value"] is None or finding["verdict"] == "no_limit":
        return SafeString("")
    mark = Mark(finding["value"], finding["expanded_uncertainty"], finding["verdict"])
    edges = " to ".join("open" if edge is None else f"{edge:.6g}" for edge in (finding["lower"], finding["upper"]))
    label = f"{title}: {measured(finding)}, {VERDICTS[finding['verdict']]}; limits {edges}"
    return ruler(finding["lower"], finding["upper"], finding["guard_band"], [mark], label)


class Judged:
    """The example with one kind's readings typed over, judged."""

    def __init__(self, kind: Kind, typed: Mapping[str, str] | None = None) -> None:
        self.kind = kind
        self.document = deepcopy(example())
        self.measurement = next(one for one in reversed(self.document["measurements"]) if one["kind"] == kind.name)
        self.place = self.document["measurements"].index(self.measurement)
        if typed is not None:
            stations = self.measurement["readings"]
            self.measurement["readings"] = {name: typed.get(f"at-{name}", "") for name in stations}

    @cached_property
    def outcome(self) -> tuple[Mapping[str, object] | None, dict[str, str]]:
        """The judgement of what was readable, and the errors by station."""
        document = deepcopy(self.document)
        readings = {name: typed for name, typed in self.measurement["readings"].items() if typed.strip()}
        document["measurements"][self.place]["readings"] = readings
        errors: dict[str, str] = {}
        while True:  # what can't be read is told at its station; the rest is judged all the same
            try:
                return (assess(document) if readings else None), errors
            except Unjudgeable as refused:
                prefix = f"measurements[{self.place}].readings."
                told = {path.removeprefix(prefix): str(why) for path, why in refused.errors if path.startswith(prefix)}
                if not told:
                    raise
                errors |= told
                for station in told:
                    readings.pop(station, None)

    @property
    def rows(self) -> list[Row]:
        """The stations of the page."""
        judgement, errors = self.outcome
        findings = {one["station"]: one for one in self.of_this(judgement, "findings")}
        return [
            Row(name, station_title(name), typed, self.unit_of(name), findings.get(name), errors.get(name, ""))
            for name, typed in self.measurement["readings"].items()
        ]

    @property
    def derived(self) -> list[dict[str, object]]:
        """What follows from the readings, with pictures."""
        judgement, _ = self.outcome
        return [derived_line(one, self.kind) for one in self.of_this(judgement, "derived")]

    @property
    def advice(self) -> list[dict[str, object]]:
        """The acts the readings call for."""
        judgement, _ = self.outcome
        own = self.measurement["readings"]
        acts = judgement["advice"] if judgement and self.kind.acts else []
        return [{**act, "title": station_title(act["station"])} for act in acts if act["station"] in own]

    @property
    def stops(self) -> list[dict[str, object]]:
        """The crank stops, where the kind goes round the valves."""
        judgement, _ = self.outcome
        if judgement is None or "turn_screw" not in self.kind.acts:
            return []
        stops = judgement["barring_plan"]["stops"]
        return [{"mark": stop["mark"], "valves": [station_title(one) for one in stop["valves"]]} for stop in stops]

    @property
    def gauge(self) -> str:
        """The gauge of the measurement."""
        return self.measurement.get("gauge", "")

    @property
    def conditions(self) -> list[tuple[str, str]]:
        """How the readings were taken."""
        titles = {condition.name: condition.title for condition in self.kind.conditions}
        return [(titles[name], plain(value)) for name, value in self.measurement.get("conditions", {}).items()]

    def of_this(self, judgement: Mapping[str, object] | None, part: str) -> list[dict[str, object]]:
        """Lines of a judgement that belong to this measurement."""
        return [] if judgement is None else [one for one in judgement[part] if one["measurement"] == self.place]

    def unit_of(self, station: str) -> str:
        """The unit shown beside a field."""
        return self.kind.characteristic(self.kind.characteristic_of(station, None)).unit


def station_title(station: str) -> str:
    """A station as a person says it."""
    cylinder, *where = station.split(".")
    return " ".join([f"Cylinder {cylinder}", *where])


def derived_line(finding: Mapping[str, object], kind: Kind) -> dict[str, object]:
    """A derived value as the page shows it."""
    title = kind.characteristic(finding["characteristic"]).title
    where = station_title(finding["station"]) if finding["station"] else "Engine"
    return {
        **finding, "title": title, "where": where, "words": VERDICTS[finding["verdict"]],
        "shown": measured(finding), "told": [note for note in finding["notes"] if not note.startswith("u is")],
        "picture": picture_of(finding, title),
    }  # fmt: skip


def measured(finding: Mapping[str, object]) -> str:
    """A value with its unit and what its gauge leaves open."""
    expanded, unit = finding["expanded_uncertainty"], finding["unit"]
    if "bound" in finding:
        return f"{'under' if finding['bound'] == 'below' else 'over'} {figure(finding['value'])} {unit}"
    told = figure(finding["value"], expanded)
    return f"{told} ± {uncertainty(expanded)} {unit}" if expanded else f"{told} {unit}"


def plain(value: object) -> str:
    """A condition as a person reads it."""
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, Mapping):
        return "; ".join(f"cylinder {name}: {plain(inner)}" for name, inner in value.items())
    return ", ".join(map(str, value)) if isinstance(value, list) else str(value).replace("_", " ")
