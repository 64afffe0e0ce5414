"""Parts: the list, one part with where it sat, fitted, taken off and moved."""

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_safe

from logbook.engines import queries, services
from logbook.engines.forms import FitPartForm, MovePartForm, PartForm, TakeOffForm
from logbook.engines.models import Engine, Part
from logbook.engines.services.guards import AT_THE_ENGINE, KEEP_PARTS
from logbook.people.access import open_to

from .asking import done, form_answer, form_page


@require_safe
@open_to()
def parts(request: HttpRequest) -> HttpResponse:
    """Every part of the shop: where it sits, and what it has run."""
    rows = list(queries.parts_with_places(request.user))
    hours = queries.hours_of(rows, timezone.now())
    told = [(part, sits(part), hours[part.pk]) for part in rows]
    context = {"parts": told, "loose": sum(place is None for _part, place, _hours in told),
               "keeps": request.user.has_role(*KEEP_PARTS)}  # fmt: skip
    return render(request, "engines/parts.html", context)


@require_safe
@open_to()
def part(request: HttpRequest, pk: int) -> HttpResponse:
    """One part: what it has run, and every place it sat at."""
    found = get_object_or_404(queries.parts_with_places(request.user), pk=pk)
    hours = queries.hours_of([found], timezone.now())[found.pk]
    context = {"part": found, "place": sits(found), "hours": hours, "fits": request.user.has_role(*AT_THE_ENGINE)}
    return render(request, "engines/part.html", context)


@form_page
@open_to(*KEEP_PARTS)
def new_part(request: HttpRequest) -> HttpResponse:
    """Take a part into the logbook."""
    form = PartForm(request.POST or None, shop=request.user.shop)
    added = done(form, lambda told: services.add_part(by=request.user, at=timezone.now(), **told))
    if added:
        messages.success(request, _("%(part)s is in the logbook.") % {"part": added})
        return redirect("engines:part", added.pk)
    return form_answer(request, form, heading=_("A new part"), submit=_("Take this part in"),
                       back=reverse("engines:parts"), where=_("all parts"))  # fmt: skip


@form_page
@open_to(*AT_THE_ENGINE)
def fit_part(request: HttpRequest, pk: int) -> HttpResponse:
    """Fit a part to an engine."""
    found = get_object_or_404(Part.objects.seen_by(request.user), pk=pk)
    start = {"fitted_at": timezone.now(), "engine": request.GET.get("engine")}
    form = FitPartForm(request.POST or None, person=request.user, initial=start)
    if done(form, lambda told: services.fit_part(by=request.user, at=timezone.now(), part=found, **told)):
        messages.success(request, _("Fitted."))
        return redirect("engines:part", pk)
    return form_answer(request, form, heading=_("Fit %(part)s") % {"part": found}, submit=_("Fit it"),
                       back=reverse("engines:part", args=[pk]), where=found, positions=positions(request, found))  # fmt: skip


@form_page
@open_to(*AT_THE_ENGINE)
def move_part(request: HttpRequest, pk: int) -> HttpResponse:
    """Move a part to another place."""
    found = get_object_or_404(Part.objects.seen_by(request.user), pk=pk)
    form = MovePartForm(request.POST or None, person=request.user, initial={"fitted_at": timezone.now()})
    if done(form, lambda told: services.move_part(
        by=request.user, at=timezone.now(), part=found, moved_at=told.pop("fitted_at"), **told)):  # fmt: skip
        messages.success(request, _("Moved: its hours go with it."))
        return redirect("engines:part", pk)
    return form_answer(request, form, heading=_("Move %(part)s") % {"part": found}, submit=_("Move it"),
                       back=reverse("engines:part", args=[pk]), where=found, positions=positions(request, found))  # fmt: skip


@form_page
@open_to(*AT_THE_ENGINE)
def take_off_part(request: HttpRequest, pk: int) -> HttpResponse:
    """Take a part off its engine."""
    found = get_object_or_404(Part.objects.seen_by(request.user), pk=pk)
    form = TakeOffForm(request.POST or None, shop=request.user.shop, initial={"taken_off_at": timezone.now()})
    if done(form, lambda told: services.take_off_part(by=request.user, at=timezone.now(), part=found, **told)):
        messages.success(request, _("Taken off; its hours stay with it."))
        return redirect("engines:part", pk)
    return form_answer(request, form, heading=_("Take off %(part)s") % {"part": found}, submit=_("Take it off"),
                       back=reverse("engines:part", args=[pk]), where=found)  # fmt: skip


def sits(part: Part) -> object | None:
    """Where a part sits now; None when it is loose."""
    return next((fitting for fitting in part.fittings.all() if fitting.taken_off_at is None), None)


def positions(request: HttpRequest, part: Part) -> list[str]:
    """Positions to pick from: those that the part's kind has on any engine of the shop."""
    found: dict[str, None] = {}
    for engine in Engine.objects.seen_by(request.user).order_by("-cylinders"):
        found |= dict.fromkeys(queries.positions_of(engine, part.kind))
    return list(found)
