"""The page on which a sheet is signed: all of it shown, its fingerprint, the ways this person may sign, the password."""

from django.contrib import messages
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.utils import timezone
from django.utils.translation import gettext as _
from django.views.decorators.cache import never_cache
from django.views.decorators.debug import sensitive_post_parameters

from logbook.bench.words import station_title
from logbook.core.refusal import Refused
from logbook.paper.services import PaperRefused, fingerprint
from logbook.people.access import open_to
from logbook.people.tries import TooManyTries, count_try, forget_tries
from logbook.work.models import WorkOrder

from .forms import SignForm
from .models import Signature
from .queries import OPEN, took_readings, witnessed_stations
from .screen import on_screen
from .services import WrongPassword, sealed_sheet, sign
from .services.signing import ways_to_sign
from .sheets import job_sheet
from .views import NOT_UNDERSTOOD, REFUSED, looks_or_sends, order_of

TOO_MANY = 429


@never_cache
@sensitive_post_parameters("password")
@looks_or_sends
@open_to("technician", "supervisor", "witness")
def sign_page(request: HttpRequest, number: int) -> HttpResponse:
    """Show exactly what is signed, and take a signature under it."""
    order = order_of(request, number)
    named = witnessed_stations(order)
    if request.method != "POST":
        return shown_page(request, order, SignForm(stations=named))
    form = SignForm(request.POST, stations=named)
    if not form.is_valid():
        return shown_page(request, order, form, status=NOT_UNDERSTOOD)
    try:
        signature = signed(request, order, form.cleaned_data)
    except TooManyTries as refused:
        return shown_page(request, order, form, str(refused), status=TOO_MANY)
    except Refused as refused:
        return shown_page(request, order, form, str(refused), status=REFUSED)
    role = signature.get_role_display()
    messages.success(request, _("Signed as %(role)s by %(person)s.") % {"role": role, "person": request.user.name})
    if signature.role == Signature.Role.DECIDED:
        draw_now(request, order)
    return redirect("review:sign", number)


def signed(request: HttpRequest, order: WorkOrder, told: dict[str, object]) -> Signature:
    """Count the try, sign, and forget the tries unless the password was wrong, which is looked at first."""
    at, tried = timezone.now(), {"name": request.user.name, "address": request.META["REMOTE_ADDR"]}
    count_try(**tried, at=at)
    try:
        signature = sign(order, by=request.user, at=at, **told)
    except WrongPassword:
        raise
    except Refused:
        forget_tries(**tried)
        raise
    forget_tries(**tried)
    return signature


def draw_now(request: HttpRequest, order: WorkOrder) -> None:
    """Seal the sheet at once; where sheets can't be drawn the signature stands, and it is drawn when that is mended."""
    try:
        sealed_sheet(order)
    except PaperRefused as refused:
        messages.warning(request, str(refused))


def shown_page(
    request: HttpRequest, order: WorkOrder, form: SignForm, refused: str = "", *, status: int = 200
) -> HttpResponse:
    """The sheet as it stands, and the form under it."""
    sheet = job_sheet(order)
    named = witnessed_stations(order)
    ways = ways_to_sign(request.user, order, took_readings(order), timezone.now())
    may = [one for one in ways if not one.why_not]
    roles = {one.role for one in may}
    context = {
        "order": order, "sheet": on_screen(sheet), "fingerprint": fingerprint(sheet), "form": form, "refused": refused,
        "may": may, "may_not": [one for one in ways if one.why_not], "witnesses": Signature.Role.WITNESSED in roles,
        "witnessed_now": form["stations"].data or [],
        "warnings": last_chances(order, named) if Signature.Role.DECIDED in roles else [],
        "closes": Signature.Role.DECIDED in roles, "to_decide": request.user.has_role("supervisor") and order.state in OPEN,
        "stations": [(name, station_title(name)) for name in named],
    }  # fmt: skip
    return render(request, "review/sign.html", context, status=status)


def last_chances(order: WorkOrder, named: list[str]) -> list[str]:
    """Whose names are missing, said before the deciding signature shuts them out."""
    given = set(order.signatures.values_list("role", flat=True))
    told = []
    if Signature.Role.MEASURED not in given:
        told.append(_("Nobody who measured has signed yet; after the deciding signature they no longer can."))
    if named and Signature.Role.WITNESSED not in given:
        told.append(_("Readings were to be witnessed and no witness has signed yet; afterwards they no longer can."))
    return told
