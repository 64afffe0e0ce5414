"""Published crank plans: which valves a workshop manual sets at which stop."""

from measurements.barring import CrankStop, plan
from measurements.check_value import CheckValue
from measurements.engine import Engine

FOUR, SIX = (1, 3, 4, 2), (1, 5, 3, 6, 2, 4)
EIGHT = (1, 8, 4, 3, 6, 5, 7, 2)
EIGHT_CHART = {  # crank angle: what the chart sets there
    0: "1.exhaust 3.exhaust 4.exhaust 8.exhaust 1.intake 2.intake 5.intake 7.intake",
    360: "2.exhaust 5.exhaust 6.exhaust 7.exhaust 3.intake 4.intake 6.intake 8.intake",
}


def stops_of(order: tuple[int, ...], layout: str = "inline") -> tuple[CrankStop, ...]:
    """Stops of an engine of which only the order is known."""
    return plan(Engine(layout, len(order), order)).stops


def chart(stops: tuple[CrankStop, ...]) -> str:
    """Stops as a manual's table shows them."""
    return "; ".join(
        f"{stop.mark}: intake {_numbers(stop, 'intake')}, exhaust {_numbers(stop, 'exhaust')}" for stop in stops
    )


def out_of_reach(order: tuple[int, ...], chart_: dict[int, str]) -> str:
    """Valves that a chart sets at a stop and our stop there can't reach."""
    reach = {stop.crank_angle: stop.in_reach for stop in stops_of(order, "vee")}
    return " ".join(valve for angle, valves in chart_.items() for valve in valves.split()
                    if valve not in reach.get(angle, ())) or "none"  # fmt: skip


def _numbers(stop: CrankStop, side: str) -> str:
    return " ".join(station.split(".")[0] for station in stop.stations if station.endswith(side))


_BACKWARD = "the order turned backward: intake and exhaust change places"

PUBLISHED = [
    CheckValue("stops of 1-3-4-2", "TDC 1 firing: intake 1 2, exhaust 1 3; TDC 4 firing: intake 3 4, exhaust 2 4",
               lambda: chart(stops_of(FOUR)),
               "TM 5-3805-258-24-1, valve adjustment: at cylinder 1 TDC compression, and a turn later", "seen",
               _BACKWARD),
    CheckValue("stops of 1-5-3-6-2-4",
               "TDC 1 firing: intake 1 2 4, exhaust 1 3 5; TDC 6 firing: intake 3 5 6, exhaust 2 4 6",
               lambda: chart(stops_of(SIX)), "two-stop chart of inline sixes, the same in many manuals",
               "common practice", _BACKWARD),
    CheckValue("stops of 1-2-3, even", "TDC 1 firing: intake 1 3, exhaust 1 2; TDC 1 overlap: intake 2, exhaust 3",
               lambda: chart(stops_of((1, 2, 3))), "two-stop chart of small three-cylinder diesels", "from memory",
               _BACKWARD),
    CheckValue("V8 1-8-4-3-6-5-7-2: valves of the printed chart out of our reach", "none",
               lambda: out_of_reach(EIGHT, EIGHT_CHART),
               "two-stop chart of a common V8: cylinder 1 firing, then one turn", "from memory", _BACKWARD),
    CheckValue("crank turn between the stops of an even V8 [deg]", "360",
               lambda: stops_of(EIGHT, "vee")[1].crank_angle - stops_of(EIGHT, "vee")[0].crank_angle,
               "the same chart: turn the crank once round, back to the same mark", "from memory",
               "the earliest second stop that still reaches the rest: 270"),
    CheckValue("a single: where both valves are set", "TDC 1 firing: intake 1, exhaust 1",
               lambda: chart(stops_of((1,), "single")), "lash of a single is set at TDC of the power stroke",
               "common practice", "TDC of the overlap, 360°, where both valves are open"),
]  # fmt: skip
