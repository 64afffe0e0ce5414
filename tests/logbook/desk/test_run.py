"""`manage.py run`: a door on this machine only."""

import os
import re
import socket
import subprocess
import sys
import urllib.request
from pathlib import Path

import pytest
from django.core.management import CommandError

from logbook.desk.management.commands.serve import open_door
from logbook.people import start_code

ROOT = Path(__file__).resolve().parents[3]


@pytest.fixture
def taken():
    with socket.create_server(("127.0.0.1", 0)) as door:
        yield door.getsockname()[1]


def test_a_taken_port_is_passed_over(taken):
    with open_door([taken, 0]) as door:
        host, port = door.getsockname()
    assert host == "127.0.0.1" and port != taken


def test_no_free_port_gets_a_sentence(taken):
    with pytest.raises(CommandError) as refused:
        open_door([taken])
    assert str(refused.value) == (
        f"No free port among {taken} to {taken}. Stop what runs there, or name another with --port."
    )


def test_a_port_that_is_none_gets_a_sentence():
    with pytest.raises(CommandError, match=r"^Port 70000 can't be opened: .*\. Name another with --port\.$"):
        open_door([70_000])


def test_run_prints_an_address_that_answers_and_the_code_of_an_empty_logbook(tmp_path):
    environment = os.environ | {"LOGBOOK_HOME": str(tmp_path)}
    server = subprocess.Popen(
        [sys.executable, "manage.py", "serve", "--port", "0"],
        cwd=ROOT,
        env=environment,
        stdout=subprocess.PIPE,
        text=True,
    )
    try:
        address = re.search(r"http://127\.0\.0\.1:\d+/", server.stdout.readline())[0]
        told = server.stdout.readline()
        code = re.fullmatch(rf".* Open it at {address}first-start/ with the code (\S+)\n", told)[1]
        assert start_code.is_right(tmp_path, code)
        with urllib.request.urlopen(address) as answer:
            page = answer.read().decode()
        stylesheet = re.search(r"/static/core/page\.[0-9a-f]+\.css", page)[0]
        with urllib.request.urlopen(address + stylesheet[1:]) as answer:
            assert answer.headers["Content-Type"] == 'text/css; charset="utf-8"'
    finally:
        server.terminate()
        server.wait()
        server.stdout.close()


def test_a_production_start_believes_its_proxy_that_the_browser_speaks_tls(tmp_path):
    environment = os.environ | {
        "LOGBOOK_HOME": str(tmp_path), "LOGBOOK_MODE": "production", "LOGBOOK_SECRET_KEY": "none" * 20,
        "LOGBOOK_HOSTS": "bench.example", "DATABASE_URL": f"sqlite:///{tmp_path}/book.sqlite3",
    }  # fmt: skip
    server = subprocess.Popen([sys.executable, "manage.py", "serve", "--port", "0"], cwd=ROOT, env=environment,
                              stdout=subprocess.PIPE, text=True)  # fmt: skip
    try:
        address = re.search(r"http://127\.0\.0\.1:\d+/", server.stdout.readline())[0]
        told = {"Host": "bench.example", "X-Forwarded-Proto": "https"}
        with urllib.request.urlopen(urllib.request.Request(f"{address}first-start/", headers=told)) as answer:
            assert (answer.status, answer.url) == (200, f"{address}first-start/")
            assert "Secure" in answer.headers["Set-Cookie"]
    finally:
        server.terminate()
        server.wait()
        server.stdout.close()
