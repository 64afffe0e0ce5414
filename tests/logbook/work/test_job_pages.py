"""The list of jobs, a new job, and a job's page, as each role sees and uses them."""

from django.urls import reverse

from logbook.engines.models import Part
from logbook.work.models import ClosingItem, HandOver, Lock, PartUsed, Task, WorkOrder
from logbook.work.services import open_item, open_work_order, take_lock
from measurements.kind import CRANKED
from tests.factories import NOW, make_person
from tests.logbook.work.read_page import kept, said, text


def test_a_new_job_is_opened_for_an_engine_with_its_kinds_and_intervals(signed_in, engine):
    interval = kept(engine)
    client = signed_in("supervisor")
    assert f'value="engine-{engine.pk}"' in text(client.get(reverse("work:new_job")))
    address = f"{reverse('work:new_job')}?for=engine-{engine.pk}"
    page = client.post(address, {"title": "Spring", "kinds": ["valve_lash"], "intervals": [interval.pk]}, follow=True)
    order = WorkOrder.objects.get()
    assert page.redirect_chain[-1][0] == reverse("work:job", args=[order.number])
    assert [task.title for task in order.tasks.all()] == ["Valve lash", "Oil"]


def test_a_new_job_is_opened_for_a_loose_part(signed_in, shop):
    liner = Part.objects.create(shop=shop, kind="liner", mark="L-7", created_at=NOW)
    address = f"{reverse('work:new_job')}?for=part-{liner.pk}"
    page = signed_in("supervisor").post(address, {"title": "Liner", "kinds": ["bore"]}, follow=True)
    assert WorkOrder.objects.get().part == liner
    assert "Put my lock on" not in text(page)


def test_a_job_is_not_opened_without_a_title(signed_in, engine):
    page = signed_in("supervisor").post(f"{reverse('work:new_job')}?for=engine-{engine.pk}", {"kinds": ["bore"]})
    assert page.status_code == 422
    assert WorkOrder.objects.count() == 0


def test_the_cautions_of_a_task_stand_before_its_locks_and_its_start(signed_in, order):
    page = text(signed_in("technician").get(reverse("work:job", args=[order.number])))
    caution, locks = (
        page.index("Ignition and fuel off, barring tool out, everybody clear"),
        page.index("Put my lock on: fuel"),
    )
    assert caution < locks
    assert "<strong>DANGER</strong>" in page
    assert "Before you work on it, your lock is needed on: fuel, ignition or stop lever." in page
    assert "Start: Compression" not in page


def test_a_technician_takes_the_locks_and_starts(signed_in, order, people):
    client = signed_in("technician")
    task = order.tasks.get()
    for point in ("fuel", "ignition or stop lever"):
        told = {"task": task.pk, "state": CRANKED, "point": point}
        page = client.post(reverse("work:take_lock", args=[order.number]), told, follow=True)
        assert said(page) == [f"Your lock is on: {point}."]
        assert page.redirect_chain[-1][0] == reverse("work:job", args=[order.number]) + f"#task-{task.pk}"
    assert "Start: Compression" in text(page)
    page = client.post(reverse("work:start_task", args=[order.number, task.pk]), follow=True)
    assert said(page) == ["“Compression” is under way."]
    order.refresh_from_db()
    assert order.state == "at_the_bench"


def test_a_start_without_locks_is_refused_in_words(signed_in, order):
    page = signed_in("technician").post(
        reverse("work:start_task", args=[order.number, order.tasks.get().pk]), follow=True
    )
    assert said(page) == ["For “cranked” your lock is missing on: fuel, ignition or stop lever."]


def test_nobody_is_offered_another_persons_lock(signed_in, at_the_bench, shop, client):
    client.force_login(make_person(shop, "Technician 5"))
    page = client.get(reverse("work:job", args=[at_the_bench.number]))
    assert "Lock of Technician 1 since 2 May, 09:30, job 1" in text(page)
    assert "Lift my lock" not in text(page)
    lock = Lock.objects.first()
    page = client.post(reverse("work:lift_lock", args=[at_the_bench.number, lock.pk]), follow=True)
    assert said(page) == ["The lock on fuel is Technician 1's: nobody else lifts it. Ask them."]


def test_a_task_is_finished_with_the_time_it_took(signed_in, at_the_bench, people):
    task = at_the_bench.tasks.get()
    signed_in("technician").post(reverse("work:finish_task", args=[at_the_bench.number, task.pk]), {"minutes": "40"})
    task.refresh_from_db()
    assert (task.minutes, task.done_by) == (40, people["technician"])


