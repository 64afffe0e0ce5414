"""How the trade writes its units: what is offered for each dimension, and every spelling that is taken for it."""

# dimension: (symbol shown, its definition in pint's words, other spellings) …, the usual unit first.
# A "·" in a spelling is a joint: the typed text may have ·, a space, -, . or * there, or nothing at all.
# Superscripts, both µ characters, ℃, curly quotes and a closing full stop are tidied before a spelling is looked up.
OFFERED: dict[str, tuple[tuple[str, str, str], ...]] = {
    "length": (
        ("mm", "millimeter", "millimetre millimetres millimeter millimeters"),
        ("µm", "micrometer", "um µ micron microns micrometre micrometres micrometer micrometers"),
        ("in", "inch", '" inch inches ins'),
        ("thou", "thou", "thous thousandth thousandths"),
        ("cm", "centimeter", "centimetre centimetres centimeter centimeters"),
        ("m", "meter", "metre metres meter meters"),
    ),
    "pressure": (
        ("bar", "bar", "bars"),
        ("kPa", "kilopascal", "kilopascal kilopascals"),
        ("psi", "pound_force_per_square_inch", "p·s·i lbf/in2 lb/in2 lbs/in2 lbf/sq·in lb/sq·in lbs/sq·in"),
        ("kgf/cm2", "kilogram_force / centimeter**2", "kg/cm2 kp/cm2 kgf/sq·cm kg/sq·cm"),
        ("MPa", "megapascal", "megapascal megapascals N/mm2"),
        ("hPa", "hectopascal", "hectopascal hectopascals"),
        ("mbar", "millibar", "mb mbars millibar millibars"),
        ("Pa", "pascal", "pascal pascals"),
        ("inHg", "inch_Hg", 'in·Hg "·Hg inch·Hg inches·Hg'),
        ("mmHg", "millimeter_Hg", "mm·Hg"),
        ("inH2O", "inch_H2O", 'in·H2O "·H2O inch·H2O inches·H2O in·W·C in·W·G "·W·C "·W·G'),
        ("mmH2O", "millimeter_H2O", "mm·H2O mm·W·C mm·W·G"),
    ),
    "ratio": (("%", "percent", "percent per·cent pct"), ("1", "dimensionless", "")),
    "temperature": (
        ("°C", "degree_Celsius", "°·C C deg·C degree·C degrees·C celsius deg·celsius degrees·celsius"),
        ("°F", "degree_Fahrenheit", "°·F F deg·F degree·F degrees·F fahrenheit deg·fahrenheit degrees·fahrenheit"),
        ("K", "kelvin", "kelvin kelvins"),
    ),
    "temperature_difference": (
        ("K", "kelvin", "kelvin kelvins"),
        ("°C", "delta_degree_Celsius", "°·C C deg·C degree·C degrees·C celsius deg·celsius degrees·celsius"),
        (
            "°F",
            "delta_degree_Fahrenheit",
            "°·F F deg·F degree·F degrees·F fahrenheit deg·fahrenheit degrees·fahrenheit",
        ),
    ),
    "torque": (
        ("N·m", "newton * meter", "newton·metre newton·metres newton·meter newton·meters"),
        (
            "lbf·ft",
            "pound_force * foot",
            "lb·ft lbs·ft ft·lb ft·lbs ft·lbf foot·pound foot·pounds pound·foot pound·feet pounds·feet",
        ),
        (
            "lbf·in",
            "pound_force * inch",
            "lb·in lbs·in in·lb in·lbs in·lbf inch·lb inch·lbs inch·pound inch·pounds pound·inch pound·inches",
        ),
        ("kgf·m", "kilogram_force * meter", "kg·m m·kg m·kgf kp·m m·kp"),
        ("kgf·cm", "kilogram_force * centimeter", "kg·cm cm·kg kp·cm"),
        ("N·cm", "newton * centimeter", ""),
    ),
    "force": (
        ("N", "newton", "newton newtons"),
        ("kN", "kilonewton", "kilonewton kilonewtons"),
        ("lbf", "pound_force", "lb lbs pound pounds"),
        ("kgf", "kilogram_force", "kg kp"),
    ),
    "spring_rate": (
        ("N/mm", "newton / millimeter", ""),
        ("lbf/in", "pound_force / inch", 'lb/in lbs/in lbf/inch lb/inch lbf/" lb/"'),
        ("kgf/mm", "kilogram_force / millimeter", "kg/mm kp/mm"),
        ("N/m", "newton / meter", ""),
    ),
    "volume": (
        ("L", "liter", "l litre litres liter liters ltr"),
        ("mL", "milliliter", "millilitre millilitres milliliter milliliters"),
        ("cm3", "centimeter**3", "cc ccm cu·cm cubic·centimetre cubic·centimetres"),
        ("in3", "inch**3", "cu·in cubic·inch cubic·inches"),
        ("US gal", "gallon", "US·gal US·gallon US·gallons"),
        ("m3", "meter**3", "cubic·metre cubic·metres"),
    ),
    "area": (
        ("mm2", "millimeter**2", "sq·mm"),
        ("cm2", "centimeter**2", "sq·cm"),
        ("in2", "inch**2", "sq·in square·inch square·inches"),
        ("m2", "meter**2", "sq·m"),
    ),
    "kinematic_viscosity": (
        ("mm2/s", "millimeter**2 / second", "mm2/sec"),
        ("cSt", "centistokes", "centistoke centistokes"),
    ),
    "rotational_speed": (("rpm", "revolution / minute", "r/min rev/min revs/min 1/min /min min·1 U/min"),),
    "speed": (
        ("m/s", "meter / second", "m/sec"),
        ("ft/min", "foot / minute", "fpm"),
        ("ft/s", "foot / second", "fps ft/sec"),
        ("km/h", "kilometer / hour", "kmh kph km/hr"),
        ("mph", "mile / hour", "mi/h"),
    ),
    "concentration": (("ppm", "ppm", ""), ("mg/kg", "milligram / kilogram", "")),
    "time": (
        ("h", "hour", "H hr hrs hour hours"),
        ("min", "minute", "mins minute minutes"),
        ("s", "second", "sec secs second seconds"),
        ("d", "day", "day days"),
    ),
    "distance": (
        ("km", "kilometer", "kilometre kilometres kilometer kilometers"),
        ("mi", "mile", "mile miles"),
        ("m", "meter", "metre metres meter meters"),
    ),
    "angle": (("°", "degree", "deg degs degree degrees °·CA deg·CA"),),
    "base_number": (("mg KOH/g", "milligram / gram", "mg·KOH/g"),),
    "flow": (
        ("L/min", "liter / minute", "lpm"),
        ("ft3/min", "foot**3 / minute", "cfm cu·ft/min"),
        ("m3/h", "meter**3 / hour", "m3/hr"),
    ),
    "expansion": (
        ("1/K", "1 / kelvin", "/K K·1 1/°C /°C"),
        ("µm/(m·K)", "micrometer / meter / kelvin", "um/(m·K) µm/m·K um/m·K µm/m/K ppm/K ppm/°C µm/(m·°C) µm/m·°C"),
        ("1/°F", "1 / delta_degree_Fahrenheit", "/°F"),
    ),
    "count": (("1", "dimensionless", ""),),
}

# Written exactly so these are other units: capitals are forgiven (PSI, MM), but never across these.
WRITTEN_SO_IT_IS_ANOTHER: dict[str, dict[str, str]] = {
    "length": {"Mm": "a megametre", "nm": "a nanometre"},
    "pressure": {"mPa": "a millipascal", "Mbar": "a megabar"},
    "force": {"mN": "a millinewton", "MN": "a meganewton"},
    "torque": {
        "mN·m": "a millinewton metre",
        "mNm": "a millinewton metre",
        "MN·m": "a meganewton metre",
        "MNm": "a meganewton metre",
    },
    "volume": {"Ml": "a megalitre"},
}

# Words that the trade uses for two different units, by their case-folded spelling.
MEANS_TWO_THINGS: dict[str, tuple[str, str]] = {
    "mil": ("thou", "mm"),
    "mils": ("thou", "mm"),
    "gal": ("US gal", "L (an imperial gallon is 4.54609 L)"),
    "gallon": ("US gal", "L (an imperial gallon is 4.54609 L)"),
    "gallons": ("US gal", "L (an imperial gallon is 4.54609 L)"),
}
