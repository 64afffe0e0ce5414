"""The page that finds things."""

from django.http import HttpRequest, HttpResponse
from django.views.decorators.http import require_safe

from logbook.core.page import page_or_fragment
from logbook.people.access import open_to

from .search import search as find


@require_safe
@open_to()
def search(request: HttpRequest) -> HttpResponse:
    """Engines, parts, jobs and gauges that have every word in them."""
    text = request.GET.get("q", "").replace("\0", " ").strip()
    context = {"q": text, "sorts": find(request.user, text)}
    return page_or_fragment(request, "desk/search.html", context, fragment="found")
