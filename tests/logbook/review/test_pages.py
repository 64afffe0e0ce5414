"""The pages of this room: what they show, to whom, and that they find the same number of rows with the same few queries."""

import re
from datetime import UTC, date, datetime
from html import unescape

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext
from django.urls import reverse

from logbook.review.models import Decision, RunningUndecided
from logbook.review.services import decide, running_undecided
from tests.factories import NOW, make_engine, make_person, make_shop
from tests.logbook.review.reading_pages import LATER, address, words

UNTIL = {"choice": "may_run_until", "conditions": "half load", "agreed_for_owner_by": "A. Owner"}
LIST = reverse("review:to_decide")


def headings(response) -> list[str]:
    return [" ".join(unescape(re.sub(r"<[^>]+>", " ", one)).split())
            for one in re.findall(r"<li>\s*<h2>(.*?)</h2>", response.content.decode(), re.DOTALL)]  # fmt: skip


@pytest.fixture
def supervisor(client, bench):
    client.force_login(bench.decides)
    return client


def test_an_empty_list_says_so_in_a_sentence(supervisor):
    assert "Nothing waits for a decision" in words(supervisor.get(LIST))


def test_the_list_names_the_worst_finding_of_a_job_and_how_many_more(supervisor, bench):
    finding = bench.beyond()
    bench.read(finding.measurement, "2.intake", "0.256 mm")
    told = words(supervisor.get(LIST))
    assert "One job has something to decide." in told
    assert (
        "North pump service · job 118, valve lash Cylinder 3 exhaust Exhaust lash : 0.3300 ± 0.0099 mm , beyond and one more"
        in told
    )


def test_the_list_goes_from_concessions_past_their_end_over_engines_that_run_to_the_worst(supervisor, bench):
    slight = bench.beyond(title="slight", typed="0.456 mm")
    assert slight.verdict == "too_close"
    bench.beyond(title="bad")
    bench.beyond(title="for lives", typed="0.456 mm", engine=bench.new_engine("Rescue boat", duty="life_saving"))
    runs = bench.beyond(title="runs", typed="0.456 mm", engine=bench.new_engine("Ferry"))
    running_undecided(runs.measurement.task.work_order, by=bench.measures, at=NOW, on_whose_word="the master")
    over = bench.beyond(title="over", typed="0.456 mm", engine=bench.new_engine("Crane"))
    decide(over, by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 6, 1))
    listed = [re.search(r"job \d+, (.*)$", one)[1] for one in headings(supervisor.get(LIST))]
    assert listed == ["over", "runs", "bad", "for lives", "slight"] or listed == [
        "over",
        "runs",
        "for lives",
        "bad",
        "slight",
    ]
    assert listed.index("for lives") < listed.index("slight")


def test_too_close_on_a_life_saving_engine_comes_before_too_close_elsewhere_whatever_its_chance(supervisor, bench):
    bench.beyond(title="closer", typed="0.457 mm")
    bench.beyond(title="for lives", typed="0.455 mm", engine=bench.new_engine("Rescue boat", duty="life_saving"))
    assert [one.rpartition(", ")[2] for one in headings(supervisor.get(LIST))] == ["for lives", "closer"]


def test_a_concession_of_a_signed_job_comes_back_past_its_end_until_the_station_is_measured_anew(supervisor, bench):
    finding = bench.beyond()
    decide(finding, by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 6, 1))
    order = finding.measurement.task.work_order
    order.state = "signed"
    order.save()
    told = words(supervisor.get(LIST))
    assert "Past its end Cylinder 3 exhaust was let run until 2026-06-01; it is undecided again." in told
    bench.visit(datetime(2026, 6, 2, tzinfo=UTC), 4300.0, "0.40 mm", "0.40 mm")
    assert "Nothing waits for a decision" in words(supervisor.get(LIST))


def test_a_concession_that_still_runs_is_not_on_the_list(supervisor, bench):
    decide(bench.beyond(), by=bench.decides, at=LATER, **UNTIL, ends_on=date(2999, 1, 1))
    told = words(supervisor.get(LIST))
    assert "Nothing waits for a decision" in told
    assert "Decided, only to be signed North pump · 118 · valve lash" in told


def test_what_is_to_be_measured_again_stands_apart(supervisor, bench):
    decide(bench.beyond(), by=bench.decides, at=LATER, choice="measure_again")
    assert "To be measured again North pump · 118 · valve lash" in words(supervisor.get(LIST))


def test_the_list_takes_as_few_queries_for_thirty_jobs_as_for_three(supervisor, bench):
    def jobs(count):
        for _ in range(count):
            finding = bench.beyond(left="0.41 mm")
            decide(bench.beyond(), by=bench.decides, at=LATER, **UNTIL, ends_on=date(2026, 6, 1))
            decide(finding, by=bench.decides, at=LATER, choice="measure_again")
            bench.beyond(left="0.48 mm")

    def queries():
        with CaptureQueriesContext(
            connection,
        ) as taken:
            assert supervisor.get(LIST).status_code == 200
        return len(taken)

    jobs(1)
    few = queries()
    jobs(9)
    assert queries() == few


