"""The environment variables that the program reads, and what a production start can't do without."""

import os
import secrets
import tempfile
from collections.abc import Mapping
from pathlib import Path

from django.core.exceptions import ImproperlyConfigured

from .database import database_from

SHORTEST_KEY = 50  # characters
MODES = ("local", "production")


def mode_of(environment: Mapping[str, str]) -> str:
    """Give "local" (nothing said) or "production".

    Raises
    ------
    ImproperlyConfigured
        LOGBOOK_MODE says anything else.
    """
    mode = environment.get("LOGBOOK_MODE") or "local"
    if mode not in MODES:
        raise ImproperlyConfigured(f"LOGBOOK_MODE is “{mode}”; it can be production, or local (the same as not set).")
    return mode


def refuse_unfit_production(environment: Mapping[str, str]) -> None:
    """Raise one sentence with everything that a production start lacks, so that it is mended in one go."""
    if wrong := wrong_for_production(environment):
        raise ImproperlyConfigured("LOGBOOK_MODE=production can't start: " + " ".join(wrong))


def wrong_for_production(environment: Mapping[str, str]) -> list[str]:
    """List what is missing or unfit, a sentence each; empty when the program may start."""
    wrong = []
    if len(environment.get("LOGBOOK_SECRET_KEY", "")) < SHORTEST_KEY:
        wrong.append(f"LOGBOOK_SECRET_KEY must hold at least {SHORTEST_KEY} random characters, kept secret.")
    hosts = hosts_in(environment)
    if not hosts:
        wrong.append("LOGBOOK_HOSTS must name the hosts it is reached by, with commas between.")
    if "*" in hosts:
        wrong.append("LOGBOOK_HOSTS is “*”, which lets any name in; write the names out.")
    if not Path(environment.get("LOGBOOK_HOME", "")).is_absolute():
        wrong.append("LOGBOOK_HOME must be the absolute path of the folder for photos, sheets and keys.")
    try:
        database_from(environment.get("DATABASE_URL", ""))
    except ImproperlyConfigured as error:
        wrong.append(str(error) if environment.get("DATABASE_URL") else "DATABASE_URL must say where the records lie.")
    if environment.get("LOGBOOK_DEBUG") == "1":
        wrong.append("LOGBOOK_DEBUG=1 shows the program's inside to strangers; take it away.")
    if environment.get("LOGBOOK_DEMO") == "1":
        wrong.append(
            "LOGBOOK_DEMO=1, which manage.py run and demo set, opens an invented shop; start with manage.py serve."
        )
    return wrong


def hosts_in(environment: Mapping[str, str]) -> list[str]:
    """Give the host names of LOGBOOK_HOSTS.

    >>> hosts_in({"LOGBOOK_HOSTS": "bench.example, 10.0.0.7"})
    ['bench.example', '10.0.0.7']
    """
    return [host.strip() for host in environment.get("LOGBOOK_HOSTS", "").split(",") if host.strip()]


def key_kept_in(home: Path) -> str:
    """Give the secret key of a local start; made at the first one, readable by its owner only.

    Two starts at the same moment get the same key: a finished file is linked into place, and the first link stands.
    """
    path = home / "secret_key"
    if not path.exists():
        home.mkdir(parents=True, exist_ok=True)
        handle, draft = tempfile.mkstemp(dir=home, prefix="secret_key.")  # made with mode 0600
        with os.fdopen(handle, "w") as file:
            file.write(secrets.token_urlsafe(64))
            file.flush()
            os.fsync(file.fileno())
        try:
            os.link(draft, path)
        except FileExistsError:
            pass
        finally:
            os.unlink(draft)
    return path.read_text().strip()
