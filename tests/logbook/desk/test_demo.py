"""The demo: an invented shop with one of everything, in a database of its own."""

import os
import re
import sqlite3
import subprocess
import sys
import urllib.request
from contextlib import closing
from datetime import UTC, date, datetime, timedelta
from hashlib import sha256
from pathlib import Path

import pytest
from django.core.exceptions import ImproperlyConfigured
from django.core.management import CommandError, call_command
from django.db import transaction
from django.test import Client

from logbook.bench.models import Act, Finding, Measurement, Reading
from logbook.core.environment import refuse_unfit_production
from logbook.desk.demo.door import demo_password, demo_people
from logbook.desk.demo.story import FOLDER, StoryBroken, read_story
from logbook.desk.demo.wear import Wear, run_between, typed
from logbook.desk.management.commands.demo import day
from logbook.engines.models import Engine, Fitting, LimitLine, Meter, MeterReading, OutOfService
from logbook.engines.queries import hours_at
from logbook.gauges.models import Gauge
from logbook.gauges.queries import complaints
from logbook.people.models import ROLES, Person, Shop
from logbook.review.lists import to_decide
from logbook.review.models import Decision, Signature
from logbook.work.models import ClosingItem, Deferral, HandOver, Lock, WorkOrder
from logbook.work.queries import due_list
from measurements.conformity import BEYOND, TOO_CLOSE
from tests.factories import make_shop

ROOT = Path(__file__).resolve().parents[3]
TODAY = date(2026, 5, 2)
NOW = datetime(2026, 5, 2, 14, 0, tzinfo=UTC)
State = WorkOrder.State

# Makers of engines, gauges and programs by the beginning of the SHA-256 of their names: no name is written down here.
MAKERS = {
    "014e3f1f2076", "04d19d00518b", "05335559cc88", "0600c79833cc", "066908c5ac7e", "09b7b4bebb61", "0af338a7c364",
    "0f6f1d1b0706", "10ac88856493", "14a145de224b", "1c319d594acd", "1d45f5deb9fb", "1e71ec5c2a03", "1efa0b298bd4",
    "208bbce4429e", "261651c7c73c", "27df9ed9a477", "2e11f2c2a8b0", "2f309f126ef2", "2f5bbecf7ebc", "30e3d1e2053d",
    "337b8d2c1e13", "3663544746b5", "3bc175e9ce56", "44e8dd36c54c", "489e6ada109e", "49762afb5c3e", "49ab10f33654",
    "49be6e401e7f", "4d13e1dbe7ab", "587bf9b32f9a", "5bce98f73f3e", "68320b815dce", "6a0d269758bd", "75acbf4fd162",
    "762070c61b44", "7625d82f1909", "77a45f25d31a", "78fe4a402ea1", "80537d65d479", "83b06543f369", "8417659f46b5",
    "845cbe2626fc", "917ebb3396b2", "93d65b44487c", "9c15e8160699", "9c81ee96cdb2", "a237bef830f2", "aa7d397c4ccf",
    "ac85892205b9", "ad21acb889da", "adc512f8f556", "ae3f55960ae1", "af9d7f5c9415", "b153c91731d6", "b2808c947ea0",
    "b769a6983b42", "b934e3f7c4a9", "baffdf37aa5d", "bb7acca7d7b1", "bc5bee2cdbfd", "bccae4ce7be6", "c444d3c81327",
    "c8c925eb50c9", "c9561ea9ac17", "cb9fa2a3b15a", "cc7c38ad0bb5", "d222a18d6474", "d5080414aac6", "da4b1c6bc188",
    "ddab0a399948", "dfb5a03f95ec", "e3a2d8fabafa", "e7eceae55aeb", "ea1fc5fec030", "ef60ffe38f58", "f36e9f2d32d7",
    "f3791b88caf3", "fe9fc7844a7d",
}  # fmt: skip


@pytest.fixture(scope="module")
def demo(django_db_setup, django_db_blocker):
    """The demo loaded once for all that only look at it; it leaves no trace."""
    with django_db_blocker.unblock(), transaction.atomic():
        call_command("demo", today=TODAY)
        yield Shop.objects.get()
        transaction.set_rollback(True)


@pytest.fixture
def touched(demo):
    """The demo, for a test that writes in it."""
    with transaction.atomic():
        yield demo
        transaction.set_rollback(True)


def person(name: str) -> Person:
    return Person.objects.get(name=name)


def test_it_says_that_it_is_a_demo(demo):
    assert (demo.is_demo, demo.name) == (True, "Seven Meres workshop")


