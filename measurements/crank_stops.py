"""The fewest crank stops: the smallest set of angles that meets an arc of every station, exactly.

Angles are counted in whole billionths of a degree, so that arcs which touch do touch and every comparison is exact.
"""

from bisect import bisect_left, bisect_right
from collections.abc import Collection, Mapping
from dataclasses import dataclass
from math import inf, isfinite
from typing import TypeVar

from measurements.geometry import CYCLE
from measurements.sentence import Refusal
from measurements.stops_by_choice import fewest_by_choice

DEGREE = 10**9
TURNS = round(CYCLE) * DEGREE  # the two turns of one cycle

Mark = TypeVar("Mark")
Span = tuple[int, int]  # start on the cycle, and length
Chain = tuple[int, tuple[int, ...]]  # what its stops are worth for being on marks, and their places


@dataclass(frozen=True)
class Arc:
    """Crank angles [deg] from `start` to `end` in turning direction, both included; `end` may pass 720.

    Raises
    ------
    Refusal
        When it runs backward or an end is no number.
    """

    start: float
    end: float

    def __post_init__(self) -> None:
        if not (isfinite(self.start) and isfinite(self.end) and self.start <= self.end):
            raise Refusal("Read an arc from {start}° to {end}°: it must run forward; past 720° go on counting.",
                          start=self.start, end=self.end)  # fmt: skip

    def turned(self, degrees: float) -> "Arc":
        """Give the same arc further on."""
        return Arc(self.start + degrees, self.end + degrees)


@dataclass(frozen=True)
class Stop:
    """One crank stop.

    Attributes
    ----------
    angle : float
        Crank angle [deg], 0 to 720.
    mark : object
        Label of the last mark at or before it; None where there are no marks.
    after : float
        Degrees from that mark on; 0 on the mark.
    stations : tuple of str
        Stations it is the first stop to reach.
    in_reach : tuple of str
        All stations it reaches.
    """

    angle: float
    mark: object
    after: float
    stations: tuple[str, ...]
    in_reach: tuple[str, ...]


def fewest_stops(
    arcs: Mapping[str, Arc | tuple[Arc, ...]], marks: Mapping[float, Mark], favoured: Collection[float] = ()
) -> list[Stop]:
    """Give the smallest set of crank stops that reaches every station on one of its arcs.

    Among equally few, the one with most stops on marks; among those, most on favoured marks; among those, the
    smallest angles from 0 on. Then each stop off the marks moves to the middle of the range over which nothing is
    lost, to a whole degree after its mark where there is one.

    Parameters
    ----------
    arcs : mapping of station to Arc or Arcs
        In the order in which stations are to be listed.
    marks : mapping of crank angle [deg] to a label
        Angles a person can find.
    favoured : collection of float
        Those of the marks that are easier to find than others [deg].

    Source: circular-arc piercing, exact by trying each first stop (Hsu & Tsai 1991 give the greedy lemma, from memory).

    >>> [stop.angle for stop in fewest_stops({"a": Arc(0, 100), "b": Arc(90, 200), "c": Arc(300, 400)}, {95: "mark"})]
    [95.0, 350.0]
    """
    spans = {station: _spans(given) for station, given in arcs.items()}
    labels = {round(angle * DEGREE) % TURNS: (angle % CYCLE, label) for angle, label in marks.items()}
    if not spans:
        return []
    narrow = [some for some in spans.values() if all(length < TURNS for _, length in some)]
    points = sorted({0, *labels, *(start for some in narrow for start, _ in some)})
    better = {round(angle * DEGREE) % TURNS for angle in favoured} & labels.keys()
    worth = [(point in labels) * (len(points) + 1) + (point in better) for point in points]
    if all(len(some) == 1 for some in narrow):
        chosen = _fewest_on_circle(points, worth, {some[0] for some in narrow})
    else:
        reached = [{n for n, some in enumerate(narrow) if _meets(point, some)} for point in points]
        chosen = fewest_by_choice(reached, worth)
    settled = _settle([points[place] for place in chosen], narrow, sorted(labels))
    return _described(settled, spans, labels)


def _spans(given: Arc | tuple[Arc, ...]) -> tuple[Span, ...]:
    arcs = (given,) if isinstance(given, Arc) else given
    if not arcs:
        raise Refusal("A station without an arc can't be planned: give it one.")
    starts = [round(arc.start * DEGREE) for arc in arcs]
    spans = [(start % TURNS, round(arc.end * DEGREE) - start) for start, arc in zip(starts, arcs, strict=True)]
    return tuple(spans if len(spans) == 1 else _joined(spans))


def _joined(spans: list[Span]) -> list[Span]:
    """Arcs of one station, those that overlap made one."""
    joined: list[Span] = []
    for start, length in sorted(spans):
        if joined and start <= sum(joined[-1]):
            joined[-1] = (joined[-1][0], max(sum(joined[-1]), start + length) - joined[-1][0])
        else:
            joined.append((start, length))
    while len(joined) > 1 and sum(joined[-1]) >= joined[0][0] + TURNS:  # over the turn of the cycle
        start, length = joined.pop(0)
        joined[-1] = (joined[-1][0], max(sum(joined[-1]), start + TURNS + length) - joined[-1][0])
    return joined


