"""The words of the bench: stations, values, limits and verdicts as a person says them."""

import re
from collections.abc import Mapping

from django.utils.translation import gettext as _
from django.utils.translation import gettext_lazy, ngettext

from logbook.core.figures import MINUS, decimals_for, figure, uncertainty
from logbook.engines.models import LimitLine

_PLACES = re.compile(r"[.,]([0-9]+)")
VERDICTS = {
    "within": gettext_lazy("within"),
    "beyond": gettext_lazy("beyond"),
    "too_close": gettext_lazy("too close to call"),
    "no_limit": gettext_lazy("no limit given"),
}
WAYS = {"loosen": gettext_lazy("loosen"), "tighten": gettext_lazy("tighten")}
DONE = {"loosen": gettext_lazy("loosened"), "tighten": gettext_lazy("tightened")}
HANDS = {"clockwise": gettext_lazy("clockwise"), "anticlockwise": gettext_lazy("anticlockwise")}


def station_title(station: str) -> str:
    """A station as a person says it.

    >>> station_title("3.exhaust"), station_title("1.intake.2"), station_title("main.2.front")
    ('Cylinder 3 exhaust', 'Cylinder 1 intake 2', 'Main 2 front')
    """
    first, *where = station.split(".")
    where = " ".join(part.replace("_", " ") for part in where)
    if first.isdigit():
        return (_("Cylinder %(number)s") % {"number": first} + f" {where}").strip()
    return f"{first.capitalize()} {where}".strip()


def value_as_typed(judgement: Mapping[str, object], mark: str = ".") -> str:
    """A judged value without its unit, to as many decimals as were typed.

    >>> value_as_typed({"value": 0.4, "as_typed": "0.40 mm"}), value_as_typed({"value": 0.31, "as_typed": "0.30; 0.32"})
    ('0.40', '0.31')
    """
    if judgement["value"] is None:
        return "–"
    typed = [len(places) for places in _PLACES.findall(judgement["as_typed"] or "")]
    if not typed:
        return figure(judgement["value"], decimal_mark=mark)
    return f"{judgement['value']:.{max(typed)}f}".replace("-", MINUS).replace(".", mark)


def value_words(judgement: Mapping[str, object], mark: str = ".") -> str:
    """A judged value with its unit and what its gauge leaves open.

    >>> value_words({"value": 0.33, "unit": "mm", "expanded_uncertainty": 0.0099})
    '0.3300 ± 0.0099 mm'
    """
    if judgement["value"] is None:
        return _("not measured: %(why)s") % {"why": judgement.get("not_measured", "")}
    unit, expanded = judgement["unit"], judgement["expanded_uncertainty"]
    if bound := judgement.get("bound"):
        side = _("under") if bound == "below" else _("over")
        return f"{side} {figure(judgement['value'], decimal_mark=mark)} {unit}"
    told = figure(judgement["value"], expanded, mark)
    return f"{told} ± {uncertainty(expanded, mark)} {unit}" if expanded else f"{told} {unit}"


def verdict_words(judgement: Mapping[str, object], mark: str = ".") -> str:
    """The verdict and how far from which limit.

    >>> told = {"value": 0.33, "unit": "mm", "expanded_uncertainty": 0.0099, "lower": 0.35, "upper": 0.45}
    >>> verdict_words({**told, "verdict": "beyond"})
    'beyond: 0.02 mm under the lower limit'
    """
    word, value = str(VERDICTS[judgement["verdict"]]), judgement["value"]
    edges = {_("lower limit"): judgement["lower"], _("upper limit"): judgement["upper"]}
    near = {name: value - edge for name, edge in edges.items() if edge is not None and value is not None}
    if judgement["verdict"] == "no_limit" or not near:
        return word
    name = min(near, key=lambda one: abs(near[one]))
    apart = f"{figure(margin(near[name], judgement), decimal_mark=mark)} {judgement['unit']}"
    if abs(near[name]) < 1e-12:
        return _("%(verdict)s: on the %(limit)s") % {"verdict": word, "limit": name}
    told = {"verdict": word, "apart": apart, "limit": name}
    if near[name] < 0:
        return _("%(verdict)s: %(apart)s under the %(limit)s") % told
    return _("%(verdict)s: %(apart)s over the %(limit)s") % told


