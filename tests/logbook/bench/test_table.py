"""The table of a pass, the form that needs no script: what is filled in is kept row by row, the rest stays."""

from logbook.bench.models import Act, Reading
from tests.logbook.bench.test_bench_page import address


def filled(client, bench, **cells):
    """The form as a browser sends it, with some cells filled in: `found_1_intake="0.30"`."""
    page = client.get(address(bench, "table"))
    form = {"rows": str(len(page.context["rows"]))}
    for place, row in enumerate(page.context["rows"]):
        form |= {f"station-{place}": row.station, f"client-{place}": str(row.client_id)}
        for name in ("found", "why", "done", "left", "slip_found"):
            key = f"{name}_{row.station.replace('.', '_')}"
            form[f"{name.replace('_', '-')}-{place}"] = cells.get(key, "")
    return form


def sent(client, bench, **cells):
    return client.post(address(bench, "table"), filled(client, bench, **cells), follow=True)


def start(client, bench):
    client.force_login(bench.technician)
    bench.pass_of()
    return client


def test_without_a_pass_the_table_asks_for_the_gauge_first(client, bench):
    client.force_login(bench.technician)
    assert "No pass is open" in client.get(address(bench, "table")).content.decode()


def test_rows_stand_in_the_order_of_the_hands(client, bench):
    page = start(client, bench).get(address(bench, "table"))
    assert [row.station for row in page.context["rows"]][:5] == [
        "1.intake", "1.exhaust", "2.intake", "3.exhaust", "2.exhaust",
    ]  # fmt: skip


def test_found_done_and_left_of_a_station_are_kept_from_one_row(client, bench):
    answer = sent(start(client, bench), bench, found_1_intake="0.18", done_1_intake="loosened", left_1_intake="0.30")
    assert [(one.measurement.phase, one.typed) for one in Reading.objects.all()] == [
        ("as_found", "0.18"), ("as_left", "0.30"),
    ]  # fmt: skip
    assert Act.objects.get().what == "loosened"
    assert "3 answers are kept." in answer.content.decode()


def test_what_is_refused_stays_in_its_row_and_the_others_are_kept(client, bench):
    answer = sent(start(client, bench), bench, found_1_intake="0.3O", found_1_exhaust="0.40")
    assert (answer.status_code, [one.station for one in Reading.objects.all()]) == (422, ["1.exhaust"])
    rows = {row.station: row for row in answer.context["rows"]}
    assert rows["1.intake"].typed["found"] == "0.3O"
    assert rows["1.exhaust"].stands["found"] == "0.40"


def test_a_slip_is_asked_in_its_row_and_answered_there(client, bench):
    answer = sent(start(client, bench), bench, found_1_intake="3.0")
    assert 'value="as meant"' in answer.content.decode()
    sent(client, bench, found_1_intake="3.0", slip_found_1_intake="as meant")
    assert Reading.objects.get().typed == "0.30 mm"


def test_the_same_form_sent_twice_keeps_its_answers_once(client, bench):
    form = filled(start(client, bench), bench, found_1_intake="0.30", why_2_intake="no access")
    for _ in range(2):
        client.post(address(bench, "table"), form)
    assert sorted(one.typed or one.not_measured for one in Reading.objects.all()) == ["0.30", "no access"]


def test_a_form_that_isnt_whole_is_refused_in_a_sentence(client, bench):
    start(client, bench)
    answer = client.post(address(bench, "table"), {"rows": "1", "station-0": "1.intake", "found-0": "0.30"})
    assert (answer.status_code, Reading.objects.count()) == (422, 0)
    assert "This form was not whole" in answer.content.decode()
