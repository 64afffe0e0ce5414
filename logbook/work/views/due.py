"""The due list: what comes due, worst first, and the button that opens work orders for what was ticked."""

from dataclasses import dataclass

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.utils import timezone
from django.utils.safestring import SafeString
from django.utils.translation import gettext as _
from django.utils.translation import ngettext
from django.views.decorators.http import require_http_methods

from logbook.people.access import open_to

from ..models import INSIDE, Interval, WorkOrder
from ..queries import DueJob, due_list, in_stops
from ..services import NotNow, open_work_order
from ..words import amount, count_words, every_words, tape_of, window_words
from .pages import done, is_number


@dataclass(frozen=True)
class Row:
    """A job of the due list, ready to be shown."""

    job: DueJob
    mark: str

    @property
    def words(self) -> str:
        return count_words(self.job.first, self.mark)

    @property
    def tape(self) -> SafeString:
        return tape_of(self.job.first, self.mark)

    @property
    def every(self) -> str:
        return every_words(self.job.interval, self.mark)

    @property
    def window(self) -> str:
        return window_words(self.job.first)

    @property
    def others(self) -> list[str]:
        """The counts that come later, each with what it counts."""
        return [
            _("by %(length)s: %(words)s")
            % {"length": amount(count.unit, count.length, self.mark), "words": count_words(count, self.mark)}
            for count in self.job.others
        ]


@open_to(*INSIDE)
@require_http_methods(["GET", "HEAD", "POST"])
def due(request: HttpRequest) -> HttpResponse:
    """Show what comes due; a supervisor ticks jobs and opens work orders for them."""
    at, shop = timezone.now(), request.user.shop
    if request.method == "POST":
        return opened_for(request)
    stops = [
        (stop, [Row(job, shop.decimal_mark) for job in stop.jobs]) for stop in in_stops(due_list(request.user, at))
    ]
    context = {
        "now_due": [stop for stop in stops if not stop[0].jobs[0].is_put_off],
        "put_off": [stop for stop in stops if stop[0].jobs[0].is_put_off],
        "next": next((rows[0] for _stop, rows in stops if not rows[0].job.is_put_off), None),
        "opens_jobs": request.user.has_role("supervisor"),
        "today": at,
    }
    return render(request, "work/due.html", context)


@open_to("supervisor")
def opened_for(request: HttpRequest) -> HttpResponse:
    """Open one work order an engine for the ticked jobs."""
    ticked = [pk for pk in request.POST.getlist("interval") if is_number(pk)]
    found = Interval.objects.seen_by(request.user).filter(pk__in=ticked, is_stopped=False).select_related("engine")
    orders: list[WorkOrder] = []
    done(request, lambda: orders.extend(open_for(request, list(found))))
    if not orders:
        return redirect("work:due")
    numbers = ", ".join(str(order.number) for order in orders)
    messages.success(
        request,
        ngettext("Work order %(numbers)s is open.", "Work orders %(numbers)s are open.", len(orders))
        % {"numbers": numbers},
    )
    return redirect("work:job", orders[0].number) if len(orders) == 1 else redirect("work:jobs")


def open_for(request: HttpRequest, intervals: list[Interval]) -> list[WorkOrder]:
    """One work order for each engine among the intervals."""
    if not intervals:
        raise NotNow(_("No job is ticked: tick what is to be done, then open the work order."))
    by_engine: dict[int, list[Interval]] = {}
    for interval in intervals:
        by_engine.setdefault(interval.engine_id, []).append(interval)
    return [
        open_work_order(
            by=request.user, at=timezone.now(), engine=chosen[0].engine, kinds=[], intervals=chosen,
            title=", ".join(interval.title for interval in chosen)[:120],
        )
        for chosen in by_engine.values()
    ]  # fmt: skip
