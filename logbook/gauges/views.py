"""The pages of the gauges: everybody signed in sees them, the toolroom and supervisors keep them."""

from collections.abc import Callable
from datetime import datetime, time

from django import forms
from django.contrib import messages
from django.core.exceptions import ValidationError
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_http_methods, require_POST, require_safe

from logbook.core.refusal import Refused
from logbook.people.access import open_to

from . import queries, services
from .figures import unit_beside
from .forms import CalibrationForm, CorrectionForm, GaugeForm
from .models import Calibration, Gauge

form_page = require_http_methods(["GET", "HEAD", "POST"])


@require_safe
@open_to()
def gauges(request: HttpRequest) -> HttpResponse:
    """Every gauge of the shop, those that need something first."""
    today = queries.day_of(timezone.now(), request.user.shop)
    rows = [(one, *queries.state_of(one, today)) for one in queries.neediest_first(request.user).select_related("shop")]
    needy = sum(state in ("past_due", "failed", "unknown") for _gauge, state, _words in rows)
    context = {"rows": rows, "needy": needy, "keeps": request.user.has_role(*services.KEEPERS)}
    return render(request, "gauges/gauges.html", context)


@require_safe
@open_to()
def gauge(request: HttpRequest, pk: int) -> HttpResponse:
    """One gauge: its papers, its calibrations, and what it was used for since it was last good when it has failed."""
    found = get_object_or_404(queries.with_calibrations(request.user).select_related("shop"), pk=pk)
    today = queries.day_of(timezone.now(), found.shop)
    context = {
        "gauge": found,
        "complaints": queries.complaints(found, today),
        "in_force": queries.in_force(found, today),
        "keeps": request.user.has_role(*services.KEEPERS),
    }
    if queries.has_failed(found):
        since = queries.last_good_on(found)
        moment = since and datetime.combine(since, time.min, timezone.get_current_timezone())
        context |= {"failed": True, "last_good_on": since, "used": queries.used_since(found, moment)}
    return render(request, "gauges/gauge.html", context)


@form_page
@open_to(*services.KEEPERS)
def new_gauge(request: HttpRequest) -> HttpResponse:
    """Take a gauge in."""
    form = GaugeForm(request.POST or None, shop=request.user.shop)
    added = done(form, lambda told: services.add_gauge(by=request.user, at=timezone.now(), **told))
    if added:
        messages.success(request, _("%(gauge)s is on the list. Record its calibration next.") % {"gauge": added})
        return redirect("gauges:gauge", added.pk)
    return render(request, "gauges/gauge_form.html", {"form": form})


@form_page
@open_to(*services.KEEPERS)
def change_gauge(request: HttpRequest, pk: int) -> HttpResponse:
    """Change a gauge's papers."""
    found = get_object_or_404(Gauge.objects.seen_by(request.user), pk=pk)
    form = GaugeForm(request.POST or None, instance=found, shop=request.user.shop)
    heading = str(found)
    if done(form, lambda told: services.change_gauge(by=request.user, gauge=found, **told)):
        messages.success(request, _("Changed. What was judged with this gauge before keeps its judgement."))
        return redirect("gauges:gauge", pk)
    context = {"form": form, "gauge": found, "name": heading}
    return render(request, "gauges/gauge_form.html", context)


@form_page
@open_to(*services.KEEPERS)
def new_calibration(request: HttpRequest, pk: int) -> HttpResponse:
    """Record a calibration."""
    found = get_object_or_404(Gauge.objects.seen_by(request.user).select_related("shop"), pk=pk)
    form = CalibrationForm(request.POST or None, gauge=found)
    if done(form, lambda told: services.record_calibration(
        by=request.user, at=timezone.now(), gauge=found, **form.figures()
    )):  # fmt: skip
        messages.success(request, _("The calibration is recorded."))
        return redirect("gauges:gauge", pk)
    return calibration_page(request, form, found)


@form_page
@open_to(*services.KEEPERS)
def correct_calibration(request: HttpRequest, pk: int, calibration: int) -> HttpResponse:
    """Record the right calibration in place of a wrong entry."""
    rows = Calibration.objects.seen_by(request.user).select_related("gauge__shop")
    wrong = get_object_or_404(rows, pk=calibration, gauge_id=pk)
    kept = {name: getattr(wrong, name) for name in (*CorrectionForm.Meta.fields, "errors")}
    form = CorrectionForm(request.POST or None, gauge=wrong.gauge, initial=kept)
    if done(form, lambda told: services.supersede_calibration(
        by=request.user, at=timezone.now(), calibration=wrong, reason=told["reason"], **form.figures()
    )):  # fmt: skip
        messages.success(request, _("Corrected; the earlier entry stays to be seen, with the reason."))
        return redirect("gauges:gauge", pk)
    return calibration_page(request, form, wrong.gauge, wrong)


@form_page
@open_to(*services.KEEPERS)
def retire_gauge(request: HttpRequest, pk: int) -> HttpResponse:
    """Ask, then take a gauge out of use."""
    found = get_object_or_404(Gauge.objects.seen_by(request.user), pk=pk)
    if request.method != "POST":
        return render(request, "gauges/retire.html", {"gauge": found})
    return told_on_the_page(request, found, _("Retired: it can't be picked any more, and what it measured stays."),
                            lambda: services.retire_gauge(by=request.user, at=timezone.now(), gauge=found))  # fmt: skip


@require_POST
@open_to(*services.KEEPERS)
def bring_back_gauge(request: HttpRequest, pk: int) -> HttpResponse:
    """Put a retired gauge back into use."""
    found = get_object_or_404(Gauge.objects.seen_by(request.user), pk=pk)
    return told_on_the_page(request, found, _("Back in use."),
                            lambda: services.bring_back_gauge(by=request.user, gauge=found))  # fmt: skip


def done(form: forms.BaseForm, act: Callable[[dict[str, object]], object]) -> object | None:
    """Act on a form that was sent and is right; a refusal becomes the form's own error."""
    if not form.is_bound or not form.is_valid():
        return None
    try:
        return act(form.cleaned_data)
    except Refused as refused:
        form.add_error(None, str(refused))
    except ValidationError as error:
        form.add_error(None, error.messages)
    return None


def calibration_page(
    request: HttpRequest, form: CalibrationForm, found: Gauge, wrong: Calibration | None = None
) -> HttpResponse:
    """The form of a calibration, new or in place of a wrong one."""
    context = {"form": form, "gauge": found, "wrong": wrong, "unit": unit_beside(found.quantity, found.shop)}
    return render(request, "gauges/calibration_form.html", context)


def told_on_the_page(request: HttpRequest, found: Gauge, said: str, act: Callable[[], object]) -> HttpResponse:
    """Act, and say on the gauge's page what came of it."""
    try:
        act()
        messages.success(request, said)
    except Refused as refused:
        messages.error(request, str(refused))
    return redirect("gauges:gauge", found.pk)
