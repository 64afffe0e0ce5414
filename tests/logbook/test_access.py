"""Every address looked at and posted to by every role, another shop and nobody; the table is printed.

Nobody sees or changes what isn't theirs, no row refers to another shop's, what was typed is never taken for a tag.
"""

import re

import pytest
from django.apps import apps
from django.contrib.sessions.models import Session
from django.db import transaction
from django.db.models import F, Model
from django.test import Client
from django.urls import URLPattern, URLResolver, get_resolver, reverse
from django.utils import timezone

from logbook.bench.models import Measurement, Reading
from logbook.desk.demo.loading import load_demo
from logbook.engines.models import Engine, LimitLine, LimitSheet, Meter, MeterReading, OutOfService, Part
from logbook.gauges.models import Calibration, Gauge
from logbook.people.models import Person, Shop, WrongTries
from logbook.work.models import ClosingItem, HandOver, Interval, Lock, Task, WorkOrder
from logbook.work.services import open_work_order
from tests.factories import NOW, make_engine, make_gauge, make_person, make_shop

ROLES = ("technician", "supervisor", "toolroom", "witness")
PUBLIC = {"people:sign_in", "people:first_start", "people:sign_out", "desk:example"}
# the piece of an address before a number -> the rows that number names, and the field it is
ROWS = {
    "people/<int:pk>": (Person, "pk"),
    "gauges/<int:pk>": (Gauge, "pk"),
    "calibrations/<int:calibration>": (Calibration, "pk"),
    "engines/<int:pk>": (Engine, "pk"),
    "engines/<int:engine>": (Engine, "pk"),
    "intervals/<int:pk>": (Interval, "pk"),
    "jobs/<int:number>": (WorkOrder, "number"),
    "tasks/<int:pk>": (Task, "pk"),
    "bench/<int:task>": (Task, "pk"),
    "blank-<int:task>": (Task, "pk"),
    "locks/<int:pk>": (Lock, "pk"),
    "closing-up/<int:pk>": (ClosingItem, "pk"),
    "hand-over/<int:pk>": (HandOver, "pk"),
    "passes/<int:measurement>": (Measurement, "pk"),
    "readings/<int:reading>": (Reading, "pk"),
    "meters/readings/<int:reading>": (MeterReading, "pk"),
    "meters/<int:meter>": (Meter, "pk"),
    "out-of-service/<int:time_out>": (OutOfService, "pk"),
    "parts/<int:pk>": (Part, "pk"),
    "limits/<int:version>": (LimitSheet, "version"),
    "lines/<int:line>": (LimitLine, "pk"),
}  # fmt: skip
# which rows belong to what an earlier number of the same address named
BELONG = {
    Task: {"number": "work_order__number"},
    Lock: {"number": "work_order__number"},
    ClosingItem: {"number": "work_order__number"},
    HandOver: {"number": "work_order__number"},
    Measurement: {"task": "task"},
    Reading: {"task": "measurement__task"},
    Calibration: {"pk": "gauge"},
    Meter: {"pk": "engine"},
    MeterReading: {"pk": "meter__engine"},
    OutOfService: {"pk": "engine"},
    LimitSheet: {"pk": "engine"},
    LimitLine: {"pk": "sheet__engine", "version": "sheet__version"},
}
PIECE = re.compile(r"((?:meters/readings|[a-z-]+)[/-]<[a-z]+:[a-z_]+>)")


def addresses(resolver: URLResolver, before: str = "", namespace: str = ""):
    """Every named address with its route."""
    for pattern in resolver.url_patterns:
        route = before + str(pattern.pattern)
        if isinstance(pattern, URLResolver):
            yield from addresses(pattern, route, pattern.namespace or namespace)
        elif isinstance(pattern, URLPattern):
            yield f"{namespace}:{pattern.name}", route


