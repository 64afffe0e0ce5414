"""The persons who measure, decide and sign."""

from django.contrib.auth.base_user import AbstractBaseUser, BaseUserManager
from django.db import models
from django.db.models.functions import Lower
from django.utils.translation import gettext_lazy as _


class People(BaseUserManager["Person"]):
    """Finds persons by the name they sign in with; capitals don't matter."""

    def get_by_natural_key(self, name: str) -> "Person":
        return self.get(name__iexact=name)


class Person(AbstractBaseUser):
    """Somebody known to the program by one name, which stands on every sheet they sign."""

    name = models.CharField(
        _("name"),
        max_length=80,
        unique=True,
        error_messages={"unique": _("Somebody with this name is here already; add an initial or a number.")},
    )
    is_active = models.BooleanField(
        _("may sign in"), default=True, help_text=_("Nobody is deleted: a person who left can no longer sign in.")
    )

    objects = People()

    USERNAME_FIELD = "name"

    class Meta:
        verbose_name = _("person")
        verbose_name_plural = _("people")
        constraints = [
            models.CheckConstraint(
                condition=~models.Q(name=""),
                name="person_has_a_name",
                violation_error_message=_("A person needs a name: it stands on every sheet they sign."),
            ),
            models.UniqueConstraint(
                Lower("name"),
                name="person_name_once_whatever_the_capitals",
                violation_error_message=_("Somebody with this name is here already; add an initial or a number."),
            ),
        ]

    def __str__(self) -> str:
        return self.name
