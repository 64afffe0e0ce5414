"""The home page: a sentence and a button for whoever comes in."""

import re
from datetime import date, timedelta
from html import unescape

import pytest
from django.urls import reverse

from logbook.desk.home import steps_for
from logbook.gauges.models import Gauge
from logbook.people.models import ROLES
from logbook.review.models import RunningUndecided, Signature
from logbook.work.models import HandOver, Interval, Lock, Move, Task, WorkOrder
from tests.factories import NOW, make_engine, make_gauge, make_limits, make_meter, make_person, make_shop
from tests.logbook.review.jobs import Bench

pytestmark = pytest.mark.django_db
State = WorkOrder.State


@pytest.fixture
def shop():
    return make_shop()


@pytest.fixture
def boss(shop):
    return make_person(shop, "Supervisor 1", "supervisor")


@pytest.fixture
def engine(shop):
    return make_engine(shop)


@pytest.fixture
def hand(shop):
    return make_person(shop, "Night shift 3", "technician")


def job(engine, boss, number=14, state=State.PLANNED, title="valve lash", **more):
    return WorkOrder.objects.create(
        shop=engine.shop, number=number, engine=engine, title=title, state=state, opened_by=boss, opened_at=NOW, **more
    )


def told(person):
    return [step.sentence for step in steps_for(person, NOW)]


def test_nobody_signed_in_is_led_to_the_door(client, boss):
    assert client.get("/").url == reverse("people:sign_in")


@pytest.mark.parametrize("role", ROLES)
def test_each_role_gets_a_sentence_and_no_link_that_would_be_refused(client, shop, boss, engine, role):
    job(engine, boss, state=State.AT_THE_BENCH)
    client.force_login(make_person(shop, f"A {role}", role))

    answer = client.get("/")

    page = answer.content.decode()
    assert page.count("<h1>") == 1 and '<p class="next">' in page
    links = set(re.findall(r'<a[^>]* href="(/[^"]*)"', page)) - {"/"}
    assert {link: client.get(link).status_code for link in links} == dict.fromkeys(links, 200)
    assert reverse("people:shop") in links


def test_the_home_page_only_answers_to_looking(client, boss):
    client.force_login(boss)
    assert client.post("/").status_code == 405


def test_a_supervisor_of_an_empty_shop_is_led_through_what_it_lacks(shop, boss, hand):
    assert told(boss) == [
        "No engine is kept here yet: enter the first one, then its limits and a gauge, and work can begin."
    ]
    hand.is_active = False
    hand.save()
    (step,) = steps_for(boss, NOW)
    assert (step.sentence, step.address) == (
        "Nobody here may measure yet: add a technician, or make somebody one.", reverse("people:new_person"),
    )  # fmt: skip


def test_a_supervisor_signs_what_has_nothing_left_to_decide(boss, hand, engine):
    job(engine, boss, state=State.TO_DECIDE)

    assert told(boss) == [
        "job 14 (valve lash, North pump) has nothing left to decide; it waits for your signature."
    ]  # fmt: skip


def test_an_engine_that_runs_undecided_comes_before_a_signature(boss, hand, engine):
    job(engine, boss, number=13, state=State.TO_DECIDE)
    running = job(engine, boss, state=State.TO_DECIDE)
    RunningUndecided.objects.create(
        shop=engine.shop,
        work_order=running,
        since_at=NOW,
        on_whose_word="the night shift",
        recorded_by=hand,
        recorded_at=NOW,
    )

    assert told(boss) == [
        "job 14 (valve lash, North pump) waits for your decision. The engine runs undecided, on the word of the night shift."
    ]


def test_a_supervisor_with_nothing_to_decide_sees_the_top_of_the_due_list(boss, hand, engine):
    assert told(boss)[0].startswith("Nothing waits for you")
    Interval.objects.create(shop=engine.shop, engine=engine, title="Oil and filter", every_days=365)

    assert told(boss) == ["Nothing waits for you. On top of the due list: Oil and filter, North pump."]


