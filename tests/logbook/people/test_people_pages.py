"""The people of a shop: who is there, who is missing, who may do what."""

import pytest
from django.test import Client
from django.urls import reverse

from logbook.people.models import Person
from tests.factories import PASSWORD, make_person, make_shop

pytestmark = pytest.mark.django_db
PEOPLE, NEW = reverse("people:people"), reverse("people:new_person")
ONLY_ONE = "is the only supervisor. Where the supervisor has measured, nobody can decide"


@pytest.fixture
def shop():
    return make_shop()


@pytest.fixture
def supervisor(shop, client):
    person = make_person(shop, "Supervisor 1", "supervisor", password=PASSWORD)
    client.force_login(person)
    return person


def words(answer):
    return " ".join(answer.content.decode().split())


def page_of(person):
    return reverse("people:person", args=[person.pk])


def change_roles(client, person, *roles, may_sign_in=True):
    ticks = {f"is_{role}": "on" for role in roles} | ({"is_active": "on"} if may_sign_in else {})
    return client.post(page_of(person), {"act": "roles", **ticks})


def roles_of(person):
    return Person.objects.get(pk=person.pk).roles


def test_the_page_says_who_is_missing_and_how_to_add_them(client, supervisor):
    page = words(client.get(PEOPLE))

    assert (
        f"Supervisor 1 {ONLY_ONE}: add a second supervisor, or the sheet will say “not checked by a second person”."
        in page
    )
    assert "Nobody here may measure: add a technician" in page
    assert f'href="{NEW}"' in page


def test_with_two_supervisors_and_a_technician_nobody_is_missing(client, shop, supervisor):
    make_person(shop, "Supervisor 2", "supervisor", "technician")

    page = words(client.get(PEOPLE))

    assert ONLY_ONE not in page
    assert "Nobody here may measure" not in page


def test_a_second_supervisor_who_left_does_not_count(client, shop, supervisor):
    other = make_person(shop, "Supervisor 2", "supervisor")
    Person.objects.filter(pk=other.pk).update(is_active=False)

    page = words(client.get(PEOPLE))

    assert f"Supervisor 1 {ONLY_ONE}" in page
    assert "(may no longer sign in)" in page


def test_the_list_takes_as_many_queries_for_thirty_as_for_three(client, shop, supervisor, django_assert_num_queries):
    for number in range(30):
        make_person(shop, f"Technician {number}")
    with django_assert_num_queries(3):  # session, person with shop, everybody
        client.get(PEOPLE)


def test_a_person_is_added_and_signs_in(client, shop, supervisor):
    told = {"name": "Night shift 3", "is_technician": "on", "is_witness": "on", "password": PASSWORD, "again": PASSWORD}

    answer = client.post(NEW, told, follow=True)

    assert "Night shift 3 can sign in now, and is asked for a password of their own." in words(answer)
    added = Person.objects.get(name="Night shift 3")
    assert (added.shop, added.roles, added.password_is_given) == (shop, ["technician", "witness"], True)
    signed_in = Client().post(reverse("people:sign_in"), {"name": "night shift 3", "password": PASSWORD})
    assert signed_in.url == reverse("people:own_password")


@pytest.mark.parametrize(
    ("changed", "errors"),
    [
        ({"name": ""}, {"name": ["Nothing stands here; fill it in."]}),
        (
            {"name": "supervisor 1"},
            {"__all__": ["Somebody with this name is here already; add an initial or a number."]},
        ),
        ({"is_technician": ""}, {"__all__": ["Tick at least one role: it says what this person may do."]}),
        ({"again": "a feeler of 0.19"}, {"again": ["The two aren't the same; type both anew."]}),
    ],
)
def test_what_stands_against_a_person_is_said_and_what_was_typed_stays(client, supervisor, changed, errors):
    told = {"name": "Night shift 3", "is_technician": "on", "password": PASSWORD, "again": PASSWORD} | changed

    answer = client.post(NEW, told)

    assert answer.context["form"].errors == errors
    assert f'value="{told["name"]}"' in answer.content.decode() or not told["name"]
    assert Person.objects.count() == 1


def test_roles_are_given_and_taken(client, shop, supervisor):
    other = make_person(shop, "Night shift 3")

    assert change_roles(client, other, "toolroom", "supervisor").url == PEOPLE

    assert roles_of(other) == ["supervisor", "toolroom"]


def test_who_left_is_kept_but_may_not_sign_in(client, shop, supervisor):
    other = make_person(shop, "Night shift 3")

    change_roles(client, other, "technician", may_sign_in=False)

    other.refresh_from_db()
    assert (other.is_active, other.roles) == (False, ["technician"])


@pytest.mark.parametrize(("roles", "may_sign_in"), [(["technician"], True), (["supervisor"], False)])
def test_the_only_supervisor_stays_one(client, shop, supervisor, roles, may_sign_in):
    gone = make_person(shop, "Supervisor 2", "supervisor")
    Person.objects.filter(pk=gone.pk).update(is_active=False)
    make_person(make_shop("Other works"), "Supervisor 3", "supervisor")

    answer = change_roles(client, supervisor, *roles, may_sign_in=may_sign_in)

    assert answer.context["roles"].non_field_errors() == [
        "Supervisor 1 is the only supervisor who may sign in; without one nobody could decide or add people. Make "
        "somebody else a supervisor first."
    ]
    assert roles_of(supervisor) == ["supervisor"]
    assert Person.objects.get(pk=supervisor.pk).is_active


def test_one_of_two_supervisors_may_step_back(client, shop, supervisor):
    make_person(shop, "Supervisor 2", "supervisor")

    assert change_roles(client, supervisor, "technician").url == "/"

    assert roles_of(supervisor) == ["technician"]


def test_somebody_without_any_role_is_refused(client, shop, supervisor):
    other = make_person(shop, "Night shift 3")

    answer = change_roles(client, other)

    assert answer.context["roles"].non_field_errors() == ["Tick at least one role: it says what this person may do."]
    assert roles_of(other) == ["technician"]


def test_a_lost_password_is_replaced_and_ends_sessions_and_waiting(client, shop, supervisor):
    other, theirs = make_person(shop, "Night shift 3", password="the lost one"), Client()
    theirs.force_login(other)
    for _ in range(6):
        locked = Client().post(reverse("people:sign_in"), {"name": "Night shift 3", "password": "a guess"})

    client.post(page_of(other), {"act": "password", "password": PASSWORD, "again": PASSWORD})

    assert locked.status_code == 429
    assert theirs.get("/").url == reverse("people:sign_in")
    signed_in = Client().post(reverse("people:sign_in"), {"name": "Night shift 3", "password": PASSWORD})
    assert signed_in.url == reverse("people:own_password")


def test_a_supervisor_who_gives_themselves_a_password_stays_signed_in(client, supervisor):
    client.post(
        page_of(supervisor), {"act": "password", "password": "three cold spanners", "again": "three cold spanners"}
    )

    assert client.get("/").context["user"] == supervisor
    assert not Person.objects.get().password_is_given


def test_a_password_like_the_name_is_refused(client, supervisor):
    answer = client.post(page_of(supervisor), {"act": "password", "password": "supervisor 1", "again": "supervisor 1"})

    assert list(answer.context["password"].errors) == ["password"]
