"""The first start: open while nobody exists, with the printed code; then gone."""

from zoneinfo import ZoneInfo

import pytest
from django.core.exceptions import ValidationError
from django.urls import reverse

from logbook.people import services, start_code
from logbook.people.models import FirstStart, Person, Shop
from tests.factories import NOW, PASSWORD, make_person, make_shop

pytestmark = pytest.mark.django_db
PAGE = reverse("people:first_start")


@pytest.fixture
def code(settings, tmp_path):
    settings.HOME = tmp_path
    return start_code.make_code(tmp_path)


def told(code, **changed):
    return {
        "code": code, "name": "Reed Lake workshop", "units": "metric", "decimal_mark": ",", "paper": "A4",
        "time_zone": "Europe/Helsinki", "decision_rule": "guarded", "person": "Supervisor 1", "password": PASSWORD,
        "again": PASSWORD,
    } | changed  # fmt: skip


def open_by_service(home, code, **changed):
    shop = {"name": "Reed Lake workshop", "time_zone": "UTC"} | changed
    return services.open_logbook(
        home=home, code=code, at=NOW, shop=shop, supervisor={"name": "Supervisor 1"}, password=PASSWORD
    )


def test_an_empty_logbook_leads_to_its_opening_from_everywhere(client):
    assert client.get("/").url == PAGE
    assert client.get(reverse("people:sign_in")).url == PAGE


def test_opening_makes_shop_and_supervisor_signs_in_and_leads_home(
    client, code, settings, django_capture_on_commit_callbacks
):
    with django_capture_on_commit_callbacks(execute=True):
        answer = client.post(PAGE, told(code, is_technician="on"), follow=True)

    assert answer.redirect_chain == [("/", 302)]
    person = Person.objects.get()
    assert (person.name, person.roles) == ("Supervisor 1", ["technician", "supervisor"])
    assert (person.shop.name, person.shop.decimal_mark, person.shop.time_zone) == (
        "Reed Lake workshop", ",", "Europe/Helsinki",
    )  # fmt: skip
    assert not person.shop.is_demo and not person.password_is_given
    assert answer.context["user"] == person
    assert "The logbook of Reed Lake workshop is open." in answer.content.decode()
    assert not start_code.is_made(settings.HOME)


def test_the_page_is_gone_once_somebody_exists(client, code):
    make_person(make_shop(), "Supervisor 1", "supervisor")

    looked, sent = client.get(PAGE), client.post(PAGE, told(code))

    assert (looked.status_code, sent.status_code) == (404, 404)
    assert "Somebody opened it before, perhaps a moment ago from another tablet." in sent.content.decode()
    assert Person.objects.count() == 1


def test_a_wrong_code_opens_nothing_and_what_was_typed_stays(client, code, settings):
    answer = client.post(PAGE, told("AAAA-AAAA-AAAA", name="Reed Lake works"))

    assert answer.context["form"].errors["code"] == [
        "This isn't the code that the program printed last: it stands where the program was started."
    ]
    assert 'value="Reed Lake works"' in answer.content.decode()
    assert (Shop.objects.count(), Person.objects.count()) == (0, 0)
    assert start_code.is_right(settings.HOME, code)


def test_codes_can_be_tried_five_times_then_even_the_right_one_waits(client, code):
    for _ in range(5):
        assert client.post(PAGE, told("AAAA-AAAA-AAAA")).status_code == 200

    answer = client.post(PAGE, told(code))

    assert answer.status_code == 429
    assert "There were 5 wrong tries from here" in answer.context["form"].errors["code"][0]
    assert Person.objects.count() == 0


@pytest.mark.parametrize(
    ("field", "typed", "said"),
    [
        ("code", "", "Nothing stands here; fill it in."),
        ("name", " ", "Nothing stands here; fill it in."),
        ("time_zone", "", "Choose one."),
        ("person", "", "Nothing stands here; fill it in."),
        ("again", "a feeler of 0.19", "The two aren't the same; type both anew."),
    ],
)
def test_what_is_missing_or_doubtful_is_said_at_its_field(client, code, field, typed, said):
    answer = client.post(PAGE, told(code) | {field: typed})

    assert answer.context["form"].errors == {field: [said]}
    assert Person.objects.count() == 0


@pytest.mark.parametrize("password", ["short", "supervisor 1", "password123"])
def test_a_weak_password_is_refused(client, code, password):
    answer = client.post(PAGE, told(code, password=password, again=password))

    assert list(answer.context["form"].errors) == ["password"]


@pytest.mark.parametrize(
    ("field", "typed"),
    [("time_zone", "Europe/Atlantis"), ("decision_rule", "lenient"), ("paper", "A5"), ("units", "ells")],
)
def test_what_the_page_does_not_offer_is_refused(client, code, field, typed):
    answer = client.post(PAGE, told(code) | {field: typed})

    assert list(answer.context["form"].errors) == [field]
    assert Person.objects.count() == 0


def test_without_a_code_made_the_page_says_how_to_get_one(client, settings, tmp_path):
    settings.HOME = tmp_path
    assert "No code was made yet, so nothing can be sent." in client.get(PAGE).content.decode()


def test_every_time_zone_offered_is_one(client):
    every = [zone for _group, zones in client.get(PAGE).context["form"].fields["time_zone"].choices if _group
             for zone, _name in zones]  # fmt: skip
    assert len(every) > 400
    assert [zone for zone in every if ZoneInfo(zone).key != zone] == []


def test_of_two_tablets_at_one_moment_the_second_is_refused_by_the_database_itself(code, settings):
    FirstStart.objects.create(opened_at=NOW)  # the other's, seen by the database before its person is seen by us

    with pytest.raises(services.OpenAlready):
        open_by_service(settings.HOME, code)

    assert (Shop.objects.count(), Person.objects.count()) == (0, 0)
    assert start_code.is_right(settings.HOME, code)


def test_what_fails_half_way_leaves_nothing_and_the_code_good(code, settings):
    with pytest.raises(ValidationError):
        open_by_service(settings.HOME, code, name="")

    assert (Shop.objects.count(), FirstStart.objects.count()) == (0, 0)
    assert start_code.is_right(settings.HOME, code)
