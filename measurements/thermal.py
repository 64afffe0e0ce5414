"""Sizes at 20 °C: how a part and its gauge grow with temperature, and how sure that is."""

from math import sqrt

REFERENCE = 20.0  # °C, standard reference temperature of sizes (ISO 1)
EXPANSION_SHARE = 0.10  # half-width of an expansion coefficient, as a share of it

# linear expansion [1/°C]; Callister, Materials Science and Engineering, table B.6 (the last three from memory)
MATERIALS = {
    "grey iron": 11.4e-6,
    "steel": 11.7e-6,  # 1020
    "alloy steel": 12.3e-6,  # 4140
    "wrought aluminium": 23.6e-6,  # 6061
    "cast aluminium": 21.5e-6,  # 356.0
    "ductile iron": 11.2e-6,  # 60-40-18
    "bronze": 18.0e-6,  # C93200, bearing bronze
    "brass": 19.9e-6,  # C26000
}


def factor_to_reference(
    part_expansion: float,
    part_temperature: float = REFERENCE,
    gauge_expansion: float = 0.0,
    gauge_temperature: float = REFERENCE,
) -> float:
    """Factor that brings a size as read to 20 °C: 1 + αg (Tg − 20) − αp (Tp − 20).

    Parameters
    ----------
    part_expansion, gauge_expansion : float
        α of the part and of the gauge's scale [1/°C].
    part_temperature, gauge_temperature : float
        Tp and Tg [°C].

    Source: ISO 1; linear expansion, first order (what is left out is under 1e-6 of the size within 40 °C of 20 °C).
    """
    return 1 + gauge_expansion * (gauge_temperature - REFERENCE) - part_expansion * (part_temperature - REFERENCE)


def size_at_reference(
    size: float,
    part_expansion: float,
    part_temperature: float = REFERENCE,
    gauge_expansion: float = 0.0,
    gauge_temperature: float = REFERENCE,
) -> float:
    """Size at 20 °C [unit of `size`] of a part read at other temperatures of part and gauge [°C].

    Source: ISO 1; the example is NPL's worked correction.

    >>> round(size_at_reference(500.035, 11.7e-6, 23.7), 3)
    500.013
    """
    return size * factor_to_reference(part_expansion, part_temperature, gauge_expansion, gauge_temperature)


def temperature_lines(
    size: float,
    part_expansion: float,
    part_temperature: float,
    gauge_expansion: float,
    gauge_temperature: float,
    part_half_width: float = 0.0,
    gauge_half_width: float = 0.0,
) -> list[tuple[str, float]]:
    """Uncertainty that temperature leaves in a size at 20 °C, line by line.

    Parameters
    ----------
    size : float
        [any unit of length]
    part_expansion, gauge_expansion : float
        [1/°C], each known to ±10 %, rectangular.
    part_temperature, gauge_temperature : float
        [°C]
    part_half_width, gauge_half_width : float
        What the temperatures may be off by, ± [°C], rectangular.

    Returns
    -------
    list of (name, standard uncertainty)
        In the unit of `size`; lines of nothing are left out.

    Source: JCGM 100:2008, 4.3.7 (rectangular) and H.1.3 (lengths: L α δT and L δα (T − 20 °C)).

    >>> [(name, round(u, 5)) for name, u in temperature_lines(100, 11.4e-6, 30, 11.7e-6, 20, part_half_width=1)]
    [('temperature of the part', 0.00066), ('expansion of the part', 0.00066)]
    """
    lines = [
        ("temperature of the part", part_expansion * part_half_width),
        ("temperature of the gauge", gauge_expansion * gauge_half_width),
        ("expansion of the part", EXPANSION_SHARE * part_expansion * (part_temperature - REFERENCE)),
        ("expansion of the gauge", EXPANSION_SHARE * gauge_expansion * (gauge_temperature - REFERENCE)),
    ]
    return [(name, abs(size * share) / sqrt(3)) for name, share in lines if share]
