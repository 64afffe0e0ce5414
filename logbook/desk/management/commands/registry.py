"""`manage.py registry`: builds the unit registry and ends; `make bench` takes it as the floor under `assess`."""

from django.core.management import BaseCommand

from measurements.units import registry


class Command(BaseCommand):
    help = "Builds the registry of units and ends: what any command that reads units costs."
    requires_system_checks = ()

    def handle(self, **_: object) -> None:
        registry()
