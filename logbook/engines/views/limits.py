"""Limit sheets: every version of an engine's, one with its lines, typed, compared, in force; the photo of a line's source."""

from django.contrib import messages
from django.http import FileResponse, Http404, HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_POST, require_safe

from logbook.engines import queries, services
from logbook.engines.forms import BeginSheetForm, LineForm, WhyForm
from logbook.engines.models import Engine, LimitLine, LimitSheet
from logbook.engines.photos import media_type
from logbook.engines.services.guards import KEEP_LIMITS, WHO_COMPARES
from logbook.people.access import open_to

from .asking import acted, done, form_answer, form_page


@require_safe
@open_to()
def limits(request: HttpRequest, pk: int) -> HttpResponse:
    """Every version of an engine's limits."""
    found = get_object_or_404(Engine.objects.seen_by(request.user), pk=pk)
    sheets = list(found.limit_sheets.select_related("entered_by", "compared_by"))
    context = {
        "engine": found, "sheets": sheets, "held": queries.sheet_in_force(found, timezone.now()),
        "is_preparing": any(one.is_in_preparation for one in sheets), "keeps": request.user.has_role(*KEEP_LIMITS),
    }  # fmt: skip
    return render(request, "engines/limits.html", context)


@require_safe
@open_to()
def sheet(request: HttpRequest, pk: int, version: int) -> HttpResponse:
    """One version: its lines with their sources, who entered and who compared it, and what may be done to it."""
    found, person = sheet_seen(request, pk, version), request.user
    lines = queries.lines_with_their_past(found)
    standing = [line for line in lines if line.stands]
    is_open = found.is_in_preparation
    context = {
        "sheet": found, "engine": found.engine, "lines": told(standing),
        "past": told(line for line in lines if not line.stands),
        "held": queries.sheet_in_force(found.engine, timezone.now()),
        "past_end": {line.pk for line in queries.provisional_past_end(found, timezone.localdate())},
        "types": is_open and person == found.entered_by and person.has_role(*KEEP_LIMITS),
        "compares": is_open and standing and person != found.entered_by and person.has_role(*WHO_COMPARES),
        "keeps": is_open and person.has_role(*KEEP_LIMITS),
    }  # fmt: skip
    return render(request, "engines/sheet.html", context)


@form_page
@open_to(*KEEP_LIMITS)
def new_sheet(request: HttpRequest, pk: int) -> HttpResponse:
    """Begin the next version."""
    found = get_object_or_404(Engine.objects.seen_by(request.user), pk=pk)
    form = BeginSheetForm(request.POST or None, person=request.user, engine=found)
    begun = done(form, lambda told: services.begin_sheet(by=request.user, at=timezone.now(), engine=found, **told))
    if begun:
        return redirect("engines:sheet", pk, begun.version)
    return form_answer(request, form, heading=_("A new limit sheet for %(engine)s") % {"engine": found},
                       submit=_("Begin it"), back=reverse("engines:limits", args=[pk]), where=found, says=_(
        "It starts with the lines of the sheet in force. It judges nothing until somebody else has compared it with its "
        "source, or you say why nobody did."))  # fmt: skip


@form_page
@open_to(*KEEP_LIMITS)
def new_line(request: HttpRequest, pk: int, version: int) -> HttpResponse:
    """Type a line."""
    found = sheet_seen(request, pk, version)
    form = LineForm(request.POST or None, request.FILES or None)
    if done(form, lambda typed: services.add_line(by=request.user, sheet=found, **typed)):
        messages.success(request, _("The line is typed."))
        return redirect("engines:sheet", pk, version)
    return line_answer(request, form, found, _("A line of sheet %(version)s"))


@form_page
@open_to(*KEEP_LIMITS)
def change_line(request: HttpRequest, pk: int, version: int, line: int) -> HttpResponse:
    """Put a line in another's place."""
    kept = line_seen(request, pk, version, line)
    form = LineForm(
        request.POST or None, request.FILES or None, initial={name: getattr(kept, name) for name in LimitLine.TYPED}
    )
    if done(form, lambda typed: services.change_line(by=request.user, line=kept, **typed)):
        messages.success(request, _("Changed; the earlier line stays to be seen."))
        return redirect("engines:sheet", pk, version)
    return line_answer(request, form, kept.sheet, _("Change a line of sheet %(version)s"))


