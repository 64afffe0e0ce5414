"""The bench page and what is posted from it: each loads, calls one service, answers with the next step."""

from collections.abc import Callable
from functools import wraps
from urllib.parse import urlencode
from uuid import uuid4

from django.contrib import messages
from django.http import HttpRequest, HttpResponse, HttpResponseRedirect
from django.shortcuts import get_object_or_404, render
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_GET, require_http_methods, require_POST

from logbook.core.page import page_or_fragment, wants_fragment
from logbook.core.refusal import Refused
from logbook.people.access import open_to
from logbook.people.models import Person
from logbook.work.models import Task

from .forms import ActForm, AnswerForm, CorrectionForm
from .models import Measurement, Reading
from .page import bench_page, measurers, pass_form
from .services import (
    SlipAsked,
    finish_at_bench,
    move_reading,
    open_measurement,
    record_act,
    record_reading,
    state_conditions,
    strike_reading,
    turn_crank,
)
from .words import station_title

WHO = "bench-measured-by"


def task_of(request: HttpRequest, number: int, task: int) -> Task:
    """A measuring task of the person's shop; else 404."""
    rows = Task.objects.seen_by(request.user).exclude(kind="")
    rows = rows.select_related("work_order__engine", "work_order__part", "work_order__shop")
    return get_object_or_404(rows, pk=task, work_order__number=number)


def at(task: Task, name: str = "bench", **more: object) -> str:
    """An address of a task at the bench."""
    address = reverse(f"bench:{name}", args=[task.work_order.number, task.pk])
    told = {key: value for key, value in more.items() if value}
    return f"{address}?{urlencode(told)}" if told else address


def show(request: HttpRequest, task: Task, *, status: int = 200, **more: object) -> HttpResponse:
    """The bench page, or the part of it that changed. A refusal is 422; htmx takes it in as it is."""
    context = bench_page(task, request.user, now=timezone.now(), measured_by=request.session.get(WHO), **more)
    context["is_part"] = wants_fragment(request)
    return page_or_fragment(request, "bench/bench.html", context, fragment="step",
                            status=200 if context["is_part"] else status)  # fmt: skip


def answer(request: HttpRequest, task: Task, **more: object) -> HttpResponse:
    """What comes after something was kept: the next step at once, or by way of its address."""
    if not wants_fragment(request):
        return HttpResponseRedirect(at(task, **more))
    response = show(request, task, **more)
    response["HX-Replace-Url"] = at(task, **more)
    return response


def refusals_shown(view: Callable[..., HttpResponse]) -> Callable[..., HttpResponse]:
    """Show what a service refuses on the bench page, with what was typed still in its field."""

    @wraps(view)
    def asked(request: HttpRequest, number: int, task: int) -> HttpResponse:
        row = task_of(request, number, task)
        try:
            return view(request, row)
        except SlipAsked as slip:
            return show(request, row, status=422, slip=slip, said=request.POST)
        except Refused as refused:
            return show(request, row, status=422, refused=str(refused), said=request.POST)

    return asked


@require_GET
@open_to("technician", "supervisor")
def bench(request: HttpRequest, number: int, task: int) -> HttpResponse:
    """The next step, or the station asked for."""
    asked = {name: request.GET.get(name, "") for name in ("station", "step", "kept", "ask")}
    return show(request, task_of(request, number, task), **asked)


@require_http_methods(["GET", "POST"])
@open_to("technician")
def open_pass(request: HttpRequest, number: int, task: int) -> HttpResponse:
    """Open a pass: gauge and conditions are said once for all its readings."""
    row, now = task_of(request, number, task), timezone.now()
    form = pass_form(row, request.user, now, request.POST or None)
    if request.method == "POST" and form.is_valid():
        told = form.cleaned_data
        try:
            open_measurement(
                row, by=request.user, at=now, phase=told["phase"], gauge=told["gauge"], conditions=form.conditions,
                engine_hours=told["engine_hours"],
            )  # fmt: skip
            return HttpResponseRedirect(at(row))
        except Refused as refused:
            form.add_error(None, str(refused))
    context = bench_page(row, request.user, now=now, form=form)
    return render(request, "bench/pass.html", context, status=422 if form.errors else 200)


@require_http_methods(["GET", "POST"])
@open_to("technician")
def conditions(request: HttpRequest, number: int, task: int, measurement: int) -> HttpResponse:
    """Say better how an open pass is taken: a zero after, where the air came out."""
    row, now = task_of(request, number, task), timezone.now()
    opened = get_object_or_404(Measurement.objects.filter(task=row, closed_at=None), pk=measurement)
    form = pass_form(row, request.user, now, request.POST or None, opened=opened)
    if request.method == "POST" and form.is_valid():
        try:
            state_conditions(opened, by=request.user, at=now, conditions=form.conditions)
            return HttpResponseRedirect(at(row))
        except Refused as refused:
            form.add_error(None, str(refused))
    context = bench_page(row, request.user, now=now, form=form, opened=opened)
    return render(request, "bench/pass.html", context, status=422 if form.errors else 200)


