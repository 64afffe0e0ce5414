"""Sheets as PDFs, read back with poppler: what stands on them, in whose letters, on which paper, and what can't get in."""

import hashlib
import re
import subprocess
import sys
import zlib
from contextlib import suppress
from copy import deepcopy

import pytest

from logbook.paper import services
from logbook.paper.fingerprints import fingerprint
from tests.logbook.paper.sheets_to_draw import AT, blank_sheet, job_sheet, work_order

OURS = {"Hyperlegible", "Hyperlegible-Bold", "Hyperlegible-Mono", "Hyperlegible-Mono-Bold", "Hyperlegible-Extended",
        "Hyperlegible-Extended-Bold", "DejaVu-Sans", "DejaVu-Sans-Bold"}  # fmt: skip


SHEETS = [("job_sheet", job_sheet), ("work_order", work_order), ("blank_sheet", blank_sheet)]


def drawn(sheet, template="job_sheet", paper="A4", title="Job sheet 118, North pump", language="en", at=AT) -> bytes:
    return services.draw(template, sheet, paper=paper, title=title, language=language, at=at)


def told(tool: str, pdf: bytes, *options: str) -> str:
    """What a poppler tool says about a PDF."""
    return subprocess.run([tool, *options, "-", *(["-"] if tool == "pdftotext" else [])], input=pdf,
                          capture_output=True, check=True).stdout.decode()  # fmt: skip


def text_of(pdf: bytes) -> str:
    """A PDF's text with single spaces."""
    return " ".join(told("pdftotext", pdf, "-layout").split())


def fonts_of(pdf: bytes) -> list[tuple[str, str]]:
    """(name without its subset's letters, "yes" when embedded) of every font."""
    lines = told("pdffonts", pdf).splitlines()[2:]
    return [
        (line.split()[0].partition("+")[2], re.search(r"(yes|no) (?:yes|no) (?:yes|no) +\d+ ", line)[1])
        for line in lines
    ]


def pages_of(pdf: bytes) -> int:
    return int(re.search(r"^Pages: +(\d+)", told("pdfinfo", pdf), re.MULTILINE)[1])


@pytest.fixture(scope="module")
def small() -> bytes:
    return drawn(job_sheet(cylinders=1))


@pytest.mark.parametrize(
    "said",
    [
        "Job sheet 118: Valve lash, 500 h", "Reed Lake workshop", "North pump", "bore 96 mm", "engine hours 4210",
        "Not checked by a second person.", "Valve lash, as found", "FG-2 feeler gauge", "U = 0.008 mm (k = 2)",
        "Gauge FG-2 was past due.", "measured by Bo Lind", "0.180 ± 0.010 mm", "0.25 to 0.35 mm", "beyond", "within",
        "not measured: seized", "struck: wrong cylinder", "was 0.30 mm as left on 2025-11-04", "−0.120 ± 0.014 mm",
        "screw loosened by 0.12 turn", "cover gasket, 1", "cover: waits for its gasket", "at half load", "Ole Moe",
        "maker's manual, edition 2, page 41", "ab" * 32, "for the owner", "1 of ", "drawn 2026-05-02 09:30 UTC",
        f"(SHA-256): {fingerprint(job_sheet(cylinders=1))}", f"Engine bench logbook {services.version()}",
    ],
)  # fmt: skip
def test_a_job_sheet_says_what_it_was_given(small, said):
    assert said in text_of(small)


def test_a_work_order_puts_cautions_and_locks_before_the_work():
    text = text_of(drawn(work_order(), "work_order"))
    order = ["DANGER", "1. Valve lash", "turned by hand: isolated", "WARNING Feeler out", "main switch", "start air valve",
             "2. Compression", "fuel rack", "Closing up", "locknuts tight"]  # fmt: skip
    assert sorted(order, key=text.index) == order


def test_a_blank_sheet_goes_by_crank_stops_in_the_order_of_the_hands():
    text = text_of(drawn(blank_sheet(), "blank_sheet"))
    order = ["part temperature", "1. TDC 1 firing 0°", "as found [mm]", "1 intake", "1 exhaust", "2 intake", "3 exhaust",
             "2. TDC 4 firing 360°", "4 intake", "4 exhaust", "3 intake", "2 exhaust"]  # fmt: skip
    assert sorted(order, key=text.index) == order


