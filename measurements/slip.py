"""The slip guard: asks about a reading that is hard to believe as typed, but not in another unit, place or station."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import cache

from measurements.expectation import Expectation
from measurements.sentence import Sentence, say
from measurements.units import DIMENSIONS, Unit, convert

__all__ = ["Expectation", "Slip", "find_slip"]

# How readily each slip is asked about, against taking the reading as it stands. Set by counting, not measured on
# people: raised until slips are found, lowered until honest worn readings are left alone; test_slip.py counts both.
OTHER_UNIT = 0.3
OTHER_UNIT_THOUGH_TYPED = 1e-6  # who writes the unit hardly ever means another
POINT_MOVED = {10: 0.15, 100: 0.05, 1000: 0.05}  # 1000: the decimal mark taken for one of thousands
OTHER_STATION = 0.05
ALIKE = 1.3  # units closer than this can't be told apart by the size of a reading

# Units that gauges and books of one job are marked in; others of the dimension are not mistaken for these.
SEEN_TOGETHER = (
    {"mm", "µm", "in", "thou"},
    {"bar", "kPa", "psi", "kgf/cm2", "MPa"},
    {"kPa", "hPa", "mbar", "Pa", "inHg", "mmHg", "inH2O", "mmH2O"},
)
SPOKEN = {"in": "inches", "thou": "thousandths of an inch", "1": "parts of one"}


@dataclass(frozen=True)
class Slip:
    """A reading that looks like a slip: what it would be, in the reading's `unit`, if `reason` is so."""

    would_be: float
    unit: str
    reason: Sentence


@dataclass(frozen=True)
class _Guess:
    """What may have been meant, and how readily that is believed."""

    would_be: float
    belief: float
    reason: Sentence


def find_slip(
    value: float,
    unit: Unit,
    own: Expectation,
    *,
    unit_typed: bool,
    neighbours: Mapping[str, Expectation] | None = None,
) -> Slip | None:
    """Find the likeliest slip behind a reading, if one is easier to believe than the reading itself.

    Parameters
    ----------
    value : float
        The reading, in `unit`.
    own : Expectation
        What is known of its station, in `unit`. Without a limit, nominal, last visit or sibling nothing is asked.
    unit_typed : bool
        Whether the unit was typed with the number, or taken from the field.
    neighbours : mapping of station to Expectation, optional
        Stations it could have been meant for, in `unit`.

    >>> lash = Expectation(lower=0.25, upper=0.35)
    >>> from measurements.units import find_unit
    >>> str(find_slip(0.0118, find_unit("mm"), lash, unit_typed=False).reason)
    'typed in inches'
    >>> find_slip(0.18, find_unit("mm"), lash, unit_typed=False) is None
    True
    """
    if own.zone is None or not abs(value) < 1e100:  # nor NaN
        return None
    guesses = [] if value == 0 else [*_other_units(value, unit, own, unit_typed), *_moved_points(value, own)]
    guesses += [
        _Guess(value, OTHER_STATION * there.belief(value), say("it belongs to {station}", station=station))
        for station, there in (neighbours or {}).items()
    ]
    likeliest = max(guesses, key=lambda guess: guess.belief, default=None)
    if likeliest is None or likeliest.belief <= own.belief(value):
        return None
    return Slip(likeliest.would_be, unit.symbol, likeliest.reason)


def _other_units(value: float, unit: Unit, own: Expectation, unit_typed: bool) -> Iterator[_Guess]:
    """Guess that the number was read in another unit of the dimension than it stands for."""
    readiness = OTHER_UNIT_THOUGH_TYPED if unit_typed else OTHER_UNIT
    for other, size in _mistaken_for(unit):
        would_be = convert(value, other, unit)
        named = SPOKEN.get(other.symbol, other.symbol)
        reason = say("meant in {unit}", unit=named) if unit_typed else say("typed in {unit}", unit=named)
        yield _Guess(would_be, readiness * size * own.belief(would_be), reason)


@cache
def _mistaken_for(unit: Unit) -> tuple[tuple[Unit, float], ...]:
    """Give the units that gauges show beside this one and whose size differs enough, with that size in `unit`."""
    found = []
    for other in DIMENSIONS[unit.dimension]:
        size = other.scale / unit.scale
        beside = any({other.symbol, unit.symbol} <= together for together in SEEN_TOGETHER)
        alike = other.offset == unit.offset and 1 / ALIKE < size < ALIKE
        moved_point = size in (10, Fraction(1, 10))  # the same guess under a plainer name
        if not alike and not moved_point and (beside or unit.dimension not in ("length", "pressure")):
            found.append((other, float(size)))
    return tuple(found)


def _moved_points(value: float, own: Expectation) -> Iterator[_Guess]:
    """Guess that the decimal point stands one, two or three places off."""
    for times, readiness in POINT_MOVED.items():
        reason = (
            say("the point is moved one place")
            if times == 10
            else say("the point is moved {n} places", n=len(str(times)) - 1)
        )
        yield _Guess(value * times, readiness * times * own.belief(value * times), reason)
        yield _Guess(value / times, readiness / times * own.belief(value / times), reason)
