"""What was typed becomes a reading: number, unit, resolution, bracket, bound; or a sentence that says why not."""

import re
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from measurements.number import refuse_letter_digit, shown, split_number
from measurements.sentence import Refusal
from measurements.units import Unit, find_unit
from measurements.written_unit import WrittenUnit, check_alike, one_unit, read_unit

MOST_CHARACTERS = 200
MOST_REPEATS = 50
DEEPEST_VACUUM = -110_000  # Pa gauge; no barometer has ever stood higher than that

_BOUNDS: dict[str, Literal["below", "above"]] = {
    "<=": "below",
    ">=": "above",
    "<": "below",
    "≤": "below",
    ">": "above",
    "≥": "above",
}
_SIGNED = re.compile(r"([+\-\u2212])\s?(?=[0-9.,])")


@dataclass(frozen=True)
class Field:
    """What a field on the form asks for.

    Attributes
    ----------
    dimension : str
        A key of `units.DIMENSIONS`; a point and a difference of temperature are two of them.
    unit : str
        The unit shown beside the field, taken where none is typed.
    name : str
        What is read, for sentences: "valve lash".
    signed : bool
        Whether it may be below zero: a comparator's deviation, a temperature, an opening or closing.
    reference : "gauge" or "absolute"
        Of a pressure typed without saying which.
    """

    dimension: str
    unit: str
    name: str = "reading"
    signed: bool = False
    reference: Literal["gauge", "absolute"] = "gauge"


@dataclass(frozen=True)
class Reading:
    """One reading as typed and understood.

    Attributes
    ----------
    text : str
        This repeat as typed.
    value : float
        In `unit`; of a bracket its middle, of stacked leaves their sum.
    unit : Unit
        As typed, else the field's.
    si_value : float
        In SI units; of an absolute pressure the absolute.
    resolution : float
        In `unit`, implied by the places typed (0.30 → 0.01, 12 → 1, 3/8 → 1/8);
        of a bracket or stacked leaves the coarsest.
    absolute : bool
        Whether a pressure is absolute.
    half_width : float or None
        Of a bracket, in `unit`.
    bound : "below", "above" or None
        `<0.05 mm` proves only that the value lies below.
    leaves : int
        How many feeler leaves were stacked; of a bracket the larger of both sides.
    """

    text: str
    value: float
    unit: Unit
    si_value: float
    resolution: float | None
    absolute: bool = False
    half_width: float | None = None
    bound: Literal["below", "above"] | None = None
    leaves: int = 1


@dataclass(frozen=True)
class Entry:
    """All that was typed into one field: the text untouched, and the repeats in their one unit."""

    text: str
    unit: Unit
    unit_typed: bool
    readings: tuple[Reading, ...]


@dataclass(frozen=True)
class _Side:
    """A number, or stacked leaves, with the unit if one was written."""

    exact: Fraction
    step: Fraction
    leaves: int
    unit: WrittenUnit | None


@dataclass(frozen=True)
class _Repeat:
    """One repeat as typed: a side, or the two of a bracket."""

    text: str
    sides: tuple[_Side, ...]
    bound: Literal["below", "above"] | None
    unit: WrittenUnit | None


def read_entry(text: str, field: Field, *, decimal_mark: str | None = None) -> Entry:
    """Read what was typed into a field.

    Parameters
    ----------
    text : str
        `number [unit]`, several parted by `;` for repeats, `0.30..0.35` for a bracket, `0.30+0.05` for stacked
        leaves, `<` or `>` before it for a bound. At most 200 characters and 50 repeats.
    field : Field
        What is asked for.
    decimal_mark : "." or "," or None
        The shop's setting; see `number.split_number`.

    Raises
    ------
    Refusal
        For whatever is not such an entry; its sentence says what was read and what would be right.
        No text raises anything else.

    >>> [reading.value for reading in read_entry("0.41; 0.42; 0.41 mm", Field("length", "mm")).readings]
    [0.41, 0.42, 0.41]
    >>> read_entry("3/8 in", Field("length", "mm")).readings[0].si_value
    0.009525
    """
    usual = WrittenUnit(find_unit(field.unit, field.dimension), typed=False)
    if decimal_mark not in (None, ".", ","):
        raise Refusal("Read “{read}” as the shop's decimal mark; it is “.” or “,”.", read=shown(str(decimal_mark)))
    repeats = [_read_repeat(part.strip(), field, usual, decimal_mark) for part in _parted(text)]
    if len({repeat.bound for repeat in repeats}) > 1:
        raise Refusal(
            "Read “{read}”, where a bound stands beside a reading that is none; enter them apart.", read=shown(text)
        )
    unit = one_unit([repeat.unit for repeat in repeats], usual)
    if field.reference == "absolute" and unit.absolute is False:
        raise Refusal("Read “{read}”, a gauge pressure, where an absolute one is asked for.", read=shown(text))
    is_absolute = field.reference == "absolute" if unit.absolute is None else unit.absolute
    absolute = is_absolute and field.dimension == "pressure"
    readings = tuple(_reading(repeat, unit.unit, absolute, field) for repeat in repeats)
    return Entry(text, unit.unit, unit.typed, readings)


