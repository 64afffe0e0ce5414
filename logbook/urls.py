"""Which room answers which address."""

from django.urls import include, path

urlpatterns = [path("", include("logbook.desk.urls"))]

handler400 = "logbook.core.errors.not_understood"
handler403 = "logbook.core.errors.not_allowed"
handler404 = "logbook.core.errors.not_found"
handler500 = "logbook.core.errors.gone_wrong"
