"""What a browser gets from us: no inline style or script, nothing from elsewhere, vendored files unaltered."""

import hashlib
import re
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
VENDOR = ROOT / "logbook" / "core" / "static" / "vendor"
TEMPLATES = sorted((ROOT / "templates").rglob("*.html"))
MARKED_UP = TEMPLATES + [
    path
    for path in sorted((ROOT / "logbook").rglob("static/**/*"))
    if path.suffix in {".html", ".svg", ".js"} and VENDOR not in path.parents
]
STYLES = [path for path in sorted((ROOT / "logbook").rglob("static/**/*.css")) if VENDOR not in path.parents]
INLINE = {
    "a style attribute": r"<[^>]*\sstyle\s*=",
    "a style element": r"<style\b",
    "a script with a body": r"<script\b(?![^>]*\bsrc\s*=)",
    "a handler attribute": r"<[^>]*\son[a-z]+\s*=",
    "an htmx handler": r"\bhx-on\b|\bhx-vals\s*=\s*[\"']js:",
    "a javascript: address": r"javascript:",
    "something from elsewhere": r"(?:src|href)\s*=\s*[\"'](?:https?:)?//",
}


def short(path: Path) -> str:
    return str(path.relative_to(ROOT))


@pytest.mark.parametrize("what", INLINE)
@pytest.mark.parametrize("path", MARKED_UP, ids=short)
def test_no_page_breaks_the_content_security_policy(path, what):
    assert re.findall(INLINE[what], path.read_text(encoding="utf-8"), re.IGNORECASE) == []


@pytest.mark.parametrize(
    ("what", "markup"),
    [
        ("a style attribute", '<p class="a"\n style="color:red">'),
        ("a style element", "<style>p{}</style>"),
        ("a script with a body", "<script>go()</script>"),
        ("a handler attribute", '<button onclick="go()">'),
        ("an htmx handler", '<p hx-on:click="go()">'),
        ("a javascript: address", '<a href="javascript:go()">'),
        ("something from elsewhere", '<img src="//example.org/a.png">'),
    ],
)
def test_the_search_finds_what_it_looks_for(what, markup):
    assert re.search(INLINE[what], markup, re.IGNORECASE)


@pytest.mark.parametrize("path", STYLES, ids=short)
def test_no_style_sheet_reaches_outside(path):
    reached = re.findall(r"url\(\s*[\"']?([^\"')]+)", path.read_text(encoding="utf-8"))
    assert [target for target in reached if not (path.parent / target).resolve().is_file()] == []
    assert "@import" not in path.read_text(encoding="utf-8")


@pytest.mark.parametrize("page", TEMPLATES, ids=short)
def test_no_page_lets_django_write_a_number_with_thousands_marks(page):
    assert re.findall(r"\|\s*(?:localize|intcomma)\b|localize on", page.read_text(encoding="utf-8")) == []


def test_every_vendored_file_is_the_one_that_was_taken_in():
    kept = {}
    for sums in VENDOR.glob("*/SHA256SUMS"):
        for line in sums.read_text(encoding="utf-8").splitlines():
            digest, name = line.split("  ")
            kept[sums.parent / name] = digest
    files = {path for path in VENDOR.rglob("*") if path.is_file() and path.name not in {"SHA256SUMS", "ORIGIN.txt"}}
    assert {path: hashlib.sha256(path.read_bytes()).hexdigest() for path in files} == kept


@pytest.mark.parametrize(
    "folder", sorted(path for path in VENDOR.iterdir() if path.is_dir()), ids=lambda path: path.name
)
def test_every_vendored_thing_says_what_it_is(folder):
    said = (folder / "ORIGIN.txt").read_text(encoding="utf-8")
    assert re.findall(r"^(what|version|licence|taken from):", said, re.MULTILINE) == [
        "what", "version", "licence", "taken from",
    ]  # fmt: skip
