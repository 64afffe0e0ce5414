"""Decides finding by finding: guards first, then a new row; a later decision stands over an earlier one."""

from datetime import date, datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.bench.models import Finding
from logbook.people.models import Person
from logbook.work.models import WorkOrder

from ..cases import Case, Derived
from ..models import Decision
from ..queries import OPEN, case_on, concession_at, day_in, engine_hours
from ..second_person import why_not
from .guards import Frozen, NotDecided, held, kept, refuse_stranger

Choice = Decision.Choice
FEWEST_WORDS = 2  # of a reason "in a sentence"; one word is none


@transaction.atomic
def decide(
    on: Finding | Derived,
    *,
    by: Person,
    at: datetime,
    choice: str,
    reason: str = "",
    conditions: str = "",
    agreed_for_owner_by: str = "",
    ends_on: date | None = None,
    ends_at_hours: float | None = None,
) -> Decision:
    """Decide on a finding or a derived value; a later decision stands over an earlier one.

    Parameters
    ----------
    choice : str
        One of `Decision.Choice`.
    conditions, agreed_for_owner_by, ends_on, ends_at_hours
        Belong to a concession ("may run until") alone; it needs the first two and one end, by day or engine hours [h].

    Raises
    ------
    NotDecided
        The person took the reading or is no supervisor; the reading was struck or replaced; the decision doesn't fit.
    Frozen
        The sheet is signed. A concession on it can still be extended or ended: that stands beside the sheet.
    """
    work_order = held(on.measurement.task.work_order)
    refuse_stranger(by, work_order)
    case = case_on(work_order, on, at)
    if case is None:
        raise NotDecided(_("This reading was struck or replaced meanwhile; look at the finding again."))
    if not_allowed := why_not(by, case.took):
        raise NotDecided(not_allowed)
    if closed := why_closed(case):
        raise Frozen(closed)
    decision = Decision(
        shop=work_order.shop, work_order=work_order, choice=choice, reason=reason.strip(), conditions=conditions.strip(),
        agreed_for_owner_by=agreed_for_owner_by.strip(), ends_on=ends_on, ends_at_hours=ends_at_hours,
        decided_by=by, decided_at=at,
        **({"finding": on} if isinstance(on, Finding) else {"derived": on.key}),
    )  # fmt: skip
    refuse_unfit(decision, case, at)
    if choice == Choice.MAY_RUN_UNTIL:
        decision.extends = concession_at(case)
    return kept(decision)


def why_closed(case: Case) -> str:
    """Say why nothing is decided any more, or nothing yet; empty where it is. A concession is never closed to it."""
    order = case.work_order
    is_concession = case.decision is not None and case.decision.choice == Choice.MAY_RUN_UNTIL
    if order.state in OPEN or (order.state == WorkOrder.State.SIGNED and is_concession):
        return ""
    if order.state == WorkOrder.State.SIGNED:
        return _("Job %(job)s is signed: nothing on it is decided any more. Measure again on a new job.") % {
            "job": order
        }
    told = {"job": order, "state": order.get_state_display()}
    return _("Job %(job)s is “%(state)s”: there is nothing to decide on it.") % told


def refuse_unfit(decision: Decision, case: Case, at: datetime) -> None:
    """Refuse a decision whose own grounds are missing."""
    if decision.choice not in Choice.values:
        raise NotDecided(_("“%(read)s” is no decision; there are: %(choices)s.")
                         % {"read": decision.choice, "choices": ", ".join(map(str, Choice.labels))})  # fmt: skip
    if decision.choice == Choice.PUT_RIGHT and not case.is_left_within:
        raise NotDecided(not_put_right(case))
    if decision.choice == Choice.OTHER and len(decision.reason.split()) < FEWEST_WORDS:
        raise NotDecided(_("Say in a sentence what is decided and why: it stands on the sheet."))
    if decision.choice == Choice.MAY_RUN_UNTIL:
        refuse_endless(decision, case, at)
    elif decision.conditions or decision.agreed_for_owner_by or decision.ends_on or decision.ends_at_hours is not None:
        raise NotDecided(_("Conditions and an end belong to “may run until”; decide that, or leave them empty."))


def not_put_right(case: Case) -> str:
    """Say why a case can't be decided as put right."""
    if case.left is None:
        return _("“Put right” needs a reading as left, and there is none: measure it as left, or decide otherwise.")
    return _("“Put right” needs a reading as left that is within; this one isn't. Decide otherwise, or set it again.")


def refuse_endless(decision: Decision, case: Case, at: datetime) -> None:
    """Refuse a concession without conditions, agreement or an end, or whose end is past already."""
    if not decision.conditions:
        raise NotDecided(_("Say under which conditions it may run: load, watch, how often it is looked at."))
    if not decision.agreed_for_owner_by:
        raise NotDecided(_("Say who agreed for the owner, by name."))
    if decision.ends_on is None and decision.ends_at_hours is None:
        raise NotDecided(_("Say until when it may run: a last day, engine hours, or both."))
    today = day_in(case.work_order.shop, at)
    if decision.ends_on is not None and decision.ends_on < today:
        raise NotDecided(_("The last day %(end)s is past already; today is %(today)s.")
                         % {"end": decision.ends_on.isoformat(), "today": today.isoformat()})  # fmt: skip
    refuse_hours_past(decision.ends_at_hours, case)


def refuse_hours_past(ends_at_hours: float | None, case: Case) -> None:
    """Refuse an end by hours that the engine has reached, or that no meter could ever show."""
    if ends_at_hours is None:
        return
    engine = case.work_order.engine
    hours = engine_hours([engine.pk]).get(engine.pk) if engine else None
    if hours is None:
        raise NotDecided(_("Its hours aren't read, so an end by hours would never come; give a last day instead."))
    if ends_at_hours <= hours:
        told = {"end": f"{ends_at_hours:g}", "hours": f"{hours:g}"}
        raise NotDecided(_("The end at %(end)s h is reached already: the engine has run %(hours)s h.") % told)
