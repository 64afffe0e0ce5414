"""A job at the bench, made anew for each test that asks for it."""

import pytest


@pytest.fixture
def make_bench(db):
    from tests.logbook.bench.job import make_bench  # Django's tables are ready only once the tests run

    return make_bench


@pytest.fixture
def bench(make_bench):
    return make_bench()
