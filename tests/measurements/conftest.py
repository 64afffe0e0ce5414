"""How the tests of the judgement ask: one measurement judged, one finding, one derived value."""

import pytest

from measurements.assess import assess

ENGINE = {"layout": "inline", "cylinders": 4, "firing_order": [1, 3, 4, 2], "ignition": "spark"}


@pytest.fixture
def engine() -> dict:
    """A spark-ignited four."""
    return dict(ENGINE)


@pytest.fixture
def judged():
    """Judge one measurement of one kind."""

    def judge(kind: str, readings: dict, *, limits=(), gauges=(), engine=None, shop=None, **measurement) -> dict:
        told = {"kind": kind, "phase": "as_found", "readings": readings, **measurement}
        document = {"engine": {**ENGINE, **(engine or {})}, "shop": shop or {}, "limits": list(limits)}
        return assess({**document, "gauges": list(gauges), "measurements": [told]})

    return judge


@pytest.fixture
def finding():
    """Find the finding of a station."""

    def find(judgement: dict, station: str) -> dict:
        return next(one for one in judgement["findings"] if one["station"] == station)

    return find


@pytest.fixture
def derived():
    """Find a derived value."""

    def find(judgement: dict, characteristic: str, station: str | None = None) -> dict:
        wanted = (characteristic, station)
        return next(one for one in judgement["derived"] if (one["characteristic"], one["station"]) == wanted)

    return find


@pytest.fixture
def lash_visits() -> dict:
    """A valve found after it was left, written down in the wrong order."""
    return {
        "engine": ENGINE,
        "gauges": [{"id": "G", "quantity": "length", "resolution": "0.01 mm", "expanded_uncertainty": "0.008 mm",
                    "coverage_factor": 2}],
        "measurements": [
            {"kind": "valve_lash", "phase": "as_found", "hours": 4210, "gauge": "G", "readings": {"1.intake": "0.33 mm"}},
            {"kind": "valve_lash", "phase": "as_left", "hours": 3798, "gauge": "G", "readings": {"1.intake": "0.40 mm"}},
        ],
    }  # fmt: skip
