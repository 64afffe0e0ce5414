"""The home page's answer to "what now?": for each role the one thing that presses, as a sentence and a button."""

from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime

from django.db.models import Max, Q
from django.utils.translation import gettext as _
from django.utils.translation import gettext_lazy, ngettext

from logbook.engines.models import Engine
from logbook.gauges.models import Gauge
from logbook.gauges.queries import day_of, with_standing
from logbook.people.models import Person
from logbook.review.lists import Entry, to_decide
from logbook.review.queries import supervisors_besides
from logbook.review.second_person import why_not
from logbook.work.models import HandOver, Task, WorkOrder
from logbook.work.queries import due_list
from logbook.work.states import OPEN

from .navigation import address_for

State = WorkOrder.State
NAMED_AT_MOST = 3  # gauges named in a sentence


@dataclass(frozen=True)
class Step:
    """What to do next: a sentence, and the button that leads there; without an address the sentence stands alone."""

    sentence: str
    button: str = ""
    address: str = ""


def steps_for(person: Person, at: datetime) -> list[Step]:
    """Give what presses, one step a role, the most pressing first; when nothing does, what comes next by the due list."""
    looked_at = (look(person, at) for role, look in BY_ROLE.items() if person.has_role(role))
    pressing = [step for step in looked_at if step is not None]
    return pressing or [next_due(person, at) or nothing_waits(person)]


def for_supervisor(person: Person, at: datetime) -> Step | None:
    """What is to be decided or signed; before that, what an empty logbook lacks."""
    return what_is_lacking(person) or to_decide_next(person, at)


def what_is_lacking(person: Person) -> Step | None:
    """What a shop needs before a job can be done in it."""
    if not Person.objects.seen_by(person).filter(is_technician=True, is_active=True).exists():
        told = _("Nobody here may measure yet: add a technician, or make somebody one.")
        return Step(told, _("Add a person"), address_for(person, "people:new_person"))
    if not Engine.objects.seen_by(person).exists():
        told = _("No engine is kept here yet: enter the first one, then its limits and a gauge, and work can begin.")
        return Step(told, _("Enter an engine"), address_for(person, "engines:new_engine"))
    return None


def to_decide_next(person: Person, at: datetime) -> Step | None:
    """The job that a decision is waited for on, most pressing first; else one that wants nothing but a signature."""
    waiting = to_decide(person, at)
    if entries := [entry for entry in waiting.entries if not entry.is_at_the_bench]:
        theirs = [entry for entry in entries if entry.worst is None or person not in entry.worst.took]
        return decide_on(person, theirs[0], len(theirs)) if theirs else decide_on_own(person, entries[0])
    if waiting.to_sign:
        told = _("%(job)s has nothing left to decide; it waits for your signature.") % {
            "job": named(waiting.to_sign[0])
        }
        return Step(told, _("Look and sign"), address_for(person, "review:to_decide"))
    return None


def decide_on(person: Person, first: Entry, count: int) -> Step:
    """A step that leads to what is to be decided."""
    told = ngettext(
        "%(job)s waits for your decision.", "%(count)s jobs wait for your decision, first of all %(job)s.", count
    ) % {"job": named(first.work_order), "count": count}
    if first.past_end:
        told += " " + _("A concession on it has come to its end.")
    elif first.running:
        told += " " + _("The engine runs undecided, on the word of %(who)s.") % {"who": first.running.on_whose_word}
    return Step(told, _("Decide"), address_for(person, "review:to_decide"))


def decide_on_own(person: Person, first: Entry) -> Step:
    """What this supervisor took the readings of: who can decide instead, or who is missing and where to add them."""
    barred = why_not(person, first.worst.took)
    if not barred:  # a one-person shop: the sheet will say that nobody else checked it
        return decide_on(person, first, 1)
    told = _("%(job)s waits for a decision.") % {"job": named(first.work_order)} + " " + barred
    if supervisors_besides(person, first.worst.took):
        return Step(told, _("Look at it"), address_for(person, "review:to_decide"))
    return Step(told, _("Look at the people"), address_for(person, "people:people"))


