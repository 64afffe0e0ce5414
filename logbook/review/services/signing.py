"""Signs a sheet: by password again, bound to the fingerprint of exactly what was shown."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.paper.services import fingerprint
from logbook.people.models import Person
from logbook.work.models import WorkOrder
from logbook.work.services import move, record_done
from logbook.work.services.moves import refuse_while_open

from ..models import Signature
from ..queries import cases_of, engine_totals, has_second_person, took_readings, witnessed_stations
from ..second_person import listed, who_can
from ..sheets import job_sheet
from ..words import case_words
from .guards import Frozen, held, is_frozen, kept, refuse_stranger

Role = Signature.Role


class NotSigned(Refused):
    """A signature that can't be given: wrong password, wrong person, something still open, or the sheet changed."""


class WrongPassword(NotSigned):
    """The password given isn't the person's."""


def sign(
    work_order: WorkOrder,
    *,
    by: Person,
    at: datetime,
    role: str,
    password: str,
    shown_sha256: str,
    stations: Sequence[str] = (),
) -> Signature:
    """Put a name under a work order's sheet; the deciding one ends the job, seals its sheet and moves what is due next.

    Parameters
    ----------
    role : str
        One of `Signature.Role`.
    password : str
        The person's own, asked for each time.
    shown_sha256 : str
        Fingerprint of the sheet that the person was shown.
    stations : sequence of str
        The readings witnessed, for a witness.

    Raises
    ------
    WrongPassword
        Looked at before anything else.
    NotSigned
        A role that isn't theirs; something undecided or open; the sheet changed meanwhile.
    Frozen
        The sheet is signed already, or the job was dropped.
    """
    refuse_wrong_password(by, password)
    return put_name(work_order, by=by, at=at, role=role, shown_sha256=shown_sha256, stations=stations)


def refuse_wrong_password(by: Person, password: str) -> None:
    """Ask for the password again; outside the transaction, so that a wrong one stays counted."""
    if not by.check_password(password):
        raise WrongPassword(_("That is not the password of %(person)s: nothing was signed.") % {"person": by.name})


@transaction.atomic
def put_name(
    work_order: WorkOrder, *, by: Person, at: datetime, role: str, shown_sha256: str, stations: Sequence[str]
) -> Signature:
    """Sign for a person whose password was right."""
    order = held(work_order)
    refuse_stranger(by, order)
    refuse_settled(order)
    took = took_readings(order)
    refuse_role(role, by, order, took, stations, at)
    shown = job_sheet(order)
    if fingerprint(shown) != shown_sha256:
        raise NotSigned(_("The sheet changed meanwhile: look at it again, then sign."))
    signature = kept(Signature(
        shop=order.shop, work_order=order, role=role, person=by, signed_at=at, shown_sha256=shown_sha256, shown=shown,
        stations=list(dict.fromkeys(stations)), not_checked_by_second=role == Role.DECIDED and by.pk in took,
    ))  # fmt: skip
    if role == Role.DECIDED:
        close(order, by, at)
        work_order.state = order.state
    return signature


def close(order: WorkOrder, by: Person, at: datetime) -> None:
    """End a job with its deciding signature: no longer undecided, signed, its due dates moved on."""
    order.running_undecided.filter(ended_at=None).update(ended_at=at)
    move(order, WorkOrder.State.SIGNED, by=by, at=at)
    totals = engine_totals(order)
    for interval in order.intervals.all():
        record_done(interval, by=by, at=at, totals=totals, work_order=order)


@dataclass(frozen=True)
class Way:
    """A role somebody might sign in, and why not; empty when they may."""

    role: str
    label: str
    why_not: str


def ways_to_sign(by: Person, order: WorkOrder, took: dict[int, Person], at: datetime) -> list[Way]:
    """The roles that concern a person, each with what stands against signing in it; none under a settled sheet."""
    if is_frozen(order):
        return []
    given = set(order.signatures.filter(person=by).values_list("role", flat=True))
    concern = {Role.MEASURED: by.has_role("technician") or by.pk in took, Role.DECIDED: by.has_role("supervisor"),
               Role.WITNESSED: by.has_role("witness")}  # fmt: skip
    ways = {
        role: given_already() if role in given else WHY_NOT[role](by, order, took) for role in concern if concern[role]
    }
    if ways.get(Role.DECIDED) == "":
        ways[Role.DECIDED] = why_unready(order, at)
    return [Way(role, str(Role(role).label), why_not) for role, why_not in ways.items()]


