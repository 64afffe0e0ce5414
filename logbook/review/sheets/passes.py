"""The passes of a job sheet: every station in the order of the hands, its reading, limits, verdict and ruler."""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field

from django.utils.translation import gettext as _

from logbook.bench.judging import day_in, engine_of, kinds
from logbook.bench.models import Measurement, Reading
from logbook.bench.words import VERDICTS, station_title
from logbook.gauges.models import Gauge
from logbook.gauges.queries import complaints, in_force
from logbook.paper.shapes import Fact, Pass, Row
from logbook.people.models import Shop
from measurements.conformity import NO_LIMIT
from measurements.kind import Kind

from ..cases import Outcome
from ..words import characteristic_words, limits_words, place_words, ruler_told, source_words, with_uncertainty
from .head import facts, moment

LEAST_SHARED = 2  # rows that say the same before it is said once for all


@dataclass
class Taken:
    """A pass with all that belongs to it: its readings, what each station was found to be, and the cases they are in."""

    measurement: Measurement
    shop: Shop
    readings: Sequence[Reading] = ()
    outcomes: Mapping[str, Outcome] = field(default_factory=dict)
    decisions: Mapping[str, str] = field(default_factory=dict)  # in words, by the key of the outcome decided on
    last: Mapping[tuple, Mapping] = field(default_factory=dict)  # last visit's judgement by characteristic and station
    witnessed: Mapping[str, Sequence[str]] = field(default_factory=dict)  # by station: who

    @property
    def kind(self) -> Kind | None:
        """Its kind; None for one that is no longer kept."""
        return kinds().get(self.measurement.kind)

    @property
    def mark(self) -> str:
        """The shop's decimal mark."""
        return self.shop.decimal_mark


def pass_told(taken: Taken) -> Pass:
    """One pass as it stands on paper."""
    measurement, kind = taken.measurement, taken.kind
    rows = [row for station in by_hand(taken) for row in station_rows(station, taken)]
    shared = shared_notes(rows)
    told: Pass = {
        "title": kind.title if kind else measurement.kind, "phase": str(measurement.get_phase_display()),
        "facts": pass_facts(taken) + facts((_("holds for all"), note) for note in shared), "rows": rows,
        "derived": [derived_row(Outcome(measurement, one), taken) for one in measurement.derived],
    }  # fmt: skip
    return told | gauge_told(measurement.gauge, taken)


def by_hand(taken: Taken) -> list[str]:
    """Stations answered in a pass, in the order of the hands."""
    engine, answered = engine_of(taken.measurement.task.work_order), [one.station for one in taken.readings]
    order = list(taken.kind.stations(engine)) if taken.kind and engine else []
    return sorted(dict.fromkeys(answered), key=lambda one: order.index(one) if one in order else len(order))


def pass_facts(taken: Taken) -> list[Fact]:
    """Who measured and keyed, when, under which conditions."""
    measurement, readings = taken.measurement, taken.readings
    titles = {one.name: one.title for one in taken.kind.conditions} if taken.kind else {}
    hours = measurement.engine_hours
    times = sorted(moment(one.taken_at, taken.shop) for one in readings) or [moment(measurement.opened_at, taken.shop)]
    return facts([
        (_("measured by"), names(one.measured_by.name for one in readings)),
        (_("keyed by"), names(one.keyed_by.name for one in readings)),
        (_("taken"), times[0] if times[0] == times[-1] else _("%(first)s to %(last)s") % {
            "first": times[0], "last": times[-1]}),
        (_("engine hours"), "" if hours is None else f"{hours:.12g}".replace(".", taken.mark)),
        *((titles.get(name, name.replace("_", " ")), in_words(value)) for name, value in measurement.conditions.items()),
    ])  # fmt: skip


def names(people: Iterable[str]) -> str:
    """Names once each, in a row."""
    return ", ".join(dict.fromkeys(people))


def in_words(value: object) -> str:
    """A condition as a person reads it."""
    if isinstance(value, bool):
        return _("yes") if value else _("no")
    if isinstance(value, Mapping):
        return "; ".join(f"{name}: {in_words(inner)}" for name, inner in value.items())
    return ", ".join(map(str, value)) if isinstance(value, list) else str(value).replace("_", " ")


