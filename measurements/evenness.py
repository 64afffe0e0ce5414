"""How even the cylinders of an engine are: the lowest against the highest, and two low neighbours."""

from collections.abc import Mapping


def spread(highest: float, lowest: float) -> float:
    """Spread [%] = (highest − lowest) / highest.

    >>> round(spread(168, 120), 1)
    28.6
    """
    return 100 * (highest - lowest) / highest


def lowest_share(highest: float, lowest: float) -> float:
    """Lowest as a share [%] of the highest.

    Source: the 75 % rule; of 445 and 405 psi the lowest has 91 % (TM 5-3895-359-14&P figures).

    >>> round(lowest_share(445, 405))
    91
    """
    return 100 * lowest / highest


def adjacent_low_pair(values: Mapping[int, float], neighbours: Mapping[int, tuple[int, ...]]) -> tuple[int, int] | None:
    """Two neighbours that both stand below every other cylinder by more than those differ among themselves.

    Source: common practice: two adjacent low speak for the gasket between them.

    >>> adjacent_low_pair({1: 12.1, 2: 8.0, 3: 8.4, 4: 12.0}, {1: (2,), 2: (1, 3), 3: (2, 4), 4: (3,)})
    (2, 3)
    """
    if len(values) < 4:
        return None
    order = sorted(values, key=values.get)
    low, others = sorted(order[:2]), [values[cylinder] for cylinder in order[2:]]
    gap = min(others) - values[order[1]]
    apart = gap > max(others) - min(others) and gap > values[order[1]] - values[order[0]]
    return tuple(low) if apart and low[1] in neighbours.get(low[0], ()) else None
