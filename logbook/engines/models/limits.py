"""Limit sheets, version by version, and their lines."""

from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.people.models import OfShop, Person, ShopRows
from measurements.conformity import RULES

from .engine import Engine


class LimitSheet(OfShop):
    """One version of an engine's limits; it judges from the moment it comes into force, and never changes again."""

    engine = models.ForeignKey(Engine, models.PROTECT, related_name="limit_sheets")
    version = models.PositiveIntegerField(_("version"))
    entered_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    entered_at = models.DateTimeField()
    compared_by = models.ForeignKey(Person, models.PROTECT, null=True, blank=True, related_name="+")
    nobody_compared = models.CharField(_("why nobody else compared it"), max_length=300, blank=True)
    in_force_at = models.DateTimeField(_("in force since"), null=True, blank=True)
    note = models.CharField(_("what changed"), max_length=300, blank=True)
    given_up_at = models.DateTimeField(_("given up"), null=True, blank=True)
    given_up_because = models.CharField(_("why it was given up"), max_length=300, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["-version"]
        constraints = [
            models.UniqueConstraint(
                fields=["engine"],
                condition=models.Q(in_force_at=None, given_up_at=None),
                name="one_limit_sheet_in_preparation",
                violation_error_message=_(
                    "A limit sheet of this engine is in preparation; finish it or give it up first."
                ),
            ),
            models.CheckConstraint(
                condition=models.Q(given_up_at=None, given_up_because="")
                | (models.Q(given_up_at__isnull=False, in_force_at=None) & ~models.Q(given_up_because="")),
                name="limit_sheet_given_up_says_why_and_never_held",
                violation_error_message=_(
                    "Say why the sheet is given up; one in force can only be followed by another."
                ),
            ),
            models.UniqueConstraint(fields=["engine", "version"], name="limit_sheet_version_once"),
            models.CheckConstraint(
                condition=models.Q(in_force_at=None)
                | models.Q(compared_by__isnull=False)
                | ~models.Q(nobody_compared=""),
                name="limit_sheet_in_force_was_compared_or_says_not",
                violation_error_message=_(
                    "A second person compares the sheet with its source, or it says that nobody did."
                ),
            ),
            models.CheckConstraint(
                condition=models.Q(compared_by=None) | ~models.Q(compared_by=models.F("entered_by")),
                name="limit_sheet_compared_by_a_second_person",
                violation_error_message=_("Whoever entered the sheet can't be the one who compares it."),
            ),
        ]

    def __str__(self) -> str:
        return f"{self.engine} limit sheet {self.version}"

    @property
    def is_in_preparation(self) -> bool:
        """Tell whether lines can still be typed: it is neither in force nor given up."""
        return self.in_force_at is None and self.given_up_at is None


class StandingLines(models.Manager.from_queryset(ShopRows)):
    """Finds the lines that stand; those replaced or withdrawn while the sheet was in preparation stay in `every`.

    The default manager, so that whoever asks a sheet for its lines is given those that judge.
    """

    def get_queryset(self) -> ShopRows:
        return super().get_queryset().filter(replaced_by=None, is_withdrawn=False)


class LimitLine(OfShop):
    """One line of a limit sheet, its figures kept as typed, with their source."""

    sheet = models.ForeignKey(LimitSheet, models.PROTECT, related_name="lines")
    characteristic = models.CharField(_("what"), max_length=60)
    lower = models.CharField(_("lower limit"), max_length=40, blank=True)
    upper = models.CharField(_("upper limit"), max_length=40, blank=True)
    set_lower = models.CharField(_("set from"), max_length=40, blank=True)
    set_upper = models.CharField(_("set to"), max_length=40, blank=True)
    nominal = models.CharField(_("nominal"), max_length=40, blank=True)
    condition = models.CharField(_("holds"), max_length=60, blank=True)
    source = models.CharField(_("source: document, edition, page"), max_length=300)
    photo = models.ImageField(_("photo of the page"), upload_to="limits/", blank=True)
    decision_rule = models.CharField(
        _("its own rule"), max_length=10, blank=True, choices=[(rule, rule) for rule in RULES]
    )
    allows_for_gauge = models.BooleanField(_("the source already allows for the gauge"), default=False)
    provisional_by = models.CharField(_("provisional: author"), max_length=120, blank=True)
    provisional_grounds = models.CharField(_("provisional: grounds"), max_length=300, blank=True)
    provisional_until = models.DateField(_("provisional: until"), null=True, blank=True)
    reference_barometer = models.CharField(_("stated for a barometer of"), max_length=40, blank=True)
    replaces = models.OneToOneField("self", models.PROTECT, null=True, blank=True, related_name="replaced_by")
    is_withdrawn = models.BooleanField(default=False)

    objects = StandingLines()
    every = ShopRows.as_manager()

    FIGURES = ("lower", "upper", "set_lower", "set_upper", "nominal")

    class Meta:
        ordering = ["characteristic", "condition"]
        constraints = [
            models.CheckConstraint(
                condition=models.Q(provisional_by="", provisional_grounds="", provisional_until=None)
                | (
                    ~models.Q(provisional_by="")
                    & ~models.Q(provisional_grounds="")
                    & models.Q(provisional_until__isnull=False)
                ),
                name="provisional_limit_names_author_grounds_and_end",
                violation_error_message=_("A provisional limit names its author, its grounds and the day it ends."),
            ),
            models.CheckConstraint(
                condition=models.Q(is_withdrawn=False) | models.Q(replaces__isnull=False),
                name="withdrawn_line_names_what_it_withdraws",
                violation_error_message=_("A line is withdrawn by a row that names it."),
            ),
        ]

    TYPED = (
        "characteristic", *FIGURES, "condition", "source", "photo", "decision_rule", "allows_for_gauge", "provisional_by",
        "provisional_grounds", "provisional_until", "reference_barometer",
    )  # fmt: skip

    @property
    def stands(self) -> bool:
        """Tell whether it judges: it was neither replaced nor withdrawn, nor does it withdraw another."""
        return not self.is_withdrawn and not hasattr(self, "replaced_by")

    def as_document(self) -> dict[str, object]:
        """The line as `assess` reads it."""
        plain = (*self.FIGURES, "condition", "source", "decision_rule", "reference_barometer")
        told = {name: getattr(self, name) for name in plain}
        given = {name: value for name, value in told.items() if value}
        return {"characteristic": self.characteristic, **given} | (
            {"allows_for_gauge": True} if self.allows_for_gauge else {}
        )
