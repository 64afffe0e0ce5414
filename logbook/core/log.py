"""What goes to the terminal: a fault with its traceback, a refusal that the page told already in one line."""

import logging

from django.core.exceptions import BadRequest, PermissionDenied, SuspiciousOperation

EXPECTED = (PermissionDenied, SuspiciousOperation, BadRequest)


class RefusalsInOneLine(logging.Filter):
    """Lets every line through, without the traceback where somebody was merely refused."""

    def filter(self, record: logging.LogRecord) -> bool:
        """Take the traceback off a refusal."""
        if record.exc_info and isinstance(record.exc_info[1], EXPECTED):
            record.exc_info = record.exc_text = None
        return True