@pytest.mark.parametrize(("template", "make"), SHEETS)
def test_every_font_is_ours_and_embedded(template, make):
    fonts = fonts_of(drawn(make(), template))
    assert {name for name, _ in fonts} <= OURS
    assert {embedded for _, embedded in fonts} == {"yes"}


def test_signs_and_other_alphabets_come_from_the_letters_we_ship():
    pdf = drawn(job_sheet(cylinders=1, notes=["Ω µ ≤ ⌀ ′ √ Ж, Žofia Łód Őri"]))
    assert "Ω µ ≤ ⌀ ′ √ Ж, Žofia Łód Őri" in text_of(pdf)
    assert {name for name, _ in fonts_of(pdf)} <= OURS


@pytest.mark.parametrize(("paper", "size"), [("A4", "595.276 x 841.89 pts (A4)"), ("Letter", "612 x 792 pts (letter)")])
def test_the_paper_is_the_shops(paper, size):
    assert f"Page size:       {size}" in told("pdfinfo", drawn(blank_sheet(), "blank_sheet", paper))


def test_it_is_tagged_titled_and_says_its_language(small):
    said = told("pdfinfo", small)
    assert re.findall(r"^(?:Title|Tagged|JavaScript|PDF version): +(.*)", said, re.MULTILINE) == [
        "Job sheet 118, North pump", "yes", "no", "1.7",
    ]  # fmt: skip
    assert b"/Lang (en)" in unpacked(small)


def test_it_says_what_it_is_built_to(small):
    described = told("pdfinfo", small, "-meta")
    assert 'pdfaid:part="3" pdfaid:conformance="A"' in described
    assert 'pdfuaid:part="1"' in described
    assert described.count("<rdf:RDF") == 1
    assert b"/OutputIntents" in unpacked(small)


def test_pictures_have_words_and_cells_know_their_heads(small):
    tree = unpacked(small)
    pictures, words, cells = (len(re.findall(found, tree)) for found in (rb"/S /Figure", rb"/Alt \(", rb"/S /TD"))
    assert pictures == words > 4
    assert len(re.findall(rb"/Headers \[", tree)) == cells > 10


def test_lists_hold_nothing_but_items(small):
    lines = told("pdfinfo", small, "-struct").splitlines()
    inside = [
        line.split()[0] for place, line in enumerate(lines) for above in [parent_of(lines, place)] if above == "L"
    ]
    assert set(inside) == {"LI"}


def test_twenty_cylinders_break_between_stations_and_heads_come_again():
    pdf = drawn(job_sheet(cylinders=20))
    pages = told("pdftotext", pdf, "-layout").split("\f")[:-1]
    assert pages_of(pdf) == len(pages) == 3
    with_stations = [page for page in pages if "exhaust  " in page]
    assert len(with_stations) >= 2
    assert [("as typed" in page, f"{n} of 3" in page) for n, page in enumerate(with_stations, 1)] == [
        (True, True)
    ] * len(with_stations)
    readings = [
        line for page in pages for line in page.splitlines() if re.match(r" *Cylinder \d+ (intake|exhaust)  ", line)
    ]
    whole = [line for line in readings if re.search(r"0\.\d{3} ± 0\.010 mm +0\.25 to 0\.35 mm", line)]
    assert len(whole) == 41  # forty of the engine, and the one struck


@pytest.mark.parametrize("template", ["job_sheet", "work_order", "blank_sheet"])
def test_every_page_of_a_demo_says_so(template):
    sheet = {**dict(SHEETS)[template](), "is_demo": True}
    if template == "job_sheet":
        sheet = job_sheet(cylinders=20, is_demo=True)
    pages = told("pdftotext", drawn(sheet, template), "-layout").split("\f")[:-1]
    assert [page.count("invented data") for page in pages] == [1] * len(pages)


HOSTILE = [
    "<img src=file:///etc/passwd>", '<img src="http://127.0.0.1:9/x.png">', "</title><script>alert(1)</script>",
    "{{ sheet.shop }} {% include '/etc/passwd' %}", "url(file:///etc/passwd)", '" onload="x" x="',
    "<link rel=attachment href=file:///etc/passwd>", "<style>@import 'file:///etc/passwd';</style>", "<base href=file:///>",
]  # fmt: skip


