"""The room's addresses."""

from django.urls import path

from .views import engines, limits, meters, parts

app_name = "engines"
ONE = "engines/<int:pk>/"
SHEET = f"{ONE}limits/<int:version>/"
LINE = f"{SHEET}lines/<int:line>/"
urlpatterns = [
    path("engines/", engines.engines, name="engines"),
    path("engines/new/", engines.new_engine, name="new_engine"),
    path(ONE, engines.engine, name="engine"),
    path(f"{ONE}change/", engines.change_engine, name="change_engine"),
    path(f"{ONE}out-of-service/", engines.out_of_service, name="out_of_service"),
    path(f"{ONE}out-of-service/new/", engines.new_out_of_service, name="new_out_of_service"),
    path(f"{ONE}out-of-service/<int:time_out>/", engines.change_out_of_service, name="change_out_of_service"),
    path(f"{ONE}meters/", meters.meters, name="meters"),
    path(f"{ONE}meters/new/", meters.new_meter, name="new_meter"),
    path(f"{ONE}meters/<int:meter>/read/", meters.read_meter, name="read_meter"),
    path(f"{ONE}meters/<int:meter>/replace/", meters.replace_meter, name="replace_meter"),
    path(f"{ONE}meters/readings/<int:reading>/correct/", meters.correct_reading, name="correct_reading"),
    path(f"{ONE}limits/", limits.limits, name="limits"),
    path(f"{ONE}limits/new/", limits.new_sheet, name="new_sheet"),
    path(SHEET, limits.sheet, name="sheet"),
    path(f"{SHEET}compare/", limits.compare, name="compare"),
    path(f"{SHEET}uncompared/", limits.uncompared, name="uncompared"),
    path(f"{SHEET}give-up/", limits.give_up, name="give_up"),
    path(f"{SHEET}lines/new/", limits.new_line, name="new_line"),
    path(f"{LINE}change/", limits.change_line, name="change_line"),
    path(f"{LINE}withdraw/", limits.withdraw_line, name="withdraw_line"),
    path(f"{LINE}photo/", limits.photo, name="photo"),
    path("parts/", parts.parts, name="parts"),
    path("parts/new/", parts.new_part, name="new_part"),
    path("parts/<int:pk>/", parts.part, name="part"),
    path("parts/<int:pk>/fit/", parts.fit_part, name="fit_part"),
    path("parts/<int:pk>/move/", parts.move_part, name="move_part"),
    path("parts/<int:pk>/take-off/", parts.take_off_part, name="take_off_part"),
]
