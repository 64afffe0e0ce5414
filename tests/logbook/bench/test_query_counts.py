"""The number of queries grows neither with the cylinders nor with the visits before."""

from django.db import connection
from django.test.utils import CaptureQueriesContext

from logbook.bench.judging import engine_of, kinds
from logbook.bench.services import turn_crank
from logbook.bench.steps import route
from tests.logbook.bench.test_bench_page import address, answer_to

V16 = {
    "layout": "vee", "cylinders": 16, "banks": [list(range(1, 9)), list(range(9, 17))],
    "firing_order": [1, 9, 3, 11, 5, 13, 7, 15, 8, 16, 6, 14, 4, 12, 2, 10],
}  # fmt: skip


def visit(bench):
    """Everything measured but two stations of the stop where the crank stands, one of them 3.exhaust."""
    way = route(kinds()["valve_lash"], engine_of(bench.task.work_order))
    stop = way.stop_of("3.exhaust")
    open_still = {"3.exhaust", next(one for one in stop.stations if one != "3.exhaust")}
    bench.pass_of()
    for station in way.stations:
        if station not in open_still:
            bench.read(station, "0.40" if "exhaust" in station else "0.30")
    turn_crank(bench.task, by=bench.technician, at=bench.now, to=stop.mark)
    return bench


def counted(client, act):
    with CaptureQueriesContext(
        connection,
    ) as seen:
        answer = act(client)
    assert answer.status_code == 200
    return len(seen)


def counts(client, bench):
    """Queries of keeping a reading and getting the fragment back, of the page, of the table."""
    client.force_login(bench.technician)
    client.get(address(bench))  # the session is there from now on

    def keep(client):
        told = answer_to("3.exhaust", "0.41")
        return client.post(address(bench, "read"), told, headers={"HX-Request": "true"})

    return {
        "keep": counted(client, keep),
        "page": counted(client, lambda client: client.get(address(bench))),
        "table": counted(client, lambda client: client.get(address(bench, "table"))),
    }


def test_sixteen_cylinders_take_as_many_queries_as_four(client, make_bench):
    four = counts(client, visit(make_bench()))
    sixteen = make_bench("Alder Bay workshop", **V16)
    assert counts(client, visit(sixteen)) == four


def test_thirty_visits_before_take_as_many_queries_as_three(client, make_bench):
    told = []
    for name, visits in (("Reed Lake workshop", 3), ("Alder Bay workshop", 30)):
        bench = make_bench(name)
        for _ in range(visits):
            bench.read("3.exhaust", "0.40")
            bench.read("1.intake", "0.30")
            bench = bench.next_visit(30)
        told.append(counts(client, visit(bench)))
    assert told[0] == told[1]