def for_technician(person: Person, at: datetime) -> Step | None:
    """The job in hand: handed over to them, theirs at the bench, anybody's there, stopped short, or planned."""
    orders = WorkOrder.objects.seen_by(person).select_related("engine", "part")
    handed = HandOver.objects.seen_by(person).filter(to_person=person, taken_at=None, work_order__state__in=OPEN)
    if given := handed.select_related("from_person", "work_order__engine", "work_order__part").last():
        told = _("%(who)s handed %(job)s over to you.") % {"who": given.from_person, "job": named(given.work_order)}
        return on_job(person, given.work_order, told, _("Take it over"))
    at_bench = orders.filter(state=State.AT_THE_BENCH)
    theirs = Q(locks__person=person, locks__lifted_at=None) | Q(
        moves__moved_by=person, moves__to_state=State.AT_THE_BENCH
    )
    mine = at_bench.filter(theirs).alias(moved=Max("moves__moved_at")).order_by("-moved", "-number").first()
    if order := mine:
        return on_job(person, order, _("You have %(job)s at the bench.") % {"job": named(order)}, _("Go on with it"))
    for state, told in WAITING:
        if order := orders.filter(state=state).order_by("number").first():
            return on_job(person, order, told % {"job": named(order)}, _("Look at the job"))
    return None


def on_job(person: Person, order: WorkOrder, told: str, button: str) -> Step:
    """A step that leads to a job's page."""
    return Step(told, button, address_for(person, "work:job", number=order.number))


WAITING = (
    (State.AT_THE_BENCH, gettext_lazy("%(job)s is at the bench.")),
    (State.STOPPED_SHORT, gettext_lazy("%(job)s was stopped short and waits for somebody to go on.")),
    (State.PLANNED, gettext_lazy("%(job)s is planned and can be begun.")),
)


def for_toolroom(person: Person, at: datetime) -> Step | None:
    """Gauges that no reading may be taken with; before that, that there are none."""
    gauges = with_standing(Gauge.objects.seen_by(person).filter(retired_at=None))
    if not gauges.exists():
        told = _("No gauge is kept here yet: enter one, for every verdict rests on what its gauge can tell.")
        return Step(told, _("Enter a gauge"), address_for(person, "gauges:new_gauge"))
    unfit = gauges.filter(Q(standing_failed=True) | Q(standing_due_on__lt=day_of(at, person.shop))).order_by("mark")
    marks = list(unfit.values_list("mark", flat=True))
    if not marks:
        return None
    told = ngettext(
        "%(marks)s is past due or failed its calibration.",
        "%(count)s gauges are past due or failed their calibration: %(marks)s.",
        len(marks),
    ) % {"count": len(marks), "marks": listed(marks)}
    return Step(told, _("Look at the gauges"), address_for(person, "gauges:gauges"))


def for_witness(person: Person, at: datetime) -> Step | None:
    """The first open job with readings to be witnessed that this person hasn't signed for."""
    witnessed = Task.objects.seen_by(person).exclude(witnessed_stations=[]).filter(work_order__state__in=OPEN)
    orders = WorkOrder.objects.seen_by(person).filter(pk__in=witnessed.values("work_order"))
    signed = Q(signatures__person=person, signatures__role="witnessed")
    order = orders.exclude(signed).select_related("engine", "part").order_by("number").first()
    if order is None:
        return None
    told = _("%(job)s has readings that you are asked to witness.") % {"job": named(order)}
    return on_job(person, order, told, _("Look at the job"))


BY_ROLE: dict[str, Callable[[Person, datetime], Step | None]] = {
    "supervisor": for_supervisor,
    "technician": for_technician,
    "witness": for_witness,
    "toolroom": for_toolroom,
}


def next_due(person: Person, at: datetime) -> Step | None:
    """What the due list has on top, for those who may open it."""
    address = address_for(person, "work:due")
    if not address or not person.has_role("supervisor", "technician"):
        return None
    jobs = due_list(person, at)
    if not jobs:
        return Step(_("Nothing waits for you, and no job is set to come due."), _("Open the due list"), address)
    first = jobs[0].interval
    told = _("Nothing waits for you. On top of the due list: %(job)s, %(engine)s.")
    return Step(told % {"job": first.title, "engine": first.engine}, _("Open the due list"), address)


def nothing_waits(person: Person) -> Step:
    """A sentence, and the place where this person's work would be."""
    if person.has_role("toolroom") and (address := address_for(person, "gauges:gauges")):
        return Step(_("Nothing waits for you: every gauge is in date."), _("Look at the gauges"), address)
    address = address_for(person, "work:jobs")
    return Step(_("Nothing waits for you."), _("Look at the jobs") if address else "", address)


def named(order: WorkOrder) -> str:
    """A job in a sentence."""
    told = {"number": order.number, "title": order.title, "what": order.engine or order.part}
    return _("job %(number)s (%(title)s, %(what)s)") % told


def listed(marks: list[str]) -> str:
    """Name a few, and say how many more."""
    more = len(marks) - NAMED_AT_MOST
    told = ", ".join(marks[:NAMED_AT_MOST])
    return told if more <= 0 else _("%(some)s and %(more)s more") % {"some": told, "more": more}
