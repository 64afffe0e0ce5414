"""Check values from published sources, one file a topic; the kinds carry their own as PUBLISHED.

`every_value()` walks them all, so that an installation can be checked against print.
"""

from collections.abc import Iterator
from importlib import import_module
from pkgutil import iter_modules

from measurements.check_value import CheckValue
from measurements.kind import find_kinds


def every_value() -> Iterator[tuple[str, CheckValue]]:
    """Every check value with the room it checks, topics first, then kinds."""
    for entry in iter_modules(__path__):
        for value in import_module(f"{__name__}.{entry.name}").PUBLISHED:
            yield entry.name, value
    for name, kind in find_kinds().items():
        for value in kind.published:
            yield name, value
