"""Keeping a reading: judged as it lands, once however often it is sent, repeats joined, nothing lost."""

from uuid import uuid4

import pytest

from logbook.bench.guards import NotAtThisStage, NotKept
from logbook.bench.models import Finding, Measurement, Reading
from logbook.bench.services import close_measurement, open_measurement, record_reading
from logbook.core.refusal import Refused
from logbook.work.models import WorkOrder
from logbook.work.services import stop_short
from tests.factories import NOW, make_person, make_shop


def test_a_reading_is_kept_as_typed_with_who_measured_and_who_keyed(bench):
    mate = make_person(bench.shop, "Second technician", "technician")
    reading = bench.read("1.intake", "0.30", measured_by=mate)
    assert (reading.typed, reading.measured_by, reading.keyed_by) == ("0.30", mate, bench.technician)


def test_a_reading_is_judged_as_it_lands_and_the_finding_says_by_which_sheet(bench):
    finding = bench.read("1.intake", "0.18").finding
    assert (finding.verdict, finding.characteristic, finding.station) == ("beyond", "valve_lash.intake", "1.intake")
    assert finding.judgement["value"] == 0.18
    assert finding.limit_sheet == bench.engine.limit_sheets.get()


def test_a_finding_brings_the_act_it_calls_for(bench):
    (act,) = bench.read("1.intake", "0.18").finding.judgement["acts"]
    # 0.30 − 0.18 = 0.12 mm on a pitch of 1 mm: 0.12 turn (measuring.md 7: turns = change / pitch)
    assert (act["act"], act["turns"], act["direction"]) == ("turn_screw", 0.12, "loosen")


def test_a_double_tap_is_one_reading(bench):
    once = uuid4()
    first = bench.read("1.intake", "0.30", client_id=once)
    second = bench.read("1.intake", "0.30", client_id=once)
    assert (first, Reading.objects.count(), Finding.objects.count()) == (second, 1, 1)


def test_a_form_sent_again_with_another_value_is_refused_rather_than_lost(bench):
    once = uuid4()
    bench.read("1.intake", "0.30", client_id=once)
    with pytest.raises(NotKept, match="This form was kept already as “0.30” at Cylinder 1 intake"):
        bench.read("1.intake", "0.31", client_id=once)


def test_another_persons_form_is_refused(bench):
    once = uuid4()
    bench.read("1.intake", "0.30", client_id=once)
    mate = make_person(bench.shop, "Second technician", "technician")
    with pytest.raises(NotKept, match="used already by somebody else"):
        bench.read("1.intake", "0.30", client_id=once, by=mate)


def test_another_shops_form_is_refused(bench, make_bench):
    once = uuid4()
    bench.read("1.intake", "0.30", client_id=once)
    with pytest.raises(NotKept, match="used already by somebody else"):
        make_bench("Alder Bay workshop").read("1.intake", "0.30", client_id=once)


def test_two_tablets_at_the_same_station_give_two_repeats_of_one_reading(bench):
    mate = make_person(bench.shop, "Second technician", "technician")
    bench.read("1.intake", "0.30")
    second = bench.read("1.intake", "0.32", by=mate)
    assert second.finding.judgement["as_typed"] == "0.30; 0.32"
    assert second.finding.judgement["value"] == 0.31


def test_the_last_finding_of_a_station_stands_for_its_repeats(bench):
    bench.read("1.intake", "0.30")
    second = bench.read("1.intake", "0.32")
    assert list(Finding.objects.standing()) == [second.finding]


def test_not_measured_is_an_answer_with_its_reason(bench):
    reading = bench.read("2.intake", not_measured="screw seized")
    assert (reading.typed, reading.not_measured, reading.finding.verdict) == ("", "screw seized", "no_limit")


def test_a_value_after_not_measured_takes_its_place(bench):
    bench.read("2.intake", not_measured="no access")
    reading = bench.read("2.intake", "0.30")
    assert (reading.supersedes.not_measured, reading.reason) == ("no access", "answered again")
    assert reading.finding.verdict == "within"


def test_not_measured_beside_a_value_is_refused(bench):
    bench.read("2.intake", "0.30")
    with pytest.raises(NotKept, match="Cylinder 2 intake has a reading; strike it"):
        bench.read("2.intake", not_measured="no access")


def test_neither_a_value_nor_a_reason_is_refused(bench):
    with pytest.raises(NotKept, match="A reading is a value, or a reason"):
        bench.read("2.intake")


@pytest.mark.parametrize(
    ("typed", "sentence"),
    [
        ("0.3O", "“0.3O”"),
        ("1 psi", "Read “psi”, a unit of pressure"),
        ("-0.30", "can't have a sign here"),
        ("nothing", "Read “nothing”"),
    ],
)
def test_a_refusal_says_what_was_read_and_keeps_nothing(bench, typed, sentence):
    with pytest.raises(NotKept, match=sentence):
        bench.read("1.intake", typed)
    assert Reading.objects.count() == 0


