"""Signatures: by password, bound to what was shown, in a role that is one's own; and what the deciding one does."""

from datetime import timedelta

import pytest

from logbook.engines.models import Engine
from logbook.paper.services import fingerprint
from logbook.people.models import Person
from logbook.review.models import RunningUndecided, Signature
from logbook.review.services import (
    Frozen,
    NotDecided,
    NotSigned,
    decide,
    end_running_undecided,
    is_frozen,
    running_undecided,
    sign,
)
from logbook.review.sheets import job_sheet
from logbook.work.models import ClosingItem, Done, Interval, WorkOrder
from tests.factories import NOW, PASSWORD, make_person

LATER = NOW + timedelta(hours=1)


def give_password(person):
    person.set_password(PASSWORD)
    person.save()
    return person


def signed(order, by, role, **more):
    told = {"password": PASSWORD, "shown_sha256": fingerprint(job_sheet(order)), "at": LATER, **more}
    return sign(order, by=by, role=role, **told)


@pytest.fixture
def finding(bench):
    """Found beyond, left within, put right."""
    finding = bench.beyond(left="0.41 mm")
    decide(finding, by=bench.decides, at=LATER, choice="put_right")
    return finding


@pytest.fixture
def order(finding):
    return finding.measurement.task.work_order


def test_a_signature_holds_exactly_what_was_shown(bench, order):
    shown = job_sheet(order)
    kept = signed(order, give_password(bench.measures), "measured")
    assert (kept.shown, kept.shown_sha256) == (shown, fingerprint(shown))
    assert fingerprint(Signature.objects.get().shown) == kept.shown_sha256


def test_a_wrong_password_signs_nothing(bench, order):
    with pytest.raises(NotSigned, match="^That is not the password of Supervisor 1: nothing was signed.$"):
        signed(order, bench.decides, "decided", password="a feeler of 0.19")
    assert not Signature.objects.exists()


def test_a_sheet_that_changed_meanwhile_is_refused(bench, order, finding):
    shown = fingerprint(job_sheet(order))
    bench.read(finding.measurement, "1.intake", "0.30 mm")
    with pytest.raises(NotSigned, match="^The sheet changed meanwhile: look at it again, then sign.$"):
        signed(order, bench.decides, "decided", shown_sha256=shown)
    order.refresh_from_db()
    assert order.state == "to_decide"


def test_another_name_under_the_sheet_changes_it_too(bench, order):
    shown = fingerprint(job_sheet(order))
    signed(order, give_password(bench.measures), "measured")
    with pytest.raises(NotSigned, match="changed meanwhile"):
        signed(order, bench.decides, "decided", shown_sha256=shown)


@pytest.mark.parametrize("who", ["measures", "keys"])
def test_who_measured_or_keyed_signs_as_having_measured(bench, order, who):
    assert signed(order, give_password(getattr(bench, who)), "measured").role == "measured"


def test_somebody_else_does_not_sign_as_having_measured(bench, order):
    with pytest.raises(
        NotSigned, match="You neither measured nor keyed on this job; Technician 3 and Technician 5 did"
    ):
        signed(order, bench.decides, "measured")


def test_a_technician_does_not_sign_what_was_decided(bench, order):
    with pytest.raises(NotSigned, match="Only a supervisor signs what was decided; Supervisor 1 or Supervisor 2 can"):
        signed(order, give_password(bench.measures), "decided")


def test_a_supervisor_who_measured_anything_on_the_job_does_not_sign_its_decisions(bench, order, finding):
    bench.read(finding.measurement, "1.intake", "0.30 mm", by=bench.decides)
    with pytest.raises(NotSigned) as refused:
        signed(order, bench.decides, "decided")
    assert str(refused.value) == "You measured or keyed on this job, so you can't sign its decisions; Supervisor 2 can."


