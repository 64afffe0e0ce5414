"""The program as a shop starts it: a process of its own on a database file, and people with tablets in front of it."""

import os
import re
import subprocess
import sys
from dataclasses import dataclass, field
from datetime import date, timedelta
from pathlib import Path
from urllib.parse import urljoin

from playwright.sync_api import Browser, ConsoleMessage, Locator, Page, expect

ROOT = Path(__file__).parents[2]
TEN_INCH = {"width": 1280, "height": 800}
UPRIGHT = {"width": 800, "height": 1280}
OPENED_AT = re.compile(r"(http://\S+/)first-start/ with the code (\S+)")
PASSWORD, FIRST_PASSWORD = "four leaves and a bar", "given at the door"
MANUAL = "Service manual 7, second edition, page 41"
POINTS = ("starting battery or starting air", "fuel", "ignition or stop lever", "driven machine")
LASH_LIMITS = {  # lower, upper, set from, set to
    "Intake lash [mm]": ("0.25 mm", "0.35 mm", "0.28 mm", "0.32 mm"),
    "Exhaust lash [mm]": ("0.35 mm", "0.45 mm", "0.38 mm", "0.42 mm"),
}


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

    def labelled(self, label: str) -> Locator:
        return self.main.get_by_label(re.compile(rf"^\s*{re.escape(label)}\s*(\(may stay empty\))?\s*$", re.I))

    def type_in(self, label: str, value: str) -> None:
        self.labelled(label).fill(value)

    def pick(self, label: str, choice: str) -> None:
        self.labelled(label).select_option(label=choice)

    def tick(self, *labels: str) -> None:
        for label in labels:
            self.main.locator("input").and_(self.main.get_by_label(label)).check()

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
        page.set_default_timeout(20_000)
        page.on("console", lambda said: self.complaints.append(said.text) if is_fault(said) else None)
        page.on("pageerror", lambda error: self.complaints.append(str(error)))
        return Tablet(page)

    def sign_in(self, name: str, password: str = PASSWORD, **context: object) -> Tablet:
        tablet = self.tablet(**context)
        tablet.page.goto(self.address)
        tablet.fill(Name=name, Password=password)
        tablet.press("Sign in")
        expect(tablet.page.get_by_role("banner").get_by_role("link", name=name)).to_be_visible()
        tablet.name = name
        return tablet

    def first_sign_in(self, name: str, **context: object) -> Tablet:
        """Somebody signs in with the password they were told, and chooses one that only they know."""
        tablet = self.sign_in(name, FIRST_PASSWORD, **context)
        tablet.fill(Password_now=FIRST_PASSWORD, New_password=PASSWORD, New_password_again=PASSWORD)
        tablet.press("Take this password")
        tablet.says("Your new password counts from now on")
        return tablet


def is_fault(said: ConsoleMessage) -> bool:
    """Something went wrong in the browser; a form sent back for mending (422) is an answer."""
    return said.type == "error" and "status of 422" not in said.text


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


def open_shop(shop: Served, supervisor: str, **context: object) -> Tablet:
    """The first start: the page that is open only while nobody exists."""
    tablet = shop.tablet(**context)
    tablet.page.goto(shop.address)
    tablet.headed("Open this logbook")
    tablet.fill(Code=shop.code, Name_of_the_shop="Reed Lake workshop", Your_name=supervisor)
    tablet.fill(Password=PASSWORD, Password_again=PASSWORD)
    tablet.tick("metric", "point", "A4")
    tablet.pick("Time zone", "Europe/Helsinki")
    tablet.press("Open the logbook")
    tablet.name = supervisor
    tablet.says("The logbook of Reed Lake workshop is open.")
    return tablet


def add_person(supervisor: Tablet, name: str, role: str) -> None:
    supervisor.way("People")
    supervisor.follow("Add a person")
    supervisor.fill(Name=name, Password=FIRST_PASSWORD, Password_again=FIRST_PASSWORD)
    supervisor.tick(role)
    supervisor.press("Add this person")
    supervisor.says(name)


def take_in_engine(supervisor: Tablet, name: str, cylinders: int, order: str, hours: str) -> None:
    """An inline engine of the shop, with an hour meter that was on it from new."""
    supervisor.way("Engines")
    supervisor.follow("Take in an engine")
    supervisor.fill(Name=name, Cylinders=str(cylinders), Firing_order=order, Screw_pitch="1 mm")
    for label, choice in (("Layout", "inline"), ("Ignition", "compression"), ("Turns", "clockwise"),
                          ("Lash is set by", "screw and locknut")):  # fmt: skip
        supervisor.pick(label, choice)
    supervisor.press("Take this engine in")
    supervisor.headed(name)
    supervisor.follow("Fit a meter")
    supervisor.pick("Counts", "hours")
    supervisor.fill(It_showed_then=hours, Serial_or_mark="HM-1")
    supervisor.type_in("The engine had run before, in all", hours)
    supervisor.press("Fit this meter")
    supervisor.says("average use can't be told: one meter reading only")


def type_limits(toolroom: Tablet, engine: str) -> None:
    """A limit sheet for valve lash, line by line; it judges nothing until a second person compared it."""
    toolroom.way("Engines")
    toolroom.follow(engine)
    toolroom.follow("All versions")
    toolroom.follow("Begin the first sheet")
    toolroom.press("Begin it")
    for what, (lower, upper, set_from, set_to) in LASH_LIMITS.items():
        toolroom.follow("Type a line")
        toolroom.pick("What is limited", what)
        toolroom.fill(Lower_limit=lower, Upper_limit=upper, Set_from=set_from, Set_to=set_to)
        toolroom.type_in("Source: document, edition, page", MANUAL)
        toolroom.press("Keep this line")
        toolroom.says(f"{lower} to {upper}")


