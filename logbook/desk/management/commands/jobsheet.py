"""`manage.py jobsheet JOB OUT.pdf`: a job's sheet as a PDF; the sealed one once it is signed."""

from pathlib import Path

from django.core.management import BaseCommand, CommandError, CommandParser
from django.utils import timezone

from logbook.core.refusal import Refused
from logbook.review.services import job_sheet_pdf
from logbook.work.models import WorkOrder


class Command(BaseCommand):
    help = "Writes a job's sheet as a PDF: the sealed one once the job is signed, as it stands until then."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("job", type=int, help="number of the job")
        parser.add_argument("out", help="the PDF to write; a file that is there already is written over")
        parser.add_argument("--shop", default="", help="name of the shop, where this logbook keeps several")

    def handle(self, *, job: int, out: str, shop: str, **_: object) -> None:
        order = order_named(job, shop)
        try:
            content = job_sheet_pdf(order, at=timezone.now())
        except Refused as refused:
            raise CommandError(str(refused)) from refused
        try:
            Path(out).write_bytes(content)
        except (OSError, ValueError) as error:
            why = getattr(error, "strerror", None) or str(error)
            raise CommandError(f"{out} can't be written: {why}.") from error
        kind = "sealed" if order.state == WorkOrder.State.SIGNED else "not signed yet"
        self.stdout.write(f"Job {order}, {kind}: {out}, {len(content)} bytes.")


def order_named(job: int, shop: str) -> WorkOrder:
    """Find the one job of a number.

    Raises
    ------
    CommandError
        There is none, or several shops have one and none of them is named.
    """
    found = WorkOrder.objects.filter(number=job).select_related("shop", "engine", "part").order_by("shop__name")
    orders = list(found.filter(shop__name__iexact=shop) if shop else found)
    if not orders:
        where = f" in the shop “{shop}”" if shop else ""
        raise CommandError(f"There is no job {job}{where}.")
    if len(orders) > 1:
        names = ", ".join(f"“{order.shop}”" for order in orders)
        raise CommandError(f"Several shops have a job {job}: name one with --shop; there are {names}.")
    return orders[0]