def test_its_first_six_persons_cover_every_role_and_sign_in_with_the_password_shown(demo):
    first = list(Person.objects.order_by("pk")[:6])
    assert first == demo_people()
    assert {role for one in first for role in one.roles} == set(ROLES)
    assert [sum(one.has_role(role) for one in first) for role in ROLES] == [2, 2, 1, 1]
    assert all(Client().login(username=one.name, password=demo_password()) for one in first[::5])


def test_the_sign_in_page_names_them(demo):
    page = Client().get("/sign-in/").content.decode()
    assert [name for name in (one.name for one in demo_people()) if name not in page] == []
    assert demo_password() in page


def test_it_has_six_engines_of_every_build(demo):
    assert sorted((one.layout, one.cylinders) for one in Engine.objects.all()) == [
        ("flat", 4), ("inline", 1), ("inline", 4), ("inline", 4), ("inline", 6), ("vee", 8),
    ]  # fmt: skip
    assert set(Engine.objects.values_list("ignition", flat=True)) == {"spark", "compression"}
    assert Engine.objects.filter(firing_order__isnull=True).count() == 1


def test_its_visits_reach_over_three_years(demo):
    first = Measurement.objects.order_by("opened_at").first().opened_at
    assert timedelta(days=1000) < NOW - first < timedelta(days=1100)
    assert (
        Measurement.objects.filter(opened_at__gt=NOW).count() == Reading.objects.filter(taken_at__gt=NOW).count() == 0
    )


def test_bores_are_seen_two_or_three_times_and_lash_more_often(demo):
    jobs = {
        engine.name: {kind: engine.work_orders.filter(tasks__kind=kind, tasks__measurements__isnull=False).distinct().count()
                      for kind in ("bore", "valve_lash")}
        for engine in Engine.objects.all()
    }  # fmt: skip
    assert {each["bore"] for each in jobs.values()} <= {2, 3}
    assert all(each["valve_lash"] > each["bore"] or each["valve_lash"] >= 3 for each in jobs.values())
    assert Act.objects.exists() and Measurement.objects.filter(phase="as_left").count() > 10


def test_bores_wear_a_few_micrometres_in_a_thousand_hours(demo):
    engine = Engine.objects.get(name__startswith="Bittern")
    at_top = Finding.objects.filter(measurement__task__work_order__engine=engine, station="1.top.thrust").order_by("pk")
    seen = [(one.measurement.engine_hours, one.judgement["value"]) for one in at_top]
    rate = (seen[-1][1] - seen[0][1]) * 1000 / (seen[-1][0] - seen[0][0]) * 1000
    assert 1 < rate < 12  # µm per 1000 h: common practice for a clean engine in steady service


def test_meters_are_read_about_monthly(demo):
    meter = Meter.objects.get(mark="HM-15")
    days = [at.date() for at in meter.readings.filter(supersedes=None).values_list("taken_at", flat=True)]
    assert max(later - earlier for earlier, later in zip(days, days[1:], strict=False)) <= timedelta(days=31)


def test_something_beyond_waits_for_a_decision_and_something_too_close(demo):
    waiting = to_decide(person("Supervisor A"), NOW).entries
    verdicts = {
        case.subject.verdict for entry in waiting for case in entry.cases if entry.work_order.state == State.TO_DECIDE
    }
    assert verdicts == {BEYOND, TOO_CLOSE}


def test_two_neighbours_are_low_in_compression(demo):
    job = WorkOrder.objects.get(engine__name="North pump", state=State.TO_DECIDE)
    low = Finding.objects.standing().filter(measurement__task__work_order=job, verdict=BEYOND)
    assert set(low.values_list("station", flat=True)) == {"2", "3"}


def test_a_worn_bore_may_run_for_a_few_more_days(demo):
    concession = Decision.objects.filter(choice="may_run_until", finding__station="1.top.thrust").get()
    assert (concession.finding.verdict, concession.finding.characteristic) == (BEYOND, "bore.diameter")
    assert timedelta(0) < concession.ends_on - TODAY < timedelta(days=14)


def test_something_is_overdue_and_something_put_off(demo):
    due = due_list(person("Supervisor A"), NOW)
    assert "Weir winch · Valve lash" in {str(job.interval) for job in due if job.stage == "over"}
    assert Deferral.objects.get().until_on > TODAY


def test_a_gauge_is_past_due_and_one_failed(demo):
    said = {gauge.mark: complaints(gauge, TODAY) for gauge in Gauge.objects.filter(retired_at=None)}
    assert [mark for mark, told in said.items() if told] == ["FG-2"] and "past due" in said["FG-2"][0]
    assert Gauge.objects.get(calibrations__has_failed=True).measurements.exists()


def test_a_meter_was_replaced_and_a_wrong_reading_superseded(demo):
    assert Meter.objects.exclude(replaced_at=None).get().mark == "HM-14"
    right = MeterReading.objects.exclude(supersedes=None).get()
    assert right.supersedes.shows == right.shows + 900
    engine = Engine.objects.get(name__startswith="Bittern")
    assert hours_at(engine, NOW) > 17_000  # over both meters


