"""What was typed: every vector of the shared file, and the sentences that a person reads."""

import ast
import json
from inspect import getsource
from pathlib import Path

import pytest

from measurements import entry, number, units, written_unit
from measurements.entry import Field, read_entry
from measurements.number import write_number
from measurements.sentence import Refusal

VECTORS = json.loads((Path(__file__).parents[2] / "fixtures" / "entry_vectors.json").read_text(encoding="utf-8"))
LASH = Field("length", "mm", "valve lash")
PRESSURE = Field("pressure", "bar", "compression")


def given(pattern: str) -> list:
    """Give the vectors that end in `pattern`, with a name each."""
    chosen = [vector for vector in VECTORS["vectors"] if pattern in vector]
    return [pytest.param(vector, id=f"{i}:{str(vector['text'])[:30]!a}") for i, vector in enumerate(chosen)]


def read(vector: dict) -> entry.Entry:
    return read_entry(vector["text"], Field(**vector["field"]), decimal_mark=vector.get("decimal_mark"))


@pytest.mark.parametrize("vector", given("gives"))
def test_entry_is_read_as_the_vector_says(vector):
    expected = vector["gives"]

    found = read(vector)

    assert (found.text, found.unit.symbol, found.unit_typed) == (
        vector["text"],
        expected["unit"],
        expected["unit_typed"],
    )
    assert len(found.readings) == len(expected["readings"])
    for reading, right in zip(found.readings, expected["readings"], strict=True):
        assert reading.unit == found.unit
        assert reading.value == right["value"]
        assert reading.resolution == right["resolution"]
        assert reading.si_value == right.get("si_value", reading.si_value)
        assert reading.absolute is right.get("absolute", False)
        assert reading.half_width == right.get("half_width")
        assert reading.bound == right.get("bound")
        assert reading.leaves == right.get("leaves", 1)


@pytest.mark.parametrize("vector", given("refused"))
def test_entry_is_refused_as_the_vector_says(vector):
    with pytest.raises(Refusal) as refused:
        read(vector)

    assert refused.value.sentence.template == VECTORS["refusals"][vector["refused"]]
    assert "\n" not in str(refused.value)


def test_there_are_vectors_for_every_refusal_that_a_typed_text_can_meet():
    not_of_a_text = {
        "Read “{read}”, which is no dimension that is measured here.",
        "Read {read} in place of a unit; write it as text.",
        "Read “{read}”, which is no unit that is known here.",
        "Read “{one}”, a unit of {first}, which can't be converted to “{other}”, a unit of {second}.",
        "Read {read}, which is no finite number and can't be converted.",
        "Read a value that is too large to be converted.",
        "Read “{read}” as the shop's decimal mark; it is “.” or “,”.",
    }

    templates = {
        ast.literal_eval(call.args[0])
        for module in (number, written_unit, units, entry)
        for call in ast.walk(ast.parse(getsource(module)))
        if isinstance(call, ast.Call) and getattr(call.func, "id", "") == "Refusal"
    }

    assert templates - not_of_a_text == set(VECTORS["refusals"].values())
    assert {vector["refused"] for vector in VECTORS["vectors"] if "refused" in vector} == set(VECTORS["refusals"])


SENTENCES = [
    (
        "1,234",
        LASH,
        "Read “1,234”, which is 1.234 where the comma is the decimal mark and 1234 where it groups thousands; "
        "write 1.234 or 1234.",
    ),
    (
        "1.234,5",
        LASH,
        "Read “1.234,5”, which is 1234.5 if “,” is the decimal mark and 1.2345 if “.” is; write one mark only.",
    ),
    ("-0.3", LASH, "Read “-0.3”; valve lash can't have a sign here; write it without."),
    ("0.3 bar", LASH, "Read “bar”, a unit of pressure; a unit of length is needed here: mm, µm, in, thou, cm, m."),
    ("0.3 ell", LASH, "Read “ell” where a unit of length is needed; those that fit are mm, µm, in, thou, cm, m."),
    ("12 mil", LASH, "Read “mil”, which is used for two units; write thou or mm."),
    ("0.41 mm; 0.016 in", LASH, "Read two units, mm and in, in one entry; write one for all."),
    ("12 bar abs; 12 bar g", PRESSURE, "Read two units, bar abs and bar gauge, in one entry; write one for all."),
    ("0.35..0.30", LASH, "Read “0.35..0.30”; the first side of a bracket is the smaller, like 0.30..0.35."),
    ("1e-3", LASH, "Read “1e-3”, which has an exponent; write the number out, like 0.0012."),
    ("O.30", LASH, "Read “O.30” with the letter “O” among the digits; write 0 or 1."),
    ("٣", LASH, "Read “٣” with the digit “٣”; write the digits 0 to 9."),
    ("", LASH, "Nothing was entered; write a number, or answer “not measured” with the reason."),
    (
        "x" * 100,
        LASH,
        "Read “" + "x" * 40 + "…”, which doesn't begin with a number; write the number first, then the unit.",
    ),
]


@pytest.mark.parametrize(("text", "field", "sentence"), SENTENCES, ids=lambda given: f"{str(given)[:20]!a}")
def test_refusal_says_what_was_read_and_what_would_be_right(text, field, sentence):
    with pytest.raises(Refusal) as refused:
        read_entry(text, field)

    assert str(refused.value) == sentence


def test_braces_and_line_breaks_that_were_typed_do_no_harm_in_the_sentence():
    with pytest.raises(Refusal) as refused:
        read_entry("{read}\n{0}", LASH)

    assert str(refused.value) == (
        "Read “{read}�{0}”, which doesn't begin with a number; write the number first, then the unit."
    )


def test_decimal_mark_other_than_point_or_comma_is_refused():
    with pytest.raises(Refusal) as refused:
        read_entry("0.30", LASH, decimal_mark=";")

    assert str(refused.value) == "Read “;” as the shop's decimal mark; it is “.” or “,”."


@pytest.mark.parametrize(
    ("value", "decimals", "mark", "text"),
    [
        (0.3, 2, ".", "0.30"),
        (0.3, 2, ",", "0,30"),
        (-0.3, 2, ",", "−0,30"),
        (1250.0, 0, ".", "1250"),
        (-0.001, 2, ".", "0.00"),
    ],
)
def test_number_is_written_with_the_shops_mark_and_a_true_minus(value, decimals, mark, text):
    assert write_number(value, decimals, mark) == text


def test_only_the_shops_mark_settles_a_comma_before_three_digits():
    as_mark, as_group = (read_entry("1,234", LASH, decimal_mark=mark).readings[0].value for mark in (",", "."))

    assert (as_mark, as_group) == (1.234, 1234.0)
