"""Jobs: the list, a new one, and the page of one with everything a technician needs at the engine."""

from django.core.paginator import Paginator
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, render
from django.urls import reverse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_safe

from logbook.core.figures import trimmed
from logbook.engines.models import Engine, Part
from logbook.people.access import open_to
from logbook.people.models import Person

from ..addresses import address_for
from ..forms import NewJobForm, OpenedForm
from ..models import INSIDE, Interval, WorkOrder
from ..on_page import history, task_rows
from ..queries import engine_locks, with_job_page
from ..services import open_work_order
from ..states import MOVES, OPEN, State, drawn_as_picture, every_move
from ..words import every_words
from .pages import FormPage, form_page, is_number

A_PAGE = 50


@require_safe
@open_to()
def jobs(request: HttpRequest) -> HttpResponse:
    """The open jobs, those at work first; signed and dropped ones on a list of their own."""
    over = request.GET.get("over") == "1"
    rows = WorkOrder.objects.seen_by(request.user).select_related("engine", "part")
    if over:
        shown = Paginator(rows.exclude(state__in=OPEN), A_PAGE).get_page(request.GET.get("page"))
    else:
        order = [State.AT_THE_BENCH, State.STOPPED_SHORT, State.TO_DECIDE, State.PLANNED]
        shown = sorted(rows.filter(state__in=OPEN), key=lambda row: (order.index(row.state), row.number))
    person = request.user
    context = {
        "jobs": shown, "over": over, "opens_jobs": person.has_role("supervisor"), "is_inside": person.has_role(*INSIDE),
    }  # fmt: skip
    return render(request, "work/jobs.html", context)


@require_safe
@open_to()
def states(request: HttpRequest) -> HttpResponse:
    """The states of a job and every move between them, drawn from the table the program itself goes by."""
    moves = [
        (State(from_state).label, State(to_state).label, ", ".join(roles), meaning)
        for from_state, to_state, roles, meaning in every_move()
    ]
    return render(request, "work/states.html", {"moves": moves, "picture": drawn_as_picture()})


@form_page
@open_to("supervisor")
def new_job(request: HttpRequest) -> HttpResponse:
    """Open a job: first for which engine or part, then what."""
    chosen = request.GET.get("for", "")
    engine, part = chosen_in(request, "engine", chosen, Engine), chosen_in(request, "part", chosen, Part)
    if engine is None and part is None:
        context = {
            "engines": Engine.objects.seen_by(request.user),
            "parts": Part.objects.seen_by(request.user).exclude(fittings__taken_off_at=None, fittings__isnull=False),
        }
        return render(request, "work/new_job.html", context)
    kept = Interval.objects.seen_by(request.user).filter(engine=engine, is_stopped=False) if engine else []
    by_pk = {str(interval.pk): interval for interval in kept}
    mark = request.user.shop.decimal_mark
    titles = {pk: f"{interval.title}, {every_words(interval, mark)}" for pk, interval in by_pk.items()}
    form = NewJobForm(request.POST or None, intervals=titles, shop=request.user.shop)
    page = FormPage(
        _("A job on %(what)s") % {"what": engine or part}, _("Open the work order"), reverse("work:jobs"),
        [(_("engine") if engine else _("part"), engine or part), (_("job"), _("new"))],
    )  # fmt: skip
    opened: list[WorkOrder] = []
    answer = page.answer(
        request, form,
        lambda: opened.append(open_work_order(
            by=request.user, at=timezone.now(), engine=engine, part=part, title=form.cleaned_data["title"],
            kinds=form.cleaned_data["kinds"],
            intervals=[by_pk[pk] for pk in form.cleaned_data.get("intervals", [])],
        )),
        _("The work order is open."),
    )  # fmt: skip
    if opened:
        answer["Location"] = reverse("work:job", args=[opened[0].number])
    return answer


def chosen_in(request: HttpRequest, name: str, chosen: str, model: type) -> Engine | Part | None:
    """The engine or part that an address names (`for=engine-3`); 404 where the shop has none such."""
    what, _dash, pk = chosen.partition("-")
    if what != name or not is_number(pk):
        return None
    return get_object_or_404(model.objects.seen_by(request.user), pk=pk)


@require_safe
@open_to()
def job(request: HttpRequest, number: int) -> HttpResponse:
    """A job: what is next, its tasks under their cautions and locks, its closing-up list, its history."""
    order = get_object_or_404(with_job_page(WorkOrder.objects.seen_by(request.user)), number=number)
    person, locks = request.user, engine_locks(order)
    items = list(order.closing_items.all())
    context = {
        "order": order,
        "tasks": task_rows(order, person, locks),
        "open_items": [item for item in items if item.closed_at is None],
        "closed_items": [item for item in items if item.closed_at],
        "locks": [lock for lock in locks if lock.work_order_id == order.pk],
        "handed": next((one for one in reversed(order.hand_overs.all()) if one.taken_at is None), None),
        "why_stopped": next(
            (move.reason for move in reversed(order.moves.all()) if move.to_state == State.STOPPED_SHORT), ""
        ),
        "may": may_move(order, person),
        "works": person.has_role("technician"),
        "is_inside": person.has_role(*INSIDE),
        "adds": person.has_role("technician", "supervisor"),
        "is_open": order.state in OPEN,
        "is_worked_on": order.state in (State.PLANNED, State.AT_THE_BENCH, State.STOPPED_SHORT),
        "opened_form": OpenedForm(shop=person.shop),
        "history": history(order),
        "lifted": [lock for lock in order.locks.all() if lock.lifted_at],
        "engine_page": address_for(person, "engines:engine", order.engine_id) if order.engine_id else "",
        "decide": address_for(person, "review:decide", number),
        "running": address_for(person, "review:running", number),
        "sign": address_for(person, "review:sign", number),
        "sheet": address_for(person, "review:sheet", number),
        "printed": address_for(person, "review:work_order_sheet", number),
        "parts": [
            (used, trimmed(used.count).replace(".", person.shop.decimal_mark)) for used in order.parts_used.all()
        ],
        "is_whole": all(task.done_at for task in order.tasks.all()),
    }
    return render(request, "work/job.html", context)


def may_move(order: WorkOrder, person: Person) -> set[str]:
    """States that a person may bring a job into from where it stands."""
    return {str(to_state) for to_state, (roles, _meaning) in MOVES[order.state].items() if person.has_role(*roles)}
