"""A browser for the pages: the system's chromium, one for each test process, one fresh profile for each test."""

import os
import shutil
from typing import TYPE_CHECKING

import pytest
from django.conf import settings
from django.test import Client
from playwright.sync_api import Browser, Page, sync_playwright
from pytest_django.live_server_helper import LiveServer

if TYPE_CHECKING:  # models can't be loaded yet when this file is
    from logbook.people.models import Person

# The browser's library keeps an event loop in the test's thread, where Django then won't touch the database by itself.
os.environ["DJANGO_ALLOW_ASYNC_UNSAFE"] = "true"

CHROMIUM = next(filter(None, map(shutil.which, ("chromium", "chromium-browser", "google-chrome"))), None)
QUIET = ["--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking", "--disable-sync"]


@pytest.fixture(scope="session")
def browser():
    assert CHROMIUM, "No chromium on the path: make test installs it on Debian; elsewhere install it and try again."
    root = ["--no-sandbox"] if hasattr(os, "geteuid") and os.geteuid() == 0 else []
    with sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=CHROMIUM, args=QUIET + root)
        yield browser
        browser.close()


@pytest.fixture(scope="session")
def live_server(django_db_setup):
    """The program itself answers, static files and all, as in use; pytest-django's own would find them elsewhere."""
    server = LiveServer("localhost", start=False)
    server.thread.static_handler = lambda application: application
    server.start()
    yield server
    server.stop()


@pytest.fixture
def open_page(browser: Browser, live_server):
    """Opens an address as nobody or as somebody; the test fails at its end if the browser had anything to complain about."""
    contexts, complaints = [], []

    def opened(
        path: str = "/", *, person: "Person | None" = None, width: int = 1280, height: int = 800, **context: object
    ) -> Page:
        contexts.append(browser.new_context(viewport={"width": width, "height": height}, **context))
        if person is not None:
            contexts[-1].add_cookies([session_of(person, live_server.url)])
        page = contexts[-1].new_page()
        page.on("console", lambda message: complaints.append(message.text) if message.type == "error" else None)
        page.on("pageerror", lambda error: complaints.append(str(error)))
        page.goto(live_server.url + path)
        return page

    yield opened
    for context in contexts:
        context.close()
    assert complaints == []


def session_of(person: "Person", url: str) -> dict[str, str]:
    """The cookie of a session in which a person is signed in."""
    client = Client()
    client.force_login(person)
    name = settings.SESSION_COOKIE_NAME
    return {"name": name, "value": client.cookies[name].value, "url": url}
