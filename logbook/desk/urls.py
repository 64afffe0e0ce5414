"""The desk's addresses."""

from django.urls import path

from . import views

app_name = "desk"
urlpatterns = [path("", views.first, name="first")]
