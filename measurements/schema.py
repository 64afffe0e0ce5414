"""JSON Schema (2020-12) of `assess`, both directions; what depends on the kinds is read off the kinds."""

from collections.abc import Mapping

from measurements.conformity import RULES
from measurements.document import MOST_BYTES
from measurements.intake.document import MOST_MEASUREMENTS
from measurements.intake.engine import EVENTS, LAYOUTS
from measurements.intake.gauges import GAUGE_FIELDS
from measurements.intake.limits import FIGURES
from measurements.kind import Kind, MethodCondition, find_kinds
from measurements.limits import PHASES
from measurements.units import DIMENSIONS

DIALECT = "https://json-schema.org/draft/2020-12/schema"
TYPED = {"type": ["string", "number"], "description": 'a figure with its unit, as typed: "0.30 mm"'}
DAY = {"type": "string", "pattern": "^[0-9]{4}-[0-9]{2}-[0-9]{2}$"}
WORD = {"type": "string", "minLength": 1}
CYLINDERS = {"propertyNames": {"pattern": "^[0-9]{1,3}$"}}
NUMBER_OR_NULL = {"type": ["number", "null"]}


def fields(properties: Mapping[str, object], required: tuple[str, ...] = (), more: bool = False) -> dict[str, object]:
    """An object; closed unless `more` fields may come."""
    told = {"type": "object", "properties": dict(properties)}
    if required:
        told["required"] = list(required)
    if not more:
        told["additionalProperties"] = False
    return told


def one_of(words) -> dict[str, object]:  # noqa: ANN001
    """One of some words."""
    return {"enum": list(words)}


def list_of(item: object, **more: object) -> dict[str, object]:
    """A list of one kind of member."""
    return {"type": "array", "items": item, **more}


def by_name(item: object) -> dict[str, object]:
    """An object with names of its own."""
    return {"type": "object", "additionalProperties": item}


def schema_in(kinds: Mapping[str, Kind] | None = None) -> dict[str, object]:
    """Schema of the document that `assess` reads."""
    kinds = find_kinds() if kinds is None else kinds
    return {
        "$schema": DIALECT,
        "title": "Engine bench logbook: what assess reads",
        "description": f"At most {MOST_BYTES} bytes and {MOST_MEASUREMENTS} measurements.",
        **fields(
            {
                "engine": engine_in(),
                "shop": shop_in(),
                "limits": list_of(limit_in(kinds)),
                "gauges": list_of(gauge_in()),
                "measurements": list_of({"oneOf": [measurement_in(kind) for kind in kinds.values()]}, maxItems=MOST_MEASUREMENTS),
                "shims": fields({"fitted": by_name(TYPED), "stock": list_of(TYPED), "step": TYPED}),
            },
            ("engine", "measurements"),
        ),
    }  # fmt: skip


def engine_in() -> dict[str, object]:
    """Schema of the engine."""
    cylinder = {"type": "integer", "minimum": 1}
    train = {
        "adjustment": one_of(("screw", "shim", "hydraulic")), "screw_pitch": TYPED, "screw_ratio": {"type": "number"},
        "shim_ratio": {"type": "number"}, "thread": one_of(("right", "left")), "bridges": {"type": "boolean"},
        "inward_closes": {"type": "boolean"},
        "margin": {"type": "number"}, "events": fields({name: {"type": "number"} for name in EVENTS}, EVENTS),
    }  # fmt: skip
    return fields(
        {
            "name": WORD, "layout": one_of(LAYOUTS), "ignition": one_of(("spark", "compression")), "cylinders": cylinder,
            "firing_order": list_of(cylinder), "firing_angles": list_of({"type": "number"}),
            "banks": list_of(list_of(cylinder)), "bore": TYPED, "stroke": TYPED, "rod_length": TYPED,
            "compression_ratio": {"type": "number"}, "rated_speed": TYPED,
            "valves_per_cylinder": fields({"intake": cylinder, "exhaust": cylinder}), "valve_train": fields(train),
            "service": WORD, "turning": one_of(("clockwise", "anticlockwise")),
            "seen_from": one_of(("flywheel", "free_end")), "numbered_from": one_of(("free_end", "flywheel")),
        },
        ("layout", "cylinders"),
    )  # fmt: skip


def shop_in() -> dict[str, object]:
    """Schema of the shop's ways."""
    rules = one_of(RULES)
    return fields(
        {"decimal_mark": one_of((".", ",")), "decision_rule": rules, "setting_decision_rule": rules, "barometer": TYPED}
    )


def limit_in(kinds: Mapping[str, Kind]) -> dict[str, object]:
    """Schema of a limit line; it lists every characteristic of every kind."""
    told = {name: TYPED for name in FIGURES}
    return fields(
        {
            "characteristic": one_of(every_characteristic(kinds)), **told, "condition": WORD,
            "source": WORD, "decision_rule": one_of(RULES),
            "setting_decision_rule": one_of(RULES), "allows_for_gauge": {"type": "boolean"}, "reference_barometer": TYPED,
            "stations": list_of(WORD),
        },
        ("characteristic",),
    )  # fmt: skip


def every_characteristic(kinds: Mapping[str, Kind]) -> list[str]:
    """Characteristics of all kinds, entered and derived."""
    return [one.name for kind in kinds.values() for one in (*kind.entered, *kind.derived)]


def gauge_in() -> dict[str, object]:
    """Schema of a gauge."""
    special = {
        "id": WORD, "quantity": one_of(DIMENSIONS), "coverage_factor": {"type": "number", "minimum": 1, "maximum": 5},
        "calibrated_on": DAY, "due_on": DAY, "repeatability_degrees_of_freedom": {"type": "integer", "minimum": 1},
        "range": list_of(TYPED, minItems=2, maxItems=2), "failed": {"type": "boolean"},
        "errors": list_of(fields({"at": TYPED, "error": TYPED}, ("at", "error"))),
    }  # fmt: skip
    return fields({name: special.get(name, TYPED) for name in GAUGE_FIELDS}, ("id", "quantity"))


