"""What holds for every page: readable by all, at any width, without and with script."""

from importlib.resources import files

import pytest

from tests.factories import make_person, make_shop

EXAMPLE = "/example/"
NOBODY_EXISTS, NOBODY, SUPERVISOR, TECHNICIAN = "nobody exists", "nobody", "supervisor", "technician"
PAGES = [  # path, seen by whom
    (EXAMPLE, NOBODY_EXISTS),
    (EXAMPLE + "?kind=compression", NOBODY_EXISTS),
    (EXAMPLE + "?kind=bore", NOBODY_EXISTS),
    (EXAMPLE + "?kind=leak_down&judge=1&at-1=no+number&at-2=1+psi", NOBODY_EXISTS),
    ("/first-start/", NOBODY_EXISTS),
    ("/sign-in/", NOBODY),
    ("/", SUPERVISOR),
    ("/people/", SUPERVISOR),
    ("/people/new/", SUPERVISOR),
    ("/shop/", SUPERVISOR),
    ("/password/", TECHNICIAN),
]
AXE = files("axe_playwright_python").joinpath("axe.min.js").read_text(encoding="utf-8")
FAULTS = """async () => (await axe.run()).violations
    .flatMap(rule => rule.nodes.map(node => rule.id + ': ' + node.html))"""
SMALL_TARGETS = """() => [...document.querySelectorAll('a, button, summary, input:not([type=hidden]), select, textarea')]
    .map(seen => [seen.outerHTML, seen.getBoundingClientRect()])
    .filter(([_, box]) => box.width < 45.3 || box.height < 45.3)
    .map(([html, _]) => html)"""  # 12 mm at 96 px an inch

pytestmark = pytest.mark.django_db(transaction=True)


@pytest.fixture
def seen(open_page):
    """Opens a page the way somebody sees it; who that is, is made first."""
    person = None

    def opened(path, whom, **context):
        nonlocal person
        if whom != NOBODY_EXISTS and person is None:
            person = make_person(make_shop(is_demo=True), "Somebody", SUPERVISOR if whom == NOBODY else whom)
        return open_page(path, person=person if whom in (SUPERVISOR, TECHNICIAN) else None, **context)

    return opened


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize(("path", "whom"), PAGES)
def test_no_fault_of_access_is_found(seen, path, whom, scheme):
    page = seen(path, whom, color_scheme=scheme)
    page.evaluate(AXE)  # by value: the policy lets no script in from elsewhere
    assert page.evaluate(FAULTS) == []


@pytest.mark.parametrize(("path", "whom"), PAGES)
@pytest.mark.parametrize(("width", "height"), [(320, 640), (800, 1280), (1280, 800)])
def test_nothing_is_cut_off_or_too_small_for_a_glove(seen, path, whom, width, height):
    page = seen(path, whom, width=width, height=height)
    assert page.evaluate("document.documentElement.scrollWidth") == width
    assert page.evaluate(SMALL_TARGETS) == []


@pytest.mark.parametrize(("path", "whom"), PAGES)
def test_a_page_says_its_language_and_has_one_heading(seen, path, whom):
    page = seen(path, whom)
    assert page.locator("html").get_attribute("lang") == "en"
    assert page.get_by_role("heading", level=1).count() == 1
    assert page.get_by_role("main").count() == 1


@pytest.mark.parametrize(("path", "whom"), PAGES)
def test_a_page_is_whole_without_script(seen, path, whom):
    plain = seen(path, whom, java_script_enabled=False).get_by_role("main").inner_text()
    assert plain == seen(path, whom).get_by_role("main").inner_text()


def test_the_keyboard_reaches_the_content_first(open_page):
    page = open_page(EXAMPLE)
    page.keyboard.press("Tab")
    skip = page.get_by_role("link", name="Skip to the content")
    assert skip.evaluate("seen => seen === document.activeElement && seen.getBoundingClientRect().top >= 0")
    page.keyboard.press("Enter")
    assert page.evaluate("document.activeElement.id") == "main"


def test_htmx_runs_with_all_that_the_policy_forbids_turned_off(open_page):
    page = open_page(EXAMPLE)
    names = ["includeIndicatorStyles", "allowEval", "selfRequestsOnly", "allowScriptTags", "historyCacheSize"]
    assert page.evaluate("names => names.map(name => htmx.config[name])", names) == [False, False, True, False, 0]
    assert page.evaluate("htmx.version").split(".")[0] == "2"


@pytest.mark.parametrize("sign", "ΩµΔ≤≥′″⌀√⌫Ж")
def test_a_sign_that_the_first_letters_lack_comes_from_the_letters_we_ship(open_page, sign):
    page = open_page(EXAMPLE)
    page.evaluate("sign => { document.querySelector('h1').textContent = sign }", sign)
    page.evaluate("document.fonts.ready")
    assert fonts_of(page, "h1") == {("DejaVu Sans", True)}


def test_words_and_readings_are_set_in_the_letters_we_ship(open_page):
    page = open_page(EXAMPLE)
    page.evaluate("document.querySelector('main p').className = 'reading'")
    page.evaluate("document.querySelector('main p').textContent = '0.18 mm'")
    page.evaluate("document.fonts.ready")
    assert fonts_of(page, "h1") == {("Atkinson Hyperlegible Next", True)}
    ((family, ours),) = fonts_of(page, "main p")
    assert ours and family.startswith("Atkinson Hyperlegible Mono")  # the file's own name goes on with a weight


def test_print_is_dark_on_white_and_leaves_the_controls_away(open_page):
    page = open_page(EXAMPLE, color_scheme="dark")
    page.emulate_media(media="print")
    assert page.evaluate("getComputedStyle(document.body).backgroundColor") == "rgb(255, 255, 255)"
    assert page.get_by_role("link", name="Skip to the content").is_hidden()
    assert page.get_by_text("nobody signed in").is_visible()


def test_print_leaves_the_ways_through_the_program_away_and_keeps_who_it_was(seen):
    page = seen("/people/", SUPERVISOR)
    page.emulate_media(media="print")
    assert page.get_by_role("navigation").is_hidden() and page.get_by_role("button", name="Sign out").is_hidden()
    assert page.get_by_role("banner").get_by_text("Somebody").is_visible()
    assert page.get_by_text("Invented data: this is the demo shop.").is_visible()


def fonts_of(page, selector):
    """(family, is ours) of every font the browser really used for an element's text."""
    session = page.context.new_cdp_session(page)
    session.send("DOM.enable")
    session.send("CSS.enable")
    root = session.send("DOM.getDocument")["root"]["nodeId"]
    node = session.send("DOM.querySelector", {"nodeId": root, "selector": selector})["nodeId"]
    used = session.send("CSS.getPlatformFontsForNode", {"nodeId": node})["fonts"]
    return {(font["familyName"], font["isCustomFont"]) for font in used}
