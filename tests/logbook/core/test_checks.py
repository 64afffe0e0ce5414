"""What a start says about the machine it is on."""

import sqlite3

from logbook.core import checks
from logbook.core.database import wal_is_safe


def test_a_mended_sqlite_says_nothing(monkeypatch):
    monkeypatch.setattr(checks, "sqlite_version_info", (3, 51, 3))
    assert checks.sqlite_is_mended() == []


def test_an_unmended_sqlite_is_told_with_what_to_do(monkeypatch):
    monkeypatch.setattr(checks, "sqlite_version_info", (3, 40, 1))
    monkeypatch.setattr(checks, "sqlite_version", "3.40.1")
    (warning,) = checks.sqlite_is_mended()
    assert (warning.id, warning.msg) == (
        "logbook.W001",
        "SQLite 3.40.1 can corrupt a database in its fast journal mode (WAL), so TRUNCATE is used.",
    )


def test_this_installation_runs_on_the_sqlite_that_came_with_the_lock():
    import logbook  # noqa: F401  (puts it in place)

    if sqlite3.__name__ == "pysqlite3":
        assert wal_is_safe(sqlite3.sqlite_version_info)
