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


def pytest_sessionstart(session: pytest.Session) -> None:
    if not IS_WORKER:
        django.setup()
        call_command("collectstatic", verbosity=0, interactive=False)
