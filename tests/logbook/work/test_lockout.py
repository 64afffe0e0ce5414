"""Lockout: what each state asks, how one goes over into the next, and whose locks they are."""

import pytest

from logbook.work.lockout import CRANK_HOLD, DRIVEN, FUEL, HOW, IGNITION, STARTER, STATES, change_to
from logbook.work.models import Lock
from logbook.work.roles import NotTheirs
from logbook.work.services import NotNow, add_task, drop, lift_lock, open_work_order, start_task, take_lock
from logbook.work.services.lock_guard import LocksMissing
from logbook.work.services.locks import NotYourLock
from measurements.kind import AT_REST, CRANKED, TURNED_BY_HAND, UNDER_AIR, find_kinds
from tests.factories import NOW, make_engine, make_person, make_shop

ISOLATED = {STARTER, FUEL, IGNITION, DRIVEN}


@pytest.fixture
def shop(db):
    return make_shop()


@pytest.fixture
def order(shop):
    opener = make_person(shop, "Supervisor 1", "supervisor")
    return open_work_order(
        by=opener, at=NOW, engine=make_engine(shop), title="Check", kinds=["valve_lash", "compression", "leak_down"]
    )


@pytest.fixture
def technician(shop):
    return make_person(shop, "Technician 3")


def lock_all(order, person, state):
    return [take_lock(order, by=person, at=NOW, state=state, point=point) for point in STATES[state].locked]


def test_every_state_a_kind_can_need_is_known_and_every_point_says_how():
    assert {kind.lock_state for kind in find_kinds().values()} <= set(STATES)
    assert {point for asked in STATES.values() for point in (*asked.locked, *asked.free)} == set(HOW)
    assert all(not set(asked.locked) & set(asked.free) for asked in STATES.values())


def test_every_state_has_its_cautions_under_a_signal_word_of_ansi_z535_6():
    signals = {caution.signal for asked in STATES.values() for caution in asked.cautions}
    assert signals <= {"DANGER", "WARNING", "CAUTION", "NOTICE"}
    assert all(asked.cautions for asked in STATES.values())


# product.md, "Safety": turned by hand (isolated), cranked (ignition and fuel off, all clear), under air (crank
# mechanically held, bar out); at rest is isolated too
@pytest.mark.parametrize(
    ("from_state", "to_state", "lift", "take"),
    [
        (None, AT_REST, set(), ISOLATED),
        (None, TURNED_BY_HAND, set(), ISOLATED),
        (None, CRANKED, set(), {FUEL, IGNITION}),
        (None, UNDER_AIR, set(), {*ISOLATED, CRANK_HOLD}),
        (AT_REST, AT_REST, set(), set()),
        (AT_REST, TURNED_BY_HAND, set(), set()),
        (AT_REST, CRANKED, {STARTER}, set()),
        (AT_REST, UNDER_AIR, set(), {CRANK_HOLD}),
        (TURNED_BY_HAND, AT_REST, set(), set()),
        (TURNED_BY_HAND, TURNED_BY_HAND, set(), set()),
        (TURNED_BY_HAND, CRANKED, {STARTER}, set()),
        (TURNED_BY_HAND, UNDER_AIR, set(), {CRANK_HOLD}),
        (CRANKED, AT_REST, set(), {STARTER, DRIVEN}),
        (CRANKED, TURNED_BY_HAND, set(), {STARTER, DRIVEN}),
        (CRANKED, CRANKED, set(), set()),
        (CRANKED, UNDER_AIR, set(), {STARTER, DRIVEN, CRANK_HOLD}),
        (UNDER_AIR, AT_REST, set(), set()),
        (UNDER_AIR, TURNED_BY_HAND, {CRANK_HOLD}, set()),
        (UNDER_AIR, CRANKED, {STARTER, CRANK_HOLD}, set()),
        (UNDER_AIR, UNDER_AIR, set(), set()),
    ],
)
def test_going_over_lifts_and_takes_locks_by_name(from_state, to_state, lift, take):
    change = change_to(to_state, STATES[from_state].locked if from_state else ())
    assert (set(change.lift), set(change.take)) == (lift, take)


def test_a_lock_on_a_point_of_ones_own_naming_stays_as_it_is():
    assert change_to(CRANKED, ["seawater valve"]).keep == ("seawater valve",)


def test_a_task_is_not_started_without_the_persons_own_locks(order, technician, shop):
    lock_all(order, make_person(shop, "Technician 5"), TURNED_BY_HAND)
    take_lock(order, by=technician, at=NOW, state=TURNED_BY_HAND, point=FUEL)
    with pytest.raises(LocksMissing) as refused:
        start_task(order.tasks.get(place=1), by=technician, at=NOW)
    assert str(refused.value) == (
        "For “turned by hand” your lock is missing on: starting battery or starting air, ignition or stop lever, "
        "driven machine."
    )
    order.refresh_from_db()
    assert order.state == "planned"


