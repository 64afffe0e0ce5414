"""The job sheet: what was measured, judged, done, decided and signed on a work order, as plain data."""

from collections.abc import Mapping, Sequence

from django.utils.translation import gettext as _

from logbook.bench.models import Act, Measurement, Reading
from logbook.bench.words import station_title
from logbook.paper.shapes import JobSheet
from logbook.paper.shapes import Signature as Signed
from logbook.work.models import WorkOrder

from ..cases import Case, build_cases
from ..models import Decision, Signature
from ..queries import decisions_on, earlier_outcomes, outcomes_by_pass, rows_of, undecided_runs
from ..visits import visits
from .decisions import concessions_told, decision_words, decisions_told
from .head import facts, head, moment
from .passes import Taken, pass_told


def job_sheet(work_order: WorkOrder) -> JobSheet:
    """Everything that a signature stands for; the same rows give the same sheet, whatever the clock says.

    A signed work order gives the sheet as it was signed: see `signed_sheet`.
    """
    order = WorkOrder.objects.select_related("shop", "engine__shop", "part", "opened_by").get(pk=work_order.pk)
    if order.state == WorkOrder.State.SIGNED and (signed := signed_sheet(order)):
        return signed
    rows, decisions = rows_of([order]), list(decisions_on([order]))
    cases = build_cases([order], *rows, decisions)
    passes = told_passes(order, rows, cases, decisions)
    acts = Act.objects.filter(task__work_order=order).select_related("done_by").order_by("done_at", "pk")
    signatures = list(order.signatures.select_related("person").order_by("signed_at", "pk"))
    sheet: JobSheet = {
        **head(order), "facts": job_facts(order), "passes": passes,
        "acts": [
            {"station": station_title(one.station), "what": one.what, "by": one.done_by.name,
             "when": moment(one.done_at, order.shop)} for one in acts
        ],
        "decisions": decisions_told(decisions, cases, order.shop),
        "concessions": concessions_told(cases, order.shop),
        "parts": [f"{one.count:g} × {one.what}" for one in order.parts_used.order_by("used_at", "pk")],
        "open": left_open(order),
        "signatures": signatures_told(signatures, passes, order),
        "ink": [_("measured"), _("decided"), _("for the owner")],
    }  # fmt: skip
    return sheet | {"notes": notes(order, decisions, cases)}


def signed_sheet(order: WorkOrder) -> JobSheet | None:
    """The sheet as the deciding signature was shown it, with every name under it; None without that signature."""
    signatures = list(order.signatures.select_related("person").order_by("signed_at", "pk"))
    decided = next((one for one in reversed(signatures) if one.role == Signature.Role.DECIDED), None)
    if decided is None:
        return None
    shown = decided.shown
    told = {**shown, "signatures": signatures_told(signatures, shown["passes"], order)}
    if decided.not_checked_by_second:
        told["notes"] = list(dict.fromkeys([*shown["notes"], unchecked()]))
    return told


def told_passes(
    order: WorkOrder, rows: tuple[list[Measurement], list, list[Reading]], cases: Sequence[Case],
    decisions: Sequence[Decision],
) -> list[dict[str, object]]:  # fmt: skip
    """Every pass of a job in which anything was answered, in the order they were opened."""
    measurements, findings, readings = rows
    by_pass, read = outcomes_by_pass(measurements, findings), {}
    for reading in sorted(readings, key=lambda one: (one.recorded_at, one.pk)):
        read.setdefault(reading.measurement_id, []).append(reading)
    last = {name: told[-1].last for name, outcomes in earlier_outcomes(cases).items() if (told := visits(outcomes))}
    standing = {case.subject.key: decision_words(case.decision, order.shop) for case in cases if case.decision}
    witnessed = witnesses(order)
    found = {pk: {one.judgement["station"]: one for one in outcomes} for pk, outcomes in by_pass.items()}
    return [
        pass_told(Taken(one, order.shop, read[one.pk], found.get(one.pk, {}), standing, last, witnessed))
        for one in measurements if one.pk in read
    ]  # fmt: skip