def beyond(bench, by):
    """A job to decide on: a lash of 0.18 where 0.25 to 0.35 are allowed, measured and keyed by one person."""
    bench.read(bench.open_pass(bench.job()), "1.intake", "0.18", by=by)


def test_a_supervisor_is_told_of_what_is_beyond_its_limit():
    bench = Bench()
    beyond(bench, bench.measures)
    beyond(bench, bench.measures)

    assert told(bench.decides) == ["2 jobs wait for your decision, first of all job 118 (valve lash, North pump)."]


def test_what_a_supervisor_measured_comes_after_what_they_may_decide_and_says_who_can():
    bench = Bench()
    beyond(bench, bench.decides)

    assert told(bench.decides) == [
        "job 118 (valve lash, North pump) waits for a decision. You measured or keyed this yourself, so you can't decide "
        "on it; Supervisor 2 can."
    ]
    beyond(bench, bench.measures)
    assert told(bench.decides) == ["job 119 (valve lash, North pump) waits for your decision."]


def test_where_the_only_supervisor_measured_the_page_says_who_is_missing_and_leads_there():
    bench = Bench()
    beyond(bench, bench.decides)
    bench.other.is_active = False
    bench.other.save()

    (step,) = steps_for(bench.decides, NOW)

    assert step.sentence == (
        "job 118 (valve lash, North pump) waits for a decision. You measured or keyed this yourself, so you can't decide "
        "on it; no other supervisor is here: add one on the page “People”, or give the role to somebody there."
    )
    assert step.address == reverse("people:people")


def test_a_technician_goes_on_with_their_own_job(boss, hand, shop, engine):
    other = make_person(shop, "Night shift 4")
    theirs, own = (job(engine, boss, number=number, state=State.AT_THE_BENCH) for number in (13, 14))
    for order, who in ((theirs, other), (own, hand)):
        Move.objects.create(shop=shop, work_order=order, to_state=State.AT_THE_BENCH, moved_by=who, moved_at=NOW)

    assert told(hand) == ["You have job 14 (valve lash, North pump) at the bench."]
    Lock.objects.create(shop=shop, work_order=theirs, state="isolated", point="battery", person=hand, taken_at=NOW)
    own.state = State.TO_DECIDE
    own.save()
    assert told(hand) == ["You have job 13 (valve lash, North pump) at the bench."]


def test_a_job_handed_over_comes_first(boss, hand, shop, engine):
    other = make_person(shop, "Night shift 4")
    Move.objects.create(
        shop=shop, work_order=job(engine, boss, number=13, state=State.AT_THE_BENCH), to_state=State.AT_THE_BENCH,
        moved_by=hand, moved_at=NOW,
    )  # fmt: skip
    given = HandOver.objects.create(
        shop=shop,
        work_order=job(engine, boss, state=State.AT_THE_BENCH),
        from_person=other,
        to_person=hand,
        handed_at=NOW,
    )

    assert told(hand) == ["Night shift 4 handed job 14 (valve lash, North pump) over to you."]
    given.taken_at = NOW
    given.save()
    assert told(hand) == ["You have job 13 (valve lash, North pump) at the bench."]


@pytest.mark.parametrize(
    ("state", "sentence"),
    [
        (State.AT_THE_BENCH, "job 14 (valve lash, North pump) is at the bench."),
        (State.STOPPED_SHORT, "job 14 (valve lash, North pump) was stopped short and waits for somebody to go on."),
        (State.PLANNED, "job 14 (valve lash, North pump) is planned and can be begun."),
        (State.SIGNED, "Nothing waits for you, and no job is set to come due."),
        (State.DROPPED, "Nothing waits for you, and no job is set to come due."),
    ],
)
def test_a_technician_without_a_job_takes_one_that_waits(boss, hand, engine, state, sentence):
    job(engine, boss, state=state)

    assert told(hand) == [sentence]


def test_jobs_of_another_shop_are_nobodys_here(hand, boss):
    elsewhere = make_shop("Other works")
    job(make_engine(elsewhere), make_person(elsewhere, "Supervisor 9", "supervisor"), state=State.AT_THE_BENCH)

    assert told(hand) == ["Nothing waits for you, and no job is set to come due."]


