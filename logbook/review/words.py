"""Says in words where a case is, what was found there, and how far that lies from its limit; draws its ruler."""

import re
from collections.abc import Mapping
from math import inf

from django.utils.safestring import SafeString
from django.utils.translation import gettext as _

from logbook.bench.words import VERDICTS, margin, station_title
from logbook.core.figures import figure, uncertainty
from logbook.core.ruler import Mark, ruler
from measurements.conformity import BEYOND, NO_LIMIT, TOO_CLOSE, WITHIN
from measurements.kind import Kind, find_kinds
from measurements.units import convert, find_unit

from .cases import Case, Outcome

_AS_TYPED = re.compile(r"([0-9]+[.,][0-9]+|[0-9]+)( [^;.]*)?")
SURE, UNLIKELY = 0.999, 0.001  # chances past these are told as over and under them


def place_words(station: str | None) -> str:
    """A station as a person says it; the engine's own values have none."""
    return station_title(station) if station else _("Whole engine")


def characteristic_words(name: str, kinds: Mapping[str, Kind]) -> str:
    """What was measured, as its kind titles it."""
    kind = kinds.get(name.split(".")[0])
    found = kind.characteristic(name) if kind else None
    return found.title if found else name.split(".")[-1].replace("_", " ")


def case_words(case: Case) -> str:
    """Where a case is; a derived value is named with it."""
    where = place_words(case.station)
    if case.subject.finding is not None:
        return where
    return f"{where}: {characteristic_words(case.characteristic, find_kinds())}"


def value_words(judgement: Mapping[str, object], mark: str) -> str:
    """The value as large as a person reads it: as typed where that is what was judged, else to its last sure digit.

    >>> value_words({"value": 0.4, "as_typed": "0,40 mm", "expanded_uncertainty": 0.0099}, ".")
    '0.40'
    >>> value_words({"value": 12.5894789, "as_typed": "12.4 bar", "expanded_uncertainty": 0.2349}, ",")
    '12,59'
    """
    value = judgement["value"]
    if value is None:
        return _("not measured")
    if typed := _AS_TYPED.fullmatch(judgement.get("as_typed") or ""):
        number = typed.group(1).replace(",", ".")
        if float(number) == value:
            return number.replace(".", mark)
    told = figure(value, judgement.get("expanded_uncertainty"), mark)
    bound = {"below": "<", "above": ">"}.get(judgement.get("bound"), "")
    return f"{bound}{told}"


def with_uncertainty(judgement: Mapping[str, object], mark: str) -> str:
    """The value with its expanded uncertainty and unit."""
    expanded = judgement.get("expanded_uncertainty")
    if judgement["value"] is None or judgement.get("bound") or not expanded:
        return f"{value_words(judgement, mark)} {judgement['unit']}"
    told = figure(judgement["value"], expanded, mark)
    return f"{told} ± {uncertainty(expanded, mark)} {judgement['unit']}"


def limits_words(judgement: Mapping[str, object], mark: str) -> str:
    """The limits a value was judged against."""
    lower, upper, unit = judgement["lower"], judgement["upper"], judgement["unit"]
    low, high = (None if edge is None else plain(edge, mark) for edge in (lower, upper))
    if low is None and high is None:
        return _("no limit")
    if high is None:
        return _("%(low)s %(unit)s at least") % {"low": low, "unit": unit}
    if low is None:
        return _("%(high)s %(unit)s at most") % {"high": high, "unit": unit}
    return _("%(low)s to %(high)s %(unit)s") % {"low": low, "high": high, "unit": unit}


def source_words(outcome: Outcome) -> str:
    """Where a limit comes from: its source, the sheet it stands on, and whether a second person compared the two."""
    source = outcome.judgement["source"] or _("source not given")
    sheet = outcome.finding.limit_sheet if outcome.finding else None
    if sheet is None:
        return source
    told = {"source": source, "version": sheet.version, "person": sheet.compared_by, "why": sheet.nobody_compared}
    if sheet.compared_by:
        return _("%(source)s; limit sheet %(version)s, compared with its source by %(person)s") % told
    return _("%(source)s; limit sheet %(version)s, compared by nobody else: %(why)s") % told


def plain(value: float, mark: str) -> str:
    """A number without uncertainty, at most six significant digits."""
    return f"{value:.6g}".replace("-", "\u2212").replace(".", mark)


