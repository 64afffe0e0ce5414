"""The order of the hands: stop by stop, found, act, left, then turn; with shims every as-found first."""

from dataclasses import replace

import pytest

from logbook.bench.judging import kinds
from logbook.bench.steps import FOUND, LEFT, OVER, TURN, Progress, Step, next_step, order_numbers, route
from measurements.engine import Engine

FOUR = Engine("inline", 4, (1, 3, 4, 2), adjustment="screw", screw_pitch=1.0)
LASH = kinds()["valve_lash"]


def walk(way, progress, answers, *, all_found_first=False):
    """Do every step as a technician would; `answers` are the stations whose as-found calls for an act."""
    told = []
    while (step := next_step(way, progress, all_found_first=all_found_first)).what != OVER:
        told.append(f"{step.what} {step.station or step.stop.mark}")
        if step.what == TURN:
            progress = replace(progress, crank_at=step.stop.mark)
        elif step.what == FOUND:
            calls = {step.station} & set(answers)
            progress = replace(progress, found=progress.found | {step.station}, calls=progress.calls | calls)
        elif step.what == "act":
            progress = replace(progress, acted=progress.acted | {step.station})
        else:
            progress = replace(progress, left=progress.left | {step.station})
        assert len(told) < 100
    return told


def test_an_even_firing_four_is_done_at_two_stops_with_one_turn_between():
    # TM 5-3805-258-24-1 prints these two stops of a four that fires 1-3-4-2
    assert walk(route(LASH, FOUR), Progress(), []) == [
        "turn TDC 1 firing", "found 1.intake", "found 1.exhaust", "found 2.intake", "found 3.exhaust",
        "turn TDC 4 firing", "found 2.exhaust", "found 3.intake", "found 4.intake", "found 4.exhaust",
    ]  # fmt: skip


def test_at_each_stop_everything_is_found_before_the_first_act_and_left_before_the_turn():
    assert walk(route(LASH, FOUR), Progress(), ["1.intake", "3.exhaust"])[:10] == [
        "turn TDC 1 firing", "found 1.intake", "found 1.exhaust", "found 2.intake", "found 3.exhaust",
        "act 1.intake", "left 1.intake", "act 3.exhaust", "left 3.exhaust", "turn TDC 4 firing",
    ]  # fmt: skip


def test_with_shims_the_stops_are_gone_round_again_for_acts_once_all_is_found():
    told = walk(route(LASH, FOUR), Progress(), ["1.intake", "4.exhaust"], all_found_first=True)
    assert told[10:] == [  # the crank stands at TDC 4 firing, so that stop's act comes first
        "act 4.exhaust", "left 4.exhaust", "turn TDC 1 firing", "act 1.intake", "left 1.intake",
    ]  # fmt: skip


def test_work_starts_at_the_stop_where_the_crank_stands():
    step = next_step(route(LASH, FOUR), Progress(crank_at="TDC 4 firing"))
    assert (step.what, step.station) == (FOUND, "2.exhaust")


def test_something_done_without_being_called_for_is_measured_as_left():
    everything = frozenset(route(LASH, FOUR).stations)
    step = next_step(
        route(LASH, FOUR), Progress(found=everything, acted=frozenset(["2.intake"]), crank_at="TDC 1 firing")
    )
    assert (step.what, step.station) == (LEFT, "2.intake")


def test_a_station_left_as_found_with_its_reason_is_over():
    way = route(LASH, FOUR)
    everything = frozenset(way.stations)
    progress = Progress(found=everything, calls=frozenset(["1.intake"]), left=frozenset(["1.intake"]))
    assert next_step(way, progress) == Step(OVER)


def test_without_a_firing_order_lash_goes_cylinder_by_cylinder_and_says_why():
    way = route(LASH, Engine("inline", 3))
    assert [(stop.mark, stop.stations) for stop in way.stops] == [
        ("TDC 1 firing", ("1.intake", "1.exhaust")),
        ("TDC 2 firing", ("2.intake", "2.exhaust")),
        ("TDC 3 firing", ("3.intake", "3.exhaust")),
    ]
    assert way.note.startswith("The firing order is not known, so there is no crank plan")


def test_under_air_each_cylinder_stands_at_its_own_firing_dead_centre_in_firing_order():
    way = route(kinds()["leak_down"], FOUR)
    assert [(stop.mark, stop.crank_angle) for stop in way.stops] == [
        ("TDC 1 firing", 0), ("TDC 3 firing", 180), ("TDC 4 firing", 360), ("TDC 2 firing", 540),
    ]  # fmt: skip


@pytest.mark.parametrize("kind", ["compression", "bore"])
def test_a_kind_that_needs_no_crank_position_is_never_told_to_turn(kind):
    told = walk(route(kinds()[kind], FOUR), Progress(), [])
    assert told == [f"found {station}" for station in kinds()[kind].stations(FOUR)]


def test_as_left_of_everything_when_a_whole_pass_is_asked_for():
    way = route(kinds()["compression"], FOUR)
    told = walk(way, Progress(found=frozenset(way.stations), leaves_all=True), [])
    assert told == ["left 1", "left 2", "left 3", "left 4"]


def test_every_station_carries_its_number_in_the_order_of_the_hands():
    # measured at TDC 1 firing: both of 1, intake of 2, exhaust of 3
    numbers = order_numbers(route(LASH, FOUR))
    assert [numbers[one] for one in ("1.intake", "1.exhaust", "2.intake", "3.exhaust", "2.exhaust")] == [1, 2, 3, 4, 5]


def test_a_valve_without_a_safe_stop_goes_at_its_own_firing_dead_centre_and_says_so():
    from measurements.engine import ValveEvents

    way = route(LASH, Engine("inline", 4, (1, 3, 4, 2), events=ValveEvents(179, 179, 179, 179), margin=95))
    assert {stop.mark for stop in way.stops} == {f"TDC {number} firing" for number in (1, 2, 3, 4)}
    assert "has no safe stop" in way.note