def test_a_part_moved_between_engines(demo):
    assert len(set(Fitting.objects.filter(part__mark="J-08").values_list("engine", flat=True))) == 2


def test_an_engine_runs_undecided_and_another_is_out_of_service(demo):
    running = [entry for entry in to_decide(person("Supervisor B"), NOW).entries if entry.running]
    assert [str(entry.work_order.engine) for entry in running] == ["Landing fire pump"]
    assert OutOfService.objects.get(until_at=None).what_stood_in


def test_a_job_stopped_short_leaves_its_closing_up_list(demo):
    job = WorkOrder.objects.get(state=State.STOPPED_SHORT)
    assert ClosingItem.objects.filter(work_order=job, closed_at=None).exists()
    assert HandOver.objects.get(work_order=job).open_items
    assert Reading.objects.exclude(not_measured="").get().measurement.task.work_order == job


def test_a_job_is_half_way_at_the_bench(demo):
    job = WorkOrder.objects.get(state=State.AT_THE_BENCH)
    found, left = (set(Reading.objects.filter(measurement__task__work_order=job, measurement__phase=phase)
                       .values_list("station", flat=True)) for phase in ("as_found", "as_left"))  # fmt: skip
    assert 0 < len(left) < len(found) < 12
    assert {lock.person.name for lock in Lock.objects.filter(work_order=job, lifted_at=None)} == {
        "Technician A",
        "Technician B",
    }


def test_jobs_are_planned_for_an_engine_and_for_a_loose_part(demo):
    planned = WorkOrder.objects.filter(state=State.PLANNED)
    assert planned.exclude(engine=None).exists() and planned.exclude(part=None).exists()


def test_a_limit_is_provisional_and_a_reading_struck(demo):
    assert LimitLine.objects.exclude(provisional_by="").get().provisional_until > TODAY
    assert Reading.objects.get(is_strike=True).supersedes.typed == "15.2"


def test_a_witness_signed_and_every_signed_job_was_decided_by_somebody_else(demo):
    assert Signature.objects.get(role="witnessed").stations == ["1.intake", "1.exhaust", "8.exhaust"]
    for job in WorkOrder.objects.filter(state=State.SIGNED):
        signed = {one.role: one.person_id for one in job.signatures.all()}
        assert signed["measured"] != signed["decided"]


def test_loading_it_again_keeps_what_was_done_in_it(touched):
    engine = Engine.objects.get(name="North pump")
    Engine.objects.filter(pk=engine.pk).update(serial="changed by a visitor")
    before = WorkOrder.objects.count()
    call_command("demo")
    assert (Engine.objects.get(pk=engine.pk).serial, WorkOrder.objects.count()) == ("changed by a visitor", before)


@pytest.mark.django_db
def test_a_database_that_holds_another_shop_is_refused():
    make_shop("Mill Quay workshop")
    with pytest.raises(CommandError) as refused:
        call_command("demo")
    assert str(refused.value) == (
        "This database holds the shop “Mill Quay workshop”: the demo goes into a database of its own, and nothing was "
        "loaded. `make serve` opens this one; `make run` opens the demo's."
    )
    assert Engine.objects.count() == 0


def test_a_day_that_is_none_gets_a_sentence():
    with pytest.raises(CommandError) as refused:
        day("2 May")
    assert str(refused.value) == "Read “2 May” for --today: write the day as YYYY-MM-DD, such as 2026-05-02."


def test_production_refuses_it():
    with pytest.raises(
        ImproperlyConfigured, match="LOGBOOK_DEMO=1, .* opens an invented shop; start with manage.py serve"
    ):
        refuse_unfit_production({"LOGBOOK_DEMO": "1"})


# ---- its own database, through the commands


def managed(home: Path, *command: str, **environment: str) -> subprocess.CompletedProcess:
    told = os.environ | {"LOGBOOK_HOME": str(home)} | environment
    return subprocess.run([sys.executable, "manage.py", *command], cwd=ROOT, env=told, capture_output=True, text=True)


def asked(database: Path, query: str) -> list:
    with closing(sqlite3.connect(database)) as kept:
        return [value for (value,) in kept.execute(query)]


