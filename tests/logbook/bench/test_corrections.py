"""Corrections are new rows with a reason; acts close what was found; a struck reading stays on the sheet."""

from uuid import uuid4

import pytest

from logbook.bench.guards import NotAtThisStage, NotKept
from logbook.bench.models import Act, Finding, Reading
from logbook.bench.services import move_reading, strike_reading
from logbook.work.models import ClosingItem
from tests.factories import make_person


def strike(bench, reading, reason="leaf was oily"):
    return strike_reading(reading, by=bench.technician, at=bench.now, client_id=uuid4(), reason=reason)


def open_items():
    return set(ClosingItem.objects.filter(closed_at=None).values_list("what", flat=True))


def test_a_correction_supersedes_one_reading_and_is_judged_alone(bench):
    wrong = bench.read("1.intake", "0.81", slip_answer="as typed")
    right = bench.read("1.intake", "0.18", supersedes=wrong, reason="digits swapped")
    assert (right.finding.judgement["as_typed"], right.reason) == ("0.18", "digits swapped")
    assert list(Reading.objects.standing()) == [right]
    assert Reading.objects.count() == 2


def test_a_correction_without_a_reason_is_refused(bench):
    wrong = bench.read("1.intake", "0.31")
    with pytest.raises(NotKept, match="Say why the earlier reading is struck or replaced"):
        bench.read("1.intake", "0.30", supersedes=wrong)


def test_what_was_corrected_once_cant_be_corrected_again(bench):
    wrong = bench.read("1.intake", "0.31")
    bench.read("1.intake", "0.30", supersedes=wrong, reason="misheard")
    with pytest.raises(NotKept, match="replaced or struck already"):
        bench.read("1.intake", "0.29", supersedes=wrong, reason="misheard again")


def test_a_struck_reading_stays_with_its_reason_and_no_finding_stands_there(bench):
    spoilt = bench.read("1.intake", "0.31")
    row = strike(bench, spoilt)
    assert (row.supersedes, row.is_strike, row.reason) == (spoilt, True, "leaf was oily")
    assert list(Finding.objects.standing()) == []


def test_striking_one_of_two_repeats_judges_the_other_anew(bench):
    bench.read("1.intake", "0.30")
    spoilt = bench.read("1.intake", "0.33")
    row = strike(bench, spoilt)
    assert row.finding.judgement["as_typed"] == "0.30"
    assert list(Finding.objects.standing()) == [row.finding]


def test_a_strike_tapped_twice_is_one_strike(bench):
    spoilt, once = bench.read("1.intake", "0.31"), uuid4()
    rows = [strike_reading(spoilt, by=bench.technician, at=bench.now, client_id=once, reason="oily") for _ in range(2)]
    assert rows[0] == rows[1]
    assert Reading.objects.count() == 2


def test_a_strike_needs_its_reason(bench):
    spoilt = bench.read("1.intake", "0.31")
    with pytest.raises(NotKept, match="Say why"):
        strike(bench, spoilt, reason=" ")


def test_a_reading_moved_is_struck_here_and_kept_there_by_the_same_hands(bench):
    mate = make_person(bench.shop, "Second technician", "technician")
    wrong = bench.read("1.intake", "0.31", measured_by=mate)
    moved = move_reading(
        wrong, by=bench.technician, at=bench.now, client_id=uuid4(), station="2.intake", reason="wrong cylinder"
    )
    assert (moved.station, moved.typed, moved.measured_by, moved.taken_at) == ("2.intake", "0.31", mate, wrong.taken_at)
    assert [one.station for one in Reading.objects.standing()] == ["2.intake"]


def test_a_move_that_is_refused_there_strikes_nothing_here(bench):
    reading = bench.read("1.intake", "0.31")
    with pytest.raises(NotKept, match="names cylinder 9"):
        move_reading(reading, by=bench.technician, at=bench.now, client_id=uuid4(), station="9.intake", reason="there")
    assert list(Reading.objects.standing()) == [reading]


def test_an_act_comes_after_what_was_found(bench):
    bench.read("1.exhaust", "0.30")
    with pytest.raises(NotAtThisStage, match="Keep first what was found at Cylinder 1 intake"):
        bench.act("1.intake")
    assert Act.objects.count() == 0


def test_an_act_before_any_pass_is_refused(bench):
    with pytest.raises(NotAtThisStage, match="Nothing was measured as found yet"):
        bench.act("1.intake")


