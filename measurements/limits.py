"""Limits: what an engine's own papers allow, for as-found and for as-left, and under which condition they hold."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from measurements.conformity import GUARDED, SIMPLE, Zone
from measurements.sentence import Refusal, Sentence, say
from measurements.units import Unit, convert, find_unit, to_si

AS_FOUND, AS_LEFT = PHASES = ("as_found", "as_left")


@dataclass(frozen=True)
class Condition:
    """State a limit holds for: a named one ("cold", "torque plate on"), or a span of part temperatures [K]."""

    text: str
    name: str | None = None
    lowest: float | None = None
    highest: float | None = None

    @property
    def is_span(self) -> bool:
        """Tell whether temperatures are meant, not a name."""
        return self.name is None

    def holds(self, state: str | None, part_temperature: float | None) -> bool | None:
        """Tell whether a reading was taken under this condition; None when the reading doesn't say."""
        if not self.is_span:
            return None if state is None else state == self.name
        return None if part_temperature is None else self.lowest <= part_temperature <= self.highest


def read_condition(text: str) -> Condition:
    """Read a limit's condition: `cold`, `torque plate on`, or a span `15..30 °C`.

    Raises
    ------
    Refusal
        When nothing is given, or a span isn't two rising temperatures with a unit.
    """
    tidy = " ".join(text.split())
    if not tidy:
        raise Refusal(
            "The condition is empty: name a state such as cold, or a span such as 15..30 °C, or leave it out."
        )
    if ".." not in tidy:
        return Condition(tidy, name=tidy.lower())
    low_text, _, rest = tidy.partition("..")
    number, _, unit_text = rest.strip().partition(" ")
    try:
        unit = find_unit(unit_text, "temperature")
        low, high = to_si(float(low_text), unit), to_si(float(number), unit)
    except ValueError as error:
        raise Refusal("Read the condition {read}: a span of temperatures looks like 15..30 °C.", read=text) from error
    if not low < high:
        raise Refusal("Read the condition {read}: its first temperature must be the lower one.", read=text)
    return Condition(tidy, lowest=low, highest=high)


@dataclass(frozen=True)
class Limit:
    """One line of a limit sheet; all five figures in `unit`, each may be missing.

    `rule` is the line's own decision rule, None where the shop's applies; `allows_for_gauge` says that its source
    has already allowed for the gauge. `stations` narrows it to some stations; empty means all.
    """

    characteristic: str
    unit: Unit
    lower: float | None = None
    upper: float | None = None
    set_lower: float | None = None
    set_upper: float | None = None
    nominal: float | None = None
    condition: Condition | None = None
    source: str | None = None
    rule: str | None = None
    setting_rule: str | None = None
    allows_for_gauge: bool = False
    reference_barometer: float | None = None
    stations: frozenset[str] = frozenset()

    def zone(self, phase: str, unit: Unit, *, shop_rule: str = GUARDED, shop_setting_rule: str = SIMPLE) -> Zone:
        """Zone a reading of `phase` is judged against, in `unit`: as left goes by the setting zone where there is one."""
        if phase == AS_LEFT and self.has_setting_zone:
            return Zone(*self.setting_ends(unit), self.setting_rule or shop_setting_rule)
        rule = SIMPLE if self.allows_for_gauge else self.rule or shop_rule
        return Zone(self.figure("lower", unit), self.figure("upper", unit), rule)

    @property
    def has_setting_zone(self) -> bool:
        """Tell whether the sheet says where to set the value."""
        return self.set_lower is not None or self.set_upper is not None

    def setting_ends(self, unit: Unit) -> tuple[float | None, float | None]:
        """Ends of the setting zone, in `unit`; a side it leaves open is closed by the service limit."""
        sides = (("set_lower", "lower"), ("set_upper", "upper"))
        return tuple(self.figure(setting if getattr(self, setting) is not None else service, unit)
                     for setting, service in sides)  # fmt: skip

    @property
    def target(self) -> float | None:
        """Value to set to, in the limit's unit: the nominal, else the middle of a two-sided setting zone."""
        if self.nominal is not None or None in (self.set_lower, self.set_upper):
            return self.nominal
        return (self.set_lower + self.set_upper) / 2

    def figure(self, name: str, unit: Unit) -> float | None:
        """One of the five figures, in another unit."""
        value = getattr(self, name)
        return None if value is None else convert(value, self.unit, unit)

    def contradictions(self) -> list[tuple[str, Sentence]]:
        """Say which figures can't stand together, each with the field at fault."""
        found = []
        for low, high in (("lower", "upper"), ("set_lower", "set_upper")):
            bottom, top = getattr(self, low), getattr(self, high)
            if None not in (bottom, top) and not bottom < top:
                text = say("{low} {bottom} is not below {high} {top}: give the smaller figure as {low}.",
                           low=low, bottom=bottom, high=high, top=top)  # fmt: skip
                found.append((low, text))
        if not found:
            found += self._outside()
        figures = (self.lower, self.upper, self.set_lower, self.set_upper)
        if all(figure is None for figure in figures):
            found.append(("", say("The limit has no figure: give lower, upper, set_lower or set_upper.")))
        return found

    def _outside(self) -> list[tuple[str, Sentence]]:
        """Say which figure lies outside the span that should hold it: a turn to such a nominal would spoil the setting."""
        spans = (
            ("nominal", "set_lower", "set_upper"), ("nominal", "lower", "upper"),
            ("set_lower", "lower", "upper"), ("set_upper", "lower", "upper"),
        )  # fmt: skip
        for name, low, high in spans:
            value, bottom, top = (getattr(self, figure) for figure in (name, low, high))
            edge = low if value is not None and bottom is not None and value < bottom else (
                high if value is not None and top is not None and value > top else None)  # fmt: skip
            if edge:
                return [(name, say("{name} {value} lies {side} {edge} {figure}: one of the two is wrong.", name=name,
                                   value=value, side="under" if edge == low else "over", edge=edge,
                                   figure=getattr(self, edge)))]  # fmt: skip
        return []


