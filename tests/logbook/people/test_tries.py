"""Wrong tries: five for a name from an address, then a quarter of an hour."""

from datetime import timedelta

import pytest

from logbook.people.models import WrongTries
from logbook.people.tries import TooManyTries, count_try, forget_tries
from tests.factories import NOW

pytestmark = pytest.mark.django_db
HERE, THERE = "192.0.2.7", "192.0.2.8"  # RFC 5737: addresses for documentation


def try_times(count, name="Night shift 3", address=HERE, at=NOW):
    for _ in range(count):
        count_try(name=name, address=address, at=at)


def test_the_sixth_try_waits_and_says_how_long():
    try_times(5)
    with pytest.raises(TooManyTries) as refused:
        try_times(1, at=NOW + timedelta(minutes=1))
    assert str(refused.value) == (
        "There were 5 wrong tries from here; the next one can be made in 14 minutes. Nothing was looked at now."
    )


def test_waiting_is_told_to_the_minute_up():
    try_times(5)
    with pytest.raises(TooManyTries, match=r"can be made in 1 minute\. "):
        try_times(1, at=NOW + timedelta(minutes=14, seconds=59))


def test_trying_while_waiting_does_not_lengthen_the_wait():
    try_times(5)
    for minute in (1, 7, 14):
        with pytest.raises(TooManyTries):
            try_times(1, at=NOW + timedelta(minutes=minute))
    try_times(5, at=NOW + timedelta(minutes=15))


def test_capitals_are_no_way_round():
    try_times(5)
    with pytest.raises(TooManyTries):
        try_times(1, name="NIGHT SHIFT 3")


def test_the_same_name_elsewhere_and_another_name_here_may_be_tried():
    try_times(5)
    try_times(5, address=THERE)
    try_times(5, name="Night shift 4")


def test_a_right_try_forgets_the_wrong_ones_from_there_only():
    try_times(4)
    try_times(4, address=THERE)
    forget_tries(name="night shift 3", address=HERE)

    try_times(5)
    try_times(1, address=THERE)
    with pytest.raises(TooManyTries):
        try_times(1, address=THERE)


def test_old_tries_leave_no_rows():
    for number in range(30):
        try_times(1, name=f"nobody {number}")
    try_times(1, name="somebody", at=NOW + timedelta(minutes=15))

    assert list(WrongTries.objects.values_list("name", "count")) == [("somebody", 1)]


def test_a_name_longer_than_any_is_counted_all_the_same():
    try_times(5, name="x" * 500)
    with pytest.raises(TooManyTries):
        try_times(1, name="x" * 500)
