"""Crank plans: published charts, and an exhaustive search that knows nothing of ours."""

from itertools import combinations
from random import Random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from measurements.barring import COMMON_EVENTS, Arc, base_circle, fewest_stops, plan
from measurements.engine import Engine, ValveEvents
from measurements.published import barring as published
from measurements.published.barring import EIGHT, EIGHT_CHART, FOUR, PUBLISHED, SIX, chart, out_of_reach, stops_of
from measurements.sentence import Refusal


def overlap_chart():
    """What the chart of a single would be at its overlap TDC."""
    return "TDC 1 overlap: intake 1, exhaust 1"


WRONG = {  # the wrong plan each published value names
    "stops of 1-3-4-2": lambda: chart(stops_of(FOUR[::-1])),
    "stops of 1-5-3-6-2-4": lambda: chart(stops_of(SIX[::-1])),
    "stops of 1-2-3, even": lambda: chart(stops_of((1, 3, 2))),
    "V8 1-8-4-3-6-5-7-2: valves of the printed chart out of our reach":
        lambda: out_of_reach(EIGHT[::-1], EIGHT_CHART),
    "crank turn between the stops of an even V8 [deg]": lambda: str(
        round([stop.angle for stop in fewest_stops(arcs_of(Engine("vee", 8, EIGHT)), tdcs(8))][1])),
    "a single: where both valves are set": overlap_chart,
}  # fmt: skip


def arcs_of(engine):
    """Base circles of all valves, by station, without any word of the plan."""
    events = engine.events or COMMON_EVENTS
    return {
        f"{cylinder}.{side}": base_circle(events, side, engine.margin).turned(engine.firing_angle(cylinder))
        for cylinder in engine.firing_order
        for side in ("intake", "exhaust")
    }


def tdcs(cylinders):
    """Dead centres of an even engine."""
    return {(place * 720 / cylinders + turn) % 720: place for place in range(cylinders) for turn in (0, 360)}


@pytest.mark.parametrize("value", PUBLISHED, ids=lambda value: value.what)
def test_published_plan_is_reproduced_and_its_wrong_one_is_caught(value):
    wrong = WRONG[value.what]()

    assert value.agrees(), (value.source, value.computed())
    assert wrong != value.printed


# --- an exhaustive search over all whole degrees, written from the valve's side


def is_lifting(cycle_angle, opens, shuts, margin):
    """Whether a valve is, or within less than the margin will be or was, off its base circle."""
    return any(opens - margin < cycle_angle + lap < shuts + margin for lap in (-1440, -720, 0, 720, 1440))


