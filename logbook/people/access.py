"""Who may open a page: a signed-in person with one of its roles; anybody else is sent to sign in."""

from collections.abc import Callable
from functools import wraps

from django.contrib.auth.views import redirect_to_login
from django.core.exceptions import PermissionDenied
from django.http import HttpRequest, HttpResponse
from django.utils.translation import gettext as _

View = Callable[..., HttpResponse]


def open_to(*roles: str) -> Callable[[View], View]:
    """Let persons with one of the roles in; without roles, everyone who is signed in.

    Someone not signed in is sent to sign in and then back; a person without the role gets a page that names it.
    """

    def guarded(view: View) -> View:
        @wraps(view)
        def checked(request: HttpRequest, *args: object, **kwargs: object) -> HttpResponse:
            if not request.user.is_authenticated:
                return redirect_to_login(request.get_full_path())
            if roles and not request.user.has_role(*roles):
                raise PermissionDenied(_("This page is for: %(roles)s.") % {"roles": ", ".join(roles)})
            return view(request, *args, **kwargs)

        checked.open_to = roles
        return checked

    return guarded