@require_POST
@open_to(*KEEP_LIMITS)
def withdraw_line(request: HttpRequest, pk: int, version: int, line: int) -> HttpResponse:
    """Take a line out of a sheet in preparation."""
    kept = line_seen(request, pk, version, line)
    return acted(request, _("Withdrawn; it stays to be seen."), reverse("engines:sheet", args=[pk, version]),
                 lambda: services.withdraw_line(by=request.user, line=kept))  # fmt: skip


@require_safe
@open_to()
def photo(request: HttpRequest, pk: int, version: int, line: int) -> HttpResponse:
    """The photo of a line's source; nobody outside the shop sees it."""
    kept = line_seen(request, pk, version, line)
    if not kept.photo or not kept.photo.storage.exists(kept.photo.name):
        raise Http404
    return FileResponse(kept.photo.open("rb"), content_type=media_type(kept.photo.name))


@require_POST
@open_to(*WHO_COMPARES)
def compare(request: HttpRequest, pk: int, version: int) -> HttpResponse:
    """Say that one has compared a sheet with its source: it comes into force."""
    found = sheet_seen(request, pk, version)
    return acted(request, _("Sheet %(version)s is in force from now on.") % {"version": version},
                 reverse("engines:sheet", args=[pk, version]),
                 lambda: services.compare_sheet(by=request.user, at=timezone.now(), sheet=found))  # fmt: skip


@form_page
@open_to(*KEEP_LIMITS)
def uncompared(request: HttpRequest, pk: int, version: int) -> HttpResponse:
    """Bring a sheet into force that nobody else compared, and say why."""
    found = sheet_seen(request, pk, version)
    form = WhyForm(request.POST or None, label=_("why nobody else compared it"))
    if done(form, lambda told: services.bring_into_force_uncompared(
        by=request.user, at=timezone.now(), sheet=found, **told)):  # fmt: skip
        messages.success(request, _("Sheet %(version)s is in force from now on, not compared by a second person.")
                         % {"version": version})  # fmt: skip
        return redirect("engines:sheet", pk, version)
    return form_answer(request, form, heading=_("Sheet %(version)s without a second person") % {"version": version},
                       submit=_("Bring it into force"), back=reverse("engines:sheet", args=[pk, version]), where=found, says=_(
        "Every verdict by this sheet stands on what one person typed. The reason is kept with it."))  # fmt: skip


@form_page
@open_to(*KEEP_LIMITS)
def give_up(request: HttpRequest, pk: int, version: int) -> HttpResponse:
    """Give up a sheet in preparation."""
    found = sheet_seen(request, pk, version)
    form = WhyForm(request.POST or None, label=_("why it is given up"))
    if done(form, lambda told: services.give_up_sheet(by=request.user, at=timezone.now(), sheet=found, **told)):
        messages.success(request, _("Sheet %(version)s is given up.") % {"version": version})
        return redirect("engines:limits", pk)
    return form_answer(request, form, heading=_("Give up sheet %(version)s") % {"version": version}, submit=_("Give it up"),
                       back=reverse("engines:sheet", args=[pk, version]), where=found)  # fmt: skip


def told(lines: object) -> list[tuple[LimitLine, str]]:
    """Lines with what they limit in words."""
    words = queries.characteristics()
    return [(line, words[line.characteristic][1].title if line.characteristic in words else line.characteristic)
            for line in lines]  # fmt: skip


def line_answer(request: HttpRequest, form: LineForm, found: LimitSheet, heading: str) -> HttpResponse:
    """The form of a line."""
    return form_answer(request, form, heading=heading % {"version": found.version}, submit=_("Keep this line"),
                       back=reverse("engines:sheet", args=[found.engine_id, found.version]), where=found, has_files=True, says=_(
        "Write the figures as the source prints them, the unit behind at least one of them."))  # fmt: skip


def sheet_seen(request: HttpRequest, engine: int, version: int) -> LimitSheet:
    """A sheet of an engine that the person may see."""
    rows = LimitSheet.objects.seen_by(request.user).select_related("engine__shop", "entered_by", "compared_by")
    return get_object_or_404(rows, engine_id=engine, version=version)


def line_seen(request: HttpRequest, engine: int, version: int, line: int) -> LimitLine:
    """A line of a sheet that the person may see, also one that was replaced."""
    rows = LimitLine.every.seen_by(request.user).select_related("sheet__engine", "sheet__entered_by")
    return get_object_or_404(rows, pk=line, sheet__engine_id=engine, sheet__version=version)
