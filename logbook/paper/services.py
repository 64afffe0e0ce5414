"""Sheets drawn and sealed: plain data in, a PDF out, and one copy kept that nothing writes over.

What a sheet holds is in `shapes`: a `JobSheet`, `WorkOrderSheet` or `BlankSheet`. WeasyPrint, and with it Pango, is
loaded when the first sheet is drawn, not at the start.
"""

import hashlib
import os
import re
import tempfile
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import datetime
from functools import cache
from pathlib import Path

from django.conf import settings
from django.template.loader import render_to_string
from django.utils import translation
from django.utils.translation import gettext as _

from logbook.core.refusal import Refused

from .fingerprints import fingerprint
from .sheets import as_printed

TEMPLATES = ("job_sheet", "work_order", "blank_sheet")
PAPERS = ("A4", "Letter")


class PaperRefused(Refused):
    """A sheet that can't be drawn or sealed."""


@dataclass(frozen=True)
class Sealed:
    """A sealed sheet: where it lies under the sheets' folder, SHA-256 of its bytes, and which version drew it."""

    file: str
    sha256: str
    version: str


def draw(
    template: str, sheet: Mapping[str, object], *, paper: str, title: str, language: str, at: datetime
) -> bytes:  # fmt: skip
    """Draw a sheet as a PDF; the same arguments give the same bytes.

    Parameters
    ----------
    template : "job_sheet", "work_order" or "blank_sheet"
    sheet : JobSheet, WorkOrderSheet or BlankSheet
        Plain data, see `shapes`; its fingerprint is printed in the foot of every page.
    paper : "A4" or "Letter"
    title : str
        What a reader of PDFs shows as the document's name.
    language : str
        Of the sheet's texts, such as "en".
    at : datetime
        When it is drawn, in the shop's time zone; printed in the foot.

    Raises
    ------
    PaperRefused
        The libraries that draw are missing on this machine.
    """
    if template not in TEMPLATES or paper not in PAPERS:
        raise ValueError(f"no sheet {template!r} on {paper!r}; there are {TEMPLATES} on {PAPERS}")
    page = page_of(template, sheet, title=title, language=language, at=at)
    if missing := missing_libraries():
        raise PaperRefused(missing)
    from .drawing import pdf_of

    return pdf_of(page, paper=paper, identifier=bytes.fromhex(fingerprint(sheet))[:16])


def page_of(template: str, sheet: Mapping[str, object], *, title: str, language: str, at: datetime) -> str:
    """The HTML that a sheet is drawn from."""
    told = {"sheet": as_printed(sheet), "fingerprint": fingerprint(sheet), "title": title, "language": language,
            "version": version(), "drawn_at": at.isoformat(timespec="seconds"),
            "drawn": at.strftime("%Y-%m-%d %H:%M %Z")}  # fmt: skip
    with translation.override(language):
        return render_to_string(f"paper/{template}.html", told)


def missing_libraries() -> str:
    """Say what is missing to draw a sheet, and what to do; empty when nothing is."""
    try:
        import weasyprint  # noqa: F401
    except (ImportError, OSError):
        return _(
            "Sheets can't be drawn on this machine: WeasyPrint, or the library Pango that it stands on, can't be loaded. "
            "Everything else works, and nothing is lost. Ask who looks after this program to install Pango "
            "(on Debian: libpango-1.0-0, libpangoft2-1.0-0, libharfbuzz-subset0)."
        )
    return ""


def seal(
    template: str, sheet: Mapping[str, object], *, name: str, paper: str, title: str, language: str, at: datetime
) -> Sealed:  # fmt: skip
    """Draw a sheet and keep it as `<year>/<name>-<fingerprint>.pdf` under the sheets' folder, for its owner's eyes only.

    A sheet that lies there already under this name has this fingerprint, so it says the same: it stands as it was
    sealed first, and is never written over.

    Raises
    ------
    PaperRefused
        As `draw`.
    ValueError
        The name has anything but letters a to z, digits and hyphens in it.
    """
    if not re.fullmatch(r"[a-z0-9]+(?:-[a-z0-9]+)*", name):
        raise ValueError(f"{name!r} is no name for a sealed sheet: a to z, digits and hyphens")
    file = f"{at.year:04d}/{name}-{fingerprint(sheet)}.pdf"
    path = sheets_folder() / file
    if not path.exists():
        _write_once(path, draw(template, sheet, paper=paper, title=title, language=language, at=at))
    return Sealed(file, hashlib.sha256(path.read_bytes()).hexdigest(), version())


def sheets_folder() -> Path:
    """Where sealed sheets lie."""
    return Path(settings.HOME) / "sheets"


@cache
def version() -> str:
    """The program's version, as it is printed on every sheet."""
    return tomllib.loads((Path(settings.BASE) / "pyproject.toml").read_text(encoding="utf-8"))["project"]["version"]


def _write_once(path: Path, content: bytes) -> None:
    """Put a finished file into place; when another got there first, that one stands."""
    path.parent.mkdir(parents=True, exist_ok=True, mode=0o700)
    handle, draft = tempfile.mkstemp(dir=path.parent, prefix=".draft-")  # made with mode 0600
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        os.link(draft, path)
    except FileExistsError:
        pass
    finally:
        os.unlink(draft)
    _settle(path.parent)


def _settle(folder: Path) -> None:
    """Have the disk keep the folder's new entry, too."""
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)
