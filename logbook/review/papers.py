"""The PDFs of a job: its sheet, the work order to take along, the blank bench sheet."""

from datetime import datetime

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect
from django.utils import timezone
from django.utils.translation import get_language
from django.utils.translation import gettext as _
from django.views.decorators.http import require_safe

from logbook.core.refusal import Refused
from logbook.paper.services import draw
from logbook.people.access import open_to
from logbook.work.models import Task, WorkOrder

from . import sheets
from .services import job_sheet_pdf
from .services.sealing import in_shop
from .views import order_of

PDF = "application/pdf"


@require_safe
@open_to()
def sheet(request: HttpRequest, number: int) -> HttpResponse:
    """The job sheet: sealed once it is signed, as it stands until then."""
    order = order_of(request, number)
    return pdf(request, f"job-{number}.pdf", lambda at: job_sheet_pdf(order, at=at), number)


@require_safe
@open_to("technician", "supervisor", "toolroom")
def work_order_sheet(request: HttpRequest, number: int) -> HttpResponse:
    """The work order with its cautions and locks."""
    order = order_of(request, number)
    title = _("Work order %(number)s: %(title)s") % {"number": number, "title": order.title}
    return pdf(request, f"work-order-{number}.pdf",
               lambda at: drawn("work_order", sheets.work_order_sheet(order), order, title, at), number)  # fmt: skip


@require_safe
@open_to("technician", "supervisor", "toolroom")
def blank_sheet(request: HttpRequest, number: int, task: int) -> HttpResponse:
    """Empty boxes for a task, to be filled in by hand."""
    order = order_of(request, number)
    of_task = get_object_or_404(Task.objects.select_related("work_order__engine__shop", "work_order__shop"),
                                pk=task, work_order=order)  # fmt: skip
    title = _("Bench sheet, job %(number)s: %(task)s") % {"number": number, "task": of_task.title}
    return pdf(request, f"bench-sheet-{number}-{of_task.place}.pdf",
               lambda at: drawn("blank_sheet", sheets.blank_sheet(of_task, at), order, title, at), number)  # fmt: skip


def drawn(template: str, told: dict[str, object], order: WorkOrder, title: str, at: datetime) -> bytes:
    """Draw a sheet on the shop's paper, by the shop's clock."""
    return draw(template, told, paper=order.shop.paper, title=title, language=get_language() or "en",
                at=in_shop(at, order.shop.time_zone))  # fmt: skip


def pdf(request: HttpRequest, name: str, make, number: int) -> HttpResponse:
    """Answer with a PDF; a refusal to draw it becomes a sentence on the job's signing page."""
    try:
        content = make(timezone.now())
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("review:sign", number)
    response = HttpResponse(content, content_type=PDF)
    response["Content-Disposition"] = f'inline; filename="{name}"'
    return response
