"""Walking a JSON document: each node knows its path, and every error found is kept, so that all are told at once."""

import json
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from math import isfinite

from measurements.entry import Field, read_entry
from measurements.sentence import Refusal, Sentence, say

MOST_BYTES = 10_000_000
DEEPEST = 50


class NumberAsTyped(float):
    """A JSON number that remembers its digits: 0.30 was typed to hundredths."""

    text: str

    def __new__(cls, text: str) -> "NumberAsTyped":
        number = super().__new__(cls, text)
        number.text = text
        return number


class Unjudgeable(ValueError):
    """The document can't be judged; `errors` lists (path, sentence)."""

    def __init__(self, errors: list[tuple[str, Sentence]]) -> None:
        self.errors = errors
        super().__init__("; ".join(f"{path}: {sentence}" for path, sentence in errors))


def load(raw: bytes) -> object:
    """Read JSON strictly: bounded, UTF-8, no name twice, no NaN; numbers remember their digits.

    Raises
    ------
    Unjudgeable
        With one error at path "".
    """
    if len(raw) > MOST_BYTES:
        raise Unjudgeable(
            [("", say("The document has {n} bytes; at most {most} are read.", n=len(raw), most=MOST_BYTES))]
        )
    try:
        return json.loads(
            raw.decode("utf-8-sig"), parse_float=NumberAsTyped, parse_int=_whole, parse_constant=_refuse_constant,
            object_pairs_hook=_once_each,
        )  # fmt: skip
    except Refusal as refusal:
        raise Unjudgeable([("", refusal.sentence)]) from refusal
    except UnicodeDecodeError as error:
        raise Unjudgeable(
            [("", say("The document is not UTF-8 text: byte {place} can't be read.", place=error.start))]
        ) from error
    except json.JSONDecodeError as error:
        told = say("The document is not JSON: {what} in line {line}, column {column}.",
                   what=error.msg, line=error.lineno, column=error.colno)  # fmt: skip
        raise Unjudgeable([("", told)]) from error
    except RecursionError as error:
        raise Unjudgeable([("", say("The document is nested too deeply to be one."))]) from error


def _whole(text: str) -> int | NumberAsTyped:
    return int(text) if len(text) <= 15 else NumberAsTyped(text)


def _refuse_constant(name: str) -> None:
    raise Refusal("The document holds {name}, which is no number in JSON.", name=name)


def _once_each(pairs: list[tuple[str, object]]) -> dict[str, object]:
    found = dict(pairs)
    if len(found) < len(pairs):
        names = [name for name, _ in pairs]
        twice = next(name for name in names if names.count(name) > 1)
        raise Refusal("The name {name!r} stands twice in one object: one of the two would be lost.", name=twice[:60])
    return found


