"""Published values for air: atmosphere, compression and flow through holes."""

from math import pi

from measurements import air
from measurements.check_value import CheckValue

INCH, PSI, LBF = 0.0254, 6894.757, 4.448222  # [m], [Pa], [N], NIST SP 811
SEA_LEVEL = 14.696  # psi


def free_air(diameter: float, gauge_pressure: float) -> float:
    """Free air [ft³/min at 70 °F, 14.696 psi] through a hole [in] from a gauge pressure [psi], coefficient 1."""
    area, kelvin, outside = pi / 4 * (diameter * INCH) ** 2, (70 - 32) / 1.8 + 273.15, SEA_LEVEL * PSI
    flow = air.mass_flow(area, (gauge_pressure + SEA_LEVEL) * PSI, outside, kelvin)
    return flow * air.GAS_CONSTANT * kelvin / outside / 0.3048**3 * 60


_ISO = "ISO 2533:1975, standard atmosphere by geopotential altitude"
_HOLES = "two-orifice model, air, γ 1.4, 14.696 psi (arithmetic on the published compressible-flow law)"
_TABLE = "handbook table of air through an orifice, coefficient 1"

PUBLISHED = [
    CheckValue("120 psi at sea level, read at 5000 ft [psi]", "99.85",
               lambda: air.gauge_at_reference(120, air.SEA_LEVEL_PRESSURE, air.standard_pressure(1524)),
               "arithmetic on ISO 2533:1975", "seen", "taking off what the barometer lost: 117.53"),
    *(
        CheckValue(f"standard pressure at {altitude} m [hPa]", printed,
                   lambda altitude=altitude: air.standard_pressure(altitude) / 100, _ISO, basis,
                   f"isothermal, exp(−h / 8435 m): {other}")
        for altitude, printed, other, basis in (
            (500, "954.608", "954.933", "seen"), (1000, "898.746", "899.973", "seen"),
            (2000, "794.952", "799.360", "seen"), (3000, "701.085", "709.995", "seen"),
            (5000, "540.199", "560.119", "seen"), (11000, "226.32", "275.02", "from memory"),
        )
    ),
    CheckValue("standard temperature at 0 m [K]", "288.150", lambda: air.standard_temperature(0), _ISO, "seen",
               "20 °C in place of 15 °C: 293.150"),
    CheckValue("standard temperature at 11000 m [K]", "216.65", lambda: air.standard_temperature(11000), _ISO,
               "from memory", "1 °C per 100 m: 178.15"),
    CheckValue("240 → 40 cm³ from 1.00e5 Pa [1e5 Pa]", "12.3", lambda: air.end_pressure(1.00, 240 / 40),
               "OpenStax University Physics 2, example 3.7", "seen", "isothermal: 6.0"),
    CheckValue("240 → 40 cm³ from 293 K [K]", "600", lambda: air.end_temperature(293, 240 / 40),
               "OpenStax University Physics 2, example 3.7", "seen", "exponent γ in place of γ − 1: 3600"),
    CheckValue("80 psi on a 4.0 in bore [lbf]", "1005", lambda: air.thrust(80 * PSI, 4.0 * INCH) / LBF,
               "FAA AC 43.13-1B, 8-14", "seen", "bore squared without π/4: 1280"),
    CheckValue("critical pressure ratio of air, γ 1.4", "0.528282", lambda: air.critical_ratio(1.4),
               "two-orifice model, compressible flow", "seen", "temperature ratio 2 / (γ + 1): 0.833333"),
    CheckValue("critical pressure of CO2 from 1400 kPa, γ 1.289 [kPa]", "766.8",
               lambda: 1400 * air.critical_ratio(1.289), "text on fluid mechanics, converging nozzle with CO2", "seen",
               "γ of air: 739.6"),
    CheckValue("choked flow of air, × A p / √(R T)", "0.6847", lambda: air.mass_flow(1, 1, 0, 1, gas_constant=1),
               "White, Fluid Mechanics, choked mass flow with k 1.4", "from memory", "density not thinned: 1.1832"),
    *(
        CheckValue(f"hole that holds {behind} of 80 psi behind 0.040 in [in]", printed,
                   lambda behind=behind: air.equivalent_diameter(0.040, 80, behind, SEA_LEVEL), _HOLES, "seen",
                   f"incompressible on both sides, D (Δp / p)^¼: {other}")
        for behind, printed, other in (
            (78, "0.0220", "0.0160"), (70, "0.0336", "0.0246"), (60, "0.0412", "0.0304"), (40, "0.0525", "0.0400"),
        )
    ),
    CheckValue("reading of 80 psi with equal holes [psi]", "61.77",
               lambda: air.reading_for(0.040, 0.040, 80, SEA_LEVEL), _HOLES, "seen", "half the supply: 40.00"),
    CheckValue("free air through 1/16 in at 5 psi [ft³/min]", "0.993", lambda: free_air(1 / 16, 5), _TABLE, "seen",
               "taken as choked: 1.119"),
    CheckValue("free air through 1/4 in at 5 psi [ft³/min]", "15.9", lambda: free_air(1 / 4, 5), _TABLE, "seen",
               "taken as choked: 17.9"),
]  # fmt: skip

# the rest of the same table agrees within 0.7 %, not to the last digit: diameter [in], psi gauge, free ft³/min at 70 °F
ORIFICE_TABLE = (
    (1 / 16, 5, "0.993"), (1 / 16, 20, "1.96"), (1 / 16, 80, "5.36"), (1 / 16, 100, "6.49"),
    (1 / 4, 5, "15.9"), (1 / 4, 20, "31.4"), (1 / 4, 80, "85.7"),
)  # fmt: skip

# API 520, example 1: kg/h, K, Z, g/mol, γ, Pa, Kd → mm²; its constant is rounded, agreement within 0.01 %
API_520_EXAMPLE = (24270, 348, 0.90, 51, 1.11, 670e3, 0.975, "3699.05")


def api_520_area() -> float:
    """Choked area [mm²] of API 520, example 1, by our own flow law."""
    flow, kelvin, z, molar, gamma, pressure, coefficient, _ = API_520_EXAMPLE
    per_area = air.mass_flow(1, pressure, 0, kelvin, gamma, coefficient, z * 8314.4626 / molar)
    return flow / 3600 / per_area * 1e6
