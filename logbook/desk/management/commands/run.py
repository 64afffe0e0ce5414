"""`manage.py run`: the demo on this machine, loaded when it isn't there; `make run` calls it."""

from django.core.management import call_command

from .serve import Command as Serve


class Command(Serve):
    help = "Opens the demo for this machine only, loads it first when it isn't there, and prints its address."

    def prepare(self) -> None:
        """Load the demo, unless it is here already; what was done in it is kept."""
        call_command("demo", stderr=self.stderr)
