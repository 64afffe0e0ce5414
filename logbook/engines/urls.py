"""The room's addresses."""

app_name = "engines"
urlpatterns = []
