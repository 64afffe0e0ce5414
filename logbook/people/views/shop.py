"""The people of a shop, and its ways."""

from django.contrib import messages
from django.contrib.auth import update_session_auth_hash
from django.core.exceptions import PermissionDenied, ValidationError
from django.http import HttpRequest, HttpResponse
from django.shortcuts import get_object_or_404, redirect, render
from django.utils.translation import gettext as _
from django.views.decorators.debug import sensitive_post_parameters
from django.views.decorators.http import require_http_methods, require_safe

from logbook.core.refusal import Refused
from logbook.people import services
from logbook.people.access import open_to
from logbook.people.forms import RULES, GivenPasswordForm, NewPersonForm, RolesForm, ShopWaysForm
from logbook.people.models import Person, Shop

looks_or_sends = require_http_methods(["GET", "HEAD", "POST"])


@open_to("supervisor")
@require_safe
def people(request: HttpRequest) -> HttpResponse:
    """Everybody of the shop, and who is missing."""
    everybody = Person.objects.seen_by(request.user).order_by("-is_active", "name")
    supervisors = [person for person in everybody if person.is_active and person.is_supervisor]
    context = {
        "everybody": everybody,
        "only_supervisor": supervisors[0] if len(supervisors) == 1 else None,
        "nobody_measures": not any(person.is_active and person.is_technician for person in everybody),
    }
    return render(request, "people/people.html", context)


@sensitive_post_parameters()
@open_to("supervisor")
@looks_or_sends
def new_person(request: HttpRequest) -> HttpResponse:
    """Add a person."""
    form = NewPersonForm(request.POST if request.method == "POST" else None)
    if form.is_valid():
        try:
            added = services.add_person(by=request.user, person=form.instance, password=form.cleaned_data["password"])
        except ValidationError as wrong:  # somebody took the name between the look and the write
            form.add_error(None, wrong)
        else:
            told = _("%(name)s can sign in now, and is asked for a password of their own.")
            messages.success(request, told % {"name": added.name})
            return redirect("people:people")
    return render(request, "people/new_person.html", {"form": form})


@sensitive_post_parameters()
@open_to("supervisor")
@looks_or_sends
def person(request: HttpRequest, pk: int) -> HttpResponse:
    """One person: roles, whether they may sign in, a new password."""
    whom = get_object_or_404(Person.objects.seen_by(request.user), pk=pk)
    sent = request.POST.get("act") if request.method == "POST" else None
    roles = RolesForm(request.POST if sent == "roles" else None, instance=whom)
    password = GivenPasswordForm(request.POST if sent == "password" else None, person=whom)
    if (roles.is_valid() and roles_changed(request, roles)) or (
        password.is_valid() and password_given(request, password)
    ):
        return redirect("people:people" if whom.is_supervisor or whom != request.user else "desk:home")
    return render(request, "people/person.html", {"whom": whom, "roles": roles, "password": password})


def roles_changed(request: HttpRequest, form: RolesForm) -> bool:
    """Change what a person may do, or put the refusal into the form."""
    whom = Person.objects.get(pk=form.instance.pk)
    try:
        services.change_person(
            by=request.user, person=whom, roles=form.roles(), may_sign_in=form.cleaned_data["is_active"]
        )
    except Refused as refused:
        form.add_error(None, str(refused))
        return False
    messages.success(request, _("What %(name)s may do is changed.") % {"name": whom.name})
    return True


def password_given(request: HttpRequest, form: GivenPasswordForm) -> bool:
    """Give a person a new password; one's own leaves one signed in here."""
    whom = form.person
    services.give_password(by=request.user, person=whom, password=form.cleaned_data["password"])
    if whom == request.user:
        update_session_auth_hash(request, whom)
    told = _("%(name)s has a new password and is signed out everywhere else.")
    messages.success(request, told % {"name": whom.name})
    return True


@open_to()
@looks_or_sends
def shop(request: HttpRequest) -> HttpResponse:
    """The shop's ways, which a supervisor may change."""
    if not request.user.has_role("supervisor"):
        if request.method == "POST":
            raise PermissionDenied(_("The shop's ways are changed by a supervisor."))
        return render(request, "people/shop.html", {"ways": ways(request.user)})
    form = ShopWaysForm(
        request.POST if request.method == "POST" else None, instance=Shop.objects.get(pk=request.user.shop_id)
    )
    if form.is_valid():
        try:
            services.change_shop(by=request.user, ways=form.cleaned_data)
        except services.FiguresTyped as refused:
            form.add_error("decimal_mark", str(refused))
        else:
            messages.success(request, _("The shop's ways are changed; what was judged before stays as it was judged."))
            return redirect("people:shop")
    return render(request, "people/shop_form.html", {"form": form})


def ways(person: Person) -> list[tuple[str, str]]:
    """Give the shop's ways as words, each with its name."""
    kept = person.shop
    return [
        (_("units"), kept.get_units_display()),
        (_("decimal mark"), kept.get_decimal_mark_display()),
        (_("paper"), kept.get_paper_display()),
        (_("time zone"), kept.time_zone.replace("_", " ")),
        (_("decision rule"), f"{kept.decision_rule}: {RULES[kept.decision_rule]}"),
        (_("rule for setting zones"), kept.setting_rule),
        (_("usual barometer"), kept.barometer or _("none")),
    ]
