"""Published values for sizes at 20 °C."""

from measurements.check_value import CheckValue
from measurements.thermal import MATERIALS, size_at_reference, temperature_lines


def nanometres(name: str, **figures: float) -> float:
    """One line [nm] of a 50 mm gauge block's budget."""
    return 1e6 * dict(temperature_lines(50, **figures))[name]


_CALLISTER = "Callister, Materials Science and Engineering, table B.6, 1e-6/°C"

PUBLISHED = [
    CheckValue("500.035 mm read at 23.7 °C, steel: at 20 °C [mm]", "500.013",
               lambda: size_at_reference(500.035, 11.7e-6, 23.7), "NPL, worked temperature correction", "seen",
               "sign turned round: 500.057"),
    CheckValue("u of 50 mm from ±0.05 °C between part and gauge, 11.5e-6 [nm]", "16.6",
               lambda: nanometres("temperature of the part", part_expansion=11.5e-6, part_temperature=19.9,
                                  gauge_expansion=11.5e-6, gauge_temperature=19.9, part_half_width=0.05),
               "JCGM 100:2008, H.1, table H.1", "seen", "half-width taken as standard uncertainty: 28.8"),
    CheckValue("u of 50 mm, 0.1 °C off 20, expansion within ±1e-6 (10 % of 10e-6) [nm]", "2.9",
               lambda: nanometres("expansion of the part", part_expansion=10e-6, part_temperature=19.9,
                                  gauge_expansion=10e-6, gauge_temperature=19.9),
               "JCGM 100:2008, H.1, table H.1", "seen", "half-width taken as standard uncertainty: 5.0"),
    *(
        CheckValue(f"expansion of {name} [1e-6/°C]", printed, lambda name=name: 1e6 * MATERIALS[name], _CALLISTER,
                   basis, f"the table's other column, per °F: {other}")
        for name, printed, other, basis in (
            ("grey iron", "11.4", "6.3", "seen"), ("steel", "11.7", "6.5", "seen"),
            ("alloy steel", "12.3", "6.8", "seen"), ("wrought aluminium", "23.6", "13.1", "seen"),
            ("cast aluminium", "21.5", "11.9", "seen"),
            ("ductile iron", "11.2", "6.2", "from memory"), ("bronze", "18.0", "10.0", "from memory"),
            ("brass", "19.9", "11.1", "from memory"),
        )
    ),
]  # fmt: skip
