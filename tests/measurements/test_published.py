"""Every published value comes out as printed, says where it stands, and names a wrong formula it would catch."""

import re

import pytest

from measurements.check_value import CheckValue
from measurements.kind import find_kinds
from measurements.published import every_value

VALUES = list(every_value())


@pytest.mark.parametrize(("room", "value"), VALUES, ids=[f"{room}: {value.what}" for room, value in VALUES])
def test_our_figure_is_the_printed_one(room: str, value: CheckValue):
    assert value.agrees(), f"{value.what}: printed {value.printed}, ours {value.computed()}; {value.source}"


@pytest.mark.parametrize(("room", "value"), VALUES, ids=[f"{room}: {value.what}" for room, value in VALUES])
def test_a_published_value_names_its_source_its_basis_and_a_wrong_formula(room: str, value: CheckValue):
    assert value.source.strip()
    assert value.basis in ("seen", "from memory", "common practice")
    assert value.catches.strip()


@pytest.mark.parametrize(("room", "value"), VALUES, ids=[f"{room}: {value.what}" for room, value in VALUES])
def test_no_wrong_formula_named_gives_the_printed_figure(room: str, value: CheckValue):
    """A figure named after a colon as the wrong formula's must differ from the print."""
    wrong = re.findall(r":\s*[^0-9\s]?(-?[0-9]+(?:\.[0-9]+)?)", value.catches)

    assert value.printed.lstrip("-+") not in wrong or value.printed.startswith("-")


def test_there_are_enough_values_from_enough_sources():
    numbers = [value for _, value in VALUES if value.basis != "common practice"]
    documents = {re.split(r"[,:(]", value.source)[0].strip() for value in numbers}

    assert len(numbers) >= 60
    assert len(documents) >= 12, documents


def test_every_kind_carries_published_values():
    assert [name for name, kind in find_kinds().items() if not kind.published] == []


def test_no_value_stands_twice():
    told = [(room, value.what) for room, value in VALUES]

    assert len(set(told)) == len(told)


def test_a_check_value_that_differs_in_its_last_printed_digit_fails():
    almost = CheckValue("a third", "0.33", lambda: 0.3351, "arithmetic", "seen", "rounding up")

    assert almost.computed() == "0.34"
    assert not almost.agrees()
