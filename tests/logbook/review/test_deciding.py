"""Decisions: who makes them, what each needs, which one stands."""

from datetime import date, timedelta

import pytest
from django.db import DatabaseError, transaction

from logbook.engines.models import MeterReading
from logbook.people.models import Person
from logbook.review.cases import Derived
from logbook.review.models import Decision
from logbook.review.queries import cases_of, extensions_of
from logbook.review.services import Frozen, NotDecided, decide
from tests.factories import NOW, make_limits, make_person, make_shop

LATER = NOW + timedelta(hours=1)
UNTIL = {"choice": "may_run_until", "conditions": "half load, look at it daily", "agreed_for_owner_by": "A. Owner"}


def case_of(finding, at=LATER):
    return next(one for one in cases_of([finding.measurement.task.work_order], at) if one.station == finding.station)


def test_a_station_found_beyond_is_undecided_until_somebody_decides(bench):
    finding = bench.beyond(left="0.41 mm")
    assert (case_of(finding).found.verdict, case_of(finding).left.verdict) == ("beyond", "within")
    assert case_of(finding).is_undecided

    decide(finding, by=bench.decides, at=LATER, choice="put_right")

    assert not case_of(finding).is_undecided
    made = Decision.objects.get()
    assert (made.choice, made.decided_by, made.decided_at, made.finding) == ("put_right", bench.decides, LATER, finding)


def test_a_station_within_wants_no_decision(bench):
    assert not case_of(bench.beyond(typed="0.40 mm")).is_undecided


@pytest.mark.parametrize("who", ["measures", "keys", "witness"])
def test_only_a_supervisor_decides(bench, who):
    with pytest.raises(NotDecided, match="^Only a supervisor decides; Supervisor 1 or Supervisor 2 can.$"):
        decide(bench.beyond(), by=getattr(bench, who), at=LATER, choice="keep_stopped")
    assert not Decision.objects.exists()


def test_a_supervisor_of_another_shop_has_no_say(bench):
    stranger = make_person(make_shop("Elsewhere"), "Supervisor 9", "supervisor")
    with pytest.raises(NotDecided, match="Supervisor 9 has no say in this shop"):
        decide(bench.beyond(), by=stranger, at=LATER, choice="keep_stopped")


@pytest.mark.parametrize("role", ["measured_by", "keyed_by"])
def test_nobody_decides_on_what_they_measured_or_keyed(bench, role):
    told = {"measured_by": bench.measures, "keyed_by": bench.keys, role: bench.decides}
    measurement = bench.open_pass(bench.job())
    finding = bench.read(measurement, "1.intake", "0.30 mm")
    reading = measurement.readings.model(
        shop=bench.shop, measurement=measurement, client_id="00000000-0000-0000-0000-000000000001", station="3.exhaust",
        typed="0.33 mm", taken_at=NOW, recorded_at=NOW, **told,
    )  # fmt: skip
    reading.save()
    told = {**finding.judgement, "verdict": "beyond", "station": "3.exhaust"}
    beyond = measurement.findings.create(shop=bench.shop, reading=reading, station="3.exhaust", verdict="beyond",
                                         characteristic="valve_lash.exhaust", judgement=told)  # fmt: skip

    with pytest.raises(NotDecided) as refused:
        decide(beyond, by=bench.decides, at=LATER, choice="keep_stopped")
    assert str(refused.value) == "You measured or keyed this yourself, so you can't decide on it; Supervisor 2 can."
    assert decide(beyond, by=bench.other, at=LATER, choice="keep_stopped").decided_by == bench.other


def test_a_struck_reading_still_bars_whoever_took_it(bench):
    measurement = bench.open_pass(bench.job())
    first = bench.read(measurement, "3.exhaust", "0.34 mm", by=bench.decides)
    finding = bench.read(measurement, "3.exhaust", "0.33 mm", supersedes=first.reading, reason="leaf was bent")
    with pytest.raises(NotDecided, match="You measured or keyed this yourself"):
        decide(finding, by=bench.decides, at=LATER, choice="keep_stopped")


