"""What is done on a job with a few words: finish a task, add one, hand over, stop short, drop, explain, use a part."""

from django.http import HttpRequest, HttpResponse
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _

from logbook.people.access import open_to

from .. import services
from ..forms import FinishForm, HandOverForm, PartForm, ReasonForm, TaskForm, WitnessForm
from ..models import ClosingItem, Task, WorkOrder
from ..queries import open_now
from ..stations import stations_of
from .pages import FormPage, cells_of, form_page, job_of, row_of


def page_for(order: WorkOrder, heading: str, button: str, lead: list[str], place: str = "", **more: object) -> FormPage:
    """A form page about a job, back to the job's page."""
    back = reverse("work:job", args=[order.number]) + (f"#{place}" if place else "")
    return FormPage(heading, button, back, cells_of(order), lead, **more)


@form_page
@open_to("technician")
def finish_task(request: HttpRequest, number: int, pk: int) -> HttpResponse:
    """Finish a task, with its time; the time since it was started is offered."""
    task, at = row_of(request, Task.objects, number, pk), timezone.now()
    since = round((at - task.started_at).total_seconds() / 60) if task.started_at else None
    form = FinishForm(request.POST or None, initial={"minutes": since}, shop=task.shop)
    page = page_for(task.work_order, _("“%(task)s” is done") % {"task": task}, _("Finish the task"), [], f"task-{pk}")
    return page.answer(
        request, form,
        lambda: services.finish_task(task, by=request.user, at=at, minutes=form.cleaned_data["minutes"]),
        _("“%(task)s” is done.") % {"task": task},
    )  # fmt: skip


@form_page
@open_to("supervisor", "technician")
def add_task(request: HttpRequest, number: int) -> HttpResponse:
    """Add a task to a job that is still worked on."""
    order = job_of(request, number)
    form = TaskForm(request.POST or None, for_engine=order.engine_id is not None, shop=order.shop)
    lead = [_("A measurement brings its own cautions and the state of the engine it needs.")]
    page = page_for(order, _("Another task"), _("Add it"), lead)
    return page.answer(
        request,
        form,
        lambda: services.add_task(order, by=request.user, at=timezone.now(), **form.cleaned_data),
        _("Added."),
    )


@form_page
@open_to("supervisor", "technician")
def witnessed(request: HttpRequest, number: int, pk: int) -> HttpResponse:
    """Tick the stations of a task that somebody from outside is to witness."""
    task = row_of(request, Task.objects, number, pk)
    listed = stations_of(task)
    more = [station for station in task.witnessed_stations if station not in listed]
    initial = {"stations": task.witnessed_stations, "more": ", ".join(more)}
    form = WitnessForm(request.POST or None, stations=listed, initial=initial, shop=task.shop)
    lead = [_("Whoever witnesses for the owner, insurer or surveyor signs for these readings, on this tablet.")]
    page = page_for(task.work_order, _("Witnessed on “%(task)s”") % {"task": task}, _("Keep these"), lead, f"task-{pk}")
    return page.answer(
        request, form,
        lambda: services.name_witnessed(task, by=request.user, at=timezone.now(), stations=form.named()), _("Kept."),
    )  # fmt: skip


@form_page
@open_to("technician")
def hand_over(request: HttpRequest, number: int) -> HttpResponse:
    """Hand a job over; what stands open goes with it."""
    order = job_of(request, number)
    form = HandOverForm(request.POST or None, by=request.user, shop=order.shop)
    lead = [_("Whoever takes over puts their own locks on first; you lift yours after that.")]
    page = page_for(order, _("Hand this job over"), _("Hand it over"), lead, open_now=open_now(order))
    return page.answer(
        request, form, lambda: services.hand_over(order, by=request.user, at=timezone.now(), **form.cleaned_data),
        _("Handed over, with the closing-up list as it stands."),
    )  # fmt: skip


@form_page
@open_to("technician")
def stop_short(request: HttpRequest, number: int) -> HttpResponse:
    """Stop a job before its end."""
    order = job_of(request, number)
    form = ReasonForm(request.POST or None, shop=order.shop)
    lead = [_("What was measured stays. The closing-up list stays with the job until it is empty or explained.")]
    page = page_for(order, _("Stop this job short"), _("Stop it short"), lead, open_now=open_now(order))
    return page.answer(
        request, form, lambda: services.stop_short(order, by=request.user, at=timezone.now(), **form.cleaned_data),
        _("Stopped short."),
    )  # fmt: skip


@form_page
@open_to("supervisor")
def drop(request: HttpRequest, number: int) -> HttpResponse:
    """Give a job up."""
    order = job_of(request, number)
    form = ReasonForm(request.POST or None, shop=order.shop)
    lead = [_("A dropped job is kept, with what was measured and the reason; it can't be taken up again.")]
    page = page_for(order, _("Drop this job"), _("Drop it"), lead, open_now=open_now(order))
    return page.answer(
        request,
        form,
        lambda: services.drop(order, by=request.user, at=timezone.now(), **form.cleaned_data),
        _("Dropped."),
    )


@form_page
@open_to("technician")
def explain_item(request: HttpRequest, number: int, pk: int) -> HttpResponse:
    """Say why something stays open."""
    item = row_of(request, ClosingItem.objects, number, pk)
    form = ReasonForm(request.POST or None, initial={"reason": item.explanation}, shop=item.shop)
    heading = _("Why “%(what)s” stays open") % {"what": item.what}
    page = page_for(item.work_order, heading, _("Keep the explanation"), [], "closing-up")
    return page.answer(
        request, form,
        lambda: services.explain_item(
            item, by=request.user, at=timezone.now(), explanation=form.cleaned_data["reason"]
        ),
        _("Explained; it stays on the list under your name."),
    )  # fmt: skip


@form_page
@open_to("supervisor", "technician")
def use_part(request: HttpRequest, number: int) -> HttpResponse:
    """Write down a part used up."""
    order = job_of(request, number)
    form = PartForm(request.POST or None, order=order, shop=order.shop)
    page = page_for(order, _("A part was used"), _("Write it down"), [], "parts-used")
    return page.answer(
        request, form, lambda: services.use_part(order, by=request.user, at=timezone.now(), **form.cleaned_data),
        _("Written down."),
    )  # fmt: skip
