"""Leak-down: how much of the supplied air a shut cylinder loses, as a share and as the hole that would lose as much."""

from collections.abc import Iterable, Mapping

from measurements.air import equivalent_diameter
from measurements.check_value import CheckValue
from measurements.engine import Engine
from measurements.kind import (
    COMMON_CONDITIONS,
    UNDER_AIR,
    Caution,
    Characteristic,
    Derived,
    Kind,
    Measured,
    MethodCondition,
    Pass,
)
from measurements.sentence import Sentence, say
from measurements.stations import cylinder_stations, parse_cylinder_station
from measurements.units import to_si

ESCAPES = ("intake", "exhaust", "breather", "coolant", "neighbour")
RECHECK_LOW, RECHECK_HIGH = 1.0, 95.0  # %; common practice: a wrong stroke reads near 100 %, a shut line near 0


def loss(supply: float, behind: float) -> float:
    """Loss [%] = (supply − reading) / supply, both gauge pressures in one unit.

    Source: FAA AC 43.13-1B, 8-14: 60/80 is a loss of 25 %.

    >>> loss(80, 60)
    25.0
    """
    return 100 * (supply - behind) / supply


def lost_at(measured: Measured, done: Pass) -> float | None:
    """Loss [%] of a station, whichever way it was entered; None where the supply is missing."""
    if measured.characteristic == "leak_down.loss":
        return 100 * to_si(measured.value, measured.unit)
    supply = done.conditions.get("supply_pressure")
    return None if not supply else loss(supply, to_si(measured.value, measured.unit))


def derive(done: Pass) -> Iterable[Derived | Sentence]:
    """Give each cylinder's loss, and the hole that would lose as much."""
    if done.comparable() and not done.conditions.get("supply_pressure"):
        yield say("Leak-down: the supply pressure is not given, so neither loss nor equivalent orifice is computed.")
        return
    for station, measured in done.comparable().items():
        share = lost_at(measured, done)
        if measured.characteristic == "leak_down.pressure":
            yield derived_loss(station, measured, share, done)
        yield from derived_orifice(station, measured, share, done)


def derived_loss(station: str, measured: Measured, share: float, done: Pass) -> Derived:
    """Loss of a cylinder from the pressure behind the orifice; the supply is taken as stated."""
    supply = done.conditions["supply_pressure"] / float(measured.unit.scale)
    return Derived(
        "leak_down.loss", station, share, "%", ((-100 / supply, measured),),
        (say("loss = ({supply} − {reading}) / {supply}; the supply is taken as stated", supply=supply,
             reading=measured.value),),
        tuple(recheck(share)), extra=escapes_at(station, done),
    )  # fmt: skip


def derived_orifice(station: str, measured: Measured, share: float, done: Pass) -> Iterable[Derived | Sentence]:
    """Equivalent orifice of a cylinder's leak, in the unit of the tester's own."""
    diameter = done.conditions.get("orifice_diameter")
    barometer = done.conditions.get("barometer")
    if not diameter:
        return
    if barometer is None:
        yield say("Equivalent orifice of cylinder {station} is left out: no barometer is known.", station=station)
        return
    if not 0 < share < 100:
        yield say("Equivalent orifice of cylinder {station} is left out: a loss of {share} % has none.",
                  station=station, share=share)  # fmt: skip
        return
    supply, unit = done.conditions["supply_pressure"], done.typed_units["orifice_diameter"]

    def hole(percent: float) -> float:
        return equivalent_diameter(diameter, supply, supply * (1 - percent / 100), barometer) / float(unit.scale)

    step = min(1e-3, share / 2, (100 - share) / 2)
    slope = (hole(share + step) - hole(share - step)) / (2 * step)  # per % of loss
    per_entry = (
        slope if measured.characteristic == "leak_down.loss" else -slope * 100 * float(measured.unit.scale) / supply
    )
    yield Derived(
        "leak_down.equivalent_orifice", station, hole(share), unit.symbol, ((per_entry, measured),),
        (say("the hole that passes to the atmosphere what the tester's orifice of {d} {unit} passes from supply to "
             "cylinder: air, γ = 1.4, isentropic, choked or not, one coefficient", d=diameter / float(unit.scale),
             unit=unit.symbol),),
    )  # fmt: skip


def escapes_at(station: str, done: Pass) -> dict[str, object]:
    """Say where the air of a cylinder came out."""
    heard = done.conditions.get("escapes", {}).get(int(station))
    return {"escapes": list(heard)} if heard else {}


