"""What holds for every page that is open to anybody: readable by all, at any width, without and with script."""

from importlib.resources import files

import pytest

PAGES = ["/", "/?kind=compression", "/?kind=bore", "/?kind=leak_down&judge=1&at-1=no+number&at-2=1+psi"]
AXE = files("axe_playwright_python").joinpath("axe.min.js").read_text(encoding="utf-8")
FAULTS = """async () => (await axe.run()).violations
    .flatMap(rule => rule.nodes.map(node => rule.id + ': ' + node.html))"""
SMALL_TARGETS = """() => [...document.querySelectorAll('a, button, summary, input:not([type=hidden]), select, textarea')]
    .map(seen => [seen.outerHTML, seen.getBoundingClientRect()])
    .filter(([_, box]) => box.width < 45.3 || box.height < 45.3)
    .map(([html, _]) => html)"""  # 12 mm at 96 px an inch

pytestmark = pytest.mark.django_db(transaction=True)


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("path", PAGES)
def test_no_fault_of_access_is_found(open_page, path, scheme):
    page = open_page(path, color_scheme=scheme)
    page.evaluate(AXE)  # by value: the policy lets no script in from elsewhere
    assert page.evaluate(FAULTS) == []


@pytest.mark.parametrize("path", PAGES)
@pytest.mark.parametrize(("width", "height"), [(320, 640), (800, 1280), (1280, 800)])
def test_nothing_is_cut_off_or_too_small_for_a_glove(open_page, path, width, height):
    page = open_page(path, width=width, height=height)
    assert page.evaluate("document.documentElement.scrollWidth") == width
    assert page.evaluate(SMALL_TARGETS) == []


@pytest.mark.parametrize("path", PAGES)
def test_a_page_says_its_language_and_has_one_heading(open_page, path):
    page = open_page(path)
    assert page.locator("html").get_attribute("lang") == "en"
    assert page.get_by_role("heading", level=1).count() == 1
    assert page.get_by_role("main").count() == 1


@pytest.mark.parametrize("path", PAGES)
def test_a_page_is_whole_without_script(open_page, path):
    plain = open_page(path, java_script_enabled=False).get_by_role("main").inner_text()
    assert plain == open_page(path).get_by_role("main").inner_text()


def test_the_keyboard_reaches_the_content_first(open_page):
    page = open_page("/")
    page.keyboard.press("Tab")
    skip = page.get_by_role("link", name="Skip to the content")
    assert skip.evaluate("seen => seen === document.activeElement && seen.getBoundingClientRect().top >= 0")
    page.keyboard.press("Enter")
    assert page.evaluate("document.activeElement.id") == "main"


def test_htmx_runs_with_all_that_the_policy_forbids_turned_off(open_page):
    page = open_page("/")
    names = ["includeIndicatorStyles", "allowEval", "selfRequestsOnly", "allowScriptTags", "historyCacheSize"]
    assert page.evaluate("names => names.map(name => htmx.config[name])", names) == [False, False, True, False, 0]
    assert page.evaluate("htmx.version").split(".")[0] == "2"


@pytest.mark.parametrize("sign", "ΩµΔ≤≥′″⌀√⌫Ж")
def test_a_sign_that_the_first_letters_lack_comes_from_the_letters_we_ship(open_page, sign):
    page = open_page("/")
    page.evaluate("sign => { document.querySelector('h1').textContent = sign }", sign)
    page.evaluate("document.fonts.ready")
    assert fonts_of(page, "h1") == {("DejaVu Sans", True)}


def test_words_and_readings_are_set_in_the_letters_we_ship(open_page):
    page = open_page("/")
    page.evaluate("document.querySelector('main p').className = 'reading'")
    page.evaluate("document.querySelector('main p').textContent = '0.18 mm'")
    page.evaluate("document.fonts.ready")
    assert fonts_of(page, "h1") == {("Atkinson Hyperlegible Next", True)}
    ((family, ours),) = fonts_of(page, "main p")
    assert ours and family.startswith("Atkinson Hyperlegible Mono")  # the file's own name goes on with a weight


def test_print_is_dark_on_white_and_leaves_the_controls_away(open_page):
    page = open_page("/", color_scheme="dark")
    page.emulate_media(media="print")
    assert page.evaluate("getComputedStyle(document.body).backgroundColor") == "rgb(255, 255, 255)"
    assert page.get_by_role("link", name="Skip to the content").is_hidden()
    assert page.get_by_text("nobody signed in").is_visible()


def fonts_of(page, selector):
    """(family, is ours) of every font the browser really used for an element's text."""
    session = page.context.new_cdp_session(page)
    session.send("DOM.enable")
    session.send("CSS.enable")
    root = session.send("DOM.getDocument")["root"]["nodeId"]
    node = session.send("DOM.querySelector", {"nodeId": root, "selector": selector})["nodeId"]
    used = session.send("CSS.getPlatformFontsForNode", {"nodeId": node})["fonts"]
    return {(font["familyName"], font["isCustomFont"]) for font in used}
