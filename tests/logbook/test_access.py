"""Every address asked by every role and by another shop: nobody sees what isn't theirs; the table is printed."""

import re

import pytest
from django.test import Client
from django.urls import URLPattern, URLResolver, get_resolver, reverse
from django.utils import timezone

from logbook.bench.models import Measurement, Reading
from logbook.desk.demo.loading import load_demo
from logbook.engines.models import Engine, LimitLine, LimitSheet, Meter, MeterReading, OutOfService, Part
from logbook.gauges.models import Calibration, Gauge
from logbook.people.models import Person, Shop
from logbook.work.models import ClosingItem, HandOver, Interval, Lock, Task, WorkOrder
from tests.factories import make_person, make_shop

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


@pytest.mark.django_db
def test_nobody_sees_what_is_not_theirs(capsys):
    ours = load_demo(timezone.now())
    theirs = make_shop("Other works on another lake")
    here = {role: next(one for one in Person.objects.filter(shop=ours) if one.has_role(role)) for role in ROLES}
    there = {role: make_person(theirs, f"Stranger {role}", role) for role in ROLES}
    secrets = [*Engine.objects.values_list("name", flat=True), *Gauge.objects.values_list("title", flat=True),
               *(person.name for person in here.values()), ours.name]  # fmt: skip
    clients = {}
    for where, persons in (("here", here), ("there", there)):
        for role, person in persons.items():
            clients[where, role] = Client()
            clients[where, role].force_login(person)
    table, leaks, tried = [], [], 0
    for name, route in addresses(get_resolver()):
        for told in numbers_for(route, ours):
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
