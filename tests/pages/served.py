"""The program as a shop starts it: a process of its own on a database file, and people with tablets in front of it."""

import os
import re
import subprocess
import sys
from dataclasses import dataclass, field
from pathlib import Path

from playwright.sync_api import Browser, Locator, Page, expect

ROOT = Path(__file__).parents[2]
TEN_INCH = {"width": 1280, "height": 800}
OPENED_AT = re.compile(r"(http://\S+/)first-start/ with the code (\S+)")
PASSWORD = "{name}: four leaves and a bar"
MANUAL = "Service manual 7, second edition, page 41"
LASH_LIMITS = {"Intake valve lash [mm]": ("0.25 mm", "0.35 mm"), "Exhaust valve lash [mm]": ("0.35 mm", "0.45 mm")}


@dataclass
class Tablet:
    """One person's tablet: pages are found by role and label, and every look at one waits until it is there."""

    page: Page
    name: str = ""

    @property
    def main(self) -> Locator:
        return self.page.get_by_role("main")

    def press(self, name: str) -> None:
        self.main.get_by_role("button", name=name, exact=True).first.click()

    def follow(self, name: str) -> None:
        self.main.get_by_role("link", name=name, exact=True).first.click()

    def way(self, name: str) -> None:
        self.page.get_by_role("navigation", name="Pages").get_by_role("link", name=name, exact=True).click()

    def fill(self, **typed: str) -> None:
        for label, value in typed.items():
            self.type_in(label.replace("_", " "), value)

    def type_in(self, label: str, value: str) -> None:
        self.main.get_by_label(label, exact=True).fill(value)

    def pick(self, label: str, choice: str) -> None:
        self.main.get_by_label(label, exact=True).select_option(label=choice)

    def tick(self, *labels: str) -> None:
        for label in labels:
            self.main.get_by_label(label, exact=True).check()

    def says(self, *texts: str) -> None:
        for text in texts:
            expect(self.main.get_by_text(text).filter(visible=True).first).to_be_visible()

    def headed(self, text: str) -> None:
        expect(self.page.get_by_role("heading", level=1)).to_have_text(text)


@dataclass
class Served:
    """A shop's logbook at its address, and the tablets that were opened on it."""

    browser: Browser
    address: str
    code: str
    complaints: list[str] = field(default_factory=list)
    contexts: list = field(default_factory=list)

    def tablet(self, **context: object) -> Tablet:
        self.contexts.append(self.browser.new_context(**{"viewport": TEN_INCH, **context}))
        page = self.contexts[-1].new_page()
        page.set_default_timeout(15_000)
        page.on("console", lambda said: self.complaints.append(said.text) if said.type == "error" else None)
        page.on("pageerror", lambda error: self.complaints.append(str(error)))
        return Tablet(page)

    def sign_in(self, name: str, **context: object) -> Tablet:
        """Somebody signs in; the first time they choose a password of their own."""
        tablet = self.tablet(**context)
        tablet.page.goto(self.address)
        tablet.fill(Name=name, Password=PASSWORD.format(name=name))
        tablet.press("Sign in")
        tablet.name = name
        return tablet


def start(home: Path) -> tuple[subprocess.Popen, str, str]:
    """Start the program on an empty folder; gives the process, its address and the code that it printed."""
    environment = {name: value for name, value in os.environ.items() if not name.startswith(("LOGBOOK_", "DATABASE_"))}
    server = subprocess.Popen(
        [sys.executable, "manage.py", "serve", "--port", "0"], cwd=ROOT, text=True,
        env=environment | {"LOGBOOK_HOME": str(home)}, stdout=subprocess.PIPE, stderr=(home / "said").open("w"),
    )  # fmt: skip
    for line in server.stdout:
        if found := OPENED_AT.search(line):
            return server, found.group(1), found.group(2)
    raise AssertionError(f"The server ended before it was open: {(home / 'said').read_text()}")


def open_shop(shop: Served, supervisor: str) -> Tablet:
    """The first start: the page that is open only while nobody exists."""
    tablet = shop.tablet()
    tablet.page.goto(shop.address)
    tablet.headed("Open this logbook")
    tablet.fill(Code=shop.code, Name="Reed Lake workshop", Your_name=supervisor)
    tablet.type_in("Password", PASSWORD.format(name="First"))
    tablet.type_in("Password again", PASSWORD.format(name="First"))
    tablet.tick("metric", "point", "A4")
    tablet.pick("Time zone", "Europe/Helsinki")
    tablet.press("Open the logbook")
    tablet.name = supervisor
    tablet.says("The logbook of Reed Lake workshop is open.")
    return tablet
