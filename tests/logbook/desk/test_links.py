"""Every page a role can reach by links: each link leads somewhere it may go, one h1 a page, nothing from another host."""

import re
from collections import Counter

import pytest
from django.test import Client
from django.urls import resolve
from django.utils import timezone

from logbook.desk.demo.loading import load_demo
from logbook.people.models import Person

ROLES = ("technician", "supervisor", "toolroom", "witness")
LINK = re.compile(r'<a\b[^>]*\bhref="([^"]*)"')
ALIKE = 3  # pages of one address that are looked at; the others are made by the same code


@pytest.mark.django_db
def test_no_role_meets_a_link_it_may_not_follow_and_every_page_has_one_heading():
    shop = load_demo(timezone.now())
    faults, seen = [], Counter()
    for role in ROLES:
        person = next(one for one in Person.objects.filter(shop=shop) if one.roles == [role])
        client = Client()
        client.force_login(person)
        for address, status, page in walk(client):
            seen[role] += 1
            if status not in (200, 302):
                faults.append((role, address, status))
            elif page is not None and page.count("<h1") != 1:
                faults.append((role, address, f"{page.count('<h1')} headings"))
            elif page is not None and re.search(r'(?:href|src|action)="(?:https?:)?//', page):
                faults.append((role, address, "leads to another host"))
    assert faults == []
    assert min(seen[role] for role in ROLES) > 10, seen


def walk(client: Client):
    """Follow links from the first page, a few of each kind of address: (address, status, page of HTML or None)."""
    waiting, known, kinds = ["/"], {"/"}, Counter()
    while waiting:
        address = waiting.pop()
        answer = client.get(address)
        is_page = answer.status_code == 200 and answer.headers["Content-Type"].startswith("text/html")
        page = answer.content.decode() if is_page else None
        yield address, answer.status_code, page
        found = LINK.findall(page) if page else [answer.headers["Location"]] if answer.status_code == 302 else []
        for link in found:
            link = link.replace("&amp;", "&").split("#")[0]
            path = link.split("?")[0]
            if not link.startswith("/") or path.startswith("/static/") or path.endswith(".pdf") or link in known:
                continue
            name = resolve(path).view_name
            known.add(link)
            kinds[name] += 1
            if kinds[name] <= ALIKE:
                waiting.append(link)