def _meets(point: int, spans: tuple[Span, ...]) -> bool:
    return any((point - start) % TURNS <= length for start, length in spans)


def _fewest_on_circle(points: list[int], worth: list[int], spans: set[Span]) -> tuple[int, ...]:
    """Places of the best stops among `points`, each station having one arc.

    From a stop the next may stand no later than the first end of an arc that begins after it: `reach`. A plan is a
    chain of such steps that closes on its first stop, so the best chain from each possible first stop is enough.
    """
    if not spans:
        return (worth.index(max(worth)),)
    reach = _reach(points, spans)
    ahead = [bisect_right(points, limit) - 1 for limit in reach]  # the furthest next stop
    first_end = min(start + length for start, length in spans)
    closing = {  # place of a first stop: the earliest place a last stop may have
        first: bisect_left(reach, point + TURNS) for first, point in enumerate(points) if point <= first_end
    }
    counts = {first: _count(first, close, ahead) for first, close in closing.items()}
    fewest = min(counts.values())
    best = (-1, ())
    for first, count in counts.items():
        if count == fewest:
            chain = _best_chain(first, fewest, closing[first], ahead, worth)
            if chain[0] > best[0]:
                best = chain
    return best[1]


def _reach(points: list[int], spans: set[Span]) -> list[float]:
    """For each point, the first end among arcs that begin after it (over the turn of the cycle)."""
    unrolled = sorted((start + lap, start + lap + length) for start, length in spans for lap in (0, TURNS))
    first_ends, first = [inf], inf
    for _, end in reversed(unrolled):
        first = min(first, end)
        first_ends.append(first)
    starts = [start for start, _ in unrolled]
    return [first_ends[len(starts) - bisect_right(starts, point)] for point in points]


def _count(place: int, closing: int, ahead: list[int]) -> int:
    """Number of stops when each stands as late as it may."""
    stops = 1
    while place < closing:
        place = ahead[place]
        stops += 1
    return stops


def _best_chain(first: int, stops: int, closing: int, ahead: list[int], worth: list[int]) -> Chain:
    """Most worth, and the earliest places that give them, over chains of `stops` from `first`."""
    earliest = [closing]  # for the last stop, the one before it …
    for _ in range(stops - 1):
        earliest.append(bisect_left(ahead, earliest[-1]))
    tails: dict[tuple[int, int], Chain] = {}

    def tail(place: int, left: int) -> Chain:
        if not left:
            return worth[place], (place,)
        if (place, left) not in tails:
            best = (-1, ())
            for following in range(max(place + 1, earliest[left - 1]), ahead[place] + 1):
                onward = tail(following, left - 1)
                if onward[0] > best[0]:
                    best = onward
            # a place that leads nowhere stays below any that leads on
            tails[place, left] = (best[0] + worth[place], (place, *best[1])) if best[1] else best
        return tails[place, left]

    return tail(first, stops - 1)


def _settle(chosen: list[int], narrow: list[tuple[Span, ...]], marks: list[int]) -> list[int]:
    """Move each stop off the marks to the middle of the range over which nothing is lost, in turning order."""
    stops = list(chosen)
    for place, stop in enumerate(stops):
        if stop in marks:
            continue
        others = stops[:place] + stops[place + 1 :]
        needed = [some for some in narrow if not any(_meets(other, some) for other in others)]
        if not needed:
            continue
        around = [_room(stop, some) for some in needed]
        back, forward = (min(side) for side in zip(*around, strict=True))
        stops[place] = _middle(stop - back, stop + forward, marks) % TURNS
    return sorted(stops)


def _room(point: int, spans: tuple[Span, ...]) -> tuple[int, int]:
    """How far back and how far forward a stop may move on the one of a station's arcs that holds it."""
    return next((since, length - since) for start, length in spans if (since := (point - start) % TURNS) <= length)


def _middle(low: int, high: int, marks: list[int]) -> int:
    """Middle of a range; the nearest whole degree after the mark before it (of two, the earlier), if it lies within."""
    middle = (low + high) // 2
    mark = _mark_before(middle, marks)
    since = (middle - mark) % TURNS
    whole = middle - since + -((DEGREE - 2 * since) // (2 * DEGREE)) * DEGREE
    return whole if low <= whole <= high else middle


def _mark_before(angle: int, marks: list[int]) -> int:
    """The last mark at or before an angle; 0 where there are none."""
    return marks[bisect_right(marks, angle % TURNS) - 1] if marks else 0


def _described(
    stops: list[int], spans: Mapping[str, tuple[Span, ...]], labels: Mapping[int, tuple[float, object]]
) -> list[Stop]:
    marks, seen, described = sorted(labels), set(), []
    for stop in stops:
        before = _mark_before(stop, marks)
        since = (stop - before) % TURNS / DEGREE
        in_reach = tuple(station for station, some in spans.items() if _meets(stop, some))
        angle, label = labels.get(before, (0.0, None))
        new = tuple(station for station in in_reach if station not in seen)
        described.append(Stop(stop / DEGREE if since else angle, label, since, new, in_reach))
        seen.update(in_reach)
    return described
