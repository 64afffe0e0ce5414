"""Air: barometer and gauge pressure, compression, and flow through small holes."""

from dataclasses import dataclass
from math import inf, isfinite, pi, sqrt

from measurements.sentence import Refusal

GAMMA = 1.4  # ratio of specific heats of air
GAS_CONSTANT = 287.05287  # of air [J/(kg K)], ISO 2533:1975
SEA_LEVEL_PRESSURE, SEA_LEVEL_TEMPERATURE = 101325.0, 288.15  # [Pa], [K], ISO 2533:1975
LAPSE, GRAVITY = 0.0065, 9.80665  # [K/m], [m/s²], ISO 2533:1975
LOWEST, TROPOPAUSE = -2000.0, 11000.0  # [m]


def gauge_at_reference(gauge_pressure: float, barometer: float, reference: float = SEA_LEVEL_PRESSURE) -> float:
    """Gauge pressure of a compression test as it would read at a reference barometer: p_g · p0 / p.

    Both the air drawn in and the pressure it is compressed to scale with the barometer, so the gauge reading does.

    Parameters
    ----------
    gauge_pressure : float
        [any unit]
    barometer, reference : float
        Station pressure and reference [one unit, absolute].

    Raises
    ------
    Refusal
        When a barometer is not above zero.

    >>> round(gauge_at_reference(120, barometer=101325, reference=standard_pressure(1524)), 2)   # psi, at 5000 ft
    99.85
    """
    _refuse_no_barometer(barometer)
    _refuse_no_barometer(reference)
    return gauge_pressure * reference / barometer


def absolute(gauge_pressure: float, barometer: float) -> float:
    """Absolute pressure of a gauge pressure [one unit].

    Raises
    ------
    Refusal
        When it would be below nothing.
    """
    _refuse_no_barometer(barometer)
    if not gauge_pressure + barometer >= 0:
        raise Refusal("Read {read} gauge, which is below an absolute vacuum at a barometer of {barometer}: check the "
                      "unit, or write abs.", read=gauge_pressure, barometer=barometer)  # fmt: skip
    return gauge_pressure + barometer


def gauge(absolute_pressure: float, barometer: float) -> float:
    """Gauge pressure of an absolute pressure [one unit].

    Raises
    ------
    Refusal
        When the absolute pressure is below nothing.
    """
    _refuse_no_barometer(barometer)
    if not absolute_pressure >= 0:
        raise Refusal("Read {read} absolute; an absolute pressure can't be below zero.", read=absolute_pressure)
    return absolute_pressure - barometer


def end_pressure(start: float, ratio: float, gamma: float = GAMMA) -> float:
    """Absolute pressure [unit of `start`] of air compressed isentropically to 1/`ratio` of its volume.

    >>> f"{end_pressure(1.00e5, 240 / 40):.2e}"   # OpenStax University Physics 2, example 3.7
    '1.23e+06'
    """
    return start * ratio**gamma


def end_temperature(start: float, ratio: float, gamma: float = GAMMA) -> float:
    """Temperature [K] of air compressed isentropically to 1/`ratio` of its volume from `start` [K].

    >>> f"{end_temperature(293, 240 / 40):.0f}"   # OpenStax University Physics 2, example 3.7: 600 K
    '600'
    """
    return start * ratio ** (gamma - 1)


def standard_temperature(altitude: float) -> float:
    """Temperature [K] of the standard atmosphere at an altitude [m] from −2000 to 11000.

    Source: ISO 2533:1975, geopotential altitude.

    >>> round(standard_temperature(1000), 2)
    281.65
    """
    if not LOWEST <= altitude <= TROPOPAUSE:
        raise Refusal("Read an altitude of {read} m; the standard atmosphere is known here from −2000 to 11000 m.",
                      read=altitude)  # fmt: skip
    return SEA_LEVEL_TEMPERATURE - LAPSE * altitude


def standard_pressure(altitude: float) -> float:
    """Pressure [Pa] of the standard atmosphere at an altitude [m] from −2000 to 11000.

    Source: ISO 2533:1975, geopotential altitude.

    >>> round(standard_pressure(3000) / 100, 3)   # hPa
    701.085
    """
    share = standard_temperature(altitude) / SEA_LEVEL_TEMPERATURE
    return SEA_LEVEL_PRESSURE * share ** (GRAVITY / (LAPSE * GAS_CONSTANT))


def thrust(gauge_pressure: float, bore: float) -> float:
    """Force [N] of air at a gauge pressure [Pa] on a piston of a bore [m]: what can turn the crank in a leak-down test.

    >>> round(thrust(80 * 6894.757, 4.0 * 0.0254) / 4.448222)   # 80 psi on 4 in, lbf: FAA AC 43.13-1B, 8-14
    1005
    """
    return gauge_pressure * pi / 4 * bore**2


def critical_ratio(gamma: float = GAMMA) -> float:
    """Downstream over upstream absolute pressure at which the flow through a hole chokes.

    >>> round(critical_ratio(), 6)
    0.528282
    """
    return (2 / (gamma + 1)) ** (gamma / (gamma - 1))


