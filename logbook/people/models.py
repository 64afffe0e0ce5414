"""The shop and its persons: who measures, decides, keeps the gauges, witnesses."""

from django.contrib.auth.base_user import AbstractBaseUser, BaseUserManager
from django.db import models
from django.db.models.functions import Lower
from django.utils.translation import gettext_lazy as _

from measurements.conformity import GUARDED, RULES, SIMPLE

PROVEN = {"verbose_name": _("decision rule"), "max_length": 10, "choices": [(rule, rule) for rule in RULES]}
ROLES = ("technician", "supervisor", "toolroom", "witness")


class Shop(models.Model):
    """A workshop and its ways; every row of the logbook belongs to one."""

    class Paper(models.TextChoices):
        A4 = "A4", "A4"
        LETTER = "Letter", "Letter"

    class DecimalMark(models.TextChoices):
        POINT = ".", _("point, 0.30")
        COMMA = ",", _("comma, 0,30")

    class Units(models.TextChoices):
        METRIC = "metric", _("metric (mm, bar)")
        INCH = "inch", _("inch (in, psi)")

    name = models.CharField(_("name of the shop"), max_length=120)
    units = models.CharField(_("units"), max_length=6, choices=Units, default=Units.METRIC)
    decimal_mark = models.CharField(_("decimal mark"), max_length=1, choices=DecimalMark, default=DecimalMark.POINT)
    paper = models.CharField(_("paper"), max_length=6, choices=Paper, default=Paper.A4)
    time_zone = models.CharField(_("time zone"), max_length=64, default="UTC")
    decision_rule = models.CharField(**PROVEN, default=GUARDED)
    setting_rule = models.CharField(**{**PROVEN, "verbose_name": _("rule for setting zones")}, default=SIMPLE)
    barometer = models.CharField(_("usual barometer, as typed"), max_length=40, blank=True)
    is_demo = models.BooleanField(_("invented data"), default=False)
    created_at = models.DateTimeField(_("kept since"))

    class Meta:
        constraints = [
            models.CheckConstraint(
                condition=~models.Q(name=""),
                name="shop_has_a_name",
                violation_error_message=_("The shop needs a name: it stands on every sheet."),
            )
        ]

    def __str__(self) -> str:
        return self.name

    def keeps_rows(self) -> bool:
        """Tell whether anything but the shop's persons is kept yet: an engine, a gauge, a limit."""
        return any(rows._default_manager.filter(shop=self).exists() for rows in OfShop.__subclasses__())

    def as_document(self) -> dict[str, str]:
        """The shop's ways as `assess` reads them."""
        told = {"decimal_mark": self.decimal_mark, "decision_rule": self.decision_rule,
                "setting_decision_rule": self.setting_rule}  # fmt: skip
        return told | ({"barometer": self.barometer} if self.barometer else {})


class OfShop(models.Model):
    """A row that belongs to one shop and is seen by nobody outside it."""

    shop = models.ForeignKey(Shop, models.PROTECT, related_name="+", verbose_name=_("shop"))

    class Meta:
        abstract = True


class ShopRows(models.QuerySet):
    """Rows of one shop: every look-up of a page starts here."""

    def seen_by(self, person: "Person") -> "ShopRows":
        """Rows that a person may see: those of their shop; nobody's when they are not signed in."""
        if not person.is_authenticated or not person.is_active:
            return self.none()
        return self.filter(shop_id=person.shop_id)


class PersonRows(ShopRows):
    """Persons of a shop."""

    def who_may_decide(self) -> "PersonRows":
        """Supervisors who may sign in."""
        return self.filter(is_supervisor=True, is_active=True)


class People(BaseUserManager.from_queryset(PersonRows)):
    """Finds persons by the name they sign in with; capitals don't matter."""

    def get_by_natural_key(self, name: str) -> "Person":
        return self.get(name__iexact=name)


class Person(AbstractBaseUser):
    """Somebody known to the program by one name, which stands on every sheet they sign."""

    shop = models.ForeignKey(Shop, models.PROTECT, related_name="persons", verbose_name=_("shop"))
    name = models.CharField(
        _("name"),
        max_length=80,
        unique=True,
        error_messages={"unique": _("Somebody with this name is here already; add an initial or a number.")},
    )
    is_technician = models.BooleanField(_("technician: measures and keys"), default=False)
    is_supervisor = models.BooleanField(_("supervisor: opens jobs and decides"), default=False)
    is_toolroom = models.BooleanField(_("toolroom: keeps gauges and limit sheets"), default=False)
    is_witness = models.BooleanField(_("witness: for owner, insurer or surveyor"), default=False)
    is_active = models.BooleanField(
        _("may sign in"), default=True, help_text=_("Nobody is deleted: a person who left can no longer sign in.")
    )
    password_is_given = models.BooleanField(_("somebody else chose the password"), default=False)

    objects = People()

    USERNAME_FIELD = "name"
    REQUIRED_FIELDS = ["shop"]

    class Meta:
        verbose_name = _("person")
        verbose_name_plural = _("people")
        constraints = [
            models.CheckConstraint(
                condition=~models.Q(name=""),
                name="person_has_a_name",
                violation_error_message=_("A person needs a name: it stands on every sheet they sign."),
            ),
            models.CheckConstraint(
                condition=models.Q(is_technician=True) | models.Q(is_supervisor=True) | models.Q(is_toolroom=True)
                | models.Q(is_witness=True),
                name="person_has_a_role",
                violation_error_message=_("Tick at least one role: it says what this person may do."),
            ),
            models.UniqueConstraint(
                Lower("name"),
                name="person_name_once_whatever_the_capitals",
                violation_error_message=_("Somebody with this name is here already; add an initial or a number."),
            ),
        ]  # fmt: skip

    def __str__(self) -> str:
        return self.name

    def has_role(self, *roles: str) -> bool:
        """Tell whether the person has one of some roles."""
        return any(getattr(self, f"is_{role}") for role in roles)

    @property
    def roles(self) -> list[str]:
        """Roles in words."""
        return [role for role in ROLES if self.has_role(role)]


class WrongTries(models.Model):
    """Wrong passwords for one name from one address; kept apart from persons, for the name may be nobody's."""

    name = models.CharField(max_length=80)
    address = models.CharField(max_length=45)
    count = models.PositiveSmallIntegerField(default=0)
    last_at = models.DateTimeField()

    class Meta:
        constraints = [models.UniqueConstraint(fields=["name", "address"], name="wrong_tries_once_a_name_and_address")]


class FirstStart(models.Model):
    """The opening of this logbook: the table has room for one row, so of two tablets only one can open it."""

    room = models.PositiveSmallIntegerField(primary_key=True, default=1)
    opened_at = models.DateTimeField()

    class Meta:
        constraints = [models.CheckConstraint(condition=models.Q(room=1), name="first_start_happens_once")]