@pytest.mark.parametrize("text", HOSTILE)
def test_what_a_person_types_is_text_and_nothing_else(text, caplog):
    sheet = everywhere(job_sheet(cylinders=1), text)
    pdf = drawn(sheet, title=text)
    assert text.replace(" ", "") in text_of(pdf).replace(" ", "")
    assert "root:" not in text_of(pdf)
    assert re.search(rb"/EmbeddedFiles|/JavaScript|/URI|/Launch", unpacked(pdf)) is None
    assert [line for line in caplog.messages if "Failed to load" in line] == []  # nothing was even asked for


def test_the_same_sheet_is_the_same_file_in_this_process_and_another():
    first, between, again = drawn(job_sheet()), drawn(work_order(), "work_order"), drawn(job_sheet())
    script = (
        "import django, hashlib; django.setup(); from logbook.paper import services; "
        "from tests.logbook.paper.sheets_to_draw import *;"
        "print(hashlib.sha256(services.draw('job_sheet', job_sheet(), paper='A4', title='Job sheet 118, North pump',"
        " language='en', at=AT)).hexdigest())"
    )
    other = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True).stdout
    assert first == again != between
    assert other.strip() == hashlib.sha256(first).hexdigest()


def test_a_sheet_drawn_elsewhen_is_another_file_with_the_same_fingerprint():
    one, other = (drawn(work_order(), "work_order", at=at) for at in (AT, AT.replace(hour=10)))
    assert one != other
    assert all(fingerprint(work_order()) in text_of(pdf) for pdf in (one, other))


def test_a_sheet_is_left_as_it_was_handed_over():
    sheet = job_sheet()
    before = deepcopy(sheet)
    drawn(sheet)
    assert sheet == before


def test_a_sheet_or_paper_that_there_is_not_is_a_mistake_of_the_program():
    with pytest.raises(ValueError, match="no sheet 'invoice' on 'A4'"):
        drawn({}, "invoice")
    with pytest.raises(ValueError, match="no sheet 'job_sheet' on 'A0'"):
        drawn(job_sheet(), paper="A0")


def test_without_pango_a_sentence_says_what_is_missing(monkeypatch):
    monkeypatch.setitem(sys.modules, "weasyprint", None)  # as where it can't be loaded
    with pytest.raises(services.PaperRefused) as refused:
        drawn(work_order(), "work_order")
    assert str(refused.value) == services.missing_libraries()
    assert str(refused.value).startswith("Sheets can't be drawn on this machine: WeasyPrint, or the library Pango")


def test_nothing_is_missing_here():
    assert services.missing_libraries() == ""


def test_weasyprint_is_not_loaded_before_a_sheet_is_drawn():
    script = "import django, sys; django.setup(); import logbook.paper.services, logbook.urls; print('weasyprint' in sys.modules)"
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    assert done.stdout == "False\n"


def unpacked(pdf: bytes) -> bytes:
    """Every stream of a PDF that isn't a page's picture, with its objects in plain sight."""
    found = [pdf]
    for packed in re.findall(rb"stream\r?\n(.*?)\r?\nendstream", pdf, re.DOTALL):
        with suppress(zlib.error):
            found.append(zlib.decompress(packed))
    return b"\n".join(found)


def everywhere(value: object, text: str) -> object:
    """A sheet with a text put behind every text in it, where the program doesn't choose the words."""
    chosen = {"verdict", "role", "fingerprint"}
    if isinstance(value, dict):
        return {name: inner if name in chosen else everywhere(inner, text) for name, inner in value.items()}
    if isinstance(value, list):
        return [everywhere(inner, text) for inner in value]
    return f"{value} {text}" if isinstance(value, str) else value


def parent_of(lines: list[str], place: int) -> str:
    """Name of the element that a line of pdfinfo's tree stands in."""
    depth = len(lines[place]) - len(lines[place].lstrip())
    above = (line for line in reversed(lines[:place]) if len(line) - len(line.lstrip()) < depth)
    return next(above, "none").split()[0]