def test_the_toolroom_hears_of_gauges_that_no_reading_may_be_taken_with(shop, boss):
    keeper = make_person(shop, "Toolroom 1", "toolroom")
    assert told(keeper) == ["No gauge is kept here yet: enter one, for every verdict rests on what its gauge can tell."]
    make_gauge(shop, boss, "FG-1")
    assert told(keeper) == ["Nothing waits for you: every gauge is in date."]

    for number in range(2, 7):
        late = make_gauge(shop, boss, f"FG-{number}")
        late.calibrations.create(
            shop=shop, calibrated_on=date(2026, 4, 1), due_on=date(2026, 5, 1), recorded_by=boss, recorded_at=NOW
        )

    assert told(keeper) == [
        "5 gauges are past due or failed their calibration: FG-2, FG-3, FG-4 and 2 more."
    ]  # fmt: skip
    Gauge.objects.exclude(mark__in=["FG-1", "FG-2"]).update(retired_at=NOW - timedelta(days=1))
    assert told(keeper) == ["FG-2 is past due or failed its calibration."]


def test_a_witness_hears_of_jobs_with_readings_to_witness_until_they_signed(shop, boss, engine):
    witness = make_person(shop, "Surveyor 1", "witness")
    plain, asked = (job(engine, boss, number=number, state=State.AT_THE_BENCH) for number in (13, 14))
    for order, stations in ((plain, []), (asked, ["1.intake"])):
        Task.objects.create(
            shop=shop, work_order=order, place=1, title="valve lash", lock_state="isolated", witnessed_stations=stations
        )

    assert told(witness) == ["job 14 (valve lash, North pump) has readings that you are asked to witness."]
    Signature.objects.create(
        shop=shop, work_order=asked, role="witnessed", person=witness, signed_at=NOW, shown_sha256="0" * 64, shown={}
    )
    assert told(witness) == ["Nothing waits for you."]


def test_somebody_with_two_roles_hears_both_the_most_pressing_first(shop, engine, boss):
    both = make_person(shop, "Only one here", "supervisor", "technician")
    job(engine, boss, number=13, state=State.TO_DECIDE)
    job(engine, boss, state=State.AT_THE_BENCH)

    assert told(both) == [
        "job 13 (valve lash, North pump) has nothing left to decide; it waits for your signature.",
        "job 14 (valve lash, North pump) is at the bench.",
    ]


def test_the_demo_says_on_every_page_that_it_is_invented(client):
    client.force_login(make_person(make_shop(is_demo=True), "Supervisor 1", "supervisor"))

    for page in ("/", reverse("people:people"), "/nothing-here"):
        assert "Invented data: this is the demo shop." in client.get(page).content.decode()


def test_a_real_shop_does_not_say_so(client, boss):
    client.force_login(boss)
    assert "Invented data" not in client.get("/").content.decode()


def test_a_shop_with_limits_and_meters_takes_as_many_queries_with_thirty_jobs_as_with_one(
    client, boss, hand, engine, django_assert_max_num_queries
):
    make_meter(engine, hand)
    make_limits(engine, boss)
    client.force_login(make_person(engine.shop, "Everybody", *ROLES))
    job(engine, boss, number=1, state=State.TO_DECIDE)
    with django_assert_max_num_queries(60) as few:
        client.get("/")
    for number in range(2, 32):
        job(engine, boss, number=number, state=State.TO_DECIDE)
        job(engine, boss, number=number + 100, state=State.AT_THE_BENCH)
    with django_assert_max_num_queries(len(few.captured_queries)):
        client.get("/")


def words(answer):
    return " ".join(unescape(re.sub(r"<[^>]+>", " ", answer.content.decode())).split())


def test_the_error_page_of_a_broken_database_needs_nobody(client):
    from logbook.core.errors import gone_wrong

    assert "nobody signed in" in words(gone_wrong(None))
