"""The room's addresses."""

from django.urls import path

from . import views

app_name = "gauges"
urlpatterns = [
    path("gauges/", views.gauges, name="gauges"),
    path("gauges/new/", views.new_gauge, name="new_gauge"),
    path("gauges/<int:pk>/", views.gauge, name="gauge"),
    path("gauges/<int:pk>/change/", views.change_gauge, name="change_gauge"),
    path("gauges/<int:pk>/retire/", views.retire_gauge, name="retire_gauge"),
    path("gauges/<int:pk>/bring-back/", views.bring_back_gauge, name="bring_back_gauge"),
    path("gauges/<int:pk>/calibrations/new/", views.new_calibration, name="new_calibration"),
    path("gauges/<int:pk>/calibrations/<int:calibration>/correct/", views.correct_calibration, name="correct_calibration"),
]  # fmt: skip
