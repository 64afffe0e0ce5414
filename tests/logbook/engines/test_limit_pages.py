"""The pages of limit sheets: typed by one person, compared by another, with photos that stay in the shop."""

from datetime import UTC, datetime
from io import BytesIO

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse
from PIL import Image

from logbook.engines import queries, services
from logbook.people.models import ROLES
from tests.factories import make_person, make_shop
from tests.logbook.engines.page_text import read

pytestmark = pytest.mark.django_db


LINE = {"characteristic": "valve_lash.intake", "lower": "0.25", "upper": "0.35 mm", "source": "manual 3, page 12"}


def jpeg() -> SimpleUploadedFile:
    kept = BytesIO()
    Image.new("RGB", (30, 20), "white").save(kept, "JPEG")
    return SimpleUploadedFile("page.jpg", kept.getvalue(), "image/jpeg")


def test_a_sheet_is_typed_by_one_person_and_compared_by_another(client, people, engine):
    client.force_login(people["toolroom"])
    client.post(reverse("engines:new_sheet", args=[engine.pk]), {"note": "new manual", "copied_from": ""})
    client.post(reverse("engines:new_line", args=[engine.pk, 1]), LINE | {"photo": jpeg()})
    compare, page = (reverse(f"engines:{name}", args=[engine.pk, 1]) for name in ("compare", "sheet"))
    assert compare not in read(client.get(page)).links
    told = read(client.post(compare, follow=True)).text
    assert "Toolroom entered this sheet and can't be the one who compares it" in told
    client.force_login(people["technician"])
    assert compare in read(client.get(page)).links
    client.post(compare)
    assert queries.sheet_in_force(engine, datetime.now(UTC)).compared_by == people["technician"]
    assert "0.25 mm to 0.35 mm" in read(client.get(page)).text


def test_a_line_is_changed_and_withdrawn_and_the_earlier_ones_stay_to_be_seen(client, people, engine, rows):
    client.force_login(people["toolroom"])
    version, line = rows["draft"].version, rows["line"]
    form = {name: getattr(line, name) for name in ("characteristic", "lower", "upper", "source", "condition")}
    client.post(reverse("engines:change_line", args=[engine.pk, version, line.pk]), form | {"upper": "0.50 mm"})
    changed = rows["draft"].lines.get(characteristic=line.characteristic)
    assert (changed.upper, changed.replaces) == ("0.50 mm", line)
    client.post(reverse("engines:withdraw_line", args=[engine.pk, version, changed.pk]))
    assert not rows["draft"].lines.filter(characteristic=line.characteristic).exists()
    page = read(client.get(reverse("engines:sheet", args=[engine.pk, version])))
    assert "Changed or withdrawn before it came into force" in page.text


def test_a_bad_line_is_answered_at_its_field_and_keeps_what_was_typed(client, people, engine, rows):
    client.force_login(people["toolroom"])
    address = reverse("engines:new_line", args=[engine.pk, rows["draft"].version])
    page = client.post(address, LINE | {"condition": "hot", "lower": "0.40 mm"})
    assert "lower 0.4 is not below upper 0.35: give the smaller figure as lower." in read(page).text
    assert 'value="0.40 mm"' in page.content.decode()
    page = client.post(address, LINE | {"condition": "hot", "photo": SimpleUploadedFile("a.jpg", b"<script>")})
    assert "This is no whole JPEG or PNG picture" in read(page).text


def test_a_photo_is_served_to_its_shop_and_to_nobody_else(client, people, engine, rows):
    line = services.add_line(by=people["toolroom"], sheet=rows["draft"], photo=jpeg(), **LINE, condition="hot")
    address = reverse("engines:photo", args=[engine.pk, rows["draft"].version, line.pk])
    assert client.get(address).status_code == 302
    client.force_login(people["witness"])
    answer = client.get(address)
    assert (answer["Content-Type"], answer["X-Content-Type-Options"]) == ("image/jpeg", "nosniff")
    assert b"".join(answer.streaming_content) == jpeg().read()
    client.force_login(make_person(make_shop("Other shop"), "Nosy", *ROLES))
    assert client.get(address).status_code == 404
    client.force_login(people["witness"])
    assert client.get(f"/{line.photo.name}").status_code == 404


def test_a_line_without_a_photo_has_none_to_show(client, people, engine, rows):
    client.force_login(people["technician"])
    address = reverse("engines:photo", args=[engine.pk, rows["draft"].version, rows["line"].pk])
    assert client.get(address).status_code == 404


def test_a_sheet_that_nobody_else_compares_says_so_on_its_page(client, people, engine, rows):
    client.force_login(people["toolroom"])
    version = rows["draft"].version
    client.post(reverse("engines:uncompared", args=[engine.pk, version]), {"why": "night call-out"})
    text = read(client.get(reverse("engines:sheet", args=[engine.pk, version]))).text
    assert "not compared by a second person: night call-out." in text


def test_a_provisional_limit_past_its_end_is_flagged_on_the_page(client, people, engine, rows):
    services.add_line(by=people["toolroom"], sheet=rows["draft"], **LINE, condition="hot", provisional_by="Bea",
                      provisional_grounds="like engine", provisional_until=datetime(2020, 1, 1).date())  # fmt: skip
    client.force_login(people["witness"])
    text = read(client.get(reverse("engines:sheet", args=[engine.pk, rows["draft"].version]))).text
    assert "1 provisional limit is past its end and judges nothing any more" in text
