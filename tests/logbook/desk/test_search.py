"""Search: what is found, for whom, and at what cost."""

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext

from logbook.desk.search import search
from logbook.engines.models import Engine, Part
from logbook.engines.services import fit_part
from logbook.work.services import name_witnessed, open_work_order
from tests.factories import NOW, make_engine, make_gauge, make_meter, make_person, make_shop

pytestmark = pytest.mark.django_db


@pytest.fixture
def supervisor():
    return make_person(make_shop(), "Supervisor", "supervisor")


@pytest.fixture
def filled(supervisor):
    """A shop with one of each: an engine with a part in it, a job on it, a gauge."""
    engine = make_engine(supervisor.shop, "North pump", serial="NP-0417")
    make_meter(engine, supervisor)
    part = Part.objects.create(shop=supervisor.shop, kind="liner", mark="L-31", created_at=NOW)
    fit_part(by=supervisor, at=NOW, part=part, engine=engine, position="cylinder 1", fitted_at=NOW)
    open_work_order(by=supervisor, at=NOW, engine=engine, title="Half-yearly service", kinds=["valve_lash"])
    make_gauge(supervisor.shop, supervisor, "FG-2")
    return supervisor


def found(person, text: str) -> dict[str, list[str]]:
    return {sort.title: [hit.title for hit in sort.hits] for sort in search(person, text)}


@pytest.mark.parametrize(
    ("text", "told"),
    [
        ("0417", {"Engines": ["North pump"], "Jobs": ["1 · Half-yearly service"]}),
        ("north PUMP", {"Engines": ["North pump"], "Parts": ["liner L-31"], "Jobs": ["1 · Half-yearly service"]}),
        ("l-31", {"Parts": ["liner L-31"]}),
        ("liner north", {"Parts": ["liner L-31"]}),
        ("yearly", {"Jobs": ["1 · Half-yearly service"]}),
        ("feeler", {"Gauges": ["FG-2 feeler gauge"]}),
        ("fg-2", {"Gauges": ["FG-2 feeler gauge"]}),
        ("north feeler", {}),
        ("%", {}),
        ("   ", {}),
        ("", {}),
    ],
)
def test_every_word_must_stand_in_what_is_found(filled, text, told):
    assert found(filled, text) == told


def test_a_number_finds_its_job_alone(filled):
    for _ in range(10):
        open_work_order(by=filled, at=NOW, engine=Engine.objects.get(), title="Round", kinds=[])
    assert found(filled, "11") == {"Jobs": ["11 · Round"]}
    assert found(filled, "9" * 40) == {}


def test_another_shop_s_rows_are_not_found(filled):
    stranger = make_person(make_shop("Mill Quay workshop"), "Stranger", "supervisor", "technician", "toolroom")
    assert [found(stranger, text) for text in ("north", "L-31", "yearly", "1", "FG")] == [{}] * 5


def test_a_witness_finds_only_jobs_with_readings_to_witness(filled):
    witness = make_person(filled.shop, "Witness", "witness")
    assert "Jobs" not in found(witness, "yearly")
    order = open_work_order(by=filled, at=NOW, engine=Engine.objects.get(), title="Yearly survey", kinds=["valve_lash"])
    task = order.tasks.get()
    name_witnessed(task, by=filled, at=NOW, stations=["1.intake"])
    assert found(witness, "yearly")["Jobs"] == ["2 · Yearly survey"]


@pytest.mark.parametrize("role", ["technician", "supervisor", "toolroom", "witness"])
def test_no_link_leads_where_its_reader_may_not_go(filled, client, role):
    person = make_person(filled.shop, f"A {role}", role)
    client.force_login(person)
    hits = [hit for text in ("north", "L-31", "FG-2", "1") for sort in search(person, text) for hit in sort.hits]
    assert hits and {client.get(hit.address).status_code for hit in hits if hit.address} == {200}


def queries_to_find(person, text: str) -> int:
    with CaptureQueriesContext(connection) as asked:
        search(person, text)
    return len(asked)


def test_the_number_of_queries_stays_with_ten_times_as_much(filled):
    few = queries_to_find(filled, "1")
    for n in range(12):
        engine = make_engine(filled.shop, f"Pump 1{n}")
        part = Part.objects.create(shop=filled.shop, kind="head", mark=f"H-1{n}", created_at=NOW)
        fit_part(by=filled, at=NOW, part=part, engine=engine, position="cylinder 1", fitted_at=NOW)
        open_work_order(by=filled, at=NOW, engine=engine, title=f"Job 1{n}", kinds=[])
        make_gauge(filled.shop, filled, f"G-1{n}")
    assert {sort: len(hits) for sort, hits in found(filled, "1").items()} == {
        "Engines": 13, "Parts": 13, "Jobs": 13, "Gauges": 12,
    }  # fmt: skip
    assert queries_to_find(filled, "1") == few


def test_more_than_a_page_asks_for_another_word(filled, client):
    for n in range(30):
        make_gauge(filled.shop, filled, f"X-{n}")
    client.force_login(filled)
    assert len(found(filled, "X-")["Gauges"]) == 25
    page = client.get("/search/", {"q": "X-"}).content.decode()
    assert "There are more than these: add a word to narrow it down." in page


def test_nothing_found_gets_a_sentence_with_what_was_looked_for(filled, client):
    client.force_login(filled)
    page = client.get("/search/", {"q": "<b>zebra"}).content.decode()
    assert "Nothing in your shop has “&lt;b&gt;zebra” in it." in page
    assert "Nothing in your shop" not in client.get("/search/").content.decode()


def test_htmx_gets_what_was_found_alone(filled, client):
    client.force_login(filled)
    fragment = client.get("/search/", {"q": "fg"}, headers={"HX-Request": "true"}).content.decode()
    assert fragment.strip().startswith('<div id="found"') and "FG-2 feeler gauge" in fragment


def test_nobody_searches_without_signing_in(client):
    answer = client.get("/search/", {"q": "pump"})
    assert (answer.status_code, answer["Location"]) == (302, "/sign-in/?next=/search/%3Fq%3Dpump")