def _parted(text: object) -> list[str]:
    """Part a text into its repeats, after what can be wrong with any text."""
    if text is None or (isinstance(text, str) and not text.strip()):
        raise Refusal("Nothing was entered; write a number, or answer “not measured” with the reason.")
    if not isinstance(text, str):
        raise Refusal("Read a value of type {read}, not a text; write it as text.", read=type(text).__name__)
    if len(text) > MOST_CHARACTERS:
        raise Refusal("Read {count} characters; an entry has {most} at most.", count=len(text), most=MOST_CHARACTERS)
    if foreign := next((letter for letter in text if letter.isdecimal() and not letter.isascii()), None):
        raise Refusal(
            "Read “{read}” with the digit “{digit}”; write the digits 0 to 9.", read=shown(text), digit=foreign
        )
    repeats = text.split(";")
    if len(repeats) > MOST_REPEATS:
        raise Refusal("Read {count} repeats; an entry has {most} at most.", count=len(repeats), most=MOST_REPEATS)
    return repeats


def _read_repeat(text: str, field: Field, usual: WrittenUnit, decimal_mark: str | None) -> _Repeat:
    """Read one repeat: `number [unit]`, a bracket, or a bound."""
    if not text:
        raise Refusal("Read “;” without a number on both sides; repeats are written like 0.41; 0.42.")
    sign = next((sign for sign in _BOUNDS if text.startswith(sign)), "")
    parts = [part.strip() for part in re.split(r"(?<!\.)\.\.(?!\.)", text[len(sign) :])]
    if len(parts) > 2 or (sign and len(parts) > 1) or "" in parts:
        raise Refusal(
            "Read “{read}”; a bracket has two sides, like 0.30..0.35, and a bound has one, like <0.05.",
            read=shown(text),
        )
    sides = tuple(_read_side(part, field, usual, decimal_mark) for part in parts)
    stated = [side.unit for side in sides if side.unit]
    check_alike(stated)
    if len(sides) == 2 and sides[0].exact >= sides[1].exact:
        raise Refusal("Read “{read}”; the first side of a bracket is the smaller, like 0.30..0.35.", read=shown(text))
    return _Repeat(text, sides, _BOUNDS[sign] if sign else None, stated[0] if stated else None)


def _read_side(text: str, field: Field, usual: WrittenUnit, decimal_mark: str | None) -> _Side:
    """Read a signed number, or leaves stacked with +, and the unit behind."""
    sign = _SIGNED.match(text)
    if sign and not field.signed:
        raise Refusal(
            "Read “{read}”; {name} can't have a sign here; write it without.", read=shown(text), name=field.name
        )
    bare = text[sign.end() :] if sign else text
    leaves = [leaf.strip() for leaf in bare.split("+")] if not field.signed and field.dimension == "length" else [bare]
    if len(leaves) > 1 and "" in leaves:
        raise Refusal("Read “{read}”; stacked leaves are written like 0.30+0.05.", read=shown(text))
    numbers, units = [], []
    for leaf in leaves:
        try:
            number, rest = split_number(leaf, decimal_mark)
        except Refusal as refusal:
            raise refuse_letter_digit(text) or refusal from None
        numbers.append(number)
        if rest:
            units.append(read_unit(rest, text, field.dimension, usual))
    if len(leaves) > 1 and not all(number.exact for number in numbers):
        raise Refusal(
            "Read “{read}” with a leaf of no thickness; write the leaves that were stacked.", read=shown(text)
        )
    check_alike(units)
    exact = sum((number.exact for number in numbers), Fraction(0))
    negative = sign is not None and sign.group(1) != "+"
    step = max(number.step for number in numbers)
    return _Side(-exact if negative else exact, step, len(leaves), units[0] if units else None)


def _reading(repeat: _Repeat, unit: Unit, absolute: bool, field: Field) -> Reading:
    """Make the reading of a repeat, if nature allows its value."""
    lower, upper = repeat.sides[0], repeat.sides[-1]
    exact = (lower.exact + upper.exact) / 2
    si_exact = exact * unit.scale + unit.offset
    _check_possible(repeat, lower.exact * unit.scale + unit.offset, unit, absolute, field)
    return Reading(
        text=repeat.text,
        value=float(exact),
        unit=unit,
        si_value=float(si_exact),
        resolution=float(max(lower.step, upper.step)),
        absolute=absolute,
        half_width=float((upper.exact - lower.exact) / 2) if len(repeat.sides) == 2 else None,
        bound=repeat.bound,
        leaves=max(lower.leaves, upper.leaves),
    )


def _check_possible(repeat: _Repeat, lowest: Fraction, unit: Unit, absolute: bool, field: Field) -> None:
    """Refuse what can't be: below absolute zero, below a vacuum, or a bound under zero; `lowest` in SI units."""
    if (absolute or unit.dimension == "temperature") and lowest < 0:
        raise Refusal("Read “{read}”, which is below absolute zero; is the sign right?", read=shown(repeat.text))
    if unit.dimension == "pressure" and lowest < DEEPEST_VACUUM:
        raise Refusal(
            "Read “{read}”, which is deeper than a vacuum can be; is the unit right?", read=shown(repeat.text)
        )
    if repeat.bound == "below" and lowest == 0 and not field.signed:
        raise Refusal(
            "Read “{read}”, but nothing lies below 0 here; write the smallest that was tried.", read=shown(repeat.text)
        )
