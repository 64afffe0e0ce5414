"""How the invented engines run and wear: a plain rule with a fixed seed, so that every load tells the same figures.

An engine runs more in one half of the year than in the other. Gaps close, bores grow and pressures fall in proportion to
the hours run; each look adds a little scatter, as hands and gauges do.
"""

from dataclasses import dataclass, field
from decimal import Decimal
from math import pi, sin
from random import Random

SEASON_DAYS = 20.0  # days' worth of running that the busy half of a year is ahead
YEAR = 365.0  # d


def run_between(per_day: float, earlier: float, later: float) -> float:
    """Hours (or starts) run between two days.

    Parameters
    ----------
    per_day : float
        Average over a year [h/d].
    earlier, later : float
        Days ago; `later` is the smaller number [d].

    >>> round(run_between(5.0, 365.0, 0.0), 6)
    1825.0
    """
    return per_day * (earlier - later + SEASON_DAYS * (sin(2 * pi * later / YEAR) - sin(2 * pi * earlier / YEAR)))


def typed(value: float, resolution: str) -> str:
    """Write a value as somebody types it who reads a gauge of a resolution such as "0.02 bar".

    >>> typed(27.338, "0.2 bar"), typed(0.2871, "0.01 mm")
    ('27.4', '0.29')
    """
    step = Decimal(resolution.split()[0])
    return f"{round(Decimal(repr(value)) / step) * step:.{max(0, -step.as_tuple().exponent)}f}"


@dataclass
class Wear:
    """What would be read at each station of one engine.

    Attributes
    ----------
    name : str
        The engine's, which seeds its scatter.
    told : dict
        The engine file's "wear": see `fixtures/demo/shop`.
    lash_set : dict
        What each valve was last set to [mm], and at how many hours [h].
    """

    name: str
    told: dict
    lash_set: dict[str, tuple[float, float]] = field(default_factory=dict)

    def read(self, kind: str, station: str, hours: float) -> float:
        """What a gauge shows at a station once the engine has run some hours since the demo's beginning [mm, bar]."""
        rule = getattr(self, f"_{kind}")
        return rule(self.told[kind], station, hours, self._noise(f"{kind} {station} {hours:.0f}"))

    def set_lash(self, station: str, hours: float) -> float:
        """Set a valve near its aim; gives what it is left at [mm]."""
        aim = self.told["valve_lash"][_side(station)]["set_to"]
        left = aim + 0.004 * self._noise(f"set {station} {hours:.0f}")
        self.lash_set[station] = left, hours
        return left

    def _valve_lash(self, told: dict, station: str, hours: float, noise: float) -> float:
        side = told[_side(station)]
        left, at = self.lash_set.setdefault(station, (side["set_to"] + 0.006 * self._noise(f"first {station}"), 0.0))
        rate = side["closes_per_1000_h"] * told.get("faster", {}).get(station, 1.0)
        return left - rate * (hours - at) / 1000 + told["scatter"] * noise

    def _compression(self, told: dict, station: str, hours: float, noise: float) -> float:
        own = 0.01 * told["at_first"] * self._noise(f"own compression {station}")
        return told["at_first"] + own - told["falls_per_1000_h"] * hours / 1000 + told["scatter"] * noise

    def _leak_down(self, told: dict, station: str, hours: float, noise: float) -> float:
        loss = told["loss_at_first"] + self._noise(f"own loss {station}") + told["grows_per_1000_h"] * hours / 1000
        return told["supply"] * (1 - max(1.0, loss + told["scatter"] * noise) / 100)

    def _bore(self, told: dict, station: str, hours: float, noise: float) -> float:
        cylinder, depth, direction = station.split(".")
        rate = told["um_per_1000_h"][depth] * (told["thrust"] if direction == "thrust" else 1.0)
        rate *= told.get("faster", {}).get(cylinder, 1.0)
        machined = told["at_first"] + 0.001 * self._noise(f"machined {station}")
        return machined + rate * hours / 1e6 + told["scatter_um"] * noise / 1000

    def _noise(self, of: str) -> float:
        """A draw from the standard normal distribution, no further out than two; the same for the same words."""
        return max(-2.0, min(2.0, Random(f"{self.name} {of}").gauss(0.0, 1.0)))


def _side(station: str) -> str:
    return station.split(".")[1]