def given_already() -> str:
    """Say that somebody signed in this role before."""
    return _("You have signed this sheet in this role already.")


def refuse_settled(order: WorkOrder) -> None:
    """Refuse a sheet that nothing is put under any more, or not yet."""
    if is_frozen(order):
        told = {"job": order, "state": order.get_state_display()}
        raise Frozen(_("Job %(job)s is “%(state)s”: no further name goes under its sheet.") % told)


def refuse_role(
    role: str, by: Person, order: WorkOrder, took: dict[int, Person], stations: Sequence[str], at: datetime
) -> None:
    """Refuse a person who can't sign in a role, and say who can."""
    if role not in Role.values:
        raise NotSigned(_("“%(read)s” is no way to sign; there are: %(roles)s.")
                        % {"read": role, "roles": ", ".join(map(str, Role.labels))})  # fmt: skip
    if order.signatures.filter(role=role, person=by).exists():
        raise NotSigned(given_already())
    if told := WHY_NOT[role](by, order, took):
        raise NotSigned(told)
    if role == Role.WITNESSED:
        refuse_stations(stations, order)
    elif stations:
        raise NotSigned(_("Only a witness names readings; leave them away."))
    if role == Role.DECIDED:
        refuse_unready(order, at)


def why_not_measured(by: Person, order: WorkOrder, took: dict[int, Person]) -> str:
    """Say why somebody can't sign as having measured; empty when they may."""
    if by.pk in took:
        return ""
    if not took:
        return _("Nothing was measured on this job yet.")
    return _("You neither measured nor keyed on this job; %(names)s did.") % {
        "names": listed(list(took.values()), _("and"))
    }


def why_not_witnessed(by: Person, order: WorkOrder, took: dict[int, Person]) -> str:
    """Say why somebody can't sign as a witness; empty when they may."""
    if not by.has_role("witness"):
        return _("Only a witness signs as one; a supervisor gives that role on the page “People”.")
    if by.pk in took:
        return _("You measured or keyed on this job, so you can't witness it.")
    return "" if witnessed_stations(order) else _("No reading of this job is named to be witnessed.")


def why_not_decided(by: Person, order: WorkOrder, took: dict[int, Person]) -> str:
    """Say why somebody can't sign as having decided; empty when they may."""
    if not by.has_role("supervisor"):
        return _("Only a supervisor signs what was decided; %(who)s") % {"who": who_can(by, list(took.values()))}
    if by.pk in took and has_second_person(by):
        return _("You measured or keyed on this job, so you can't sign its decisions; %(who)s") % {
            "who": who_can(by, list(took.values()))
        }
    return ""


WHY_NOT = {Role.MEASURED: why_not_measured, Role.WITNESSED: why_not_witnessed, Role.DECIDED: why_not_decided}


def refuse_stations(stations: Sequence[str], order: WorkOrder) -> None:
    """Refuse a witness who names no reading, or one that isn't to be witnessed."""
    named = witnessed_stations(order)
    if not stations:
        raise NotSigned(_("Name the readings you witnessed: %(stations)s.") % {"stations": ", ".join(named)})
    if strange := [one for one in stations if one not in named]:
        raise NotSigned(_("%(strange)s isn't among the readings to be witnessed: %(stations)s.")
                        % {"strange": ", ".join(strange), "stations": ", ".join(named)})  # fmt: skip


def why_unready(order: WorkOrder, at: datetime) -> str:
    """Say why the deciding signature has to wait: measuring goes on, or something is undecided; empty when it needn't."""
    if order.state != WorkOrder.State.TO_DECIDE:
        told = {"job": order, "state": order.get_state_display()}
        return _("Job %(job)s is “%(state)s”: it is signed once measuring is finished.") % told
    cases = cases_of([order], at)
    if again := [case_words(case) for case in cases if case.is_to_be_measured_again]:
        return _("To be measured again: %(where)s. Send the job back to the bench, or decide otherwise.") % {
            "where": "; ".join(again)
        }
    if undecided := [case_words(case) for case in cases if case.is_undecided]:
        return _("Still to decide: %(where)s.") % {"where": "; ".join(undecided)}
    return ""


def refuse_unready(order: WorkOrder, at: datetime) -> None:
    """Refuse the deciding signature while something is undecided, or the job isn't closed up."""
    if told := why_unready(order, at):
        raise NotSigned(told)
    refuse_while_open(order)
