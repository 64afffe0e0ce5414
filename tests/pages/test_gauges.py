"""The gauges' pages in a browser: readable by all, at any width, nothing too small for a glove."""

from importlib.resources import files

import pytest

from tests.factories import make_gauge, make_person, make_shop

AXE = files("axe_playwright_python").joinpath("axe.min.js").read_text(encoding="utf-8")
FAULTS = """async () => (await axe.run()).violations
    .flatMap(rule => rule.nodes.map(node => rule.id + ': ' + node.html))"""
SMALL_TARGETS = """() => [...document.querySelectorAll('a, button, summary, input:not([type=hidden]), select, textarea')]
    .map(seen => [seen.outerHTML, seen.getBoundingClientRect()])
    .filter(([_, box]) => box.width < 45.3 || box.height < 45.3)
    .map(([html, _]) => html)"""  # 12 mm at 96 px an inch

pytestmark = pytest.mark.django_db(transaction=True)


@pytest.mark.parametrize("address", ["/gauges/", "/gauges/{pk}/", "/gauges/new/", "/gauges/{pk}/calibrations/new/"])
def test_a_page_of_the_gauges_is_fit_for_everybody(open_page, client, address):
    keeper = make_person(make_shop(), "Vera Alm", "toolroom")
    gauge = make_gauge(keeper.shop, keeper)
    client.force_login(keeper)
    name, kept = next(iter(client.cookies.items()))
    cookie = {"name": name, "value": kept.value, "domain": "localhost", "path": "/"}
    page = open_page(address.format(pk=gauge.pk), width=320, height=640, storage_state={"cookies": [cookie]})
    assert page.get_by_role("heading", level=1).count() == 1
    assert page.evaluate("document.documentElement.scrollWidth") == 320
    assert page.evaluate(SMALL_TARGETS) == []
    page.evaluate(AXE)
    assert page.evaluate(FAULTS) == []
