"""An engine that can't be is told with every contradiction at once; one that exists has none."""

import re

import pytest

from measurements.engine import Engine, ValveEvents
from measurements.engine_problems import problems
from measurements.published.engine import EIGHT, SIX

GOOD = {"layout": "inline", "cylinders": 4}
IMPOSSIBLE = [
    ({"cylinders": 0}, "cylinders", "Read 0 cylinders; an engine has 1 to 40."),
    ({"cylinders": 41}, "cylinders", "Read 41 cylinders; an engine has 1 to 40."),
    ({"cylinders": 10**9}, "cylinders", "Read 1000000000 cylinders; an engine has 1 to 40."),
    ({"layout": "single"}, "layout", "A single has one cylinder, but 4 are given: write inline, vee or flat."),
    ({"layout": "vee", "cylinders": 1}, "layout",
     "A vee engine has two banks, but one cylinder is given: write inline."),
    ({"layout": "row"}, "layout", "Read row; write one of inline, vee, flat, single."),
    ({"firing_order": (1, 3, 4, 2, 5)}, "firing_order",
     "The firing order names 5, but cylinders are numbered 1 to 4."),
    ({"firing_order": (1, 3, 4)}, "firing_order", "The firing order leaves out 2: name each of the 4 cylinders once."),
    ({"firing_order": (1, 3, 4, 2, 3)}, "firing_order",
     "The firing order names 3 more than once: name each of the 4 cylinders once."),
    ({"firing_angles": (0, 180, 360, 540)}, "firing_angles",
     "Firing angles stand in firing-order sequence: give the firing order too."),
    ({"firing_order": (1, 3, 4, 2), "firing_angles": (0, 180, 360)}, "firing_angles",
     "Read 3 firing angles for 4 cylinders: give one each, in firing-order sequence."),
    ({"firing_order": (1, 3, 4, 2), "firing_angles": (10, 180, 360, 540)}, "firing_angles",
     "The first firing angle is 10°; they are counted from the first cylinder of the order: write 0."),
    ({"firing_order": (1, 3, 4, 2), "firing_angles": (0, 180, 360, 720)}, "firing_angles",
     "Read a firing angle of 720°; it must be at least 0 and below 720."),
    ({"firing_order": (1, 3, 4, 2), "firing_angles": (0, 360, 180, 540)}, "firing_angles",
     "Firing angle 180° follows 360°: each must be larger than the one before."),
    ({"firing_order": (1, 3, 4, 2), "firing_angles": (0, 180, 180, 540)}, "firing_angles",
     "Firing angle 180° follows 180°: each must be larger than the one before."),
    ({"banks": ((1, 2), (3, 4))}, "banks", "Banks given: 2; this layout has 1."),
    ({"layout": "vee", "banks": ((1, 2, 3, 4),)}, "banks", "Banks given: 1; this layout has 2."),
    ({"layout": "vee", "banks": ((1, 2, 3, 4), ())}, "banks", "A bank without cylinders was given: leave it out."),
    ({"layout": "vee", "banks": ((1, 2), (3, 5, 4))}, "banks",
     "The banks name 5, but cylinders are numbered 1 to 4."),
    ({"layout": "vee", "banks": ((1, 2), (3,))}, "banks", "The banks leave out 4: each cylinder stands in one bank."),
    ({"layout": "vee", "banks": ((1, 2), (2, 3, 4))}, "banks",
     "The banks name 2 more than once: each cylinder stands in one bank."),
    ({"bore": -96.0}, "bore", "Read -96; it must be above zero: measure it again or leave it out."),
    ({"stroke": 0.0}, "stroke", "Read 0; it must be above zero: measure it again or leave it out."),
    ({"rod_length": float("inf")}, "rod_length",
     "Read inf; it must be above zero: measure it again or leave it out."),
    ({"rated_speed": float("nan")}, "rated_speed",
     "Read nan; it must be above zero: measure it again or leave it out."),
    ({"screw_pitch": 0.0}, "valve_train.screw_pitch",
     "Read 0; it must be above zero: measure it again or leave it out."),
    ({"screw_ratio": -1.0}, "valve_train.screw_ratio",
     "Read -1; it must be above zero: measure it again or leave it out."),
    ({"stroke": 100.0, "rod_length": 50.0}, "rod_length",
     "A rod of 50 mm is no longer than half the stroke of 100 mm: the crank could not turn. Give the length between "
     "centres."),
    ({"compression_ratio": 1.0}, "compression_ratio", "Read a compression ratio of 1; it must be above 1."),
    ({"intake_valves": 0}, "valves_per_cylinder.intake", "Read 0 valves; a cylinder has 1 to 4 of a side."),
    ({"exhaust_valves": 5}, "valves_per_cylinder.exhaust", "Read 5 valves; a cylinder has 1 to 4 of a side."),
    ({"bridges": True}, "valve_train.bridges",
     "A bridge works two valves of a side, but no side has two: leave bridges out."),
    ({"events": ValveEvents(180, 48, 52, 10)}, "valve_train.events.intake_opens_btdc",
     "Read 180°; a valve opens or shuts less than 180° from its dead centre."),
    ({"events": ValveEvents(12, 48, float("nan"), 10)}, "valve_train.events.exhaust_opens_bbdc",
     "Read nan°; a valve opens or shuts less than 180° from its dead centre."),
    ({"events": ValveEvents(12, 48, -100, -120)}, "valve_train.events",
     "The exhaust would shut 40° before it opens: check the signs."),
    ({"margin": -1.0}, "valve_train.margin", "Read a margin of -1°; it must be 0 to 180."),
    ({"margin": float("nan")}, "valve_train.margin", "Read a margin of nan°; it must be 0 to 180."),
    ({"adjustment": "magic"}, "valve_train.adjustment", "Read magic; write one of screw, shim, hydraulic."),
    ({"thread": "metric"}, "valve_train.thread", "Read metric; write one of right, left."),
    ({"ignition": "glow"}, "ignition", "Read glow; write one of compression, spark."),
    ({"turning": "forward"}, "turning", "Read forward; write one of clockwise, anticlockwise."),
    ({"seen_from": "side"}, "seen_from", "Read side; write one of flywheel, free_end."),
    ({"numbered_from": "side"}, "numbered_from", "Read side; write one of free_end, flywheel."),
]  # fmt: skip