@require_POST
@open_to("technician")
@refusals_shown
def read(request: HttpRequest, task: Task) -> HttpResponse:
    """Keep one answer: a value, or why nothing was measured."""
    form = AnswerForm(measurers(request.user), request.POST)
    if not form.is_valid():
        raise Refused(" ".join(told for every in form.errors.values() for told in every))
    told, now = form.cleaned_data, timezone.now()
    who: Person = told["measured_by"] or request.user
    request.session[WHO] = who.pk
    kept = record_reading(
        pass_for(task, told["phase"], request.user, now), by=request.user, at=now, client_id=told["client_id"],
        station=request.POST.get("at_station") or told["station"], typed=told["typed"], not_measured=form.reason, measured_by=who,
        slip_answer=told["slip_answer"],
    )  # fmt: skip
    return answer(request, task, kept=kept.pk)


def pass_for(task: Task, phase: str, by: Person, now: object) -> Measurement:
    """The open pass of a phase; as left is taken as its as found was, so it opens by itself."""
    opened = list(task.measurements.filter(closed_at=None))
    mine = [one for one in opened if one.phase == phase]
    if mine:
        return mine[-1]
    found = [one for one in opened if one.phase == Measurement.Phase.AS_FOUND]
    if not found:
        raise Refused(_("No pass is open: say first with which gauge and how it is measured."))
    like = found[-1]
    return open_measurement(task, by=by, at=now, phase=phase, gauge=like.gauge, conditions=like.conditions,
                            engine_hours=like.engine_hours)  # fmt: skip


@require_POST
@open_to("technician")
@refusals_shown
def act(request: HttpRequest, task: Task) -> HttpResponse:
    """Write down what was done at a station."""
    form = ActForm(request.POST)
    if not form.is_valid():
        raise Refused(_("Write in a few words what was done."))
    told = form.cleaned_data
    record_act(task, by=request.user, at=timezone.now(), client_id=told["client_id"], station=told["station"],
               what=told["what"])  # fmt: skip
    return answer(request, task)


@require_POST
@open_to("technician")
@refusals_shown
def turn(request: HttpRequest, task: Task) -> HttpResponse:
    """The crank was turned to a stop."""
    turn_crank(task, by=request.user, at=timezone.now(), to=request.POST.get("to", ""))
    return answer(request, task)


@require_POST
@open_to("technician")
@refusals_shown
def finish(request: HttpRequest, task: Task) -> HttpResponse:
    """Close the passes and finish the task."""
    minutes = request.POST.get("minutes", "").strip()
    if minutes and not (minutes.isascii() and minutes.isdigit() and len(minutes) < 6):
        raise Refused(_("Read “%(minutes)s”; write the time it took in whole minutes.") % {"minutes": minutes})
    finish_at_bench(task, by=request.user, at=timezone.now(), minutes=int(minutes) if minutes else None)
    messages.success(request, _("“%(task)s” is finished; what was derived is kept with it.") % {"task": task})
    return HttpResponseRedirect(reverse("work:job", args=[task.work_order.number]))


@require_http_methods(["GET", "POST"])
@open_to("technician")
def reading(request: HttpRequest, number: int, task: int, reading: int) -> HttpResponse:
    """Correct, strike or move one reading."""
    row = task_of(request, number, task)
    rows = (
        Reading.objects.standing()
        .filter(measurement__task=row)
        .select_related("measurement", "measured_by", "keyed_by")
    )
    wrong = get_object_or_404(rows, pk=reading)
    context = bench_page(row, request.user, now=timezone.now())
    stations = [(one, title) for one, title in context["stations"] if one != wrong.station]
    form = CorrectionForm(stations, request.POST or None, initial={"client_id": uuid4(), "station": ""})
    slip = None
    if request.method == "POST" and form.is_valid():
        try:
            corrected(wrong, form, request.user)
            return HttpResponseRedirect(at(row))
        except SlipAsked as asked:
            slip = asked
        except Refused as refused:
            form.add_error(None, str(refused))
    told = {**context, "form": form, "wrong": wrong, "wrong_title": station_title(wrong.station), "slip": slip}
    return render(request, "bench/reading.html", told, status=422 if form.errors or slip else 200)


def corrected(wrong: Reading, form: CorrectionForm, by: Person) -> Reading:
    """Do what the correction form asks for."""
    told = form.cleaned_data
    given = {"by": by, "at": timezone.now(), "client_id": told["client_id"], "reason": told["reason"]}
    if told["does"] == form.STRIKE:
        return strike_reading(wrong, **given)
    if told["does"] == form.MOVE:
        return move_reading(wrong, station=told["station"], **given)
    return record_reading(
        wrong.measurement, station=wrong.station, typed=told["typed"], measured_by=wrong.measured_by, supersedes=wrong,
        slip_answer=told["slip_answer"], **given,
    )  # fmt: skip