def test_where_the_only_supervisor_measured_the_refusal_says_who_is_missing(bench):
    Person.objects.filter(pk=bench.other.pk).update(is_active=False)
    measurement = bench.open_pass(bench.job())
    finding = bench.read(measurement, "3.exhaust", "0.33 mm", by=bench.decides)
    with pytest.raises(NotDecided) as refused:
        decide(finding, by=bench.decides, at=LATER, choice="keep_stopped")
    assert str(refused.value) == (
        "You measured or keyed this yourself, so you can't decide on it; no other supervisor is here: add one on the page "
        "“People”, or give the role to somebody there."
    )


def test_where_nobody_else_works_in_the_shop_one_decides_on_ones_own_reading(bench):
    Person.objects.exclude(pk__in=[bench.decides.pk, bench.witness.pk]).update(is_active=False)
    finding = bench.read(bench.open_pass(bench.job()), "3.exhaust", "0.33 mm", by=bench.decides)
    assert decide(finding, by=bench.decides, at=LATER, choice="keep_stopped").decided_by == bench.decides


def test_put_right_needs_a_reading_as_left(bench):
    with pytest.raises(NotDecided, match="needs a reading as left, and there is none"):
        decide(bench.beyond(), by=bench.decides, at=LATER, choice="put_right")


def test_put_right_needs_the_reading_as_left_to_be_within(bench):
    with pytest.raises(NotDecided, match="needs a reading as left that is within; this one isn't"):
        decide(bench.beyond(left="0.46 mm"), by=bench.decides, at=LATER, choice="put_right")


def test_put_right_falls_when_the_station_is_left_otherwise_afterwards(bench):
    finding = bench.beyond(left="0.41 mm")
    decide(finding, by=bench.decides, at=LATER, choice="put_right")
    bench.read(bench.open_pass(finding.measurement.task, "as_left", at=LATER), "3.exhaust", "0.48 mm")
    assert case_of(finding).is_undecided


def test_a_station_found_within_but_left_beyond_is_decided_on_as_left(bench):
    finding = bench.beyond(typed="0.40 mm", left="0.48 mm")
    case = case_of(finding)
    assert case.is_undecided and case.subject is case.left
    with pytest.raises(NotDecided, match="^This reading was struck or replaced meanwhile"):
        decide(finding, by=bench.decides, at=LATER, choice="keep_stopped")
    decide(case.left.finding, by=bench.decides, at=LATER, choice="keep_stopped")
    assert not case_of(finding).is_undecided


def test_a_reading_in_another_state_than_its_limit_never_hides_one_that_was_judged(bench):
    finding = bench.beyond()
    bench.read(bench.open_pass(finding.measurement.task, at=LATER, conditions={"state": "hot"}), "3.exhaust", "0.40 mm")
    assert case_of(finding).found.finding == finding


def test_a_reading_taken_again_is_undecided_again(bench):
    finding = bench.beyond()
    decide(finding, by=bench.decides, at=LATER, choice="measure_again")
    assert case_of(finding).is_to_be_measured_again and not case_of(finding).is_undecided
    again = bench.read(finding.measurement, "3.exhaust", "0.32 mm")
    assert case_of(again).is_undecided and not case_of(again).is_to_be_measured_again
    with pytest.raises(NotDecided, match="struck or replaced meanwhile"):
        decide(finding, by=bench.decides, at=LATER, choice="keep_stopped")


