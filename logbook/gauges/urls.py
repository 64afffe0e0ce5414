"""The room's addresses."""

app_name = "gauges"
urlpatterns = []
