"""What brings a size to reference conditions: a comparator's setting, and the temperatures of part and gauge."""

from collections.abc import Mapping

from measurements.gauge import Line, rectangular
from measurements.kind import Reference
from measurements.sentence import say
from measurements.thermal import MATERIALS, REFERENCE, factor_to_reference, temperature_lines
from measurements.units import Unit

ICE_POINT = 273.15  # K


def comparator_reference(unit: Unit, conditions: Mapping[str, object], typed_units: Mapping[str, Unit]) -> Reference:
    """Turn signed deviations into sizes: set size + deviation − mean zero, with the master's and the zero's lines.

    A zero that moved more than a division (of the gauge's resolution where none is given) flags all readings between.
    """
    if "set_size" not in conditions:
        return Reference()
    scale = float(unit.scale)
    set_size = conditions["set_size"] / scale
    zeros = [conditions[name] / scale for name in ("zero_before", "zero_after") if name in conditions]
    zero = sum(zeros) / len(zeros) if zeros else 0.0
    lines, notes = [], []
    if "set_uncertainty" in conditions:
        lines.append(
            Line(
                "setting master",
                "certificate, k = 2",
                conditions["set_uncertainty"] / scale / 2,
                shared="setting master",
            )
        )
    else:
        notes.append(say("u is a lower bound: the setting master's uncertainty is not given."))
    if len(zeros) == 2:
        drift = abs(zeros[1] - zeros[0])
        if drift:
            lines.append(
                Line("comparator zero", "rectangular", rectangular(drift / 2))
            )  # it moved while readings were taken
        division = conditions.get("division", conditions.get("gauge_resolution", 0.0)) / scale
        if drift > division * (1 + 1e-9):
            notes.append(say("The comparator's zero moved by {drift} {unit} during this pass: set it again and measure again.",
                             drift=drift, unit=unit.symbol))  # fmt: skip
    else:
        notes.append(say("The comparator's zero is not given both before and after."))
    told = say("size = set {size} {unit} + deviation − zero {zero}", size=set_size, unit=unit.symbol, zero=zero)
    return Reference(1.0, set_size - zero, tuple(lines), (told,), tuple(notes))


def size_reference(unit: Unit, conditions: Mapping[str, object], before: Reference) -> Reference:
    """Refer a size to 20 °C (ISO 1) where the part's temperature and material are given; `before` is applied first.

    `conditions["value"]` is the entry [SI] that the reference is asked for. Without the part's material nothing is
    assumed: the size stands as taken, and a note says so. The same holds for the gauge.
    """
    part = conditions.get("part_temperature")
    if part is None and "gauge_temperature" in conditions:
        return add_note(before, say("The gauge's temperature is given but not the part's: not referred to 20 °C."))
    if part is None:
        return before
    scale = float(unit.scale)
    size = conditions["value"] / scale * before.factor + before.shift
    if "part_material" not in conditions:
        return add_note(before, say("The part's temperature is given but not its material: not referred to 20 °C."))
    told_gauge = {"gauge_temperature", "gauge_material"} <= conditions.keys()
    part_alpha, part_at = MATERIALS[conditions["part_material"]], part - ICE_POINT
    gauge_alpha = MATERIALS[conditions["gauge_material"]] if told_gauge else 0.0
    gauge_at = conditions["gauge_temperature"] - ICE_POINT if told_gauge else REFERENCE
    half_width = conditions.get("temperature_half_width", 0.0)
    factor = factor_to_reference(part_alpha, part_at, gauge_alpha, gauge_at)
    told_lines = temperature_lines(size, part_alpha, part_at, gauge_alpha, gauge_at, half_width, half_width)
    lines = tuple(Line(name, "rectangular", u, shared=name) for name, u in told_lines)
    told = say("at 20 °C (ISO 1): size × {factor} for part at {part} °C and gauge at {gauge} °C",
               factor=f"{factor:.7f}", part=round(part_at, 3), gauge=round(gauge_at, 3))  # fmt: skip
    notes = before.notes
    if not told_gauge:
        notes = (*notes, say("Temperature or material of the gauge is not given: only the part is referred to 20 °C."))
    if not half_width:
        notes = (*notes, say("u is a lower bound: how far the temperatures may be off is not given."))
    return Reference(
        before.factor * factor, before.shift * factor, (*before.lines, *lines), (*before.working, told), notes
    )


def add_note(reference: Reference, note) -> Reference:  # noqa: ANN001 - Sentence
    """Give the reference with one more note."""
    return Reference(reference.factor, reference.shift, reference.lines, reference.working, (*reference.notes, note))
