"""Who may open a page: a signed-in person with one of its roles; anybody else is sent to sign in."""

from collections.abc import Callable
from functools import wraps
from urllib.parse import urlsplit

from django.contrib.auth.views import redirect_to_login
from django.core.exceptions import PermissionDenied
from django.http import HttpRequest, HttpResponse
from django.utils.translation import gettext as _
from django_htmx.http import HttpResponseClientRedirect

View = Callable[..., HttpResponse]


def open_to(*roles: str) -> Callable[[View], View]:
    """Let persons with one of the roles in; without roles, everyone who is signed in.

    Someone not signed in is sent to sign in and then back; a person without the role gets a page that names it.
    """

    def guarded(view: View) -> View:
        @wraps(view)
        def checked(request: HttpRequest, *args: object, **kwargs: object) -> HttpResponse:
            if not request.user.is_authenticated:
                return to_sign_in(request)
            if roles and not request.user.has_role(*roles):
                raise PermissionDenied(_("This page is for: %(roles)s.") % {"roles": ", ".join(roles)})
            return view(request, *args, **kwargs)

        checked.open_to = roles
        return checked

    return guarded


def to_sign_in(request: HttpRequest) -> HttpResponse:
    """Send somebody to sign in and then back to the page they looked at; htmx is told to take the whole window there."""
    answer = redirect_to_login(page_looked_at(request))
    return HttpResponseClientRedirect(answer.url) if request.htmx else answer


def page_looked_at(request: HttpRequest) -> str:
    """The page a request was made from: itself, or the one that its form or fragment stood on."""
    if request.htmx:
        return request.htmx.current_url_abs_path or "/"
    if request.method in ("GET", "HEAD"):
        return request.get_full_path()
    came_from = urlsplit(request.headers.get("Referer", ""))
    ours = came_from.netloc == request.get_host()
    return (came_from.path + (f"?{came_from.query}" if came_from.query else "")) if ours and came_from.path else "/"
