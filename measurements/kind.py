"""What every kind of measurement must say about itself, and the plain values it is handed and gives back."""

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from datetime import date
from importlib import import_module
from pkgutil import iter_modules
from types import ModuleType

from measurements.check_value import CheckValue
from measurements.engine import Engine
from measurements.gauge import Budget, Line
from measurements.sentence import Sentence
from measurements.units import Unit, convert, convert_difference

TURNED_BY_HAND, CRANKED, UNDER_AIR, AT_REST = "turned by hand", "cranked", "under air", "at rest"


@dataclass(frozen=True)
class Characteristic:
    """One quantity a kind enters or derives.

    Attributes
    ----------
    name : str
        `kind.quantity`, as limits and `assess` name it.
    title : str
        Words for the page and the print.
    dimension, unit : str
        Dimension and the kind's own unit (a symbol of `units`).
    shape : str
        Usual limits: "zone", "upper" or "lower".
    signed : bool
        Whether a negative entry makes sense.
    is_size : bool
        A size of a part, referred to 20 °C where temperatures are given.
    most : float or None
        Largest value that can exist, in `unit` (100 for a loss in percent).
    """

    name: str
    title: str
    dimension: str
    unit: str
    shape: str = "zone"
    signed: bool = False
    is_size: bool = False
    most: float | None = None


@dataclass(frozen=True)
class MethodCondition:
    """Something about how a pass was taken.

    `form` is "quantity", "quantities", "quantity_by_cylinder", "flag", "count", "choice" or "choices_by_cylinder".
    """

    name: str
    title: str
    form: str
    dimension: str = ""
    unit: str = ""
    choices: tuple[str, ...] = ()
    signed: bool = False
    absolute: bool = False


@dataclass(frozen=True)
class Caution:
    """Words that stand before a step, under a signal word in the sense of ANSI Z535.6."""

    signal: str
    text: str


@dataclass(frozen=True)
class Measured:
    """One station's reading, ready to judge or derive from: the mean of its repeats at reference conditions."""

    characteristic: str
    station: str
    value: float
    unit: Unit
    budget: Budget
    bound: str | None = None
    raw_value: float | None = None
    u_is_lower_bound: bool = False

    def in_unit(self, unit: Unit) -> "Measured":
        """Give the same reading in another unit of its dimension."""
        if unit == self.unit:
            return self
        factor = convert_difference(1.0, self.unit, unit)
        raw = None if self.raw_value is None else convert(self.raw_value, self.unit, unit)
        value = convert(self.value, self.unit, unit)
        return replace(self, value=value, raw_value=raw, unit=unit, budget=self.budget.times(factor))


@dataclass(frozen=True)
class Reference:
    """How a pass's values are brought to reference conditions: value × `factor` + `shift`, with the added lines."""

    factor: float = 1.0
    shift: float = 0.0
    lines: tuple[Line, ...] = ()
    working: tuple[Sentence, ...] = ()
    notes: tuple[Sentence, ...] = ()


@dataclass(frozen=True)
class Derived:
    """A value computed from readings; `sensitivities` are its slopes against each of them, for the uncertainty.

    `by_station` gives the same quantity for each station alone, so that the limit can single stations out.
    """

    characteristic: str
    station: str | None
    value: float
    unit: str
    sensitivities: tuple[tuple[float, Measured], ...] = ()
    working: tuple[Sentence, ...] = ()
    notes: tuple[Sentence, ...] = ()
    by_station: Mapping[str, float] = field(default_factory=dict)
    extra: Mapping[str, object] = field(default_factory=dict)


@dataclass(frozen=True)
class Pass:
    """One go through an engine's stations with one method: a measurement of the document.

    `conditions` holds quantities in SI units and `typed_units` the unit each was typed in; `earlier` are the passes of
    the same kind that came before.
    """

    place: int
    kind: str
    phase: str
    engine: Engine
    conditions: Mapping[str, object]
    typed_units: Mapping[str, Unit]
    measured: Mapping[str, Measured]
    taken_on: date | None = None
    hours: float | None = None
    gauge: str | None = None
    earlier: Sequence["Pass"] = ()

    def comparable(self) -> dict[str, Measured]:
        """Readings that can be computed with: all but the censored, those of one dimension in one unit."""
        units: dict[str, Unit] = {}
        for one in self.measured.values():
            units.setdefault(one.unit.dimension, one.unit)
        return {
            station: one.in_unit(units[one.unit.dimension])
            for station, one in self.measured.items()
            if one.bound is None
        }


