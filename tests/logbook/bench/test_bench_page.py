"""The bench page with the test client, script or not: the next step, what is kept, what is refused, who may."""

from uuid import uuid4

import pytest
from django.urls import reverse

from logbook.bench.models import Act, Measurement, Reading
from logbook.bench.services import turn_crank
from logbook.work.lockout import STATES
from logbook.work.services import finish_task, stop_short, take_lock
from tests.factories import make_person, make_shop


def address(bench, name="bench", *more):
    return reverse(f"bench:{name}", args=[bench.task.work_order.number, bench.task.pk, *more])


def heading(answer):
    text = answer.content.decode()
    inside = text[text.index('<span id="heading"') :]
    return inside[inside.index(">") + 1 : inside.index("</span>")]


def at_first_stop(bench):
    bench.pass_of()
    turn_crank(bench.task, by=bench.technician, at=bench.now, to="TDC 1 firing")
    return bench


def post(client, bench, name, follow=True, **told):
    return client.post(address(bench, name), told, follow=follow)


def answer_to(station, typed="", phase="as_found", **more):
    return {"client_id": str(uuid4()), "station": station, "phase": phase, "typed": typed} | more


@pytest.fixture
def signed_in(client, bench):
    client.force_login(bench.technician)
    return client


def test_before_the_first_pass_the_cautions_stand_and_the_gauge_is_picked(signed_in, bench):
    answer = signed_in.get(address(bench))
    text = answer.content.decode()
    assert heading(answer) == "Before you begin"
    assert text.index("<strong>DANGER</strong>") < text.index("Pick the gauge")


def test_the_whole_task_is_done_without_script_step_by_step(signed_in, bench):
    answer = post(
        signed_in, bench, "open", phase="as_found", gauge=bench.gauge.pk, how_state="cold", engine_hours="4210"
    )
    assert heading(answer) == "Turn the crank to TDC 1 firing"
    answer = post(signed_in, bench, "turn", to="TDC 1 firing")
    assert heading(answer) == "Cylinder 1 intake"
    answer = post(signed_in, bench, "read", **answer_to("1.intake", "0.18"))
    assert heading(answer) == "Cylinder 1 exhaust"
    for station, typed in (("1.exhaust", "0.40"), ("2.intake", "0.30")):
        post(signed_in, bench, "read", **answer_to(station, typed))
    answer = post(signed_in, bench, "read", **answer_to("3.exhaust", "0.41"))
    assert "Loosen the screw 0.12 turn (45° anticlockwise)" in answer.content.decode()
    answer = post(signed_in, bench, "act", client_id=str(uuid4()), station="1.intake", what="screw loosened 0.12 turn")
    assert "Intake lash as left" in answer.content.decode()
    answer = post(signed_in, bench, "read", **answer_to("1.intake", "0.30", "as_left"))
    assert heading(answer) == "Turn the crank to TDC 4 firing"
    post(signed_in, bench, "turn", to="TDC 4 firing")
    for station in ("2.exhaust", "3.intake", "4.intake", "4.exhaust"):
        answer = post(signed_in, bench, "read", **answer_to(station, "0.40" if "exhaust" in station else "0.30"))
    assert heading(answer) == "Everything is measured"
    answer = post(signed_in, bench, "finish", minutes="40")
    bench.task.refresh_from_db()
    assert (bench.task.minutes, bench.task.done_by) == (40, bench.technician)
    assert Measurement.objects.filter(closed_at=None).count() == 0


def test_by_htmx_the_answer_is_the_part_that_changed_with_its_address(signed_in, bench):
    at_first_stop(bench)
    answer = signed_in.post(address(bench, "read"), answer_to("1.intake", "0.30"), headers={"HX-Request": "true"})
    text = answer.content.decode()
    assert text.lstrip().startswith('<div id="step"')
    assert "<html" not in text
    assert answer["HX-Replace-Url"] == f"{address(bench)}?kept={Reading.objects.get().pk}"
    assert heading(answer) == "Cylinder 1 exhaust"


def test_the_verdict_of_what_was_just_kept_stands_on_the_page_in_words(signed_in, bench):
    at_first_stop(bench)
    text = post(signed_in, bench, "read", **answer_to("1.intake", "0.18")).content.decode()
    assert "beyond: 0.07 mm under the lower limit" in text


