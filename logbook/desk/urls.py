"""The desk's addresses."""

from django.urls import path

from . import search_views, views

app_name = "desk"
urlpatterns = [
    path("", views.home, name="home"),
    path("example/", views.example, name="example"),
    path("search/", search_views.search, name="search"),
]
