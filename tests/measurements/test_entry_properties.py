"""Any text gives the right value or a sentence: never a crash, never another value, never a factor of ten.

`meaning` below is a second, independent reading of the grammar, by decimal arithmetic and one pattern for each way of
writing; what `read_entry` takes must be what it says. It is strict, and knows no unit but those of length.
"""

import re
from decimal import Decimal
from fractions import Fraction

from hypothesis import assume, example, given
from hypothesis import strategies as st

from measurements.entry import Entry, Field, read_entry
from measurements.number import write_number
from measurements.sentence import Refusal
from measurements.unit_words import OFFERED

SPACES = " \u00a0\u202f\u2009"
SIZES = {  # metres
    "": "0.001", "mm": "0.001", "µm": "0.000001", "um": "0.000001", "in": "0.0254", '"': "0.0254", "thou": "0.0000254",
    "cm": "0.01", "m": "1", "inch": "0.0254", "ins": "0.0254", "µ": "0.000001",
}  # fmt: skip
GAP, DEVIATION = Field("length", "mm", "gap"), Field("length", "mm", "deviation", signed=True)


def number(text: str, mark: str | None) -> Fraction | None:
    """Read an unsigned number strictly; None when it is none or has two meanings."""
    grouped = re.sub(f"[{SPACES}]", " ", text)
    if found := re.fullmatch(r"(?:(\d+) )?(\d+)/(\d+)", grouped, re.ASCII):
        whole, over, under = (int(part or 0) for part in found.groups())
        return whole + Fraction(over, under) if over < under <= 128 else None
    plain = r"\d*[.,]\d+|[1-9]\d{0,2}(?: \d{3})+(?:[.,]\d+)?|0|[1-9]\d*"
    meanings = set()
    if re.fullmatch(plain, grouped, re.ASCII):
        meanings.add(Decimal(grouped.replace(" ", "").replace(",", ".")))
    for point, group in (".,", ",."):
        if re.fullmatch(rf"[1-9]\d{{0,2}}(?:\{group}\d{{3}})+(?:\{point}\d+)?", text, re.ASCII):
            meaning = Decimal(text.replace(group, "").replace(point, "."))
            if mark == point:
                meanings = {meaning}
            elif mark is None and not (point == "," and text.count(".") == 1 and "," not in text):
                return None
    return Fraction(meanings.pop()) if len(meanings) == 1 else None


def side(text: str, field: Field, mark: str | None) -> tuple[Fraction, set[str]] | None:
    """Read a signed number or stacked leaves, and the units behind."""
    sign = re.match(f"([-−+])[{SPACES}]?", text) if field.signed else None
    total, units = Fraction(0), set()
    for leaf in [text[sign.end() :]] if sign else [text] if field.signed else text.split("+"):
        found = re.fullmatch(rf"\s*([0-9.,/{SPACES}]*[0-9])\s*([^0-9.,]*?)\.?\s*", leaf)
        exact = found and number(found[1], mark)
        if exact is None or found[2].replace("μ", "µ").lower() not in SIZES:
            return None
        total += exact
        units.add(found[2].replace("μ", "µ").lower())
    return (-total if sign and sign[1] != "+" else total), units - {""}


def meaning(text: str, field: Field, mark: str | None) -> list[tuple[Fraction, Fraction | None]] | None:
    """Read a whole entry: [(value, half-width)] in metres, or None."""
    readings, units = [], set()
    for repeat in text.split(";"):
        parts = [side(part.strip(), field, mark) for part in re.sub(r"^\s*(?:[<>]=?|[≤≥])", "", repeat).split("..")]
        if None in parts or len(parts) > 2:
            return None
        units |= set.union(*(part[1] for part in parts))
        readings.append([part[0] for part in parts])
    if len({SIZES[unit] for unit in units}) > 1:
        return None
    size = Fraction(SIZES[units.pop() if units else ""])
    return [
        ((one[0] + one[-1]) / 2 * size, (one[1] - one[0]) / 2 * size if len(one) == 2 else None) for one in readings
    ]


def read(text: object, field: Field, mark: str | None = None) -> Entry | None:
    try:
        return read_entry(text, field, decimal_mark=mark)
    except Refusal as refusal:
        assert str(refusal) and "\n" not in str(refusal)
        return None