def test_a_close_call_that_another_reading_can_settle_stays_at_its_station(signed_in, bench):
    at_first_stop(bench)
    bench.gauge.repeatability, bench.gauge.repeatability_dof = "0.01 mm", 20
    bench.gauge.save()
    answer = post(signed_in, bench, "read", **answer_to("1.intake", "0.34"))
    assert heading(answer) == "Cylinder 1 intake"
    assert "readings in all would settle it" in answer.content.decode()
    assert heading(signed_in.get(address(bench))) == "Cylinder 1 exhaust"


def test_what_is_refused_stays_in_its_field_with_the_sentence(signed_in, bench):
    at_first_stop(bench)
    answer = post(signed_in, bench, "read", **answer_to("1.intake", "0.3O"))
    text = answer.content.decode()
    assert (answer.status_code, Reading.objects.count()) == (422, 0)
    assert 'value="0.3O"' in text
    assert 'role="alert"' in text


def test_by_htmx_a_refusal_comes_as_a_part_that_htmx_takes_in(signed_in, bench):
    at_first_stop(bench)
    answer = signed_in.post(address(bench, "read"), answer_to("1.intake", "oil"), headers={"HX-Request": "true"})
    assert (answer.status_code, "Read “oil”" in answer.content.decode()) == (200, True)


def test_a_slip_is_asked_with_both_readings_on_two_buttons(signed_in, bench):
    at_first_stop(bench)
    text = post(signed_in, bench, "read", **answer_to("1.intake", "3.0")).content.decode()
    assert text.count('name="slip_answer"') == 2
    assert "it would be 0.30 mm if the point is moved one place" in text
    assert Reading.objects.count() == 0


@pytest.mark.parametrize(("answered", "kept"), [("as typed", "3.0"), ("as meant", "0.30 mm")])
def test_either_button_keeps_its_reading(signed_in, bench, answered, kept):
    at_first_stop(bench)
    post(signed_in, bench, "read", **answer_to("1.intake", "3.0", slip_answer=answered))
    assert Reading.objects.get().typed == kept


def test_a_reading_that_belongs_to_the_neighbour_is_kept_there(signed_in, bench):
    at_first_stop(bench)
    post(signed_in, bench, "read", **answer_to("1.intake", "0.40", at_station="1.exhaust"))
    assert Reading.objects.get().station == "1.exhaust"


def test_a_reason_picked_or_written_is_an_answer(signed_in, bench):
    at_first_stop(bench)
    text = signed_in.get(f"{address(bench)}?station=1.intake&ask=why").content.decode()
    assert "Why was Cylinder 1 intake not measured?" in text
    post(signed_in, bench, "read", **answer_to("1.intake", not_measured="no access", other_reason="pipe in the way"))
    assert Reading.objects.get().not_measured == "pipe in the way"


def test_left_as_found_is_an_answer_that_goes_on_to_the_next_station(signed_in, bench):
    at_first_stop(bench)
    for station, typed in (("1.intake", "0.18"), ("1.exhaust", "0.40"), ("2.intake", "0.30"), ("3.exhaust", "0.40")):
        post(signed_in, bench, "read", **answer_to(station, typed))
    answer = post(signed_in, bench, "read", **answer_to("1.intake", phase="as_left", not_measured="left as found"))
    assert heading(answer) == "Turn the crank to TDC 4 firing"
    assert Act.objects.count() == 0


def test_who_measured_is_remembered_for_the_next_reading(signed_in, bench):
    mate = make_person(bench.shop, "Second technician", "technician")
    at_first_stop(bench)
    text = post(signed_in, bench, "read", **answer_to("1.intake", "0.30", measured_by=mate.pk)).content.decode()
    assert Reading.objects.get().measured_by == mate
    assert f'<option value="{mate.pk}" selected>' in text


@pytest.mark.parametrize(
    ("does", "more", "stands"),
    [
        ("correct", {"typed": "0.31"}, [("1.intake", "0.31")]),
        ("strike", {}, []),
        ("move", {"station": "2.intake"}, [("2.intake", "0.30")]),
    ],
)
def test_a_reading_is_corrected_struck_or_moved_on_its_own_page(signed_in, bench, does, more, stands):
    at_first_stop(bench)
    wrong = bench.read("1.intake", "0.30")
    told = {"client_id": str(uuid4()), "does": does, "reason": "called out wrongly", **more}
    answer = signed_in.post(address(bench, "reading", wrong.pk), told, follow=True)
    assert answer.redirect_chain == [(address(bench), 302)]
    assert [(one.station, one.typed) for one in Reading.objects.standing()] == stands


