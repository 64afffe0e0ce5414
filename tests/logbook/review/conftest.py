"""The invented bench that the tests of this room start from."""

import pytest


@pytest.fixture
def bench(db):
    from tests.logbook.review.jobs import Bench  # models load once Django is set up

    return Bench()
