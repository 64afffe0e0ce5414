"""The one-time code of the first start: kept hashed, for its owner's eyes only, worth nothing once used or replaced."""

import stat

import pytest

from logbook.people import start_code


def test_a_code_is_right_whatever_its_capitals_and_hyphens(tmp_path):
    code = start_code.make_code(tmp_path)

    assert start_code.is_right(tmp_path, code)
    assert start_code.is_right(tmp_path, f" {code.lower().replace('-', ' ')} ")


@pytest.mark.parametrize("typed", ["", "-", "AAAA-AAAA-AAAA", "argon2"])
def test_anything_else_is_wrong(tmp_path, typed):
    start_code.make_code(tmp_path)

    assert not start_code.is_right(tmp_path, typed)


def test_only_its_owner_can_read_the_hash_and_nobody_the_code(tmp_path):
    code = start_code.make_code(tmp_path)
    kept = tmp_path / "first_start"

    assert stat.S_IMODE(kept.stat().st_mode) == 0o600
    assert kept.read_text().startswith("argon2$")
    assert start_code.bare(code) not in kept.read_text()


def test_a_new_code_makes_the_one_before_worth_nothing(tmp_path):
    before, now = start_code.make_code(tmp_path), start_code.make_code(tmp_path)

    assert [start_code.is_right(tmp_path, code) for code in (before, now)] == [False, True]
    assert [path.name for path in tmp_path.iterdir()] == ["first_start"]


def test_a_used_code_is_worth_nothing(tmp_path):
    code = start_code.make_code(tmp_path)
    start_code.use_up(tmp_path)
    start_code.use_up(tmp_path)

    assert not start_code.is_made(tmp_path)
    assert not start_code.is_right(tmp_path, code)


def test_a_code_is_long_enough_that_tries_cannot_find_it_and_has_no_signs_that_look_alike(tmp_path):
    code = start_code.make_code(tmp_path)

    assert [len(group) for group in code.split("-")] == [4, 4, 4]
    assert set(code) - {"-"} <= set(start_code.SIGNS)
    assert set("01OIL") & set(start_code.SIGNS) == set()