def gauge_told(gauge: Gauge | None, taken: Taken) -> dict[str, object]:
    """The gauge of a pass, the calibration it had that day, and what speaks against it."""
    if gauge is None:
        return {"gauge": _("no gauge named")}
    day = day_in(taken.shop, taken.measurement.opened_at)
    step = _("%(gauge)s, smallest step %(step)s") % {"gauge": gauge, "step": gauge.resolution}
    calibration = in_force(gauge, day)
    told = {"gauge": step if gauge.resolution else str(gauge), "complaints": complaints(gauge, day)}
    if calibration is not None:
        u = calibration.expanded_uncertainty
        parts = [
            calibration.certificate, calibration.calibrated_on.isoformat(),
            f"U = {u} (k = {calibration.coverage_factor:g})" if u else "",
            _("due %(day)s") % {"day": calibration.due_on.isoformat()} if calibration.due_on else "",
        ]  # fmt: skip
        told["calibration"] = ", ".join(filter(None, parts))
    elif gauge.max_permissible_error:
        told["calibration"] = _("none; permissible error ± %(error)s") % {"error": gauge.max_permissible_error}
    return told


def station_rows(station: str, taken: Taken) -> list[Row]:
    """What stands at a station, and under it what was struck or replaced there."""
    readings = [one for one in taken.readings if one.station == station]
    replaced = {one.supersedes_id for one in taken.readings}
    standing = [one for one in readings if one.pk not in replaced and not one.is_strike]
    rows = [standing_row(station, standing, taken)] if standing else []
    return rows + [struck_row(one, taken) for one in readings if one.pk in replaced]


def standing_row(station: str, standing: Sequence[Reading], taken: Taken) -> Row:
    """The reading of a station, judged; or why it was not measured."""
    why_not = next((one.not_measured for one in standing if one.not_measured), "")
    outcome = taken.outcomes.get(station)
    if why_not or outcome is None:
        told = _("not measured: %(why)s") % {"why": why_not} if why_not else "; ".join(one.typed for one in standing)
        row: Row = {"station": station_title(station), "value": told}
    else:
        row = judged_row(station_title(station), outcome, taken)
        row["typed"] = "; ".join(one.typed for one in standing)
    asked = [slip_words(one) for one in standing if one.slip_asked]
    witnesses = taken.witnessed.get(station, ())
    seen = [_("witnessed by %(names)s") % {"names": ", ".join(witnesses)}] if witnesses else []
    return row | {"notes": [*row.get("notes", []), *asked, *seen]}


def slip_words(reading: Reading) -> str:
    """What was asked about as a slip, and what was typed at first where another figure was meant."""
    told = {"answer": reading.slip_answer, "typed": reading.slip_asked.get("typed", reading.typed)}
    if told["typed"] == reading.typed:
        return _("asked about as a slip, answered “%(answer)s”") % told
    return _("first typed %(typed)s, asked about as a slip, answered “%(answer)s”") % told


def struck_row(reading: Reading, taken: Taken) -> Row:
    """A reading that was struck or replaced: it stays on the sheet, with the reason."""
    after = next(one for one in taken.readings if one.supersedes_id == reading.pk)
    told = {"reason": after.reason, "person": after.keyed_by.name, "when": moment(after.recorded_at, taken.shop)}
    why = (
        _("struck: %(reason)s (%(person)s, %(when)s)")
        if after.is_strike
        else _("replaced: %(reason)s (%(person)s, %(when)s)")
    )
    return {"station": station_title(reading.station), "value": reading.typed or _("not measured"), "is_struck": True,
            "notes": [why % told]}  # fmt: skip


def derived_row(outcome: Outcome, taken: Taken) -> Row:
    """A value computed from the readings."""
    told = outcome.judgement
    title = f"{characteristic_words(told['characteristic'], kinds())}, {place_words(told['station'])}"
    return judged_row(title, outcome, taken)


def judged_row(title: str, outcome: Outcome, taken: Taken) -> Row:
    """A value with its limits, their source, its verdict, ruler and decision."""
    told, mark = outcome.judgement, taken.mark
    row: Row = {"station": title, "value": with_uncertainty(told, mark), "notes": list(told["notes"])}
    if told["verdict"] == NO_LIMIT:
        return row
    last = taken.last.get((told["characteristic"], told["station"]))
    decision = taken.decisions.get(outcome.key)
    return row | {
        "limits": limits_words(told, mark), "source": source_words(outcome),
        "verdict": told["verdict"], "words": str(VERDICTS[told["verdict"]]),
        "ruler": ruler_told(outcome, last, title, mark), **({"decision": decision} if decision else {}),
    }  # fmt: skip


def shared_notes(rows: Sequence[Row]) -> list[str]:
    """Take what every judged row says out of the rows, to be said once."""
    judged = [row for row in rows if "verdict" in row and not row.get("is_struck")]
    if len(judged) < LEAST_SHARED:
        return []
    shared = [note for note in judged[0]["notes"] if all(note in row["notes"] for row in judged[1:])]
    for row in judged:
        row["notes"] = [note for note in row["notes"] if note not in shared]
    return shared