def test_a_correction_without_a_reason_says_so_on_the_page(signed_in, bench):
    at_first_stop(bench)
    wrong = bench.read("1.intake", "0.30")
    told = {"client_id": str(uuid4()), "does": "strike", "reason": ""}
    answer = signed_in.post(address(bench, "reading", wrong.pk), told)
    assert (answer.status_code, "Say why the earlier reading is struck" in answer.content.decode()) == (422, True)


def test_missing_locks_are_told_by_name_when_the_pass_is_opened(client, bench):
    mate = make_person(bench.shop, "Second technician", "technician")
    client.force_login(mate)
    answer = client.post(address(bench, "open"), {"phase": "as_found"})
    assert (answer.status_code, Measurement.objects.count()) == (422, 0)
    assert "your lock is missing on: starting battery or starting air, fuel" in answer.content.decode()
    for point in STATES[bench.task.lock_state].locked:
        take_lock(bench.task.work_order, by=mate, at=bench.now, state=bench.task.lock_state, point=point)
    assert client.post(address(bench, "open"), {"phase": "as_found"}).status_code == 302


def test_the_line_of_locks_says_who_holds_them(signed_in, bench):
    at_first_stop(bench)
    assert f"driven machine ({bench.technician.name})" in signed_in.get(address(bench)).content.decode()


def test_how_an_open_pass_is_taken_can_be_said_better_unless_it_turns_what_is_kept(signed_in, bench):
    bench.read("1.intake", "0.30")
    where = address(bench, "conditions", bench.pass_of().pk)
    answer = signed_in.post(where, {"how_state": "hot"})
    assert "That would turn what is kept at Cylinder 1 intake" in answer.content.decode()
    assert signed_in.post(where, {"how_state": "cold", "how_method": "drag"}).status_code == 302
    assert Measurement.objects.get().conditions == {"state": "cold", "method": "drag"}


def test_a_supervisor_looks_on_and_enters_nothing(client, bench):
    at_first_stop(bench)
    client.force_login(bench.supervisor)
    text = client.get(address(bench)).content.decode()
    assert "<h1>" in text and 'name="typed"' not in text and address(bench, "table") not in text
    assert client.post(address(bench, "read"), answer_to("1.intake", "0.30")).status_code == 403


@pytest.mark.parametrize("role", ["witness", "toolroom"])
def test_witness_and_toolroom_are_told_for_whom_the_page_is(client, bench, role):
    client.force_login(make_person(bench.shop, f"Only {role}", role))
    assert client.get(address(bench)).status_code == 403


def test_whoever_isnt_signed_in_is_sent_to_sign_in(client, bench):
    answer = client.get(address(bench))
    assert (answer.status_code, answer["Location"].startswith("/sign-in/")) == (302, True)


@pytest.mark.parametrize("name", ["bench", "open", "table"])
def test_another_shops_bench_is_nowhere(client, bench, name):
    client.force_login(make_person(make_shop("Alder Bay workshop"), "Stranger", "technician"))
    assert client.get(address(bench, name)).status_code == 404


@pytest.mark.parametrize("name", ["read", "act", "turn", "finish"])
def test_nothing_is_posted_to_another_shops_bench(client, bench, name):
    at_first_stop(bench)
    client.force_login(make_person(make_shop("Alder Bay workshop"), "Stranger", "technician"))
    assert client.post(address(bench, name), answer_to("1.intake", "0.30")).status_code == 404
    assert Reading.objects.count() == 0


def test_another_shops_reading_is_nowhere(client, bench):
    reading = bench.read("1.intake", "0.30")
    client.force_login(make_person(make_shop("Alder Bay workshop"), "Stranger", "technician"))
    assert client.get(address(bench, "reading", reading.pk)).status_code == 404


def test_a_job_number_that_isnt_the_tasks_is_nowhere(signed_in, bench):
    assert signed_in.get(reverse("bench:bench", args=[99, bench.task.pk])).status_code == 404