@pytest.mark.parametrize(("figures", "path", "sentence"), IMPOSSIBLE)
def test_what_is_impossible_is_said_with_its_path_and_nothing_else_is(figures, path, sentence):
    found = problems(Engine(**(GOOD | figures)))

    assert [(where, str(told)) for where, told in found] == [(path, sentence)]


def test_everything_impossible_is_said_at_once():
    sizes = {"bore": -1.0, "stroke": 100.0, "rod_length": 40.0, "compression_ratio": 0.5}
    engine = Engine("inline", 4, (1, 3, 4), **sizes, margin=-1.0)

    assert [path for path, _ in problems(engine)] == [
        "firing_order", "bore", "rod_length", "compression_ratio", "valve_train.margin",
    ]  # fmt: skip


@pytest.mark.parametrize(
    "engine",
    [
        Engine("single", 1), Engine("inline", 1), SIX, EIGHT, Engine("vee", 3), Engine("flat", 2, banks=((1,), (2,))),
        Engine("vee", 2, (1, 2), (0, 315), ((1,), (2,))), Engine("inline", 40),
        Engine("inline", 4, events=ValveEvents(-10, 30, 30, -10), margin=0.0),
    ],
)  # fmt: skip
def test_engines_that_exist_have_no_problems(engine):
    assert problems(engine) == []


def test_a_long_list_of_strangers_is_cut_short():
    (_, told), *_ = problems(Engine("inline", 4, tuple(range(100, 200))))

    assert re.fullmatch(r"The firing order names 100, 101, .*, 111 …, but cylinders are numbered 1 to 4\.", str(told))