def test_a_station_the_engine_has_not_is_refused_with_its_sentence(bench):
    with pytest.raises(NotKept, match="names cylinder 9; this engine has cylinders 1 to 4"):
        bench.read("9.intake", "0.30")


def test_a_station_is_kept_under_its_one_name(bench):
    assert bench.read(" 1.Intake.1", "0.30").station == "1.intake"


@pytest.mark.parametrize("role", ["witness", "toolroom", "supervisor"])
def test_only_a_technician_keys(bench, role):
    other = make_person(bench.shop, f"Only {role}", role)
    with pytest.raises(Refused, match=f"Only {role} can't do that"):
        bench.read("1.intake", "0.30", by=other)


def test_a_technician_of_another_shop_keys_nothing_here(bench):
    stranger = make_person(make_shop("Alder Bay workshop"), "Stranger", "technician")
    with pytest.raises(Refused, match="has no say in this shop"):
        bench.read("1.intake", "0.30", by=stranger)


def test_opening_a_pass_starts_its_task_and_brings_the_job_to_the_bench(bench):
    bench.pass_of()
    bench.task.refresh_from_db()
    assert bench.task.started_at == NOW
    assert WorkOrder.objects.get().state == "at_the_bench"


def test_a_pass_isnt_opened_without_the_locks_its_task_asks_for(bench):
    mate = make_person(bench.shop, "Second technician", "technician")
    with pytest.raises(Refused, match="your lock is missing on"):
        open_measurement(bench.task, by=mate, at=NOW, phase="as_found")
    assert Measurement.objects.count() == 0


def test_conditions_that_cant_be_read_are_refused_when_the_pass_is_opened(bench):
    with pytest.raises(NotKept, match="lukewarm"):
        bench.pass_of(conditions={"state": "lukewarm"})
    assert Measurement.objects.count() == 0


def test_wet_compression_of_a_compression_ignition_engine_is_refused_when_the_pass_is_opened(make_bench):
    with pytest.raises(NotKept, match="spark"):
        make_bench(kind="compression").pass_of(conditions={"wet": True}, gauge=None)


def test_nothing_is_kept_on_a_job_that_was_stopped_short(bench):
    bench.pass_of()
    bench.task.work_order.refresh_from_db()
    stop_short(bench.task.work_order, by=bench.technician, at=NOW, reason="called to the ferry")
    with pytest.raises(NotAtThisStage, match="is “stopped short”, not at the bench"):
        bench.read("1.intake", "0.30")


def test_nothing_is_kept_in_a_closed_pass(bench):
    bench.read("1.intake", "0.30")
    close_measurement(bench.pass_of(), by=bench.technician, at=bench.now)
    with pytest.raises(NotAtThisStage, match="This pass is closed"):
        bench.read("1.exhaust", "0.40")


def test_closing_a_pass_keeps_its_derived_values_once(bench):
    bench.read("1.intake", "0.30")
    bench.read("1.intake", "0.30", phase="as_left")
    later = bench.next_visit()
    later.read("1.intake", "0.33")
    closed = close_measurement(later.pass_of(), by=bench.technician, at=later.now)
    (change,) = closed.derived
    assert (change["characteristic"], change["station"], change["value"]) == ("valve_lash.change", "1.intake", 0.03)
    again = close_measurement(later.pass_of(), by=bench.technician, at=NOW)
    assert again.closed_at == closed.closed_at


def test_a_reading_is_judged_by_the_sheet_in_force_when_it_was_taken(bench):
    sheet = bench.engine.limit_sheets.get()
    newer = type(sheet).objects.create(
        shop=bench.shop, engine=bench.engine, version=2, entered_by=bench.supervisor, entered_at=NOW,
        nobody_compared="alone", in_force_at=NOW.replace(year=2027),
    )  # fmt: skip
    assert newer.version == 2
    assert bench.read("1.intake", "0.30").finding.limit_sheet == sheet


def test_an_answer_that_cant_be_judged_says_why(make_bench):
    bench = make_bench(kind="compression")
    bench.pass_of(gauge=None, conditions={})
    with pytest.raises(NotKept, match="absolute pressure can't be judged without the barometer"):
        bench.read("1", "25 bar abs")


def test_the_measurement_of_a_loose_part_needs_no_engine(bench):
    from logbook.engines.models import Part
    from logbook.work.services import open_work_order

    liner = Part.objects.create(shop=bench.shop, kind="liner", mark="L-7", created_at=NOW)
    order = open_work_order(by=bench.supervisor, at=NOW, part=liner, title="Liner from stock", kinds=["bore"])
    task = order.tasks.get()
    opened = open_measurement(task, by=bench.technician, at=NOW, phase="as_found")
    reading = record_reading(
        opened, by=bench.technician, at=NOW, client_id=uuid4(), station="1.top.thrust", typed="96.03"
    )
    assert (reading.finding.verdict, reading.finding.judgement["value"]) == ("no_limit", 96.03)
