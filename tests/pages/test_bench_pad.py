"""The number pad of the bench on a 10-inch tablet: big enough for gloves, reads back what it types, keeps it."""

import pytest

pytestmark = pytest.mark.django_db(transaction=True)
KEY = 75.5  # 20 mm at 96 px an inch; ground.md, "Hands and eyes"


@pytest.fixture
def at_the_bench(client):
    from logbook.bench.services import turn_crank
    from tests.logbook.bench.job import make_bench

    bench = make_bench()
    bench.pass_of()
    turn_crank(bench.task, by=bench.technician, at=bench.now, to="TDC 1 firing")
    client.force_login(bench.technician)
    told = {
        "name": "logbook_session",
        "value": client.cookies["logbook_session"].value,
        "domain": "localhost",
        "path": "/",
    }
    path = f"/jobs/{bench.task.work_order.number}/bench/{bench.task.pk}/"
    return path, {"storage_state": {"cookies": [told], "origins": []}}


def test_a_reading_is_keyed_on_the_pad_read_back_and_kept_and_the_next_station_stands_there(open_page, at_the_bench):
    from logbook.bench.models import Reading

    path, signed_in = at_the_bench
    page = open_page(path, width=1280, height=800, **signed_in)
    pad = page.get_by_role("group", name="Number pad")
    for key in ("0", ".", "1", "9"):
        pad.get_by_role("button", name=key, exact=True).click()
    pad.get_by_role("button", name="Take the last sign away").click()
    pad.get_by_role("button", name="8", exact=True).click()
    keep = pad.get_by_role("button", name="Keep")
    assert keep.inner_text().split("\n")[0] == "Keep 0.18"
    keep.click()
    page.get_by_role("heading", name="Cylinder 1 exhaust").wait_for()
    just_kept = page.get_by_role("status", name="Just kept")
    assert just_kept.get_by_text("beyond: 0.07 mm under the lower limit").is_visible()
    assert [(one.station, one.typed) for one in Reading.objects.all()] == [("1.intake", "0.18")]
    assert page.evaluate("document.activeElement.id") == "typed"


def test_a_gauge_that_types_ends_with_enter_and_only_keeps_its_reading(open_page, at_the_bench):
    from logbook.bench.models import Reading

    path, signed_in = at_the_bench
    page = open_page(path, width=1280, height=800, **signed_in)
    page.keyboard.type("0.30\n")
    page.get_by_role("heading", name="Cylinder 1 exhaust").wait_for()
    page.keyboard.press("Enter")  # a terminator too many keeps nothing and presses nothing
    page.get_by_role("alert").wait_for()
    assert [(one.station, one.typed) for one in Reading.objects.all()] == [("1.intake", "0.30")]


@pytest.mark.parametrize(("width", "height"), [(1280, 800), (800, 1280), (320, 640)])
def test_keys_are_big_enough_for_gloves_and_nothing_is_cut_off(open_page, at_the_bench, width, height):
    path, signed_in = at_the_bench
    page = open_page(path, width=width, height=height, **signed_in)
    assert page.evaluate("document.documentElement.scrollWidth") == width
    small = page.evaluate(
        """least => [...document.querySelectorAll('.key')].map(key => [key.innerText, key.getBoundingClientRect()])
        .filter(([_, box]) => box.width < least || box.height < least).map(([text, _]) => text)""",
        KEY,
    )
    assert small == []


def test_the_bench_keeps_its_light_inks_on_a_dark_tablet(open_page, at_the_bench):
    path, signed_in = at_the_bench
    page = open_page(path, color_scheme="dark", **signed_in)
    assert page.evaluate("getComputedStyle(document.body).backgroundColor") == "rgb(246, 243, 234)"
