"""When a job comes due, by itself: windows, projections, whichever comes first. No database."""

from datetime import UTC, date, datetime

import pytest

from logbook.engines.use import Shown, Use, average_use
from logbook.work.due import DUE, LATER, OVER, UNKNOWN, counted_days, counted_meter, next_start, soonest
from measurements.sentence import Sentence

TODAY = date(2006, 3, 1)
TRADE = [  # totals by day, h/day as printed, where
    ([("2025-01-10", 1200.0), ("2025-04-20", 1650.0)], "4.5", "common practice: hours run over days passed"),
]


def shown(*rows):
    return [Shown(datetime.fromisoformat(f"{day}T00:00+00:00"), total) for day, total in rows]


def days(start, today, length=180):
    start = None if start is None else start.toordinal()
    return counted_days(length, length * 0.1, start, today)


def hours(*, start=1200.0, last=1650.0, length=500.0, use=None, today=date(2025, 4, 20)):
    use = use or average_use(shown(("2025-01-10", 1200.0), ("2025-04-20", last)))
    return counted_meter("h", length, length * 0.1, start, last, use, today)


def test_a_180_day_service_due_17_april_2006_may_be_done_from_30_march_to_5_may():
    """DA PAM 750-8: 180 days, ten percent."""
    count = days(date(2005, 10, 19), TODAY)
    assert count.due_on == date(2006, 4, 17)
    assert count.window_days == (date(2006, 3, 30), date(2006, 5, 5))


@pytest.mark.parametrize(
    ("done", "next_due"),
    [
        (date(2006, 3, 29), date(2006, 9, 25)),  # a day too early: 180 days after it was done
        (date(2006, 3, 30), date(2006, 10, 14)),  # inside: 180 days after 17 April
        (date(2006, 5, 5), date(2006, 10, 14)),
        (date(2006, 5, 6), date(2006, 11, 2)),  # a day too late
    ],
)
def test_inside_the_window_the_next_due_date_does_not_move(done, next_due):
    """DA PAM 750-8; the days counted with a calendar."""
    start = next_start(start=date(2005, 10, 19).toordinal(), length=180, window=18, done=done.toordinal())
    assert days(date.fromordinal(int(start)), done).due_on == next_due


def test_a_job_never_done_before_counts_from_where_it_was_done():
    assert next_start(start=None, length=150, window=15, done=1234.5) == 1234.5


@pytest.mark.parametrize(("rows", "printed", "where"), TRADE)
def test_average_use_is_hours_run_over_days_passed(rows, printed, where):
    assert f"{average_use(shown(*rows)).per_day:.1f}" == printed, where


def test_1700_hours_come_about_11_days_after_1650_at_4_and_a_half_a_day():
    """(1700 − 1650) / 4.5 = 11.1 days after 20 April 2025."""
    assert hours(length=500.0).due_on == date(2025, 5, 1)


@pytest.mark.parametrize(
    ("rows", "why"),
    [
        ([], "no meter reading"),
        ([("2025-01-10", 1200.0)], "one meter reading only"),
        ([("2025-01-10", 1200.0), ("2025-04-20", 1150.0)], "the meter ran backward, from 1200 to 1150"),
        ([("2025-01-10", 1200.0), ("2025-04-20", 1200.0)], "no running between the meter readings"),
        ([("2025-01-10", 1200.0), ("2025-01-10", 1201.0)], "the meter readings are less than a day apart"),
    ],
)
def test_where_nothing_can_be_projected_it_says_why(rows, why):
    use = average_use(shown(*rows))
    assert isinstance(use, Sentence) and str(use) == why
    count = hours(use=use)
    assert (count.due_on, str(count.why_not), count.can_be_drawn) == (None, why, False)


def test_average_use_looks_a_year_back_and_further_only_for_a_second_reading():
    """10 h/day in the last year, after a year of 1 h/day."""
    rows = shown(("2023-01-01", 0.0), ("2024-01-01", 365.0), ("2024-12-31", 4015.0))
    assert average_use(rows).per_day == 10.0
    assert average_use(shown(("2020-01-01", 0.0), ("2024-12-31", 1826.0))).per_day == 1.0


def test_150_hours_1500_miles_or_six_months_whichever_comes_first():
    """TM 9-2350-287-20-1. Here: 100 h of 150 at 2 h a day, 2300 km of 2414 at 30 km a day, 90 days of 183."""
    read = datetime(2006, 3, 1, tzinfo=UTC)
    start = Shown(datetime(2005, 12, 1, tzinfo=UTC), 0.0)
    by_hours = counted_meter("h", 150, 15, 0.0, 100.0, Use(2.0, start, Shown(read, 100.0)), TODAY)
    by_km = counted_meter("km", 2414, 241.4, 0.0, 2300.0, Use(30.0, start, Shown(read, 2300.0)), TODAY)
    by_days = counted_days(183, 18.3, date(2005, 12, 1).toordinal(), TODAY)
    assert [by_hours.days_left, by_km.days_left, by_days.days_left] == [25, 3, 93]
    assert soonest([by_hours, by_km, by_days]) is by_km


def test_what_is_over_comes_before_what_is_only_projected():
    over = hours(start=1100.0, length=500.0)
    coming = days(date(2024, 11, 1), date(2025, 4, 20), length=170)
    assert soonest([coming, over]) is over


@pytest.mark.parametrize(
    ("start", "length", "stage"),
    [(1100.0, 500.0, OVER), (1150.0, 500.0, DUE), (1200.0, 500.0, DUE), (1201.0, 500.0, LATER), (None, 500.0, UNKNOWN)],
)
def test_a_job_is_over_past_its_end_and_due_inside_its_window(start, length, stage):
    assert hours(start=start, length=length).stage == stage


def test_a_meter_unread_for_long_makes_a_job_probably_over():
    count = hours(start=1500.0, length=500.0, today=date(2025, 9, 1))
    assert (count.is_over, count.is_probably_over, count.stage) == (False, True, DUE)
    assert count.due_on == date(2025, 7, 6)  # 350 h at 4.5 h a day: 77.8 days after 20 April


def test_over_is_drawn_though_nothing_can_be_projected():
    count = hours(start=1100.0, length=500.0, use=average_use(shown(("2025-04-20", 1650.0))))
    assert (count.is_over, count.can_be_drawn, count.left) == (True, True, -50.0)
