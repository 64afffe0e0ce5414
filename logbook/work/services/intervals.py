"""Service intervals are kept, changed and stopped; a job is recorded as done, or put off."""

from collections.abc import Mapping
from datetime import date, datetime

from django.db import transaction
from django.utils.translation import gettext as _

from logbook.people.models import Person

from ..due import DAYS, next_start, starts_kept, starts_to_keep
from ..models import Deferral, Done, Interval, WorkOrder
from ..queries import lengths_of, shop_day
from ..roles import needs
from .moves import NotNow


@transaction.atomic
def keep_interval(interval: Interval, *, by: Person, at: datetime) -> Interval:
    """Keep a job as it is filled in: a new one, a changed one, or one that was stopped and is kept again."""
    for about in (interval.engine, interval):
        needs(by, about, "supervisor")
    interval.is_stopped = False
    interval.full_clean()
    interval.save()
    return interval


@transaction.atomic
def stop_interval(interval: Interval, *, by: Person, at: datetime) -> Interval:
    """Stop keeping a job: it leaves the due list; what was done stays."""
    needs(by, interval, "supervisor")
    interval.is_stopped = True
    interval.save(update_fields=["is_stopped"])
    return interval


@transaction.atomic
def record_done(
    interval: Interval, *, by: Person, at: datetime, totals: Mapping[str, float], work_order: WorkOrder | None = None,
    done_at: datetime | None = None,
) -> Done:  # fmt: skip
    """Record that a job was done; inside its window the next due point doesn't move.

    Parameters
    ----------
    totals : mapping
        What the engine had run in all then, by unit ("h", "starts", "km"); a unit that isn't known is left out.
    work_order : WorkOrder, optional
        The job it was done on, which counts each interval once.
    done_at : datetime, optional
        When it was done; without it, when the work order's measuring was finished, else now.
    """
    needs(by, interval, "supervisor", "technician")
    Interval.objects.select_for_update().get(pk=interval.pk)
    if work_order and (already := interval.times_done.filter(work_order=work_order).first()):
        return already
    done_at = done_at or (work_order and work_order.finished_at) or at
    if done_at > at:
        raise NotNow(_("Read %(when)s, which is still to come: a job is recorded once it is done.")
                     % {"when": f"{done_at:%Y-%m-%d %H:%M}"})  # fmt: skip
    before = interval.times_done.filter(done_at__lt=done_at).first()
    starts = starts_kept(before.counts_from) if before else {}
    reached = {unit: float(total) for unit, total in totals.items() if total is not None}
    stands = reached | {DAYS: float(shop_day(interval.shop, done_at).toordinal())}
    counts_from = {
        unit: next_start(start=starts.get(unit), length=length, window=length * interval.window_percent / 100,
                         done=stands[unit])
        for unit, length in lengths_of(interval).items() if unit in stands
    }  # fmt: skip
    done = Done(shop=interval.shop, interval=interval, done_at=done_at, totals=reached,
                counts_from=starts_to_keep(stands | counts_from), work_order=work_order, recorded_by=by,
                recorded_at=at)  # fmt: skip
    done.full_clean(exclude=["totals", "counts_from"])
    done.save()
    return done


@transaction.atomic
def defer(interval: Interval, *, by: Person, at: datetime, until_on: date, reason: str) -> Deferral:
    """Put a job off until a day to come, with the reason under one's own name."""
    needs(by, interval, "supervisor")
    if until_on <= shop_day(interval.shop, at):
        raise NotNow(_("Read %(day)s, which isn't to come any more: name a later day.") % {"day": until_on})
    put_off = Deferral(shop=interval.shop, interval=interval, until_on=until_on, reason=reason.strip(), deferred_by=by,
                       deferred_at=at)  # fmt: skip
    put_off.full_clean()
    put_off.save()
    return put_off
