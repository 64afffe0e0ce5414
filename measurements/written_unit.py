"""The unit behind a number: which it is, whether it says gauge or absolute, and one for a whole entry."""

import re
from collections.abc import Iterable
from dataclasses import dataclass
from dataclasses import field as attribute

from measurements.number import refuse_letter_digit, shown
from measurements.sentence import Refusal
from measurements.units import Unit, find_unit

_SPAN = re.compile(r"(?:[-\u2010-\u2015\u2212~…]|to\b|\.{3,})\s*[.,]?[0-9]")
_WHICH = re.compile(  # "psia", "bar g", "kPa (abs)"; a lone letter needs a space unless the unit is one that takes it
    r"(?P<unit>.*(?:psi|bar|pa|cm2|cm²|hg|h2o|h₂o))(?P<tied>abs|a|g)"
    r"|(?:(?P<rest>.+?)\s+|)(?P<word>absolute|abs|gauge|gage)\.?"
    r"|(?P<before>.+?)(?:\s+(?P<letter>a|g)|\s*\((?P<inside>absolute|abs|gauge|gage|a|g)\))",
    re.IGNORECASE,
)


@dataclass(frozen=True)
class WrittenUnit:
    """A unit as written, and whether it says absolute (True), gauge (False) or neither (None)."""

    unit: Unit
    absolute: bool | None = None
    typed: bool = attribute(default=True, compare=False)

    def __str__(self) -> str:
        return self.unit.symbol + {None: "", True: " abs", False: " gauge"}[self.absolute]


def read_unit(rest: str, text: str, dimension: str, usual: WrittenUnit) -> WrittenUnit:
    """Read what stands behind the number of `text`; of a pressure also which it is, gauge or absolute."""
    if _SPAN.match(rest):
        raise Refusal(
            "Read “{read}”; a bracket is written 0.30..0.35, a fraction 1 3/8, and repeats 0.41; 0.42.",
            read=shown(text),
        )
    if rest[0].isnumeric() and not rest.startswith("1/"):
        raise Refusal(
            "Read “{read}” with “{rest}” behind the number; write only its unit there.",
            read=shown(text),
            rest=shown(rest),
        )
    try:
        return WrittenUnit(find_unit(rest, dimension))
    except Refusal as refusal:
        which = _WHICH.fullmatch(rest) if dimension == "pressure" else None
        if which is None:
            raise refuse_letter_digit(text) or refusal from None
    word = which["tied"] or which["word"] or which["letter"] or which["inside"]
    unit = which["unit"] or which["rest"] or which["before"]
    absolute = word.casefold().startswith("a")
    if not unit:
        return WrittenUnit(usual.unit, absolute, typed=False)
    return WrittenUnit(find_unit(unit, "pressure"), absolute)


def check_alike(units: Iterable[WrittenUnit]) -> None:
    """Refuse two different units in one entry."""
    different = list(dict.fromkeys(units))
    if len(different) > 1:
        raise Refusal(
            "Read two units, {one} and {other}, in one entry; write one for all.",
            one=str(different[0]),
            other=str(different[1]),
        )


def one_unit(units: list[WrittenUnit | None], usual: WrittenUnit) -> WrittenUnit:
    """Give the unit of all repeats: behind each, behind the last, or nowhere, when it is the field's."""
    stated = [unit for unit in units if unit]
    check_alike(stated)
    if not stated:
        return usual
    if units[-1] is None and stated[0] != usual:
        raise Refusal(
            "Read “{unit}” behind one repeat but not behind the last; write it behind the last, for all.",
            unit=str(stated[0]),
        )
    return stated[-1]
