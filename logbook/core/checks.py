"""What the program says at its start when the machine lacks something it can run without."""

from sqlite3 import sqlite_version, sqlite_version_info

from django.core.checks import CheckMessage, Warning, register
from django.db import connections

from .database import wal_is_safe


@register
def sqlite_is_mended(**_: object) -> list[CheckMessage]:
    """Warn when an SQLite database is kept by a version whose write-ahead log can't be trusted."""
    kept_by_sqlite = any(connection.vendor == "sqlite" for connection in connections.all())
    if not kept_by_sqlite or wal_is_safe(sqlite_version_info):
        return []
    return [
        Warning(
            f"SQLite {sqlite_version} can corrupt a database in its fast journal mode (WAL), so TRUNCATE is used.",
            hint="Nothing is at risk; writing takes longer. SQLite 3.51.3, 3.50.7 or 3.44.6 and later are mended.",
            id="logbook.W001",
        )
    ]
