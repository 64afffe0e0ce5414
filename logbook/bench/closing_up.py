"""What work at the bench leaves open, put on the job's closing-up list by the work itself, and taken off by it."""

from datetime import datetime

from django.utils.translation import gettext as _

from logbook.people.models import Person
from logbook.work.models import ClosingItem, Task
from logbook.work.services import close_item, open_item
from measurements.kind import CRANKED, TURNED_BY_HAND, UNDER_AIR, Kind

from .models import Act, Measurement
from .words import station_title


def opened_by_pass(kind: Kind) -> list[str]:
    """What a pass of a kind opens: by the state of the engine it needs, and by what it is adjusted with."""
    by_state = {
        TURNED_BY_HAND: [_("covers off"), _("bar on the crank")],
        CRANKED: [_("plugs or injectors out"), _("gauge adapter in a cylinder")],
        UNDER_AIR: [_("plugs or injectors out"), _("adapter in a cylinder"), _("air line on"), _("crank held")],
    }
    feelers = [_("feeler leaves out")] if "turn_screw" in kind.acts else []
    return by_state.get(kind.lock_state, []) + feelers


def locknut_at(station: str) -> str:
    """The item of a locknut that is loose until the station is measured as left."""
    return _("locknut loose: %(station)s") % {"station": station_title(station)}


def note_opened(measurement: Measurement, kind: Kind, *, by: Person, at: datetime) -> None:
    """Put what a pass opens on the list; a loose part has no engine to close up."""
    order = measurement.task.work_order
    if order.engine_id is not None:
        for what in opened_by_pass(kind):
            open_item(order, by=by, at=at, what=what)


def note_act(act: Act, kind: Kind, adjustment: str, *, by: Person, at: datetime) -> None:
    """A screw was turned: its locknut counts as loose until the as-left is measured with it tight."""
    if "turn_screw" in kind.acts and adjustment == "screw":
        open_item(act.task.work_order, by=by, at=at, what=locknut_at(act.station))


def note_left(task: Task, station: str, *, by: Person, at: datetime) -> None:
    """Measured as left with the locknut tight: the item is closed."""
    what = locknut_at(station)
    for item in ClosingItem.objects.filter(work_order=task.work_order_id, what=what, closed_at=None):
        close_item(item, by=by, at=at)
