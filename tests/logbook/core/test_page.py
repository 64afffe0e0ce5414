"""Page or fragment."""

from copy import deepcopy

import pytest
from django.test import RequestFactory
from django_htmx.middleware import HtmxMiddleware

from logbook.core.page import page_or_fragment

PAGE = (
    "{% load partials %}<h1>Lash</h1>{% partialdef reading inline %}<p>{{ value }} mm</p>{% endpartialdef %}<p>foot</p>"
)
WHOLE, PART = "<h1>Lash</h1><p>0.18 mm</p><p>foot</p>", "<p>0.18 mm</p>"


@pytest.fixture
def asked(settings, tmp_path):
    (tmp_path / "page.html").write_text(PAGE)
    templates = deepcopy(settings.TEMPLATES)
    templates[0]["DIRS"] = [tmp_path]
    settings.TEMPLATES = templates
    answer = HtmxMiddleware(
        lambda request: page_or_fragment(request, "page.html", {"value": "0.18"}, fragment="reading", status=201)
    )
    return lambda **headers: answer(RequestFactory().get("/", headers=headers))


@pytest.mark.parametrize(
    ("headers", "expected"),
    [
        ({}, WHOLE),
        ({"HX-Request": "true"}, PART),
        ({"HX-Request": "true", "HX-History-Restore-Request": "true"}, WHOLE),
        ({"HX-Request": "true", "HX-Boosted": "true"}, WHOLE),
        ({"HX-Request": "false"}, WHOLE),
    ],
)
def test_only_a_part_of_a_shown_page_is_a_fragment(asked, headers, expected):
    response = asked(**headers)
    assert (response.status_code, response.content.decode()) == (201, expected)


def test_every_answer_says_that_it_depends_on_who_asked(asked):
    for response in (asked(), asked(**{"HX-Request": "true"})):
        vary = {name.strip() for name in response["Vary"].split(",")}
        assert vary >= {"HX-Request", "HX-Boosted", "HX-History-Restore-Request"}
