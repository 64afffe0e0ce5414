"""What is done on a job with one tap: start, lock, lift, close up, go on, take over, finish measuring."""

from django.http import HttpRequest, HttpResponse
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.http import require_POST

from logbook.people.access import open_to

from .. import services
from ..forms import LockForm, OpenedForm
from ..models import ClosingItem, HandOver, Lock, Task
from .pages import back_to_job, done, is_number, job_of, row_of


@require_POST
@open_to("technician")
def start_task(request: HttpRequest, number: int, pk: int) -> HttpResponse:
    task = row_of(request, Task.objects, number, pk)
    said = _("“%(task)s” is under way.") % {"task": task}
    done(request, lambda: services.start_task(task, by=request.user, at=timezone.now()), said)
    return back_to_job(number, f"task-{pk}")


@require_POST
@open_to("technician")
def take_lock(request: HttpRequest, number: int) -> HttpResponse:
    """Take a lock for a task's state; the task's number brings the page back to it."""
    order, form = job_of(request, number), LockForm(request.POST, shop=request.user.shop)
    if not form.is_valid():
        done(request, lambda: refuse(_("Say what is locked, in up to 120 signs.")))
        return back_to_job(number, place(request))
    point, state = form.cleaned_data["point"], request.POST.get("state", "")
    done(
        request,
        lambda: services.take_lock(order, by=request.user, at=timezone.now(), state=state, point=point),
        _("Your lock is on: %(point)s.") % {"point": point},
    )
    return back_to_job(number, place(request))


@require_POST
@open_to("technician")
def lift_lock(request: HttpRequest, number: int, pk: int) -> HttpResponse:
    lock = row_of(request, Lock.objects, number, pk)
    made_way = request.POST.get("for", "").replace("\0", "")[:120]
    done(
        request,
        lambda: services.lift_lock(lock, by=request.user, at=timezone.now(), lifted_for=made_way),
        _("Your lock is off: %(point)s.") % {"point": lock.point},
    )
    back = request.POST.get("back", "")
    return back_to_job(int(back) if is_number(back) else number, place(request))


@require_POST
@open_to("technician")
def open_item(request: HttpRequest, number: int) -> HttpResponse:
    order, form = job_of(request, number), OpenedForm(request.POST, shop=request.user.shop)
    if form.is_valid():
        what = form.cleaned_data["what"]
        done(request, lambda: services.open_item(order, by=request.user, at=timezone.now(), what=what))
    else:
        done(request, lambda: refuse(_("Say what is open, in up to 160 signs.")))
    return back_to_job(number, "closing-up")


@require_POST
@open_to("technician")
def close_item(request: HttpRequest, number: int, pk: int) -> HttpResponse:
    item = row_of(request, ClosingItem.objects, number, pk)
    said = _("Closed up: %(what)s.") % {"what": item.what}
    done(request, lambda: services.close_item(item, by=request.user, at=timezone.now()), said)
    return back_to_job(number, "closing-up")


@require_POST
@open_to("technician")
def resume(request: HttpRequest, number: int) -> HttpResponse:
    order = job_of(request, number)
    said = _("The job goes on. Look at the locks before anything turns.")
    done(request, lambda: services.resume(order, by=request.user, at=timezone.now()), said)
    return back_to_job(number)


@require_POST
@open_to("technician")
def take_over(request: HttpRequest, number: int, pk: int) -> HttpResponse:
    handed = row_of(request, HandOver.objects, number, pk)
    said = _("The job is yours. Put your own locks on before the earlier ones come off.")
    done(request, lambda: services.take_over(handed, by=request.user, at=timezone.now()), said)
    return back_to_job(number)


@require_POST
@open_to("technician")
def finish_measuring(request: HttpRequest, number: int) -> HttpResponse:
    order = job_of(request, number)
    said = _("Measuring is finished; the job waits for its decisions.")
    done(request, lambda: services.finish_measuring(order, by=request.user, at=timezone.now()), said)
    return back_to_job(number)


def place(request: HttpRequest) -> str:
    """The place on the page that an act was asked from."""
    task = request.POST.get("task", "")
    return f"task-{task}" if is_number(task) else "closing-up"


def refuse(sentence: str) -> None:
    """Refuse what can't be read."""
    raise services.NotNow(sentence)
