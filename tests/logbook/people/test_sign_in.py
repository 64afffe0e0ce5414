"""Signing in and out."""

import pytest
from django.test import Client
from django.urls import reverse

from logbook.people.models import Person
from tests.factories import PASSWORD, make_person, make_shop

pytestmark = pytest.mark.django_db
PAGE = reverse("people:sign_in")


@pytest.fixture
def somebody():
    return make_person(make_shop(), "Night shift 3", "technician", password=PASSWORD)


def sign_in(client, name="Night shift 3", password=PASSWORD, **more):
    address = {"REMOTE_ADDR": more.pop("address", "192.0.2.7")}
    return client.post(PAGE, {"name": name, "password": password, **more}, **address)


def said(answer):
    return answer.context["form"].non_field_errors()


@pytest.mark.parametrize("name", ["Night shift 3", "NIGHT SHIFT 3", " night shift 3 "])
def test_a_person_is_let_in_by_name_and_password(client, somebody, name):
    answer = sign_in(client, name)

    assert (answer.status_code, answer.url) == (302, "/")
    assert client.get("/").context["user"] == somebody


@pytest.mark.parametrize(
    ("name", "password"),
    [("Night shift 3", "a feeler of 0.19"), ("Night shift 3", PASSWORD.upper()), ("Night shift 4", PASSWORD)],
)
def test_whoever_gets_one_of_the_two_wrong_learns_nothing_about_the_other(client, somebody, name, password):
    answer = sign_in(client, name, password)

    assert said(answer) == [
        "Name and password don't belong together, or this person may no longer sign in. Capitals matter in the password "
        "only; after 5 wrong tries the next has to wait."
    ]  # fmt: skip
    assert f'value="{name}"' in answer.content.decode()
    assert password not in answer.content.decode()


def test_who_left_is_not_let_in_and_a_session_of_theirs_ends(client, somebody):
    client.force_login(somebody)
    Person.objects.update(is_active=False)

    assert client.get("/").url == PAGE
    assert len(said(sign_in(client))) == 1


def test_after_five_wrong_tries_even_the_right_password_waits(client, somebody):
    for _ in range(5):
        assert sign_in(client, password="wrong").status_code == 200

    answer = sign_in(client, "NIGHT shift 3")

    assert answer.status_code == 429
    assert said(answer)[0].startswith("There were 5 wrong tries from here; the next one can be made in 15 minutes.")
    assert "_auth_user_id" not in client.session


def test_a_stranger_elsewhere_locks_nobody_out(client, somebody):
    for _ in range(6):
        sign_in(client, password="wrong", address="198.51.100.9")

    assert sign_in(client).url == "/"


def test_a_right_password_forgets_the_wrong_ones(client, somebody):
    for _ in range(3):
        for _ in range(4):
            sign_in(client, password="wrong")
        assert sign_in(Client()).status_code == 302


@pytest.mark.parametrize("next_", ["/shop/", "/shop/?a=b"])
def test_signing_in_leads_on_to_where_one_was_going(client, somebody, next_):
    assert sign_in(client, next=next_).url == next_


@pytest.mark.parametrize(
    "next_", ["https://example.org/", "//example.org/", r"/\example.org", "javascript:alert(1)", "shop/"]
)
def test_signing_in_leads_nowhere_else(client, somebody, next_):
    assert sign_in(client, next=next_).url == "/"
    assert Client().get(PAGE, {"next": next_}).context["next"] == ""


def test_a_page_that_asks_who_one_is_gets_its_visitor_back(client, somebody):
    asked = client.get("/shop/?a=b")
    assert asked.url == f"{PAGE}?next=/shop/%3Fa%3Db"
    assert sign_in(client, next=client.get(asked.url).context["next"]).url == "/shop/?a=b"


def test_a_form_sent_after_the_session_ended_leads_back_to_its_page(client, somebody):
    sent = client.post("/shop/", {"name": "x"}, headers={"Referer": "http://testserver/shop/?a=b"})
    elsewhere = client.post("/shop/", {"name": "x"}, headers={"Referer": "https://example.org/form"})

    assert sent.url == f"{PAGE}?next=/shop/%3Fa%3Db"
    assert elsewhere.url == f"{PAGE}?next=/"


def test_htmx_is_told_to_take_the_whole_window_to_the_door(client, somebody):
    answer = client.get("/shop/", headers={"HX-Request": "true", "HX-Current-URL": "http://testserver/jobs/7/"})

    assert (answer.status_code, answer["HX-Redirect"]) == (200, f"{PAGE}?next=/jobs/7/")


def test_signing_out_is_sent_not_followed(client, somebody):
    client.force_login(somebody)

    assert client.get(reverse("people:sign_out")).status_code == 405
    assert client.get("/").context["user"] == somebody
    answer = client.post(reverse("people:sign_out"), follow=True)

    assert answer.redirect_chain == [(PAGE, 302)]
    assert "You are signed out." in answer.content.decode()
    assert client.get("/").url == PAGE


def test_the_door_leads_on_who_is_in_already(client, somebody):
    client.force_login(somebody)
    assert client.get(PAGE).url == "/"


def test_who_was_given_a_password_is_asked_for_one_of_their_own(client, somebody):
    Person.objects.update(password_is_given=True)

    answer = sign_in(client, next="/shop/")

    assert answer.url == reverse("people:own_password")
    assert "It signs for you: choose one that only you know." in client.get("/").content.decode()
    client.post(answer.url, {"current": PASSWORD, "password": "three cold spanners", "again": "three cold spanners"})
    assert "It signs for you: choose one" not in client.get("/").content.decode()
    assert sign_in(Client(), password="three cold spanners").url == "/"


def test_a_new_password_needs_the_present_one(client, somebody):
    client.force_login(somebody)
    new = {"password": "three cold spanners", "again": "three cold spanners"}

    answers = [client.post(reverse("people:own_password"), {"current": "a guess", **new}) for _ in range(6)]

    assert answers[0].context["form"].errors == {
        "current": ["This isn't your password now; ask a supervisor for a new one if it is lost."]
    }
    assert [answer.status_code for answer in answers] == [200] * 5 + [429]
    somebody.refresh_from_db()
    assert somebody.check_password(PASSWORD)


def test_a_new_password_of_ones_own_ends_sessions_elsewhere_only(client, somebody):
    elsewhere = Client()
    for each in (client, elsewhere):
        each.force_login(somebody)

    client.post(
        reverse("people:own_password"),
        {"current": PASSWORD, "password": "three cold spanners", "again": "three cold spanners"},
    )

    assert client.get("/").context["user"] == somebody
    assert elsewhere.get("/").url == PAGE
