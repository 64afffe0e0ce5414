"""Deciding and signing in a browser: nothing cut off, and a gauge's Enter never signs."""

from importlib.resources import files

import pytest

from tests.factories import PASSWORD

AXE = files("axe_playwright_python").joinpath("axe.min.js").read_text(encoding="utf-8")
FAULTS = """async () => (await axe.run()).violations
    .flatMap(rule => rule.nodes.map(node => rule.id + ': ' + node.html))"""

pytestmark = pytest.mark.django_db(transaction=True)


@pytest.fixture
def bench(transactional_db):
    from tests.logbook.review.jobs import Bench

    return Bench()


@pytest.fixture
def signed_in(open_page, client, bench, live_server):
    """Opens an address as a person, by a session made here."""

    def opened(person, path, **more):
        client.force_login(person)
        page = open_page("/sign-in/", **more)
        session = client.cookies["logbook_session"].value
        page.context.add_cookies([{"name": "logbook_session", "value": session, "url": live_server.url}])
        page.goto(live_server.url + path)
        return page

    return opened


@pytest.mark.parametrize(("width", "height"), [(320, 640), (800, 1280), (1280, 800)])
def test_deciding_and_signing_have_no_fault_of_access_and_fit(signed_in, bench, width, height):
    number = bench.beyond(left="0.41 mm").measurement.task.work_order.number
    for path in (
        "/to-decide/",
        f"/jobs/{number}/decide/",
        f"/jobs/{number}/sign/",
        f"/jobs/{number}/running-undecided/",
    ):
        page = signed_in(bench.decides, path, width=width, height=height)
        assert page.evaluate("document.documentElement.scrollWidth") == width, path
        page.evaluate(AXE)
        assert page.evaluate(FAULTS) == [], path
        assert page.evaluate("document.activeElement === document.body"), path


def test_the_enter_of_a_gauge_that_types_never_signs(signed_in, bench):
    from logbook.review.models import Signature

    bench.measures.set_password(PASSWORD)
    bench.measures.save()
    order = bench.beyond().measurement.task.work_order
    page = signed_in(bench.measures, f"/jobs/{order.number}/sign/")
    page.get_by_label("Your password, again").fill(PASSWORD[:-1])
    page.get_by_label("Your password, again").press_sequentially(PASSWORD[-1])
    assert PASSWORD[-1].isdigit()
    page.keyboard.press("Enter")
    page.wait_for_timeout(700)
    assert not Signature.objects.exists() and page.get_by_role("heading", name="Sign", exact=True).is_visible()
    page.keyboard.press("Enter")
    page.get_by_text("Signed as measured by Technician 3.").wait_for()
    assert Signature.objects.get().person == bench.measures
