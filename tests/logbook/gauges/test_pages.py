"""The gauges' pages: everybody signed in sees them, the toolroom and supervisors keep them."""

import re
from datetime import date, timedelta

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext
from django.urls import reverse
from django.utils import timezone

from logbook.bench.models import Measurement
from logbook.gauges.models import Calibration, Gauge
from logbook.work.models import Task, WorkOrder
from tests.factories import NOW, make_engine, make_gauge, make_person, make_shop

pytestmark = pytest.mark.django_db

GAUGE = {"mark": "LD-1", "title": "leak-down tester", "quantity": "pressure", "resolution": "0.05"}


@pytest.fixture
def keeper(client):
    keeper = make_person(make_shop(), "Vera Alm", "toolroom")
    client.force_login(keeper)
    return keeper


def addresses(gauge: Gauge) -> list[str]:
    """The addresses that only the toolroom and supervisors open."""
    calibration = gauge.calibrations.get().pk
    return [
        reverse("gauges:new_gauge"),
        *(reverse(f"gauges:{name}", args=[gauge.pk]) for name in ("change_gauge", "retire_gauge", "new_calibration")),
        reverse("gauges:correct_calibration", args=[gauge.pk, calibration]),
    ]


def text_of(response) -> str:
    """A page's words with single spaces."""
    return " ".join(re.sub(r"<[^>]*>", " ", response.content.decode()).split())


def use(gauge: Gauge, opened_at, number: int) -> Measurement:
    engine = make_engine(gauge.shop, f"Pump {number}")
    by = gauge.calibrations.first().recorded_by
    job = WorkOrder.objects.create(
        shop=gauge.shop, number=number, engine=engine, title="Lash", opened_by=by, opened_at=NOW
    )
    task = Task.objects.create(shop=gauge.shop, work_order=job, place=1, title="Valve lash", kind="valve_lash",
                               lock_state="turned_by_hand")  # fmt: skip
    return Measurement.objects.create(shop=gauge.shop, task=task, kind="valve_lash", phase="as_found", gauge=gauge,
                                      opened_at=opened_at, opened_by=by)  # fmt: skip


@pytest.mark.parametrize("role", ["technician", "witness"])
def test_who_keeps_no_gauges_sees_them_without_a_link_to_change_one(client, keeper, role):
    gauge = make_gauge(keeper.shop, keeper)
    client.force_login(make_person(keeper.shop, "Bo Lind", role))
    for address in (reverse("gauges:gauges"), reverse("gauges:gauge", args=[gauge.pk])):
        response = client.get(address)
        assert response.status_code == 200
        assert "FG-2 feeler gauge" in text_of(response).replace(" · ", " ")
        assert [forbidden for forbidden in addresses(gauge) if f'"{forbidden}"' in response.content.decode()] == []
    assert [client.get(address).status_code for address in addresses(gauge)] == [403] * 5


@pytest.mark.parametrize("role", ["toolroom", "supervisor"])
def test_who_keeps_gauges_finds_every_page(client, keeper, role):
    gauge = make_gauge(keeper.shop, keeper)
    client.force_login(make_person(keeper.shop, "Ada Ek", role))
    for address in addresses(gauge):
        response = client.get(address)
        assert (response.status_code, response.content.decode().count("<h1>")) == (200, 1)


def test_nobody_signed_in_is_sent_to_sign_in(client):
    keeper = make_person(make_shop(), "Vera Alm", "toolroom")
    gauge = make_gauge(keeper.shop, keeper)
    for address in ["/gauges/", f"/gauges/{gauge.pk}/", *addresses(gauge)]:
        assert client.get(address).status_code == 302
    assert client.post(f"/gauges/{gauge.pk}/bring-back/").status_code == 302


def test_a_gauge_of_another_shop_is_nowhere(client, keeper):
    theirs = make_gauge(make_shop("Elsewhere"), make_person(make_shop("Third"), "Ivo Berg"), "THEIRS")
    for address in [f"/gauges/{theirs.pk}/", *addresses(theirs)[1:]]:
        assert client.get(address).status_code == 404
        assert client.post(address, GAUGE).status_code in (404, 405)
    assert "THEIRS" not in text_of(client.get("/gauges/"))


def test_a_tester_is_added_with_its_figures_as_typed_and_the_unit_written_out(client, keeper):
    response = client.post(
        "/gauges/new/", {**GAUGE, "orifice_diameter": "1.0", "supply_pressure": "80 psi"}, follow=True
    )
    assert "LD-1 leak-down tester is on the list. Record its calibration next." in text_of(response)
    added = Gauge.objects.get()
    assert (added.resolution, added.orifice_diameter, added.supply_pressure) == ("0.05 bar", "1.0 mm", "80 psi")


def test_an_inch_shop_gets_its_own_units(client, keeper):
    keeper.shop.units = "inch"
    keeper.shop.save()
    client.post("/gauges/new/", {"mark": "M-1", "title": "micrometer", "quantity": "length", "resolution": "0.0001"})
    assert Gauge.objects.get().resolution == "0.0001 in"


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        ({"resolution": "0.05 mm"}, "Read “mm”, a unit of length; a unit of pressure is needed here"),
        ({"resolution": "0"}, "Read “0”; smallest step is more than 0, or left empty when it isn't known."),
        ({"resolution": "0.1; 0.2"}, "Read “0.1; 0.2”; one figure belongs here, such as 0.01."),
        ({"range_lower": "0 bar"}, "A range has two ends; give both, or neither."),
        ({"range_lower": "9 bar", "range_upper": "1 bar"}, "The first figure of a range must be the lower one."),
        ({"repeatability_dof": "9"}, "Degrees of freedom without the s they belong to; give both, or neither."),
        ({"quantity": "length", "resolution": "1 mm", "orifice_diameter": "1 mm"}, "Only a leak-down tester has one"),
        ({"mark": "FG-2"}, "A gauge with this mark is here already."),
    ],
)  # fmt: skip
def test_what_is_wrong_with_a_gauge_is_said_and_what_was_typed_stays(client, keeper, typed, said):
    make_gauge(keeper.shop, keeper)
    response = client.post("/gauges/new/", {**GAUGE, **typed})
    assert said in text_of(response).replace("&#x27;", "'")
    assert all(f'value="{value}"' in response.content.decode() for value in typed.values())
    assert Gauge.objects.count() == 1


