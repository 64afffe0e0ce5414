"""What stands at the head of every sheet: shop, job, engine with its sizes; and how moments and sizes are written."""

from collections.abc import Iterable
from datetime import datetime
from zoneinfo import ZoneInfo

from django.utils.translation import gettext as _
from django.utils.translation import ngettext

from logbook.engines.models import Engine, Part
from logbook.paper.shapes import Fact, Sheet
from logbook.people.models import Shop
from logbook.work.models import WorkOrder

from ..words import plain


def head(work_order: WorkOrder) -> Sheet:
    """The head of a work order's sheet."""
    about = engine_facts(work_order.engine) if work_order.engine else part_facts(work_order.part)
    return {
        "shop": work_order.shop.name, "number": work_order.number, "title": work_order.title,
        "engine": str(work_order.engine or work_order.part), "engine_facts": about,
        "is_demo": work_order.shop.is_demo,
    }  # fmt: skip


def engine_facts(engine: Engine) -> list[Fact]:
    """An engine as its papers describe it; what isn't known is left out, an unknown order is said."""
    mark = engine.shop.decimal_mark
    order = "–".join(map(str, engine.firing_order)) if engine.firing_order else _("not known")
    layout = ngettext("%(layout)s, %(count)d cylinder", "%(layout)s, %(count)d cylinders", engine.cylinders)
    sizes = ((_("bore"), engine.bore_mm), (_("stroke"), engine.stroke_mm))
    return facts([
        (_("serial or shop mark"), engine.serial),
        (_("duty"), engine.get_duty_display()),
        (_("layout"), layout % {"layout": engine.get_layout_display(), "count": engine.cylinders}),
        (_("cylinder 1 at the"), engine.get_numbered_from_display()),
        (_("firing order"), order),
        (_("ignition"), engine.get_ignition_display() if engine.ignition else ""),
        *((name, f"{plain(size, mark)} mm" if size else "") for name, size in sizes),
    ])  # fmt: skip


def part_facts(part: Part) -> list[Fact]:
    """A loose part as it is marked."""
    return facts([(_("part"), part.get_kind_display()), (_("serial or shop mark"), part.mark), (_("note"), part.note)])


def facts(told: Iterable[tuple[str, object]]) -> list[Fact]:
    """Names with what they are; what is empty is left out."""
    return [{"name": str(name), "value": str(value)} for name, value in told if value not in ("", None)]


def moment(at: datetime, shop: Shop) -> str:
    """A moment as the shop's clock showed it."""
    return f"{at.astimezone(ZoneInfo(shop.time_zone)):%Y-%m-%d %H:%M}"
