"""What the sheets hold: every reading with its grounds, struck ones too; cautions and locks; boxes in the order of the hands."""

import subprocess
from datetime import UTC, date, datetime, timedelta

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext

from logbook.bench.models import Act, Reading
from logbook.paper.services import fingerprint
from logbook.people.models import Shop
from logbook.review.services import decide
from logbook.review.sheets import blank_sheet, job_sheet, work_order_sheet
from logbook.review.sheets.blank import NothingToMeasure
from logbook.work.models import ClosingItem, PartUsed
from tests.factories import NOW

LATER = NOW + timedelta(hours=1)


def row_of(sheet, station, place=0):
    return next(one for one in sheet["passes"][place]["rows"] if one["station"] == station and not one.get("is_struck"))


def test_a_row_says_what_was_typed_judged_and_decided(bench):
    finding = bench.beyond(left="0.41 mm")
    decide(finding, by=bench.decides, at=LATER, choice="put_right")
    row = row_of(job_sheet(finding.measurement.task.work_order), "Cylinder 3 exhaust")
    told = {name: row[name] for name in ("typed", "value", "limits", "source", "verdict", "words", "decision")}
    assert told == {
        "typed": "0.33 mm", "value": "0.3300 ± 0.0099 mm", "limits": "0.35 to 0.45 mm", "verdict": "beyond",
        "source": "sheet 3; limit sheet 1, compared with its source by Supervisor 2", "words": "beyond",
        "decision": "put right",
    }  # fmt: skip
    assert row["ruler"]["label"] == "Cylinder 3 exhaust: 0.3300 ± 0.0099 mm, beyond; limits 0.35 to 0.45 mm"


def test_last_visit_stands_on_the_ruler_as_a_ghost(bench):
    bench.visit(datetime(2025, 12, 2, tzinfo=UTC), 3798.0, "0.39 mm", "0.40 mm")
    ruler = row_of(job_sheet(bench.beyond().measurement.task.work_order), "Cylinder 3 exhaust")["ruler"]
    assert [(mark["role"], mark["value"]) for mark in ruler["marks"]] == [("last", 0.4), ("now", 0.33)]


def test_stations_stand_in_the_order_of_the_hands_and_struck_ones_stay_with_their_reason(bench):
    finding = bench.beyond()
    first = bench.read(finding.measurement, "1.exhaust", "0.44 mm")
    bench.read(finding.measurement, "1.exhaust", "0.41 mm", supersedes=first.reading, reason="leaf was bent")
    Reading.objects.create(
        shop=bench.shop, measurement=finding.measurement, client_id="00000000-0000-0000-0000-000000000001", recorded_at=NOW,
        station="2.intake", not_measured="seized", measured_by=bench.measures, keyed_by=bench.keys, taken_at=NOW,
    )  # fmt: skip
    rows = job_sheet(finding.measurement.task.work_order)["passes"][0]["rows"]
    assert [(one["station"], one["value"], bool(one.get("is_struck"))) for one in rows] == [
        ("Cylinder 1 exhaust", "0.4100 ± 0.0099 mm", False),
        ("Cylinder 1 exhaust", "0.44 mm", True),
        ("Cylinder 2 intake", "not measured: seized", False),
        ("Cylinder 3 exhaust", "0.3300 ± 0.0099 mm", False),
    ]
    assert rows[1]["notes"] == ["replaced: leaf was bent (Technician 5, 2026-05-02 09:30)"]


def test_what_every_row_says_is_said_once(bench):
    finding = bench.beyond()
    bench.read(finding.measurement, "1.exhaust", "0.41 mm")
    told = job_sheet(finding.measurement.task.work_order)["passes"][0]
    said = "u is a lower bound: there are fewer than four repeats and no repeat study."
    assert {"name": "holds for all", "value": said} in told["facts"]
    assert all(said not in row["notes"] for row in told["rows"])


def test_a_pass_names_its_gauge_calibration_and_who_took_it(bench):
    told = job_sheet(bench.beyond().measurement.task.work_order)["passes"][0]
    assert told["gauge"] == "FG-2 feeler gauge, smallest step 0.01 mm"
    assert told["calibration"] == "C-118, 2026-03-01, U = 0.008 mm (k = 2), due 2027-03-01"
    facts = {one["name"]: one["value"] for one in told["facts"]}
    assert (facts["measured by"], facts["keyed by"], facts["taken"], facts["engine hours"], facts["Engine state"]) == (
        "Technician 3", "Technician 5", "2026-05-02 09:30", "4210", "cold",
    )  # fmt: skip


def test_a_gauge_past_due_is_complained_about(bench):
    measurement = bench.open_pass(bench.job(), at=datetime(2027, 3, 2, tzinfo=UTC))
    bench.read(measurement, "3.exhaust", "0.33 mm")
    (said,) = job_sheet(measurement.task.work_order)["passes"][0]["complaints"]
    assert "past due" in said and "2027-03-01" in said


def test_acts_parts_and_what_was_left_open_stand_on_the_sheet(bench):
    task = bench.beyond().measurement.task
    Act.objects.create(shop=bench.shop, task=task, client_id="00000000-0000-0000-0000-000000000002", station="3.exhaust",
                       what="screw loosened 0.07 turn", done_by=bench.measures, done_at=NOW, recorded_at=NOW)  # fmt: skip
    told = {"shop": bench.shop, "work_order": task.work_order}
    PartUsed.objects.create(**told, what="rocker cover gasket", count=2, used_by=bench.measures, used_at=NOW)
    ClosingItem.objects.create(**told, what="covers off", since_at=NOW, opened_by=bench.keys)
    sheet = job_sheet(task.work_order)
    assert sheet["acts"] == [{"station": "Cylinder 3 exhaust", "what": "screw loosened 0.07 turn", "by": "Technician 3",
                              "when": "2026-05-02 09:30"}]  # fmt: skip
    assert (sheet["parts"], sheet["open"]) == (["2 × rocker cover gasket"], ["covers off: not closed up yet"])


