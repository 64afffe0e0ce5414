"""What goes to the terminal: a refusal in one line, a fault with its traceback."""

import logging
import sys

import pytest
from django.core.exceptions import PermissionDenied, SuspiciousOperation
from django.utils.log import configure_logging

from logbook.core.log import RefusalsInOneLine


def logged(error: Exception) -> str:
    """What the terminal's own formatter and filter make of a line about an error."""
    try:
        raise error
    except type(error):
        record = logging.LogRecord(
            "django.request", logging.WARNING, "", 0, "refused: %s", ("/people/",), sys.exc_info()
        )
    assert RefusalsInOneLine().filter(record)
    return logging.Formatter("{message}", style="{").format(record)


@pytest.mark.parametrize("error", [PermissionDenied("for supervisors"), SuspiciousOperation("a host that is not ours")])
def test_a_refusal_is_one_line(error):
    assert logged(error) == "refused: /people/"


def test_a_fault_keeps_its_traceback():
    assert logged(ZeroDivisionError("by nothing")).endswith("ZeroDivisionError: by nothing")


def test_the_settings_put_the_filter_before_the_terminal(settings):
    configure_logging("logging.config.dictConfig", settings.LOGGING)
    (terminal,) = logging.getLogger("django").handlers
    assert [type(one) for one in terminal.filters] == [RefusalsInOneLine]
