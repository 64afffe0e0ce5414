"""The door: the first start, signing in and out, a password of one's own."""

from django.conf import settings
from django.contrib import messages
from django.contrib.auth import authenticate, login, logout, update_session_auth_hash
from django.core.exceptions import ValidationError
from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.utils import timezone
from django.utils.http import url_has_allowed_host_and_scheme
from django.utils.translation import gettext as _
from django.views.decorators.cache import never_cache
from django.views.decorators.debug import sensitive_post_parameters
from django.views.decorators.http import require_http_methods, require_POST

from logbook.core.refusal import Refused
from logbook.people import services, start_code
from logbook.people.access import open_to
from logbook.people.forms import FirstStartForm, OwnPasswordForm, SignInForm
from logbook.people.models import Person
from logbook.people.tries import FIRST_START, TooManyTries, count_try, forget_tries

GONE, TOO_MANY = 404, 429

looks_or_sends = require_http_methods(["GET", "HEAD", "POST"])


@never_cache
@sensitive_post_parameters()
@looks_or_sends
def first_start(request: HttpRequest) -> HttpResponse:
    """Open an empty logbook; the page is gone once somebody exists."""
    if Person.objects.exists():
        return render(request, "people/opened.html", status=GONE)
    form = FirstStartForm(request.POST if request.method == "POST" else None)
    status = 200
    if form.is_valid():
        try:
            return welcome(request, opened_by(request, form))
        except services.OpenAlready:
            return render(request, "people/opened.html", status=GONE)
        except ValidationError as wrong:
            form.add_error(None, wrong)
        except Refused as refused:
            form.add_error("code", str(refused))
            status = TOO_MANY if isinstance(refused, TooManyTries) else status
    context = {"form": form, "has_code": start_code.is_made(settings.HOME)}
    return render(request, "people/first_start.html", context, status=status)


def opened_by(request: HttpRequest, form: FirstStartForm) -> Person:
    """Count the try, open the logbook, forget the tries."""
    at, address = timezone.now(), request.META["REMOTE_ADDR"]
    count_try(name=FIRST_START, address=address, at=at)
    first = services.open_logbook(
        home=settings.HOME, code=form.cleaned_data["code"], at=at, shop=form.shop_told(),
        supervisor=form.supervisor_told(), password=form.cleaned_data["password"],
    )  # fmt: skip
    forget_tries(name=FIRST_START)
    return first


def welcome(request: HttpRequest, first: Person) -> HttpResponse:
    """Sign the first supervisor in and send them home."""
    login(request, first)
    messages.success(request, _("The logbook of %(shop)s is open.") % {"shop": first.shop.name})
    return redirect("desk:home")


@never_cache
@sensitive_post_parameters("password")
@looks_or_sends
def sign_in(request: HttpRequest) -> HttpResponse:
    """Let a person in who gives name and password."""
    if request.user.is_authenticated:
        return redirect(where_to(request))
    if not Person.objects.exists():
        return redirect("people:first_start")
    form = SignInForm(request.POST if request.method == "POST" else None)
    status = 200
    if form.is_valid():
        try:
            person = known(request, **form.cleaned_data)
        except TooManyTries as refused:
            form.add_error(None, str(refused) + " " + _("A supervisor can give a new password, which ends the wait."))
            status = TOO_MANY
        else:
            if person is not None:
                login(request, person)
                return redirect("people:own_password" if person.password_is_given else where_to(request))
            form.add_error(
                None,
                _("Name and password don't belong together, or this person may no longer sign in. Capitals matter in the "
                  "password only; after 5 wrong tries the next has to wait."),
            )  # fmt: skip
    return render(request, "people/sign_in.html", {"form": form, "next": own_path(request)}, status=status)


def known(request: HttpRequest, name: str, password: str) -> Person | None:
    """Count the try, and give the person when name and password are right."""
    address = request.META["REMOTE_ADDR"]
    count_try(name=name, address=address, at=timezone.now())
    person = authenticate(request, username=name, password=password)
    if person is not None:
        forget_tries(name=name, address=address)
    return person


def own_path(request: HttpRequest) -> str:
    """Where the person was going: a path of this program, else nowhere."""
    asked = request.POST.get("next") or request.GET.get("next", "")
    return asked if asked.startswith("/") and url_has_allowed_host_and_scheme(asked, allowed_hosts=None) else ""


def where_to(request: HttpRequest) -> str:
    """Where a person goes from the door."""
    return own_path(request) or "desk:home"


@require_POST
def sign_out(request: HttpRequest) -> HttpResponse:
    """Let a person go; nothing of theirs stays on the tablet."""
    logout(request)
    messages.info(request, _("You are signed out."))
    return redirect("people:sign_in")


@sensitive_post_parameters()
@open_to()
@looks_or_sends
def own_password(request: HttpRequest) -> HttpResponse:
    """Choose a password of one's own."""
    form = OwnPasswordForm(request.POST if request.method == "POST" else None, person=request.user)
    status = 200
    if form.is_valid():
        try:
            choose(request, form.cleaned_data["current"], form.cleaned_data["password"])
        except Refused as refused:
            form.add_error("current", str(refused))
            status = TOO_MANY if isinstance(refused, TooManyTries) else status
        else:
            messages.success(request, _("Your new password counts from now on; it signs for you."))
            return redirect("desk:home")
    return render(request, "people/own_password.html", {"form": form}, status=status)


def choose(request: HttpRequest, current: str, password: str) -> None:
    """Count the try, change the password, and leave the person signed in here."""
    tried = {"name": request.user.name, "address": request.META["REMOTE_ADDR"]}
    count_try(**tried, at=timezone.now())
    services.choose_password(person=request.user, current=current, password=password)
    forget_tries(**tried)
    update_session_auth_hash(request, request.user)
