"""`manage.py serve`: a real shop's logbook on this machine, ready to use; `make serve` calls it."""

import errno
import socket

import waitress
from django.conf import settings
from django.core.management import BaseCommand, CommandError, CommandParser, call_command
from django.core.wsgi import get_wsgi_application

from logbook.people.models import Person
from logbook.people.start_code import make_code

FIRST_PORT, LAST_PORT = 8000, 8099
LOOPBACK = "127.0.0.1"
THREADS = 8
# In production a proxy on this machine speaks TLS; unheard, its word for that would send every page round in circles.
BEHIND_TLS = {"trusted_proxy": LOOPBACK, "trusted_proxy_headers": {"x-forwarded-proto"}}


class Command(BaseCommand):
    help = "Opens a shop's logbook for this machine only, and prints its address. Ctrl-C stops it."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("--port", type=int, help=f"this port; without it the first free one from {FIRST_PORT} on")

    def handle(self, *, port: int | None, **_: object) -> None:
        self.prepare()
        call_command("collectstatic", verbosity=0, interactive=False)
        door = open_door(range(FIRST_PORT, LAST_PORT + 1) if port is None else [port])
        application = get_wsgi_application()
        address = f"http://{LOOPBACK}:{door.getsockname()[1]}/"
        self.stdout.write(f"Engine bench logbook: {address}   (Ctrl-C stops it)")
        if not Person.objects.exists():
            self.stdout.write(how_to_open(address))
        self.stdout.flush()
        waitress.serve(
            application, sockets=[door], threads=THREADS, _quiet=True, **(BEHIND_TLS if settings.PRODUCTION else {})
        )

    def prepare(self) -> None:
        """Bring the database up to date before the door opens."""
        call_command("migrate", verbosity=0, interactive=False)


def how_to_open(address: str) -> str:
    """Make the code that opens an empty logbook, and say where to give it."""
    code = make_code(settings.HOME)
    return f"Nobody is known in this logbook yet. Open it at {address}first-start/ with the code {code}"


def open_door(ports: range | list[int]) -> socket.socket:
    """Give a socket bound to the first of `ports` that nothing else has taken.

    Raises
    ------
    CommandError
        None is free, or the system allows none.
    """
    for port in ports:
        door = socket.socket(socket.AF_INET, socket.SOCK_STREAM)
        door.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
        try:
            door.bind((LOOPBACK, port))
            door.listen()
            return door
        except (OSError, OverflowError) as error:
            door.close()
            if getattr(error, "errno", None) != errno.EADDRINUSE:
                raise CommandError(f"Port {port} can't be opened: {error}. Name another with --port.") from None
    raise CommandError(
        f"No free port among {ports[0]} to {ports[-1]}. Stop what runs there, or name another with --port."
    )