def mass_flow(
    area: float, upstream: float, downstream: float, temperature: float,
    gamma: float = GAMMA, coefficient: float = 1.0, gas_constant: float = GAS_CONSTANT,
) -> float:  # fmt: skip
    """Mass flow [kg/s] of a gas through a hole, isentropic, choked or not.

    Parameters
    ----------
    area : float
        Of the hole [m²].
    upstream, downstream : float
        [Pa absolute]
    temperature : float
        Upstream [K].
    coefficient : float
        Discharge coefficient.
    gas_constant : float
        [J/(kg K)]

    Raises
    ------
    Refusal
        When the pressure does not fall in the direction of flow.

    Source: compressible flow through a converging nozzle; with γ 1.4, choked, 0.6847 A p/√(R T) (White, from memory).
    """
    return coefficient * area * _drive(upstream, downstream, gamma) / sqrt(gas_constant * temperature)


def equivalent_diameter(orifice: float, supply: float, reading: float, barometer: float, gamma: float = GAMMA) -> float:
    """Diameter of the hole that passes to the atmosphere what a tester's orifice passes from supply to cylinder.

    Parameters
    ----------
    orifice : float
        Diameter of the tester's orifice [any unit].
    supply, reading : float
        Gauge pressures before and behind the orifice.
    barometer : float
        Absolute, in the unit of the pressures.

    Returns
    -------
    float
        [unit of `orifice`]; 0 where nothing is lost, infinite where nothing is held.

    Raises
    ------
    Refusal
        When the reading is below zero or above the supply.

    Source: two holes of one form in line, air of one temperature: D² F(S, R) = d² F(R, A).

    >>> round(equivalent_diameter(0.040, supply=80, reading=60, barometer=14.696), 4)
    0.0412
    """
    _refuse_no_barometer(barometer)
    if not supply > 0:
        raise Refusal("Read a supply of {read}; it must be above zero.", read=supply)
    if not 0 <= reading <= supply:
        raise Refusal("Read {read} behind the orifice at a supply of {supply}; it must lie between 0 and the supply.",
                      read=reading, supply=supply)  # fmt: skip
    if not reading:
        return inf
    held = reading + barometer
    return orifice * sqrt(_drive(supply + barometer, held, gamma) / _drive(held, barometer, gamma))


@dataclass(frozen=True)
class HoleSlopes:
    """How the equivalent diameter changes with each figure it comes from (diameter unit per unit of the figure)."""

    orifice: float
    supply: float
    reading: float
    barometer: float


def equivalent_diameter_slopes(
    orifice: float, supply: float, reading: float, barometer: float, gamma: float = GAMMA
) -> HoleSlopes:
    """Slopes of `equivalent_diameter` for the propagation of uncertainty; same arguments.

    Raises
    ------
    Refusal
        Also where the slopes are endless: a reading of nothing or of the whole supply.

    Source: derivative of the two-orifice model; F(u, d) grows with both pressures alike, so u F_u + d F_d = F.
    """
    if not 0 < reading < supply:
        raise Refusal("Read {read} behind the orifice at a supply of {supply}; at nothing or all there is no telling "
                      "how sure the hole is.", read=reading, supply=supply)  # fmt: skip
    hole = equivalent_diameter(orifice, supply, reading, barometer, gamma)
    fed_up, fed_down = _relative_slopes(supply + barometer, reading + barometer, gamma)
    lost_up, lost_down = _relative_slopes(reading + barometer, barometer, gamma)
    by_supply, by_reading = hole / 2 * fed_up, hole / 2 * (fed_down - lost_up)
    return HoleSlopes(hole / orifice, by_supply, by_reading, by_supply + by_reading - hole / 2 * lost_down)


def reading_for(hole: float, orifice: float, supply: float, barometer: float, gamma: float = GAMMA) -> float:
    """Gauge pressure a tester holds when the cylinder leaks through a hole of its orifice's form.

    Parameters
    ----------
    hole, orifice : float
        Diameters [one unit].
    supply, barometer : float
        Gauge and absolute [one unit].

    Source: the two-orifice model turned round, by halving.

    >>> round(reading_for(0.040, 0.040, supply=80, barometer=14.696), 2)   # equal holes
    61.77
    """
    low, high = 0.0, supply
    for _ in range(100):
        middle = (low + high) / 2
        if equivalent_diameter(orifice, supply, middle, barometer, gamma) > hole:
            low = middle
        else:
            high = middle
    return (low + high) / 2


def _drive(upstream: float, downstream: float, gamma: float) -> float:
    """Flow per area and √(R T)⁻¹ between two absolute pressures; level once choked."""
    if not upstream >= downstream >= 0 or not upstream > 0:
        raise Refusal("Read {upstream} before and {downstream} behind a hole; air flows to the lower absolute "
                      "pressure.", upstream=upstream, downstream=downstream)  # fmt: skip
    ratio = max(downstream / upstream, critical_ratio(gamma))
    return upstream * sqrt(2 * gamma / (gamma - 1) * (ratio ** (2 / gamma) - ratio ** ((gamma + 1) / gamma)))


def _relative_slopes(upstream: float, downstream: float, gamma: float) -> tuple[float, float]:
    """Slopes of ln F with the upstream and the downstream pressure."""
    ratio = downstream / upstream
    if ratio <= critical_ratio(gamma):
        return 1 / upstream, 0.0
    fall = ratio ** (2 / gamma) - ratio ** ((gamma + 1) / gamma)
    by_ratio = (2 / gamma * ratio ** (2 / gamma - 1) - (gamma + 1) / gamma * ratio ** (1 / gamma)) / (2 * fall)
    return (1 - ratio * by_ratio) / upstream, by_ratio / upstream


def _refuse_no_barometer(barometer: float) -> None:
    if not (isfinite(barometer) and barometer > 0):
        raise Refusal("Read a barometer of {read}; it must be above zero: give the station pressure.", read=barometer)
