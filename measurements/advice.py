"""The act a reading calls for: a kind names its acts, this room works them out."""

from collections.abc import Mapping, Sequence

from measurements.engine import Engine
from measurements.finding import Finding, tidy
from measurements.screw import turn_for
from measurements.sentence import Sentence, say
from measurements.units import convert, find_unit


def setting_gap(finding: Finding) -> float | None:
    """How far a value has to move to its target, in its unit; None inside the setting zone or without one."""
    limit = finding.limit
    if limit is None or not limit.has_setting_zone or finding.zone.is_open or finding.value is None:
        return None
    low, high = limit.figure("set_lower", finding.unit), limit.figure("set_upper", finding.unit)
    inside = (low is None or finding.value >= low) and (high is None or finding.value <= high)
    if inside and finding.bound is None or limit.target is None:
        return None
    return convert(limit.target, limit.unit, finding.unit) - finding.value


def screw_advice(finding: Finding, engine: Engine) -> tuple[dict[str, object] | None, Sentence | None]:
    """Turn of the lash screw that brings a station to its target; or a warning why there is none."""
    gap = setting_gap(finding)
    if gap is None:
        return None, None
    if finding.bound:
        return reopen(finding), None
    if engine.adjustment is None:
        return None, say("No act for {station}: how the lash is adjusted is not given.", station=finding.station)
    if engine.adjustment != "screw":
        return None, None
    if engine.screw_pitch is None:
        return None, say("No turn for {station}: the screw pitch is not given.", station=finding.station)
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
    return str(say("Confirm the reading first: it would make sense {slip}.", slip=str(finding.slip.reason)))


def advise(latest: Mapping[str, Finding], acts: Sequence[str], engine: Engine) -> tuple[list[dict], list[Sentence]]:
    """Acts for the last reading of each station, and warnings where one can't be given."""
    advice, warnings = [], []
    for finding in latest.values():
        if "turn_screw" in acts:
            act, warning = screw_advice(finding, engine)
            advice += [act] if act else []
            warnings += [warning] if warning else []
    return advice, warnings
