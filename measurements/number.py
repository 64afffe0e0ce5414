"""A number as a person types it: which texts are one, what each means exactly, and how fine it was written."""

import re
from dataclasses import dataclass
from fractions import Fraction

from measurements.sentence import Refusal

MOST_DIGITS = 15  # a double holds every decimal of 15 significant digits (C's DBL_DIG), of 16 not
SPACES = " \u00a0\u202f\u2009"  # between groups of three: space, no-break space, narrow no-break space, thin space

_MIXED = re.compile(rf"(?:([0-9]+)[{SPACES}])?([0-9]+)/([0-9]+)(?![0-9.,/])")
_RUN = re.compile(rf"[0-9.,]*[0-9][0-9.,]*(?:[{SPACES}](?!1/[^0-9])[0-9.,]+)*")  # "1/" may begin a unit: 1/K
_SPACED = re.compile(r"[1-9][0-9]{0,2}(?: [0-9]{3})+(?:[.,][0-9]+)?")
_POWER = re.compile(r"[eE][+\-\u2212]?[0-9]|[\^]|\*\*|[x×·*]\s?10")


@dataclass(frozen=True, slots=True)
class Number:
    """An exact number, and the step of its last written place (0.30 → 1/100, 12 → 1, 3/8 → 1/8)."""

    exact: Fraction
    step: Fraction


def split_number(text: str, decimal_mark: str | None = None) -> tuple[Number, str]:
    """Read the number that a text without sign begins with; give it and the rest, which should be a unit.

    Parameters
    ----------
    text : str
        Stripped, without sign.
    decimal_mark : "." or "," or None
        The shop's setting. It settles what `1,234` and `1.234,5` mean; without it these are refused.
        A mark that can only be the decimal mark (`0,3`, `0.30`) is read as one under any setting.

    Raises
    ------
    Refusal
        No number there, or one that has two meanings, is badly grouped, unfinished, an exponent or too long.

    >>> split_number("1 3/8 in")
    (Number(exact=Fraction(11, 8), step=Fraction(1, 8)), 'in')
    """
    if fraction := _MIXED.match(text):
        number, written = _read_fraction(fraction), fraction
    elif run := _RUN.match(text):
        number, written = _read_run(run.group(), decimal_mark), run
    else:
        raise refuse_no_number(text)
    rest = text[written.end() :].strip()
    if _POWER.match(rest):
        raise Refusal("Read “{read}”, which has an exponent; write the number out, like 0.0012.", read=shown(text))
    return number, rest


def _read_fraction(found: re.Match[str]) -> Number:
    """Read `3/8` or `1 3/8`: a proper fraction of at most 128ths, as rules and drills are marked."""
    whole, over, under = (int(part) if part and len(part) <= MOST_DIGITS else None for part in found.groups())
    if over is None or under is None or (whole is None and found.group(1)) or not 0 < under <= 128 or over >= under:
        raise Refusal(
            "Read “{read}”, which is no fraction of a rule; write like 3/8 or 1 3/8, the lower number up to 128.",
            read=shown(found.group()),
        )
    return Number((whole or 0) + Fraction(over, under), Fraction(1, under))


def _read_run(run: str, decimal_mark: str | None) -> Number:
    """Read digits with their marks and spaces."""
    plain = re.sub(f"[{SPACES}]", " ", run)
    if " " in plain:
        if not _SPACED.fullmatch(plain):
            raise Refusal(
                "Read “{read}”: a space may only group thousands in threes, like 1 250; repeats are parted by “;”.",
                read=shown(run),
            )
        return _exact(plain.replace(" ", "").replace(",", "."), run)
    commas, points = plain.count(","), plain.count(".")
    if not commas and not points:
        return _exact(plain, run)
    last = plain[max(plain.rfind(","), plain.rfind("."))]
    other = "." if last == "," else ","
    if commas and points:
        return _read_both(plain, last, other, decimal_mark)
    if commas + points > 1:
        return _read_groups(plain, last, decimal_mark)
    return _read_one_mark(plain, last, decimal_mark)


def _read_one_mark(run: str, mark: str, decimal_mark: str | None) -> Number:
    """Read a run with a single mark: `0.30`, `.30`, `0,3`, or `1,234`, which only the shop's setting can settle."""
    whole, _, places = run.partition(mark)
    if not places:
        raise Refusal("Read “{read}”, which ends in its decimal mark; is a digit missing? Write 12 or 12.0.", read=run)
    decimal = whole + "." + places
    if not _is_grouped(run, mark) or decimal_mark == mark or (decimal_mark is None and mark == "."):
        return _exact(decimal, run)
    if decimal_mark is None:
        raise Refusal(
            "Read “{read}”, which is {small} where the comma is the decimal mark and {large} where it groups "
            "thousands; write {small} or {large}.",
            read=run,
            small=decimal,
            large=whole + places,
        )
    return _exact(whole + places, run)


