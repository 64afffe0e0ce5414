"""How the tests of this room read a page."""

import re
from datetime import timedelta
from html import unescape

from django.urls import reverse

from tests.factories import NOW

LATER = NOW + timedelta(hours=1)


def words(response) -> str:
    """The text of a page, tags off and white space folded."""
    main = response.content.decode().partition("<main")[2]
    return " ".join(unescape(re.sub(r"<[^>]+>", " ", main.partition(">")[2])).split())


def address(name, *args):
    return reverse(f"review:{name}", args=args)
