"""Addresses of the bench."""

from django.urls import path

from . import table, views

app_name = "bench"
AT = "jobs/<int:number>/bench/<int:task>/"
urlpatterns = [
    path(AT, views.bench, name="bench"),
    path(f"{AT}open/", views.open_pass, name="open"),
    path(f"{AT}read/", views.read, name="read"),
    path(f"{AT}act/", views.act, name="act"),
    path(f"{AT}turn/", views.turn, name="turn"),
    path(f"{AT}finish/", views.finish, name="finish"),
    path(f"{AT}table/", table.table, name="table"),
    path(f"{AT}passes/<int:measurement>/", views.conditions, name="conditions"),
    path(f"{AT}readings/<int:reading>/", views.reading, name="reading"),
]
