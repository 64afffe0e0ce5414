"""The closed door: only our own files by their whole name, and data that stands in the sheet."""

import pytest

from logbook.paper.closed import HERE, ClosedFetcher, own_files
from logbook.paper.drawing import pdf_of


@pytest.mark.parametrize(
    "address",
    [
        "file:///etc/passwd", "FILE:///etc/passwd", "http://127.0.0.1:9/", "https://example.org/a.css", "ftp://127.0.0.1/",
        f"{HERE}../../etc/passwd", f"{HERE}letters/../../../settings.py", f"{HERE}letters/%2e%2e/settings.py",
        f"{HERE}tokens.css?x", f"{HERE}nothing.css", "https://sheet.invalid", "//etc/passwd", "/etc/passwd", "settings.py",
    ],
)  # fmt: skip
def test_any_other_address_is_refused(address):
    with pytest.raises(ValueError):
        ClosedFetcher().fetch(address)


def test_our_own_files_are_handed_out():
    names = {address.removeprefix(HERE) for address in own_files()}
    assert {"sheet.css", "letters.css", "tokens.css", "letters/dejavu-sans-400-normal.woff2"} <= names
    assert ClosedFetcher().fetch(f"{HERE}tokens.css").content_type == "text/css"


def test_data_in_the_sheet_itself_is_read():
    assert ClosedFetcher().fetch("data:text/plain,0.18").read() == b"0.18"


def test_even_a_page_that_asks_gets_nothing_from_the_machine(tmp_path):
    secret = tmp_path / "secret.txt"
    secret.write_text("the toolroom's key")
    page = (
        f'<!doctype html><html lang="en"><head><title>t</title><link rel="attachment" href="file://{secret}">'
        f'<link rel="stylesheet" href="file://{secret}"></head><body><img alt="x" src="file://{secret}">'
        f'<object data="file://{secret}"></object><p>0.18</p></body></html>'
    )
    asked = pdf_of(page, paper="A4", identifier=b"0" * 16)
    secret.unlink()
    assert asked == pdf_of(page, paper="A4", identifier=b"0" * 16)  # the same as where there is no such file
    assert b"/EmbeddedFiles" not in asked
