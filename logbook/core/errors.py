"""The pages that say what went wrong, and what the person can do about it."""

from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.template.loader import render_to_string
from django.utils.translation import gettext as _

TEMPLATE = "core/error.html"


def not_understood(request: HttpRequest, exception: Exception) -> HttpResponse:
    """Status 400."""
    return _answer(
        request,
        400,
        heading=_("That request couldn't be understood"),
        what_happened=_(
            "What the browser sent, or the name it called this program by, isn't what the program expects."
        ),
        what_to_do=_(
            "Nothing was stored. Go back and try again; use the address that this program was given to you with."
        ),
    )


def not_allowed(request: HttpRequest, exception: Exception) -> HttpResponse:
    """Status 403: with the sentence of whoever refused, where there is one."""
    return _answer(
        request,
        403,
        heading=_("You may not do that"),
        what_happened=str(exception)
        or _("This page or act belongs to a part that you have no say in, or you are signed in as somebody else."),
        what_to_do=_("Nothing was stored. Look who is signed in, at the top of the page; else ask the supervisor."),
    )


def not_found(request: HttpRequest, exception: Exception) -> HttpResponse:
    """Status 404."""
    return _answer(
        request,
        404,
        heading=_("There is no such page"),
        what_happened=_("Nothing is kept at the address %(path)s.") % {"path": request.path},
        what_to_do=_("Look whether it was typed whole, or start from the first page: its name is at the top."),
    )


def form_too_old(request: HttpRequest, reason: str = "") -> HttpResponse:
    """Status 403: the token that shows a form came from our own page is missing or old."""
    return _answer(
        request,
        403,
        heading=_("That form was too old"),
        what_happened=_(
            "The page was opened before the last sign-in, or the browser keeps no cookies: who sent it can't be told."
        ),
        what_to_do=_("Nothing was stored. Go back, load the page anew, and send it again."),
    )


def gone_wrong(request: HttpRequest) -> HttpResponse:
    """Status 500. Asks neither the database nor the session: one of them may be what failed."""
    said = {
        "status": 500,
        "heading": _("Something in the program went wrong"),
        "what_happened": _("What was stored before is safe. What you just sent may not be stored."),
        "what_to_do": _(
            "Go back and look whether it is there before you send it again. Tell who looks after this program."
        ),
    }
    return HttpResponse(render_to_string(TEMPLATE, said), status=500)


def _answer(request: HttpRequest, status: int, **said: str) -> HttpResponse:
    return render(request, TEMPLATE, {"status": status, **said}, status=status)
