"""What is impossible about an engine as it was described: everything at once, each with the path of its field."""

from collections import Counter
from collections.abc import Iterable, Iterator
from math import isfinite

from measurements.engine import MOST_CYLINDERS, Engine
from measurements.geometry import CYCLE
from measurements.sentence import Sentence, say

MOST_VALVES = 4  # of one side of one cylinder

WORDS = {
    "layout": ("inline", "vee", "flat", "single"),
    "ignition": ("compression", "spark", None),
    "turning": ("clockwise", "anticlockwise", None),
    "seen_from": ("flywheel", "free_end"),
    "numbered_from": ("free_end", "flywheel"),
    "valve_train.adjustment": ("screw", "shim", "hydraulic", None),
    "valve_train.thread": ("right", "left"),
}
SIZES = ("bore", "stroke", "rod_length", "rated_speed", "valve_train.screw_pitch", "valve_train.screw_ratio")
Problem = tuple[str, Sentence]


def problems(engine: Engine) -> list[Problem]:
    """Say everything impossible about an engine at once.

    Parameters
    ----------
    engine : Engine
        With plain values of the right types; nothing else about them is taken for granted.

    Returns
    -------
    list of (path, Sentence)
        The path is that of the `assess` document below `engine`, such as "valve_train.screw_pitch".
    """
    checks = [_words, _sizes, _rod, _ratio, _valves, _events, _margin]
    if 1 <= engine.cylinders <= MOST_CYLINDERS:
        checks = [_layout, _order, _angles, _banks, *checks]
    else:
        checks = [_cylinders, *checks]
    return [problem for check in checks for problem in check(engine)]


def _cylinders(engine: Engine) -> Iterator[Problem]:
    yield "cylinders", say("Read {read} cylinders; an engine has 1 to {most}.",
                           read=engine.cylinders, most=MOST_CYLINDERS)  # fmt: skip


def _layout(engine: Engine) -> Iterator[Problem]:
    if engine.layout == "single" and engine.cylinders > 1:
        yield "layout", say("A single has one cylinder, but {read} are given: write inline, vee or flat.",
                            read=engine.cylinders)  # fmt: skip
    if engine.layout in ("vee", "flat") and engine.cylinders < 2:
        yield "layout", say("A {layout} engine has two banks, but one cylinder is given: write inline.",
                            layout=engine.layout)  # fmt: skip


def _words(engine: Engine) -> Iterator[Problem]:
    for path, words in WORDS.items():
        read = getattr(engine, path.rpartition(".")[2])
        if read not in words:
            yield path, say("Read {read}; write one of {words}.", read=read, words=_listed(filter(None, words)))


def _order(engine: Engine) -> Iterator[Problem]:
    order, n = engine.firing_order, engine.cylinders
    if order is None:
        return
    wanted = set(range(1, n + 1))
    if strangers := [cylinder for cylinder in order if cylinder not in wanted]:
        yield "firing_order", say("The firing order names {strangers}, but cylinders are numbered 1 to {n}.",
                                  strangers=_listed(strangers), n=n)  # fmt: skip
    if missing := sorted(wanted - set(order)):
        yield "firing_order", say("The firing order leaves out {missing}: name each of the {n} cylinders once.",
                                  missing=_listed(missing), n=n)  # fmt: skip
    if twice := _repeated(order):
        yield "firing_order", say("The firing order names {twice} more than once: name each of the {n} cylinders once.",
                                  twice=_listed(twice), n=n)  # fmt: skip


def _angles(engine: Engine) -> Iterator[Problem]:
    angles, path = engine.firing_angles, "firing_angles"
    if angles is None:
        return
    if engine.firing_order is None:
        yield path, say("Firing angles stand in firing-order sequence: give the firing order too.")
    if len(angles) != engine.cylinders:
        yield path, say("Read {count} firing angles for {n} cylinders: give one each, in firing-order sequence.",
                        count=len(angles), n=engine.cylinders)  # fmt: skip
    if angles and angles[0] != 0:
        yield path, say("The first firing angle is {read}°; they are counted from the first cylinder of the order: "
                        "write 0.", read=angles[0])  # fmt: skip
    outside = [angle for angle in angles if not 0 <= angle < CYCLE]
    if outside:
        yield path, say("Read a firing angle of {read}°; it must be at least 0 and below 720.", read=outside[0])
    falling = [(a, b) for a, b in zip(angles, angles[1:], strict=False) if not a < b]
    if falling:
        before, after = falling[0]
        yield path, say("Firing angle {after}° follows {before}°: each must be larger than the one before.",
                        after=after, before=before)  # fmt: skip


