"""The pages of deciding: what waits, one finding at a time, an engine that runs undecided."""

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_http_methods, require_POST, require_safe

from logbook.core.refusal import Refused
from logbook.people.access import open_to
from logbook.work.models import WorkOrder
from logbook.work.services import move

from . import lists
from .cases import Case
from .forms import DecisionForm, UndecidedForm
from .queries import cases_of, earlier_outcomes, extensions_of, orders_open_to, undecided_runs
from .services import decide as make_decision
from .services import end_running_undecided, is_frozen, running_undecided
from .services.deciding import why_closed
from .shown import Shown
from .visits import visits
from .words import case_words

REFUSED, NOT_UNDERSTOOD = 409, 422

looks_or_sends = require_http_methods(["GET", "HEAD", "POST"])


def order_of(request: HttpRequest, number: int) -> WorkOrder:
    """The work order of an address, if this person may look into it."""
    return get_object_or_404(orders_open_to(request.user).select_related("engine__shop", "opened_by"), number=number)


@require_safe
@open_to("supervisor")
def to_decide(request: HttpRequest) -> HttpResponse:
    """What waits for a decision or a signature, the most pressing first."""
    waiting = lists.to_decide(request.user, timezone.now())
    rows = [(entry, Shown(entry.worst, request.user, ()) if entry.worst else None) for entry in waiting.entries]
    return render(request, "review/to_decide.html", {"waiting": waiting, "rows": rows})


@looks_or_sends
@open_to("supervisor")
def decide(request: HttpRequest, number: int) -> HttpResponse:
    """One finding at a time: found and left on one ruler, its history, its working, and the decision."""
    order, at = order_of(request, number), timezone.now()
    cases = sorted((one for one in cases_of([order], at) if one.is_flagged), key=lambda one: one.badness)
    if request.method != "POST":
        return decide_page(request, order, cases, chosen(cases, request.GET.get("on")))
    case = next((one for one in cases if one.subject.key == request.POST.get("on")), None)
    if case is None:
        messages.error(
            request, _("That reading was struck or replaced meanwhile; look at the findings as they stand now.")
        )
        return redirect("review:decide", number)
    form = DecisionForm(request.POST, decimal_mark=request.user.shop.decimal_mark)
    if not form.is_valid():
        return decide_page(request, order, cases, case, form, status=NOT_UNDERSTOOD)
    try:
        made = make_decision(case.subject.decided_on, by=request.user, at=at, **form.cleaned_data)
    except Refused as refused:
        return decide_page(request, order, cases, case, form, refused=str(refused), status=REFUSED)
    told = {"where": case_words(case), "decision": made.get_choice_display().rstrip(" …")}
    messages.success(request, _("%(where)s: %(decision)s. It stands under your name.") % told)
    return redirect("review:decide", number)


def chosen(cases: list[Case], key: str | None) -> Case | None:
    """The case asked for, else the first undecided, else the first."""
    asked = next((one for one in cases if one.subject.key == key), None)
    return asked or next((one for one in cases if one.is_undecided), cases[0] if cases else None)


def decide_page(
    request: HttpRequest, order: WorkOrder, cases: list[Case], case: Case | None, form: DecisionForm | None = None,
    *, refused: str = "", status: int = 200,
) -> HttpResponse:  # fmt: skip
    """The page of one case, with the others listed under it."""
    earlier = earlier_outcomes(cases)
    counts = extensions_of([one.decision for one in cases if one.decision])
    shown = [
        Shown(one, request.user, visits(earlier.get((one.characteristic, one.station), ())),
              counts.get(one.decision.pk, 0) if one.decision else 0)
        for one in cases
    ]  # fmt: skip
    now = next((one for one in shown if one.case is case), None)
    context = {
        "order": order, "shown": now, "others": shown, "place": shown.index(now) + 1 if now else 0,
        "form": form or DecisionForm(), "refused": refused, "running": undecided_runs([order]).get(order.pk),
        "left_open": sum(one.is_undecided for one in cases), "again": [one for one in shown if one.case.is_to_be_measured_again],
        "is_frozen": is_frozen(order), "closed": why_closed(case) if case else "",
    }  # fmt: skip
    return render(request, "review/decide.html", context, status=status)


@require_POST
@open_to("supervisor")
def back_to_bench(request: HttpRequest, number: int) -> HttpResponse:
    """Send a job back to the bench, for something is to be measured again."""
    order = order_of(request, number)
    try:
        move(order, WorkOrder.State.AT_THE_BENCH, by=request.user, at=timezone.now())
    except Refused as refused:
        messages.error(request, str(refused))
        return redirect("review:decide", number)
    messages.success(request, _("Job %(job)s is back at the bench.") % {"job": order})
    return redirect("review:to_decide")


@looks_or_sends
@open_to("technician", "supervisor")
def running(request: HttpRequest, number: int) -> HttpResponse:
    """Say that an engine was put back before a decision, and on whose word."""
    order = order_of(request, number)
    form = UndecidedForm(request.POST if request.method == "POST" else None)
    status = NOT_UNDERSTOOD if form.is_bound and not form.is_valid() else 200
    if form.is_bound and form.is_valid():
        try:
            running_undecided(order, by=request.user, at=timezone.now(), **form.cleaned_data)
        except Refused as refused:
            form.add_error(None, str(refused))
            status = REFUSED
        else:
            messages.success(request, _("It stands as running undecided, and heads the list of what is to be decided."))
            return redirect("review:running", number)
    context = {
        "order": order,
        "form": form,
        "running": undecided_runs([order]).get(order.pk),
        "is_frozen": is_frozen(order),
    }
    return render(request, "review/running.html", context, status=status)


@require_POST
@open_to("technician", "supervisor")
def end_running(request: HttpRequest, number: int) -> HttpResponse:
    """Say that the engine no longer runs undecided."""
    order = order_of(request, number)
    try:
        end_running_undecided(order, by=request.user, at=timezone.now())
    except Refused as refused:
        messages.error(request, str(refused))
    else:
        messages.success(request, _("The engine of job %(job)s no longer runs undecided.") % {"job": order})
    return redirect("review:running", number)
