"""A likely slip is asked about before it is kept, with both readings spelled out; the answer is kept too."""

import pytest

from logbook.bench.models import Reading
from logbook.bench.services import SlipAsked
from logbook.bench.slips import meant


def asked(bench, station, typed, **more):
    with pytest.raises(SlipAsked) as caught:
        bench.read(station, typed, **more)
    return caught.value


def test_a_slip_is_asked_about_and_nothing_is_kept(bench):
    slip = asked(bench, "1.intake", "3.0")
    assert Reading.objects.count() == 0
    assert str(slip) == (
        "Cylinder 1 intake: read 3.0 mm, hard to believe there; it would be 0.30 mm if the point is moved one place. "
        "Which is it?"
    )


def test_the_same_reading_as_typed_is_kept_with_the_question_and_the_answer(bench):
    reading = bench.read("1.intake", "3.0", slip_answer="as typed")
    assert (reading.typed, reading.slip_answer) == ("3.0", "as typed")
    assert reading.slip_asked == {"would_be": 0.3, "unit": "mm", "if": "the point is moved one place", "typed": "3.0"}


def test_the_reading_as_meant_is_kept_with_what_was_typed(bench):
    reading = bench.read("1.intake", "3.0", slip_answer="as meant")
    assert (reading.typed, reading.slip_answer, reading.slip_asked["typed"]) == ("0.30 mm", "as meant", "3.0")
    assert reading.finding.judgement["value"] == 0.30


def test_a_reading_as_meant_tapped_twice_is_one_reading(bench):
    from uuid import uuid4

    once = uuid4()
    first = bench.read("1.intake", "3.0", slip_answer="as meant", client_id=once)
    assert bench.read("1.intake", "3.0", slip_answer="as meant", client_id=once) == first


def test_a_reading_in_the_other_unit_is_offered_with_that_unit_digit_for_digit(bench):
    assert asked(bench, "1.intake", "0.0118").meant == "0.0118 in"


def test_a_reading_that_fits_the_neighbour_names_its_station(make_bench):
    wide = {"lower": "0.55 mm", "upper": "0.65 mm", "nominal": "0.60 mm"}
    narrow = {"lower": "0.18 mm", "upper": "0.22 mm", "nominal": "0.20 mm"}
    bench = make_bench(limits={"valve_lash__intake": narrow, "valve_lash__exhaust": wide})
    bench.read("1.exhaust", "0.60")
    bench.read("1.intake", "0.20")
    later = bench.next_visit()
    later.read("1.exhaust", "0.60")
    slip = asked(later, "1.intake", "0.60")
    assert slip.station == "1.exhaust"
    assert str(slip) == (
        "Cylinder 1 intake: read 0.60 mm, hard to believe there; it would fit Cylinder 1 exhaust. Which is it?"
    )


def test_an_answer_without_a_slip_is_not_kept_as_one(bench):
    reading = bench.read("1.intake", "0.30", slip_answer="as typed")
    assert (reading.slip_asked, reading.slip_answer) == (None, "")


def test_a_slip_among_repeats_is_found_though_the_mean_would_hide_it(bench):
    bench.read("1.intake", "0.30")
    assert asked(bench, "1.intake", "3.0").typed == "3.0 mm"


@pytest.mark.parametrize(
    ("typed", "value", "would_be", "why", "offered"),
    [
        ("28", 28.0, 0.28, "the point is moved 2 places", "0.28 mm"),
        ("0,030", 0.03, 0.3, "the point is moved one place", "0.30 mm"),
        ("12", 12.0, 0.3048, "typed in thousandths of an inch", "12 thou"),
        ("1.8 bar", 1.8, 18.0, "the point is moved one place", "18 bar"),
        ("2.9; 3.1", 3.0, 0.3, "the point is moved one place", "0.3 mm"),
    ],
)
def test_what_was_meant_keeps_the_digits_that_were_typed(typed, value, would_be, why, offered):
    unit = "bar" if "bar" in typed else "mm"
    finding = {
        "as_typed": typed, "value": value, "unit": unit, "slip": {"would_be": would_be, "unit": unit, "if": why}
    }  # fmt: skip
    assert meant(finding) == offered