def agrees(entry: Entry, right: list[tuple[Fraction, Fraction | None]]) -> bool:
    """Tell whether an entry says the same as the second reading, to the last bit in SI units."""
    widths = [
        reading.half_width and Fraction(repr(reading.half_width)) * entry.unit.scale for reading in entry.readings
    ]
    return [reading.si_value for reading in entry.readings] == [float(value) for value, _ in right] and all(
        (width is None) == (one[1] is None) and abs((width or 0) - (one[1] or 0)) <= Fraction(1, 10**12) * (one[1] or 1)
        for width, one in zip(widths, right, strict=True)
    )


placed = st.builds(lambda n, places: Decimal(n).scaleb(-places), st.integers(0, 99999999), st.integers(0, 6))
marks = st.sampled_from([None, ".", ","])
units = st.sampled_from(["", "mm", " mm", "mm ", " µm", " μm", '"', " in", " thou", " MM", "\u00a0mm", " mm."])


def spelled(number: Decimal, mark: str, space: str, shop: str | None, leading: bool) -> str:
    """Spell a number in one of the grammar's ways; `mark` is the decimal mark, `space` groups thousands or is ""."""
    whole, _, places = f"{number:f}".partition(".")
    if space and len(whole) > 3:
        whole = f"{int(whole):,}".replace(",", space)
    elif len(whole) <= 3 and len(places) == 3 and whole != "0" and mark != (shop or "."):
        mark = shop or "."  # this one has two meanings
    if not leading and whole == "0" and places:
        whole = ""
    return whole + (mark + places if places else "")


spellings = st.tuples(st.sampled_from(".,"), st.sampled_from(["", *SPACES]), st.booleans())


@given(placed, spellings, units, marks)
def test_every_way_of_writing_a_number_gives_that_number(exact, spelling, unit, shop):
    mark, space, leading = spelling
    text = spelled(exact, mark, space, shop, leading) + unit

    entry = read_entry(text, GAP, decimal_mark=shop)

    size = Fraction(SIZES[unit.strip(" \u00a0.").lower().replace("μ", "µ")])
    assert entry.readings[0].value == float(exact)
    assert entry.readings[0].si_value == float(Fraction(exact) * size)
    assert entry.readings[0].resolution == float(Decimal(1).scaleb(min(exact.as_tuple().exponent, 0)))


@given(placed, st.sampled_from("+-−"), st.sampled_from(["", " "]), marks)
def test_sign_is_kept_where_it_may_be_and_refused_where_not(exact, sign, space, shop):
    text = sign + space + spelled(exact, ".", "", shop, True)
    assume(not (shop == "," and re.fullmatch(r"[1-9]\d{0,2}\.\d{3}", text[1:].strip())))

    assert read(text, DEVIATION, shop).readings[0].value == (float(exact) if sign == "+" else -float(exact))
    assert read(text, GAP, shop) is None


@given(
    st.integers(0, 400),
    st.integers(1, 127),
    st.sampled_from([2, 4, 8, 16, 32, 64, 128]),
    st.sampled_from(["", " in", '"']),
)
def test_fraction_of_a_rule_gives_its_value_and_step(whole, over, under, unit):
    assume(over < under)

    reading = read_entry(f"{whole} {over}/{under}{unit}" if whole else f"{over}/{under}{unit}", GAP).readings[0]

    assert (reading.value, reading.resolution) == (whole + over / under, 1 / under)


@given(st.lists(placed, min_size=1, max_size=12), st.sampled_from(["", " mm", " in"]), st.booleans())
def test_repeats_share_the_unit_behind_the_last(values, unit, everywhere):
    texts = [f"{value:f}" for value in values]
    text = "; ".join(one + unit for one in texts) if everywhere else "; ".join(texts) + unit

    entry = read_entry(text, GAP)

    assert [reading.value for reading in entry.readings] == [float(value) for value in values]
    assert entry.unit.symbol == (unit.strip() or "mm")