@pytest.fixture(scope="module")
def home(tmp_path_factory):
    """A home whose demo was thrown away and loaded afresh, counted back from today."""
    home = tmp_path_factory.mktemp("home")
    database = home / "demo" / "logbook.sqlite3"
    managed(home, "migrate", LOGBOOK_DEMO="1")
    with closing(sqlite3.connect(database)) as kept, kept:
        kept.execute(
            "INSERT INTO people_shop (name, units, decimal_mark, paper, time_zone, decision_rule, setting_rule, barometer, "
            "is_demo, created_at) VALUES ('an older demo', 'metric', '.', 'A4', 'UTC', 'guarded', 'simple', '', 1, '2020-01-01')"
        )
    (home / "demo" / "sheets").mkdir()
    done = managed(home, "demo", "--afresh")
    assert done.returncode == 0, done.stderr
    return home


def test_afresh_throws_the_older_one_away(home):
    assert asked(home / "demo" / "logbook.sqlite3", "SELECT name FROM people_shop") == ["Seven Meres workshop"]
    assert not (home / "demo" / "sheets").exists()


def test_a_real_shop_s_database_is_left_alone(home):
    assert [path.name for path in home.iterdir()] == ["demo"]


def test_another_day_moves_its_dates_and_changes_no_reading(home, demo):
    database = home / "demo" / "logbook.sqlite3"
    typed_there = asked(database, "SELECT typed FROM bench_reading ORDER BY id")
    due_there = asked(database, "SELECT max(due_on) FROM gauges_calibration")
    assert typed_there == list(Reading.objects.order_by("pk").values_list("typed", flat=True))
    here = max(due for due in Gauge.objects.values_list("calibrations__due_on", flat=True) if due)
    shift = datetime.now(UTC).date() - TODAY
    assert abs(date.fromisoformat(due_there[0]) - here - shift) <= timedelta(days=1)  # midnight may lie between


def test_run_opens_it_as_it_was_left_and_serve_opens_another(home):
    with closing(sqlite3.connect(home / "demo" / "logbook.sqlite3")) as kept, kept:
        kept.execute("UPDATE people_person SET name = 'Technician Z' WHERE name = 'Technician A'")
    assert "Technician Z" in page_served(home, "run")
    assert "Technician Z" not in page_served(home, "serve") and (home / "logbook.sqlite3").exists()


def page_served(home: Path, command: str) -> str:
    server = subprocess.Popen(
        [sys.executable, "manage.py", command, "--port", "0"], cwd=ROOT, env=os.environ | {"LOGBOOK_HOME": str(home)},
        stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, text=True,
    )  # fmt: skip
    try:
        address = re.search(r"http://127\.0\.0\.1:\d+/", server.stdout.readline())[0]
        with urllib.request.urlopen(address) as answer:
            return answer.read().decode()
    finally:
        server.terminate()
        server.wait()
        server.stdout.close()


# ---- its files and its rule


def test_a_file_that_names_somebody_unknown_is_refused(tmp_path):
    for path in FOLDER.glob("*.json"):
        (tmp_path / path.name).write_text(
            path.read_text().replace('"hands": ["Technician B"]', '"hands": ["Technician X"]')
        )
    with pytest.raises(
        StoryBroken, match="Bittern ferry, main engine, “Valve lash” names Technician X, who isn't in the shop"
    ):
        read_story(tmp_path)


def test_a_file_that_is_no_json_is_refused(tmp_path):
    (tmp_path / "shop.json").write_text("{")
    with pytest.raises(StoryBroken, match="^The demo's file shop.json can't be read: "):
        read_story(tmp_path)


def makers_in(text: str) -> list[str]:
    """Words of a text, capitals left aside, that are a maker's name."""
    return [
        word for word in set(re.findall(r"[\w-]+", text.casefold())) if sha256(word.encode()).hexdigest()[:12] in MAKERS
    ]


def test_it_names_no_maker(monkeypatch):
    told = " ".join(path.read_text(encoding="utf-8") for path in FOLDER.glob("*.json"))
    assert makers_in(told) == []
    monkeypatch.setitem(globals(), "MAKERS", {sha256(b"bittern").hexdigest()[:12]})
    assert makers_in(told) == ["bittern"]  # the search finds what it looks for


def test_a_year_runs_what_its_average_says():
    assert run_between(5.0, 730.0, 0.0) == pytest.approx(2 * 365 * 5)


@pytest.mark.parametrize(
    ("value", "resolution", "text"),
    [(27.338, "0.2 bar", "27.4"), (0.285, "0.01 mm", "0.28"), (96.0131, "0.002 mm", "96.014")],
)
def test_a_value_is_typed_to_the_gauge_s_step(value, resolution, text):
    assert typed(value, resolution) == text


def test_a_valve_that_is_set_starts_again_from_there():
    wear = Wear("an engine", {"valve_lash": {"exhaust": {"set_to": 0.4, "closes_per_1000_h": 0.02}, "scatter": 0.0}})
    left = wear.set_lash("1.exhaust", 1000)
    assert wear.read("valve_lash", "1.exhaust", 3000) == pytest.approx(left - 0.04)
