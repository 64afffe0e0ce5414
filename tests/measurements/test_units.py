"""Units: sizes against published factors and the legal definitions, spellings of the trade, exact conversion."""

from decimal import Decimal
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from measurements.published.units import PUBLISHED
from measurements.sentence import Refusal
from measurements.unit_words import OFFERED
from measurements.units import DIMENSIONS, Unit, convert, convert_difference, find_unit, registry, to_si

INCH, POUND, GRAVITY = (
    Fraction("0.0254"),
    Fraction("0.45359237"),
    Fraction("9.80665"),
)  # international, since 1959 and 1901
EVERY_UNIT = [unit for units in DIMENSIONS.values() for unit in units]

# Defined sizes; the columns of water and mercury by their conventional densities, 1000 and 13595.1 kg/m3 (NIST SP 811).
DEFINED = [
    ("in", "length", INCH),
    ("thou", "length", INCH / 1000),
    ("µm", "length", Fraction(1, 10**6)),
    ("psi", "pressure", POUND * GRAVITY / INCH**2),
    ("kgf/cm2", "pressure", GRAVITY * 10**4),
    ("inHg", "pressure", INCH * Fraction("13595.1") * GRAVITY),
    ("mmHg", "pressure", Fraction("13.5951") * GRAVITY),
    ("inH2O", "pressure", INCH * 1000 * GRAVITY),
    ("mmH2O", "pressure", GRAVITY),
    ("hPa", "pressure", Fraction(100)),
    ("mbar", "pressure", Fraction(100)),
    ("lbf·ft", "torque", POUND * GRAVITY * 12 * INCH),
    ("lbf·in", "torque", POUND * GRAVITY * INCH),
    ("kgf·m", "torque", GRAVITY),
    ("kgf·cm", "torque", GRAVITY / 100),
    ("lbf", "force", POUND * GRAVITY),
    ("kgf", "force", GRAVITY),
    ("lbf/in", "spring_rate", POUND * GRAVITY / INCH),
    ("N/mm", "spring_rate", Fraction(1000)),
    ("kgf/mm", "spring_rate", GRAVITY * 1000),
    ("in3", "volume", INCH**3),
    ("L", "volume", Fraction(1, 1000)),
    ("US gal", "volume", 231 * INCH**3),
    ("in2", "area", INCH**2),
    ("mm2/s", "kinematic_viscosity", Fraction(1, 10**6)),
    ("cSt", "kinematic_viscosity", Fraction(1, 10**6)),
    ("km/h", "speed", Fraction(1000, 3600)),
    ("mph", "speed", Fraction("1609.344") / 3600),
    ("ft/min", "speed", 12 * INCH / 60),
    ("ft/s", "speed", 12 * INCH),
    ("mi", "distance", 63360 * INCH),
    ("ppm", "concentration", Fraction(1, 10**6)),
    ("mg/kg", "concentration", Fraction(1, 10**6)),
    ("d", "time", Fraction(86400)),
    ("h", "time", Fraction(3600)),
    ("L/min", "flow", Fraction(1, 60000)),
    ("ft3/min", "flow", (12 * INCH) ** 3 / 60),
    ("m3/h", "flow", Fraction(1, 3600)),
    ("%", "ratio", Fraction(1, 100)),
    ("mg KOH/g", "base_number", Fraction(1, 1000)),
    ("µm/(m·K)", "expansion", Fraction(1, 10**6)),
    ("1/°F", "expansion", Fraction(9, 5)),
    ("°F", "temperature_difference", Fraction(5, 9)),
    ("1", "count", Fraction(1)),
]


@pytest.mark.parametrize("value", PUBLISHED, ids=lambda value: value.what)
def test_conversion_agrees_with_print(value):
    assert value.agrees(), f"{value.computed()} against {value.printed} in {value.source}"


@pytest.mark.parametrize(("symbol", "dimension", "size"), DEFINED)
def test_unit_has_exactly_its_defined_size(symbol, dimension, size):
    assert find_unit(symbol, dimension).scale == size