@given(placed, placed, st.sampled_from(["", " mm", " thou"]), st.booleans())
def test_bracket_gives_its_middle_or_is_refused_when_turned_about(one, other, unit, both):
    entry = read(f"{one:f}{unit if both else ''}..{other:f}{unit}", GAP)

    if one >= other:
        assert entry is None
    else:
        assert entry.readings[0].value == float((Fraction(one) + Fraction(other)) / 2)
        assert entry.readings[0].half_width == float((Fraction(other) - Fraction(one)) / 2)


@given(st.lists(placed.filter(bool), min_size=2, max_size=4), marks)
def test_stacked_leaves_add_up(leaves, shop):
    text = "+".join(spelled(leaf, ".", "", shop, True) for leaf in leaves)
    assume(not (shop == "," and re.search(r"(?<!\d)[1-9]\d{0,2}\.\d{3}(?!\d)", text)))

    reading = read_entry(text, GAP, decimal_mark=shop).readings[0]

    assert (reading.value, reading.leaves) == (float(sum(map(Fraction, leaves))), len(leaves))


@given(placed, st.integers(0, 6), st.sampled_from(".,"))
def test_number_written_for_display_is_read_back(exact, decimals, mark):
    text = write_number(float(exact), decimals, mark)

    assert read_entry(text, GAP, decimal_mark=mark).readings[0].value == float(f"{float(exact):.{decimals}f}")


BEGINNINGS = ["0.30 mm", "0,30", "1 250.5", "1,234", "1.234,5 mm", "3/8 in", '1 3/8"', "0.30..0.35 mm", "0.41; 0.42; 0.41 mm",
              "<0.05 mm", ">= 12 thou", "0.30+0.05 mm", "-0.012", "+0.02 mm", "12 µm", "1.234.567,8", "100 in"]  # fmt: skip
KEYS = '0123456789.,;/+-−<>≤ \u00a0mµinthou"eEOl²٣x'


@st.composite
def mistyped(draw) -> str:
    """Take something well typed, and let a few keys go astray."""
    text = draw(st.sampled_from(BEGINNINGS))
    for _ in range(draw(st.integers(1, 4))):
        at = draw(st.integers(0, len(text)))
        dropped = draw(st.integers(0, 2))
        text = text[:at] + draw(st.sampled_from(["", *KEYS])) + text[at + dropped :]
    return text


@given(mistyped(), st.sampled_from([GAP, DEVIATION]), marks)
@example("0.41 0.42", GAP, None)
@example("1 250 250", GAP, ",")
@example("0 250", GAP, None)
@example("0.30...35", GAP, None)
@example("1²", GAP, None)
@example("1.234", GAP, ",")
def test_what_was_mistyped_is_refused_or_means_what_a_second_reading_says(text, field, shop):
    entry = read(text, field, shop)

    if entry is not None:
        right = meaning(text, field, shop)
        assert right is not None, f"{text!r} was read as {entry.readings}"
        assert agrees(entry, right), f"{text!r} was read as {entry.readings}, not {right}"


@given(st.text(alphabet=KEYS, max_size=14), st.sampled_from([GAP, DEVIATION]), marks)
def test_keys_struck_at_random_are_refused_or_mean_what_a_second_reading_says(text, field, shop):
    entry = read(text, field, shop)

    if entry is not None:
        right = meaning(text, field, shop)
        assert right is not None, f"{text!r} was read as {entry.readings}"
        assert agrees(entry, right), f"{text!r} was read as {entry.readings}, not {right}"


@given(
    st.text(max_size=250) | st.none() | st.integers() | st.floats() | st.binary() | st.lists(st.text()) | st.booleans(),
    st.sampled_from(list(OFFERED)),
    st.booleans(),
    marks,
)
@example("\ud800", "length", False, None)
@example("1" * 200, "length", False, None)
@example("1;" * 100, "length", False, None)
@example("0." + "0" * 197 + "1", "length", False, None)
@example("{0}{x}{", "pressure", False, None)
@example("1/0", "length", False, None)
@example("1 1/0 bar abs(", "pressure", True, ",")
def test_anything_at_all_is_read_or_refused_and_never_crashes(anything, dimension, signed, shop):
    field = Field(dimension, OFFERED[dimension][0][0], signed=signed)

    entry = read(anything, field, shop)

    assert entry is None or (entry.text == anything and all(reading.text in anything for reading in entry.readings))
