"""The page on which a sheet is signed: all of it shown, a wrong password counted, the sheet sealed."""

import re

import pytest

from logbook.people.tries import MOST
from logbook.review.models import SealedSheet, Signature
from logbook.review.services import decide
from tests.factories import PASSWORD
from tests.logbook.review.reading_pages import LATER, address, words


@pytest.fixture
def supervisor(client, bench):
    client.force_login(bench.decides)
    return client


def sign(client, order, role, password=PASSWORD, **more):
    page = client.get(address("sign", order.number)).content.decode()
    shown = re.search(r'name="shown_sha256" value="(\w+)"', page)[1]
    sent = {"role": role, "password": password, "shown_sha256": shown, **more}
    return client.post(address("sign", order.number), sent, follow=True, REMOTE_ADDR="127.0.0.1")


@pytest.fixture
def ready(bench):
    """A job whose only finding is decided."""
    finding = bench.beyond(left="0.41 mm")
    decide(finding, by=bench.decides, at=LATER, choice="put_right")
    return finding.measurement.task.work_order


def test_the_signing_page_shows_the_whole_sheet_its_fingerprint_and_takes_no_focus(supervisor, ready):
    page = supervisor.get(address("sign", ready.number))
    told = words(page)
    for said in (
        "0.3300 ± 0.0099 mm",
        "0.35 to 0.45 mm",
        "sheet 3",
        "FG-2 feeler gauge",
        "C-118",
        "beyond",
        "put right",
    ):
        assert said in told
    html = page.content.decode()
    assert "autofocus" not in html
    form = html[html.index('name="shown_sha256"') :]
    assert form.index('type="password"') < form.index('type="submit"')
    assert "review/wedge_guard" in html


def test_the_deciding_signature_signs_and_seals(supervisor, bench, ready, settings, tmp_path):
    settings.HOME = tmp_path
    told = words(sign(supervisor, ready, "decided"))
    assert "Signed as decided by Supervisor 1." in told and "decided Supervisor 1" in told
    sealed = SealedSheet.objects.get()
    assert (tmp_path / "sheets" / sealed.file).is_file()
    first = supervisor.get(address("sheet", ready.number))
    assert first["Content-Type"] == "application/pdf" and first.content.startswith(b"%PDF")
    (tmp_path / "sheets" / sealed.file).write_bytes(first.content + b" ")
    told = words(supervisor.get(address("sheet", ready.number), follow=True))
    assert "was changed since it was sealed: don't rely on it" in told


def test_a_wrong_password_is_said_and_five_of_them_have_to_wait(supervisor, bench, ready):
    for _ in range(MOST):
        assert "That is not the password of Supervisor 1: nothing was signed." in words(
            sign(supervisor, ready, "decided", "wrong")
        )
    assert "wrong tries from here" in words(sign(supervisor, ready, "decided"))
    assert not Signature.objects.exists()


def test_a_refusal_with_the_right_password_is_no_wrong_try(supervisor, bench, ready):
    for _ in range(MOST + 1):
        told = words(sign(supervisor, ready, "decided", shown_sha256="0" * 64))
        assert "The sheet changed meanwhile: look at it again, then sign." in told


def test_what_is_undecided_is_said_in_place_of_the_form(supervisor, bench):
    order = bench.beyond().measurement.task.work_order
    page = supervisor.get(address("sign", order.number))
    assert (
        "Decided: Still to decide: Cylinder 3 exhaust." in words(page)
        and "password" not in page.content.decode().partition("<main")[2]
    )


def test_a_witness_sees_the_jobs_with_readings_to_witness_and_no_other(client, bench):
    named, other = bench.beyond().measurement.task, bench.beyond().measurement.task
    named.witnessed_stations = ["3.exhaust"]
    named.save()
    client.force_login(bench.witness)
    assert client.get(address("sign", named.work_order.number)).status_code == 200
    assert client.get(address("sign", other.work_order.number)).status_code == 404
    assert client.get(address("sheet", other.work_order.number)).status_code == 404
    told = words(sign(client, named.work_order, "witnessed", stations=["3.exhaust"]))
    assert "Signed as witnessed by Surveyor 1." in told
    assert Signature.objects.get().stations == ["3.exhaust"]
