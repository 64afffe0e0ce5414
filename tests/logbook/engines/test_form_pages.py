"""What the forms of engines, meters and parts do with what is typed, good and bad."""

from datetime import UTC, datetime

import pytest
from django.urls import reverse

from logbook.engines import queries
from logbook.engines.models import Engine, Fitting, MeterReading, OutOfService, Part
from tests.factories import NOW, make_engine, make_meter, make_person, make_shop
from tests.logbook.engines.page_text import read

pytestmark = pytest.mark.django_db


PAPERS = {
    "name": "South pump", "duty": "standby", "layout": "vee", "cylinders": "6", "numbered_from": "free_end",
    "first_bank": "left", "seen_from": "flywheel", "banks": "1-2-3 / 4-5-6", "firing_order": "1-4-2-5-3-6",
    "bore_mm": "96", "stroke_mm": "4 in", "screw_ratio": "1", "intake_valves": "1", "exhaust_valves": "1",
}  # fmt: skip


def test_an_engine_is_taken_in_as_it_is_typed(client, people):
    client.force_login(people["supervisor"])
    client.post(reverse("engines:new_engine"), PAPERS)
    engine = Engine.objects.get(name="South pump")
    assert (engine.banks, engine.firing_order) == ([[1, 2, 3], [4, 5, 6]], [1, 4, 2, 5, 3, 6])
    assert (engine.bore_mm, engine.stroke_mm, engine.rod_length_mm) == (96.0, 101.6, None)  # 1 in is 25.4 mm


def test_a_shop_with_commas_types_commas_and_one_with_inches_types_inches(client):
    shop = make_shop("Inch shop", decimal_mark=",", units="inch")
    client.force_login(make_person(shop, "Una", "supervisor"))
    client.post(reverse("engines:new_engine"), PAPERS | {"bore_mm": "3,5", "stroke_mm": "101,6 mm"})
    engine = Engine.objects.get(name="South pump")
    assert (engine.bore_mm, engine.stroke_mm) == (88.9, 101.6)
    page = client.get(reverse("engines:change_engine", args=[engine.pk])).content.decode()
    assert 'value="88,9 mm"' in page


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        ({"firing_order": "1-4-2-5-3"}, "The firing order leaves out 6: name each of the 6 cylinders once."),
        (
            {"firing_order": "1-4-x-5"},
            "Read “x” where a cylinder's number belongs; write them with a dash between, such as",
        ),
        ({"banks": "1-2-3-4-5-6"}, "Banks given: 1; this layout has 2."),
        ({"bore_mm": "96 kg"}, "Read “kg”, a unit of force; a unit of length is needed here: mm, µm, in, thou, cm, m."),
        ({"bore_mm": "-96"}, "Read “-96”; bore can't have a sign here; write it without."),
        ({"bore_mm": "96; 97"}, "Read “96; 97”; one figure belongs here."),
        ({"cylinders": "many"}, "Enter a whole number."),
        ({"stroke_mm": "100", "rod_length_mm": "40"}, "the crank could not turn"),
        ({"intake_opens_btdc": "12"}, "Some valve events are given and this one isn't: give all four, or none."),
        ({"name": ""}, "This field is required."),
        ({"firing_angles": "0 90 bad"}, "Read “bad”, which doesn't begin with a number"),
    ],
)
def test_bad_papers_are_answered_with_a_sentence_and_keep_what_was_typed(client, people, typed, said):
    client.force_login(people["supervisor"])
    page = client.post(reverse("engines:new_engine"), PAPERS | typed)
    words = read(page).text
    assert said in words and "Nothing is kept yet" in words
    assert Engine.objects.count() == 0
    for value in typed.values():
        assert f'value="{value}"' in page.content.decode() or not value


def test_a_change_of_papers_is_kept_as_it_is_typed(client, people, engine):
    client.force_login(people["supervisor"])
    address = reverse("engines:change_engine", args=[engine.pk])
    client.post(address, PAPERS | {"layout": "inline", "cylinders": "4", "banks": "", "firing_order": "1 3 4 2"})
    engine.refresh_from_db()
    assert (engine.name, engine.firing_order, engine.stroke_mm) == ("South pump", [1, 3, 4, 2], 101.6)


def test_a_reading_that_is_likely_a_slip_is_asked_about_and_kept_with_a_remark(client, people, engine):
    meter = make_meter(engine, people["technician"])
    client.force_login(people["technician"])
    address = reverse("engines:read_meter", args=[engine.pk, meter.pk])
    assert 'name="remark"' not in client.get(address).content.decode()
    typed = {"shows": "4120", "taken_at": "2026-05-03T08:00"}
    page = client.post(address, typed)
    assert "Read 4120, but the meter showed 4210 on 2026-05-02. Was a digit misread?" in read(page).text
    assert 'name="remark"' in page.content.decode() and MeterReading.objects.count() == 1
    client.post(address, typed | {"remark": "drum slipped"})
    assert MeterReading.objects.get(shows=4120).remark == "drum slipped"