def test_in_a_shop_of_one_the_signature_says_that_nobody_else_checked(bench):
    Person.objects.exclude(pk=bench.decides.pk).update(is_active=False)
    finding = bench.read(bench.open_pass(bench.job()), "3.exhaust", "0.33 mm", by=bench.decides)
    decide(finding, by=bench.decides, at=LATER, choice="keep_stopped")
    order = finding.measurement.task.work_order
    kept = signed(order, bench.decides, "decided")
    assert kept.not_checked_by_second
    sheet = job_sheet(order)
    assert sheet["notes"] == ["Not checked by a second person."]
    assert [one["note"] for one in sheet["signatures"]] == ["not checked by a second person"]


def test_two_persons_make_a_sheet_that_says_nothing_of_the_kind(bench, order):
    assert not signed(order, bench.decides, "decided").not_checked_by_second
    assert job_sheet(order)["notes"] == []


def test_the_deciding_signature_waits_for_every_decision(bench):
    order = bench.beyond(left="0.41 mm").measurement.task.work_order
    with pytest.raises(NotSigned, match="^Still to decide: Cylinder 3 exhaust.$"):
        signed(order, bench.decides, "decided")


def test_the_deciding_signature_waits_for_what_is_to_be_measured_again(bench):
    finding = bench.beyond()
    decide(finding, by=bench.decides, at=LATER, choice="measure_again")
    with pytest.raises(NotSigned, match="^To be measured again: Cylinder 3 exhaust. Send the job back to the bench"):
        signed(finding.measurement.task.work_order, bench.decides, "decided")


def test_the_deciding_signature_waits_for_what_is_open(bench, order):
    item = ClosingItem.objects.create(
        shop=bench.shop, work_order=order, what="covers off", since_at=NOW, opened_by=bench.keys
    )
    with pytest.raises(Exception, match="Still open: covers off") as refused:
        signed(order, bench.decides, "decided")
    assert "Refused" in [kind.__name__ for kind in type(refused.value).__mro__]
    item.explanation, item.explained_by, item.explained_at = "the gasket comes tomorrow", bench.keys, NOW
    item.save()
    signed(order, bench.decides, "decided")
    assert job_sheet(order)["open"] == ["covers off: the gasket comes tomorrow"]


@pytest.mark.parametrize("state", ["at_the_bench", "stopped_short"])
def test_the_deciding_signature_waits_until_measuring_is_finished(bench, order, state):
    order.state = state
    order.save()
    with pytest.raises(NotSigned, match="it is signed once measuring is finished"):
        signed(order, bench.decides, "decided")


def test_the_deciding_signature_closes_the_job(bench, order):
    signed(order, bench.decides, "decided")
    order.refresh_from_db()
    assert order.state == WorkOrder.State.SIGNED
    assert is_frozen(order)
    move = order.moves.get()
    assert (move.from_state, move.to_state, move.moved_by, move.moved_at) == (
        "to_decide",
        "signed",
        bench.decides,
        LATER,
    )


def test_the_deciding_signature_moves_what_is_due_next(bench, order):
    interval = Interval.objects.create(shop=bench.shop, engine=bench.engine, title="valve lash", every_hours=500)
    order.intervals.add(interval)
    signed(order, bench.decides, "decided")
    done = Done.objects.get()
    assert (done.interval, done.work_order, done.totals, done.done_at) == (
        interval,
        order,
        {"h": 4210.0},
        order.finished_at,
    )


def test_the_deciding_signature_ends_running_undecided(bench, order):
    running_undecided(order, by=bench.measures, at=NOW, on_whose_word="the harbour master")
    signed(order, bench.decides, "decided")
    assert RunningUndecided.objects.get().ended_at == LATER
    assert job_sheet(order)["notes"] == ["Runs undecided since 2026-05-02 09:30, on the word of the harbour master."]


def test_nobody_signs_under_a_signed_sheet(bench, order):
    signed(order, bench.decides, "decided")
    with pytest.raises(Frozen, match="is “signed”: no further name goes under its sheet"):
        signed(order, give_password(bench.measures), "measured")


def test_a_signed_sheet_stays_as_it_was_signed(bench, order, finding):
    kept = signed(order, bench.decides, "decided")
    before = job_sheet(order)
    Engine.objects.update(name="Renamed")
    assert job_sheet(order) == before
    assert {**before, "signatures": []} == {**kept.shown, "signatures": []}


