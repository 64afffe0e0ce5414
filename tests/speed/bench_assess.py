"""How long `assess` takes: as a process beside an empty command, and a thousand measurements beside numpy and json."""

import json
import subprocess
import sys
import time
from statistics import median

import numpy as np

from measurements.assess import assess_bytes

EXAMPLE = "fixtures/demo/example.json"
STATIONS = [f"{cylinder}.{side}" for cylinder in range(1, 5) for side in ("intake", "exhaust")]
COUNT = 1000


def figures() -> list[tuple[str, float, float, float | None]]:
    """Rows of the table of `make bench`."""
    ours, floor = side_by_side(process("assess", EXAMPLE), process("registry"), runs=9)
    thousand = document()
    raw = json.dumps(thousand).encode()
    judged, arithmetic = side_by_side(lambda: json.dumps(assess_bytes(raw)), lambda: numpy_and_json(raw), runs=3)
    return [
        ("assess on the example, beside a command that builds the registry", ours, floor, 1.5),
        (f"{COUNT} measurements, {COUNT * len(STATIONS)} readings, beside numpy and json", judged, arithmetic, None),
    ]


def process(*arguments: str):
    """A run of one of the project's commands."""
    return lambda: subprocess.run([sys.executable, "manage.py", *arguments], check=True, capture_output=True)


def side_by_side(ours, floor, runs: int) -> tuple[float, float]:
    """Median seconds of both, run in turn after one warm-up, so that a drift of the machine falls on both."""
    times: tuple[list[float], list[float]] = ([], [])
    for run in range(runs + 1):
        for kept, work in zip(times, (ours, floor), strict=True):
            started = time.perf_counter()
            work()
            if run:
                kept.append(time.perf_counter() - started)
    return median(times[0]), median(times[1])


def document() -> dict:
    """A thousand passes over eight valves, each valve with its own drift."""
    with open(EXAMPLE, encoding="utf-8") as opened:
        example = json.load(opened)
    example["measurements"] = [
        {"kind": "valve_lash", "phase": "as_found", "hours": 10 * visit, "gauge": "FG-2", "conditions": {"state": "cold"},
         "readings": {station: f"{0.30 + 0.0001 * ((visit * 7 + at * 13) % 500):.2f} mm" for at, station in enumerate(STATIONS)}}
        for visit in range(COUNT)
    ]  # fmt: skip
    del example["shims"]
    return example


def numpy_and_json(raw: bytes) -> str:
    """The bare arithmetic: read the numbers, budget, guard band, chance, verdict; no units, no grammar, no sentences."""
    read = json.loads(raw)["measurements"]
    values = np.array([[float(text[:-3]) for text in one["readings"].values()] for one in read])
    u = np.hypot(0.01 / np.sqrt(12), 0.004)
    low, high, w = 0.25, 0.35, 1.6448536 * u
    chance = normal((high - values) / u) - normal((low - values) / u)
    within = (values >= low + w) & (values <= high - w)
    beyond = (values < low - w) | (values > high + w)
    verdict = np.where(within, "within", np.where(beyond, "beyond", "too_close"))
    change = np.diff(values, axis=0)
    return json.dumps([values.tolist(), chance.tolist(), verdict.tolist(), change.tolist()])


def normal(z: np.ndarray) -> np.ndarray:
    """Normal distribution function, by the logistic stand-in that any quick script would take."""
    return 1 / (1 + np.exp(-1.702 * z))