def test_what_stands_on_a_reading_is_shown_before_it_is_corrected(client, people, engine, rows):
    client.force_login(people["technician"])
    address = reverse("engines:correct_reading", args=[engine.pk, rows["reading"].pk])
    page = read(client.get(address))
    assert "cylinder head H-12, cylinder 3: fitted at 4 210 h" in page.text
    client.post(address, {"shows": "4201", "taken_at": "2026-05-02T09:30", "reason": "digits swapped"})
    assert (queries.hours_at(engine, NOW), Fitting.objects.get().fitted_total) == (4201.0, 4201.0)


def test_a_meter_is_fitted_and_replaced_on_its_pages(client, people, engine):
    client.force_login(people["supervisor"])
    fitting = {"unit": "h", "mark": "M-1", "fitted_at": "2026-01-01T08:00", "shows": "0", "engine_before": "1 000"}
    client.post(reverse("engines:new_meter", args=[engine.pk]), fitting)
    meter = engine.meters.get()
    address = reverse("engines:replace_meter", args=[engine.pk, meter.pk])
    client.post(
        address, {"last_shows": "250 h", "new_shows": "0", "new_mark": "M-2", "replaced_at": "2026-03-01T08:00"}
    )
    assert queries.hours_at(engine, NOW) == 1250.0
    assert "M-2" in read(client.get(reverse("engines:meters", args=[engine.pk]))).text


def test_a_part_is_taken_in_fitted_moved_and_taken_off_on_its_pages(client, people, engine):
    client.force_login(people["technician"])
    client.post(
        reverse("engines:new_part"), {"kind": "liner", "mark": "L-3", "hours_when_new_here": "120 h", "note": ""}
    )
    part = Part.objects.get()
    make_meter(engine, people["technician"], shows=100.0, at=datetime(2026, 1, 2, tzinfo=UTC))
    told = {"engine": engine.pk, "position": "cylinder 9", "fitted_at": "2026-02-01T08:00"}
    refused = client.post(reverse("engines:fit_part", args=[part.pk]), told)
    assert "Read “cylinder 9”; North pump has cylinders 1 to 4." in read(refused).text
    client.post(reverse("engines:fit_part", args=[part.pk]), told | {"position": "cylinder 2"})
    moved = told | {"position": "cylinder 4", "fitted_at": "2026-03-01T08:00", "meter_shows": "180"}
    client.post(reverse("engines:move_part", args=[part.pk]), moved)
    client.post(reverse("engines:take_off_part", args=[part.pk]), {"taken_off_at": "2026-04-01T08:00"})
    assert [(one.position, one.fitted_total, one.taken_off_total) for one in part.fittings.order_by("fitted_at")] == [
        ("cylinder 2", 100.0, 100.0), ("cylinder 4", 180.0, 180.0)
    ]  # fmt: skip
    assert "It has run 120 h, 120 h of them before it came." in read(client.get(
        reverse("engines:part", args=[part.pk]))).text  # fmt: skip


def test_a_part_of_another_shops_engine_cannot_be_fitted(client, people, rows):
    stranger = make_engine(make_shop("Other shop"), "Strange")
    client.force_login(people["technician"])
    told = {"engine": stranger.pk, "position": "cylinder 1", "fitted_at": "2026-02-01T08:00"}
    page = read(client.post(reverse("engines:move_part", args=[rows["part"].pk]), told))
    assert "Select a valid choice." in page.text


def test_a_time_out_of_service_is_recorded_and_ended_on_its_pages(client, people, engine):
    client.force_login(people["supervisor"])
    told = {"from_at": "2026-05-01T08:00", "who_was_told": "harbour office", "what_stood_in": "South pump"}
    client.post(reverse("engines:new_out_of_service", args=[engine.pk]), told)
    time_out = OutOfService.objects.get()
    address = reverse("engines:change_out_of_service", args=[engine.pk, time_out.pk])
    assert "The end must come after the beginning." in read(
        client.post(address, told | {"until_at": "2026-04-01T08:00"})).text  # fmt: skip
    client.post(address, told | {"until_at": "2026-05-02T08:00"})
    time_out.refresh_from_db()
    assert time_out.until_at == datetime(2026, 5, 2, 8, 0, tzinfo=UTC)
