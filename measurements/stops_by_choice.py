"""The fewest crank stops where a station may be reached on any of several arcs: an exact search with bounds."""

from collections.abc import Sequence


def fewest_by_choice(reached: Sequence[set[int]], worth: Sequence[int]) -> tuple[int, ...]:
    """Choose the fewest points that together reach all stations; then those worth most, then the earliest.

    Parameters
    ----------
    reached : sequence of sets
        Stations that each point reaches, points in ascending angle; every station is reached by some point.
    worth : sequence of int
        What each point is worth for being on a mark; nothing outweighs a stop more.

    Returns
    -------
    tuple of int
        Places of the points chosen, ascending.

    Source: set covering by branch and bound; the bound counts stations no two of which share a point.

    >>> fewest_by_choice([{1}, {1, 2}, {2, 3}, {3}], [0, 0, 1, 1])
    (0, 2)
    """
    search = _Search(reached, worth)
    left = frozenset().union(*reached)
    budget = search.least(left)
    chosen = []
    for place, stations in enumerate(reached):
        # a point belongs to the earliest of the best plans when the rest can still be paid for without it
        if left & stations and search.affords(left - stations, budget - search.cost[place]):
            chosen.append(place)
            budget -= search.cost[place]
            left -= stations
        if not left:
            break
    return tuple(chosen)


class _Search:
    """What it costs to reach stations: every stop the same large cost, less what its point is worth."""

    def __init__(self, reached: Sequence[set[int]], worth: Sequence[int]) -> None:
        self.stop = (len(reached) + 1) * (max(worth) + 1)
        self.cost = [self.stop - one for one in worth]
        self.reached = reached
        self.points: dict[int, list[int]] = {}
        for place in self._worthwhile():
            for station in reached[place]:
                self.points.setdefault(station, []).append(place)
        self.known: dict[tuple[frozenset[int], int], bool] = {}

    def _worthwhile(self) -> list[int]:
        """Places no other place beats: none reaches as much for as little."""
        ranked = sorted(range(len(self.cost)), key=lambda place: (-len(self.reached[place]), self.cost[place]))
        kept: list[int] = []
        for place in ranked:
            beaten = any(
                self.reached[place] <= self.reached[other] and self.cost[other] <= self.cost[place] for other in kept
            )
            if not beaten:
                kept.append(place)
        return kept

    def least(self, stations: frozenset[int]) -> int:
        """Least cost of reaching all `stations`."""
        stops = 1
        while not self.affords(stations, stops * self.stop):
            stops += 1
        enough, too_little = stops * self.stop, stops * min(self.cost) - 1
        while enough - too_little > 1:
            middle = (enough + too_little) // 2
            if self.affords(stations, middle):
                enough = middle
            else:
                too_little = middle
        return enough

    def affords(self, stations: frozenset[int], budget: int) -> bool:
        """Tell whether `stations` can be reached for no more than `budget`."""
        if not stations:
            return budget >= 0
        if (stations, budget) not in self.known:
            hardest, bound = self._hardest_and_bound(stations)
            self.known[stations, budget] = bound <= budget and any(
                self.affords(stations - self.reached[place], budget - self.cost[place])
                for place in self.points[hardest]
            )
        return self.known[stations, budget]

    def _hardest_and_bound(self, stations: frozenset[int]) -> tuple[int, int]:
        """The station with the fewest points, and a cost below which all can't be reached."""
        ranked = sorted(stations, key=lambda station: len(self.points[station]))
        used: set[int] = set()
        bound = 0
        for station in ranked:
            if used.isdisjoint(self.points[station]):
                used.update(self.points[station])
                bound += min(self.cost[place] for place in self.points[station])
        return ranked[0], bound
