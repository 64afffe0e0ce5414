"""A shop with a person of each role, an engine, and a job on it.

Rows are imported inside: pytest reads this file before the program is set up.
"""

import pytest

ROLES = ("technician", "supervisor", "toolroom", "witness")


@pytest.fixture
def shop(db):
    from tests.factories import make_shop

    return make_shop()


@pytest.fixture
def people(shop):
    from tests.factories import make_person

    return {role: make_person(shop, f"{role.capitalize()} 1", role) for role in ROLES}


@pytest.fixture
def engine(shop):
    from tests.factories import make_engine

    return make_engine(shop)


@pytest.fixture
def signed_in(client, people):
    """Signs a role's person in."""

    def as_(role):
        client.force_login(people[role])
        return client

    return as_


@pytest.fixture
def order(people, engine):
    from logbook.work.services import open_work_order
    from tests.factories import NOW

    return open_work_order(by=people["supervisor"], at=NOW, engine=engine, title="Check", kinds=["compression"])


@pytest.fixture
def at_the_bench(order, people):
    """The job at the bench: its task started by the technician, under two locks."""
    from logbook.work.services import start_task, take_lock
    from measurements.kind import CRANKED
    from tests.factories import NOW

    for point in ("fuel", "ignition or stop lever"):
        take_lock(order, by=people["technician"], at=NOW, state=CRANKED, point=point)
    start_task(order.tasks.get(), by=people["technician"], at=NOW)
    order.refresh_from_db()
    return order
