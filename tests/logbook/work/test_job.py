"""A job at the bench: tasks with their time, the closing-up list, handing over, stopping short, finishing."""

from datetime import timedelta

import pytest

from logbook.engines.models import Part
from logbook.work.models import ClosingItem
from logbook.work.roles import NotTheirs
from logbook.work.services import (
    NotNow,
    add_task,
    close_item,
    drop,
    explain_item,
    finish_measuring,
    finish_task,
    hand_over,
    lift_lock,
    name_witnessed,
    open_item,
    open_work_order,
    resume,
    start_task,
    stop_short,
    take_lock,
    take_over,
    use_part,
)
from logbook.work.services.hand_over import NotForYou
from measurements.kind import CRANKED
from tests.factories import NOW, make_engine, make_person, make_shop

LATER = NOW + timedelta(minutes=40)


@pytest.fixture
def shop(db):
    return make_shop()


@pytest.fixture
def supervisor(shop):
    return make_person(shop, "Supervisor 1", "supervisor")


@pytest.fixture
def technician(shop):
    return make_person(shop, "Technician 3")


@pytest.fixture
def order(shop, supervisor, technician):
    """A job at the bench, its one task started under two locks."""
    order = open_work_order(by=supervisor, at=NOW, engine=make_engine(shop), title="Check", kinds=["compression"])
    for point in ("fuel", "ignition or stop lever"):
        take_lock(order, by=technician, at=NOW, state=CRANKED, point=point)
    start_task(order.tasks.get(), by=technician, at=NOW)
    order.refresh_from_db()
    return order


def lift_all(order, person):
    for lock in order.locks.filter(lifted_at=None):
        lift_lock(lock, by=person, at=LATER)


def test_a_finished_task_says_who_when_and_how_long(order, technician):
    task = finish_task(order.tasks.get(), by=technician, at=LATER, minutes=40)
    task.refresh_from_db()
    assert (task.done_by, task.done_at, task.minutes) == (technician, LATER, 40)


def test_a_task_is_finished_once(order, technician, shop):
    finish_task(order.tasks.get(), by=technician, at=LATER)
    with pytest.raises(NotNow, match="“Compression” was finished by Technician 3 already"):
        finish_task(order.tasks.get(), by=make_person(shop, "Technician 5"), at=LATER)


def test_a_task_that_was_not_started_is_not_finished(order, technician, supervisor):
    paint = add_task(order, by=supervisor, at=NOW, title="Paint", lock_state="at rest")
    with pytest.raises(NotNow, match="“Paint” hasn't been started: start it first, under its locks"):
        finish_task(paint, by=technician, at=LATER)


def test_going_on_with_a_started_task_keeps_its_beginning(order, technician):
    assert start_task(order.tasks.get(), by=technician, at=LATER).started_at == NOW


def test_a_loose_parts_task_asks_for_no_lock(shop, supervisor, technician):
    liner = Part.objects.create(shop=shop, kind="liner", mark="L-7", created_at=NOW)
    order = open_work_order(by=supervisor, at=NOW, part=liner, title="Liner", kinds=["bore"])
    assert start_task(order.tasks.get(), by=technician, at=NOW).started_at == NOW
    with pytest.raises(NotNow, match="for a loose part: there is no engine to lock"):
        take_lock(order, by=technician, at=NOW, state=CRANKED, point="fuel")


def test_a_thing_opened_twice_is_one_item_and_after_closing_a_new_one(order, technician):
    first = open_item(order, by=technician, at=NOW, what="valve cover off")
    assert open_item(order, by=technician, at=LATER, what=" valve cover off") == first
    close_item(first, by=technician, at=LATER)
    assert open_item(order, by=technician, at=LATER, what="valve cover off") != first
    assert ClosingItem.objects.count() == 2


def test_what_is_closed_needs_no_explanation_and_an_explanation_some_words(order, technician):
    item = open_item(order, by=technician, at=NOW, what="valve cover off")
    with pytest.raises(NotNow, match="Say in a sentence why “valve cover off” stays open"):
        explain_item(item, by=technician, at=NOW, explanation=" ")
    close_item(item, by=technician, at=LATER)
    with pytest.raises(NotNow, match="closed up already"):
        explain_item(item, by=technician, at=LATER, explanation="gasket on order")


def test_measuring_is_not_finished_while_something_is_open_or_locked(order, technician):
    open_item(order, by=technician, at=NOW, what="valve cover off")
    with pytest.raises(NotNow) as refused:
        finish_measuring(order, by=technician, at=LATER)
    assert str(refused.value) == (
        "Still open: valve cover off; the lock of Technician 3 on: fuel; the lock of Technician 3 on: ignition or stop "
        "lever. Close each up, or say why it stays open."
    )
    order.refresh_from_db()
    assert order.state == "at_the_bench"


