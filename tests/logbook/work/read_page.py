"""What the tests of this room's pages share: an interval, a page's text, what a page says at its top."""

from html import unescape

from logbook.work.models import Interval


def kept(engine, title="Oil", **more):
    return Interval.objects.create(shop=engine.shop, engine=engine, title=title, **{"every_days": 180, **more})


def text(response):
    return " ".join(unescape(response.content.decode()).split())


def said(response):
    return [str(message) for message in response.context["messages"]]
