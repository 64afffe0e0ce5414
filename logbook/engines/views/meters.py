"""Meters: fitted, read, replaced, and a wrong reading corrected with what stands on it in sight."""

from dataclasses import dataclass
from datetime import datetime

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_safe

from logbook.engines import queries, services
from logbook.engines.forms import CorrectReadingForm, FitMeterForm, ReadMeterForm, ReplaceMeterForm
from logbook.engines.models import Engine, Meter, MeterReading
from logbook.engines.services.guards import AT_THE_ENGINE, SUPERVISORS
from logbook.engines.use import Use
from logbook.engines.words import in_words
from logbook.engines.written import written
from logbook.people.access import open_to
from measurements.sentence import Sentence, say

from .asking import done, form_answer, form_page


@dataclass(frozen=True)
class MeterTold:
    """A fitted meter on a page: its last reading, and its average use in words."""

    meter: Meter
    last: MeterReading | None
    use: str


def meters_told(engine: Engine, at: datetime) -> list[MeterTold]:
    """The meters fitted to an engine now."""
    fitted = [one for one in queries.meters_of(engine) if one.replaced_at is None]
    uses = queries.usages([engine.pk], at)
    told = []
    for meter in fitted:
        meter.engine = engine
        last = next((one for one in meter.readings.all() if one.stands), None)
        use = uses.get((engine.pk, meter.unit), say("no meter reading"))
        told.append(MeterTold(meter, last, use_in_words(meter, use)))
    return told


def use_in_words(meter: Meter, use: Use | Sentence) -> str:
    """Average use to three digits with the shop's decimal mark, or why it can't be told."""
    if isinstance(use, Sentence):
        return _("average use can't be told: %(why)s") % {"why": in_words(use)}
    per_day = written(float(f"{use.per_day:.3g}"), meter.engine.shop.decimal_mark)
    return _("%(use)s %(unit)s a day on average") % {"use": per_day, "unit": meter.unit}


@require_safe
@open_to()
def meters(request: HttpRequest, pk: int) -> HttpResponse:
    """Every meter an engine had, with every reading."""
    found = get_object_or_404(Engine.objects.seen_by(request.user).select_related("shop"), pk=pk)
    free_units = set(Meter.Unit.values) - set(found.meters.filter(replaced_at=None).values_list("unit", flat=True))
    context = {
        "engine": found, "meters": queries.meters_of(found),
        "reads_meters": request.user.has_role(*AT_THE_ENGINE),
        "changes": request.user.has_role(*SUPERVISORS), "can_fit": bool(free_units),
    }  # fmt: skip
    return render(request, "engines/meters.html", context)


@form_page
@open_to(*SUPERVISORS)
def new_meter(request: HttpRequest, pk: int) -> HttpResponse:
    """Fit a meter."""
    found = get_object_or_404(Engine.objects.seen_by(request.user).select_related("shop"), pk=pk)
    form = FitMeterForm(request.POST or None, shop=request.user.shop, initial={"fitted_at": timezone.now()})
    if done(form, lambda told: services.fit_meter(by=request.user, at=timezone.now(), engine=found, **told)):
        messages.success(request, _("The meter is fitted."))
        return redirect("engines:engine", pk)
    return form_answer(request, form, heading=_("Fit a meter to %(engine)s") % {"engine": found}, submit=_("Fit this meter"),
                       back=reverse("engines:engine", args=[pk]), where=found)  # fmt: skip


@form_page
@open_to(*AT_THE_ENGINE)
def read_meter(request: HttpRequest, pk: int, meter: int) -> HttpResponse:
    """Record what a meter shows."""
    found = meter_seen(request, pk, meter)
    form = ReadMeterForm(
        request.POST or None, meter=found, shop=request.user.shop, initial={"taken_at": timezone.now()}
    )
    kept = done(form, lambda told: services.read_meter(by=request.user, at=timezone.now(), meter=found, **told))
    if kept:
        messages.success(request, _("The reading is kept."))
        return redirect("engines:engine", pk)
    last, _after = queries.neighbours(found, timezone.now())
    return form_answer(
        request,
        form,
        heading=_("Read the meter of %(engine)s") % {"engine": found.engine},
        submit=_("Keep this reading"),
        back=reverse("engines:engine", args=[pk]),
        where=found.engine,
        last=last,
    )


@form_page
@open_to(*SUPERVISORS)
def replace_meter(request: HttpRequest, pk: int, meter: int) -> HttpResponse:
    """Put another meter in a meter's place."""
    found = meter_seen(request, pk, meter)
    form = ReplaceMeterForm(request.POST or None, meter=found, shop=request.user.shop,
                            initial={"replaced_at": timezone.now()})  # fmt: skip
    if done(form, lambda told: services.replace_meter(by=request.user, at=timezone.now(), meter=found, **told)):
        messages.success(request, _("Replaced: the new meter counts on from what the engine had run."))
        return redirect("engines:engine", pk)
    last, _after = queries.neighbours(found, timezone.now())
    return form_answer(
        request,
        form,
        heading=_("Replace the meter of %(engine)s") % {"engine": found.engine},
        submit=_("Replace it"),
        back=reverse("engines:engine", args=[pk]),
        where=found.engine,
        last=last,
    )


@form_page
@open_to(*AT_THE_ENGINE)
def correct_reading(request: HttpRequest, pk: int, reading: int) -> HttpResponse:
    """Correct a wrong reading, with what stands on it in sight."""
    rows = MeterReading.objects.seen_by(request.user).select_related("meter__engine__shop")
    wrong = get_object_or_404(rows, pk=reading, meter__engine_id=pk)
    meter, now = wrong.meter, timezone.now()
    form = CorrectReadingForm(
        request.POST or None, meter=meter, shop=request.user.shop, initial={"taken_at": wrong.taken_at}
    )
    before = use_in_words(meter, queries.usage(meter.engine, meter.unit, now))
    if done(form, lambda told: services.supersede_reading(by=request.user, at=now, reading=wrong, **told)):
        after = use_in_words(meter, queries.usage(meter.engine, meter.unit, now))
        said = _("Corrected; the earlier reading stays to be seen. Before: %(before)s. Now: %(after)s.")
        messages.success(request, said % {"before": before, "after": after})
        return redirect("engines:meters", pk)
    return form_answer(
        request, form, heading=_("Correct a meter reading of %(engine)s") % {"engine": meter.engine},
        submit=_("Record it in place of the wrong one"), back=reverse("engines:meters", args=[pk]), where=meter.engine,
        template="engines/correct_reading.html", wrong=wrong, standing=queries.depends_on(wrong), use=before,
    )  # fmt: skip


def meter_seen(request: HttpRequest, engine: int, meter: int) -> Meter:
    """A meter of an engine that the person may see."""
    return get_object_or_404(
        Meter.objects.seen_by(request.user).select_related("engine__shop"), pk=meter, engine_id=engine
    )
