"""Gauges and setting masters: what they can tell, when they were calibrated, and what was found."""

from django.core.validators import MinValueValidator
from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.core.figures import figure
from logbook.people.models import OfShop, Person, ShopRows


class Gauge(OfShop):
    """A gauge or setting master; its figures are kept as typed."""

    class Quantity(models.TextChoices):
        LENGTH = "length", _("length")
        PRESSURE = "pressure", _("pressure")
        RATIO = "ratio", _("share [%]")
        TEMPERATURE = "temperature", _("temperature")
        TORQUE = "torque", _("torque")
        SPEED = "rotational_speed", _("speed of turning")

    mark = models.CharField(_("shop mark"), max_length=40)
    title = models.CharField(_("what it is"), max_length=120)
    quantity = models.CharField(_("measures"), max_length=20, choices=Quantity)
    resolution = models.CharField(_("smallest step"), max_length=40, blank=True)
    range_lower = models.CharField(_("range from"), max_length=40, blank=True)
    range_upper = models.CharField(_("range to"), max_length=40, blank=True)
    max_permissible_error = models.CharField(_("permissible error ±, without certificate"), max_length=40, blank=True)
    repeatability = models.CharField(_("repeatability s, from a repeat study"), max_length=40, blank=True)
    repeatability_dof = models.PositiveIntegerField(_("its degrees of freedom"), null=True, blank=True)
    is_setting_master = models.BooleanField(_("setting master"), default=False)
    orifice_diameter = models.CharField(_("tester's orifice"), max_length=40, blank=True)
    supply_pressure = models.CharField(_("tester's supply"), max_length=40, blank=True)
    interval_days = models.PositiveIntegerField(
        _("calibrated every [days]"), null=True, blank=True, validators=[MinValueValidator(1)]
    )
    retired_at = models.DateTimeField(_("retired"), null=True, blank=True)
    created_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["mark"]
        constraints = [
            models.UniqueConstraint(
                fields=["shop", "mark"],
                name="gauge_mark_once_a_shop",
                violation_error_message=_("A gauge with this mark is here already."),
            )
        ]

    def __str__(self) -> str:
        return f"{self.mark} {self.title}"


class Calibration(OfShop):
    """One calibration of a gauge: never changed; a wrong entry is superseded with a reason."""

    gauge = models.ForeignKey(Gauge, models.PROTECT, related_name="calibrations")
    calibrated_on = models.DateField(_("calibrated on"))
    due_on = models.DateField(_("due again on"), null=True, blank=True)
    certificate = models.CharField(_("certificate"), max_length=120, blank=True)
    expanded_uncertainty = models.CharField(_("expanded uncertainty U"), max_length=40, blank=True)
    coverage_factor = models.FloatField(
        _("coverage factor k"), null=True, blank=True, validators=[MinValueValidator(1.0)]
    )
    errors = models.JSONField(_("errors found, each at its point"), default=list, blank=True)
    has_failed = models.BooleanField(_("failed"), default=False)
    recorded_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    recorded_at = models.DateTimeField()
    supersedes = models.OneToOneField("self", models.PROTECT, null=True, blank=True, related_name="superseded_by")
    reason = models.CharField(_("why the earlier entry was wrong"), max_length=300, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["-calibrated_on", "-pk"]
        constraints = [
            models.CheckConstraint(
                condition=models.Q(expanded_uncertainty="", coverage_factor=None)
                | (~models.Q(expanded_uncertainty="") & models.Q(coverage_factor__isnull=False)),
                name="calibration_uncertainty_with_its_factor",
                violation_error_message=_("U and its coverage factor k stand on the certificate together; give both."),
            ),
            models.CheckConstraint(
                condition=models.Q(due_on=None) | models.Q(due_on__gt=models.F("calibrated_on")),
                name="calibration_due_after_it_was_done",
                violation_error_message=_("The next calibration is due after this one."),
            ),
            models.CheckConstraint(
                condition=models.Q(supersedes=None, reason="")
                | (models.Q(supersedes__isnull=False) & ~models.Q(reason="")),
                name="calibration_correction_has_a_reason",
                violation_error_message=_("Say why the earlier entry was wrong."),
            ),
        ]

    @property
    def uncertainty(self) -> str:
        """U with its coverage factor, as the certificate states them; empty when it states none."""
        if not self.expanded_uncertainty:
            return ""
        return f"{self.expanded_uncertainty} (k = {figure(self.coverage_factor, decimal_mark=self.gauge.shop.decimal_mark)})"

    def in_words(self) -> str:
        """The calibration in a line, for sheets: certificate, day, U, result, next day."""
        told = [
            self.certificate,
            self.calibrated_on.isoformat(),
            self.uncertainty and f"U = {self.uncertainty}",
            _("failed") if self.has_failed else "",
            self.due_on and _("due %(on)s") % {"on": self.due_on.isoformat()},
        ]
        return ", ".join(str(part) for part in told if part)
