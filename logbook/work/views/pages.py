"""What the pages of this room share: whose job it is, an act that may be refused, a form with one button."""

from collections.abc import Callable
from dataclasses import dataclass, field

from django import forms
from django.contrib import messages
from django.core.exceptions import ValidationError
from django.db.models import QuerySet
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.views.decorators.http import require_http_methods

from logbook.core.refusal import Refused

from ..models import WorkOrder

LONGEST_NUMBER = 19  # digits: more don't fit into a row's number
form_page = require_http_methods(["GET", "HEAD", "POST"])


def job_of(request: HttpRequest, number: int) -> WorkOrder:
    """The work order of this number in the person's shop; 404 where there is none."""
    orders = WorkOrder.objects.seen_by(request.user).select_related("engine", "part", "shop")
    return get_object_or_404(orders, number=number)


def row_of(request: HttpRequest, rows: QuerySet, number: int, pk: int) -> object:
    """A task, lock, item or hand-over of a job in the person's shop; 404 where there is none."""
    found = rows.seen_by(request.user).select_related("work_order__engine", "work_order__part", "shop")
    return get_object_or_404(found, pk=pk, work_order__number=number)


def is_number(text: str) -> bool:
    """Tell whether what came with a form can be a row's number."""
    return text.isascii() and text.isdigit() and len(text) < LONGEST_NUMBER


def back_to_job(number: int, at: str = "") -> HttpResponse:
    """To the job's page, at one of its places."""
    return redirect(reverse("work:job", args=[number]) + (f"#{at}" if at else ""))


def sentences(error: Refused | ValidationError) -> list[str]:
    """What an act was refused with, a sentence each."""
    return error.messages if isinstance(error, ValidationError) else [str(error)]


def done(request: HttpRequest, act: Callable[[], object], said: str = "") -> bool:
    """Do something; refused, the sentences stand at the top of the next page."""
    try:
        act()
    except (Refused, ValidationError) as error:
        for sentence in sentences(error):
            messages.error(request, sentence)
        return False
    if said:
        messages.success(request, said)
    return True


@dataclass
class FormPage:
    """A page with one form and one button, for one act."""

    heading: str
    button: str
    back: str
    cells: list[tuple[str, object]]
    lead: list[str] = field(default_factory=list)
    open_now: list[dict[str, str]] | None = None

    def answer(
        self, request: HttpRequest, form: forms.Form, act: Callable[[], object], said: str, *, go: str = ""
    ) -> HttpResponse:
        """Do the act once the form holds; else show it again, with what was typed and what is wrong."""
        if request.method == "POST" and form.is_valid():
            try:
                act()
            except (Refused, ValidationError) as error:
                form.add_error(None, sentences(error))
            else:
                messages.success(request, said)
                return redirect(go or self.back)
        return render(request, "work/form.html", {"page": self, "form": form}, status=422 if form.errors else 200)


def cells_of(order: WorkOrder) -> list[tuple[str, object]]:
    """The title block of a job's page, by the names of its cells."""
    return [
        ("engine" if order.engine_id else "part", order.engine or order.part),
        ("job", order),
        ("state", order.get_state_display()),
    ]
