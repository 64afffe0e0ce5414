"""Published conversion factors: what NIST prints for the units of the trade."""

from measurements.check_value import Basis, CheckValue
from measurements.units import convert, convert_difference, find_unit

SP_811 = "NIST Special Publication 811 (2008), Guide for the Use of the SI, appendix B.8"


def factor(printed: str, dimension: str, from_: str, to: str, catches: str, basis: Basis = "seen") -> CheckValue:
    """Make the check value of one factor: 1 `from_` is `printed` `to`."""
    return CheckValue(
        what=f"1 {from_} in {to}",
        printed=printed,
        ours=lambda: convert_difference(1.0, find_unit(from_, dimension), find_unit(to, dimension)),
        source=SP_811,
        basis=basis,
        catches=catches,
    )


def celsius(printed: str, fahrenheit: float, catches: str) -> CheckValue:
    """Make the check value of a temperature point, (t/°F − 32)/1.8."""
    return CheckValue(
        what=f"{fahrenheit:g} °F in °C, (t/°F − 32)/1.8",
        printed=printed,
        ours=lambda: convert(fahrenheit, find_unit("°F", "temperature"), find_unit("°C", "temperature")),
        source=SP_811,
        basis="seen",
        catches=catches,
    )


PUBLISHED: list[CheckValue] = [
    factor("6.894757", "pressure", "psi", "kPa", "lb/in2 taken for kg/in2, without g (0.7030696)"),
    factor("98.0665", "pressure", "kgf/cm2", "kPa", "kgf/cm2 taken for a bar (100) or an atmosphere (101.325)"),
    factor("3.386389", "pressure", "inHg", "kPa", "mercury at 60 °F (3.37685) for the conventional column"),
    factor(
        "249.0889", "pressure", "inH2O", "Pa", "water at 60 °F (248.84) or 4 °C (249.082) for the conventional column"
    ),
    factor("1.355818", "torque", "lbf·ft", "N·m", "the inverse factor 0.737562, or kgf·m over lbf·ft (0.138255)"),
    factor("16.38706", "volume", "in3", "cm3", "2.54 squared (6.4516) or not raised at all"),
    factor("3.785412", "volume", "US gal", "L", "the imperial gallon (4.54609)"),
    factor("1.609344", "distance", "mi", "km", "the nautical mile (1.852) or the US survey mile (1.609347)"),
    celsius("0", 32.0, "(t + 32)/1.8, or 1.8 t + 32 turned about"),
    celsius("100", 212.0, "t/1.8 − 32, which leaves the zero inside the division (85.8)"),
    factor("0.5555556", "temperature_difference", "°F", "K", "the zero of the scale applied to a difference (−17.2)"),
    factor("25.4", "length", "in", "mm", "a rounded inch (25.40005, the US survey inch)", "from memory"),
    factor("0.0254", "length", "thou", "mm", "a thousandth taken for a hundredth of an inch (0.254)", "from memory"),
    factor("133.3224", "pressure", "mmHg", "Pa", "kPa left as Pa, or 133.3 as rounded by hand", "from memory"),
    factor("9.80665", "pressure", "mmH2O", "Pa", "g rounded to 9.81", "from memory"),
    factor("4.448222", "force", "lbf", "N", "lbf taken for the pound of mass (0.4535924)", "from memory"),
    factor("0.1129848", "torque", "lbf·in", "N·m", "lbf·ft for lbf·in (1.355818)", "from memory"),
    factor("175.1268", "spring_rate", "lbf/in", "N/m", "lbf/in taken for lbf/ft (14.5939)", "from memory"),
    factor("645.16", "area", "in2", "mm2", "25.4 not squared", "from memory"),
    factor("0.44704", "speed", "mph", "m/s", "km/h for mi/h (0.277778)", "from memory"),
    factor("0.00508", "speed", "ft/min", "m/s", "feet a second (0.3048)", "from memory"),
]