@pytest.mark.parametrize(
    ("symbol", "size", "zero"),
    [
        ("°C", Fraction(1), Fraction("273.15")),
        ("°F", Fraction(5, 9), Fraction("459.67") * 5 / 9),
        ("K", Fraction(1), Fraction(0)),
    ],
)
def test_temperature_point_has_its_size_and_zero(symbol, size, zero):
    unit = find_unit(symbol, "temperature")

    assert (unit.scale, unit.offset) == (size, zero)


@pytest.mark.parametrize(
    ("symbol", "dimension", "size"),
    [
        ("rpm", "rotational_speed", "0.1047197551196597746"),
        ("°", "angle", "0.0174532925199432958"),
    ],
)
def test_unit_of_angle_has_its_size_to_more_digits_than_a_double_holds(symbol, dimension, size):
    # 2 pi / 60 and pi / 180 to 19 digits, from memory of pi 3.141592653589793238
    assert abs(float(find_unit(symbol, dimension).scale) / float(Decimal(size)) - 1) < 2**-52


@pytest.mark.parametrize("dimension", OFFERED)
def test_all_units_of_a_dimension_measure_the_same_thing(dimension):
    definitions = [definition for _, definition, _ in OFFERED[dimension]]

    measured = {frozenset(registry().parse_units(definition).dimensionality.items()) for definition in definitions}

    assert len(measured) == 1


SPELLED = [  # dimension, symbol, spellings parted by spaces
    ("length", "mm", "mm MM Millimetre millimeters mm."),
    ("length", "µm", "µm μm um micron MICRONS"),
    ("length", "in", "in IN In. inch Inches \" ″ ” ''"),
    ("length", "thou", "thou THOU thousandths"),
    ("pressure", "psi", "psi PSI p.s.i. lbf/in² lb/in2 lb/sq.in"),
    ("pressure", "bar", "bar Bar BAR"),
    ("pressure", "kgf/cm2", "kgf/cm2 kg/cm² kp/cm^2 KG/CM2"),
    ("pressure", "kPa", "kPa kpa KPA"),
    ("pressure", "MPa", "MPa MPA mpa N/mm²"),
    ("pressure", "mbar", "mbar MBAR mb"),
    ("pressure", "inHg", 'inHg "Hg in.Hg INHG'),
    ("pressure", "inH2O", 'inH2O inH₂O "H2O inWC'),
    ("temperature", "°C", "°C ℃ ºC C degC Celsius °c"),
    ("temperature", "°F", "°F ℉ F degF Fahrenheit"),
    ("temperature", "K", "K kelvin \u212a"),
    ("torque", "N·m", "N·m Nm N.m N-m N*m NM newton-metre"),
    ("torque", "lbf·ft", "lbf·ft ft-lb ftlb ft·lbf lb-ft FT-LBS foot-pounds"),
    ("torque", "lbf·in", "in-lb lbf·in inch-pounds"),
    ("torque", "kgf·m", "kgf·m kgm m·kg kg-m"),
    ("force", "kN", "kN KN kn"),
    ("force", "lbf", "lbf lb LBS"),
    ("spring_rate", "lbf/in", 'lbf/in lb/in lb/"'),
    ("volume", "L", "L l litre liters"),
    ("volume", "cm3", "cm³ cc cm3 CC cm^3"),
    ("volume", "in3", "in³ cu.in in3"),
    ("kinematic_viscosity", "cSt", "cSt CST cst"),
    ("rotational_speed", "rpm", "rpm RPM r/min 1/min min⁻¹ min^-1 U/min"),
    ("time", "h", "h H hr hours"),
    ("time", "min", "min mins MIN"),
    ("distance", "mi", "mi mile Miles"),
    ("angle", "°", "° deg degrees °CA"),
    ("flow", "ft3/min", "cfm CFM ft³/min"),
    ("expansion", "1/K", "1/K /K K⁻¹ K^-1 1/°C"),
    ("ratio", "%", "% percent ％"),
    ("base_number", "mg KOH/g", "mgKOH/g"),
]