@dataclass
class Node:
    """A value of the document, its path, and the list that errors go to."""

    value: object
    path: str
    errors: list[tuple[str, Sentence]]

    def wrong(self, template: str, **values: object) -> None:
        """Keep an error at this path."""
        self.errors.append((self.path, Sentence(template, values)))

    def told(self) -> str:
        """The value as an error quotes it: short, and as JSON writes it."""
        text = json.dumps(self.value, ensure_ascii=False, default=str)
        return text if len(text) <= 60 else text[:57] + "…"

    def is_object(self, known: Iterable[str] | None = None, required: Iterable[str] = ()) -> bool:
        """Tell whether it is an object; keep errors for names unknown and missing."""
        if not isinstance(self.value, dict):
            self.wrong("Read {read} where an object in braces belongs.", read=self.told())
            return False
        known = None if known is None else tuple(known)
        for name in self.value:
            if known is not None and name not in known:
                self.child(name).wrong(
                    "{name!r} is no field here; there are {known}.", name=name[:60], known=", ".join(known)
                )
        for name in required:
            if name not in self.value:
                self.child(name).wrong("{name} is missing.", name=name)
        return True

    def has(self, name: str) -> bool:
        """Tell whether a field is given."""
        return isinstance(self.value, dict) and name in self.value

    def child(self, name: str) -> "Node":
        """The field of an object; None where it is missing."""
        value = self.value.get(name) if isinstance(self.value, dict) else None
        return Node(value, f"{self.path}.{name}" if self.path else name, self.errors)

    def fields(self) -> Iterator[tuple[str, "Node"]]:
        """All fields of an object; an error when it is none."""
        if self.is_object():
            for name in self.value:
                yield name, self.child(name)

    def items(self, most: int | None = None) -> list["Node"]:
        """Members of a list; an error when it is none or has more than `most`."""
        if not isinstance(self.value, list):
            self.wrong("Read {read} where a list in brackets belongs.", read=self.told())
            return []
        if most is not None and len(self.value) > most:
            self.wrong("There are {n}; at most {most} are judged at once.", n=len(self.value), most=most)
            return []
        return [Node(value, f"{self.path}[{place}]", self.errors) for place, value in enumerate(self.value)]

    def text(self, longest: int = 500) -> str | None:
        """A text that isn't empty."""
        if not isinstance(self.value, str) or not self.value.strip():
            self.wrong("Read {read} where a text belongs.", read=self.told())
            return None
        if len(self.value) > longest:
            self.wrong("The text has {n} characters; at most {most} are kept.", n=len(self.value), most=longest)
            return None
        return self.value

    def choice(self, choices: Iterable[str]) -> str | None:
        """One of some words."""
        choices = tuple(choices)
        if isinstance(self.value, str) and self.value in choices:
            return self.value
        self.wrong("Read {read}; it must be one of {choices}.", read=self.told(), choices=", ".join(choices))
        return None

    def flag(self) -> bool | None:
        """True or false."""
        if isinstance(self.value, bool):
            return self.value
        self.wrong("Read {read} where true or false belongs.", read=self.told())
        return None

    def whole(self, least: int, most: int) -> int | None:
        """A whole number within bounds."""
        if isinstance(self.value, int) and not isinstance(self.value, bool) and least <= self.value <= most:
            return self.value
        self.wrong(
            "Read {read}; a whole number from {least} to {most} belongs here.", read=self.told(), least=least, most=most
        )
        return None

    def number(self, least: float, most: float, above: bool = False) -> float | None:
        """A plain number within bounds; `above` leaves the lower bound itself out."""
        value = self.value
        if isinstance(value, int | float) and not isinstance(value, bool) and isfinite(value):
            value = float(value)
            if least <= value <= most and not (above and value == least):
                return value
        bounds = "above {least} and up to {most}" if above else "from {least} to {most}"
        self.wrong("Read {read}; a number " + bounds + " belongs here.", read=self.told(), least=least, most=most)
        return None

    def day(self) -> date | None:
        """A date written 2026-05-02."""
        try:
            if isinstance(self.value, str) and len(self.value) == 10:
                return date.fromisoformat(self.value)
        except ValueError:
            pass
        self.wrong("Read {read}; a date is written year-month-day, such as 2026-05-02.", read=self.told())
        return None

    def entry(self, field: Field, decimal_mark: str | None = None):  # noqa: ANN201 - Entry, named in the docstring
        """A typed entry (`measurements.entry.Entry`); a bare JSON number is read with the digits it was written with."""
        typed = self.as_typed()
        if typed is None:
            self.wrong('Read {read} where a reading such as "0.30 mm" belongs.', read=self.told())
            return None
        try:
            # a JSON number is written with a point, whatever the shop's decimal mark
            return read_entry(typed, field, decimal_mark=decimal_mark if isinstance(self.value, str) else ".")
        except Refusal as refusal:
            self.errors.append((self.path, refusal.sentence))
            return None

    def as_typed(self) -> str | None:
        """The text of a text or number, digit for digit."""
        if isinstance(self.value, NumberAsTyped):
            return self.value.text
        if isinstance(self.value, str):
            return self.value
        if isinstance(self.value, float):  # plain data that never was JSON text
            return format(Decimal(repr(self.value)), "f") if isfinite(self.value) else str(self.value)
        return str(self.value) if isinstance(self.value, int) and not isinstance(self.value, bool) else None

    def quantity(self, field: Field, decimal_mark: str | None = None, above: float | None = None):  # noqa: ANN201
        """One exact figure (`measurements.entry.Reading`): no repeats, no bracket, nothing censored."""
        entry = self.entry(field, decimal_mark)
        if entry is None:
            return None
        reading = entry.readings[0]
        if len(entry.readings) > 1 or reading.bound or reading.half_width is not None:
            self.wrong("Read {read}; one figure belongs here.", read=self.told())
            return None
        if above is not None and not reading.si_value > above:
            self.wrong("Read {read}; it must be above {above}.", read=self.told(), above=above)
            return None
        return reading


def named(names: Mapping[str, object] | Iterable[str]) -> str:
    """Names as an error lists them, not too many."""
    listed = list(names)
    return ", ".join(listed[:12]) + (" …" if len(listed) > 12 else "")
