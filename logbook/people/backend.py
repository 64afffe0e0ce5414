"""Who is signed in: found with their shop in one look-up, for every page needs both."""

from django.contrib.auth.backends import ModelBackend

from .models import Person


class ByName(ModelBackend):
    """Signs persons in by name and password, and finds the one a session belongs to."""

    def get_user(self, user_id: int) -> Person | None:
        """Give the person of a session together with their shop; nobody once they may no longer sign in."""
        return Person.objects.select_related("shop").filter(pk=user_id, is_active=True).first()
