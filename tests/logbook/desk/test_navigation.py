"""The line of pages under the title block: by role, and never a link that would be refused."""

import re

import pytest
from django.contrib.auth.models import AnonymousUser
from django.test import RequestFactory
from django.urls import reverse

from logbook.desk.navigation import Link, address_for, links_for
from logbook.people.models import ROLES
from tests.factories import make_person, make_shop

pytestmark = pytest.mark.django_db


@pytest.fixture
def asked():
    def made(person, path="/"):
        request = RequestFactory().get(path)
        request.user = person
        return request

    return made


def labels(links):
    return [str(link.label) for link in links]


def test_nobody_gets_no_links(asked):
    assert links_for(asked(AnonymousUser())) == []


def test_a_supervisor_reaches_the_people_a_technician_does_not(asked):
    shop = make_shop()
    boss, hand = (labels(links_for(asked(make_person(shop, role, role)))) for role in ("supervisor", "technician"))

    assert ("People" in boss, "Shop" in boss) == (True, True)
    assert ("People" in hand, "Shop" in hand) == (False, True)


@pytest.mark.parametrize("role", ROLES)
def test_every_link_opens(client, asked, role):
    person = make_person(make_shop(), role, role)
    client.force_login(person)

    answers = {link.address: client.get(link.address).status_code for link in links_for(asked(person))}

    assert answers == dict.fromkeys(answers, 200)


def test_a_page_that_is_not_there_gets_no_link():
    person = make_person(make_shop(), "Supervisor 1", "supervisor")

    assert address_for(person, "people:nowhere") == ""
    assert address_for(person, "nowhere:people") == ""
    assert address_for(person, "people:person") == ""  # which person?


@pytest.mark.parametrize(("path", "current"), [("/people/", "page"), ("/people/new/", "true"), ("/shop/", "")])
def test_the_link_of_the_page_shown_says_so(asked, path, current):
    person = make_person(make_shop(), "Supervisor 1", "supervisor")

    assert Link("People", "/people/", current) in [
        Link(str(link.label), link.address, link.current) for link in links_for(asked(person, path))
    ]


def test_the_page_shows_links_and_the_way_out_to_who_is_signed_in_only(client):
    person = make_person(make_shop(), "Supervisor 1", "supervisor")
    door = client.get(reverse("people:sign_in")).content.decode()
    client.force_login(person)
    page = client.get(reverse("people:people")).content.decode()

    assert '<nav class="ways"' not in door and "Sign out" not in door
    assert re.search(r'<a href="/people/" aria-current="page">People</a>', page)
    assert re.search(r'<form method="post" action="/sign-out/"><input type="hidden" name="csrfmiddlewaretoken"', page)
