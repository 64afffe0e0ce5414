"""The act a reading calls for: a kind names its acts, this room works them out."""

from collections.abc import Mapping, Sequence

from measurements.conformity import over
from measurements.engine import Engine
from measurements.finding import Finding, tidy
from measurements.screw import turn_for
from measurements.sentence import Sentence, say
from measurements.units import convert, find_unit


def setting_gap(finding: Finding) -> tuple[float | None, Sentence | None]:
    """How far a value has to move to its target, in its unit; or why that can't be told. Neither inside the setting zone."""
    limit = finding.limit
    if limit is None or not limit.has_setting_zone or not outside_setting_zone(finding):
        return None, None
    if limit.target is None:
        return None, say("No act for {station}: it is outside its setting zone, but no nominal says where to set it.",
                         station=finding.station)  # fmt: skip
    return convert(limit.target, limit.unit, finding.unit) - finding.value, None


def outside_setting_zone(finding: Finding) -> bool:
    """Tell whether a value is outside its setting zone; a censored one has to prove it."""
    low, high = finding.limit.setting_ends(finding.unit)
    under = low is not None and (
        over(low, finding.value) or (finding.bound == "below" and not over(finding.value, low))
    )
    above = high is not None and (
        over(finding.value, high) or (finding.bound == "above" and not over(high, finding.value))
    )
    proves = {None: under or above, "below": under, "above": above}
    return proves[finding.bound]


def screw_advice(finding: Finding, engine: Engine) -> tuple[dict[str, object] | None, Sentence | None]:
    """Turn of the lash screw that brings a station to its target; or a warning why there is none."""
    if finding.bound and finding.limit and finding.limit.has_setting_zone:
        return (reopen(finding) if outside_setting_zone(finding) else None), None
    gap, why_not = setting_gap(finding)
    if gap is None:
        return None, why_not
    why_not = no_turn(finding.station, engine)
    if why_not or engine.adjustment != "screw":
        return None, why_not
    mm = find_unit("mm")
    turn = turn_for(
        convert(gap, finding.unit, mm), engine.screw_pitch, engine.screw_ratio, engine.thread, engine.inward_closes
    )
    predicted = finding.value + convert(turn.predicted_change_mm, mm, finding.unit)
    return {
        "station": finding.station, "act": "turn_screw", "turns": turn.turns, "degrees": turn.degrees,
        "direction": turn.direction, "hand": turn.hand, "predicted": tidy(predicted), "unit": finding.unit.symbol,
        "confirm_first": confirm_first(finding), "working": [str(step) for step in turn.working],
    }, None  # fmt: skip


def no_turn(station: str, engine: Engine) -> Sentence | None:
    """Say why no turn can be computed; what is not given of the screw is not assumed."""
    if engine.adjustment is None:
        return say("No act for {station}: how the lash is adjusted is not given.", station=station)
    if engine.adjustment != "screw":
        return None
    if station.endswith(".bridge"):
        return say("No turn for {station}: a bridge has its own screw. Balance it, then measure the lash again.",
                   station=station)  # fmt: skip
    if engine.screw_pitch is None:
        return say("No turn for {station}: the screw pitch is not given.", station=station)
    if engine.screw_ratio is None:
        return say("No turn for {station}: the screw ratio is not given, how far the valve moves for each movement of the "
                   "screw (1 where the screw stands over the valve).", station=station)  # fmt: skip
    return None


def reopen(finding: Finding) -> dict[str, object]:
    """A gap that no leaf enters, or none fills, has no computed turn."""
    below = finding.bound == "below"
    act, direction = ("open_up_and_measure_again", "loosen") if below else ("close_down_and_measure_again", "tighten")
    told = say("only known to be {side} {value} {unit}: no turn is computed", side="under" if below else "over",
               value=finding.value, unit=finding.unit.symbol)  # fmt: skip
    return {
        "station": finding.station,
        "act": act,
        "direction": direction,
        "unit": finding.unit.symbol,
        "working": [str(told)],
    }


def confirm_first(finding: Finding) -> str | None:
    """A reading that looks like a slip is confirmed before anything is turned."""
    if finding.slip is None:
        return None
    return str(say("Confirm the reading first: it would make sense if {slip}.", slip=str(finding.slip.reason)))


def advise(latest: Mapping[str, Finding], acts: Sequence[str], engine: Engine) -> tuple[list[dict], list[Sentence]]:
    """Acts for the last reading of each station, and warnings where one can't be given."""
    advice, warnings = [], []
    for finding in latest.values():
        if "turn_screw" in acts:
            act, warning = screw_advice(finding, engine)
            advice += [act] if act else []
            warnings += [warning] if warning else []
    return advice, warnings