@pytest.mark.parametrize(
    ("missing", "told"),
    [
        ({"conditions": " "}, "under which conditions"),
        ({"agreed_for_owner_by": ""}, "who agreed for the owner"),
        ({"ends_on": None}, "until when it may run"),
        ({"ends_on": date(2026, 5, 1)}, "The last day 2026-05-01 is past already; today is 2026-05-02"),
        ({"ends_on": None, "ends_at_hours": 4210.0}, "The end at 4210 h is reached already: the engine has run 4210 h"),
    ],
)
def test_a_concession_says_its_conditions_its_agreement_and_its_end(bench, missing, told):
    with pytest.raises(NotDecided, match=told):
        decide(bench.beyond(), by=bench.decides, at=LATER, **{**UNTIL, "ends_on": date(2026, 8, 1), **missing})


def test_an_end_by_hours_needs_a_meter(bench):
    engine = bench.new_engine("Unmetered")
    finding = bench.beyond(engine=engine)
    engine.meters.update(unit="starts")
    with pytest.raises(NotDecided, match="Its hours aren't read, so an end by hours would never come"):
        decide(finding, by=bench.decides, at=LATER, **UNTIL, ends_at_hours=5000.0)


@pytest.mark.parametrize("reason", ["", "  ", "scrap"])
def test_anything_else_needs_a_reason_in_a_sentence(bench, reason):
    with pytest.raises(NotDecided, match="Say in a sentence what is decided and why"):
        decide(bench.beyond(), by=bench.decides, at=LATER, choice="other", reason=reason)


def test_something_else_is_kept_with_its_reason(bench):
    told = "The head goes to the grinder first."
    assert decide(bench.beyond(), by=bench.decides, at=LATER, choice="other", reason=told).reason == told


def test_an_end_belongs_to_a_concession_alone(bench):
    with pytest.raises(NotDecided, match="belong to “may run until”"):
        decide(bench.beyond(), by=bench.decides, at=LATER, choice="keep_stopped", ends_on=date(2026, 8, 1))


def test_a_word_that_is_no_decision_is_refused_with_those_there_are(bench):
    with pytest.raises(NotDecided, match="“released” is no decision; there are: put right, measure again"):
        decide(bench.beyond(), by=bench.decides, at=LATER, choice="released")


def test_a_later_decision_stands_over_an_earlier_one_which_stays(bench):
    finding = bench.beyond()
    decide(finding, by=bench.decides, at=LATER, choice="keep_stopped")
    decide(finding, by=bench.other, at=LATER + timedelta(hours=1), **UNTIL, ends_on=date(2026, 8, 1))
    assert case_of(finding).decision.choice == "may_run_until"
    assert [one.choice for one in Decision.objects.all()] == ["keep_stopped", "may_run_until"]
    with pytest.raises(DatabaseError, match="never changed or deleted"), transaction.atomic():
        Decision.objects.all().delete()


def test_a_concession_runs_through_its_last_day_by_the_shops_clock(bench):
    bench.shop.time_zone = "Pacific/Auckland"  # twelve hours ahead of UTC in winter
    bench.shop.save()
    finding = bench.beyond()
    decide(finding, by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 8, 1))
    evening, midnight = NOW.replace(month=8, day=1, hour=11, minute=59), NOW.replace(month=8, day=1, hour=12, minute=0)
    assert not case_of(finding, evening).is_undecided
    assert case_of(finding, midnight).is_undecided and case_of(finding, midnight).is_past_end


def test_a_concession_ends_when_its_hours_are_reached(bench):
    finding = bench.beyond()
    decide(finding, by=bench.decides, at=LATER, **UNTIL, ends_at_hours=4500.0)
    meter = bench.engine.meters.get()
    kept = {"shop": bench.shop, "meter": meter, "recorded_by": bench.keys}
    MeterReading.objects.create(**kept, shows=4499.9, taken_at=LATER, recorded_at=LATER)
    assert not case_of(finding).is_past_end
    MeterReading.objects.create(**kept, shows=4500.0, taken_at=LATER + timedelta(hours=1), recorded_at=LATER)
    assert case_of(finding).is_past_end


