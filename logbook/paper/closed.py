"""The closed door: WeasyPrint gets this program's own letters and style sheets, and nothing else.

Imported only where a sheet is drawn, for it brings WeasyPrint with it. No address leads to the file system or the
network: what a template asks for is looked up by its whole name in a table, and whatever isn't there is refused.
"""

from collections.abc import Mapping
from functools import cache
from pathlib import Path

from django.conf import settings
from weasyprint.urls import URLFetcher, URLFetcherResponse

HERE = "https://sheet.invalid/"  # RFC 2606 keeps .invalid for names that lead nowhere
TYPES = {".css": "text/css", ".woff2": "font/woff2"}


@cache
def own_files() -> Mapping[str, Path]:
    """Address → file of everything that a sheet may be drawn with."""
    static = Path(settings.BASE) / "logbook" / "core" / "static"
    templates = Path(settings.BASE) / "templates" / "paper"
    found = {f"{HERE}tokens.css": static / "core" / "tokens.css"}
    found |= {HERE + path.name: path for path in templates.glob("*.css")}
    return found | {f"{HERE}letters/{path.name}": path for path in (static / "vendor").glob("*/*.woff2")}


class ClosedFetcher(URLFetcher):
    """Hands out our own files by their whole address, and data that stands in the sheet itself."""

    def __init__(self) -> None:
        super().__init__(allowed_protocols=("data",), allow_redirects=False)

    def fetch(self, url: str, headers: Mapping[str, str] | None = None) -> URLFetcherResponse:
        """Answer for one of our own files or a data: address.

        Raises
        ------
        ValueError
            Any other address; WeasyPrint then draws the sheet without it.
        """
        path = own_files().get(url)
        if path is None:
            return super().fetch(url, headers)
        return URLFetcherResponse(url, path.read_bytes(), {"Content-Type": TYPES[path.suffix]})
