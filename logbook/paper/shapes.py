"""The shapes of the sheets: plain data, every text as it shall stand on paper, already translated and written out.

A sheet goes through JSON unchanged: texts, numbers, true and false, lists, and dictionaries with text as keys. Its
fingerprint is made from exactly this. A part that a sheet doesn't need is left out or empty; nothing then stands there.
"""

from typing import NotRequired, TypedDict


class Fact(TypedDict):
    """A name and what it is: "bore", "96 mm"."""

    name: str
    value: str


class Mark(TypedDict):
    """A reading on the ruler, in the ruler's unit; `role` is "now", "last" (previous visit) or "left" (as left)."""

    value: float
    expanded: float | None
    verdict: str  # within, too_close, beyond
    role: str


class Ruler(TypedDict):
    """What the limit ruler is drawn from; at least one limit is given."""

    lower: float | None
    upper: float | None
    guard_band: float
    marks: list[Mark]
    label: str  # the same in words, for who can't see it
    decimal_mark: NotRequired[str]  # the shop's; a point where it is left out


class Row(TypedDict):
    """One station of a pass, or one derived value; `station` and `value` alone are needed."""

    station: str
    value: str  # "0.180 ± 0.010 mm"; for a station not measured "not measured: seized"
    typed: NotRequired[str]  # as typed at the bench
    limits: NotRequired[str]  # "0.25 to 0.35 mm"
    source: NotRequired[str]  # where the limits come from; printed once under the table
    verdict: NotRequired[str]  # within, too_close, beyond; draws the mark
    words: NotRequired[str]  # the verdict in words
    ruler: NotRequired[Ruler | None]
    gauge: NotRequired[str]  # only where it isn't the pass's own
    decision: NotRequired[str]  # "put right", "may run until 2026-08-01"
    notes: NotRequired[list[str]]
    is_struck: NotRequired[bool]  # struck or superseded: stands on the sheet, crossed out, with its reason in notes


class Pass(TypedDict):
    """One pass over the stations: as found, or as left."""

    title: str  # "Valve lash"
    phase: str  # "as found"
    facts: NotRequired[list[Fact]]  # conditions, who measured, who keyed, when
    gauge: NotRequired[str]  # "FG-2 feeler gauge, smallest step 0.01 mm"
    calibration: NotRequired[str]  # "C-118, 2026-03-01, U = 0.008 mm (k = 2), due 2027-03-01"
    complaints: NotRequired[list[str]]  # what speaks against the gauge
    rows: list[Row]
    derived: NotRequired[list[Row]]  # station: what it is, "spread"; typed: where, "engine" or "cylinder 3"


class Act(TypedDict):
    """What was done at a station between as found and as left."""

    station: str
    what: str
    by: str
    when: str


class Decision(TypedDict):
    """What was decided on a finding."""

    finding: str
    decision: str
    reason: NotRequired[str]
    by: str
    when: str


class Concession(TypedDict):
    """A finding that may run on: under which conditions, agreed by whom, until when."""

    finding: str
    conditions: str
    agreed_by: str
    until: str
    extended: NotRequired[str]  # "second extension"


class Signature(TypedDict):
    """A name under the sheet, given by password, bound to what was shown."""

    role: str
    name: str
    when: str
    fingerprint: str
    note: NotRequired[str]  # "not checked by a second person"


class Sheet(TypedDict):
    """What every sheet has."""

    shop: str
    number: int  # of the work order
    title: str  # of the work order
    engine: str  # its name, or the part's
    engine_facts: NotRequired[list[Fact]]
    facts: NotRequired[list[Fact]]  # of the job: opened by, measured, engine hours, decision rule
    notes: NotRequired[list[str]]  # what must be seen at once: "not checked by a second person"
    is_demo: NotRequired[bool]


class JobSheet(Sheet):
    """What was measured, judged, done, decided and signed."""

    passes: list[Pass]
    acts: NotRequired[list[Act]]
    decisions: NotRequired[list[Decision]]
    concessions: NotRequired[list[Concession]]
    parts: NotRequired[list[str]]  # used up on the job
    open: NotRequired[list[str]]  # of the closing-up list, what was left open, with its reason
    signatures: NotRequired[list[Signature]]
    ink: NotRequired[list[str]]  # who may sign in ink: "for the owner"


class Caution(TypedDict):
    """A caution before the step it belongs to; `signal` is DANGER, WARNING, CAUTION or NOTICE."""

    signal: str
    text: str


class Task(TypedDict):
    """A task of a work order, with the state of the engine it needs and what is locked for it."""

    title: str
    state: NotRequired[str]  # "turned by hand: isolated"
    cautions: NotRequired[list[Caution]]
    locks: NotRequired[list[str]]  # points to be locked; each gets a line for name and time
    facts: NotRequired[list[Fact]]  # gauge to take, stations to be witnessed


class WorkOrderSheet(Sheet):
    """What is to be done, under which locks, with which cautions before it."""

    cautions: NotRequired[list[Caution]]  # for the whole job
    tasks: list[Task]
    closing: NotRequired[list[str]]  # to tick at the end
    ink: NotRequired[list[str]]


class BlankStation(TypedDict):
    """A station to be filled in by hand."""

    station: str
    limits: NotRequired[str]
    setting: NotRequired[str]
    last: NotRequired[str]  # what it was left at the last time


class Stop(TypedDict):
    """A crank stop and what is in reach there, in the order of the hands."""

    mark: str  # "TDC 1 firing"; for readings that need no crank, what they are
    angle: NotRequired[str]  # "0°"
    cautions: NotRequired[list[Caution]]  # before the crank is turned
    stations: list[BlankStation]


class BlankSheet(Sheet):
    """Empty boxes for one task, in the order of the hands."""

    task: str
    unit: str
    columns: list[str]  # heads of the boxes: "as found", "act", "as left"
    cautions: NotRequired[list[Caution]]
    blanks: NotRequired[list[str]]  # facts to be filled in: "gauge", "engine hours", "part temperature"
    stops: list[Stop]
    ink: NotRequired[list[str]]