def margin(apart: float, judgement: Mapping[str, object]) -> float:
    """How far a value lies from a limit, to the digit its uncertainty bears; what would round to nought stays."""
    expanded = judgement.get("expanded_uncertainty")
    return (round(abs(apart), decimals_for(expanded)) if expanded else 0.0) or abs(apart)


def limit_words(line: LimitLine) -> str:
    """Setting zone and limits of a line as they were typed: "set 0.38 to 0.42 mm · limits 0.35 to 0.45 mm"."""
    parts = []
    if line.set_lower or line.set_upper:
        parts.append(_("set %(span)s") % {"span": span(line.set_lower, line.set_upper)})
    if line.lower or line.upper:
        parts.append(_("limits %(span)s") % {"span": span(line.lower, line.upper)})
    if line.condition:
        parts.append(line.condition)
    return " · ".join(parts)


def span(lower: str, upper: str) -> str:
    """Two figures as typed; the unit of the first is left out where both have the same.

    >>> span("0.35 mm", "0.45 mm"), span("24 bar", "")
    ('0.35 to 0.45 mm', '24 bar or more')
    """
    if not upper:
        return _("%(lower)s or more") % {"lower": lower}
    if not lower:
        return _("%(upper)s or less") % {"upper": upper}
    number, _space, unit = lower.partition(" ")
    told = {"lower": number if unit and unit == upper.partition(" ")[2] else lower, "upper": upper}
    return _("%(lower)s to %(upper)s") % told


def act_words(act: Mapping[str, object], mark: str = ".") -> str:
    """An act that a finding calls for, in the words of who does it."""
    if act["act"] == "turn_screw":
        told = {"way": WAYS[act["direction"]], "turns": f"{act['turns']:.2f}".replace(".", mark),
                "degrees": act["degrees"], "hand": HANDS[act["hand"]]}  # fmt: skip
        return _("%(way)s the screw %(turns)s turn (%(degrees)s° %(hand)s)") % told
    if act["act"] == "fit_shim":
        told = {"thickness": f"{figure(act['thickness'], decimal_mark=mark)} {act['unit']}",
                "source": _("stock") if act["from"] == "stock" else station_title(act["from"])}  # fmt: skip
        return _("fit the shim of %(thickness)s from %(source)s") % told
    if act["act"] == "open_up_and_measure_again":
        return _("open up and measure again")
    if act["act"] == "close_down_and_measure_again":
        return _("close down and measure again")
    return act["act"].replace("_", " ")


def done_words(act: Mapping[str, object], mark: str = ".") -> str:
    """The same act once it is done, ready to be kept."""
    if act["act"] == "fit_shim":
        return _("shim of %(thickness)s fitted") % {
            "thickness": f"{figure(act['thickness'], decimal_mark=mark)} {act['unit']}"
        }
    if act["act"] != "turn_screw":
        return {"loosen": _("opened up"), "tighten": _("closed down")}.get(act.get("direction", ""), "")
    told = {"way": DONE[act["direction"]], "turns": f"{act['turns']:.2f}".replace(".", mark), "degrees": act["degrees"]}
    return _("screw %(way)s %(turns)s turn (%(degrees)s°)") % told


def ago_words(hours: float | None, days: int) -> str:
    """How long ago, in running hours where both are known, else in days."""
    if hours is not None and hours >= 0:
        return _("%(hours)s h ago") % {"hours": f"{hours:.0f}"}
    return ngettext("%(days)s day ago", "%(days)s days ago", days) % {"days": days}
