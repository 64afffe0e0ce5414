"""Units: the one place where pint is met; pint gives each unit's exact size, and never sees a number that was typed."""

import re
import unicodedata
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from functools import cache, lru_cache
from itertools import product
from typing import TYPE_CHECKING

from measurements.number import shown
from measurements.sentence import Refusal
from measurements.unit_words import MEANS_TWO_THINGS, OFFERED, WRITTEN_SO_IT_IS_ANOTHER

if TYPE_CHECKING:
    from pint import UnitRegistry


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit of one dimension: an SI value is value × scale + offset.

    Attributes
    ----------
    symbol : str
        As it is shown; "1" is the unit of plain numbers and needs no showing.
    dimension : str
        A key of `DIMENSIONS`.
    scale : Fraction
        Its size in SI units, exact (but for ° and rpm, where pint's pi has 50 digits).
    offset : Fraction
        Zero of the scale in SI units [K]; only temperature points have one.
    """

    symbol: str
    dimension: str
    scale: Fraction
    offset: Fraction = Fraction(0)

    def __str__(self) -> str:
        return self.symbol

    def __hash__(self) -> int:
        return hash((self.symbol, self.dimension))  # hashing the fractions would cost more than a conversion


@cache
def registry() -> "UnitRegistry":
    """Build this process's one pint registry, in exact fractions; only when a unit is first asked for."""
    from pint import UnitRegistry

    return UnitRegistry(non_int_type=Fraction)


@cache
def units_of(dimension: str) -> tuple[Unit, ...]:
    """Give the units offered for a dimension, the usual one first."""
    if dimension not in OFFERED:
        raise Refusal("Read “{read}”, which is no dimension that is measured here.", read=shown(str(dimension)))
    return tuple(_sized(symbol, dimension, definition) for symbol, definition, _ in OFFERED[dimension])


def _sized(symbol: str, dimension: str, definition: str) -> Unit:
    """Ask pint for a unit's exact size, and its zero where the scale has one of its own."""
    pint = registry()
    unit = pint.parse_units(definition)
    zero, one = (Fraction(pint.Quantity(Fraction(n), unit).to_base_units().magnitude) for n in (0, 1))
    return Unit(symbol, dimension, scale=one - zero, offset=zero)


class _Dimensions(Mapping[str, tuple[Unit, ...]]):
    """Dimension → the units offered for it; a dimension's units are sized when they are first asked for."""

    def __getitem__(self, dimension: str) -> tuple[Unit, ...]:
        if dimension not in OFFERED:
            raise KeyError(dimension)
        return units_of(dimension)

    def __iter__(self) -> Iterator[str]:
        return iter(OFFERED)

    def __len__(self) -> int:
        return len(OFFERED)

    def __contains__(self, dimension: object) -> bool:
        return dimension in OFFERED


DIMENSIONS: Mapping[str, tuple[Unit, ...]] = _Dimensions()


def find_unit(text: str, dimension: str | None = None) -> Unit:
    """Find the unit that the trade's spelling `text` means.

    Parameters
    ----------
    text : str
        `µm`, `ft-lb`, `kg/cm²`, `deg C`, `"`, `PSI` …
    dimension : str, optional
        The dimension asked for; without it the first dimension of `DIMENSIONS` that knows the spelling.

    Raises
    ------
    Refusal
        No such unit, a unit of another dimension, or a word that means two units; it names what was read and
        which units fit.

    >>> find_unit("kg/cm²", "pressure").symbol
    'kgf/cm2'
    """
    if not isinstance(text, str):
        raise Refusal("Read {read} in place of a unit; write it as text.", read=shown(repr(type(text).__name__)))
    if dimension is not None and not (isinstance(dimension, str) and dimension in OFFERED):
        raise Refusal("Read “{read}”, which is no dimension that is measured here.", read=shown(str(dimension)))
    return _find(text, dimension)


@lru_cache(maxsize=4096)
def _find(text: str, dimension: str | None) -> Unit:
    if len(text) > 40:
        raise Refusal("Read “{read}”, which is too long for a unit.", read=shown(text))
    key = _tidy(text)
    asked = [dimension] if dimension else list(OFFERED)
    if place := _place(key, asked):
        return units_of(place[0])[place[1]]
    if meanings := MEANS_TWO_THINGS.get(key.casefold()):
        raise Refusal(
            "Read “{read}”, which is used for two units; write {one} or {other}.",
            read=shown(text),
            one=meanings[0],
            other=meanings[1],
        )
    raise _refuse_unit(text, key, dimension)


def _refuse_unit(text: str, key: str, dimension: str | None) -> Refusal:
    """Say what a text that is no fitting unit is, and which units fit."""
    if dimension is None:
        return Refusal("Read “{read}”, which is no unit that is known here.", read=shown(text))
    wanted, fitting = dimension.replace("_", " "), ", ".join(symbol for symbol, _, _ in OFFERED[dimension])
    if other := WRITTEN_SO_IT_IS_ANOTHER.get(dimension, {}).get(key):
        return Refusal(
            "Read “{read}”, which written so is {other}; the units that fit here are {units}.",
            read=shown(text),
            other=other,
            units=fitting,
        )
    if place := _place(key, list(OFFERED)):
        return Refusal(
            "Read “{read}”, a unit of {found}; a unit of {wanted} is needed here: {units}.",
            read=shown(text),
            found=place[0].replace("_", " "),
            wanted=wanted,
            units=fitting,
        )
    return Refusal(
        "Read “{read}” where a unit of {wanted} is needed; those that fit are {units}.",
        read=shown(text),
        wanted=wanted,
        units=fitting,
    )


def _place(key: str, dimensions: list[str]) -> tuple[str, int] | None:
    """Find a tidied spelling: as written first, then with its capitals forgiven, if that can mean nothing else."""
    as_written, forgiven = _spellings()
    for dimension in dimensions:
        if key in as_written[dimension]:
            return dimension, as_written[dimension][key]
    if len(key) < 2 or any(key in WRITTEN_SO_IT_IS_ANOTHER.get(dimension, {}) for dimension in dimensions):
        return None
    folded = key.casefold()
    found = (dimension for dimension in dimensions if folded in forgiven[dimension])
    return next(((dimension, forgiven[dimension][folded]) for dimension in found), None)


@cache
def _spellings() -> tuple[dict[str, dict[str, int]], dict[str, dict[str, int]]]:
    """Lay out every spelling: dimension → spelling → place of its unit, as written and with capitals folded."""
    as_written: dict[str, dict[str, int]] = {}
    forgiven: dict[str, dict[str, int]] = {}
    for dimension, units in OFFERED.items():
        exact, folded = as_written.setdefault(dimension, {}), forgiven.setdefault(dimension, {})
        for place, (symbol, _, others) in enumerate(units):
            for spelling in (symbol, *others.split()):
                for key in _with_and_without_joints(spelling):
                    exact[key] = folded[key.casefold()] = place
    return as_written, forgiven


def _with_and_without_joints(spelling: str) -> set[str]:
    parts = _tidy(spelling).split("·")
    joints = product(("·", ""), repeat=len(parts) - 1)
    return {parts[0] + "".join(joint + part for joint, part in zip(row, parts[1:], strict=True)) for row in joints}


def _tidy(text: str) -> str:
    """Bring a spelling to one form: compatibility characters, curly quotes, separators and a closing full stop."""
    text = re.sub("″|”|“|''|′′|’’", '"', text.strip()).replace("º", "°").replace("˚", "°")
    text = unicodedata.normalize("NFKC", text).replace("^", "")
    text = re.sub(r"\s*/\s*", "/", text.removesuffix("."))
    return re.sub(r"\s*[·•∙⋅*×.\-\u2212\u2010\u2011]\s*|\s+", "·", text)


def to_si(value: float, unit: Unit) -> float:
    """Convert to SI units, rounded once: 0.18 mm is the double nearest to 0.00018 m.

    >>> to_si(0.18, find_unit("mm"))
    0.00018
    """
    over, under = _as_written(value)
    scale, offset = unit.scale, unit.offset
    return _divide(
        over * scale.numerator * offset.denominator + offset.numerator * under * scale.denominator,
        under * scale.denominator * offset.denominator,
    )


def convert(value: float, from_: Unit, to: Unit) -> float:
    """Convert between units of one dimension, rounded once; temperatures as points on their scales.

    The double is taken for the shortest decimal that it is written as, so 0.1 is one tenth.

    >>> convert(1.0, find_unit("in"), find_unit("mm"))
    25.4
    >>> convert(212.0, find_unit("°F"), find_unit("°C"))
    100.0
    """
    if from_.dimension != to.dimension:
        raise _refuse_conversion(from_, to)
    if from_.offset == to.offset:
        return convert_difference(value, from_, to)
    exact = (Fraction(*_as_written(value)) * from_.scale + from_.offset - to.offset) / to.scale
    return _divide(exact.numerator, exact.denominator)


def convert_difference(value: float, from_: Unit, to: Unit) -> float:
    """Convert a difference, spread or uncertainty: only the size of the units counts, not where their zero lies.

    >>> convert_difference(9.0, find_unit("°F"), find_unit("°C"))
    5.0
    """
    if from_.dimension != to.dimension and not from_.dimension[:11] == to.dimension[:11] == "temperature":
        raise _refuse_conversion(from_, to)
    over, under = _as_written(value)
    return _divide(
        over * from_.scale.numerator * to.scale.denominator, under * from_.scale.denominator * to.scale.numerator
    )


def _as_written(value: float) -> tuple[int, int]:
    """Give the shortest decimal of a double as a ratio of whole numbers."""
    try:
        return Decimal(repr(float(value))).as_integer_ratio()
    except (ValueError, OverflowError, TypeError):
        raise Refusal(
            "Read {read}, which is no finite number and can't be converted.", read=shown(repr(value))
        ) from None


def _divide(over: int, under: int) -> float:
    try:
        return over / under  # whole numbers divide with a single, correct rounding
    except OverflowError:
        raise Refusal("Read a value that is too large to be converted.") from None


def _refuse_conversion(from_: Unit, to: Unit) -> Refusal:
    first, second = (unit.dimension.replace("_", " ") for unit in (from_, to))
    return Refusal(
        "Read “{one}”, a unit of {first}, which can't be converted to “{other}”, a unit of {second}.",
        one=from_.symbol,
        first=first,
        other=to.symbol,
        second=second,
    )
