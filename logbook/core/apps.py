"""The room's entry in Django's list of apps; registers the checks that run at every start."""

from django.apps import AppConfig


class CoreConfig(AppConfig):
    name = "logbook.core"

    def ready(self) -> None:
        from . import checks  # noqa: F401  (registers)
