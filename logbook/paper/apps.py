"""The room's entry in Django's list of apps."""

from django.apps import AppConfig


class PaperConfig(AppConfig):
    name = "logbook.paper"
