"""A gauge's figures as they are typed: read as `assess` will read them, and kept as typed with the unit written out."""

from logbook.people.models import Shop
from measurements.entry import Field, Reading, read_entry
from measurements.number import shown
from measurements.sentence import Refusal
from measurements.units import units_of

INCH_SHOP = {"length": "in", "pressure": "psi", "torque": "lbf·ft", "temperature_difference": "°F"}


def unit_beside(quantity: str, shop: Shop) -> str:
    """The unit taken where none is typed: the shop's own for a quantity.

    A step or an error of a temperature is a difference, and so are the ends of a thermometer's range for `assess`.
    """
    dimension = dimension_of(quantity)
    usual = units_of(dimension)[0].symbol
    return INCH_SHOP.get(dimension, usual) if shop.units == Shop.Units.INCH else usual


def dimension_of(quantity: str) -> str:
    """The dimension in which a quantity's figures are read."""
    return "temperature_difference" if quantity == "temperature" else quantity


def read_figure(typed: str, quantity: str, shop: Shop, name: str, *, signed: bool = False) -> tuple[str, Reading]:
    """Read one exact figure; give it as typed, its unit written out, and the reading.

    Raises
    ------
    Refusal
        It is no number, of another quantity, or more than one figure: repeats, a bracket, a bound.

    >>> read_figure("0.01", "length", Shop(), "smallest step")[0]
    '0.01 mm'
    """
    unit = unit_beside(quantity, shop)
    entry = read_entry(typed, Field(dimension_of(quantity), unit, name, signed=signed), decimal_mark=shop.decimal_mark)
    reading = entry.readings[0]
    if len(entry.readings) > 1 or reading.bound or reading.half_width is not None:
        raise Refusal("Read “{read}”; one figure belongs here, such as 0.01.", read=shown(typed))
    return (typed if entry.unit_typed else f"{typed} {unit}"), reading


def read_positive(typed: str, quantity: str, shop: Shop, name: str) -> str:
    """Read one figure that is more than nothing; give it as typed, its unit written out.

    Raises
    ------
    Refusal
        As `read_figure`, or it is zero.
    """
    kept, reading = read_figure(typed, quantity, shop, name)
    if not reading.value > 0:
        raise Refusal("Read “{read}”; {name} is more than 0, or left empty when it isn't known.", read=shown(typed),
                      name=name)  # fmt: skip
    return kept


def read_plain(typed: str, shop: Shop, name: str) -> float:
    """Read a plain number, such as a coverage factor.

    Raises
    ------
    Refusal
        It is no plain number.

    >>> read_plain("2,05", Shop(decimal_mark=","), "k")
    2.05
    """
    readings = read_entry(typed, Field("count", "1", name), decimal_mark=shop.decimal_mark).readings
    if len(readings) > 1 or readings[0].bound or readings[0].half_width is not None:
        raise Refusal("Read “{read}”; {name} is one plain number.", read=shown(typed), name=name)
    return readings[0].value


def read_errors(typed: str, quantity: str, shop: Shop) -> list[dict[str, str]]:
    """Read the errors found at a calibration, one a line: point, colon, error.

    Raises
    ------
    Refusal
        A line isn't so written, a figure can't be read, or a point stands twice.

    >>> read_errors("5 bar: -0.02 bar", "pressure", Shop())
    [{'at': '5 bar', 'error': '-0.02 bar'}]
    """
    found, points = [], set()
    for line in filter(None, map(str.strip, typed.splitlines())):
        at, colon, error = line.partition(":")
        if not colon or ":" in error:
            raise Refusal("Read “{read}”; write the point, a colon and the error found there, a line each.",
                          read=shown(line))  # fmt: skip
        at, point = read_figure(at.strip(), quantity, shop, "the point", signed=True)
        error, _ = read_figure(error.strip(), quantity, shop, "the error", signed=True)
        if point.si_value in points:
            raise Refusal("Two errors are given at “{at}”; give one.", at=shown(at))
        points.add(point.si_value)
        found.append({"at": at, "error": error})
    return found