def _banks(engine: Engine) -> Iterator[Problem]:
    banks, n = engine.banks, engine.cylinders
    if banks is None:
        return
    rows = 2 if engine.layout in ("vee", "flat") else 1
    if len(banks) != rows:
        yield "banks", say("Banks given: {count}; this layout has {rows}.", count=len(banks), rows=rows)
    if any(not bank for bank in banks):
        yield "banks", say("A bank without cylinders was given: leave it out.")
    named, wanted = [cylinder for bank in banks for cylinder in bank], set(range(1, n + 1))
    if strangers := [cylinder for cylinder in named if cylinder not in wanted]:
        yield "banks", say("The banks name {strangers}, but cylinders are numbered 1 to {n}.",
                           strangers=_listed(strangers), n=n)  # fmt: skip
    if missing := sorted(wanted - set(named)):
        yield "banks", say("The banks leave out {missing}: each cylinder stands in one bank.", missing=_listed(missing))
    if twice := _repeated(named):
        yield "banks", say("The banks name {twice} more than once: each cylinder stands in one bank.",
                           twice=_listed(twice))  # fmt: skip


def _sizes(engine: Engine) -> Iterator[Problem]:
    for path in SIZES:
        read = getattr(engine, path.rpartition(".")[2])
        if read is not None and not (isfinite(read) and read > 0):
            yield path, say("Read {read}; it must be above zero: measure it again or leave it out.", read=read)


def _rod(engine: Engine) -> Iterator[Problem]:
    rod, stroke = engine.rod_length, engine.stroke
    if rod is not None and stroke is not None and 0 < rod <= stroke / 2:
        yield "rod_length", say("A rod of {rod} mm is no longer than half the stroke of {stroke} mm: the crank could "
                                "not turn. Give the length between centres.", rod=rod, stroke=stroke)  # fmt: skip


def _ratio(engine: Engine) -> Iterator[Problem]:
    ratio = engine.compression_ratio
    if ratio is not None and not (isfinite(ratio) and ratio > 1):
        yield "compression_ratio", say("Read a compression ratio of {read}; it must be above 1.", read=ratio)


def _valves(engine: Engine) -> Iterator[Problem]:
    for side in ("intake", "exhaust"):
        read = getattr(engine, f"{side}_valves")
        if not 1 <= read <= MOST_VALVES:
            yield f"valves_per_cylinder.{side}", say("Read {read} valves; a cylinder has 1 to {most} of a side.",
                                                     read=read, most=MOST_VALVES)  # fmt: skip
    if engine.bridges and engine.intake_valves < 2 and engine.exhaust_valves < 2:
        yield "valve_train.bridges", say("A bridge works two valves of a side, but no side has two: leave bridges out.")


def _events(engine: Engine) -> Iterator[Problem]:
    if engine.events is None:
        return
    for name, read in vars(engine.events).items():
        if not -180 < read < 180:
            yield f"valve_train.events.{name}", say("Read {read}°; a valve opens or shuts less than 180° from its dead "
                                                    "centre.", read=read)  # fmt: skip
    for side in ("intake", "exhaust"):
        if engine.events.open_for(side) <= 0:
            yield "valve_train.events", say("The {side} would shut {degrees}° before it opens: check the signs.",
                                            side=side, degrees=-engine.events.open_for(side))  # fmt: skip


def _margin(engine: Engine) -> Iterator[Problem]:
    if not 0 <= engine.margin <= 180:
        yield "valve_train.margin", say("Read a margin of {read}°; it must be 0 to 180.", read=engine.margin)


def _repeated(cylinders: Iterable[int]) -> list[int]:
    return sorted(cylinder for cylinder, times in Counter(cylinders).items() if times > 1)


def _listed(names: Iterable[object]) -> str:
    """Names as a sentence lists them, not too many."""
    listed = [str(name) for name in names]
    return ", ".join(listed[:12]) + (" …" if len(listed) > 12 else "")