def numbers_for(route: str, shop: Shop, most: int = 3) -> list[dict[str, object]]:
    """Some sets of numbers that fit a route in a shop: rows that belong together, one set at least where there is one."""
    pieces = PIECE.findall(route)
    if not pieces:
        return [{}] if "<" not in route else []
    found: list[dict[str, object]] = [{}]
    for piece in pieces:
        model, name = ROWS[piece]
        argument = piece.split(":")[1].rstrip(">")
        widened = []
        for told in found:
            belong = {look_up: told[name_] for name_, look_up in BELONG.get(model, {}).items() if name_ in told}
            rows = model.objects.filter(shop=shop, **belong)
            widened += [{**told, argument: value} for value in rows.values_list(name, flat=True)]
        found = widened
    return found[:: max(1, len(found) // most)][:most]


def asked(client: Client, address: str) -> tuple[int, str]:
    """Status of looking at an address, and the words of the answer."""
    answer = client.get(address)
    words = "" if answer.streaming or "pdf" in answer.get("Content-Type", "") else answer.content.decode()
    return answer.status_code, words


@pytest.fixture(scope="module")
def two_shops(django_db_setup, django_db_blocker):
    """The demo's shop and a stranger's, loaded once for this file and rolled back after it."""
    with django_db_blocker.unblock(), transaction.atomic():
        ours = load_demo(timezone.now())
        theirs = make_shop("Other works on another lake")
        there = {role: make_person(theirs, f"Stranger {role}", role) for role in ROLES}
        engine, by = make_engine(theirs, "Engine of theirs"), there["supervisor"]
        make_gauge(theirs, there["toolroom"])
        Part.objects.create(shop=theirs, kind="liner", mark="T-1", created_at=NOW)
        Interval.objects.create(shop=theirs, engine=engine, title="Job of theirs", every_hours=100)
        open_work_order(by=by, at=NOW, engine=engine, title="Job of theirs", kinds=["valve_lash"])
        here = {role: next(one for one in Person.objects.filter(shop=ours) if one.has_role(role)) for role in ROLES}
        yield ours, theirs, here, there
        transaction.set_rollback(True)


def signed_in(persons: dict[str, Person]) -> dict[str, Client]:
    """A browser for each person; a fault becomes its page, as it would for them."""
    clients = {role: Client(raise_request_exception=False) for role in persons}
    for role, person in persons.items():
        clients[role].force_login(person)
    return clients


def rows_of(shop: Shop) -> dict[type[Model], list[tuple]]:
    """Every row of a shop, whole."""
    kept = [model for model in apps.get_models() if any(field.name == "shop" for field in model._meta.fields)]
    found = {model: list(model._base_manager.filter(shop=shop).order_by("pk").values_list()) for model in kept}
    return {**found, Shop: list(Shop.objects.filter(pk=shop.pk).values_list())}


def every_row() -> dict[type[Model], list[tuple]]:
    """Every row of the database that isn't about who is signed in."""
    kept = [model for model in apps.get_models(include_auto_created=True) if model not in (Session, WrongTries)]
    return {model: list(model._base_manager.order_by("pk").values_list()) for model in kept}


def mixed_rows() -> list[str]:
    """Columns by which a row of one shop refers to one of another."""
    found = []
    for model in apps.get_models(include_auto_created=True):
        links = [one for one in model._meta.fields if one.many_to_one and hasattr(one.related_model, "shop")]
        pairs = [(f"{one.name}__shop", "shop") for one in links if hasattr(model, "shop")]
        if len(links) == 2 and not hasattr(model, "shop"):  # what ties two rows together
            pairs = [tuple(f"{one.name}__shop" for one in links)]
        for far, near in pairs:
            rows = model._base_manager.filter(**{f"{far}__isnull": False}).exclude(**{far: F(near)})
            found += [f"{model.__name__}.{far}"] if rows.exists() else []
    return found


TAG = "<i>&\"'"  # shows raw wherever a page forgets to escape it
WORDS = ("title", "what", "reason", "point", "told", "more", "note", "mark", "name", "why", "remark", "source", "position",
         "certificate", "what-0", "typed", "not_measured", "on_whose_word", "agreed_for_owner_by", "conditions", "serial",
         "maker", "provisional_by", "opens", "where_told", "stood_in", "for", "barometer", "password", "to")  # fmt: skip
SENSIBLE = {
    "act": "roles", "kind": "valve_lash", "kinds": ["valve_lash"], "choice": "other", "role": "measured", "does": "strike",
    "phase": "as_found", "state": "at rest", "characteristic": "valve_lash.intake", "lower": "0.25 mm", "count": "1",
    "every_hours": "500", "window_percent": "10", "layout": "inline", "cylinders": "4", "quantity": "length",
    "resolution": "0.01 mm", "shows": "9999", "until_on": "2030-01-01", "done_on": "2026-01-01", "minutes": "5",
    "from_at": "2026-01-01T10:00", "fitted_at": "2026-01-01T10:00", "taken_off_at": "2026-01-01T10:00",
    "calibrated_on": "2026-01-01", "client_id": "7d8f2a52-7f0c-4d0c-9c9b-0d6f4d3b9a01", "station": "1.intake",
    "shown_sha256": "0" * 64, "rows": "1", "station-0": "1.intake", "found-0": "0.3", "is_technician": "on",
    "why-0": TAG, "client-0": "7d8f2a52-7f0c-4d0c-9c9b-0d6f4d3b9a02",
}  # fmt: skip


def ids_in(shop: Shop) -> dict[str, object]:
    """Fields that pick a row, each with a row of a shop; and one odd number more."""
    rows = {"gauge": Gauge, "engine": Engine, "copied_from": Engine, "task": Task, "to_person": Person,
            "measured_by": Person, "part": Part, "interval": Interval, "intervals": Interval, "meter": Meter}  # fmt: skip
    told = {name: model.objects.filter(shop=shop).values_list("pk", flat=True).first() for name, model in rows.items()}
    return {name: pk for name, pk in told.items() if pk} | {"back": "²"}


def posted(clients: dict[str, Client], shop: Shop, *bodies: dict[str, object]) -> list[tuple]:
    """Post every body to every address that names rows of a shop; gives who was answered what."""
    answers = []
    for name, route in addresses(get_resolver()):
        for told in numbers_for(route, shop, most=1) if name != "people:sign_out" else ():
            address = reverse(name, kwargs=told)
            answers += [(address, role, client.post(address, body).status_code)
                        for role, client in clients.items() for body in bodies]  # fmt: skip
    return answers


@pytest.mark.django_db
def test_nobody_and_no_stranger_changes_what_is_ours(two_shops):
    ours, theirs, _here, there = two_shops
    sensible = dict.fromkeys(WORDS, "told by a stranger") | SENSIBLE | ids_in(ours)
    nobody = {"nobody": Client(raise_request_exception=False)}
    strangers = signed_in(there)
    before, all_before = rows_of(ours), every_row()

    answers = posted(nobody, ours, {}, sensible)
    assert every_row() == all_before
    assert [one for one in answers if one[2] == 403 or one[2] >= 500] == []
    answers = posted(strangers, ours, {}, sensible)
    assert rows_of(ours) == before
    assert [one for one in answers if one[2] >= 500] == []
    assert mixed_rows() == []
    assert rows_of(theirs) != {}


@pytest.mark.django_db
def test_no_post_of_ours_breaks_a_page_or_reaches_into_another_shop(two_shops):
    ours, theirs, here, _there = two_shops
    clients, before = signed_in(here), rows_of(theirs)
    words = dict.fromkeys(WORDS, TAG) | SENSIBLE
    typed_into = (
        (Engine, "name"),
        (Gauge, "title"),
        (Part, "note"),
        (Person, "name"),
        (WorkOrder, "title"),
        (Task, "title"),
    )
    for model, field in typed_into:
        for row in model.objects.filter(shop=ours):
            model.objects.filter(pk=row.pk).update(**{field: f"{row.pk} {TAG}"})

    answers = posted(clients, ours, {}, words | ids_in(theirs), words)
    assert [one for one in answers if one[2] >= 500] == []
    assert rows_of(theirs) == before
    assert mixed_rows() == []
    pages = [reverse(name, kwargs=told) for name, route in addresses(get_resolver())
             for told in numbers_for(route, ours, most=1) if not route.endswith((".pdf", ".csv"))]  # fmt: skip
    seen = {page: asked(clients["supervisor"], page) for page in pages}
    assert [page for page, (status, said) in seen.items() if TAG[:3] in said or status >= 500] == []
    assert sum("&lt;i&gt;" in said for _status, said in seen.values()) > 20


@pytest.mark.django_db
def test_nobody_sees_what_is_not_theirs(capsys, two_shops):
    ours, _theirs, here, there = two_shops
    secrets = [*Engine.objects.filter(shop=ours).values_list("name", flat=True),
               *Gauge.objects.filter(shop=ours).values_list("title", flat=True),
               *(person.name for person in here.values()), ours.name]  # fmt: skip
    clients = {(where, role): client for where, persons in (("here", here), ("there", there))
               for role, client in signed_in(persons).items()}  # fmt: skip
    table, leaks, tried = [], [], 0
    for name, route in addresses(get_resolver()):
        for told in numbers_for(route, ours, most=2):
            address = reverse(name, kwargs=told)
            row = {}
            for (where, role), client in clients.items():
                status, words = asked(client, address)
                tried += 1
                row[where, role] = status
                if where == "there" and (
                    told
                    and status not in (403, 404, 405)
                    or (name not in PUBLIC and any(one in words for one in secrets))
                ):
                    leaks.append((address, where, role, status))
                if where == "here" and status >= 500:
                    leaks.append((address, where, role, status))
            status, words = asked(Client(), address)
            tried += 1
            row["nobody", ""] = status
            if status == 403 or (name not in PUBLIC and any(one in words for one in secrets)):
                leaks.append((address, "nobody", "", status))
            table.append((address, row))
    with capsys.disabled():
        print(f"\n{'address':<52} {'tech':>5} {'sup':>5} {'tool':>5} {'witn':>5} {'nobody':>7}   another shop")
        for address, row in table:
            own = " ".join(f"{row['here', role]:>5}" for role in ROLES)
            print(f"{address:<52} {own} {row['nobody', '']:>7}   {' '.join(str(row['there', role]) for role in ROLES)}")
        print(f"{tried} times asked, {len(leaks)} leaks")
    assert leaks == []


def test_every_number_in_an_address_is_one_of_a_row_that_is_tried():
    pieces = {piece for _, route in addresses(get_resolver()) for piece in PIECE.findall(route)}

    assert pieces <= ROWS.keys()
