"""The due list: what is kept, what was done, what is put off, worst first, in a fixed number of queries."""

from datetime import UTC, date, datetime, timedelta

import pytest
from django.contrib.auth.models import AnonymousUser

from logbook.engines.models import Meter, MeterReading, OutOfService
from logbook.work.models import Interval
from logbook.work.queries import due_list, in_stops, meter_totals
from logbook.work.roles import NotTheirs
from logbook.work.services import (
    NotNow,
    defer,
    keep_interval,
    open_work_order,
    record_done,
    stop_interval,
)
from tests.factories import NOW, make_engine, make_meter, make_person, make_shop

DAY = timedelta(days=1)


@pytest.fixture
def shop(db):
    return make_shop()


@pytest.fixture
def supervisor(shop):
    return make_person(shop, "Supervisor 1", "supervisor")


@pytest.fixture
def engine(shop):
    return make_engine(shop)


def kept(engine, title="Oil", **more):
    told = more if any(name.startswith("every") for name in more) else {"every_days": 180, **more}
    return Interval.objects.create(shop=engine.shop, engine=engine, title=title, **told)


def read(meter, by, *rows):
    for at, shows in rows:
        MeterReading.objects.create(
            shop=meter.shop, meter=meter, shows=shows, taken_at=at, recorded_at=at, recorded_by=by
        )


def titles(jobs):
    return [job.interval.title for job in jobs]


def test_a_job_never_done_here_is_unknown(engine, supervisor):
    kept(engine)
    (job,) = due_list(supervisor, NOW)
    assert (job.stage, str(job.first.why_not)) == ("unknown", "never done here")


def test_done_by_the_calendar_counts_from_that_day_in_the_shops_own_time_zone(supervisor, shop, engine):
    shop.time_zone = "Pacific/Auckland"
    shop.save()
    late_evening_utc = datetime(2026, 5, 1, 20, tzinfo=UTC)  # the second of May there
    supervisor.refresh_from_db()
    record_done(kept(engine, every_days=10), by=supervisor, at=late_evening_utc, totals={})
    (job,) = due_list(supervisor, late_evening_utc)
    assert job.first.due_on == date(2026, 5, 12)


def test_a_replaced_meter_and_a_superseded_reading_leave_the_count_right(engine, supervisor):
    meter = make_meter(engine, supervisor, shows=4000.0, at=NOW - 200 * DAY)
    wrong = MeterReading.objects.create(
        shop=engine.shop, meter=meter, shows=9100.0, taken_at=NOW - 100 * DAY, recorded_at=NOW, recorded_by=supervisor
    )
    MeterReading.objects.create(
        shop=engine.shop, meter=meter, shows=4100.0, taken_at=NOW - 100 * DAY, recorded_at=NOW, recorded_by=supervisor,
        supersedes=wrong, reason="digits swapped",
    )  # fmt: skip
    meter.replaced_at = NOW - 100 * DAY
    meter.save()
    second = Meter.objects.create(
        shop=engine.shop, engine=engine, fitted_at=NOW - 100 * DAY, shows_at_fitting=10.0, engine_before=4100.0
    )
    read(second, supervisor, (NOW, 110.0))
    record_done(kept(engine, every_hours=500), by=supervisor, at=NOW, done_at=NOW - 200 * DAY, totals={"h": 4000.0})

    (job,) = due_list(supervisor, NOW)

    assert meter_totals(engine, NOW) == {"h": 4200.0}
    assert job.first.left == 300.0
    assert job.first.due_on == date(2027, 2, 26)  # 1 h a day: 300 days after 2 May 2026


def test_inside_the_window_the_next_count_does_not_move(engine, supervisor):
    interval = kept(engine, every_hours=500, every_days=365)
    record_done(interval, by=supervisor, at=NOW, done_at=NOW - 365 * DAY, totals={"h": 1000.0})
    done = record_done(interval, by=supervisor, at=NOW, done_at=NOW - 100 * DAY, totals={"h": 1540.0})
    # 1540 is inside 1450 … 1550: counted from 1500; the day is 265 after, outside 328.5 … 401.5: from the day it was done
    assert done.counts_from == {"h": 1500.0, "d": "2026-01-22"}
    assert done.totals == {"h": 1540.0}


def test_a_unit_whose_total_was_not_known_is_said_so(engine, supervisor):
    interval = kept(engine, every_hours=500, every_days=365)
    record_done(interval, by=supervisor, at=NOW, totals={})
    (job,) = due_list(supervisor, NOW)
    assert [(count.unit, str(count.why_not)) for count in job.counts] == [
        ("h", "not known where it was last done"),
        ("d", "None"),
    ]
    assert job.first.unit == "d"


def test_a_work_order_counts_an_interval_once_and_when_measuring_was_finished(engine, supervisor):
    interval = kept(engine)
    order = open_work_order(by=supervisor, at=NOW, engine=engine, title="Oil", kinds=[], intervals=[interval])
    order.finished_at = NOW - 2 * DAY
    order.save()
    first = record_done(interval, by=supervisor, at=NOW, totals={}, work_order=order)
    assert record_done(interval, by=supervisor, at=NOW, totals={}, work_order=order) == first
    assert (first.done_at, interval.times_done.count()) == (NOW - 2 * DAY, 1)


def test_a_job_is_not_recorded_before_it_is_done(engine, supervisor):
    with pytest.raises(NotNow, match="Read 2026-05-03 09:30, which is still to come"):
        record_done(kept(engine), by=supervisor, at=NOW, done_at=NOW + DAY, totals={})