def test_extensions_are_counted(bench):
    finding = bench.beyond()
    first = decide(finding, by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 8, 1))
    second = decide(finding, by=bench.decides, at=LATER + timedelta(days=9), **UNTIL, ends_on=date(2026, 9, 1))
    third = decide(finding, by=bench.other, at=LATER + timedelta(days=19), **UNTIL, ends_on=date(2026, 10, 1))
    assert (second.extends, third.extends) == (first, second)
    assert extensions_of([first, second, third]) == {first.pk: 0, second.pk: 1, third.pk: 2}


def test_a_concession_at_the_next_visit_extends_the_one_before(bench):
    first = decide(bench.beyond(), by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 8, 1))
    task = bench.job()
    again = bench.read(bench.open_pass(task, at=NOW + timedelta(days=60), hours=4400.0), "3.exhaust", "0.32 mm")
    at = NOW + timedelta(days=61)
    assert decide(again, by=bench.decides, at=at, **UNTIL, ends_on=date(2026, 10, 1)).extends == first


def test_a_concession_after_the_station_was_within_is_a_first_one(bench):
    decide(bench.beyond(), by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 8, 1))
    bench.visit(NOW + timedelta(days=30), 4300.0, "0.40 mm", "0.40 mm")
    again = bench.read(bench.open_pass(bench.job(), at=NOW + timedelta(days=60), hours=4400.0), "3.exhaust", "0.32 mm")
    at = NOW + timedelta(days=61)
    assert decide(again, by=bench.decides, at=at, **UNTIL, ends_on=date(2026, 10, 1)).extends is None


def test_a_derived_value_is_decided_on_by_its_name(bench):
    make_limits(bench.engine, bench.decides, bench.other, compression__difference={"upper": "1.5 bar"})
    gauge = bench.gauge.__class__.objects.create(
        shop=bench.shop, mark="CG-1", title="compression gauge", quantity="pressure", resolution="0.1 bar",
        max_permissible_error="0.2 bar", created_at=NOW,
    )  # fmt: skip
    measurement = bench.open_pass(bench.job("compression", kind="compression"), gauge=gauge)
    for station, typed in {"1": "12.4 bar", "2": "9.1 bar", "3": "12.2 bar", "4": "12.3 bar"}.items():
        bench.read(measurement, station, typed)
    bench.close(measurement)
    order, on = measurement.task.work_order, Derived(measurement, "compression.difference")
    (case,) = [one for one in cases_of([order], LATER) if one.is_undecided]
    assert (case.characteristic, case.station, case.subject.key) == ("compression.difference", None, on.key)

    made = decide(on, by=bench.decides, at=LATER, choice="keep_stopped")

    assert (made.finding, made.derived) == (None, on.key)
    assert [one for one in cases_of([order], LATER) if one.is_undecided] == []


@pytest.mark.parametrize("state", ["planned", "dropped"])
def test_nothing_is_decided_on_a_job_that_is_planned_or_dropped(bench, state):
    with pytest.raises(Frozen, match=f"is “{state}”: there is nothing to decide on it"):
        decide(bench.beyond(state=state), by=bench.decides, at=LATER, choice="keep_stopped")


def test_nothing_is_decided_on_a_signed_job(bench):
    with pytest.raises(Frozen, match="is signed: nothing on it is decided any more"):
        decide(bench.beyond(state="signed"), by=bench.decides, at=LATER, choice="keep_stopped")


def test_a_concession_on_a_signed_job_can_still_be_extended_or_ended(bench):
    finding = bench.beyond()
    first = decide(finding, by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 8, 1))
    order = finding.measurement.task.work_order
    order.state = "signed"
    order.save()
    at = NOW + timedelta(days=120)
    assert case_of(finding, at).is_undecided
    assert decide(finding, by=bench.decides, at=at, **UNTIL, ends_on=date(2026, 12, 1)).extends == first
    decide(finding, by=bench.decides, at=at + timedelta(hours=1), choice="keep_stopped")
    with pytest.raises(Frozen, match="is signed"):
        decide(finding, by=bench.decides, at=at + timedelta(hours=2), choice="measure_again")