def test_a_name_put_under_the_sheet_before_later_readings_says_so(bench, order, finding):
    signed(order, give_password(bench.measures), "measured")
    assert [one["note"] for one in job_sheet(order)["signatures"]] == [""]
    bench.read(finding.measurement, "1.intake", "0.30 mm")
    assert [one["note"] for one in job_sheet(order)["signatures"]] == ["signed before later readings"]


def test_nobody_signs_twice_in_one_role(bench, order):
    signed(order, give_password(bench.measures), "measured")
    with pytest.raises(NotSigned, match="You have signed this sheet in this role already"):
        signed(order, bench.measures, "measured")


def test_a_witness_signs_for_the_readings_named(bench, order, finding):
    finding.measurement.task.witnessed_stations = ["3.exhaust", "1.intake"]
    finding.measurement.task.save()
    kept = signed(order, bench.witness, "witnessed", stations=["3.exhaust"])
    assert kept.stations == ["3.exhaust"]
    sheet = job_sheet(order)
    assert sheet["signatures"][0]["note"] == "Cylinder 3 exhaust"
    assert "witnessed by Surveyor 1" in sheet["passes"][0]["rows"][0]["notes"]


@pytest.mark.parametrize(
    ("stations", "told"),
    [([], "Name the readings you witnessed: 3.exhaust."), (["4.intake"], "4.intake isn't among the readings")],
)
def test_a_witness_names_readings_that_are_to_be_witnessed(bench, order, finding, stations, told):
    finding.measurement.task.witnessed_stations = ["3.exhaust"]
    finding.measurement.task.save()
    with pytest.raises(NotSigned, match=told):
        signed(order, bench.witness, "witnessed", stations=stations)


def test_a_witness_signs_nothing_where_nothing_is_to_be_witnessed(bench, order):
    with pytest.raises(NotSigned, match="No reading of this job is named to be witnessed"):
        signed(order, bench.witness, "witnessed", stations=["3.exhaust"])


def test_only_a_witness_witnesses(bench, order):
    with pytest.raises(NotSigned, match="Only a witness signs as one"):
        signed(order, bench.decides, "witnessed", stations=["3.exhaust"])


def test_somebody_of_another_shop_signs_nothing(bench, order):
    from tests.factories import make_shop

    stranger = make_person(make_shop("Elsewhere"), "Supervisor 9", "supervisor", password=PASSWORD)
    with pytest.raises(NotDecided, match="has no say in this shop"):
        signed(order, stranger, "decided")


def test_an_engine_runs_undecided_on_somebodys_word_once_at_a_time(bench):
    order = bench.beyond().measurement.task.work_order
    run = running_undecided(order, by=bench.measures, at=NOW, on_whose_word="the harbour master")
    assert (run.since_at, run.on_whose_word, run.recorded_by) == (NOW, "the harbour master", bench.measures)
    with pytest.raises(
        NotDecided, match="running undecided already, since 2026-05-02 09:30 UTC, on the word of the harbour"
    ):
        running_undecided(order, by=bench.decides, at=LATER, on_whose_word="me")
    assert end_running_undecided(order, by=bench.measures, at=LATER).ended_at == LATER
    with pytest.raises(NotDecided, match="has no engine running undecided"):
        end_running_undecided(order, by=bench.measures, at=LATER)


def test_running_undecided_names_on_whose_word(bench):
    with pytest.raises(NotDecided, match="Say on whose word"):
        running_undecided(bench.job().work_order, by=bench.measures, at=NOW, on_whose_word=" ")


def test_a_signed_job_has_no_engine_running_undecided(bench):
    with pytest.raises(Frozen, match="its engine doesn't run undecided"):
        running_undecided(bench.job(state="signed").work_order, by=bench.measures, at=NOW, on_whose_word="me")


def test_a_witness_puts_no_engine_back(bench):
    with pytest.raises(NotDecided, match="a technician or supervisor can"):
        running_undecided(bench.job().work_order, by=bench.witness, at=NOW, on_whose_word="me")