@pytest.mark.parametrize(
    ("dimension", "symbol", "spelling"),
    [(dimension, symbol, spelling) for dimension, symbol, spellings in SPELLED for spelling in spellings.split()],
)
def test_spelling_of_the_trade_is_understood(dimension, symbol, spelling):
    assert find_unit(spelling, dimension).symbol == symbol


@pytest.mark.parametrize(
    ("dimension", "symbol", "spelling"),
    [
        ("torque", "lbf·ft", "ft lb"),
        ("torque", "N·m", " N m "),
        ("pressure", "inHg", "in Hg"),
        ("pressure", "kgf/cm2", "kg / cm2"),
        ("temperature", "°C", "deg C"),
        ("temperature", "°F", "° F"),
        ("volume", "US gal", "US gal"),
        ("base_number", "mg KOH/g", "mg KOH/g"),
        ("volume", "in3", "cu. in."),
        ("pressure", "inH2O", "in. W.C."),
    ],
)
def test_spelling_with_spaces_is_understood(dimension, symbol, spelling):
    assert find_unit(spelling, dimension).symbol == symbol


def test_no_spelling_of_a_dimension_stands_for_two_of_its_units():
    for dimension, units in OFFERED.items():
        owners: dict[str, str] = {}
        for symbol, _, others in units:
            for spelling in (symbol, *others.split()):
                folded = spelling.replace("·", "").casefold()
                assert owners.setdefault(folded, symbol) == symbol, (dimension, spelling)


REFUSED = [
    (
        "mPa",
        "pressure",
        "Read “mPa”, which written so is a millipascal; the units that fit here are bar, kPa, psi, kgf/cm2, MPa, "
        "hPa, mbar, Pa, inHg, mmHg, inH2O, mmH2O.",
    ),
    ("mN", "force", "Read “mN”, which written so is a millinewton; the units that fit here are N, kN, lbf, kgf."),
    ("MN", "force", "Read “MN”, which written so is a meganewton; the units that fit here are N, kN, lbf, kgf."),
    ("psi", "length", "Read “psi”, a unit of pressure; a unit of length is needed here: mm, µm, in, thou, cm, m."),
    ("ell", "force", "Read “ell” where a unit of force is needed; those that fit are N, kN, lbf, kgf."),
    ("gal", "volume", "Read “gal”, which is used for two units; write US gal or L (an imperial gallon is 4.54609 L)."),
    ("ell", None, "Read “ell”, which is no unit that is known here."),
    ("", None, "Read “”, which is no unit that is known here."),
    ("mm", "colour", "Read “colour”, which is no dimension that is measured here."),
    (None, "length", "Read 'NoneType' in place of a unit; write it as text."),
    ("k", "temperature", "Read “k” where a unit of temperature is needed; those that fit are °C, °F, K."),
]


@pytest.mark.parametrize(("text", "dimension", "sentence"), REFUSED)
def test_unit_that_does_not_fit_is_refused_with_those_that_do(text, dimension, sentence):
    with pytest.raises(Refusal) as refused:
        find_unit(text, dimension)

    assert str(refused.value) == sentence


def test_without_a_dimension_the_first_that_knows_the_spelling_answers():
    assert [find_unit(text).dimension for text in ("m", "°C", "%", "rpm", "1", "mi")] == [
        "length",
        "temperature",
        "ratio",
        "rotational_speed",
        "ratio",
        "distance",
    ]


@pytest.mark.parametrize(
    ("value", "symbol", "dimension", "si"),
    [
        (0.18, "mm", "length", 0.00018),
        (0.57, "mm", "length", 0.00057),
        (1.1, "mm", "length", 0.0011),
        (12.0, "bar", "pressure", 1.2e6),
        (20.0, "°C", "temperature", 293.15),
        (11.7, "µm/(m·K)", "expansion", 1.17e-05),
        (3.3, "%", "ratio", 0.033),
    ],
)
def test_short_decimal_stays_one_in_si_units(value, symbol, dimension, si):
    assert to_si(value, find_unit(symbol, dimension)) == si