def chance_words(chance: float | None, mark: str) -> str:
    """The chance of being within, never as nought or a hundred percent.

    >>> chance_words(0.0, "."), chance_words(0.9345, ",")
    ('chance of being within under 0.1 %', 'chance of being within 93 %')
    >>> chance_words(1.0, "."), chance_words(0.0042, ",")
    ('chance of being within over 99.9 %', 'chance of being within 0,4 %')
    """
    if chance is None:
        return ""
    if chance < UNLIKELY:
        told = _("under %(share)s %%") % {"share": f"0{mark}1"}
    elif chance > SURE:
        told = _("over %(share)s %%") % {"share": f"99{mark}9"}
    else:
        share = f"{100 * chance:.0f}" if 0.01 <= chance <= 0.99 else f"{100 * chance:.1f}".replace(".", mark)
        told = f"{share} %"
    return _("chance of being within %(told)s") % {"told": told}


def margin_words(judgement: Mapping[str, object], mark: str) -> str:
    """How far a value lies from its nearest limit, and on which side."""
    value, unit = judgement["value"], judgement["unit"]
    edges = [
        (edge, name)
        for edge, name in ((judgement["lower"], "lower"), (judgement["upper"], "upper"))
        if edge is not None
    ]
    if value is None or not edges or judgement.get("bound"):
        return ""
    edge, name = min(edges, key=lambda told: abs(told[0] - value))
    told = {"by": plain(margin(value - edge, judgement), mark), "unit": unit}
    words = {
        ("lower", True): _("%(by)s %(unit)s under the lower limit"),
        ("lower", False): _("%(by)s %(unit)s above the lower limit"),
        ("upper", True): _("%(by)s %(unit)s over the upper limit"),
        ("upper", False): _("%(by)s %(unit)s below the upper limit"),
    }  # fmt: skip
    is_outside = value < edge if name == "lower" else value > edge
    return words[name, is_outside] % told


def grounds_words(judgement: Mapping[str, object], mark: str) -> str:
    """Margin and chance in one clause."""
    parts = margin_words(judgement, mark), chance_words(judgement["probability_within"], mark)
    return ", ".join(filter(None, parts))


def marks_told(
    outcome: Outcome, last: Mapping[str, object] | None, left: Outcome | None = None
) -> list[dict[str, object]]:
    """Marks of a ruler in the unit of its reading: last visit's ghost, the reading with its whisker, as left.

    As left was judged against its setting; its mark shows how it lies in the limits that are drawn.
    """
    scale, marks = outcome.judgement, []
    for role, told in (("last", last), ("now", scale), ("left", left.judgement if left else None)):
        if told is None or told["value"] is None:
            continue
        value = convert(told["value"], find_unit(told["unit"]), find_unit(scale["unit"]))
        expanded, verdict = (
            (scale["expanded_uncertainty"], scale["verdict"]) if role == "now" else (None, lies(value, scale))
        )
        marks.append({"value": value, "expanded": expanded, "verdict": verdict, "role": role})
    return marks


def lies(value: float, judgement: Mapping[str, object]) -> str:
    """How a value lies in the limits of a judgement, with its guard band."""
    band = judgement["guard_band"] or 0.0
    lower, upper = judgement["lower"], judgement["upper"]
    inside = min(inf if lower is None else value - lower, inf if upper is None else upper - value)
    if inside >= band:
        return WITHIN
    return BEYOND if inside < -band else TOO_CLOSE


def ruler_told(
    outcome: Outcome, last: Mapping[str, object] | None, title: str, mark: str, left: Outcome | None = None
) -> dict[str, object] | None:
    """What the limit ruler of a reading is drawn from; None without a limit or a value."""
    told = outcome.judgement
    if told["verdict"] == NO_LIMIT or told["value"] is None:
        return None
    words = [f"{title}: {with_uncertainty(told, mark)}, {VERDICTS[told['verdict']]}"]
    if left is not None and left.judgement["value"] is not None:
        words.append(_("left %(value)s") % {"value": with_uncertainty(left.judgement, mark)})
    if last is not None and last["value"] is not None:
        words.append(_("last visit %(value)s") % {"value": with_uncertainty(last, mark)})
    words.append(_("limits %(limits)s") % {"limits": limits_words(told, mark)})
    return {
        "lower": told["lower"], "upper": told["upper"], "guard_band": told["guard_band"] or 0.0,
        "marks": marks_told(outcome, last, left), "label": "; ".join(words), "decimal_mark": mark,
    }  # fmt: skip


def drawn(told: Mapping[str, object] | None) -> SafeString:
    """The limit ruler as a picture; empty without one."""
    if told is None:
        return SafeString("")
    marks = [Mark(**mark) for mark in told["marks"]]
    return ruler(told["lower"], told["upper"], told["guard_band"], marks, told["label"], told["decimal_mark"])
