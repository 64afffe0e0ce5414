"""The due list and the intervals of an engine, as each role sees and uses them."""

from datetime import timedelta

from django.urls import reverse
from django.utils import timezone

from logbook.work.models import Deferral, Interval, WorkOrder
from logbook.work.services import record_done
from tests.factories import NOW, make_engine, make_meter
from tests.logbook.work.read_page import kept, said, text


def test_the_due_list_says_where_a_job_stands_and_draws_its_tape(signed_in, engine, people):
    interval, now = kept(engine, every_days=None, every_hours=500), timezone.now()
    make_meter(engine, people["supervisor"], shows=1000.0, at=now - timedelta(days=100))
    meter = engine.meters.get()
    meter.readings.create(
        shop=engine.shop, shows=1410.0, taken_at=now, recorded_at=now, recorded_by=people["supervisor"]
    )
    record_done(interval, by=people["supervisor"], at=now, done_at=now - timedelta(days=100), totals={"h": 1000.0})
    page = signed_in("technician").get(reverse("work:due"))
    # 90 h at 4.1 h a day are 21.95 days
    due_on = now.date() + timedelta(days=21)
    assert f"in 90 h, about {due_on.day} {due_on:%B %Y}" in text(page)
    assert page.content.count(b'<svg class="tape"') == 1
    assert "410 h of 500 h gone since last done" in text(page)


def test_a_job_that_cannot_be_projected_has_no_tape_and_says_why(signed_in, engine, people):
    interval = kept(engine, every_days=None, every_hours=500)
    make_meter(engine, people["supervisor"], at=timezone.now())
    record_done(interval, by=people["supervisor"], at=timezone.now(), totals={"h": 4000.0})
    page = signed_in("technician").get(reverse("work:due"))
    assert "290 h left; no day can be told: one meter reading only" in text(page)
    assert b'<svg class="tape"' not in page.content


def test_a_supervisor_opens_a_work_order_for_the_ticked_jobs(signed_in, engine):
    oil, lash = kept(engine), kept(engine, "Lash", kind="valve_lash")
    page = signed_in("supervisor").post(reverse("work:due"), {"interval": [oil.pk, lash.pk]}, follow=True)
    order = WorkOrder.objects.get()
    assert page.redirect_chain[-1][0] == reverse("work:job", args=[order.number])
    assert (order.title, set(order.intervals.all())) == ("Lash, Oil", {oil, lash})


def test_ticked_jobs_of_two_engines_become_two_work_orders(signed_in, engine, shop):
    ticked = [kept(engine).pk, kept(make_engine(shop, "South ferry")).pk]
    page = signed_in("supervisor").post(reverse("work:due"), {"interval": ticked}, follow=True)
    assert said(page) == ["Work orders 1, 2 are open."]
    assert WorkOrder.objects.count() == 2


def test_nothing_ticked_opens_nothing_and_says_so(signed_in, engine):
    kept(engine)
    page = signed_in("supervisor").post(reverse("work:due"), {}, follow=True)
    assert said(page) == ["No job is ticked: tick what is to be done, then open the work order."]


def test_only_a_supervisor_is_offered_to_open_and_may(signed_in, engine):
    interval = kept(engine)
    for role in ("technician", "toolroom"):
        page = signed_in(role).get(reverse("work:due"))
        assert "Open a work order" not in text(page) and 'type="checkbox"' not in text(page)
        assert signed_in(role).post(reverse("work:due"), {"interval": [interval.pk]}).status_code == 403
    assert WorkOrder.objects.count() == 0


def test_a_witness_comes_from_outside_and_has_no_say_in_what_is_due(signed_in, engine):
    interval = kept(engine)
    assert signed_in("witness").get(reverse("work:due")).status_code == 403
    assert signed_in("witness").post(reverse("work:due"), {"interval": [interval.pk]}).status_code == 403


