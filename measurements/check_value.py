"""A check value: what a source outside this project printed, and the call of ours that must print the same."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal

Basis = Literal["seen", "from memory", "common practice"]


@dataclass(frozen=True)
class CheckValue:
    """A number or word as its source prints it, beside the call that must reproduce it.

    Attributes
    ----------
    what : str
        What is computed, with its inputs.
    printed : str
        The source's own digits; ours is compared after rounding to the same decimals.
    ours : callable
        Takes nothing, gives the number (or the word) to compare.
    source : str
        Document, edition, clause or page.
    basis : str
        "seen" (read in a copy or transcription), "from memory" or "common practice".
    catches : str
        A wrong formula that this value would catch.
    """

    what: str
    printed: str
    ours: Callable[[], float | str]
    source: str
    basis: Basis
    catches: str

    def computed(self) -> str:
        """Give our value with as many decimals as the source printed."""
        value = self.ours()
        if isinstance(value, str):
            return value
        decimals = len(self.printed.partition(".")[2])
        return f"{value:.{decimals}f}"

    def agrees(self) -> bool:
        """Tell whether ours, rounded like the print, is the print."""
        ours, theirs = self.computed(), self.printed
        if isinstance(self.ours(), str):
            return ours == theirs
        return ours == theirs or float(ours) == float(theirs)
