"""One fingerprint for exactly what stands on a sheet."""

import math
from datetime import date

import pytest

from logbook.paper.fingerprints import canonical, fingerprint


def test_the_order_of_names_does_not_matter_and_that_of_a_list_does():
    assert fingerprint({"a": 1, "b": [1, 2]}) == fingerprint({"b": [1, 2], "a": 1})
    assert fingerprint({"b": [1, 2]}) != fingerprint({"b": [2, 1]})


def test_it_is_written_in_one_way():
    assert canonical({"b": ["ä", 0.18, None, True], "a": {}}) == '{"a":{},"b":["ä",0.18,null,true]}'.encode()


@pytest.mark.parametrize("value", [date(2026, 5, 2), {1, 2}, math.nan, math.inf, {1: "one"}, [{"a": {2: "two"}}]])
def test_what_json_has_no_word_for_is_refused(value):
    with pytest.raises((TypeError, ValueError)):
        fingerprint({"x": value})