def test_the_due_page_keeps_its_count_of_queries(signed_in, shop, people, django_assert_max_num_queries):
    for number in range(3):
        kept(make_engine(shop, f"Engine {number}"))
    client = signed_in("supervisor")
    client.get(reverse("work:due"))
    with django_assert_max_num_queries(12) as three:
        client.get(reverse("work:due"))
    for number in range(3, 40):
        record_done(kept(make_engine(shop, f"Engine {number}")), by=people["supervisor"], at=NOW, totals={})
    with django_assert_max_num_queries(len(three)):
        page = client.get(reverse("work:due"))
    assert len(page.context["now_due"]) == 40


def test_an_interval_is_written_down_with_the_shops_decimal_mark_and_miles(signed_in, engine, shop):
    shop.decimal_mark = ","
    shop.save()
    told = {"title": "Oil", "every_hours": "150,5", "every_km": "1500 mi", "window_percent": "10"}
    page = signed_in("supervisor").post(reverse("work:new_interval", args=[engine.pk]), told, follow=True)
    interval = Interval.objects.get()
    assert (interval.every_hours, interval.every_km, interval.every_days) == (150.5, 2414.016, None)
    assert "every 150 h or 2414 km, whichever comes first" in text(page)
    form = signed_in("supervisor").get(reverse("work:change_interval", args=[interval.pk]))
    assert 'name="every_hours" value="150,5"' in text(form)


def test_an_interval_that_counts_nothing_is_refused_in_words_and_what_was_typed_stays(signed_in, engine):
    told = {"title": "Oil", "every_hours": "often", "window_percent": "10"}
    page = signed_in("supervisor").post(reverse("work:new_interval", args=[engine.pk]), told)
    assert page.status_code == 422
    assert "Read “often”, which doesn't begin with a number" in text(page)
    assert 'value="often"' in text(page)
    page = signed_in("supervisor").post(reverse("work:new_interval", args=[engine.pk]), told | {"every_hours": ""})
    assert "Say how often: by hours, days, starts or distance." in text(page)


def test_a_title_taken_already_is_refused_in_words(signed_in, engine):
    kept(engine)
    told = {"title": "Oil", "every_days": "90", "window_percent": "10"}
    page = signed_in("supervisor").post(reverse("work:new_interval", args=[engine.pk]), told)
    assert "This engine has a job of this name already." in text(page)


def test_a_job_done_elsewhere_is_recorded_with_where_the_meter_stood(signed_in, engine, people):
    make_meter(engine, people["supervisor"], at=NOW)
    interval = kept(engine, every_hours=500)
    address = reverse("work:record_done", args=[interval.pk])
    assert 'name="h" value="4210"' in text(signed_in("technician").get(address))
    signed_in("technician").post(address, {"done_on": "2026-03-02", "h": "4000"})
    done = interval.times_done.get()
    assert (f"{done.done_at:%Y-%m-%d}", done.totals, done.recorded_by) == (
        "2026-03-02", {"h": 4000.0}, people["technician"],
    )  # fmt: skip


def test_a_job_is_put_off_with_a_reason(signed_in, engine, people):
    interval = kept(engine)
    until = timezone.now().date() + timedelta(days=30)
    address = reverse("work:defer", args=[interval.pk])
    page = signed_in("supervisor").post(address, {"until_on": until.isoformat(), "reason": "no parts"}, follow=True)
    assert Deferral.objects.get().reason == "no parts"
    assert f"Put off by Supervisor 1 until {until.day} {until:%B %Y}: no parts" in text(page)


def test_an_interval_is_stopped_and_kept_again(signed_in, engine):
    interval = kept(engine)
    address = reverse("work:stop_interval", args=[interval.pk])
    page = signed_in("supervisor").post(address, follow=True)
    assert said(page) == ["“Oil” has left the due list; what was done stays."]
    page = signed_in("supervisor").post(address, follow=True)
    assert said(page) == ["“Oil” is kept again."]
