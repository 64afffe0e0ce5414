"""Where on the engine: the names of valves, bridges, cylinders and bore levels, in the order of the hands."""

import re

from measurements.engine import Engine
from measurements.sentence import Refusal

SIDES = ("intake", "exhaust")
BORE_DEPTHS = ("top", "middle", "bottom")
BORE_DIRECTIONS = ("thrust", "axial")

_VALVE = re.compile(r"([1-9][0-9]{0,3})\.(intake|exhaust)(?:\.([1-9][0-9]{0,3}|bridge))?")
_CYLINDER = re.compile(r"[1-9][0-9]{0,3}")
_BORE = re.compile(r"([1-9][0-9]{0,3})\.(top|middle|bottom)\.(thrust|axial)")


def cylinders_by_hand(engine: Engine) -> list[int]:
    """Cylinders as hands come to them: along one bank, then along the next; by number where banks are not known."""
    if engine.banks is None:
        return list(range(1, engine.cylinders + 1))
    return [cylinder for bank in engine.banks for cylinder in bank]


def side_stations(engine: Engine, cylinder: int, side: str) -> list[str]:
    """Stations of one cylinder's "intake" or "exhaust": each valve, or the bridge and then its one lash.

    >>> side_stations(Engine("inline", 4, intake_valves=2), 1, "intake")
    ['1.intake', '1.intake.2']
    >>> side_stations(Engine("inline", 4, intake_valves=2, bridges=True), 1, "intake")
    ['1.intake.bridge', '1.intake']
    """
    first = f"{cylinder}.{side}"
    if is_bridged(engine, side):
        return [f"{first}.bridge", first]
    return [first, *(f"{first}.{valve}" for valve in range(2, _valves(engine, side) + 1))]


def is_bridged(engine: Engine, side: str) -> bool:
    """Tell whether valves of a side are worked in pairs over a bridge; a lone valve needs none."""
    return engine.bridges and _valves(engine, side) > 1


def valve_stations(engine: Engine) -> list[str]:
    """All places where lash or bridge is set, in the order of the hands.

    >>> valve_stations(Engine("inline", 2))
    ['1.intake', '1.exhaust', '2.intake', '2.exhaust']
    """
    return [
        station
        for cylinder in cylinders_by_hand(engine)
        for side in SIDES
        for station in side_stations(engine, cylinder, side)
    ]


def cylinder_stations(engine: Engine) -> list[str]:
    """All cylinders, in the order of the hands."""
    return [str(cylinder) for cylinder in cylinders_by_hand(engine)]


def bore_stations(engine: Engine) -> list[str]:
    """Each cylinder at three depths in two directions, in the order of the hands.

    Source: NAVEDTRA 14076: just below the top of ring travel, middle, just above its lowest; across and along the
    crank.

    >>> bore_stations(Engine("single", 1))[:3]
    ['1.top.thrust', '1.top.axial', '1.middle.thrust']
    """
    return [
        f"{cylinder}.{depth}.{direction}"
        for cylinder in cylinders_by_hand(engine)
        for depth in BORE_DEPTHS
        for direction in BORE_DIRECTIONS
    ]


def parse_valve_station(text: str, engine: Engine) -> str:
    """Read a valve's or bridge's station and give its one name; `1.intake.1` is `1.intake`.

    Raises
    ------
    Refusal
        When it is no such station of this engine.

    >>> parse_valve_station(" 1.Intake.1", Engine("inline", 4))
    '1.intake'
    """
    found = _VALVE.fullmatch(text.strip().lower())
    if not found:
        raise Refusal(
            "“{read}” is no valve station: write cylinder and valve, such as 1.intake, 1.exhaust or 1.intake.2.",
            read=_shown(text),
        )  # fmt: skip
    cylinder, side, which = found.groups()
    first = f"{_cylinder(cylinder, text, engine)}.{side}"
    name = first if which in (None, "1") else f"{first}.{which}"
    offered = side_stations(engine, int(cylinder), side)
    if name not in offered:
        raise _no_such_valve(text, which, offered)
    return name


def _no_such_valve(text: str, which: str, offered: list[str]) -> Refusal:
    there = ", ".join(offered)
    if which == "bridge":
        return Refusal("“{read}” names a bridge, but these valves have none: there is {there}.",
                       read=_shown(text), there=there)  # fmt: skip
    if offered[0].endswith(".bridge"):
        return Refusal("“{read}”: valves under a bridge share one lash: there is {there}.",
                       read=_shown(text), there=there)  # fmt: skip
    return Refusal("“{read}” names valve {which}, which this cylinder does not have: there is {there}.",
                   read=_shown(text), which=which, there=there)  # fmt: skip


def parse_cylinder_station(text: str, engine: Engine) -> str:
    """Read a cylinder's number.

    Raises
    ------
    Refusal
        When it is no cylinder of this engine.
    """
    if not _CYLINDER.fullmatch(text.strip()):
        raise Refusal("“{read}” is no cylinder: write its number alone, 1 to {cylinders}.",
                      read=_shown(text), cylinders=engine.cylinders)  # fmt: skip
    return str(_cylinder(text.strip(), text, engine))


def parse_bore_station(text: str, engine: Engine) -> str:
    """Read a place in a bore, `cylinder.depth.direction`.

    Raises
    ------
    Refusal
        When it is no such place on this engine.
    """
    found = _BORE.fullmatch(text.strip().lower())
    if not found:
        raise Refusal(
            "“{read}” is no place in a bore: write cylinder, depth (top, middle, bottom) and direction (thrust, "
            "axial), such as 3.top.thrust.",
            read=_shown(text),
        )  # fmt: skip
    cylinder, depth, direction = found.groups()
    return f"{_cylinder(cylinder, text, engine)}.{depth}.{direction}"


def _valves(engine: Engine, side: str) -> int:
    return engine.intake_valves if side == "intake" else engine.exhaust_valves


def _cylinder(number: str, text: str, engine: Engine) -> int:
    if int(number) > engine.cylinders:
        raise Refusal("“{read}” names cylinder {cylinder}; this engine has cylinders 1 to {cylinders}.",
                      read=_shown(text), cylinder=int(number), cylinders=engine.cylinders)  # fmt: skip
    return int(number)


def _shown(text: str) -> str:
    """What was typed, cut where it would fill the screen."""
    return text if len(text) <= 40 else text[:39] + "…"