def test_closed_or_explained_and_unlocked_the_job_goes_on_to_be_decided(order, technician):
    cover = open_item(order, by=technician, at=NOW, what="valve cover off")
    adapter = open_item(order, by=technician, at=NOW, what="adapter in cylinder 2")
    explain_item(cover, by=technician, at=LATER, explanation="gasket on order, engine tagged out")
    close_item(adapter, by=technician, at=LATER)
    lift_all(order, technician)
    finish_measuring(order, by=technician, at=LATER)
    order.refresh_from_db()
    cover.refresh_from_db()
    assert (order.state, order.finished_at) == ("to_decide", LATER)
    assert (cover.explained_by, cover.explained_at) == (technician, LATER)


def test_a_job_is_not_dropped_while_locks_are_on(order, supervisor, technician):
    with pytest.raises(NotNow, match="the lock of Technician 3 on: fuel"):
        drop(order, by=supervisor, at=LATER, reason="sold")
    lift_all(order, technician)
    drop(order, by=supervisor, at=LATER, reason="sold")
    assert order.state == "dropped"


def test_a_hand_over_keeps_what_stood_open_then(order, technician, shop):
    order.crank_at = "TDC 1 firing"
    order.save()
    cover = open_item(order, by=technician, at=NOW, what="valve cover off")
    handed = hand_over(order, by=technician, at=LATER, told="cylinder 3 reads low")
    close_item(cover, by=technician, at=LATER)
    handed.refresh_from_db()
    assert [(item["form"], item["what"], item["by"]) for item in handed.open_items] == [
        ("item", "valve cover off", "Technician 3"),
        ("lock", "fuel", "Technician 3"),
        ("lock", "ignition or stop lever", "Technician 3"),
        ("crank", "TDC 1 firing", ""),
    ]


def test_whoever_comes_next_takes_an_open_hand_over_once(order, technician, shop):
    handed = hand_over(order, by=technician, at=NOW)
    fifth, sixth = make_person(shop, "Technician 5"), make_person(shop, "Technician 6")
    take_over(handed, by=fifth, at=LATER)
    handed.refresh_from_db()
    assert (handed.to_person, handed.taken_at) == (fifth, LATER)
    with pytest.raises(NotNow, match="Technician 5 has taken this job over already"):
        take_over(handed, by=sixth, at=LATER)


def test_a_named_hand_over_is_taken_by_that_person_only(order, technician, shop):
    fifth, sixth = make_person(shop, "Technician 5"), make_person(shop, "Technician 6")
    handed = hand_over(order, by=technician, at=NOW, to_person=fifth)
    with pytest.raises(NotForYou, match="handed to Technician 5, who must take it over"):
        take_over(handed, by=sixth, at=LATER)
    assert take_over(handed, by=fifth, at=LATER).taken_at == LATER


def test_a_job_is_handed_to_a_technician_and_not_to_oneself(order, technician, supervisor):
    with pytest.raises(NotForYou, match="You have this job already"):
        hand_over(order, by=technician, at=NOW, to_person=technician)
    with pytest.raises(NotTheirs, match="Supervisor 1 can't do that"):
        hand_over(order, by=technician, at=NOW, to_person=supervisor)


def test_a_job_stopped_short_is_gone_on_with_or_left_at_what_was_measured(order, technician):
    stop_short(order, by=technician, at=NOW, reason="called out to the ferry")
    with pytest.raises(NotNow, match="is “stopped short”: no task can be started on it now"):
        start_task(order.tasks.get(), by=technician, at=NOW)
    resume(order, by=technician, at=LATER)
    stop_short(order, by=technician, at=LATER, reason="adapter broke")
    lift_all(order, technician)
    finish_measuring(order, by=technician, at=LATER)
    assert list(order.moves.values_list("to_state", "reason")) == [
        ("planned", ""),
        ("at_the_bench", ""),
        ("stopped_short", "called out to the ferry"),
        ("at_the_bench", ""),
        ("stopped_short", "adapter broke"),
        ("to_decide", ""),
    ]


def test_parts_used_are_counted_above_none(order, technician):
    used = use_part(order, by=technician, at=NOW, what=" copper ring ", count=4, task=order.tasks.get())
    assert (used.what, used.count, used.task.title) == ("copper ring", 4, "Compression")
    for count in (0, -1, float("nan")):
        with pytest.raises(NotNow, match="write how many were used, more than none"):
            use_part(order, by=technician, at=NOW, what="copper ring", count=count)


def test_witnessed_stations_are_named_once_each(order, supervisor):
    task = name_witnessed(order.tasks.get(), by=supervisor, at=NOW, stations=["1", " 2 ", "1", ""])
    task.refresh_from_db()
    assert task.witnessed_stations == ["1", "2"]


@pytest.mark.parametrize("action", [stop_short, drop])
def test_a_witness_changes_nothing_on_a_job(order, shop, technician, action):
    lift_all(order, technician)
    with pytest.raises(NotTheirs):
        action(order, by=make_person(shop, "Witness 1", "witness"), at=NOW, reason="no")