def witnesses(order: WorkOrder) -> dict[str, list[str]]:
    """Who witnessed which stations."""
    told: dict[str, list[str]] = {}
    for signature in order.signatures.filter(role=Signature.Role.WITNESSED).select_related("person"):
        for station in signature.stations:
            told.setdefault(station, []).append(signature.person.name)
    return told


def job_facts(order: WorkOrder) -> list[dict[str, str]]:
    """Who opened the job, when measuring was finished, by which rules it was judged, how long it took."""
    tasks = list(order.tasks.order_by("place"))
    minutes = sum(task.minutes or 0 for task in tasks)
    rules = {"rule": order.shop.decision_rule, "setting": order.shop.setting_rule}
    return facts([
        (_("opened"), _("%(when)s by %(person)s") % {
            "when": moment(order.opened_at, order.shop), "person": order.opened_by.name}),
        (_("measuring finished"), moment(order.finished_at, order.shop) if order.finished_at else ""),
        (_("decision rule"), _("%(rule)s; for setting zones %(setting)s") % rules),
        (_("crank left at"), order.crank_at),
        (_("time taken"), _("%(minutes)d min") % {"minutes": minutes} if minutes else ""),
        (_("to be witnessed"), ", ".join(station_title(one) for task in tasks for one in task.witnessed_stations)),
    ])  # fmt: skip


def notes(order: WorkOrder, decisions: Sequence[Decision], cases: Sequence[Case]) -> list[str]:
    """What must be seen at once."""
    told = []
    if run := undecided_runs([order]).get(order.pk):
        told.append(_("Runs undecided since %(since)s, on the word of %(word)s.") % {
            "since": moment(run.since_at, order.shop), "word": run.on_whose_word})  # fmt: skip
    if any(one.decided_by in case.took for case in cases for one in case.decisions):
        told.append(unchecked())
    return told


def unchecked() -> str:
    """What a sheet says that only one person stands for."""
    return _("Not checked by a second person.")


def left_open(order: WorkOrder) -> list[str]:
    """The closing-up list: what is open, and why where that was said; locks that are still on."""
    items = order.closing_items.filter(closed_at=None).order_by("since_at", "pk")
    told = [f"{one.what}: {one.explanation or _('not closed up yet')}" for one in items]
    locks = order.locks.filter(lifted_at=None).select_related("person").order_by("taken_at", "pk")
    return told + [
        _("lock of %(person)s on: %(point)s") % {"person": one.person.name, "point": one.point} for one in locks
    ]


def signatures_told(signatures: Sequence[Signature], passes: Sequence[Mapping], order: WorkOrder) -> list[Signed]:
    """The names under a sheet, each with the fingerprint of what it was put under."""
    return [
        {
            "role": str(one.get_role_display()), "name": one.person.name, "when": moment(one.signed_at, order.shop),
            "fingerprint": one.shown_sha256, "note": signature_note(one, passes),
        }
        for one in signatures
    ]  # fmt: skip


def signature_note(signature: Signature, passes: Sequence[Mapping]) -> str:
    """What stands beside a name: the readings witnessed, that nobody else checked, that readings changed after it."""
    told = []
    if signature.stations:
        told.append(", ".join(station_title(one) for one in signature.stations))
    if signature.not_checked_by_second:
        told.append(_("not checked by a second person"))
    if readings_alone(signature.shown["passes"]) != readings_alone(passes):
        told.append(_("signed before later readings"))
    return "; ".join(told)


def readings_alone(passes: Sequence[Mapping]) -> list[tuple]:
    """What was read in some passes, without what was decided and witnessed later."""
    return [
        (one["title"], one["phase"], [(row["station"], row["value"], row.get("typed"), bool(row.get("is_struck")))
                                      for row in one["rows"]])
        for one in passes
    ]  # fmt: skip
