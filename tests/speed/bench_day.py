"""How long the day's two heavy steps take: keeping a reading beside its bare SQL, a job sheet beside WeasyPrint alone."""

import os
import tempfile
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from datetime import UTC, datetime
from statistics import median
from uuid import uuid4

READINGS = 20
FAR = 900_000
AT = datetime(2026, 5, 2, 9, 30, tzinfo=UTC)


def figures() -> list[tuple[str, float, float, float | None]]:
    """Rows of the table of `make bench`."""
    with own_database():
        from tests.logbook.bench.job import make_bench

        bench = make_bench(cylinders=16, firing_order=list(range(1, 17)))
        bench.pass_of()
        ours, floor = keeping(bench)
        sheet, drawn = sheets(bench)
    return [
        ("one reading kept and its fragment back, beside its SQL in a bare view", ours, floor, 2.0),
        ("a job sheet drawn, beside WeasyPrint on the same finished HTML", sheet, drawn, 1.3),
    ]


@contextmanager
def own_database() -> Iterator[None]:
    """A file database of its own, in a folder that goes when this is over."""
    with tempfile.TemporaryDirectory(prefix="logbook-bench-") as home:
        os.environ |= {"LOGBOOK_HOME": home, "DJANGO_SETTINGS_MODULE": "logbook.settings"}
        import django
        from django.core.management import call_command
        from django.db import connections

        django.setup()
        call_command("migrate", verbosity=0)
        call_command("collectstatic", verbosity=0, interactive=False)
        yield
        connections.close_all()


def keeping(bench) -> tuple[float, float]:  # noqa: ANN001
    """Median seconds of a reading kept through the page, and of the SQL it made in a view that does nothing else."""
    from django.db import connection, transaction
    from django.test import Client

    client = Client(SERVER_NAME="localhost", headers={"HX-Request": "true"})
    client.force_login(bench.technician)
    address = f"/jobs/{bench.task.work_order.number}/bench/{bench.task.pk}/read/"
    stations = [f"{cylinder}.{side}" for cylinder in range(1, 17) for side in ("intake", "exhaust")]
    asked: list[tuple[str, object]] = []

    def keep(station: str) -> None:
        typed = "0.30" if "intake" in station else "0.40"
        told = {"client_id": uuid4(), "station": station, "phase": "as_found", "typed": typed}
        answer = client.post(address, told)
        assert answer.status_code in (200, 302), answer.status_code

    def noted(execute: Callable, sql: str, params: object, many: bool, context: dict) -> object:
        asked.append((sql, params))
        return execute(sql, params, many, context)

    with connection.cursor() as cursor:  # readings get numbers that no other row has: they can be told in the SQL
        cursor.execute("DELETE FROM sqlite_sequence WHERE name = 'bench_reading'")
        cursor.execute("INSERT INTO sqlite_sequence (name, seq) VALUES ('bench_reading', %s)", [FAR])
    keep(stations.pop(0))
    with transaction.atomic(), connection.execute_wrapper(noted):
        keep(stations[0])
        transaction.set_rollback(True)
    ours = [timed(lambda station=station: keep(station)) for station in stations[:READINGS]]
    floor = [timed(lambda: bare(asked)) for _ in range(READINGS)]
    return median(ours), median(floor)


def bare(asked: list[tuple[str, object]]) -> None:
    """A Django view that does the same SQL and nothing else; its new rows get numbers and ids of their own."""
    from django.db import connection, transaction
    from django.http import HttpRequest, HttpResponse
    from django.test import RequestFactory

    def view(request: HttpRequest) -> HttpResponse:
        anew: dict[object, object] = {FAR + 2: FAR + 2}
        with transaction.atomic(), connection.cursor() as cursor:
            for sql, params in asked:
                cursor.execute(sql, params and [anew.get(one, one) if is_name(one, anew) else one for one in params])
                rows = cursor.fetchall() if cursor.description else []
                if sql.startswith('INSERT INTO "bench_reading"'):
                    anew[FAR + 2] = rows[0][0]
        return HttpResponse("kept")

    view(RequestFactory(SERVER_NAME="localhost").post("/"))


def is_name(value: object, anew: dict[object, object]) -> bool:
    """Tell whether a value names a row made anew; an id made on the tablet is made once more."""
    if isinstance(value, str) and len(value) == 32 and set(value) <= set("0123456789abcdef"):
        anew[value] = anew.get(value) or uuid4().hex
    return isinstance(value, str | int) and value in anew


def sheets(bench) -> tuple[float, float]:  # noqa: ANN001
    """Median seconds of a job sheet from its rows to its PDF, and of WeasyPrint alone on the finished HTML."""
    from logbook.paper.services import draw, page_of
    from logbook.review.sheets import job_sheet

    order = bench.task.work_order
    about = {"title": "Job sheet", "language": "en", "at": AT}
    html = page_of("job_sheet", job_sheet(order), **about)
    ours, floor = [], []
    for _ in range(4):
        ours.append(timed(lambda: draw("job_sheet", job_sheet(order), paper="A4", **about)))
        floor.append(timed(lambda: weasyprint_alone(html)))
    return median(ours[1:]), median(floor[1:])


def weasyprint_alone(html: str) -> bytes:
    """WeasyPrint on HTML, with the letters and nothing of ours around it."""
    from weasyprint import HTML

    from logbook.paper.closed import HERE, ClosedFetcher
    from logbook.paper.drawing import letters

    page = HTML(string=html, base_url=HERE, url_fetcher=ClosedFetcher())
    return page.write_pdf(font_config=letters(), pdf_variant="pdf/a-3a")


def timed(work: Callable[[], object]) -> float:
    """Seconds that some work takes."""
    started = time.perf_counter()
    work()
    return time.perf_counter() - started
