"""Every address of the room: nothing of it for another shop, nobody, or a role that has no say."""

import re

import pytest
from django.urls import reverse

from logbook.work.models import HandOver, Lock
from logbook.work.services import open_item
from logbook.work.urls import urlpatterns
from tests.factories import NOW, make_person, make_shop
from tests.logbook.work.read_page import kept, text

ROLES = ("technician", "supervisor", "toolroom", "witness")


@pytest.fixture
def addresses(at_the_bench, people, engine):
    """Every address of the room, with rows behind each."""
    item = open_item(at_the_bench, by=people["technician"], at=NOW, what="cover off")
    handed = HandOver.objects.create(
        shop=engine.shop, work_order=at_the_bench, from_person=people["technician"], handed_at=NOW
    )
    interval, lock = kept(engine), Lock.objects.first()
    at_the_bench.tasks.update(witnessed_stations=["2"])  # so that a witness finds the job
    number, task = at_the_bench.number, at_the_bench.tasks.get().pk
    of_job = ("job", "time", "parts", "add_task", "use_part", "hand_over", "stop_short", "drop", "resume", "finish_measuring",
              "open_item", "take_lock")  # fmt: skip
    rows = {name: [number] for name in of_job}
    rows |= {name: [number, task] for name in ("start_task", "finish_task", "witnessed")}
    rows |= {"lift_lock": [number, lock.pk], "take_over": [number, handed.pk]}
    rows |= {name: [number, item.pk] for name in ("close_item", "explain_item")}
    rows |= {name: [engine.pk] for name in ("intervals", "new_interval")}
    rows |= {name: [interval.pk] for name in ("change_interval", "stop_interval", "record_done", "defer")}
    rows |= {name: [] for name in ("due", "jobs", "new_job", "states", "all_time", "all_parts")}
    return {name: reverse(f"work:{name}", args=parts) for name, parts in rows.items()}


def test_every_address_of_the_room_is_looked_at(addresses):
    assert set(addresses) == {pattern.name for pattern in urlpatterns}


def test_another_shop_finds_nothing_behind_any_address(addresses, client):
    stranger = make_person(make_shop("Weir workshop"), "Both 9", *ROLES)
    client.force_login(stranger)
    open_to_all = {"due", "jobs", "new_job", "states", "all_time", "all_parts"}
    for name, address in addresses.items():
        for method in (client.get, client.post):
            answer = method(address)
            assert "North pump" not in text(answer), name
            if name not in open_to_all:
                assert answer.status_code in (404, 405), name
        if name not in open_to_all:
            assert client.post(address).status_code == 404 or client.get(address).status_code == 404, name


def test_nobody_signed_in_is_sent_to_sign_in_everywhere(addresses, client):
    for name, address in addresses.items():
        answers = {client.get(address).status_code, client.post(address).status_code}
        assert answers <= {302, 405} and 302 in answers, name


@pytest.mark.parametrize("role", ROLES)
def test_a_person_meets_no_link_they_may_not_follow(addresses, signed_in, role):
    client, met = signed_in(role), set()
    for page in (addresses[name] for name in ("due", "jobs", "job", "intervals", "states")):
        content = text(client.get(page)).partition("<main")[2]
        links = re.findall(r'<a [^>]*href="(/[^"#]*|\?[^"]*)', content)
        met |= {page + link if link.startswith("?") else link for link in links}
    assert {link: client.get(link).status_code for link in met} == dict.fromkeys(met, 200)