def test_with_the_locks_on_the_first_task_brings_the_job_to_the_bench(order, technician):
    lock_all(order, technician, TURNED_BY_HAND)
    task = start_task(order.tasks.get(place=1), by=technician, at=NOW)
    order.refresh_from_db()
    assert (task.started_at, order.state, order.at_bench_since) == (NOW, "at_the_bench", NOW)


def test_the_starter_locked_by_anybody_stands_in_the_way_of_cranking(order, technician, shop):
    other = make_person(shop, "Technician 5")
    lock_all(order, technician, CRANKED)
    (theirs,) = [lock for lock in lock_all(order, other, TURNED_BY_HAND) if lock.point == STARTER]
    with pytest.raises(LocksMissing) as refused:
        start_task(order.tasks.get(place=2), by=technician, at=NOW)
    assert str(refused.value) == (
        "For “cranked” the lock of Technician 5 on starting battery or starting air must be lifted by them."
    )
    lift_lock(theirs, by=other, at=NOW, lifted_for=CRANKED)
    assert start_task(order.tasks.get(place=2), by=technician, at=NOW).started_at == NOW


def test_a_lock_for_another_job_on_the_same_engine_stands_in_the_way_too(order, technician, shop):
    second = open_work_order(by=order.opened_by, at=NOW, engine=order.engine, title="Lash", kinds=["valve_lash"])
    lock_all(second, make_person(shop, "Technician 5"), TURNED_BY_HAND)
    lock_all(order, technician, CRANKED)
    with pytest.raises(LocksMissing, match="the lock of Technician 5 on starting battery or starting air"):
        start_task(order.tasks.get(place=2), by=technician, at=NOW)


def test_a_lock_on_another_engine_stands_in_nobodys_way(order, technician, shop):
    second = open_work_order(
        by=order.opened_by, at=NOW, engine=make_engine(shop, "South ferry"), title="Lash", kinds=["valve_lash"]
    )
    lock_all(second, make_person(shop, "Technician 5"), TURNED_BY_HAND)
    lock_all(order, technician, CRANKED)
    assert start_task(order.tasks.get(place=2), by=technician, at=NOW).started_at == NOW


def test_nobody_lifts_another_persons_lock(order, technician, shop):
    lock = take_lock(order, by=technician, at=NOW, state=CRANKED, point=FUEL)
    for other in (make_person(shop, "Technician 5"), make_person(shop, "Both 1", "supervisor", "technician")):
        with pytest.raises(NotYourLock) as refused:
            lift_lock(lock, by=other, at=NOW)
        assert str(refused.value) == "The lock on fuel is Technician 3's: nobody else lifts it. Ask them."
    assert Lock.objects.get().lifted_at is None


def test_a_lifted_lock_says_what_for_and_can_be_taken_again(order, technician):
    lock = take_lock(order, by=technician, at=NOW, state=TURNED_BY_HAND, point=STARTER)
    lift_lock(lock, by=technician, at=NOW, lifted_for="cranked")
    again = take_lock(order, by=technician, at=NOW, state=UNDER_AIR, point=STARTER)
    assert list(Lock.objects.order_by("pk").values_list("state", "lifted_for")) == [
        (TURNED_BY_HAND, "cranked"),
        (UNDER_AIR, ""),
    ]
    assert again.pk != lock.pk


def test_a_lock_taken_twice_on_a_point_is_one(order, technician):
    first = take_lock(order, by=technician, at=NOW, state=CRANKED, point=FUEL)
    assert take_lock(order, by=technician, at=NOW, state=UNDER_AIR, point=" fuel ") == first


def test_who_is_no_technician_takes_no_lock(order):
    with pytest.raises(NotTheirs, match="it takes the role technician"):
        take_lock(order, by=order.opened_by, at=NOW, state=CRANKED, point=FUEL)


def test_no_lock_is_taken_for_a_job_that_is_over(order, technician):
    drop(order, by=order.opened_by, at=NOW, reason="sold")
    with pytest.raises(NotNow, match="is “dropped”: no lock is taken for it any more"):
        take_lock(order, by=technician, at=NOW, state=CRANKED, point=FUEL)


def test_other_work_asks_for_the_locks_of_its_state(order, technician):
    gasket = add_task(order, by=technician, at=NOW, title="Renew the gasket", lock_state=AT_REST)
    with pytest.raises(LocksMissing, match="For “at rest” your lock is missing on"):
        start_task(gasket, by=technician, at=NOW)
