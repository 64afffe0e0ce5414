"""Engines: the list, one engine with its plan view, its papers, its times out of service."""

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_safe

from logbook.core.plan_view import dial, plan_view
from logbook.engines import queries, services
from logbook.engines.forms import EngineForm, OutOfServiceForm
from logbook.engines.models import Engine, OutOfService
from logbook.engines.papers import by_cylinder, follows
from logbook.engines.services.guards import AT_THE_ENGINE, KEEP_LIMITS, SUPERVISORS
from logbook.engines.words import in_words
from logbook.people.access import open_to

from .asking import done, form_answer, form_page
from .meters import meters_told

OTHER_SIDE = {"free_end": "flywheel", "flywheel": "free_end"}


@require_safe
@open_to()
def engines(request: HttpRequest) -> HttpResponse:
    """Every engine of the shop."""
    rows = list(queries.with_standing(Engine.objects.seen_by(request.user), timezone.now()))
    context = {
        "engines": rows,
        "out": sum(one.is_out for one in rows),
        "without_limits": sum(one.sheet_version is None for one in rows),
        "changes": request.user.has_role(*SUPERVISORS),
    }
    return render(request, "engines/engines.html", context)


@require_safe
@open_to()
def engine(request: HttpRequest, pk: int) -> HttpResponse:
    """One engine: from above, its figures, crank plan, meters, what sits in it, its limits, whether it is out of service."""
    now, person = timezone.now(), request.user
    found = get_object_or_404(Engine.objects.seen_by(person).select_related("shop"), pk=pk)
    told, left = follows(found), request.GET.get("left", "")
    left = left if left in OTHER_SIDE else found.numbered_from
    context = {
        "engine": found, "told": told, "meters": meters_told(found, now), "fittings": queries.sitting_in(found),
        "sheet": queries.sheet_in_force(found, now), "out": queries.out_now(found, now),
        "preparing": found.limit_sheets.filter(in_force_at=None, given_up_at=None).first(),
        "other_side": OTHER_SIDE[left], "changes": person.has_role(*SUPERVISORS),
        "reads_meters": person.has_role(*AT_THE_ENGINE), "keeps_limits": person.has_role(*KEEP_LIMITS),
        "works_here": person.has_role("technician", "supervisor", "toolroom"),  # a witness comes from outside
    }  # fmt: skip
    if told.measured:
        plan = told.crank_plan
        context |= {
            "picture": plan_view(told.measured, order=told.by_hand, left=left, first_bank=found.first_bank),
            "dial": dial(plan.stops), "stops": [(in_words(stop.place), by_cylinder(stop.stations)) for stop in plan.stops],
             "why_no_plan": plan.why_not and in_words(plan.why_not),
            "unreachable": [in_words(why) for why in plan.unreachable.values()],
        }  # fmt: skip
    return render(request, "engines/engine.html", context)


@form_page
@open_to(*SUPERVISORS)
def new_engine(request: HttpRequest) -> HttpResponse:
    """Take an engine into the logbook."""
    form = EngineForm(request.POST or None, shop=request.user.shop)
    added = done(form, lambda papers: services.add_engine(by=request.user, at=timezone.now(), **papers))
    if added:
        messages.success(request, _("%(engine)s is in the logbook. Fit its hour meter next.") % {"engine": added})
        return redirect("engines:engine", added.pk)
    return form_answer(request, form, heading=_("A new engine"), submit=_("Take this engine in"),
                       back=reverse("engines:engines"), where=_("all engines"), says=_(
        "Write what its papers say, sizes with their unit. What isn't known stays empty: nothing is assumed for it, and "
        "what needs it is left out and said."))  # fmt: skip


@form_page
@open_to(*SUPERVISORS)
def change_engine(request: HttpRequest, pk: int) -> HttpResponse:
    """Change an engine's papers."""
    found = get_object_or_404(Engine.objects.seen_by(request.user), pk=pk)
    name = found.name
    form = EngineForm(request.POST or None, instance=found, shop=request.user.shop)
    if done(form, lambda papers: services.change_engine(by=request.user, engine=found, **papers)):
        messages.success(request, _("Changed. What was judged before keeps its judgement."))
        return redirect("engines:engine", pk)
    return form_answer(request, form, heading=_("Papers of %(engine)s") % {"engine": name}, submit=_("Keep these papers"),
                       back=reverse("engines:engine", args=[pk]), where=name)  # fmt: skip


@require_safe
@open_to()
def out_of_service(request: HttpRequest, pk: int) -> HttpResponse:
    """Every time an engine was out of service."""
    found = get_object_or_404(Engine.objects.seen_by(request.user), pk=pk)
    times = found.times_out.select_related("recorded_by")
    context = {"engine": found, "times": times, "changes": request.user.has_role(*SUPERVISORS)}
    return render(request, "engines/out_of_service.html", context)


@form_page
@open_to(*SUPERVISORS)
def new_out_of_service(request: HttpRequest, pk: int) -> HttpResponse:
    """Record a time out of service."""
    found = get_object_or_404(Engine.objects.seen_by(request.user), pk=pk)
    form = OutOfServiceForm(request.POST or None, initial={"from_at": timezone.now()})
    if done(
        form, lambda told: services.record_out_of_service(by=request.user, at=timezone.now(), engine=found, **told)
    ):
        messages.success(request, _("Recorded."))
        return redirect("engines:out_of_service", pk)
    return form_answer(request, form, heading=_("%(engine)s goes out of service") % {"engine": found},
                       submit=_("Record it"), back=reverse("engines:out_of_service", args=[pk]), where=found)  # fmt: skip


@form_page
@open_to(*SUPERVISORS)
def change_out_of_service(request: HttpRequest, pk: int, time_out: int) -> HttpResponse:
    """End a time out of service, or mend what was recorded of it."""
    rows = OutOfService.objects.seen_by(request.user).select_related("engine")
    found = get_object_or_404(rows, pk=time_out, engine_id=pk)
    form = OutOfServiceForm(request.POST or None, instance=found)
    if done(form, lambda told: services.change_out_of_service(
        by=request.user, at=timezone.now(), time_out=found, **told)):  # fmt: skip
        messages.success(request, _("Recorded."))
        return redirect("engines:out_of_service", pk)
    return form_answer(request, form, heading=_("Out of service: %(engine)s") % {"engine": found.engine},
                       submit=_("Keep this"), back=reverse("engines:out_of_service", args=[pk]), where=found.engine)  # fmt: skip
