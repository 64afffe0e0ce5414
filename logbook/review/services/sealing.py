"""The sealed job sheet: drawn once from what was signed and kept; older ones are drawn when first asked for."""

import hashlib
from datetime import datetime
from zoneinfo import ZoneInfo

from django.db import IntegrityError, transaction
from django.utils.translation import get_language
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused
from logbook.paper.services import draw, seal, sheets_folder
from logbook.work.models import WorkOrder

from ..models import SealedSheet, Signature
from ..sheets import job_sheet, signed_sheet
from .guards import NotDecided


class SheetLost(Refused):
    """A sealed sheet that is gone, or that somebody altered."""


def sealed_sheet(work_order: WorkOrder) -> SealedSheet:
    """Give a signed work order's sealed sheet, drawing it the first time.

    It is drawn from what the deciding signature was shown, and dated as that signature, so it doesn't matter when.

    Raises
    ------
    NotDecided
        The job isn't signed.
    PaperRefused
        Sheets can't be drawn on this machine.
    """
    if already := SealedSheet.objects.filter(work_order=work_order).first():
        return already
    decided = work_order.signatures.filter(role=Signature.Role.DECIDED).order_by("signed_at", "pk").last()
    if decided is None:
        raise NotDecided(_("Job %(job)s isn't signed, so its sheet isn't sealed.") % {"job": work_order})
    shop = work_order.shop
    sealed = seal(
        "job_sheet", signed_sheet(work_order), name=f"shop-{shop.pk}-job-{work_order.number}", paper=shop.paper,
        title=sheet_title(work_order), language=get_language() or "en", at=in_shop(decided.signed_at, shop.time_zone),
    )  # fmt: skip
    try:
        with transaction.atomic():
            return SealedSheet.objects.create(
                shop=shop, work_order=work_order, sealed_at=decided.signed_at, sha256=sealed.sha256, file=sealed.file,
                version=sealed.version,
            )  # fmt: skip
    except IntegrityError:  # somebody else asked at the same moment
        return SealedSheet.objects.get(work_order=work_order)


def job_sheet_pdf(work_order: WorkOrder, *, at: datetime) -> bytes:
    """The job sheet as a PDF: the sealed one once it is signed, drawn as it stands until then.

    Raises
    ------
    SheetLost
        The sealed file is gone, or its bytes are no longer those that were sealed.
    PaperRefused
        Sheets can't be drawn on this machine.
    """
    shop = work_order.shop
    if work_order.state != WorkOrder.State.SIGNED:
        return draw("job_sheet", job_sheet(work_order), paper=shop.paper, title=sheet_title(work_order),
                    language=get_language() or "en", at=in_shop(at, shop.time_zone))  # fmt: skip
    return read_sealed(sealed_sheet(work_order))


def read_sealed(sealed: SealedSheet) -> bytes:
    """Read a sealed sheet and make sure that it is the one that was sealed."""
    path = sheets_folder() / sealed.file
    try:
        content = path.read_bytes()
    except OSError as error:
        raise SheetLost(_("The sealed sheet %(file)s can't be read; bring it back from a backup. What was signed is still in "
                          "the logbook.") % {"file": sealed.file}) from error  # fmt: skip
    if hashlib.sha256(content).hexdigest() != sealed.sha256:
        raise SheetLost(_("The sealed sheet %(file)s was changed since it was sealed: don't rely on it; bring it back from "
                          "a backup.") % {"file": sealed.file})  # fmt: skip
    return content


def sheet_title(work_order: WorkOrder) -> str:
    """What a reader of PDFs shows as the job sheet's name."""
    about = work_order.engine or work_order.part
    return _("Job sheet %(number)s: %(about)s, %(title)s") % {
        "number": work_order.number, "about": about, "title": work_order.title
    }  # fmt: skip


def in_shop(at: datetime, time_zone: str) -> datetime:
    """A moment by the shop's clock."""
    return at.astimezone(ZoneInfo(time_zone))
