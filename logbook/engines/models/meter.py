"""Meters on engines and what they showed."""

from django.core.validators import MinValueValidator
from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.people.models import OfShop, Person, ShopRows

from .engine import Engine


class Meter(OfShop):
    """A meter on an engine, from its fitting until another takes its place; what it had run before is `engine_before`."""

    class Unit(models.TextChoices):
        HOURS = "h", _("hours")
        STARTS = "starts", _("starts")
        DISTANCE = "km", _("distance [km]")

    engine = models.ForeignKey(Engine, models.PROTECT, related_name="meters")
    unit = models.CharField(_("counts"), max_length=6, choices=Unit, default=Unit.HOURS)
    mark = models.CharField(_("serial or mark"), max_length=80, blank=True)
    shows_at_fitting = models.FloatField(_("showed when fitted"), default=0.0)
    engine_before = models.FloatField(_("engine had run before"), default=0.0)
    fitted_at = models.DateTimeField(_("fitted"))
    replaced_at = models.DateTimeField(_("replaced"), null=True, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["fitted_at"]
        constraints = [
            models.UniqueConstraint(
                fields=["engine", "unit"],
                condition=models.Q(replaced_at=None),
                name="one_meter_at_a_time",
                violation_error_message=_("The engine has a meter that counts this already; replace it instead."),
            )
        ]

    def engine_total(self, shows: float) -> float:
        """What the engine has run in all when this meter shows a value."""
        return self.engine_before + shows - self.shows_at_fitting


class MeterReadingRows(ShopRows):
    """Meter readings; those that stand are the ones that no other supersedes."""

    def standing(self) -> "MeterReadingRows":
        return self.filter(superseded_by=None)


class MeterReading(OfShop):
    """What a meter showed; a wrong one is superseded by another with the reason, never changed."""

    meter = models.ForeignKey(Meter, models.PROTECT, related_name="readings")
    shows = models.FloatField(_("shows"), validators=[MinValueValidator(0.0)])
    taken_at = models.DateTimeField(_("read"))
    recorded_at = models.DateTimeField()
    recorded_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    supersedes = models.OneToOneField("self", models.PROTECT, null=True, blank=True, related_name="superseded_by")
    reason = models.CharField(_("why the earlier one was wrong"), max_length=300, blank=True)
    remark = models.CharField(_("why it stands all the same"), max_length=300, blank=True)

    objects = MeterReadingRows.as_manager()

    class Meta:
        ordering = ["taken_at", "pk"]
        constraints = [
            models.CheckConstraint(
                condition=models.Q(supersedes=None, reason="")
                | (models.Q(supersedes__isnull=False) & ~models.Q(reason="")),
                name="meter_correction_has_a_reason",
                violation_error_message=_("Say why the earlier reading was wrong."),
            )
        ]

    @property
    def stands(self) -> bool:
        """Tell whether no other reading supersedes it."""
        return not hasattr(self, "superseded_by")

    @property
    def total(self) -> float:
        """What the engine had run in all."""
        return self.meter.engine_total(self.shows)
