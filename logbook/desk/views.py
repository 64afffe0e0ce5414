"""The pages of the desk."""

from django.http import HttpRequest, HttpResponse
from django.views.decorators.http import require_safe

from logbook.core.page import page_or_fragment

from .example import Judged, example, kinds


@require_safe
def first(request: HttpRequest) -> HttpResponse:
    """The page that a newcomer sees: an example engine's readings, to be typed over and judged."""
    every = kinds()
    kind = every.get(request.GET.get("kind", ""), next(iter(every.values())))
    typed = request.GET if "judge" in request.GET else None
    context = {"judged": Judged(kind, typed), "kinds": every.values(), "kind": kind, "engine": example()["engine"]}
    return page_or_fragment(request, "desk/first.html", context, fragment="judgement")
