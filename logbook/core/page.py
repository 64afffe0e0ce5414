"""Page or fragment: the one place that decides whether a browser gets a whole page or the part that changed."""

from collections.abc import Mapping

from django.http import HttpRequest, HttpResponse
from django.shortcuts import render
from django.utils.cache import patch_vary_headers

ASKED_BY = ("HX-Request", "HX-Boosted", "HX-History-Restore-Request")


def page_or_fragment(
    request: HttpRequest,
    template: str,
    context: Mapping[str, object] | None = None,
    *,
    fragment: str,
    status: int = 200,
) -> HttpResponse:
    """Answer with the page `template`, or with its partial `fragment` when htmx asked for a part.

    A page restored from the browser's history, or reached by a boosted link, is whole. The answer says (`Vary`) that
    it depends on who asked: otherwise the back button would show a bare fragment.
    """
    name = f"{template}#{fragment}" if wants_fragment(request) else template
    response = render(request, name, context, status=status)
    patch_vary_headers(response, ASKED_BY)
    return response


def wants_fragment(request: HttpRequest) -> bool:
    """Tell whether htmx asked for a part of the page it already shows."""
    return bool(request.htmx) and not request.htmx.boosted and not request.htmx.history_restore_request
