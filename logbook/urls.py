"""Which room answers which address."""

from django.urls import include, path

ROOMS = ("people", "engines", "gauges", "work", "bench", "review", "desk")
urlpatterns = [path("", include(f"logbook.{room}.urls")) for room in ROOMS]

handler400 = "logbook.core.errors.not_understood"
handler403 = "logbook.core.errors.not_allowed"
handler404 = "logbook.core.errors.not_found"
handler500 = "logbook.core.errors.gone_wrong"
