"""The shop's ways: seen by everybody of the shop, changed by its supervisors."""

from datetime import UTC, datetime

import pytest
from django.urls import reverse
from django.utils import timezone

from logbook.people.clock import zone_named
from logbook.people.models import Shop
from tests.factories import make_engine, make_person, make_shop

pytestmark = pytest.mark.django_db
PAGE = reverse("people:shop")
WAYS = {
    "name": "Reed Lake workshop", "units": "metric", "decimal_mark": ".", "paper": "A4", "time_zone": "UTC",
    "decision_rule": "guarded", "setting_rule": "simple", "barometer": "",
}  # fmt: skip


@pytest.fixture
def shop():
    return make_shop()


@pytest.fixture
def supervisor(shop, client):
    person = make_person(shop, "Supervisor 1", "supervisor")
    client.force_login(person)
    return person


def words(answer):
    return " ".join(answer.content.decode().split())


def test_everybody_sees_the_ways_and_only_a_supervisor_a_form(client, shop):
    client.force_login(make_person(shop, "Night shift 3"))

    page = words(client.get(PAGE))

    assert "guarded: A reading is within only where it lies inside the limit by what the gauge can&#x27;t tell" in page
    assert "Change the ways" not in page


def test_somebody_else_who_sends_ways_is_told_whose_they_are(client, shop):
    client.force_login(make_person(shop, "Night shift 3"))

    answer = client.post(PAGE, WAYS | {"decision_rule": "simple"})

    assert answer.status_code == 403
    assert "The shop&#x27;s ways are changed by a supervisor." in words(answer)
    assert Shop.objects.get().decision_rule == "guarded"


def test_a_supervisor_changes_every_way(client, supervisor):
    changed = {
        "name": "Reed Lake works", "units": "inch", "decimal_mark": ",", "paper": "Letter",
        "time_zone": "America/Chicago", "decision_rule": "expanded", "setting_rule": "guarded", "barometer": "1001,5 hPa",
    }  # fmt: skip

    answer = client.post(PAGE, changed, follow=True)

    assert "The shop&#x27;s ways are changed; what was judged before stays as it was judged." in words(answer)
    assert Shop.objects.values(*changed).get() == changed


def test_the_decimal_mark_stays_once_figures_are_kept_as_typed(client, supervisor, shop):
    make_engine(make_shop("Other works"))
    assert client.post(PAGE, WAYS | {"decimal_mark": ","}).status_code == 302
    make_engine(shop)

    answer = client.post(PAGE, WAYS | {"decimal_mark": "."})

    assert answer.context["form"].errors["decimal_mark"] == [
        "The decimal mark stays as it is: figures are kept as typed here, and would be read otherwise."
    ]
    assert Shop.objects.get(pk=shop.pk).decimal_mark == ","
    assert client.post(PAGE, WAYS | {"decimal_mark": ",", "paper": "Letter"}).status_code == 302


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        ("2 bar", "Read \"2 bar\"; a barometer stands between 300 and 1100 hPa."),
        ("high", None),
        ("1013 mm", None),
        ("1000; 1001", "Read \"1000; 1001\"; one figure belongs here."),
    ],
)  # fmt: skip
def test_a_barometer_that_is_none_is_refused_in_a_sentence(client, supervisor, typed, said):
    errors = client.post(PAGE, WAYS | {"barometer": typed}).context["form"].errors

    assert list(errors) == ["barometer"]
    assert errors["barometer"] == [said] if said else typed.split()[-1] in errors["barometer"][0]
    assert Shop.objects.get().barometer == ""


def test_a_shop_without_a_name_is_refused_and_keeps_the_one_it_has(client, supervisor):
    answer = client.post(PAGE, WAYS | {"name": ""})

    assert answer.context["form"].errors == {"name": ["Nothing stands here; fill it in."]}
    assert "Reed Lake workshop</h1>" in words(answer)


def test_times_are_shown_on_the_shops_own_clock(client, shop, supervisor):
    Shop.objects.update(time_zone="America/Chicago")
    type(supervisor).objects.update(last_login=datetime(2026, 7, 1, 3, 15, tzinfo=UTC))

    page = words(client.get(reverse("people:people")))

    assert "2026-06-30 22:15" in page  # UTC - 5 h in summer
    assert timezone.get_current_timezone_name() == "UTC"


def test_a_time_zone_that_this_machine_lost_falls_back_to_universal_time():
    assert zone_named("Europe/Atlantis") is None
    with timezone.override(zone_named("Europe/Atlantis")):
        assert timezone.get_current_timezone_name() == "UTC"
