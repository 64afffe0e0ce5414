"""The pages of the engines: who may open them, and what they show."""

from datetime import UTC, datetime

import pytest
from django.db import connection
from django.test.utils import CaptureQueriesContext
from django.urls import reverse

from logbook.engines import services
from logbook.engines.models import Fitting, LimitLine, LimitSheet, MeterReading, OutOfService, Part
from logbook.people.models import ROLES
from tests.factories import NOW, make_engine, make_limits, make_meter, make_person, make_shop
from tests.logbook.engines.page_text import read

pytestmark = pytest.mark.django_db


def addresses(engine, rows) -> dict[str, tuple[str, tuple[str, ...]]]:
    """Every page of the room: its address and who may open it (nobody named: everyone signed in)."""
    pk, draft = engine.pk, rows["draft"].version
    at = lambda name, *args: reverse(f"engines:{name}", args=args)  # noqa: E731
    supervisors, at_engine, keepers = ("supervisor",), ("technician", "supervisor"), ("toolroom", "supervisor")
    return {
        "engines": (at("engines"), ()), "engine": (at("engine", pk), ()), "meters": (at("meters", pk), ()),
        "new engine": (at("new_engine"), supervisors), "change engine": (at("change_engine", pk), supervisors),
        "out of service": (at("out_of_service", pk), ()), "new time out": (at("new_out_of_service", pk), supervisors),
        "change time out": (at("change_out_of_service", pk, rows["time_out"].pk), supervisors),
        "new meter": (at("new_meter", pk), supervisors), "read meter": (at("read_meter", pk, rows["meter"].pk), at_engine),
        "replace meter": (at("replace_meter", pk, rows["meter"].pk), supervisors),
        "correct reading": (at("correct_reading", pk, rows["reading"].pk), at_engine),
        "limits": (at("limits", pk), ()), "new sheet": (at("new_sheet", pk), keepers), "sheet": (at("sheet", pk, draft), ()),
        "uncompared": (at("uncompared", pk, draft), keepers), "give up": (at("give_up", pk, draft), keepers),
        "new line": (at("new_line", pk, draft), keepers),
        "change line": (at("change_line", pk, draft, rows["line"].pk), keepers),
        "parts": (at("parts"), ()), "new part": (at("new_part"), ("technician", "supervisor", "toolroom")),
        "part": (at("part", rows["part"].pk), ()), "fit": (at("fit_part", rows["part"].pk), at_engine),
        "move": (at("move_part", rows["part"].pk), at_engine), "take off": (at("take_off_part", rows["part"].pk), at_engine),
    }  # fmt: skip


def test_each_page_opens_to_its_roles_and_to_nobody_else(client, people, engine, rows):
    opened = {}
    for name, (address, _roles) in addresses(engine, rows).items():
        for role, person in people.items():
            client.force_login(person)
            opened[name, role] = client.get(address).status_code
    expected = {
        (name, role): 200 if not roles or role in roles else 403
        for name, (_address, roles) in addresses(engine, rows).items() for role in ROLES
    }  # fmt: skip
    assert opened == expected


def test_somebody_who_is_not_signed_in_is_sent_to_sign_in(client, engine, rows):
    for address, _roles in addresses(engine, rows).values():
        assert client.get(address).url.startswith(reverse("people:sign_in"))


def test_another_shops_rows_are_not_there(client, engine, rows):
    stranger = make_person(make_shop("Other shop"), "Nosy", *ROLES)
    client.force_login(stranger)
    of_rows = {name: address for name, (address, _roles) in addresses(engine, rows).items()
               if name not in ("engines", "new engine", "parts", "new part")}  # fmt: skip
    assert {name: client.get(address).status_code for name, address in of_rows.items()} == dict.fromkeys(of_rows, 404)
    assert "North pump" not in read(client.get(reverse("engines:engines"))).text
    assert "H-12" not in read(client.get(reverse("engines:parts"))).text
    for name in ("compare", "withdraw_line"):
        more = [rows["line"].pk] if name == "withdraw_line" else []
        address = reverse(f"engines:{name}", args=[engine.pk, rows["draft"].version, *more])
        assert client.post(address).status_code == 404
    assert LimitSheet.objects.get(pk=rows["draft"].pk).in_force_at is None


def test_no_page_shows_a_link_that_its_reader_may_not_follow(client, people, engine, rows):
    pages = addresses(engine, rows)
    roles = {address: allowed for address, allowed in pages.values()}
    refused = []
    for role, person in people.items():
        client.force_login(person)
        for name, (address, allowed) in pages.items():
            if allowed and role not in allowed:
                continue
            page = read(client.get(address))
            assert page.headings == 1, name
            refused += [(role, name, link) for link in page.links if roles.get(link) and role not in roles[link]]
    assert refused == []