def recheck(share: float) -> Iterable[Sentence]:
    """Ask for another look where the loss is hardly believable."""
    if share < 0:
        yield say("The reading is above the supply: check both dials and the supply, and measure again.")
    elif share <= RECHECK_LOW:
        yield say("Hardly any loss: check that the air line is open and the adapter is in this cylinder.")
    elif share >= RECHECK_HIGH:
        yield say(
            "Nearly all is lost: check that the piston stands at TDC of compression, not of overlap, and measure again."
        )


def notes(measured: Measured, done: Pass) -> Iterable[Sentence]:
    """Say where the air came out, and ask for a re-check near 0 and near 100 %."""
    heard = done.conditions.get("escapes", {}).get(int(measured.station))
    if heard:
        yield say("The air came out at: {where}.", where=", ".join(heard))
    share = lost_at(measured, done)
    if share is not None and measured.bound is None:
        yield from recheck(share)


def gauge_scale(quantity: str, done: Pass) -> float | None:
    """Pressure [Pa] on the gauge that is a loss of the whole supply: u(loss) = u(gauge) / supply."""
    return done.conditions.get("supply_pressure") if quantity == "pressure" else None


def characteristic_of(station: str, dimension: str | None) -> str:
    """Name what is entered: a percent is the loss itself."""
    return "leak_down.loss" if dimension == "ratio" else "leak_down.pressure"


def refused(conditions: Mapping[str, object], engine: Engine) -> Iterable[tuple[str, Sentence]]:
    """Refuse a supply or an orifice that is none."""
    for name in ("supply_pressure", "orifice_diameter"):
        if name in conditions and not conditions[name] > 0:
            yield name, say("The {name} must be above zero, as the gauge shows it.", name=name.replace("_", " "))


def _thou(behind: float) -> float:
    """Equivalent hole [in] of the standard tester, 80 psi through 0.040 in."""
    psi = 6894.757
    return equivalent_diameter(0.040, 80 * psi, behind * psi, 14.696 * psi)


PUBLISHED = (
    CheckValue("loss of 60 behind 80 psi [%]", "25", lambda: loss(80, 60), "FAA AC 43.13-1B, 8-14: 25 % is 60/80", "seen",
               "(supply − reading) / reading: 33"),
    CheckValue("wrong stroke: nothing is held, loss [%]", "100", lambda: loss(80, 0),
               "a wrong-stroke leak-down reads near 100 %", "common practice", "reading / supply: 0"),
    *(
        CheckValue(f"hole that holds {behind} of 80 psi behind 0.040 in [in]", printed,
                   lambda behind=behind: _thou(behind),
                   "two-orifice model, air, γ 1.4, 14.696 psi (arithmetic on the published compressible-flow law)", "seen",
                   "incompressible flow on both sides, d = D·(Δp/p)^¼: 0.0160, 0.0246, 0.0304, 0.0400")
        for behind, printed in ((78, "0.0220"), (70, "0.0336"), (60, "0.0412"), (40, "0.0525"))
    ),
)  # fmt: skip

KIND = Kind(
    name="leak_down",
    title="Leak-down",
    entered=(
        Characteristic("leak_down.pressure", "Pressure held", "pressure", "bar", shape="lower"),
        Characteristic("leak_down.loss", "Loss", "ratio", "%", shape="upper", most=100.0),
    ),
    derived=(
        Characteristic("leak_down.equivalent_orifice", "Hole that would lose as much", "length", "mm", shape="upper"),
    ),
    stations=cylinder_stations,
    characteristic_of=characteristic_of,
    station_name=parse_cylinder_station,
    lock_state=UNDER_AIR,
    conditions=(
        *COMMON_CONDITIONS,
        MethodCondition("supply_pressure", "Supply pressure", "quantity", "pressure", "bar"),
        MethodCondition("orifice_diameter", "Tester's orifice", "quantity", "length", "mm"),
        MethodCondition("escapes", "Where the air came out", "choices_by_cylinder", choices=ESCAPES),
    ),
    cautions=(
        Caution("DANGER", "The engine can turn under air: 80 psi on a 4 in piston pushes with about 1000 lbf. Crank "
                          "mechanically held, barring tool out, hands and clothing clear before the air goes on."),
        Caution("WARNING", "Ignition and fuel off, starter locked out; let the air in slowly."),
        Caution("WARNING", "Compressed air and blown dirt hurt eyes: glasses on, never point an open line at anyone."),
        Caution("CAUTION", "Shut the air and let the line empty before the adapter is undone."),
    ),
    derive=derive,
    notes=notes,
    gauge_scale=gauge_scale,
    reads_through=frozenset({("pressure", "ratio")}),
    refused=refused,
    words={"station": "cylinder", "value": "pressure held or loss", "as_found": "found", "as_left": "after work"},
    published=PUBLISHED,
)  # fmt: skip