def _read_groups(run: str, mark: str, decimal_mark: str | None) -> Number:
    """Read a run with one mark several times, `1.234.567`: groups, if the shop's decimal mark is the other one."""
    if not _is_grouped(run, mark) or decimal_mark in (None, mark):
        raise Refusal("Read “{read}”, which has more than one decimal mark; write like 1250.5.", read=shown(run))
    return _exact(run.replace(mark, ""), run)


def _read_both(run: str, last: str, other: str, decimal_mark: str | None) -> Number:
    """Read a run with both marks, `1.234,5`: the last is the decimal mark, if groups and the shop's setting agree."""
    whole, _, places = run.rpartition(last)
    if not places or last in whole or not _is_grouped(whole, other):
        raise Refusal("Read “{read}”, whose points and commas don't fit together; write like 1250.5.", read=shown(run))
    joined = whole.replace(other, "")
    if decimal_mark is None:
        first, _, later = whole.rpartition(other)
        raise Refusal(
            "Read “{read}”, which is {large} if “{last}” is the decimal mark and {small} if “{other}” is; "
            "write one mark only.",
            read=shown(run),
            large=f"{joined}.{places}",
            small=f"{first.replace(other, '')}.{later}{places}",
            last=last,
            other=other,
        )
    if decimal_mark != last:
        raise Refusal(
            "Read “{read}”, where “{last}” stands as the decimal mark, but this shop writes “{mark}”; "
            "write one mark only.",
            read=shown(run),
            last=last,
            mark=decimal_mark,
        )
    return _exact(f"{joined}.{places}", run)


def _is_grouped(run: str, mark: str) -> bool:
    """Tell whether `mark` stands where thousands are grouped: 1 to 3 digits, no leading zero, then threes."""
    return re.fullmatch(r"[1-9][0-9]{0,2}(?:" + re.escape(mark) + r"[0-9]{3})+", run) is not None


def _exact(decimal: str, read: str) -> Number:
    """Make the exact number of a plain decimal text, if a double holds all its digits."""
    whole, _, places = decimal.partition(".")
    if len((whole + places).lstrip("0")) > MOST_DIGITS or len(places) > MOST_DIGITS:
        raise Refusal(
            "Read “{read}”, which has more digits than can be kept; write {most} at most.",
            read=shown(read),
            most=MOST_DIGITS,
        )
    if not places and len(whole) > 1 and whole.startswith("0"):
        raise Refusal(
            "Read “{read}”, a whole number that begins with 0; is the decimal mark missing?", read=shown(read)
        )
    return Number(Fraction(int(whole + places), 10 ** len(places)), Fraction(1, 10 ** len(places)))


def refuse_no_number(text: str) -> Refusal:
    """Make the refusal for a text that begins with no number, by what it looks like."""
    word = text.casefold().strip("+\u2212-# ")
    if word.startswith(("nan", "inf", "∞")):
        return Refusal("Read “{read}”, which is not a number that can be measured; write digits.", read=shown(text))
    if word in ("", "none", "null", "n/a", "na", "—", "–", "nil", "?"):
        return Refusal(
            "Read “{read}”, which is no reading; if it was not measured, answer “not measured” with the reason.",
            read=shown(text),
        )
    return refuse_letter_digit(text) or Refusal(
        "Read “{read}”, which doesn't begin with a number; write the number first, then the unit.", read=shown(text)
    )


def refuse_letter_digit(text: str) -> Refusal | None:
    """Make the refusal for a letter O, l or I where a digit should be, if there is one."""
    found = re.search(r"(?<![A-Za-z])[OoQlI|](?=[.,]?[0-9])|(?<=[0-9.,])[OoQlI|](?![A-Za-z])", text)
    return found and Refusal(
        "Read “{read}” with the letter “{letter}” among the digits; write 0 or 1.",
        read=shown(text),
        letter=found.group(),
    )


def shown(text: str) -> str:
    """Give a typed text fit to stand in a sentence: short, and nothing unprintable in it."""
    tidy = "".join(letter if letter.isprintable() else "�" for letter in text[:41])
    return tidy if len(text) <= 40 else tidy[:40] + "…"


def write_number(value: float, decimals: int, decimal_mark: str = ".") -> str:
    """Write a number with a fixed count of decimals, as the grammar reads it back: no groups, a true minus sign.

    >>> write_number(-0.3, 2, ",")
    '−0,30'
    """
    text = f"{value:.{decimals}f}"
    if float(text) == 0:
        text = text.lstrip("-")
    return text.replace("-", "\u2212").replace(".", decimal_mark)
