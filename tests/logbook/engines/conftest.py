"""Invented rows that the tests of this room share; imported late, for this file is read before Django is set up."""

import pytest


@pytest.fixture(autouse=True)
def photos_of_the_test(settings, tmp_path):
    settings.MEDIA_ROOT = tmp_path


@pytest.fixture
def shop():
    from tests.factories import make_shop

    return make_shop()


@pytest.fixture
def people(shop):
    from logbook.people.models import ROLES
    from tests.factories import make_person

    return {role: make_person(shop, role.title(), role) for role in ROLES}


@pytest.fixture
def engine(shop):
    from tests.factories import make_engine

    return make_engine(shop)


@pytest.fixture
def rows(people, engine):
    """One of everything that hangs on an engine."""
    from logbook.engines import services
    from tests.factories import NOW, make_limits, make_meter

    meter = make_meter(engine, people["technician"])
    held = make_limits(engine, people["toolroom"], people["supervisor"])
    draft = services.begin_sheet(by=people["toolroom"], at=NOW, engine=engine)
    part = services.add_part(by=people["technician"], at=NOW, kind="head", mark="H-12")
    services.fit_part(by=people["technician"], at=NOW, part=part, engine=engine, position="cylinder 3", fitted_at=NOW)
    time_out = services.record_out_of_service(
        by=people["supervisor"], at=NOW, engine=engine, from_at=NOW, who_was_told="owner"
    )
    return {"meter": meter, "reading": meter.readings.get(), "held": held, "draft": draft, "part": part,
            "line": draft.lines.first(), "time_out": time_out}  # fmt: skip
