"""The room's addresses."""

app_name = "review"
urlpatterns = []