def limit_for(
    limits: Iterable[Limit], characteristic: str, station: str | None, state: str | None, part_temperature: float | None
) -> tuple[Limit | None, bool | None]:
    """Pick the limit for a reading, and tell whether its condition holds (None: the reading doesn't say).

    A limit whose condition holds goes first, then one without condition or with the reading's state unknown;
    one for named stations goes before one for all.
    """
    candidates = [
        limit
        for limit in limits
        if limit.characteristic == characteristic and (not limit.stations or station in limit.stations)
    ]
    if not candidates:
        return None, None
    ranked = sorted(candidates, key=lambda limit: (_rank(limit, state, part_temperature), not limit.stations))
    best = ranked[0]
    return best, True if best.condition is None else best.condition.holds(state, part_temperature)


def _rank(limit: Limit, state: str | None, part_temperature: float | None) -> int:
    if limit.condition is None:
        return 1
    return {True: 0, None: 2, False: 3}[limit.condition.holds(state, part_temperature)]


def rivals(
    limits: Iterable[Limit], best: Limit, station: str | None, state: str | None, part_temperature: float | None
) -> list[Limit]:
    """Limits that may hold as well as the one picked, for the reading doesn't say which of their conditions it met."""
    if best.condition is None or best.condition.holds(state, part_temperature) is not None:
        return []
    return [
        limit for limit in limits
        if limit is not best and limit.characteristic == best.characteristic and bool(limit.stations) == bool(best.stations)
        and (not limit.stations or station in limit.stations) and _rank(limit, state, part_temperature) == 2
    ]  # fmt: skip


def repeated(limits: Sequence[Limit]) -> list[int]:
    """Places of limits that speak again for a characteristic, condition and station that an earlier one speaks for."""
    seen: dict[tuple, list[frozenset[str]]] = {}
    again = []
    for place, limit in enumerate(limits):
        earlier = seen.setdefault((limit.characteristic, limit.condition and limit.condition.text.lower()), [])
        if any(limit.stations & stations or limit.stations == stations for stations in earlier):
            again.append(place)
        earlier.append(limit.stations)
    return again