def reach_by_degree(engine):
    """For each whole crank degree, the stations on their base circles, as bits; and the bits of all."""
    events, reach = engine.events, [0] * 720
    angles = engine.firing_angles or [k * 720 // engine.cylinders for k in range(engine.cylinders)]
    names = []
    for cylinder, fires in sorted(zip(engine.firing_order, angles, strict=True)):
        spans = {
            "intake": (360 - events.intake_opens_btdc, 540 + events.intake_closes_abdc),
            "exhaust": (180 - events.exhaust_opens_bbdc, 360 + events.exhaust_closes_atdc),
        }
        for side, (opens, shuts) in spans.items():
            bit = 1 << len(names)
            free = [angle for angle in range(720) if not is_lifting(angle - fires, opens, shuts, engine.margin)]
            if free:
                names.append(f"{cylinder}.{side}")
                for angle in free:
                    reach[angle] |= bit
    return reach, names


def best_by_trying_all(reach, everything, marks, favoured):
    """Every set of degrees, smallest first: most on marks, most on favoured marks, then the smallest angles."""
    kinds = {}  # of angles alike in reach and in being a mark, the earliest is never worse
    for angle in range(720):
        kinds.setdefault((reach[angle], angle in marks, angle in favoured), angle)
    angles = sorted(kinds.values())
    for count in range(1, 8):
        best = None
        for some in combinations(angles, count):
            reached = 0
            for angle in some:
                reached |= reach[angle]
            if reached == everything:
                rank = (-sum(a in marks for a in some), -sum(a in favoured for a in some), some)
                best = rank if best is None or rank < best else best
        if best:
            return list(best[2])
    raise AssertionError("no plan within seven stops")


def slid_to_the_middle(stops, reach, everything, marks):
    """Each stop off the marks to the middle of the degrees between which nothing is lost, one after the other."""
    stops = list(stops)
    for place, stop in enumerate(stops):
        if stop in marks:
            continue
        others = 0
        for other in stops[:place] + stops[place + 1 :]:
            others |= reach[other]
        low = high = stop
        while others | reach[(low - 1) % 720] == everything:
            low -= 1
        while others | reach[(high + 1) % 720] == everything:
            high += 1
        stops[place] = (low + high) // 2 % 720  # of two whole degrees in the middle, the earlier
    return sorted(stops)


def random_engine(random):
    """An engine of up to eight cylinders with whole-degree events, even or uneven; small ones may be wild."""
    cylinders = random.choice([1, 2, 3, 4, 4, 5, 6, 6, 8])
    order = (1, *random.sample(range(2, cylinders + 1), cylinders - 1))
    angles = None
    if random.random() < 0.4:
        angles = (0, *sorted(random.sample(range(1, 720), cylinders - 1)))
    latest = random.choice([70, 110, 175]) if cylinders < 5 else random.choice([70, 110])
    events = ValveEvents(*(random.randint(-20, latest) for _ in range(4)))
    return Engine("inline", cylinders, order, angles, events=events, margin=random.choice([0, 10, 20, 35, 60, 100]))


def marks_of(engine):
    return {round(engine.firing_angle(c) + turn) % 720 for c in engine.firing_order for turn in (0, 360)}


def test_plans_equal_exhaustive_search_on_a_thousand_random_engines():
    random = Random(20260502)
    counts, off_marks = set(), 0
    for _ in range(1000):
        engine = random_engine(random)
        reach, names = reach_by_degree(engine)
        everything, marks = (1 << len(names)) - 1, marks_of(engine)
        best = best_by_trying_all(reach, everything, marks, {0, 360}) if names else []
        expected = slid_to_the_middle(best, reach, everything, marks)

        found = plan(engine)

        assert [stop.crank_angle for stop in found.stops] == expected, engine
        listed = [station for stop in found.stops for station in stop.stations]
        assert sorted(listed) == sorted(names)  # each once
        for stop in found.stops:
            at = reach[int(stop.crank_angle)]
            assert set(stop.in_reach) == {name for bit, name in enumerate(names) if at >> bit & 1}
        assert len(found.unreachable) + len(names) == 2 * engine.cylinders
        counts.add(len(expected))
        off_marks += any(angle not in marks for angle in expected)
    assert counts >= {1, 2, 3, 4, 5}  # the trial saw easy and hard ones
    assert off_marks > 20


@pytest.mark.parametrize("turns", [1, 3])
def test_a_plan_does_not_depend_on_where_the_order_starts(turns):
    events = ValveEvents(60, 110, 95, 40)
    order, angles = (1, 5, 4, 2, 3), (0, 100, 290, 430, 600)
    moved = tuple((angle - angles[turns]) % 720 for angle in angles[turns:] + angles[:turns])
    again = Engine("inline", 5, order[turns:] + order[:turns], moved, events=events)

    assert plan(again) == plan(Engine("inline", 5, order, angles, events=events))


# --- short arcs, and several of them a station, against the same exhaustive search


def random_arcs(random, most):
    arcs = {}
    for station in range(random.randint(1, 7)):
        some = []
        for _ in range(random.randint(1, most)):
            start = random.randrange(0, 720, 2)  # even ends: no two arcs lie one whole degree apart
            some.append(Arc(start, start + random.choice([0, 6, 40, 120, 300, 500, 718, 720, 800])))
        arcs[f"s{station}"] = tuple(some)
    return arcs


@pytest.mark.parametrize("most", [1, 3])
def test_one_or_several_arcs_a_station_equal_exhaustive_search(most):
    random = Random(most)
    for _ in range(300):
        arcs = random_arcs(random, most)
        marks = set(random.sample(range(720), random.randint(0, 6)))
        favoured = set(random.sample(sorted(marks), len(marks) // 2))
        reach = [0] * 720
        for bit, some in enumerate(arcs.values()):
            for arc in some:
                for angle in range(int(arc.start), min(int(arc.end), int(arc.start) + 719) + 1):
                    reach[angle % 720] |= 1 << bit
        everything = (1 << len(arcs)) - 1
        if all(angle == everything for angle in reach):
            continue  # any angle does: which one is tested below
        best = best_by_trying_all(reach, everything, marks, favoured)

        found = fewest_stops(arcs, dict.fromkeys(marks, "mark"), favoured)

        assert [stop.angle for stop in found] == slid_to_the_middle(best, reach, everything, marks), arcs
        for stop in found:  # whole degrees here, as all ends are whole
            assert set(stop.in_reach) == {f"s{bit}" for bit in range(len(arcs)) if reach[int(stop.angle)] >> bit & 1}
        assert {station for stop in found for station in stop.stations} == arcs.keys()


# --- what the plan says


EXAMPLE = Engine("inline", 4, (1, 3, 4, 2), events=ValveEvents(12, 48, 52, 10))


def test_the_example_engine_comes_out_at_two_stops_with_their_stations():
    found = plan(EXAMPLE)

    assert [(stop.crank_angle, stop.mark, stop.stations) for stop in found.stops] == [
        (0, "TDC 1 firing", ("1.intake", "1.exhaust", "2.intake", "3.exhaust")),
        (360, "TDC 4 firing", ("2.exhaust", "3.intake", "4.intake", "4.exhaust")),
    ]
    assert (found.assumed_events, found.margin, found.unreachable, found.why_not) == (False, 20, {}, None)


def test_without_events_the_arcs_of_common_cams_are_taken_and_said_so():
    found = plan(Engine("inline", 6, SIX))

    assert found.assumed_events
    assert len(found.stops) == 2


def test_without_an_order_there_is_no_plan_and_it_says_what_to_do():
    found = plan(Engine("inline", 4))

    assert not found
    assert str(found.why_not) == (
        "The firing order is not known, so there is no crank plan: set the lash cylinder by cylinder at its firing "
        "TDC, until the order is found by barring through two turns."
    )


def test_a_stop_where_no_cylinder_fires_is_named_by_its_overlap():
    found = plan(Engine("inline", 3, (1, 2, 3)))

    assert [stop.mark for stop in found.stops] == ["TDC 1 firing", "TDC 1 overlap"]


def test_a_stop_off_the_marks_is_told_from_the_mark_before_it():
    found = plan(Engine("single", 1, events=COMMON_EVENTS), {"injector": Arc(30, 64)})
    alone = plan(Engine("single", 1, events=ValveEvents(100, 150, 150, 100)), {"injector": Arc(400, 409)})

    assert [stop.mark for stop in found.stops] == ["47° after TDC 1 firing"]
    assert [stop.mark for stop in alone.stops] == ["TDC 1 firing", "44° after TDC 1 overlap"]


def test_a_narrow_range_without_a_whole_degree_is_met_in_its_middle():
    found = fewest_stops({"pump": Arc(10.2, 10.6)}, {0: "TDC"})

    assert [(stop.angle, stop.mark, stop.after) for stop in found] == [(10.4, "TDC", 10.4)]


def test_whole_degrees_are_counted_from_the_mark():
    sevenths = {place * 720 / 7: place for place in range(7)}

    (found,) = fewest_stops({"pump": Arc(720 / 7 + 4.1, 720 / 7 + 6.1)}, sevenths)

    assert found.after == pytest.approx(5, abs=1e-8)
    assert found.mark == 1


def test_a_range_across_the_turn_of_the_cycle_is_met_in_its_middle():
    (found,) = fewest_stops({"pump": Arc(700, 730)}, {300: "TDC"})

    assert (found.angle, found.mark, found.after) == (715, "TDC", 415)


def test_overlapping_arcs_of_a_station_are_one_range():
    (found,) = fewest_stops({"pump": (Arc(100, 160), Arc(140, 200))}, {0: "TDC"})

    assert found.angle == 150


def test_arcs_that_only_touch_share_a_stop():
    third = 720 / 7

    found = fewest_stops({"a": Arc(0, 3 * third), "b": Arc(third * 3, 600)}, {})

    assert [stop.in_reach for stop in found] == [("a", "b")]


@settings(max_examples=50)
@given(st.integers(1, 40), st.integers(1, 39), st.floats(0, 360))
def test_a_mark_on_the_very_end_of_an_arc_counts_as_inside(cylinders, place, back):
    mark = place % cylinders * 720 / cylinders

    (found,) = fewest_stops({"valve": Arc(mark - back, mark)}, {mark: "TDC", (mark + 0.5) % 720: "off"})

    assert found.angle == mark


def test_stations_reached_from_everywhere_are_met_at_the_favoured_mark():
    (found,) = fewest_stops({"valve": Arc(5, 800)}, {90: "TDC 3", 450: "TDC 1"}, favoured=(450,))

    assert (found.angle, found.mark) == (450, "TDC 1")


def test_nothing_to_reach_needs_no_stop():
    assert fewest_stops({}, {0: "TDC"}) == []


def test_bridges_come_before_their_lash_and_are_reached_with_it():
    engine = Engine("inline", 4, FOUR, intake_valves=2, exhaust_valves=2, bridges=True)

    assert plan(engine).stops[0].stations[:4] == ("1.intake.bridge", "1.intake", "1.exhaust.bridge", "1.exhaust")


def test_settings_are_stations_of_every_cylinder_or_of_one():
    found = plan(EXAMPLE, {"injector": Arc(-10, 10), "1.pump": Arc(-30, -20)})

    assert [(stop.crank_angle, stop.mark) for stop in found.stops] == [
        (0, "TDC 1 firing"), (180, "TDC 3 firing"), (360, "TDC 4 firing"), (540, "TDC 2 firing"),
        (695, "155° after TDC 2 firing"),
    ]  # fmt: skip
    assert found.stops[0].stations == ("1.intake", "1.exhaust", "1.injector", "2.intake", "3.exhaust")
    assert found.stops[-1].stations == ("1.pump",)


def test_a_valve_without_a_safe_arc_is_said_so_and_the_rest_is_planned():
    engine = Engine("inline", 2, (1, 2), events=ValveEvents(170, 170, 50, 20), margin=110)

    found = plan(engine)

    assert str(found.unreachable["2.intake"]) == (
        "2.intake has no safe stop: open for 520° with 110° kept clear each side, nothing is left of 720°. Check the "
        "events or the margin; until then set it at TDC 2 firing, when the valve is seen shut."
    )
    assert list(found.unreachable) == ["1.intake", "2.intake"]
    assert [station for stop in found.stops for station in stop.stations] == ["1.exhaust", "2.exhaust"]


def test_a_base_circle_of_a_single_angle_is_still_a_stop():
    events = ValveEvents(100, 100, 60, 20)  # open 380°, so 170° each side leave one angle

    assert base_circle(events, "intake", 170) == Arc(810, 810)
    assert base_circle(events, "intake", 170.5) is None


@pytest.mark.parametrize(
    ("layout", "order", "angles"),
    [
        ("vee", (1, 2), (0, 315)), ("flat", (1, 2), None), ("flat", (1, 4, 3, 2), None), ("vee", EIGHT, None),
        ("vee", (1, 4, 2, 5, 3, 6), (0, 90, 240, 330, 480, 570)), ("inline", (1, 2, 4, 5, 3), None),
        ("vee", (1, 11, 4, 14, 8, 18, 7, 17, 10, 20, 9, 19, 3, 13, 2, 12, 5, 15, 6, 16), None),
    ],
)  # fmt: skip
def test_any_engine_with_base_circles_over_half_a_cycle_takes_two_stops_on_cylinder_1(layout, order, angles):
    # a valve resting 360° or more is reached at an angle or a turn later, whatever the angle
    found = plan(Engine(layout, len(order), order, angles))

    assert [stop.crank_angle for stop in found.stops] == [0, 360]


@pytest.mark.parametrize(("start", "end"), [(10, 9), (float("nan"), 10), (0, float("inf"))])
def test_an_arc_that_is_none_is_refused(start, end):
    with pytest.raises(Refusal, match="it must run forward; past 720° go on counting"):
        Arc(start, end)


def test_a_station_without_an_arc_is_refused():
    with pytest.raises(Refusal, match="A station without an arc can't be planned"):
        fewest_stops({"valve": ()}, {})


def test_the_chart_of_the_eight_names_every_valve_once():
    valves = " ".join(published.EIGHT_CHART.values()).split()

    assert sorted(valves) == sorted(f"{n}.{side}" for n in range(1, 9) for side in ("intake", "exhaust"))
