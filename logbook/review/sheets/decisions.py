"""Decisions and concessions as a sheet tells them."""

from collections.abc import Sequence

from django.utils.translation import gettext as _
from django.utils.translation import ngettext

from logbook.bench.judging import kinds
from logbook.paper.shapes import Concession
from logbook.paper.shapes import Decision as Told
from logbook.people.models import Shop

from ..cases import Case
from ..models import Decision
from ..queries import extensions_of
from ..words import characteristic_words, place_words, plain, with_uncertainty
from .head import moment

Choice = Decision.Choice


def decisions_told(decisions: Sequence[Decision], cases: Sequence[Case], shop: Shop) -> list[Told]:
    """Every decision in the order they were made; one that another stands over stays and says so."""
    standing = {case.decision.pk for case in cases if case.decision}
    took = {one.pk: case.took for case in cases for one in case.decisions}
    told = []
    for one in decisions:
        by = one.decided_by.name
        if one.decided_by in took.get(one.pk, ()):
            by = _("%(person)s, who also measured or keyed it") % {"person": by}
        words = decision_words(one, shop)
        if one.pk not in standing:
            words = _("%(decision)s (no longer stands)") % {"decision": words}
        reasons = filter(None, [one.reason, one.conditions])
        told.append({"finding": finding_words(one, shop), "decision": words, "reason": "; ".join(reasons), "by": by,
                     "when": moment(one.decided_at, shop)})  # fmt: skip
    return told


def finding_words(decision: Decision, shop: Shop) -> str:
    """What a decision was made on: what, where, and its value then."""
    if decision.finding is not None:
        finding = decision.finding
        named = finding.characteristic, finding.station
        value = with_uncertainty(finding.judgement, shop.decimal_mark)
        return f"{characteristic_words(named[0], kinds())}, {place_words(named[1])}: {value}"
    characteristic, _at, rest = decision.derived.partition(" @ ")
    station = rest.rpartition(" # ")[0]
    return f"{characteristic_words(characteristic, kinds())}, {place_words(None if station == 'engine' else station)}"


def decision_words(decision: Decision, shop: Shop) -> str:
    """A decision in words, a concession with its end."""
    if decision.choice == Choice.MAY_RUN_UNTIL:
        return _("may run until %(end)s") % {"end": end_words(decision, shop)}
    return (
        _("something else: see its reason") if decision.choice == Choice.OTHER else str(decision.get_choice_display())
    )


def end_words(decision: Decision, shop: Shop) -> str:
    """When a concession ends: its last day, its hours, or whichever comes first."""
    day = decision.ends_on.isoformat() if decision.ends_on else ""
    hours = f"{plain(decision.ends_at_hours, shop.decimal_mark)} h" if decision.ends_at_hours is not None else ""
    if day and hours:
        return _("%(day)s or %(hours)s, whichever comes first") % {"day": day, "hours": hours}
    return day or hours


def concessions_told(cases: Sequence[Case], shop: Shop) -> list[Concession]:
    """Findings that may run on, under which conditions, until when."""
    running = [case.decision for case in cases if case.decision and case.decision.choice == Choice.MAY_RUN_UNTIL]
    counts = extensions_of(running)
    return [
        {
            "finding": finding_words(one, shop), "conditions": one.conditions, "agreed_by": one.agreed_for_owner_by,
            "until": end_words(one, shop), "extended": extended_words(counts[one.pk]),
        }
        for one in running
    ]  # fmt: skip


def extended_words(times: int) -> str:
    """How often a concession was extended; empty for the first."""
    return ngettext("extended once", "extended %(times)d times", times) % {"times": times} if times else ""
