"""What every test stands on: an environment of its own, and static files collected once before the first test."""

import atexit
import os
import shutil
import tempfile

import django
import pytest
from django.core.management import call_command

IS_WORKER = "PYTEST_XDIST_WORKER" in os.environ  # one of several test processes: it inherits what the first one made

if not IS_WORKER:
    for name in [name for name in os.environ if name.startswith("LOGBOOK_") or name == "DATABASE_URL"]:
        del os.environ[name]
    os.environ["LOGBOOK_HOME"] = tempfile.mkdtemp(prefix="logbook-tests-")
    os.environ["DJANGO_SETTINGS_MODULE"] = "logbook.settings"
    atexit.register(shutil.rmtree, os.environ["LOGBOOK_HOME"], ignore_errors=True)


def flush_past_the_triggers() -> None:
    """Let a test's end empty SQLite's append-only tables: triggers step aside for the flush and come back after it."""
    from django.db import connections
    from django.db.backends.sqlite3.base import DatabaseOperations

    plain_flush = DatabaseOperations.sql_flush

    def sql_flush(self, style, tables, **options):
        with connections[self.connection.alias].cursor() as cursor:
            cursor.execute("SELECT name, sql FROM sqlite_master WHERE type = 'trigger'")
            triggers = cursor.fetchall()
        dropped = [f'DROP TRIGGER "{name}"' for name, _ in triggers]
        return [*dropped, *plain_flush(self, style, tables, **options), *(sql for _, sql in triggers)]

    DatabaseOperations.sql_flush = sql_flush


def pytest_configure() -> None:
    flush_past_the_triggers()


def pytest_sessionstart(session: pytest.Session) -> None:
    if not IS_WORKER:
        django.setup()
        call_command("collectstatic", verbosity=0, interactive=False)