def test_a_calibration_is_recorded_with_its_errors_and_a_decimal_comma(client, keeper):
    keeper.shop.decimal_mark = ","
    keeper.shop.save()
    gauge = make_gauge(keeper.shop, keeper)
    client.post(f"/gauges/{gauge.pk}/calibrations/new/", {
        "calibrated_on": "2026-04-01", "expanded_uncertainty": "0,006", "coverage_factor": "2,05",
        "found": "0,5 mm: -0,002\n\n1,0 mm: +0,001 mm", "certificate": "C-200",
    })  # fmt: skip
    kept = Calibration.objects.latest("pk")
    assert (kept.expanded_uncertainty, kept.coverage_factor) == ("0,006 mm", 2.05)
    assert kept.errors == [{"at": "0,5 mm", "error": "-0,002 mm"}, {"at": "1,0 mm", "error": "+0,001 mm"}]
    assert "0,006 mm (k = 2,05)" in text_of(client.get(f"/gauges/{gauge.pk}/"))


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        ({"found": "1 mm 0.002"}, "Read “1 mm 0.002”; write the point, a colon and the error found there, a line each."),
        ({"found": "1 mm: 0.002 mm\n1 mm: 0.003 mm"}, "Two errors are given at “1 mm”; give one."),
        ({"expanded_uncertainty": "0.01"}, "U and its coverage factor k stand on the certificate together; give both."),
        ({"due_on": "2026-01-01"}, "The next calibration is due after this one."),
        ({"calibrated_on": ""}, "This field is required."),
        ({"coverage_factor": "two"}, "Read “two”"),
    ],
)  # fmt: skip
def test_what_is_wrong_with_a_calibration_is_said(client, keeper, typed, said):
    gauge = make_gauge(keeper.shop, keeper)
    response = client.post(f"/gauges/{gauge.pk}/calibrations/new/", {"calibrated_on": "2026-04-01", **typed})
    assert said in text_of(response)
    assert Calibration.objects.count() == 1


def test_a_correction_shows_both_entries_and_the_reason(client, keeper):
    gauge = make_gauge(keeper.shop, keeper)
    wrong = gauge.calibrations.get()
    address = f"/gauges/{gauge.pk}/calibrations/{wrong.pk}/correct/"
    assert 'value="0.008 mm"' in client.get(address).content.decode()
    page = client.post(address, {
        "calibrated_on": "2026-03-01", "due_on": "2027-03-01", "expanded_uncertainty": "0.006 mm", "coverage_factor": "2",
        "reason": "U was the one of FG-3",
    }, follow=True)  # fmt: skip
    text = text_of(page)
    assert "2026-03-01 · in force" in text and "2026-03-01 · superseded" in text
    assert "2026-03-01: U was the one of FG-3" in text
    assert "was corrected already, by Vera Alm" in text_of(
        client.post(address, {"calibrated_on": "2026-03-01", "reason": "x"})
    )


def test_a_failed_gauge_lists_what_it_was_used_for_since_it_was_last_good(client, keeper):
    gauge = make_gauge(keeper.shop, keeper)
    good = date(2026, 3, 1)
    use(gauge, NOW.replace(month=2, day=28), 41)
    use(gauge, NOW.replace(month=3, day=1), 42)
    use(gauge, NOW, 43)
    today = timezone.now().date()
    client.post(f"/gauges/{gauge.pk}/calibrations/new/", {"calibrated_on": today.isoformat(), "has_failed": "on"})
    text = text_of(client.get(f"/gauges/{gauge.pk}/"))
    assert f"It last passed a calibration on {good}" in text
    assert [number for number in (41, 42, 43) if f"job {number}" in text] == [42, 43]


def test_retiring_asks_first_and_can_be_taken_back(client, keeper):
    gauge = make_gauge(keeper.shop, keeper)
    assert "Retire gauge FG-2?" in text_of(client.get(f"/gauges/{gauge.pk}/retire/"))
    assert Gauge.objects.get().retired_at is None
    assert "Gauge FG-2 is retired; take another." in text_of(client.post(f"/gauges/{gauge.pk}/retire/", follow=True))
    assert "Back in use." in text_of(client.post(f"/gauges/{gauge.pk}/bring-back/", follow=True))


def test_the_list_and_the_page_ask_no_more_of_the_database_for_more_rows(client, keeper):
    def ask(address: str) -> int:
        with CaptureQueriesContext(connection) as asked:
            client.get(address)
        return len(asked)

    gauge = make_gauge(keeper.shop, keeper)
    use(gauge, NOW, 1)
    few = ask("/gauges/"), ask(f"/gauges/{gauge.pk}/")
    for n in range(30):
        make_gauge(keeper.shop, keeper, f"G-{n}")
        Calibration.objects.create(shop=keeper.shop, gauge=gauge, calibrated_on=NOW.date() - timedelta(days=n),
                                   recorded_by=keeper, recorded_at=NOW)  # fmt: skip
    assert (ask("/gauges/"), ask(f"/gauges/{gauge.pk}/")) == few
