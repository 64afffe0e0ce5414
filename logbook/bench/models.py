"""What was read at the bench: passes, readings, acts, and what each reading was found to be."""

from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.gauges.models import Gauge
from logbook.people.models import OfShop, Person, ShopRows
from logbook.work.models import Task


class Tablet(OfShop):
    """A tablet a shift shares; its sequence orders what was keyed on it."""

    name = models.CharField(_("tablet"), max_length=80)
    key = models.UUIDField(unique=True)
    last_sequence = models.PositiveBigIntegerField(default=0)

    objects = ShopRows.as_manager()


class Measurement(OfShop):
    """One pass over the stations of a task with one method: as found or as left, one gauge, stated conditions."""

    class Phase(models.TextChoices):
        AS_FOUND = "as_found", _("as found")
        AS_LEFT = "as_left", _("as left")

    task = models.ForeignKey(Task, models.PROTECT, related_name="measurements")
    kind = models.CharField(_("kind"), max_length=40)
    phase = models.CharField(_("pass"), max_length=8, choices=Phase)
    gauge = models.ForeignKey(Gauge, models.PROTECT, null=True, blank=True, related_name="measurements")
    conditions = models.JSONField(_("conditions, as typed"), default=dict, blank=True)
    engine_hours = models.FloatField(_("engine hours"), null=True, blank=True)
    opened_at = models.DateTimeField()
    opened_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    closed_at = models.DateTimeField(null=True, blank=True)
    derived = models.JSONField(_("derived findings, kept when closed"), default=list)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["opened_at", "pk"]

    def __str__(self) -> str:
        return f"{self.kind} {self.get_phase_display()}"


class ReadingRows(ShopRows):
    """Readings of one shop, and which of them stand."""

    def standing(self) -> "ReadingRows":
        """Readings that nothing has taken the place of and that strike nothing out."""
        return self.filter(is_strike=False, superseded_by__isnull=True)


class FindingRows(ShopRows):
    """Findings of one shop, and which of them stand."""

    def standing(self) -> "FindingRows":
        """The last finding of every station of a pass, as long as a reading stands there."""
        beside = {"measurement": models.OuterRef("measurement"), "station": models.OuterRef("station")}
        later = Finding.objects.filter(**beside, pk__gt=models.OuterRef("pk"))
        return self.filter(~models.Exists(later), models.Exists(Reading.objects.standing().filter(**beside)))


class Reading(OfShop):
    """One answer at one station, as typed; never changed or deleted. A correction is another that supersedes it."""

    measurement = models.ForeignKey(Measurement, models.PROTECT, related_name="readings")
    client_id = models.UUIDField(_("made once on the tablet: a double tap is one reading"), unique=True)
    station = models.CharField(_("station"), max_length=60)
    typed = models.CharField(_("as typed"), max_length=200, blank=True)
    not_measured = models.CharField(_("why not measured"), max_length=300, blank=True)
    measured_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    keyed_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    taken_at = models.DateTimeField(_("taken, by the tablet's clock"))
    recorded_at = models.DateTimeField(_("recorded, by the server's clock"))
    tablet = models.ForeignKey(Tablet, models.PROTECT, null=True, blank=True, related_name="+")
    sequence = models.PositiveBigIntegerField(_("sequence on the tablet"), default=0)
    supersedes = models.OneToOneField("self", models.PROTECT, null=True, blank=True, related_name="superseded_by")
    reason = models.CharField(_("why the earlier one is superseded or struck"), max_length=300, blank=True)
    is_strike = models.BooleanField(_("strikes the earlier one without a new value"), default=False)
    slip_asked = models.JSONField(_("the slip that was asked about"), null=True, blank=True)
    slip_answer = models.CharField(_("the answer"), max_length=20, blank=True)

    objects = ReadingRows.as_manager()

    class Meta:
        ordering = ["recorded_at", "pk"]
        constraints = [
            models.CheckConstraint(
                condition=models.Q(is_strike=True, typed="", not_measured="")
                | (models.Q(is_strike=False) & (~models.Q(typed="") ^ ~models.Q(not_measured=""))),
                name="reading_is_a_value_or_a_reason",
                violation_error_message=_("A reading is a value, or a reason why it was not measured."),
            ),
            models.CheckConstraint(
                condition=models.Q(supersedes=None, is_strike=False)
                | (models.Q(supersedes__isnull=False) & ~models.Q(reason="")),
                name="reading_correction_has_a_reason",
                violation_error_message=_("Say why the earlier reading is struck or replaced."),
            ),
        ]


class Finding(OfShop):
    """What a station was found to be: the judgement as `assess` gave it, kept with the reading that called for it."""

    measurement = models.ForeignKey(Measurement, models.PROTECT, related_name="findings")
    reading = models.OneToOneField(Reading, models.PROTECT, related_name="finding")
    station = models.CharField(max_length=60)
    characteristic = models.CharField(max_length=60)
    verdict = models.CharField(max_length=10)
    chance_within = models.FloatField(null=True, blank=True)
    judgement = models.JSONField(_("all of it"))
    limit_sheet = models.ForeignKey("engines.LimitSheet", models.PROTECT, null=True, blank=True, related_name="+")

    objects = FindingRows.as_manager()

    class Meta:
        ordering = ["pk"]


class Act(OfShop):
    """What was done at a station between as found and as left: a turn of the screw, a shim, another part."""

    task = models.ForeignKey(Task, models.PROTECT, related_name="acts")
    client_id = models.UUIDField(unique=True)
    station = models.CharField(max_length=60)
    what = models.CharField(_("what was done"), max_length=200)
    done_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    done_at = models.DateTimeField()
    recorded_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["done_at", "pk"]
