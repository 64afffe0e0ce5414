"""How a measured figure is written: as many decimals as its uncertainty bears, with the shop's decimal mark."""

from math import floor, log10

MINUS = "\u2212"


def figure(value: float, expanded: float | None = None, decimal_mark: str = ".") -> str:
    """Write a value to the last digit that its expanded uncertainty bears; without one, to four significant digits.

    Source: JCGM 100:2008, 7.2.6: the uncertainty to two significant digits, the value to the same place.

    >>> figure(0.413333, 0.0127), figure(12.5894, 0.117), figure(26.61)
    ('0.413', '12.59', '26.61')
    """
    decimals = decimals_for(expanded) if expanded else None
    text = f"{value:.{decimals}f}" if decimals is not None else trimmed(value)
    return text.replace("-", MINUS).replace(".", decimal_mark)


def uncertainty(expanded: float, decimal_mark: str = ".") -> str:
    """Write an expanded uncertainty to two significant digits.

    >>> uncertainty(0.0127), uncertainty(0.117), uncertainty(12.7)
    ('0.013', '0.12', '13')
    """
    return f"{expanded:.{decimals_for(expanded)}f}".replace(".", decimal_mark)


def decimals_for(expanded: float) -> int:
    """Decimals that show two significant digits of an uncertainty; none for ten and over."""
    rounded = float(f"{expanded:.1e}")  # 0.0996 is written 0.10, which has a decimal less than 0.0996 seems to need
    return max(0, 1 - floor(log10(rounded)))


def trimmed(value: float) -> str:
    """Write a value to four significant digits, zeros behind the mark left off."""
    if value == 0:
        return "0"
    text = f"{value:.{max(0, 3 - floor(log10(abs(value))))}f}"
    return text.rstrip("0").rstrip(".") if "." in text else text