def test_worst_first_and_duty_weighs_among_equals(shop, supervisor):
    service, saving = make_engine(shop, "South ferry"), make_engine(shop, "Fire pump", duty="life_saving")
    for engine, title, ago in [
        (service, "over a little", 190), (service, "over more", 400), (saving, "over for life", 181),
        (service, "later", 1), (saving, "later for life", 10), (service, "due", 170),
    ]:  # fmt: skip
        record_done(kept(engine, title), by=supervisor, at=NOW, done_at=NOW - ago * DAY, totals={})
    kept(service, "never done")
    assert titles(due_list(supervisor, NOW)) == [
        "over for life", "over more", "over a little", "never done", "due", "later for life", "later",
    ]  # fmt: skip


def test_a_job_put_off_stands_last_until_its_day_and_then_where_it_was(engine, supervisor):
    over, later = kept(engine, "over"), kept(engine, "later")
    record_done(over, by=supervisor, at=NOW, done_at=NOW - 300 * DAY, totals={})
    record_done(later, by=supervisor, at=NOW, totals={})
    defer(over, by=supervisor, at=NOW, until_on=date(2026, 5, 20), reason="ferry is under way until then")
    jobs = due_list(supervisor, NOW)
    assert titles(jobs) == ["later", "over"]
    assert (jobs[1].deferral.deferred_by, jobs[1].deferral.reason) == (supervisor, "ferry is under way until then")
    assert titles(due_list(supervisor, datetime(2026, 5, 21, 12, tzinfo=UTC))) == ["over", "later"]


def test_a_job_is_put_off_by_a_supervisor_to_a_day_to_come_with_a_reason(engine, supervisor, shop):
    interval = kept(engine)
    with pytest.raises(NotNow, match="Read 2026-05-02, which isn't to come any more"):
        defer(interval, by=supervisor, at=NOW, until_on=date(2026, 5, 2), reason="no parts")
    with pytest.raises(Exception, match="can't be blank|cannot be blank"):
        defer(interval, by=supervisor, at=NOW, until_on=date(2026, 5, 9), reason=" ")
    with pytest.raises(NotTheirs):
        defer(interval, by=make_person(shop, "Technician 3"), at=NOW, until_on=date(2026, 5, 9), reason="no parts")


def test_jobs_that_share_a_cover_stand_together_where_the_worst_of_them_stands(engine, supervisor, shop):
    other = make_engine(shop, "South ferry")
    for of, title, ago, opens in [
        (engine, "lash", 300, "valve cover"), (other, "their oil", 200, ""), (engine, "springs", 1, "Valve Cover"),
        (other, "their lash", 100, "valve cover"),
    ]:  # fmt: skip
        record_done(kept(of, title, opens=opens), by=supervisor, at=NOW, done_at=NOW - ago * DAY, totals={})
    assert [titles(stop.jobs) for stop in in_stops(due_list(supervisor, NOW))] == [
        ["lash", "springs"],
        ["their oil"],
        ["their lash"],
    ]


def test_a_job_shows_its_open_order_and_whether_its_engine_is_out(engine, supervisor):
    interval = kept(engine)
    order = open_work_order(by=supervisor, at=NOW, engine=engine, title="Oil", kinds=[], intervals=[interval])
    OutOfService.objects.create(
        shop=engine.shop,
        engine=engine,
        from_at=NOW - DAY,
        who_was_told="harbour",
        recorded_by=supervisor,
        recorded_at=NOW,
    )
    (job,) = due_list(supervisor, NOW)
    assert (job.orders, job.out_since) == ((order,), NOW - DAY)


def test_a_stopped_job_leaves_the_list_and_comes_back_when_it_is_kept_again(engine, supervisor):
    interval = kept(engine)
    stop_interval(interval, by=supervisor, at=NOW)
    assert due_list(supervisor, NOW) == []
    keep_interval(interval, by=supervisor, at=NOW)
    assert titles(due_list(supervisor, NOW)) == ["Oil"]


def test_another_shop_and_nobody_see_no_job(engine):
    kept(engine)
    stranger = make_person(make_shop("Weir workshop"), "Supervisor 9", "supervisor")
    assert due_list(stranger, NOW) == due_list(AnonymousUser(), NOW) == []


def fill(shop, supervisor, engines, visits):
    for _engine in range(engines):
        engine = make_engine(shop, f"Engine {Interval.objects.count()}")
        meter = make_meter(engine, supervisor, shows=1000.0, at=NOW - 300 * DAY)
        for title in ("Oil", "Lash"):
            interval = kept(engine, title, every_hours=500, every_days=365, opens="cover")
            for ago in range(visits, 0, -1):
                record_done(interval, by=supervisor, at=NOW, done_at=NOW - 10 * ago * DAY, totals={"h": 1000.0 - ago})
                defer(interval, by=supervisor, at=NOW, until_on=date(2026, 6, 1), reason="busy")
            open_work_order(by=supervisor, at=NOW, engine=engine, title=title, kinds=[], intervals=[interval])
        read(meter, supervisor, *((NOW - ago * DAY, 1200.0 - ago) for ago in range(visits)))


def test_the_number_of_queries_does_not_grow(shop, supervisor, django_assert_num_queries):
    fill(shop, supervisor, engines=1, visits=1)
    with django_assert_num_queries(6):
        due_list(supervisor, NOW)
    fill(shop, supervisor, engines=5, visits=4)
    with django_assert_num_queries(6):
        jobs = due_list(supervisor, NOW)
        assert [(job.interval.engine.name, job.orders[0].title, job.deferral.reason) for job in jobs]
    assert len(jobs) == 12
