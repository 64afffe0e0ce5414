"""Work orders are opened under one number each, with their tasks."""

from threading import Barrier, Thread

import pytest
from django.core.exceptions import ValidationError
from django.db import connection, connections
from django.db.utils import ConnectionHandler

from logbook.core.database import sqlite_at
from logbook.engines.models import Engine, Part
from logbook.people.models import Person
from logbook.work.models import Interval, WorkOrder
from logbook.work.roles import NotTheirs
from logbook.work.services import NotNow, add_task, drop, open_work_order
from measurements.kind import AT_REST, CRANKED, TURNED_BY_HAND
from tests.factories import NOW, make_engine, make_person, make_shop


@pytest.fixture
def shop(db):
    return make_shop()


@pytest.fixture
def supervisor(shop):
    return make_person(shop, "Supervisor 1", "supervisor")


def opened(supervisor, engine=None, **more):
    told = {"title": "Spring check", "kinds": ["valve_lash"]}
    engine = engine or make_engine(supervisor.shop, f"Engine {WorkOrder.objects.count() + 1}")
    return open_work_order(by=supervisor, at=NOW, engine=engine, **{**told, **more})


def test_numbers_run_on_in_a_shop_and_begin_again_in_another(supervisor):
    other = make_person(make_shop("Weir workshop"), "Supervisor 9", "supervisor")
    assert [opened(supervisor).number, opened(supervisor).number, opened(other).number] == [1, 2, 1]


def test_each_kind_brings_its_task_with_its_title_and_the_state_it_needs(supervisor):
    order = opened(supervisor, kinds=["valve_lash", "compression", "valve_lash"])
    assert list(order.tasks.values_list("place", "title", "kind", "lock_state")) == [
        (1, "Valve lash", "valve_lash", TURNED_BY_HAND),
        (2, "Compression", "compression", CRANKED),
    ]


def test_an_interval_brings_its_kind_or_its_other_work(shop, supervisor):
    engine = make_engine(shop)
    lash = Interval.objects.create(shop=shop, engine=engine, title="Lash", kind="valve_lash", every_hours=500)
    oil = Interval.objects.create(shop=shop, engine=engine, title="Change the oil", every_days=180)
    order = opened(supervisor, engine, kinds=[], intervals=[lash, oil])
    assert list(order.tasks.values_list("title", "kind", "lock_state")) == [
        ("Valve lash", "valve_lash", TURNED_BY_HAND),
        ("Change the oil", "", AT_REST),
    ]
    assert set(order.intervals.all()) == {lash, oil}


def test_an_interval_of_another_engine_is_refused(shop, supervisor):
    oil = Interval.objects.create(shop=shop, engine=make_engine(shop, "South ferry"), title="Oil", every_days=180)
    with pytest.raises(NotNow, match="“Oil” belongs to South ferry; open a work order for that engine"):
        opened(supervisor, make_engine(shop), intervals=[oil])


def test_a_loose_part_is_measured_at_rest(shop, supervisor):
    liner = Part.objects.create(shop=shop, kind="liner", mark="L-7", created_at=NOW)
    order = open_work_order(by=supervisor, at=NOW, part=liner, title="Measure the liner", kinds=["bore"])
    assert order.tasks.get().lock_state == AT_REST


def test_a_work_order_is_for_an_engine_or_a_part_and_never_for_both_or_none(shop, supervisor):
    with pytest.raises(ValidationError, match="for an engine or for a loose part"):
        open_work_order(by=supervisor, at=NOW, title="Lash", kinds=["valve_lash"])
    assert WorkOrder.objects.count() == 0


def test_a_kind_nobody_knows_is_refused_by_name(supervisor):
    with pytest.raises(NotNow, match="There is no kind of measurement called “lsah”"):
        opened(supervisor, kinds=["lsah"])


def test_a_technician_opens_no_work_order(shop):
    with pytest.raises(NotTheirs, match="it takes the role supervisor"):
        opened(make_person(shop, "Technician 3"))


def test_nobody_opens_a_work_order_for_another_shops_engine(supervisor):
    theirs = make_engine(make_shop("Weir workshop"))
    with pytest.raises(NotTheirs, match="has no say in this shop"):
        opened(supervisor, theirs)


def test_other_work_is_added_at_the_end_until_the_job_is_over(shop, supervisor):
    order = opened(supervisor)
    task = add_task(order, by=supervisor, at=NOW, title=" Renew the gasket ", lock_state=AT_REST)
    assert (task.place, task.title, task.kind) == (2, "Renew the gasket", "")
    drop(order, by=supervisor, at=NOW, reason="sold")
    with pytest.raises(NotNow, match="is “dropped”: no task can be added any more"):
        add_task(order, by=supervisor, at=NOW, title="Paint", lock_state=AT_REST)


def test_a_task_needs_a_state_that_an_engine_can_be_in(supervisor):
    with pytest.raises(NotNow) as refused:
        add_task(opened(supervisor), by=supervisor, at=NOW, title="Paint", lock_state="running")
    assert str(refused.value) == (
        "“running” is no state of an engine; it is one of: at rest, turned by hand, cranked, under air."
    )


@pytest.fixture
def doors(tmp_path):
    """Opens connections as separate requests have them: PostgreSQL's own, or a copy of SQLite's database in a file."""
    if connection.vendor != "sqlite":
        return connection.copy
    door = ConnectionHandler({"default": sqlite_at(tmp_path / "race.sqlite3")})["default"]
    door.ensure_connection()
    connection.connection.backup(door.connection)
    door.close()
    return lambda: ConnectionHandler({"default": sqlite_at(tmp_path / "race.sqlite3")})["default"]


@pytest.mark.django_db(transaction=True)
def test_those_who_open_at_the_same_moment_get_a_number_each(request):
    make_engine(make_person(make_shop(), "Supervisor 1", "supervisor").shop)
    doors, together, failed = request.getfixturevalue("doors"), Barrier(4), []

    def open_one():
        connections["default"] = doors()
        try:
            supervisor, engine = Person.objects.get(), Engine.objects.get()
            together.wait()
            open_work_order(by=supervisor, at=NOW, engine=engine, title="Lash", kinds=[])
        except Exception as error:
            failed.append(error)
        finally:
            connections["default"].close()

    threads = [Thread(target=open_one) for _ in range(4)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()

    door = doors()
    with door.cursor() as cursor:
        numbers = cursor.execute("SELECT number FROM work_workorder ORDER BY number").fetchall()
    door.close()
    assert failed == []
    assert numbers == [(1,), (2,), (3,), (4,)]