def test_a_concession_says_how_often_it_was_extended(bench):
    finding, told = (
        bench.beyond(),
        {"choice": "may_run_until", "conditions": "half load", "agreed_for_owner_by": "A. Owner"},
    )
    decide(finding, by=bench.decides, at=LATER, **told, ends_on=date(2026, 8, 1))
    decide(
        finding, by=bench.decides, at=LATER + timedelta(hours=1), **told, ends_on=date(2026, 9, 1), ends_at_hours=4500.0
    )
    sheet = job_sheet(finding.measurement.task.work_order)
    assert [one["decision"] for one in sheet["decisions"]] == [
        "may run until 2026-08-01 (no longer stands)", "may run until 2026-09-01 or 4500 h, whichever comes first",
    ]  # fmt: skip
    assert sheet["concessions"] == [{
        "finding": "Exhaust lash, Cylinder 3 exhaust: 0.3300 ± 0.0099 mm", "conditions": "half load", "agreed_by": "A. Owner",
        "until": "2026-09-01 or 4500 h, whichever comes first", "extended": "extended once",
    }]  # fmt: skip


def test_the_sheet_writes_with_the_shops_decimal_mark_and_clock(bench):
    Shop.objects.update(decimal_mark=",", time_zone="Europe/Helsinki")
    bench.shop.refresh_from_db()
    told = job_sheet(bench.beyond(typed="0,33 mm").measurement.task.work_order)["passes"][0]
    assert (told["rows"][0]["value"], told["rows"][0]["limits"]) == ("0,3300 ± 0,0099 mm", "0,35 to 0,45 mm")
    assert {"name": "taken", "value": "2026-05-02 12:30"} in told["facts"]


def test_the_same_rows_give_the_same_sheet(bench):
    order = bench.beyond(left="0.41 mm").measurement.task.work_order
    assert fingerprint(job_sheet(order)) == fingerprint(job_sheet(order))


def test_a_work_order_says_cautions_and_locks_before_each_task(bench):
    task = bench.job()
    told = work_order_sheet(task.work_order)
    (printed,) = told["tasks"]
    assert printed["state"] == "turned by hand: isolated"
    assert printed["locks"] == ["starting battery or starting air", "fuel", "ignition or stop lever", "driven machine"]
    assert [one["name"] for one in printed["facts"]][1:5] == printed["locks"]
    assert "DANGER" in {one["signal"] for one in printed["cautions"]}
    assert told["closing"][-1] == "own locks lifted" and "covers off" in told["closing"]


def test_a_blank_sheet_goes_stop_by_stop_with_limits_and_what_was_left_last(bench):
    bench.visit(datetime(2025, 12, 2, tzinfo=UTC), 3798.0, "0.39 mm", "0.40 mm")
    sheet = blank_sheet(bench.job(), NOW)
    assert [(stop["mark"], stop["angle"]) for stop in sheet["stops"]] == [
        ("TDC 1 firing", "0°"),
        ("TDC 4 firing", "360°"),
    ]
    stations = [one for stop in sheet["stops"] for one in stop["stations"]]
    assert len({one["station"] for one in stations}) == len(stations) == 8
    third = next(one for one in stations if one["station"] == "Cylinder 3 exhaust")
    assert third == {"station": "Cylinder 3 exhaust", "limits": "0.35 mm to 0.45 mm", "setting": "0.38 mm to 0.42 mm",
                     "last": "0.40"}  # fmt: skip
    assert sheet["columns"] == ["as found", "what was done", "as left"]


def test_a_blank_sheet_without_a_known_order_has_all_stations_in_one_go(bench):
    sheet = blank_sheet(bench.job(engine=bench.new_engine("Unknown", firing_order=None)), NOW)
    assert [len(stop["stations"]) for stop in sheet["stops"]] == [8]


def test_a_task_that_measures_nothing_has_no_blank_sheet(bench):
    with pytest.raises(NothingToMeasure, match="“oil change” measures nothing"):
        blank_sheet(bench.job("oil change", kind=""), NOW)


@pytest.mark.parametrize("name", ["work-order.pdf", "blank-{task}.pdf"])
def test_work_order_and_blank_sheet_come_as_pdf(client, bench, tmp_path, name):
    task = bench.job()
    client.force_login(bench.measures)
    answer = client.get(f"/jobs/{task.work_order.number}/{name.format(task=task.pk)}")
    assert answer["Content-Type"] == "application/pdf"
    (tmp_path / "sheet.pdf").write_bytes(answer.content)
    text = subprocess.run(
        ["pdftotext", "-layout", str(tmp_path / "sheet.pdf"), "-"], capture_output=True, text=True
    ).stdout
    assert "North pump" in text and "DANGER" in text


def test_a_sheet_takes_as_few_queries_for_a_whole_engine_as_for_one_valve(bench, django_assert_num_queries):
    bench.visit(datetime(2025, 6, 2, tzinfo=UTC), 3200.0, "0.39 mm", "0.40 mm")
    finding = bench.beyond(left="0.41 mm")
    order = finding.measurement.task.work_order
    with CaptureQueriesContext(connection) as few:
        job_sheet(order)
    for cylinder in "124":
        bench.read(finding.measurement, f"{cylinder}.exhaust", "0.33 mm")
    bench.visit(datetime(2025, 12, 2, tzinfo=UTC), 3798.0, "0.39 mm", "0.40 mm")
    with django_assert_num_queries(len(few)):
        job_sheet(order)