def test_the_closing_up_list_is_kept_on_the_page(signed_in, at_the_bench, people):
    number, client = at_the_bench.number, signed_in("technician")
    client.post(reverse("work:open_item", args=[number]), {"what": "valve cover off"})
    client.post(reverse("work:open_item", args=[number]), {"what": "adapter in cylinder 2"})
    cover, adapter = ClosingItem.objects.order_by("pk")
    client.post(reverse("work:close_item", args=[number, adapter.pk]))
    page = client.post(
        reverse("work:explain_item", args=[number, cover.pk]), {"reason": "gasket on order"}, follow=True
    )
    assert "Stays open: gasket on order (Technician 1)" in text(page)
    page = client.post(reverse("work:finish_measuring", args=[number]), follow=True)
    assert said(page)[0].startswith("Still open: the lock of Technician 1 on: fuel")


def test_a_job_is_handed_over_and_taken(signed_in, at_the_bench, shop, client):
    number, fifth = at_the_bench.number, make_person(shop, "Technician 5")
    page = signed_in("technician").get(reverse("work:hand_over", args=[number]))
    assert "Lock of Technician 1 on: fuel" in text(page)
    signed_in("technician").post(
        reverse("work:hand_over", args=[number]), {"to_person": fifth.pk, "told": "cylinder 3 reads low"}
    )
    assert "Take it over" not in text(signed_in("technician").get(reverse("work:job", args=[number])))
    client.force_login(fifth)
    page = client.get(reverse("work:job", args=[number]))
    assert "“cylinder 3 reads low”" in text(page)
    client.post(reverse("work:take_over", args=[number, HandOver.objects.get().pk]))
    assert HandOver.objects.get().taken_at is not None


def test_a_job_is_stopped_short_with_its_reason_and_gone_on_with(signed_in, at_the_bench):
    number = at_the_bench.number
    page = signed_in("technician").post(reverse("work:stop_short", args=[number]), {"reason": " "})
    assert page.status_code == 422
    page = signed_in("technician").post(
        reverse("work:stop_short", args=[number]), {"reason": "called out"}, follow=True
    )
    assert "Stopped short: called out" in text(page)
    page = signed_in("technician").post(reverse("work:resume", args=[number]), follow=True)
    assert "Work is under way." in text(page)


def test_a_supervisor_drops_a_job_and_a_technician_is_not_offered_to(signed_in, order):
    address = reverse("work:drop", args=[order.number])
    assert address not in text(signed_in("technician").get(reverse("work:job", args=[order.number])))
    assert address in text(signed_in("supervisor").get(reverse("work:job", args=[order.number])))
    signed_in("supervisor").post(address, {"reason": "engine sold"})
    order.refresh_from_db()
    assert order.state == "dropped"


def test_witnessed_stations_are_ticked_from_the_kinds_own_or_typed(signed_in, order, engine):
    task = order.tasks.get()
    address = reverse("work:witnessed", args=[order.number, task.pk])
    page = signed_in("supervisor").get(address)
    assert [name for name in ("1", "2", "3", "4", "5") if f'name="stations" value="{name}"' in text(page)] == [
        "1", "2", "3", "4",
    ]  # fmt: skip
    signed_in("supervisor").post(address, {"stations": ["2"], "more": "flange left, flange right"})
    task.refresh_from_db()
    assert task.witnessed_stations == ["2", "flange left", "flange right"]


def test_a_task_is_added_with_what_its_kind_needs_or_at_rest(signed_in, order):
    address = reverse("work:add_task", args=[order.number])
    signed_in("technician").post(address, {"kind": "leak_down"})
    signed_in("technician").post(address, {"title": "Renew the gasket"})
    page = signed_in("technician").post(address, {"title": ""})
    assert "Say what is to be done, or choose what is measured." in text(page)
    assert list(Task.objects.filter(place__gt=1).values_list("title", "lock_state")) == [
        ("Leak-down", "under air"),
        ("Renew the gasket", "at rest"),
    ]


def test_parts_used_and_time_leave_as_csv_that_no_spreadsheet_runs(signed_in, at_the_bench, people):
    number = at_the_bench.number
    signed_in("technician").post(reverse("work:use_part", args=[number]), {"what": "=cmd|ring", "count": "4"})
    used = PartUsed.objects.get()
    answer = signed_in("supervisor").get(reverse("work:parts", args=[number]))
    assert answer["Content-Type"] == "text/csv; charset=utf-8"
    assert answer.content.decode("utf-8-sig").splitlines() == [
        "job,engine or part,task,part used,how many,used,used by",
        f"1,North pump,,'=cmd|ring,4,{used.used_at:%Y-%m-%dT%H:%MZ},Technician 1",
    ]
    task = at_the_bench.tasks.get()
    signed_in("technician").post(reverse("work:finish_task", args=[number, task.pk]), {"minutes": "35"})
    task.refresh_from_db()
    rows = signed_in("supervisor").get(reverse("work:all_time")).content.decode("utf-8-sig").splitlines()
    assert rows[1:] == [
        f"1,North pump,Compression,compression,2026-05-02T09:30Z,{task.done_at:%Y-%m-%dT%H:%MZ},Technician 1,35"
    ]


