"""The pages of the desk: home, and the example that anybody may try."""

from django.http import HttpRequest, HttpResponse
from django.shortcuts import redirect, render
from django.utils import timezone
from django.views.decorators.cache import never_cache
from django.views.decorators.http import require_safe

from logbook.core.page import page_or_fragment
from logbook.people.models import Person

from .example import Judged, kinds
from .example import example as example_document
from .home import steps_for


@never_cache
@require_safe
def home(request: HttpRequest) -> HttpResponse:
    """What the person who comes in does next; a logbook that nobody opened yet is opened first."""
    if not request.user.is_authenticated:
        return redirect("people:sign_in" if Person.objects.exists() else "people:first_start")
    first, *others = steps_for(request.user, timezone.now())
    return render(request, "desk/home.html", {"first": first, "others": others})


@require_safe
def example(request: HttpRequest) -> HttpResponse:
    """The page that a newcomer may try: an example engine's readings, to be typed over and judged."""
    every = kinds()
    kind = every.get(request.GET.get("kind", ""), next(iter(every.values())))
    typed = request.GET if "judge" in request.GET else None
    engine = example_document()["engine"]
    context = {"judged": Judged(kind, typed), "kinds": every.values(), "kind": kind, "engine": engine}
    return page_or_fragment(request, "desk/example.html", context, fragment="judgement")
