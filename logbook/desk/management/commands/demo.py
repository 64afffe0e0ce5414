"""`manage.py demo`: loads the invented shop into an empty database of its own."""

import os
import shutil
from datetime import UTC, date, datetime, time

from django.conf import settings
from django.core.management import BaseCommand, CommandError, CommandParser, call_command
from django.db import connection
from django.utils import timezone

from logbook.desk.demo.loading import AnotherShop, demo_is_here, load_demo
from logbook.desk.demo.story import StoryBroken

AFTERNOON = time(14, 0, tzinfo=UTC)


class Command(BaseCommand):
    help = "Loads the demo, an invented workshop, into an empty database; one that holds the demo stays as it is."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("--today", type=day, metavar="DATE", help="count its dates back from this day, YYYY-MM-DD")
        parser.add_argument("--afresh", action="store_true", help="throw the demo away first, with what was done in it")

    def handle(self, *, today: date | None, afresh: bool, **_: object) -> None:
        now = datetime.combine(today, AFTERNOON) if today else timezone.now()
        call_command("migrate", verbosity=0, interactive=False)
        try:
            is_here = demo_is_here()
            if is_here and afresh:
                throw_away()
                call_command("migrate", verbosity=0, interactive=False)
            elif is_here:
                return
            self.stderr.write("Loading the demo: three years of an invented workshop …")
            shop = load_demo(now)
        except (AnotherShop, StoryBroken) as refused:
            raise CommandError(str(refused)) from None
        self.stderr.write(f"The demo is loaded: {shop}. Everything in it is invented.")


def throw_away() -> None:
    """Remove the demo's own folder: database, sealed sheets, photos, key.

    Raises
    ------
    CommandError
        The database isn't the demo's own file, but one that DATABASE_URL names.
    """
    if not settings.DEMO or os.environ.get("DATABASE_URL"):
        raise CommandError(
            "The demo lies in a database that DATABASE_URL names; empty that one yourself, then load the demo again."
        )
    connection.close()
    shutil.rmtree(settings.HOME)
    settings.HOME.mkdir(parents=True)


def day(text: str) -> date:
    """Read a day as it is typed.

    >>> day("2026-05-02")
    datetime.date(2026, 5, 2)
    """
    try:
        return date.fromisoformat(text)
    except ValueError:
        raise CommandError(f"Read “{text}” for --today: write the day as YYYY-MM-DD, such as 2026-05-02.") from None
