"""A reading that looks like a slip: asked about before it is kept, with both readings spelled out."""

import re
from decimal import Decimal

from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from measurements.slip import SPOKEN

from .words import station_title

AS_TYPED, AS_MEANT = "as typed", "as meant"
ANSWERS = (AS_TYPED, AS_MEANT)

_PLAIN = re.compile(r"([0-9]*[.,]?[0-9]+)\s*([^\s0-9.,;<>]*)")
_ELSEWHERE = re.compile(r"it belongs to (\S+)")
_UNIT = re.compile(r"(?:typed|meant) in (.+)")
_MOVED = re.compile(r"the point is moved")


class SlipAsked(Refused):
    """A reading that would make more sense otherwise; nothing is kept until it is answered.

    Attributes
    ----------
    slip : dict
        What `assess` says: `would_be`, `unit`, `if`.
    typed, meant : str
        The reading as typed, and as it may have been meant, ready to be typed; each with its unit.
    station : str or None
        The other station it may belong to.
    """

    def __init__(self, finding: dict, decimal_mark: str = ".") -> None:
        self.slip = finding["slip"]
        self.typed = with_unit(finding["as_typed"], finding["unit"])
        self.meant = meant(finding, decimal_mark)
        found = _ELSEWHERE.fullmatch(self.slip["if"])
        self.station = found.group(1) if found else None
        self.there = station_title(self.station or "")
        told = {"typed": self.typed, "station": station_title(finding["station"]), "meant": self.meant,
                "why": self.slip["if"], "there": self.there}  # fmt: skip
        if self.station:
            said = _("%(station)s: read %(typed)s, hard to believe there; it would fit %(there)s. Which is it?")
        else:
            said = _(
                "%(station)s: read %(typed)s, hard to believe there; it would be %(meant)s if %(why)s. Which is it?"
            )
        super().__init__(said % told)


def with_unit(typed: str, unit: str) -> str:
    """What was typed, with the unit it was taken in where none was typed.

    >>> with_unit("4.1", "mm"), with_unit("4.1 mm", "mm")
    ('4.1 mm', '4.1 mm')
    """
    return typed if any(letter.isalpha() or letter in "%°" for letter in typed) else f"{typed} {unit}"


def meant(finding: dict, decimal_mark: str = ".") -> str:
    """What would have been typed without the slip, digit for digit where it is one plain number.

    >>> slip = {"would_be": 0.3, "unit": "mm", "if": "the point is moved one place"}
    >>> meant({"as_typed": "3.0", "value": 3.0, "unit": "mm", "slip": slip})
    '0.30 mm'
    >>> meant({"as_typed": "0.0118", "value": 0.0118, "unit": "mm", "slip": {**slip, "if": "typed in inches"}})
    '0.0118 in'
    """
    slip, plain = finding["slip"], _PLAIN.fullmatch(finding["as_typed"].strip())
    if plain and (unit := _UNIT.fullmatch(slip["if"])):
        symbols = {spoken: symbol for symbol, spoken in SPOKEN.items()}
        return f"{plain.group(1)} {symbols.get(unit.group(1), unit.group(1))}"
    if plain and _MOVED.match(slip["if"]) and finding["value"]:
        places = len(str(round(max(slip["would_be"] / finding["value"], finding["value"] / slip["would_be"])))) - 1
        places = places if slip["would_be"] > finding["value"] else -places
        moved = Decimal(plain.group(1).replace(",", ".")).scaleb(places)
        return f"{moved:f} {plain.group(2) or slip['unit']}".replace(".", decimal_mark)
    return f"{slip['would_be']:.6g} {slip['unit']}".replace(".", decimal_mark)