def test_a_finding_is_shown_with_found_left_change_and_grounds(supervisor, bench):
    bench.visit(datetime(2025, 6, 2, tzinfo=UTC), 3200.0, "0.38 mm", "0.40 mm")
    bench.visit(datetime(2025, 12, 2, tzinfo=UTC), 3798.0, "0.39 mm", "0.40 mm")
    order = bench.beyond(left="0.41 mm").measurement.task.work_order
    page = supervisor.get(address("decide", order.number))
    told = words(page)
    assert told.startswith("Cylinder 3 exhaust 0.33 mm found 0.41 left")
    assert "Exhaust lash, limits 0.35 to 0.45 mm, set 0.38 to 0.42 mm" in told
    assert "Found beyond : 0.02 mm under the lower limit, chance of being within under 0.1 %." in told
    assert "Left within against its setting, 0.01 mm below the upper limit" in told
    assert "Lost 0.07 mm in 412 h (0.17 per 1000 h). The visits before changed it by −0.01 mm." in told
    assert "2025-12-02 3798 0.3900" in told and "by Supervisor 2. Rule guarded: guard band 0.0081 mm." in told
    assert page.content.decode().count('class="ruler"') == 1 and 'class="ghost"' in page.content.decode()


def test_no_decision_is_preselected_and_none_is_the_form_that_enter_sends(supervisor, bench):
    page = supervisor.get(
        address("decide", bench.beyond(left="0.41 mm").measurement.task.work_order.number)
    ).content.decode()
    assert "checked" not in page and "autofocus" not in page
    for form in re.findall(r"<form method=\"post\">.*?</form>", page, re.DOTALL):
        buttons = re.findall(r'name="choice" value="(\w+)"', form)
        typed = 'type="text"' in form
        assert len(buttons) == 1 and (not typed or buttons[0] in ("may_run_until", "other"))


def test_put_right_is_offered_only_where_left_is_within(supervisor, bench):
    right, wrong = bench.beyond(left="0.41 mm"), bench.beyond(left="0.48 mm")
    offered = supervisor.get(address("decide", right.measurement.task.work_order.number)).content.decode()
    assert 'value="put_right"' in offered
    page = supervisor.get(address("decide", wrong.measurement.task.work_order.number))
    assert 'value="put_right"' not in page.content.decode()
    assert "“Put right” needs a reading as left that is within; this one isn't." in words(page)


def test_deciding_goes_on_to_the_next_undecided_finding(supervisor, bench):
    finding = bench.beyond(left="0.41 mm")
    bench.read(finding.measurement, "2.intake", "0.256 mm")
    number = finding.measurement.task.work_order.number
    sent = {"on": f"finding {finding.pk}", "choice": "put_right"}
    told = words(supervisor.post(address("decide", number), sent, follow=True))
    assert Decision.objects.get().decided_by == bench.decides
    assert told.startswith("Cylinder 2 intake 0.256 mm found Cylinder 3 exhaust: put right. It stands under your name.")


def test_a_concession_is_typed_with_the_shops_decimal_mark(supervisor, bench):
    bench.shop.decimal_mark = ","
    bench.shop.save()
    finding = bench.beyond(typed="0,33 mm")
    sent = {**UNTIL, "on": f"finding {finding.pk}", "ends_at_hours": "4500,5"}
    supervisor.post(address("decide", finding.measurement.task.work_order.number), sent)
    assert Decision.objects.get().ends_at_hours == 4500.5


@pytest.mark.parametrize(
    ("sent", "told"),
    [
        ({**UNTIL, "ends_at_hours": "soon"}, "Read “soon”"),
        ({**UNTIL, "ends_on": "next week"}, "The last day is written year-month-day, like 2026-11-30."),
        ({**UNTIL}, "Say until when it may run: a last day, engine hours, or both."),
        ({"choice": "other"}, "Say in a sentence what is decided and why"),
    ],
)
def test_what_cannot_be_decided_is_said_and_what_was_typed_stays(supervisor, bench, sent, told):
    finding = bench.beyond()
    page = supervisor.post(
        address("decide", finding.measurement.task.work_order.number), {**sent, "on": f"finding {finding.pk}"}
    )
    assert told in words(page) and not Decision.objects.exists()
    for typed in (value for name, value in sent.items() if name != "choice"):
        assert f'value="{typed}"' in page.content.decode()


def test_a_finding_replaced_meanwhile_is_not_decided_on(supervisor, bench):
    finding = bench.beyond()
    bench.read(finding.measurement, "3.exhaust", "0.32 mm")
    sent = {"on": f"finding {finding.pk}", "choice": "keep_stopped"}
    page = supervisor.post(address("decide", finding.measurement.task.work_order.number), sent, follow=True)
    assert "That reading was struck or replaced meanwhile" in words(page) and not Decision.objects.exists()


