"""A limit line's figures as they are typed: units written out, and everything read as the judgement will read it."""

from collections.abc import Iterable

from logbook.people.models import Shop
from measurements.document import Node
from measurements.entry import Field, read_entry
from measurements.intake.limits import read_limits
from measurements.intake.shop import Shop as Ways
from measurements.sentence import Refusal, Sentence, say

from .models import LimitLine
from .queries.limits import characteristics, kinds


def with_units(
    typed: dict[str, str], characteristic: str, shop: Shop
) -> tuple[dict[str, str], list[tuple[str, Sentence]]]:
    """Write the unit behind every figure of a line: the one typed with any of them; none typed at all is refused.

    Parameters
    ----------
    typed : dict of name to text
        The figures of a line; empty ones stay empty.

    Returns
    -------
    (figures, problems)
        Figures as typed, with their unit; problems each with the field at fault.

    >>> with_units({"lower": "0.25", "upper": "0.35 mm"}, "valve_lash.intake", Shop())[0]
    {'lower': '0.25 mm', 'upper': '0.35 mm'}
    """
    _kind, one = characteristics()[characteristic]
    entries, found = {}, []
    for name, text in typed.items():
        if not text:
            continue
        try:
            entries[name] = read_entry(text, Field(one.dimension, one.unit, one.title.lower(), signed=one.signed),
                                       decimal_mark=shop.decimal_mark)  # fmt: skip
        except Refusal as refusal:
            found.append((name, refusal.sentence))
    unit = next((str(entry.unit) for entry in entries.values() if entry.unit_typed), None)
    if entries and unit is None and one.unit != "1":
        first = next(iter(entries))
        found.append((first, say("Read “{read}” without a unit; write it behind at least one figure, such as {read} {unit}.",
                                 read=typed[first].strip(), unit=one.unit)))  # fmt: skip
    bare = {name for name, entry in entries.items() if not entry.unit_typed and unit}
    return {name: f"{text.strip()} {unit}" if name in bare else text for name, text in typed.items()}, found


def problems(lines: Iterable[LimitLine], shop: Shop) -> list[tuple[int, str, Sentence]]:
    """Say what can't be read in the lines of a sheet: the line's place, its field (or empty), the sentence."""
    errors: list[tuple[str, Sentence]] = []
    documents = [line.as_document() for line in lines]
    read_limits(Node(documents, "limits", errors), Ways(shop.decimal_mark), kinds(), None)
    found = []
    for path, sentence in errors:
        place, _bracket, field = path.removeprefix("limits[").partition("]")
        found.append((int(place), field.removeprefix("."), sentence))
    return found