def test_the_first_act_at_a_station_closes_what_was_found_there_and_only_there(bench):
    bench.read("1.intake", "0.18")
    bench.act("1.intake")
    with pytest.raises(NotAtThisStage, match="What was found at Cylinder 1 intake is closed"):
        bench.read("1.intake", "0.20")
    assert bench.read("1.exhaust", "0.40").pk


def test_a_keying_error_in_what_was_found_can_be_corrected_after_the_act_but_not_struck(bench):
    found = bench.read("1.intake", "0.18")
    bench.act("1.intake")
    with pytest.raises(NotAtThisStage, match="Correct the entry instead"):
        strike(bench, found)
    assert bench.read("1.intake", "0.19", supersedes=found, reason="misread").finding.judgement["value"] == 0.19


def test_an_as_left_needs_an_as_found(bench):
    with pytest.raises(NotAtThisStage, match="Keep first what was found at Cylinder 1 intake"):
        bench.read("1.intake", "0.30", phase="as_left")


def test_an_as_left_closes_what_was_found_even_without_an_act(bench):
    bench.read("1.intake", "0.30")
    bench.read("1.intake", "0.30", phase="as_left")
    with pytest.raises(NotAtThisStage, match="is closed"):
        bench.read("1.intake", "0.31")


def test_as_left_is_judged_against_the_setting_zone(bench):
    bench.read("1.intake", "0.18")
    bench.act("1.intake")
    judgement = bench.read("1.intake", "0.33", phase="as_left").finding.judgement
    assert (judgement["lower"], judgement["upper"], judgement["verdict"]) == (0.28, 0.32, "beyond")


def test_a_second_act_strikes_what_was_left_before_it(bench):
    bench.read("1.intake", "0.18")
    bench.act("1.intake")
    bench.read("1.intake", "0.33", phase="as_left")
    bench.act("1.intake", "screw tightened 0.03 turn")
    left = bench.read("1.intake", "0.30", phase="as_left")
    assert left.finding.judgement["as_typed"] == "0.30"
    assert Reading.objects.get(is_strike=True).reason == "set again: screw tightened 0.03 turn"


def test_an_act_tapped_twice_is_one_act(bench):
    bench.read("1.intake", "0.18")
    once = uuid4()
    assert bench.act("1.intake", client_id=once) == bench.act("1.intake", client_id=once)
    assert Act.objects.count() == 1


def test_an_act_says_what_was_done(bench):
    bench.read("1.intake", "0.18")
    with pytest.raises(NotKept, match="Write in a few words what was done at Cylinder 1 intake"):
        bench.act("1.intake", what="  ")


def test_with_shims_every_as_found_comes_before_any_act(make_bench):
    bench = make_bench(adjustment="shim", screw_pitch_mm=None)
    stations = [f"{cylinder}.{side}" for cylinder in (1, 2, 3, 4) for side in ("intake", "exhaust")]
    for station in stations[:-1]:
        bench.read(station, "0.30" if "intake" in station else "0.40")
    with pytest.raises(
        NotAtThisStage, match="With shims every as-found comes first: still to be measured are Cylinder 4 exhaust"
    ):
        bench.act("1.intake", "2.70 mm shim for 2.65 mm")
    bench.read(stations[-1], not_measured="bucket stuck")
    assert bench.act("1.intake", "2.70 mm shim for 2.65 mm").pk


def test_a_pass_puts_what_it_opens_on_the_closing_up_list(bench):
    bench.pass_of()
    assert open_items() == {"covers off", "bar on the crank", "feeler leaves out"}


def test_a_locknut_is_loose_from_the_act_until_it_is_measured_as_left(bench):
    bench.read("1.intake", "0.18")
    bench.act("1.intake")
    assert "locknut loose: Cylinder 1 intake" in open_items()
    bench.read("1.intake", "0.30", phase="as_left")
    assert "locknut loose: Cylinder 1 intake" not in open_items()


def test_a_locknut_stays_on_the_list_when_nothing_was_measured_as_left(bench):
    bench.read("1.intake", "0.18")
    bench.act("1.intake")
    bench.read("1.intake", phase="as_left", not_measured="called away")
    assert "locknut loose: Cylinder 1 intake" in open_items()


def test_an_engine_under_air_puts_air_line_and_crank_hold_on_the_list(make_bench):
    make_bench(kind="leak_down").pass_of(gauge=None)
    assert {"air line on", "crank held", "adapter in a cylinder"} <= open_items()