def test_the_list_says_what_needs_a_look(client, people, rows, shop):
    make_engine(shop, "South pump")
    client.force_login(people["witness"])
    page = read(client.get(reverse("engines:engines")))
    assert "2 engines are kept here. 1 is out of service. 1 has no limit sheet in force" in page.text
    assert "4 210 h" in page.text


def test_an_empty_list_says_how_to_begin(client, people):
    client.force_login(people["supervisor"])
    text = read(client.get(reverse("engines:engines"))).text
    assert "Take in the first one: its name, layout and number of cylinders are enough to begin." in text


def test_an_engines_page_shows_it_from_above_with_what_follows_from_its_papers(client, people, engine, rows):
    client.force_login(people["technician"])
    page = read(client.get(reverse("engines:engine", args=[engine.pk])))
    for said in ("OUT OF SERVICE", "told: owner", "TDC 1 firing : 1 intake + exhaust, 2 intake, 3 exhaust",
                 "2.982 L", "5.15 m/s", "1.602", "cylinder head H-12", "Sheet 1 is in force since 2023-01-03.",
                 "Sheet 2 is in preparation."):  # fmt: skip
        assert said in page.text
    assert (
        'role="img" aria-label="Plan view: inline engine, cylinders 4, free end at the left'
        in client.get(reverse("engines:engine", args=[engine.pk])).content.decode()
    )


def test_the_picture_turns_to_the_other_side(client, people, engine):
    client.force_login(people["technician"])
    page = client.get(reverse("engines:engine", args=[engine.pk]), {"left": "flywheel"}).content.decode()
    assert "flywheel at the left, free end at the right" in page


def test_an_engine_of_which_little_is_known_has_a_page_that_says_so(client, people, shop):
    bare = make_engine(shop, "Old barge", layout="vee", cylinders=6, firing_order=None, ignition="", bore_mm=None,
                       stroke_mm=None, rod_length_mm=None, compression_ratio=None, rated_speed_rpm=None,
                       intake_opens_btdc=None)  # fmt: skip
    client.force_login(people["technician"])
    text = read(client.get(reverse("engines:engine", args=[bare.pk]))).text
    for said in ("The firing order is not known, so there is no crank plan", "banks not known: drawn by number",
                 "No limit sheet is in force", "No meter is fitted"):  # fmt: skip
        assert said in text


# --- queries


def test_pages_ask_no_more_of_the_database_with_thirty_rows_than_with_three(client, people, shop, engine, rows):
    def counted() -> dict[str, int]:
        found = {}
        for name in ("engines", "engine", "meters", "limits", "sheet", "parts", "part", "out of service"):
            with CaptureQueriesContext(
                connection,
            ) as asked:
                client.get(addresses(engine, rows)[name][0])
            found[name] = len(asked)
        return found

    def grow(start: int, end: int) -> None:
        for number in range(start, end):
            other = make_engine(shop, f"Engine {number}", cylinders=4)
            make_meter(other, people["technician"])
            make_limits(other, people["toolroom"], people["supervisor"])
            for where in (other, engine):
                part = services.add_part(
                    by=people["technician"], at=NOW, kind=Part.Kind.SHELL, mark=f"{where.pk}-{number}"
                )
                services.fit_part(by=people["technician"], at=NOW, part=part, engine=where, position=f"main {number}",
                                  fitted_at=NOW)  # fmt: skip
            MeterReading.objects.create(shop=shop, meter=rows["meter"], shows=4210 + number, taken_at=NOW, recorded_at=NOW,
                                        recorded_by=people["technician"])  # fmt: skip
            Fitting.objects.create(shop=shop, part=rows["part"], engine=other, position="x", fitted_at=NOW,
                                   fitted_total=1, taken_off_at=NOW, taken_off_total=1)  # fmt: skip
            LimitSheet.objects.create(shop=shop, engine=engine, version=100 + number, entered_by=people["toolroom"],
                                      entered_at=NOW, given_up_at=NOW, given_up_because="x")  # fmt: skip
            LimitLine.objects.create(shop=shop, sheet=rows["draft"], characteristic="bore.diameter", upper="96.1 mm",
                                     condition=f"state {number}", source="page 4")  # fmt: skip
            OutOfService.objects.create(shop=shop, engine=engine, from_at=datetime(2020, 1, number + 1, tzinfo=UTC),
                                        until_at=datetime(2020, 1, number + 2, tzinfo=UTC), who_was_told="owner",
                                        recorded_by=people["supervisor"], recorded_at=NOW)  # fmt: skip

    client.force_login(people["supervisor"])
    grow(0, 3)
    few = counted()
    grow(3, 30)
    assert counted() == few
