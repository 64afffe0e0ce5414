"""Who may open which page of this room: every role, nobody, and somebody of another shop."""

import pytest
from django.test import Client
from django.urls import reverse

from logbook.people.models import ROLES
from tests.factories import make_person, make_shop

pytestmark = pytest.mark.django_db
EVERYBODY, SUPERVISOR = set(ROLES), {"supervisor"}
PAGES = {  # page: roles that may look at it
    "people:people": SUPERVISOR,
    "people:new_person": SUPERVISOR,
    "people:person": SUPERVISOR,
    "people:shop": EVERYBODY,
    "people:own_password": EVERYBODY,
}
TAKES_FORMS = ["people:new_person", "people:person", "people:own_password"]


@pytest.fixture
def shop():
    return make_shop()


@pytest.fixture
def somebody(shop):
    return make_person(shop, "Somebody", "technician")


def address(name, somebody):
    return reverse(name, args=[somebody.pk] if name == "people:person" else [])


@pytest.mark.parametrize("role", ROLES)
def test_each_role_opens_its_pages_and_is_told_whose_the_others_are(client, shop, somebody, role):
    client.force_login(make_person(shop, f"A {role}", role))

    answers = {name: client.get(address(name, somebody)) for name in PAGES}

    assert {name: answer.status_code for name, answer in answers.items()} == {
        name: 200 if role in roles else 403 for name, roles in PAGES.items()
    }
    refused = [answer.content.decode() for answer in answers.values() if answer.status_code == 403]
    assert ["This page is for: supervisor." in page for page in refused] == [True] * len(refused)


@pytest.mark.parametrize("name", PAGES)
def test_nobody_is_sent_to_the_door_never_refused(client, somebody, name):
    for send in (client.get, client.post):
        answer = send(address(name, somebody))
        assert (answer.status_code, answer.url.split("?")[0]) == (302, reverse("people:sign_in"))


@pytest.mark.parametrize("role", [role for role in ROLES if role != "supervisor"])
@pytest.mark.parametrize("name", ["people:new_person", "people:person"])
def test_who_may_not_look_may_not_send_either(client, shop, somebody, role, name):
    client.force_login(make_person(shop, f"A {role}", role))
    told = {
        "act": "roles",
        "is_supervisor": "on",
        "is_active": "on",
        "name": "x",
        "password": "p" * 12,
        "again": "p" * 12,
    }

    assert client.post(address(name, somebody), told).status_code == 403

    somebody.refresh_from_db()
    assert somebody.roles == ["technician"]
    assert shop.persons.count() == 2


def test_people_of_another_shop_are_not_there(client, somebody):
    client.force_login(make_person(make_shop("Other works"), "Supervisor 9", "supervisor"))
    told = {"act": "roles", "is_supervisor": "on", "is_active": "on"}

    assert client.get(address("people:person", somebody)).status_code == 404
    assert client.post(address("people:person", somebody), told).status_code == 404
    assert "Somebody" not in client.get(reverse("people:people")).content.decode()
    somebody.refresh_from_db()
    assert somebody.roles == ["technician"]


@pytest.mark.parametrize("name", [*TAKES_FORMS, "people:sign_in", "people:shop", "people:sign_out"])
def test_a_form_from_elsewhere_is_refused(somebody, shop, name):
    guarded = Client(enforce_csrf_checks=True)
    if name != "people:sign_in":
        guarded.force_login(make_person(shop, "Supervisor 1", "supervisor"))

    assert guarded.post(address(name, somebody)).status_code == 403


def test_a_page_of_this_room_asks_session_and_person_once(client, shop, django_assert_num_queries):
    client.force_login(make_person(shop, "Somebody else"))
    with django_assert_num_queries(2):
        client.get(reverse("people:shop"))
