"""The Django project. Importing it first puts a mended SQLite in the place of Python's own, where one is installed."""

import sys

try:
    import pysqlite3
except ImportError:  # no wheel for this machine: core.database then judges Python's own SQLite
    pass
else:
    sys.modules["sqlite3"] = pysqlite3
    sys.modules["sqlite3.dbapi2"] = pysqlite3.dbapi2
