"""requirements.lock: every package by its hash, and no address of anybody's package index."""

import re
import tomllib
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
LOCK = (ROOT / "requirements.lock").read_text(encoding="utf-8")
ENTRY = re.compile(r"^(?P<name>[A-Za-z0-9._-]+)==(?P<version>[^ ;\\]+)(?P<rest>.*(?:\n    .*)*)", re.MULTILINE)


def test_it_names_no_address():
    assert re.findall(r"https?:|file:|git\+|--[a-z-]*index|--find-links|@ ", LOCK) == []


def test_every_entry_has_hashes():
    entries = list(ENTRY.finditer(LOCK))
    assert len(entries) > 40
    assert [entry["name"] for entry in entries if "--hash=sha256:" not in entry["rest"]] == []


def test_it_holds_nothing_but_entries_and_hashes():
    assert ENTRY.sub("", LOCK).strip() == ""


def test_one_version_serves_every_python():
    names = [entry["name"] for entry in ENTRY.finditer(LOCK)]
    assert sorted(names) == sorted(set(names))


def test_everything_the_project_asks_for_is_in_it():
    asked = tomllib.loads((ROOT / "pyproject.toml").read_text())
    wanted = asked["project"]["dependencies"] + asked["dependency-groups"]["test"] + asked["dependency-groups"]["check"]
    names = {re.match(r"[A-Za-z0-9-]+", line)[0] for line in wanted}
    assert names - {entry["name"] for entry in ENTRY.finditer(LOCK)} == set()


def test_the_corruptible_sqlite_is_replaced_where_a_wheel_exists():
    entry = next(entry for entry in ENTRY.finditer(LOCK) if entry["name"] == "pysqlite3")
    assert tuple(map(int, entry["version"].split("."))) >= (0, 6, 1)
    assert "platform_machine == 'x86_64' and sys_platform == 'linux'" in entry["rest"].splitlines()[0]
