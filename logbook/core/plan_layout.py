"""Where things lie on the plan view: cylinders, their stations and the two ends, turned to where the person stands."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from itertools import groupby

from measurements.engine import Engine

END = 128  # room for the free end and for the flywheel, at either end
ABOVE = 44  # room for the cylinder numbers over the block, and under it where there are two rows
BELOW = 52  # room for the lines that say how it turns and what isn't known
STEP = 58  # from one station to the next within a cylinder
VALVE = 23  # radius of a station
APART = {"vee": 26, "flat": 84}  # between the rows of a two-bank engine: a flat one has its crankcase there


@dataclass(frozen=True)
class Place:
    """Where a station or a cylinder is drawn."""

    x: float
    y: float


@dataclass(frozen=True)
class Layout:
    """An engine laid out from above.

    Attributes
    ----------
    stations : sequence of str
        Those to be drawn, in the order of the hands; what isn't at a cylinder is left out.
    left : "free_end" or "flywheel"
        The end at the left hand of the person, who stands at the lower edge of the picture.
    first_bank : "left" or "right"
        Side of the bank given first, seen from the flywheel.
    """

    engine: Engine
    stations: Sequence[str]
    left: str
    first_bank: str = "left"

    @property
    def is_placed(self) -> bool:
        """Tell whether it is known which cylinder stands where."""
        return self.engine.banks is not None

    @cached_property
    def rows(self) -> list[tuple[int, ...]]:
        """Rows of cylinders, the upper one first; one row by number where the banks aren't known."""
        if self.engine.banks is None:
            return [tuple(range(1, self.engine.cylinders + 1))]
        if len(self.engine.banks) == 1:
            return list(self.engine.banks)
        # someone who looks along the engine from a flywheel at the right edge has the lower row at their left hand
        first_is_low = (self.first_bank == "left") == (self.left == "free_end")
        first, second = self.engine.banks
        return [second, first] if first_is_low else [first, second]

    @cached_property
    def within(self) -> dict[int, list[list[str]]]:
        """Stations of each cylinder in rows: a side, a depth."""
        found: dict[int, list[list[str]]] = {}
        at_cylinders = [name for name in self.stations if name.partition(".")[0].isdecimal()]
        by_number = sorted(at_cylinders, key=lambda name: int(name.partition(".")[0]))
        for number, names in groupby(by_number, key=lambda name: int(name.partition(".")[0])):
            rows: dict[str, list[str]] = {}
            for name in names:
                rows.setdefault((name.split(".") + [""])[1], []).append(name)
            wanted = [rows.pop(side) for side in ("intake", "exhaust", "top", "middle", "bottom") if side in rows]
            found[number] = [*wanted, *rows.values()]
        return found

    @cached_property
    def radius(self) -> float:
        """Radius of a cylinder: room for all its stations."""
        most_rows = max((len(rows) for rows in self.within.values()), default=1)
        most_columns = max((len(row) for rows in self.within.values() for row in rows), default=1)
        across, down = (most_columns - 1) * STEP / 2, (most_rows - 1) * STEP / 2
        return max(42.0, round((across**2 + down**2) ** 0.5 + VALVE + 9, 1))

    @property
    def pitch(self) -> float:
        """From one cylinder to the next."""
        return 2 * self.radius + 14

    @property
    def longest(self) -> int:
        """Cylinders of the longest row."""
        return max(len(row) for row in self.rows)

    @property
    def width(self) -> float:
        return round(2 * END + self.longest * self.pitch, 1)

    @property
    def block(self) -> tuple[float, float, float, float]:
        """The block's left, upper, right and lower edge."""
        two = len(self.rows) == 2
        apart = APART.get(self.engine.layout, 0) if two else 0
        height = len(self.rows) * 2 * self.radius + apart + 36
        return END, ABOVE, round(self.width - END, 1), round(ABOVE + height, 1)

    @property
    def height(self) -> float:
        return round(self.block[3] + (ABOVE - 12 if len(self.rows) == 2 else 0) + BELOW, 1)

    @property
    def crank_line(self) -> float:
        """How far down the crank lies."""
        _left, upper, _right, lower = self.block
        return (upper + lower) / 2

    def cylinder(self, number: int) -> Place:
        """Where a cylinder is."""
        row = next(place for place, row in enumerate(self.rows) if number in row)
        slot = self.rows[row].index(number) + 0.5
        along = slot * self.pitch
        x = END + along if self.left == self.engine.numbered_from else self.width - END - along
        _left, upper, _right, lower = self.block
        y = upper + 18 + self.radius if row == 0 else lower - 18 - self.radius
        return Place(round(x, 1), round(y, 1))

    def at_cylinder(self, number: int) -> list[tuple[str, Place]]:
        """Stations of a cylinder, each with its place."""
        centre, rows = self.cylinder(number), self.within.get(number, [])
        return [
            (name, Place(round(centre.x + (column - (len(names) - 1) / 2) * STEP, 1),
                         round(centre.y + (row - (len(rows) - 1) / 2) * STEP, 1)))
            for row, names in enumerate(rows) for column, name in enumerate(names)
        ]  # fmt: skip

    def end(self, name: str) -> tuple[float, int]:
        """The block's edge at the "free_end" or the "flywheel", and which way out is: −1 left, 1 right."""
        return (self.block[0], -1) if name == self.left else (self.block[2], 1)

    def top_goes_up(self) -> bool | None:
        """Tell whether the top of the crank moves away from the person, up the picture; None when it isn't known.

        Clockwise seen from a flywheel at the right edge: the eye looks left along the crank, its right hand is away
        from the person, and the top of what turns clockwise moves to the right hand.
        """
        if self.engine.turning is None:
            return None
        clockwise = self.engine.turning == "clockwise"
        from_flywheel = self.engine.seen_from == "flywheel"
        return clockwise == (from_flywheel == (self.left == "free_end"))