def compare_limits(supervisor: Tablet, engine: str) -> None:
    supervisor.way("Engines")
    supervisor.follow(engine)
    supervisor.says("No limit sheet is in force")
    supervisor.follow("The sheet in preparation")
    supervisor.press("I have compared every line with its source")
    supervisor.says(f"Compared with its source by {supervisor.name}")


def add_gauge(toolroom: Tablet, mark: str) -> None:
    """A feeler gauge with a calibration of three weeks ago."""
    toolroom.way("Gauges")
    toolroom.follow("Add a gauge")
    toolroom.fill(Shop_mark=mark, What_it_is="feeler gauge", Smallest_step="0.01 mm")
    toolroom.pick("Measures", "length")
    toolroom.press("Add this gauge")
    toolroom.follow("Record a calibration")
    toolroom.type_in("Calibrated on", (date.today() - timedelta(days=21)).isoformat())
    toolroom.type_in("Due again on", (date.today() + timedelta(days=344)).isoformat())
    toolroom.fill(Certificate="K-117", Expanded_uncertainty_U="0.006 mm", Coverage_factor_k="2")
    toolroom.press("Record this calibration")
    toolroom.says("In date until")


def keep_by_hours(supervisor: Tablet, engine: str, job: str, every: str, done_at: str) -> None:
    """An interval by running hours, and where the engine stood when the job was last done."""
    supervisor.way("Engines")
    supervisor.follow(engine)
    supervisor.follow("Service intervals")
    supervisor.follow("Add a job")
    supervisor.pick("What it measures", "Valve lash")
    supervisor.type_in("Job", job)
    supervisor.type_in("Every … running hours", every)
    supervisor.press("Keep this job")
    supervisor.follow("Record it as done")
    supervisor.type_in("Engine had run in all [h]", done_at)
    supervisor.press("Record it")
    supervisor.says("Recorded; it is never changed.")


def take_locks(technician: Tablet) -> None:
    """Every lock that the task in hand asks for, one by one under the technician's own name."""
    for point in POINTS:
        technician.press(f"Put my lock on: {point}")
        expect(technician.main.get_by_role("button", name=f"Lift my lock: {point}").first).to_be_visible()


def lift_locks(technician: Tablet) -> None:
    closing_up = technician.main.get_by_role("region", name="Closing up")
    mine = closing_up.get_by_role("button", name=re.compile("^Lift my lock"))
    expect(mine).to_have_count(len(POINTS))
    for left in reversed(range(len(POINTS))):
        mine.first.click()
        expect(mine).to_have_count(left)


def close_up(technician: Tablet) -> None:
    """What a lash pass opened, closed up one by one."""
    for what in ("covers off", "bar on the crank", "feeler leaves out"):
        technician.press(f"Closed up: {what}")
        expect(technician.main.get_by_role("button", name=f"Closed up: {what}")).to_have_count(0)


def key(technician: Tablet, station: str, typed: str) -> None:
    """A reading on the number pad, digit by digit, at the station that the page asks for."""
    technician.headed(station)
    pad = technician.main.get_by_role("group", name="Number pad")
    for sign in typed:
        pad.get_by_role("button", name=sign, exact=True).click()
    keep = pad.get_by_role("button", name="Keep")
    expect(keep).to_contain_text(f"Keep {typed}")
    keep.click()


def sign(person: Tablet, password: str = PASSWORD) -> None:
    person.type_in("Your password, again", password)
    person.main.get_by_role("button", name="Sign this sheet").click()


def sealed_sheet(person: Tablet) -> bytes:
    """The signed job sheet by its plain link."""
    link = person.main.get_by_role("link", name="Sealed sheet (PDF)")
    answer = person.page.request.get(urljoin(person.page.url, link.get_attribute("href")))
    assert answer.ok and answer.headers["content-type"] == "application/pdf"
    return answer.body()


def text_of(pdf: bytes, folder: Path) -> str:
    """What a reader finds on a sheet, each run of blanks as one."""
    kept = folder / "sheet.pdf"
    kept.write_bytes(pdf)
    told = subprocess.run(["pdftotext", "-layout", kept, "-"], capture_output=True, text=True, check=True)
    return " ".join(told.stdout.split())


def open_job(supervisor: Tablet, engine: str, title: str) -> None:
    """A work order for the valve lash of an engine, besides its intervals."""
    supervisor.way("Jobs")
    supervisor.follow("Open a job")
    supervisor.pick("Engine or loose part", engine)
    supervisor.press("Go on")
    supervisor.type_in("Job", title)
    supervisor.tick("Valve lash")
    supervisor.press("Open the work order")
    supervisor.says("The work order is open.", "Not begun yet: it waits for a technician.")


def begin_to_measure(technician: Tablet, job: str, gauge: str) -> None:
    """From the list of jobs to the bench: the locks by name, the task, the gauge and how it is measured."""
    technician.way("Jobs")
    technician.follow(job)
    technician.says("before barring: a hot engine can fire", "Before you work on it, your lock is needed on:")
    take_locks(technician)
    technician.press("Start: Valve lash")
    technician.follow("To the bench")
    technician.headed("Before you begin")
    technician.follow("Pick the gauge")
    technician.pick("Pass", "as found")
    technician.pick("Gauge", gauge)
    technician.pick("Engine state", "cold")
    technician.type_in("Engine hours now", "4210")
    technician.press("Begin to measure")