def test_the_jobs_list_shows_what_is_open_and_apart_what_is_over(signed_in, order, people, engine):
    second = open_work_order(by=people["supervisor"], at=NOW, engine=engine, title="Sold engine", kinds=[])
    signed_in("supervisor").post(reverse("work:drop", args=[second.number]), {"reason": "sold"})
    client = signed_in("technician")
    still_open, over = text(client.get(reverse("work:jobs"))), text(client.get(reverse("work:jobs") + "?over=1"))
    assert ("1 · Check" in still_open, "2 · Sold engine" in still_open) == (True, False)
    assert ("1 · Check" in over, "2 · Sold engine" in over) == (False, True)


def test_the_job_page_keeps_its_count_of_queries(signed_in, at_the_bench, people, django_assert_max_num_queries):
    client, address = signed_in("technician"), reverse("work:job", args=[at_the_bench.number])
    open_item(at_the_bench, by=people["technician"], at=NOW, what="bar on the crank")
    client.get(address)
    with django_assert_max_num_queries(25) as few:
        client.get(address)
    for number in range(12):
        open_item(at_the_bench, by=people["technician"], at=NOW, what=f"cover {number} off")
        take_lock(at_the_bench, by=people["technician"], at=NOW, state=CRANKED, point=f"valve {number}")
    with django_assert_max_num_queries(len(few)):
        client.get(address)


def test_a_witness_sees_the_jobs_with_something_to_witness_and_no_other(signed_in, order, people, engine):
    open_work_order(by=people["supervisor"], at=NOW, engine=engine, title="Other check", kinds=["bore"])
    assert "No job has readings for you to witness." in text(signed_in("witness").get(reverse("work:jobs")))
    order.tasks.update(witnessed_stations=["2"])
    page = text(signed_in("witness").get(reverse("work:jobs")))
    assert ("1 · Check" in page, "2 · Other check" in page) == (True, False)
    assert "To be witnessed: 2" in text(signed_in("witness").get(reverse("work:job", args=[1])))
    assert signed_in("witness").get(reverse("work:job", args=[2])).status_code == 404


def test_the_page_tells_how_the_job_went_and_which_locks_were_lifted(signed_in, at_the_bench, people):
    number, lock = at_the_bench.number, at_the_bench.locks.first()
    signed_in("technician").post(reverse("work:hand_over", args=[number]), {"told": "cylinder 3 reads low"})
    page = signed_in("technician").post(
        reverse("work:lift_lock", args=[number, lock.pk]), {"for": "at rest", "back": number}, follow=True
    )
    assert [event.what for event in page.context["history"]] == [
        "planned",
        "at the bench",
        "handed over to whoever comes next",
    ]
    assert [(lifted.point, lifted.lifted_for) for lifted in page.context["lifted"]] == [("fuel", "at rest")]


def test_what_is_not_next_folds_its_cautions_away(signed_in, order, people):
    signed_in("supervisor").post(reverse("work:add_task", args=[order.number]), {"kind": "leak_down"})
    page = text(signed_in("technician").get(reverse("work:job", args=[order.number])))
    assert "Cautions and locks of: Leak-down" in page
    assert "Cautions and locks of: Compression" not in page


def test_an_address_with_a_strange_number_opens_no_job(signed_in, engine):
    client = signed_in("supervisor")
    for strange in ("engine-²", "engine-" + "9" * 30, "engine-" + "9" * 5000, "part-٣"):
        assert client.get(reverse("work:new_job"), {"for": strange}).status_code == 200
    for strange in ("²", "9" * 30, "9" * 5000):
        assert "No job is ticked" in said(client.post(reverse("work:due"), {"interval": strange}, follow=True))[0]


def test_a_lock_is_lifted_whatever_page_the_form_says_it_stood_on(signed_in, at_the_bench):
    client = signed_in("technician")
    for lock, back in zip(Lock.objects.all(), ("²", "9" * 5000), strict=True):
        page = client.post(
            reverse("work:lift_lock", args=[at_the_bench.number, lock.pk]), {"back": back, "for": "a\0b"}
        )
        assert page.url == reverse("work:job", args=[at_the_bench.number]) + "#closing-up"
    assert [lock.lifted_for for lock in Lock.objects.all()] == ["ab", "ab"]
