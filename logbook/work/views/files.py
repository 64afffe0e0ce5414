"""CSV files: time per task and parts used, of one job or of the whole shop."""

from django.http import HttpRequest, HttpResponse
from django.views.decorators.http import require_safe

from logbook.people.access import open_to

from ..models import INSIDE
from ..sheets import as_csv, parts_rows, time_rows
from .pages import job_of


@require_safe
@open_to(*INSIDE)
def time_csv(request: HttpRequest, number: int | None = None) -> HttpResponse:
    order = job_of(request, number) if number else None
    return file_of(as_csv(time_rows(request.user, order)), "time", number)


@require_safe
@open_to(*INSIDE)
def parts_csv(request: HttpRequest, number: int | None = None) -> HttpResponse:
    order = job_of(request, number) if number else None
    return file_of(as_csv(parts_rows(request.user, order)), "parts", number)


def file_of(text: str, name: str, number: int | None) -> HttpResponse:
    """A CSV file to keep, named by what it holds."""
    answer = HttpResponse(text, content_type="text/csv; charset=utf-8")
    answer["Content-Disposition"] = f'attachment; filename="{f"job-{number}-" if number else ""}{name}.csv"'
    return answer
