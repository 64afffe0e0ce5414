"""The room's addresses."""

app_name = "bench"
urlpatterns = []
