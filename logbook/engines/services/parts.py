"""Parts taken into the logbook, fitted, taken off, moved; their hours follow them."""

import re
from datetime import datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.engines import queries
from logbook.engines.models import Engine, Fitting, Meter, Part
from logbook.people.models import Person

from .guards import AT_THE_ENGINE, KEEP_PARTS, EngineryRefused, refuse_moments_to_come, refuse_others, saved
from .meters import MeterRefused, read_meter

CYLINDER = re.compile(r"cylinder ([0-9]+)", re.IGNORECASE)


class PartRefused(EngineryRefused):
    """Something asked of a part that can't be done."""


@transaction.atomic
def add_part(
    *, by: Person, at: datetime, kind: str, mark: str, hours_when_new_here: float = 0.0, note: str = ""
) -> Part:
    """Take a part with a serial or shop mark into the logbook, with the hours it had run before it came."""
    refuse_others(by, KEEP_PARTS, PartRefused)
    return saved(Part(shop=by.shop, kind=kind, mark=" ".join(mark.split()), hours_when_new_here=hours_when_new_here,
                       note=note, created_at=at), PartRefused)  # fmt: skip


@transaction.atomic
def fit_part(
    *, by: Person, at: datetime, part: Part, engine: Engine, position: str, fitted_at: datetime,
    meter_shows: float | None = None, remark: str = "",
) -> Fitting:  # fmt: skip
    """Fit a part at a position of an engine.

    Parameters
    ----------
    meter_shows : float or None
        What the engine's hour meter shows then [h]: recorded as a reading. Without it the last reading counts.
    remark : str
        Why that reading stands, where it is asked about.
    """
    refuse_others(by, AT_THE_ENGINE, PartRefused, part, engine)
    refuse_moments_to_come(fitted_at, at, "fitted_at", PartRefused)
    position = " ".join(position.split())
    _refuse_two_places(part, fitted_at)
    _refuse_taken_position(part, engine, position)
    total = _hours(by, at, engine, fitted_at, meter_shows, remark)
    return saved(Fitting(shop=part.shop, part=part, engine=engine, position=position, fitted_at=fitted_at,
                          fitted_total=total), PartRefused)  # fmt: skip


@transaction.atomic
def take_off_part(
    *, by: Person, at: datetime, part: Part, taken_off_at: datetime, meter_shows: float | None = None, remark: str = ""
) -> Fitting:
    """Take a part off the engine it sits in; see `fit_part` about the meter."""
    refuse_others(by, AT_THE_ENGINE, PartRefused, part)
    refuse_moments_to_come(taken_off_at, at, "taken_off_at", PartRefused)
    fitting = part.fittings.select_related("engine").filter(taken_off_at=None).first()
    if fitting is None:
        raise PartRefused(_("%(part)s sits in no engine; there is nothing to take it off.") % {"part": part})
    if taken_off_at < fitting.fitted_at:
        said = _("It was fitted on %(on)s; it can't have been taken off before.")
        raise PartRefused(at_fields=[("taken_off_at", said % {"on": f"{fitting.fitted_at:%Y-%m-%d}"})])
    fitting.taken_off_at = taken_off_at
    fitting.taken_off_total = _hours(by, at, fitting.engine, taken_off_at, meter_shows, remark)
    return saved(fitting, PartRefused)


@transaction.atomic
def move_part(
    *, by: Person, at: datetime, part: Part, engine: Engine, position: str, moved_at: datetime,
    left_meter_shows: float | None = None, meter_shows: float | None = None, remark: str = "",
) -> Fitting:  # fmt: skip
    """Move a part to another position or engine in one act: taken off there and fitted here at the same moment.

    Parameters
    ----------
    left_meter_shows, meter_shows : float or None
        What the hour meters of the engine it leaves and of the one it comes to show [h]; one engine needs only one.
    """
    refuse_moments_to_come(moved_at, at, "fitted_at", PartRefused)
    try:
        left = take_off_part(by=by, at=at, part=part, taken_off_at=moved_at, remark=remark,
                             meter_shows=left_meter_shows)  # fmt: skip
    except EngineryRefused as refused:
        raise refused.at({"taken_off_at": "fitted_at", "meter_shows": "left_meter_shows"}, PartRefused) from refused
    here = None if left.engine_id == engine.pk and left_meter_shows is not None else meter_shows
    return fit_part(by=by, at=at, part=part, engine=engine, position=position, fitted_at=moved_at, meter_shows=here,
                    remark=remark)  # fmt: skip


def _hours(
    by: Person, at: datetime, engine: Engine, moment: datetime, meter_shows: float | None, remark: str
) -> float | None:
    """Hours of an engine at a moment: by a reading taken then, else by the last one before."""
    if meter_shows is None:
        return queries.hours_at(engine, moment)
    meter = engine.meters.filter(unit=Meter.Unit.HOURS, replaced_at=None).first()
    if meter is None:
        said = _("%(engine)s has no hour meter; fit one first, or leave this empty.") % {"engine": engine}
        raise PartRefused(at_fields=[("meter_shows", said)])
    try:
        return read_meter(by=by, at=at, meter=meter, shows=meter_shows, taken_at=moment, remark=remark).total
    except MeterRefused as refused:
        raise refused.at({"shows": "meter_shows", "taken_at": "meter_shows"}, PartRefused) from refused


def _refuse_two_places(part: Part, fitted_at: datetime) -> None:
    now = part.fittings.select_related("engine").filter(taken_off_at=None).first()
    if now:
        said = {"part": part, "engine": now.engine, "position": now.position}
        raise PartRefused(_("%(part)s sits in %(engine)s, %(position)s; take it off there first, or move it.") % said)
    if later := part.fittings.filter(taken_off_at__gt=fitted_at).order_by("-taken_off_at").first():
        said = _("It sat elsewhere until %(on)s; it can't have been fitted before.")
        raise PartRefused(at_fields=[("fitted_at", said % {"on": f"{later.taken_off_at:%Y-%m-%d}"})])


def _refuse_taken_position(part: Part, engine: Engine, position: str) -> None:
    if not position:
        raise PartRefused(at_fields=[("position", _("Nothing was written; say where it sits, such as cylinder 3."))])
    told = CYLINDER.fullmatch(position)
    if told and not 1 <= int(told[1]) <= engine.cylinders:
        said = {"position": position, "engine": engine, "count": engine.cylinders}
        raise PartRefused(at_fields=[("position", _(
            "Read “%(position)s”; %(engine)s has cylinders 1 to %(count)s.") % said)])  # fmt: skip
    if there := queries.occupant(engine, part.kind, position):
        said = {"part": there.part, "position": position, "on": f"{there.fitted_at:%Y-%m-%d}"}
        raise PartRefused(at_fields=[("position", _(
            "%(part)s sits at %(position)s since %(on)s; take it off first.") % said)])  # fmt: skip
