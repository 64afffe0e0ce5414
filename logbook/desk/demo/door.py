"""What the sign-in page tells of a demo: who is in it, and the one password of all of them."""

import json
from functools import cache

from django.http import HttpRequest

from logbook.people.models import Person

from .story import FOLDER


def demo_door(request: HttpRequest) -> dict[str, object]:
    """Context processor: looked up only where a page asks; a real shop has nobody in it."""
    return {"demo_people": demo_people, "demo_password": demo_password}


def demo_people() -> list[Person]:
    """The persons of the demo's shop, as they stand in its file."""
    return list(Person.objects.filter(shop__is_demo=True, is_active=True).order_by("pk"))


@cache
def demo_password() -> str:
    """The password that the demo was loaded with."""
    return json.loads((FOLDER / "shop.json").read_text(encoding="utf-8"))["password"]
