"""The example page, open to anybody: an example engine's readings, typed over and judged, kept nowhere."""

import re
from html import unescape

import pytest
from django.urls import reverse

EXAMPLE = reverse("desk:example")


def words(response) -> str:
    """The text of a page, tags off and white space folded."""
    return " ".join(unescape(re.sub(r"<[^>]+>", " ", response.content.decode())).split())


def test_the_example_has_a_title_block_and_one_heading(client):
    page = client.get(EXAMPLE).content.decode()
    assert page.count("<h1>") == 1
    assert '<header class="title-block">' in page


def test_the_example_only_answers_to_looking(client):
    assert client.post(EXAMPLE).status_code == 405


@pytest.mark.parametrize(
    ("kind", "told"),
    [
        ("valve_lash", "beyond : 0.3300 ± 0.0099 mm, limits 0.35 to 0.45"),
        ("valve_lash", "too close to call : 0.2560 ± 0.0099 mm"),
        ("valve_lash", "TDC 1 firing : Cylinder 1 intake, Cylinder 1 exhaust, Cylinder 2 intake, Cylinder 3 exhaust"),
        ("compression", "This limit singles out 2, 3: over 1.5 bar."),
        ("leak_down", "35.0 ± 1.4 %"),
        ("bore", "Two-point diameters can't see odd lobes."),
    ],
)
def test_each_kind_of_the_example_is_judged(client, kind, told):
    assert told in words(client.get(EXAMPLE, {"kind": kind}))


@pytest.mark.parametrize(
    ("kind", "caution"),
    [
        ("leak_down", "The engine can turn under air"),
        ("compression", "Never put oil into a compression-ignition cylinder"),
    ],
)
def test_cautions_stand_before_the_readings(client, kind, caution):
    page = words(client.get(EXAMPLE, {"kind": kind}))

    assert page.index(caution) < page.index("Judge these readings")


def test_what_is_typed_is_judged_and_stays_in_its_field(client):
    page = client.get(EXAMPLE, {"kind": "valve_lash", "judge": "1", "at-1.intake": "0.18 mm"})

    assert 'name="at-1.intake" value="0.18 mm"' in page.content.decode()
    assert "Cylinder 1 intake : loosen 0.12 turn (45°, anticlockwise), then 0.3 mm is expected" in words(page)


def test_what_cannot_be_read_is_told_at_its_field_and_the_rest_is_judged(client):
    page = client.get(EXAMPLE, {"kind": "valve_lash", "judge": "1", "at-1.intake": "0.3O", "at-1.exhaust": "0.40"})

    assert 'name="at-1.intake" value="0.3O"' in page.content.decode()
    assert page.content.decode().count('aria-invalid="true"') == 1
    assert "within : 0.4000 ± 0.0099 mm" in words(page)


def test_a_slip_is_asked_about_before_anything_is_turned(client):
    page = words(client.get(EXAMPLE, {"kind": "valve_lash", "judge": "1", "at-1.intake": "0.012"}))

    assert "Is this a slip? It would be 0.3048 mm if typed in inches." in page
    assert "Confirm the reading first: it would make sense if typed in inches." in page


def test_what_a_stranger_types_comes_back_as_text_not_as_markup(client):
    page = client.get(EXAMPLE, {"kind": "valve_lash", "judge": "1", "at-1.intake": "<script>alert(1)</script>"})

    assert "<script>alert" not in page.content.decode()


@pytest.mark.parametrize("query", [{"kind": "noise"}, {"kind": ""}, {"judge": "1"}, {"kind": "bore", "judge": "1"}])
def test_an_address_that_names_no_kind_or_no_reading_still_answers(client, query):
    assert client.get(EXAMPLE, query).status_code == 200


def test_htmx_gets_the_judgement_alone(client):
    answer = client.get(
        EXAMPLE, {"kind": "valve_lash", "judge": "1", "at-1.intake": "0.18"}, headers={"HX-Request": "true"}
    )

    assert answer.content.decode().lstrip().startswith('<div id="judgement">')
    assert "HX-Request" in answer.headers["Vary"]
