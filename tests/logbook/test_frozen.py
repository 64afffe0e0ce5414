"""A signed or dropped job is frozen: whatever is posted to its addresses, by whoever works here, nothing changes."""

import pytest
from django.urls import get_resolver, reverse

from logbook.bench.models import Act
from logbook.gauges.models import Gauge
from logbook.work.models import ClosingItem, HandOver
from tests.factories import NOW
from tests.logbook.test_access import SENSIBLE, WORDS, addresses, every_row, numbers_for, signed_in


@pytest.fixture
def bench(db):
    from tests.logbook.review.jobs import Bench

    return Bench()


@pytest.mark.parametrize("state", ["signed", "dropped"])
def test_nothing_posted_to_a_job_that_is_over_changes_a_row(bench, state):
    finding = bench.beyond(left="0.41 mm", state=state)
    order = finding.measurement.task.work_order
    told = {"shop": bench.shop, "work_order": order}
    ClosingItem.objects.create(**told, what="guard off", since_at=NOW, opened_by=bench.measures, explanation="part ordered",
                               explained_at=NOW, explained_by=bench.measures)  # fmt: skip
    HandOver.objects.create(**told, from_person=bench.measures, handed_at=NOW)
    clients = signed_in({"technician": bench.measures, "other": bench.keys, "supervisor": bench.decides})
    words = dict.fromkeys(WORDS, "told after the end") | SENSIBLE
    bodies = [words | {"does": does, "on": f"finding {finding.pk}", "gauge": Gauge.objects.get().pk, "station": "3.exhaust"}
              for does in ("correct", "strike", "move")]  # fmt: skip
    before, posted = every_row(), 0

    for name, route in addresses(get_resolver()):
        for kwargs in numbers_for(route, bench.shop) if route.startswith("jobs/<") else ():
            for client in clients.values():
                for body in bodies:
                    assert client.post(reverse(name, kwargs=kwargs), body).status_code < 500
                    posted += 1

    assert every_row() == before
    assert posted > 200
    order.refresh_from_db()
    assert (order.state, Act.objects.count()) == (state, 0)


def test_what_was_left_open_has_no_button_once_the_job_is_over(bench):
    order = bench.job(state="signed").work_order
    item = ClosingItem.objects.create(
        shop=bench.shop, work_order=order, what="guard off", since_at=NOW, opened_by=bench.measures, explanation="ordered",
        explained_at=NOW, explained_by=bench.measures,
    )  # fmt: skip
    clients = signed_in({"technician": bench.measures})

    page = clients["technician"].get(reverse("work:job", args=[order.number])).content.decode()

    assert "guard off" in page
    assert reverse("work:explain_item", args=[order.number, item.pk]) not in page
    assert reverse("work:close_item", args=[order.number, item.pk]) not in page
