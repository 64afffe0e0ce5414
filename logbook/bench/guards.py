"""What stands against an entry at the bench, each in a sentence; and rows kept so that a constraint becomes one."""

from collections.abc import Iterable, Mapping, Sequence
from datetime import datetime
from uuid import UUID

from django.core.exceptions import ValidationError
from django.db.models import Model
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.people.models import Person
from logbook.work.models import Task, WorkOrder
from measurements.document import Unjudgeable
from measurements.sentence import Refusal

from .judging import Judgement, engine_of, judge, kinds
from .models import Finding, Measurement, Reading
from .queries import Answer, is_acted_on, stations_found, with_its_job
from .words import station_title

MOST_NAMED = 6


class NotKept(Refused):
    """An entry that can't be kept as it was made."""


class NotAtThisStage(Refused):
    """Something that is over, or that something else comes before."""


def held(measurement: Measurement) -> Measurement:
    """The pass as it stands now, with its job; its task is kept from others until the transaction ends."""
    Task.objects.select_for_update().get(pk=measurement.task_id)
    return with_its_job(Measurement.objects).get(pk=measurement.pk)


def keep(row: Model, known: Iterable[str]) -> None:
    """Check a row and save it; what speaks against it becomes a sentence. `known` are fields that came as rows."""
    try:
        row.full_clean(exclude=set(known))
    except ValidationError as error:
        raise NotKept(" ".join(error.messages)) from error
    row.save()


def judged(
    measurement: Measurement, answers: Mapping[str, Answer], *, at: datetime, station: str | None = None
) -> Judgement:
    """Judge a pass; what can't be read is refused in its own sentence."""
    try:
        return judge(measurement, answers, at=at, station=station)
    except Unjudgeable as error:
        own = [str(why) for path, why in error.errors if station and path.endswith(f".readings.{station}")]
        rest = [f"{path.partition('].')[2] or path}: {why}" for path, why in error.errors]
        raise NotKept(" ".join(own or rest)) from error


def station_named(measurement: Measurement, text: str) -> str:
    """A station's one name, or the sentence that says why it is none."""
    engine = engine_of(measurement.task.work_order)
    if engine is None:
        raise NotKept(_("The engine's own figures contradict one another; mend them on the engine's page first."))
    try:
        return kinds()[measurement.kind].station_name(text, engine)
    except Refusal as refusal:
        raise NotKept(str(refusal)) from refusal


def refuse_if_over(task: Task, measurement: Measurement | None = None) -> None:
    """Refuse on a job that isn't at the bench, a task that is finished, a pass that is closed."""
    order = task.work_order
    if order.state != WorkOrder.State.AT_THE_BENCH:
        told = {"job": order, "state": order.get_state_display()}
        raise NotAtThisStage(_("Job %(job)s is “%(state)s”, not at the bench: nothing is entered on it now.") % told)
    if task.done_at is not None:
        raise NotAtThisStage(_("“%(task)s” is finished: nothing is entered on it any more.") % {"task": task})
    if measurement is not None and measurement.closed_at is not None:
        raise NotAtThisStage(_("This pass is closed; open another one to measure again."))


def refuse_out_of_turn(measurement: Measurement, station: str, supersedes: Reading | None) -> None:
    """Refuse an as-found after something was done there, and an as-left before anything was found there."""
    if measurement.phase == Measurement.Phase.AS_FOUND:
        if supersedes is None and is_acted_on(measurement, station):
            raise NotAtThisStage(
                _("What was found at %(station)s is closed: something was done there since. Measure it as left.")
                % {"station": station_title(station)}
            )
    elif station not in stations_found(measurement.task):
        raise NotAtThisStage(
            _("Keep first what was found at %(station)s, or say why it was not measured.")
            % {"station": station_title(station)}
        )


def refuse_before_found(found: Measurement, station: str) -> None:
    """Refuse an act before its as-found is kept; where shims are swapped, before every as-found is."""
    kept = stations_found(found.task)
    if station not in kept:
        raise NotAtThisStage(
            _("Keep first what was found at %(station)s, or say why it was not measured; then do it.")
            % {"station": station_title(station)}
        )
    kind, engine = kinds()[found.kind], engine_of(found.task.work_order)
    if engine.adjustment == "shim" and "fit_shim" in kind.acts:
        missing = [one for one in kind.stations(engine) if one not in kept]
        if missing:
            named = ", ".join(station_title(one) for one in missing[:MOST_NAMED]) + (
                " …" if len(missing) > MOST_NAMED else ""
            )
            raise NotAtThisStage(
                _("With shims every as-found comes first: still to be measured are %(stations)s.") % {"stations": named}
            )


def kept_before(
    measurement: Measurement, client_id: UUID, by: Person, station: str, typed: str, not_measured: str
) -> Reading | None:
    """The reading a form was kept as already; the same form with something else on it is refused."""
    already = Reading.objects.filter(client_id=client_id).select_related("measurement").first()
    if already is None:
        return None
    same_hands = (already.measurement_id, already.keyed_by_id) == (measurement.pk, by.pk)
    if not same_hands:
        raise NotKept(_("This form was used already by somebody else; load the page anew and enter it again."))
    typed_then = {already.typed, (already.slip_asked or {}).get("typed", already.typed)}
    if already.station == station and typed.strip() in typed_then and not_measured.strip() == already.not_measured:
        return already
    told = {"typed": already.typed or already.not_measured, "station": station_title(already.station)}
    raise NotKept(
        _("This form was kept already as “%(typed)s” at %(station)s. Load the page anew to enter another.") % told
    )


def said_before(
    standing: Sequence[Reading], station: str, supersedes: Reading | None, not_measured: str
) -> Reading | None:
    """The standing reading that an answer takes the place of, if any."""
    here = [one for one in standing if one.station == station]
    if supersedes is not None and supersedes not in here:
        raise NotKept(_("The entry to be corrected was replaced or struck already; look what stands there now."))
    answered = supersedes or next((one for one in here if one.not_measured), None)
    if not_measured.strip() and any(one.typed for one in here if one != answered):
        raise NotKept(
            _("%(station)s has a reading; strike it with its reason before saying that it was not measured.")
            % {"station": station_title(station)}
        )
    return answered


def keep_finding(reading: Reading, told: Judgement) -> None:
    """Keep what a station was found to be, with the reading that called for it and the acts it calls for."""
    finding = told.findings.get(reading.station)
    if finding is None:
        why = " ".join(one for one in told.warnings if f", {reading.station}:" in one)
        raise NotKept(
            why or _("%(station)s can't be judged as it was typed.") % {"station": station_title(reading.station)}
        )
    Finding.objects.create(
        shop_id=reading.shop_id, measurement=reading.measurement, reading=reading, station=reading.station,
        characteristic=finding["characteristic"], verdict=finding["verdict"],
        chance_within=finding["probability_within"], limit_sheet=told.sheet,
        judgement={**finding, "acts": told.advice.get(reading.station, []) if reading.typed or reading.is_strike else []},
    )  # fmt: skip
