"""The room's addresses."""

app_name = "people"
urlpatterns = []
