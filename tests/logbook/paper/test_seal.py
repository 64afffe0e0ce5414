"""A sealed sheet is kept once, for its owner's eyes, and nothing writes over it."""

import hashlib
import stat
from pathlib import Path

import pytest
from django.test import override_settings

from logbook.paper import services
from logbook.paper.fingerprints import fingerprint
from tests.logbook.paper.sheets_to_draw import AT, job_sheet, work_order


@pytest.fixture(autouse=True)
def home(tmp_path):
    with override_settings(HOME=tmp_path):
        yield tmp_path


def sealed(sheet=None, at=AT) -> services.Sealed:
    return services.seal("work_order", sheet or work_order(), name="job-118", paper="A4", title="Work order 118",
                         language="en", at=at)  # fmt: skip


def test_it_lies_under_its_year_by_name_and_fingerprint_readable_by_its_owner_only(home):
    done = sealed()
    path = home / "sheets" / done.file
    assert done.file == f"2026/job-118-{fingerprint(work_order())}.pdf"
    assert done.sha256 == hashlib.sha256(path.read_bytes()).hexdigest()
    assert done.version == services.version()
    assert stat.S_IMODE(path.stat().st_mode) == 0o600
    assert path.read_bytes().startswith(b"%PDF-1.7")


def test_what_was_sealed_first_stands(home):
    first = sealed()
    again = sealed(at=AT.replace(hour=20))
    assert again == first
    assert [one.name for one in (home / "sheets" / "2026").iterdir()] == [Path(first.file).name]


def test_a_file_that_got_there_in_between_is_not_written_over(home):
    path = home / "sheets" / "2026" / "x.pdf"
    services._write_once(path, b"first")
    services._write_once(path, b"second")
    assert path.read_bytes() == b"first"
    assert len(list(path.parent.iterdir())) == 1


def test_a_changed_sheet_is_another_file(home):
    sealed()
    sealed({**work_order(), "title": "Other"})
    assert len(list((home / "sheets" / "2026").iterdir())) == 2


@pytest.mark.parametrize("name", ["../job", "job/118", "", "Job", "job--1", ".job", "job 118"])
def test_a_name_that_leads_elsewhere_is_refused(name):
    with pytest.raises(ValueError, match="is no name for a sealed sheet"):
        services.seal("job_sheet", job_sheet(), name=name, paper="A4", title="t", language="en", at=AT)
