"""The intervals of an engine: seen by everybody, kept by supervisors; a job recorded as done, or put off."""

from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_POST, require_safe

from logbook.engines.models import Engine
from logbook.people.access import open_to

from .. import services
from ..forms import DeferForm, DoneForm, IntervalForm
from ..models import INSIDE, Interval
from ..queries import due_list, lengths_of, meter_totals
from ..words import every_words
from .due import Row
from .pages import FormPage, done, form_page


def interval_of(request: HttpRequest, pk: int) -> Interval:
    """An interval of the person's shop; 404 where there is none."""
    return get_object_or_404(Interval.objects.seen_by(request.user).select_related("engine", "shop"), pk=pk)


def page_for(interval: Interval, heading: str, button: str, lead: list[str]) -> FormPage:
    """A form page about an interval, back to its engine's intervals."""
    cells = [("engine", interval.engine), ("job", interval.title or _("new"))]
    return FormPage(heading, button, reverse("work:intervals", args=[interval.engine_id]), cells, lead)


@require_safe
@open_to(*INSIDE)
def intervals(request: HttpRequest, engine: int) -> HttpResponse:
    """What an engine is kept by, where each stands, and when it was last done."""
    found = get_object_or_404(Engine.objects.seen_by(request.user), pk=engine)
    mark = request.user.shop.decimal_mark
    stopped = Interval.objects.seen_by(request.user).filter(engine=found, is_stopped=True)
    context = {
        "engine": found,
        "rows": [Row(job, mark) for job in due_list(request.user, timezone.now(), engine=found)],
        "stopped": [(interval, every_words(interval, mark)) for interval in stopped],
        "keeps": request.user.has_role("supervisor"),
        "records": request.user.has_role("supervisor", "technician"),
    }
    return render(request, "work/intervals.html", context)


@form_page
@open_to("supervisor")
def new_interval(request: HttpRequest, engine: int) -> HttpResponse:
    """Add a job to an engine's intervals."""
    found = get_object_or_404(Engine.objects.seen_by(request.user).select_related("shop"), pk=engine)
    interval = Interval(shop=found.shop, engine=found)
    form = IntervalForm(request.POST or None, interval=interval, shop=found.shop)
    lead = [_("It comes due by whichever of its lengths comes first; at least one is needed.")]
    page = page_for(interval, _("A job for %(engine)s") % {"engine": found}, _("Keep this job"), lead)
    return page.answer(request, form, lambda: keep(request, form), _("The job is kept. Record when it was last done."))


@form_page
@open_to("supervisor")
def change_interval(request: HttpRequest, pk: int) -> HttpResponse:
    """Change a job: its next due point is counted anew from where it was last done."""
    interval = interval_of(request, pk)
    form = IntervalForm(request.POST or None, interval=interval, shop=interval.shop)
    lead = [_("A changed length counts from where the job was last done; what was recorded stays.")]
    page = page_for(interval, _("Change “%(job)s”") % {"job": interval.title}, _("Keep it so"), lead)
    return page.answer(request, form, lambda: keep(request, form), _("Changed."))


def keep(request: HttpRequest, form: IntervalForm) -> None:
    """Keep an interval as it was filled in."""
    services.keep_interval(form.filled_in(), by=request.user, at=timezone.now())


@require_POST
@open_to("supervisor")
def stop_interval(request: HttpRequest, pk: int) -> HttpResponse:
    """Stop keeping a job, or keep it again."""
    interval = interval_of(request, pk)
    act, said = services.stop_interval, _("“%(job)s” has left the due list; what was done stays.")
    if interval.is_stopped:
        act, said = services.keep_interval, _("“%(job)s” is kept again.")
    done(request, lambda: act(interval, by=request.user, at=timezone.now()), said % {"job": interval.title})
    return redirect("work:intervals", interval.engine_id)


@form_page
@open_to("supervisor", "technician")
def record_done(request: HttpRequest, pk: int) -> HttpResponse:
    """Record a job as done without a work order: before the logbook began, or by others."""
    interval, at = interval_of(request, pk), timezone.now()
    totals = meter_totals(interval.engine, at)
    form = DoneForm(request.POST or None, totals=totals, units=lengths_of(interval), at=at, shop=interval.shop)
    lead = [_("A job done on a work order is recorded when it is signed. This is for one done before, or elsewhere.")]
    page = page_for(interval, _("“%(job)s” was done") % {"job": interval.title}, _("Record it"), lead)
    return page.answer(
        request, form,
        lambda: services.record_done(interval, by=request.user, at=at, totals=form.totals(), done_at=form.done_at()),
        _("Recorded; it is never changed. The due list counts from there."),
    )  # fmt: skip


@form_page
@open_to("supervisor")
def defer(request: HttpRequest, pk: int) -> HttpResponse:
    """Put a job off."""
    interval = interval_of(request, pk)
    form = DeferForm(request.POST or None, shop=interval.shop)
    lead = [_("It stays on the due list, with your name and the reason, and comes back to its place after that day.")]
    page = page_for(interval, _("Put “%(job)s” off") % {"job": interval.title}, _("Put it off"), lead)
    return page.answer(
        request, form, lambda: services.defer(interval, by=request.user, at=timezone.now(), **form.cleaned_data),
        _("Put off."), go=reverse("work:due"),
    )  # fmt: skip
