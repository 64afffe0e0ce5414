"""Two tablets open the same empty logbook at the same moment, on a served process and a file: one wins."""

import os
import re
import sqlite3
import subprocess
import sys
from concurrent.futures import ThreadPoolExecutor
from http.cookiejar import CookieJar
from pathlib import Path
from threading import Barrier, Timer
from urllib.error import HTTPError
from urllib.parse import urlencode
from urllib.request import HTTPCookieProcessor, build_opener

import pytest

ROOT = Path(__file__).resolve().parents[3]
TABLETS = 4


@pytest.fixture
def served(tmp_path):
    """Address of an empty logbook, and its code."""
    server = subprocess.Popen(
        [sys.executable, "manage.py", "serve", "--port", "0"],
        cwd=ROOT,
        env=os.environ | {"LOGBOOK_HOME": str(tmp_path)},
        stdout=subprocess.PIPE,
        stderr=subprocess.DEVNULL,
        text=True,
    )
    silence = Timer(120, server.kill)  # a server that never says its code must not hold every other test up
    silence.start()
    try:
        address = re.search(r"http://\S+/", server.stdout.readline())[0]
        yield address, re.search(r"with the code (\S+)", server.stdout.readline())[1]
    finally:
        silence.cancel()
        server.terminate()
        server.wait()
        server.stdout.close()


def test_of_several_tablets_at_one_moment_one_opens_the_logbook(served, tmp_path):
    address, code = served
    together = Barrier(TABLETS)

    def tablet(number):
        browser = build_opener(HTTPCookieProcessor(CookieJar()))
        page = browser.open(address + "first-start/").read().decode()
        told = {
            "csrfmiddlewaretoken": re.search(r'name="csrfmiddlewaretoken" value="(\w+)"', page)[1], "code": code,
            "name": f"Shop {number}", "units": "metric", "decimal_mark": ".", "paper": "A4", "time_zone": "UTC",
            "decision_rule": "guarded", "person": f"Supervisor {number}", "password": "a feeler of 0.18",
            "again": "a feeler of 0.18",
        }  # fmt: skip
        together.wait()
        try:
            with browser.open(address + "first-start/", urlencode(told).encode()) as answer:
                return number, answer.status, answer.read().decode()
        except HTTPError as refused:
            return number, refused.code, refused.read().decode()

    with ThreadPoolExecutor(TABLETS) as tablets:
        answers = list(tablets.map(tablet, range(TABLETS)))

    (won,) = (number for number, status, _page in answers if status == 200)
    others = [page for _number, status, page in answers if status == 404]
    assert len(others) == TABLETS - 1
    assert all("Somebody opened it before, perhaps a moment ago from another tablet." in page for page in others)
    with sqlite3.connect(tmp_path / "logbook.sqlite3") as kept:
        assert kept.execute("SELECT name FROM people_shop").fetchall() == [(f"Shop {won}",)]
        assert kept.execute("SELECT name FROM people_person").fetchall() == [(f"Supervisor {won}",)]