@pytest.mark.parametrize("kind", ["compression", "leak_down", "bore"])
def test_every_kind_has_its_page_before_and_in_its_pass(client, make_bench, kind):
    bench = make_bench(kind=kind)
    client.force_login(bench.technician)
    assert heading(client.get(address(bench))) == "Before you begin"
    assert client.get(address(bench, "open")).status_code == 200
    bench.pass_of(gauge=None)
    first = {
        "compression": "Cylinder 1",
        "leak_down": "Turn the crank to TDC 1 firing",
        "bore": "Cylinder 1 top thrust",
    }
    assert heading(client.get(address(bench))) == first[kind]
    assert client.get(address(bench, "table")).status_code == 200


def test_what_follows_is_shown_live_when_all_is_measured(client, make_bench):
    bench = make_bench(kind="compression", ignition="spark")
    client.force_login(bench.technician)
    bench.pass_of(gauge=None, conditions={})
    for station, typed in zip("1234", ("12.0 bar", "12.0 bar", "12.0 bar", "9.0 bar"), strict=True):
        bench.read(station, typed)
    derived = {
        one["told"]["characteristic"]: one["told"]["value"] for one in client.get(address(bench)).context["derived"]
    }
    # assess.md: spread = (highest − lowest) / highest in % = (12 − 9) / 12
    assert derived["compression.spread"] == 25.0


def test_an_engine_of_unknown_order_is_done_cylinder_by_cylinder_and_says_why(client, make_bench):
    bench = make_bench(firing_order=None)
    client.force_login(bench.technician)
    bench.pass_of()
    text = client.get(address(bench)).content.decode()
    assert "Turn the crank to TDC 1 firing" in text
    assert "The firing order is not known, so there is no crank plan" in text


def test_a_witnessed_station_says_so_before_it_is_kept(signed_in, bench):
    at_first_stop(bench)
    bench.task.refresh_from_db()
    bench.task.witnessed_stations = ["1.intake"]
    bench.task.save(update_fields=["witnessed_stations"])
    assert "This reading is to be witnessed" in signed_in.get(address(bench)).content.decode()


def test_with_shims_acts_come_once_everything_is_found(client, make_bench):
    bench = at_first_stop(make_bench(adjustment="shim", screw_pitch_mm=None))
    client.force_login(bench.technician)
    for station in ("1.intake", "1.exhaust", "2.intake", "3.exhaust"):
        answer = post(client, bench, "read", **answer_to(station, "0.18" if station == "1.intake" else "0.40"
                                                         if "exhaust" in station else "0.30"))  # fmt: skip
    assert heading(answer) == "Turn the crank to TDC 4 firing"
    post(client, bench, "turn", to="TDC 4 firing")
    for station in ("2.exhaust", "3.intake", "4.intake", "4.exhaust"):
        answer = post(client, bench, "read", **answer_to(station, "0.40" if "exhaust" in station else "0.30"))
    assert heading(answer) == "Turn the crank to TDC 1 firing"
    text = post(client, bench, "turn", to="TDC 1 firing").content.decode()
    assert "Not within: fit another shim" in text


def test_a_pass_left_open_when_its_task_was_finished_elsewhere_can_still_be_closed(signed_in, bench):
    bench.read("1.intake", "0.30")
    finish_task(bench.task, by=bench.technician, at=bench.now)
    assert "Close the pass and keep what follows" in signed_in.get(address(bench)).content.decode()
    post(signed_in, bench, "finish", follow=False)
    assert Measurement.objects.filter(closed_at=None).count() == 0


def test_on_a_job_stopped_short_the_page_says_so_and_offers_no_field(signed_in, bench):
    at_first_stop(bench)
    order = bench.task.work_order
    order.refresh_from_db()
    stop_short(order, by=bench.technician, at=bench.now, reason="called away")
    text = signed_in.get(address(bench)).content.decode()
    assert "The job is “stopped short”: nothing is entered on it now." in text
    assert 'name="typed"' not in text


def test_a_station_left_as_it_was_found_still_stands_with_what_was_found(signed_in, bench):
    at_first_stop(bench)
    post(signed_in, bench, "read", **answer_to("1.intake", "0.18"))
    post(signed_in, bench, "read", **answer_to("1.intake", phase="as_left", not_measured="left as found"))
    work = signed_in.get(address(bench)).context["work"]
    assert work.judged["1.intake"].judgement["value"] == 0.18
