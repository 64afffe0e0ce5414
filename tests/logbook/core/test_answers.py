"""What every answer carries: the policy, its status, and a page in sentences when something went wrong."""

import re
from contextlib import closing
from html import unescape

import pytest
from django.test import Client
from django.urls import path

from logbook.core import errors
from logbook.urls import urlpatterns as ours

POLICY = (
    "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self' data:; font-src 'self'; "
    "connect-src 'self'; manifest-src 'self'; worker-src 'self'; form-action 'self'; frame-ancestors 'none'; "
    "base-uri 'none'"
)


def breaks(request):
    raise RuntimeError("a fault of our own")


def refuses(request):
    from django.core.exceptions import PermissionDenied

    raise PermissionDenied


def refuses_and_says_why(request):
    from django.core.exceptions import PermissionDenied

    raise PermissionDenied("This page is for: toolroom.")


def takes_a_form(request):
    from django.http import HttpResponse

    return HttpResponse("taken")


urlpatterns = [
    *ours,
    path("breaks", breaks),
    path("refuses", refuses),
    path("refuses-and-says-why", refuses_and_says_why),
    path("form", takes_a_form),
]
handler400, handler403, handler404, handler500 = (
    errors.not_understood, errors.not_allowed, errors.not_found, errors.gone_wrong,
)  # fmt: skip


def text_of(response):
    """The words of the page's main part, tags and line breaks taken out."""
    main = re.search(r"<main.*</main>", response.content.decode(), re.DOTALL)[0]
    return " ".join(unescape(re.sub(r"<[^>]+>", " ", main)).split())


@pytest.fixture
def visitor(settings):
    settings.ROOT_URLCONF = __name__
    return Client(raise_request_exception=False, enforce_csrf_checks=True)


@pytest.mark.parametrize("address", ["/example/", "/nothing-here", "/refuses", "/breaks"])
def test_every_answer_carries_the_policy(visitor, address):
    response = visitor.get(address)
    assert response["Content-Security-Policy"] == POLICY
    assert response["X-Frame-Options"] == "DENY" or response.status_code == 500
    assert response["X-Content-Type-Options"] == "nosniff"


@pytest.mark.django_db
def test_a_static_file_carries_the_policy_and_may_be_kept(visitor):
    href = re.search(r'href="(/static/core/page\.[0-9a-f]+\.css)"', visitor.get("/example/").content.decode())[1]
    with closing(visitor.get(href)) as response:
        assert response["Content-Security-Policy"] == POLICY
        assert response["Cache-Control"] == "max-age=315360000, public, immutable"


@pytest.mark.parametrize(
    ("address", "status", "words"),
    [
        (
            "/nothing-here",
            404,
            "There is no such page Nothing is kept at the address /nothing-here. "
            "Look whether it was typed whole, or start from the first page: its name is at the top.",
        ),
        (
            "/refuses",
            403,
            "You may not do that This page or act belongs to a part that you have no say in, or you are signed in "
            "as somebody else. Nothing was stored. Look who is signed in, at the top of the page; else ask the "
            "supervisor.",
        ),
        (
            "/refuses-and-says-why",
            403,
            "You may not do that This page is for: toolroom. Nothing was stored. Look who is signed in, at the top of "
            "the page; else ask the supervisor.",
        ),
        (
            "/breaks",
            500,
            "Something in the program went wrong What was stored before is safe. What you just sent may not be stored. "
            "Go back and look whether it is there before you send it again. Tell who looks after this program.",
        ),
    ],
)
def test_what_went_wrong_is_told_in_sentences(visitor, address, status, words):
    response = visitor.get(address)
    assert (response.status_code, text_of(response)) == (status, words)


def test_an_address_is_shown_as_text(visitor):
    assert "&lt;b&gt;" in visitor.get("/<b>").content.decode()


def test_a_form_without_its_token_is_refused_in_sentences(visitor):
    response = visitor.post("/form", {"reading": "0.18"})
    assert (response.status_code, text_of(response)) == (
        403,
        "That form was too old The page was opened before the last sign-in, or the browser keeps no cookies: who sent "
        "it can't be told. Nothing was stored. Go back, load the page anew, and send it again.",
    )


def test_a_host_that_is_not_ours_is_refused_in_sentences(visitor):
    response = visitor.get("/", headers={"host": "stranger.example"})
    assert (response.status_code, response["Content-Security-Policy"]) == (400, POLICY)
    assert text_of(response).startswith("That request couldn't be understood What the browser sent")