@pytest.mark.parametrize(
    ("value", "from_", "to", "point", "difference"),
    [
        (32.0, "°F", "°C", 0.0, 160 / 9),
        (-40.0, "°F", "°C", -40.0, -200 / 9),
        (20.0, "°C", "K", 293.15, 20.0),
        (25.0, "°C", "°F", 77.0, 45.0),
    ],
)
def test_temperature_is_a_point_or_a_difference(value, from_, to, point, difference):
    one, other = find_unit(from_, "temperature"), find_unit(to, "temperature")

    assert (convert(value, one, other), convert_difference(value, one, other)) == (point, difference)


def test_difference_may_go_from_a_points_scale_to_a_differences():
    assert convert_difference(9.0, find_unit("°F", "temperature"), find_unit("K", "temperature_difference")) == 5.0


def test_units_of_two_dimensions_are_not_converted():
    with pytest.raises(Refusal) as refused:
        convert(1.0, find_unit("mm"), find_unit("bar"))

    assert str(refused.value) == "Read “mm”, a unit of length, which can't be converted to “bar”, a unit of pressure."


@pytest.mark.parametrize(
    ("value", "sentence"),
    [
        (float("nan"), "Read nan, which is no finite number and can't be converted."),
        (float("-inf"), "Read -inf, which is no finite number and can't be converted."),
        ("x", "Read 'x', which is no finite number and can't be converted."),
        (1e308, "Read a value that is too large to be converted."),
    ],
)
def test_what_is_no_finite_number_is_not_converted(value, sentence):
    with pytest.raises(Refusal) as refused:
        convert(value, find_unit("bar"), find_unit("Pa"))

    assert str(refused.value) == sentence


def test_every_dimension_is_offered_with_its_usual_unit_first():
    assert {dimension: units[0].symbol for dimension, units in DIMENSIONS.items()} == {
        "length": "mm", "pressure": "bar", "ratio": "%", "temperature": "°C", "temperature_difference": "K", "torque": "N·m",
        "force": "N", "spring_rate": "N/mm", "volume": "L", "area": "mm2", "kinematic_viscosity": "mm2/s",
        "rotational_speed": "rpm", "speed": "m/s", "concentration": "ppm", "time": "h", "distance": "km", "angle": "°",
        "base_number": "mg KOH/g", "flow": "L/min", "expansion": "1/K", "count": "1",
    }  # fmt: skip
    assert "colour" not in DIMENSIONS and len(DIMENSIONS) == 21


@given(st.sampled_from(EVERY_UNIT), st.data(), st.decimals(min_value=0, max_value=10**6, places=4))
def test_conversion_is_the_exact_quotient_rounded_once(from_: Unit, data, value):
    to = data.draw(st.sampled_from(DIMENSIONS[from_.dimension]))

    exact = (Fraction(value) * from_.scale + from_.offset - to.offset) / to.scale

    assert convert(float(value), from_, to) == float(exact)


@given(st.sampled_from(EVERY_UNIT), st.data(), st.floats(min_value=1e-9, max_value=1e9))
def test_there_and_back_is_the_same_value_to_the_last_places(from_: Unit, data, value):
    to = data.draw(st.sampled_from(DIMENSIONS[from_.dimension]))

    back = convert(convert(value, from_, to), to, from_)

    assert back == pytest.approx(value, rel=1e-15, abs=1e-12)


@given(st.text(max_size=60), st.sampled_from([None, *OFFERED]))
def test_any_text_is_a_unit_of_the_dimension_asked_for_or_refused(text, dimension):
    try:
        unit = find_unit(text, dimension)
    except Refusal:
        return
    assert unit in DIMENSIONS[dimension or unit.dimension]
