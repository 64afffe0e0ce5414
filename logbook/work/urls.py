"""The room's addresses."""

app_name = "work"
urlpatterns = []