def nothing_derived(done: Pass) -> Iterable[Derived | Sentence]:
    """Derive nothing."""
    return ()


def no_notes(measured: Measured, done: Pass) -> Iterable[Sentence]:
    """Note nothing."""
    return ()


@dataclass(frozen=True)
class Kind:
    """A kind of measurement: everything the form, the verdict, the picture and the print need to know.

    Attributes
    ----------
    name, title : str
        Its name in `assess` and its words on the page.
    entered, derived : tuple of Characteristic
        What is typed and what is computed.
    stations : callable
        Engine → its stations in the order of the hands.
    characteristic_of : callable
        (station, dimension typed or None) → name of the characteristic entered there.
    station_name : callable
        (text, engine) → the station's one name; raises Refusal.
    lock_state : str
        State of the engine the task needs.
    derive, refer, notes : callable
        Pass → derived values and warnings; (Characteristic, Unit, Pass) → Reference; (Measured, Pass) → notes.
    gauge_scale : callable
        (quantity of the gauge, Pass) → its SI units per SI unit of the entry, or None where the gauge can't show it.
    reads_through : frozenset of (quantity, dimension)
        Gauges of another quantity that an entry may be read on: a loss in percent on a pressure gauge.
    acts : tuple of str
        Acts it asks for when a value is outside its setting zone.
    words : mapping
        Further words it prints.
    """

    name: str
    title: str
    entered: tuple[Characteristic, ...]
    stations: Callable[[Engine], Sequence[str]]
    characteristic_of: Callable[[str, str | None], str]
    station_name: Callable[[str, Engine], str]
    lock_state: str
    derived: tuple[Characteristic, ...] = ()
    conditions: tuple[MethodCondition, ...] = ()
    cautions: tuple[Caution, ...] = ()
    derive: Callable[[Pass], Iterable[Derived | Sentence]] = nothing_derived
    refer: Callable[[Characteristic, Unit, Pass], Reference] = lambda characteristic, unit, done: Reference()
    notes: Callable[[Measured, Pass], Iterable[Sentence]] = no_notes
    gauge_scale: Callable[[str, Pass], float | None] = lambda quantity, done: None
    reads_through: frozenset[tuple[str, str]] = frozenset()
    acts: tuple[str, ...] = ()
    unlimited: Callable[[Pass], Sentence | None] = lambda done: None
    refused: Callable[[Mapping[str, object], Engine], Iterable[tuple[str, Sentence]]] = lambda conditions, engine: ()
    words: Mapping[str, str] = field(default_factory=dict)
    published: tuple[CheckValue, ...] = ()

    def gauge_quantities(self) -> set[str]:
        """Quantities of the gauges that it can be measured with."""
        return {one.dimension for one in self.entered} | {quantity for quantity, _ in self.reads_through}

    def characteristic(self, name: str) -> Characteristic | None:
        """Find one of its characteristics by name."""
        return next((one for one in (*self.entered, *self.derived) if one.name == name), None)


@dataclass(frozen=True)
class FormField:
    """A field of a kind's form: one station, what is entered there, and the unit shown beside it."""

    station: str
    characteristic: Characteristic

    @property
    def unit(self) -> str:
        """Unit taken where none is typed."""
        return self.characteristic.unit


def form_fields(kind: Kind, engine: Engine) -> list[FormField]:
    """Fields of a kind's form for an engine, in the order of the hands."""
    return [
        FormField(station, kind.characteristic(kind.characteristic_of(station, None)))
        for station in kind.stations(engine)
    ]


STATE = MethodCondition("state", "Engine state", "choice", choices=("cold", "hot"))
PART_TEMPERATURE = MethodCondition("part_temperature", "Part temperature", "quantity", "temperature", "°C")
GAUGE_TEMPERATURE = MethodCondition("gauge_temperature", "Gauge temperature", "quantity", "temperature", "°C")
BAROMETER = MethodCondition("barometer", "Barometer at the station", "quantity", "pressure", "hPa", absolute=True)
COMMON_CONDITIONS = (STATE, PART_TEMPERATURE, GAUGE_TEMPERATURE, BAROMETER)


def find_kinds(folder: ModuleType | None = None) -> dict[str, Kind]:
    """Walk the folder of kinds and give each by name; every module there must hold one `KIND`."""
    folder = folder or import_module("measurements.kinds")
    found = {}
    for entry in iter_modules(folder.__path__):
        kind = import_module(f"{folder.__name__}.{entry.name}").KIND
        found[kind.name] = kind
    return found
