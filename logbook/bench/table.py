"""The table of a whole pass: every station's inputs on one page, the form that needs no script."""

from dataclasses import dataclass, field
from datetime import datetime
from uuid import UUID, uuid4, uuid5

from django.contrib import messages
from django.http import HttpRequest, HttpResponse, HttpResponseRedirect
from django.shortcuts import render
from django.utils import timezone
from django.utils.translation import gettext as _
from django.utils.translation import ngettext
from django.views.decorators.http import require_http_methods

from logbook.core.refusal import Refused
from logbook.people.access import open_to
from logbook.people.models import Person
from logbook.work.models import Task

from .at_work import AS_FOUND, AS_LEFT, AtWork
from .page import bench_page
from .services import SlipAsked, record_act, record_reading
from .views import WHO, at, pass_for, task_of
from .words import station_title, verdict_words

COLUMNS = ("found", "why", "done", "left")  # in the order they are kept


@dataclass
class Row:
    """One station of the table: what stands there, what was typed, what was refused or asked."""

    work: AtWork
    station: str
    client_id: UUID
    typed: dict[str, str] = field(default_factory=dict)
    refused: list[str] = field(default_factory=list)
    slip: SlipAsked | None = None

    @property
    def title(self) -> str:
        return station_title(self.station)

    @property
    def number(self) -> int:
        return self.work.numbers[self.station]

    @property
    def stands(self) -> dict[str, str]:
        """What stands here by column."""
        told = {"done": "; ".join(act.what for act in self.work.acts if act.station == self.station)}
        for name, phase in (("found", AS_FOUND), ("left", AS_LEFT)):
            readings = self.work.answered(phase).get(self.station, [])
            told[name] = "; ".join(
                one.typed or _("not measured: %(why)s") % {"why": one.not_measured} for one in readings
            )
            finding = self.work.finding(phase, self.station)
            mark = self.work.task.work_order.shop.decimal_mark
            is_judged = finding is not None and finding.judgement["value"] is not None
            told[f"{name}_verdict"] = verdict_words(finding.judgement, mark) if is_judged else ""
        return told


@require_http_methods(["GET", "POST"])
@open_to("technician")
def table(request: HttpRequest, number: int, task: int) -> HttpResponse:
    """Show every station's inputs; keep all that was typed, each answer by the same service as at the bench."""
    row, now = task_of(request, number, task), timezone.now()
    rows, kept = {}, 0
    if request.method == "POST":
        rows, kept = kept_rows(request, row, now)
        if kept:
            told = ngettext("%(count)s answer is kept.", "%(count)s answers are kept.", kept) % {"count": kept}
            messages.success(request, told)
        if not rows:
            return HttpResponseRedirect(at(row, "table"))
    context = bench_page(row, request.user, now=now, measured_by=request.session.get(WHO))
    work = context.get("work")
    told = [
        Row(work, station, rows.get(station, {}).get("client_id") or uuid4(), **{
            name: value for name, value in rows.get(station, {}).items() if name != "client_id"
        })
        for station in (work.route.stations if work else ())
    ]  # fmt: skip
    return render(request, "bench/table.html", {**context, "rows": told}, status=422 if rows else 200)


def kept_rows(request: HttpRequest, task: Task, now: datetime) -> tuple[dict[str, dict], int]:
    """Keep what was typed, station by station; gives the rows that were refused or are asked about, and how many kept."""
    trouble, kept = {}, 0
    for place in range(int_of(request.POST.get("rows", "0"))):
        station = request.POST.get(f"station-{place}", "")
        typed = {name: request.POST.get(f"{name}-{place}", "").replace("\0", "").strip() for name in COLUMNS}
        if not any(typed.values()):
            continue
        refused, slip, client_id = [], None, None
        for name in COLUMNS:
            if not typed[name]:
                continue
            try:
                client_id = uuid_of(request.POST.get(f"client-{place}", ""))
                keep_one(task, request.user, now, station, name, typed[name], uuid5(client_id, name),
                         request.POST.get(f"slip-{name}-{place}", ""))  # fmt: skip
                kept, typed[name] = kept + 1, ""
            except SlipAsked as asked:
                slip, refused = asked, [*refused, str(asked)]
                slip.column = name
                break
            except Refused as error:
                refused.append(str(error))
                break
        if refused:
            trouble[station] = {"typed": typed, "refused": refused, "slip": slip, "client_id": client_id}
    return trouble, kept


def keep_one(
    task: Task, by: Person, now: datetime, station: str, name: str, typed: str, client_id: UUID, slip_answer: str
) -> None:
    """Keep one field of the table."""
    if name == "done":
        record_act(task, by=by, at=now, client_id=client_id, station=station, what=typed)
        return
    phase = AS_LEFT if name == "left" else AS_FOUND
    answer = {"not_measured": typed} if name == "why" else {"typed": typed, "slip_answer": slip_answer}
    record_reading(pass_for(task, phase, by, now), by=by, at=now, client_id=client_id, station=station, **answer)


def int_of(text: str) -> int:
    """How many rows the form had; nothing odd."""
    return min(int(text), 2000) if text.isascii() and text.isdigit() and len(text) < 6 else 0


def uuid_of(text: str) -> UUID:
    """The row's own mark, which makes sending it twice harmless."""
    try:
        return UUID(text)
    except ValueError as error:
        raise Refused(_("This form was not whole; load the page anew.")) from error