def measurement_in(kind: Kind) -> dict[str, object]:
    """Schema of a measurement of one kind, with its own conditions."""
    conditions = {condition.name: condition_in(condition) for condition in kind.conditions}
    return fields(
        {
            "kind": {"const": kind.name}, "taken_on": DAY, "hours": TYPED, "phase": one_of(PHASES), "gauge": WORD,
            "conditions": fields(conditions), "readings": by_name(TYPED), "not_measured": by_name(WORD),
            "measured_by": WORD, "keyed_by": WORD,
        },
        ("kind",),
    )  # fmt: skip


def condition_in(condition: MethodCondition) -> dict[str, object]:
    """Schema of a condition by its form."""
    if condition.name == "state":
        return {"type": "string", "description": "cold, hot, or a state that a limit names as its condition"}
    return {
        "quantity": TYPED,
        "quantities": list_of(TYPED),
        "quantity_by_cylinder": by_name(TYPED) | CYLINDERS,
        "flag": {"type": "boolean"},
        "count": {"type": "integer", "minimum": 1},
        "choice": one_of(condition.choices),
        "choices_by_cylinder": by_name(list_of(one_of(condition.choices))) | CYLINDERS,
    }[condition.form]


def schema_out(kinds: Mapping[str, Kind] | None = None) -> dict[str, object]:
    """Schema of what `assess` writes: the judgement, or all errors; fields may be added later."""
    kinds = find_kinds() if kinds is None else kinds
    return {
        "$schema": DIALECT,
        "title": "Engine bench logbook: what assess writes",
        "oneOf": [judgement_out(kinds), errors_out()],
    }  # fmt: skip


def errors_out() -> dict[str, object]:
    """Schema of the errors of a document that can't be judged."""
    error = fields({"path": {"type": "string"}, "message": WORD}, ("path", "message"))
    return fields({"errors": list_of(error, minItems=1)}, ("errors",))


def judgement_out(kinds: Mapping[str, Kind]) -> dict[str, object]:
    """Schema of a judgement."""
    parts = {
        "findings": list_of(finding_out(kinds)),
        "derived": list_of(finding_out(kinds)),
        "forecasts": list_of(forecast_out()),
        "advice": list_of(
            fields({"station": WORD, "act": WORD, "working": list_of(WORD)}, ("station", "act"), more=True)
        ),
        "suspects": list_of(suspect_out()),
        "barring_plan": {"oneOf": [{"type": "null"}, plan_out()]},
        "engine": fields({"notes": list_of(WORD)}, ("notes",), more=True),
        "warnings": list_of(WORD),
    }
    return fields(parts, tuple(parts), more=True)


def finding_out(kinds: Mapping[str, Kind]) -> dict[str, object]:
    """Schema of a finding, of a reading or of a derived value."""
    slip = fields({"would_be": {"type": "number"}, "unit": WORD, "if": WORD}, ("would_be", "unit", "if"), more=True)
    named = {
        "measurement": {"type": "integer"}, "kind": WORD, "characteristic": one_of(every_characteristic(kinds)),
        "station": {"type": ["string", "null"]}, "phase": one_of(PHASES), "as_typed": {"type": ["string", "null"]},
        "unit": WORD, "decision_rule": one_of(RULES), "verdict": one_of(("within", "beyond", "too_close", "no_limit")),
        "needs": {"type": ["object", "null"]}, "notes": list_of(WORD), "working": list_of(WORD),
        "slip": {"oneOf": [{"type": "null"}, slip]},
        "bound": one_of(("below", "above")),
    }  # fmt: skip
    figures = ("value", "si_value", "standard_uncertainty", "expanded_uncertainty", "coverage_factor", "lower", "upper",
               "guard_band", "probability_within")  # fmt: skip
    required = tuple(name for name in named if name != "bound") + figures
    return fields(named | {name: NUMBER_OR_NULL for name in figures}, required, more=True)


def forecast_out() -> dict[str, object]:
    """Schema of a forecast."""
    named = {"characteristic": WORD, "station": {"type": ["string", "null"]}, "limit": one_of(("lower", "upper")), "by": WORD,
             "unit": WORD, "determined": {"type": "boolean"}, "why_not": {"type": ["string", "null"]}}  # fmt: skip
    figures = (
        "slope",
        "slope_standard_uncertainty",
        "reached_at",
        "earliest",
        "latest",
        "cautious_earliest",
        "confidence",
    )
    return fields(named | {name: NUMBER_OR_NULL for name in figures}, (*named, *figures), more=True)


def suspect_out() -> dict[str, object]:
    """Schema of a suspect."""
    words = ("rings_and_bore", "intake_valve", "exhaust_valve", "head_gasket", "coolant_path", "valve_timing",
             "cranking_or_throttle", "gauge_or_method")  # fmt: skip
    named = {"suspect": one_of(words), "cylinders": list_of({"type": "integer"}), "for": list_of(WORD), "against": list_of(WORD),
             "next_test": {"type": ["string", "null"]}}  # fmt: skip
    return fields(named, tuple(named), more=True)


def plan_out() -> dict[str, object]:
    """Schema of a crank plan."""
    stop = fields(
        {"crank_angle": {"type": "number"}, "mark": WORD, "valves": list_of(WORD)},
        ("crank_angle", "mark", "valves"),
        more=True,
    )
    named = {"stops": list_of(stop), "assumed_events": {"type": "boolean"}, "margin": {"type": "number"}}
    return fields(named, tuple(named), more=True)
