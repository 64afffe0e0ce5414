"""How long the crank plan of a vee 20 takes beside the five milliseconds it may."""

import time
from statistics import median

from measurements.barring import plan
from measurements.engine import Engine, ValveEvents

ORDER = (1, 11, 5, 15, 9, 19, 3, 13, 7, 17, 2, 12, 6, 16, 10, 20, 4, 14, 8, 18)
BANKS = (tuple(range(1, 11)), tuple(range(11, 21)))
WILD = ValveEvents(intake_opens_btdc=60, intake_closes_abdc=95, exhaust_opens_bbdc=95, exhaust_closes_atdc=60)


def figures() -> list[tuple[str, float, float, float | None]]:
    """Rows of the table of `make bench`."""
    return [row("common cams", None), row("long events, three stops", WILD)]


def row(what: str, events: ValveEvents | None) -> tuple[str, float, float, float | None]:
    """Median seconds of a plan, the bound as its floor."""
    engine = Engine("vee", 20, ORDER, banks=BANKS, intake_valves=2, exhaust_valves=2, events=events)
    times = []
    for _ in range(41):
        started = time.perf_counter()
        plan(engine)
        times.append(time.perf_counter() - started)
    return f"crank plan of a vee 20, {what}, beside 5 ms", median(times), 0.005, 1.0