def test_who_measured_is_told_who_can_decide_and_gets_no_buttons(client, bench):
    finding = bench.read(bench.open_pass(bench.job()), "3.exhaust", "0.33 mm", by=bench.decides)
    client.force_login(bench.decides)
    page = client.get(address("decide", finding.measurement.task.work_order.number))
    assert "You measured or keyed this yourself, so you can't decide on it; Supervisor 2 can." in words(page)
    assert 'name="choice"' not in page.content.decode()
    client.force_login(bench.other)
    assert "Supervisor 1 measured or keyed this and can't decide on it." in words(
        client.get(address("decide", finding.measurement.task.work_order.number))
    )


def test_a_job_goes_back_to_the_bench_for_what_is_to_be_measured_again(supervisor, bench):
    finding = bench.beyond()
    decide(finding, by=bench.decides, at=LATER, choice="measure_again")
    order = finding.measurement.task.work_order
    assert "One reading is to be taken again" in words(supervisor.get(address("decide", order.number)))
    supervisor.post(address("back", order.number))
    order.refresh_from_db()
    assert order.state == "at_the_bench"


def test_a_technician_puts_an_engine_back_on_somebodys_word_and_stops_it_again(client, bench):
    order = bench.beyond().measurement.task.work_order
    client.force_login(bench.measures)
    page = client.post(address("running", order.number), {"on_whose_word": ""})
    assert "Say on whose word the engine runs." in words(page)
    told = words(client.post(address("running", order.number), {"on_whose_word": "the harbour master"}, follow=True))
    assert "on the word of the harbour master; written down by Technician 3." in told
    client.post(address("end_running", order.number))
    assert RunningUndecided.objects.get().ended_at is not None


@pytest.fixture
def ready(bench):
    """A job whose only finding is decided."""
    finding = bench.beyond(left="0.41 mm")
    decide(finding, by=bench.decides, at=LATER, choice="put_right")
    return finding.measurement.task.work_order


ADDRESSES = ["decide", "sign", "sheet", "work_order_sheet", "running"]


@pytest.mark.parametrize("name", ADDRESSES)
def test_another_shops_job_is_not_there(client, bench, ready, name):
    elsewhere = make_shop("Elsewhere")
    make_engine(elsewhere)
    client.force_login(make_person(elsewhere, "Supervisor 9", "supervisor", "technician"))
    assert client.get(address(name, ready.number)).status_code == 404


@pytest.mark.parametrize("name", [*ADDRESSES, "to_decide"])
def test_somebody_not_signed_in_is_sent_to_sign_in(client, ready, name):
    where = address(name) if name == "to_decide" else address(name, ready.number)
    answer = client.get(where)
    assert (answer.status_code, answer["Location"].partition("?")[0]) == (302, reverse("people:sign_in"))


@pytest.mark.parametrize(
    ("name", "roles"),
    [
        ("to_decide", {"supervisor"}), ("decide", {"supervisor"}), ("running", {"technician", "supervisor"}),
        ("sign", {"technician", "supervisor", "witness"}), ("work_order_sheet", {"technician", "supervisor", "toolroom"}),
        ("sheet", {"technician", "supervisor", "toolroom", "witness"}),
    ],
)  # fmt: skip
def test_each_page_opens_to_its_roles_alone(client, bench, ready, name, roles):
    ready.tasks.update(witnessed_stations=["3.exhaust"])
    where = address(name) if name == "to_decide" else address(name, ready.number)
    opened = set()
    for role in ("technician", "supervisor", "toolroom", "witness"):
        client.force_login(make_person(bench.shop, f"A {role}", role))
        if client.get(where).status_code == 200:
            opened.add(role)
        else:
            assert client.get(where).status_code == 403
    assert opened == roles


def test_the_decide_page_takes_as_few_queries_for_many_findings_and_visits(supervisor, bench):
    finding = bench.beyond(left="0.41 mm")
    bench.visit(datetime(2024, 6, 2, tzinfo=UTC), 2200.0, "0.38 mm", "0.40 mm")
    number = finding.measurement.task.work_order.number

    def queries():
        with CaptureQueriesContext(connection) as taken:
            assert supervisor.get(address("decide", number)).status_code == 200
        return len(taken)

    few = queries()
    for month in range(1, 9):
        bench.visit(datetime(2025, month, 2, tzinfo=UTC), 2200.0 + month, "0.38 mm", "0.40 mm")
    for station in ("1.exhaust", "2.exhaust", "4.exhaust"):
        bench.read(finding.measurement, station, "0.33 mm")
    assert queries() == few


def test_every_page_has_one_heading_and_nothing_inline(supervisor, ready):
    for where in (
        LIST,
        address("decide", ready.number),
        address("sign", ready.number),
        address("running", ready.number),
    ):
        page = supervisor.get(where).content.decode()
        assert page.count("<h1") == 1
        assert re.findall(r"<[^>]*\sstyle\s*=|<style\b|<[^>]*\son[a-z]+\s*=", page) == []
