"""`manage.py jobsheet`: the PDF says in words all that a surveyor looks for."""

import subprocess
from datetime import date, timedelta

import pytest
from django.core.management import CommandError, call_command

from logbook.paper.services import fingerprint
from logbook.work.models import WorkOrder
from tests.factories import NOW, PASSWORD, make_engine, make_shop

LATER = NOW + timedelta(hours=1)


def words_of(path) -> str:
    """A PDF's text, white space folded."""
    text = subprocess.run(["pdftotext", "-layout", str(path), "-"], capture_output=True, text=True, check=True).stdout
    return " ".join(text.split())


@pytest.fixture
def bench(db):
    from tests.logbook.review.jobs import Bench

    return Bench()


@pytest.fixture
def signed_order(bench) -> WorkOrder:
    from logbook.review.services import decide, sign
    from logbook.review.sheets import job_sheet

    finding = bench.beyond(left="0.41 mm")
    second = bench.read(finding.measurement, "1.exhaust", "0.47 mm")
    decide(finding, by=bench.decides, at=LATER, choice="put_right")
    decide(second, by=bench.decides, at=LATER, choice="may_run_until", conditions="half load", agreed_for_owner_by="A. Owner",
           ends_on=date(2026, 8, 1))  # fmt: skip
    order = finding.measurement.task.work_order
    sign(
        order, by=bench.decides, at=LATER, role="decided", password=PASSWORD, shown_sha256=fingerprint(job_sheet(order))
    )
    return order


def test_a_signed_sheet_says_readings_limits_gauge_verdicts_decisions_and_signatures(signed_order, tmp_path):
    call_command("jobsheet", "118", str(tmp_path / "job.pdf"))

    text = words_of(tmp_path / "job.pdf")
    for said in (
        "Job sheet 118: valve lash", "North pump", "Reed Lake workshop",
        "0.33 mm", "0.3300 ± 0.0099 mm", "0.35 to 0.45 mm", "beyond",  # as typed, as judged, limits, verdict
        "0.41 mm", "0.38 to 0.42 mm", "within",  # left, against its setting
        "sheet 3", "FG-2 feeler gauge, smallest step 0.01 mm",
        "C-118, 2026-03-01, U = 0.008 mm (k = 2), due 2027-03-01",
        "Technician 3", "Technician 5", "put right", "may run until 2026-08-01", "half load", "A. Owner",
        "decided Supervisor 1, 2026-05-02 10:30", signed_order.signatures.get().shown_sha256,
    ):  # fmt: skip
        assert said in text, said


def test_a_signed_sheet_is_the_sealed_one_each_time(signed_order, tmp_path):
    call_command("jobsheet", "118", str(tmp_path / "one.pdf"))
    call_command("jobsheet", "118", str(tmp_path / "two.pdf"))
    assert (tmp_path / "one.pdf").read_bytes() == (tmp_path / "two.pdf").read_bytes()


def test_a_job_that_is_not_signed_gives_the_sheet_as_it_stands(bench, tmp_path, capsys):
    bench.beyond()
    call_command("jobsheet", "118", str(tmp_path / "job.pdf"))
    assert "Job 118 · valve lash, not signed yet:" in capsys.readouterr().out
    assert "0.33 mm" in words_of(tmp_path / "job.pdf")


def test_a_number_that_no_job_has_is_said(bench, tmp_path):
    with pytest.raises(CommandError, match="^There is no job 7.$"):
        call_command("jobsheet", "7", str(tmp_path / "job.pdf"))


def test_where_several_shops_have_the_number_one_is_named(bench, tmp_path):
    bench.beyond()
    elsewhere = make_shop("Elsewhere")
    WorkOrder.objects.create(shop=elsewhere, number=118, engine=make_engine(elsewhere), title="lash", opened_by=bench.decides,
                             opened_at=NOW)  # fmt: skip
    with pytest.raises(CommandError, match="name one with --shop; there are “Elsewhere”, “Reed Lake workshop”"):
        call_command("jobsheet", "118", str(tmp_path / "job.pdf"))
    call_command("jobsheet", "118", str(tmp_path / "job.pdf"), shop="Reed Lake workshop")
    assert "0.33 mm" in words_of(tmp_path / "job.pdf")


def test_a_place_that_cannot_be_written_is_said(bench, tmp_path):
    bench.beyond()
    with pytest.raises(CommandError, match="can't be written: Is a directory"):
        call_command("jobsheet", "118", str(tmp_path))
