"""An engine as its papers describe it, and the times it was out of service."""

from django.core.validators import MaxValueValidator, MinValueValidator
from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.people.models import OfShop, Person, ShopRows

POSITIVE = [MinValueValidator(0.001)]


class Engine(OfShop):
    """A four-stroke engine as its papers describe it; what is blank isn't known, and isn't assumed."""

    class Layout(models.TextChoices):
        INLINE = "inline", _("inline")
        VEE = "vee", _("vee")
        FLAT = "flat", _("flat")

    class Ignition(models.TextChoices):
        SPARK = "spark", _("spark")
        COMPRESSION = "compression", _("compression")

    class Adjustment(models.TextChoices):
        SCREW = "screw", _("screw and locknut")
        SHIM = "shim", _("shims")
        HYDRAULIC = "hydraulic", _("hydraulic")

    class Duty(models.TextChoices):
        LIFE_SAVING = "life_saving", _("life-saving")
        STANDBY = "standby", _("standby")
        SERVICE = "service", _("service")

    class End(models.TextChoices):
        FREE_END = "free_end", _("free end")
        FLYWHEEL = "flywheel", _("flywheel end")

    class Turning(models.TextChoices):
        CLOCKWISE = "clockwise", _("clockwise")
        ANTICLOCKWISE = "anticlockwise", _("anticlockwise")

    class Side(models.TextChoices):
        LEFT = "left", _("left")
        RIGHT = "right", _("right")

    name = models.CharField(_("name"), max_length=80)
    serial = models.CharField(_("serial or shop mark"), max_length=80, blank=True)
    duty = models.CharField(_("duty"), max_length=12, choices=Duty, default=Duty.SERVICE)
    service = models.CharField(_("kind of service, such as industrial"), max_length=40, blank=True)
    layout = models.CharField(_("layout"), max_length=6, choices=Layout)
    cylinders = models.PositiveSmallIntegerField(
        _("cylinders"), validators=[MinValueValidator(1), MaxValueValidator(40)]
    )
    numbered_from = models.CharField(_("cylinder 1 is at the"), max_length=8, choices=End, default=End.FREE_END)
    banks = models.JSONField(_("banks"), null=True, blank=True)
    first_bank = models.CharField(
        _("the first bank is, seen from the flywheel, on the"), max_length=5, choices=Side, default=Side.LEFT
    )
    firing_order = models.JSONField(_("firing order"), null=True, blank=True)
    firing_angles = models.JSONField(_("firing angles, where uneven"), null=True, blank=True)
    turning = models.CharField(_("turns"), max_length=13, choices=Turning, blank=True)
    seen_from = models.CharField(_("seen from the"), max_length=8, choices=End, default=End.FLYWHEEL)
    ignition = models.CharField(_("ignition"), max_length=11, choices=Ignition, blank=True)
    bore_mm = models.FloatField(_("bore [mm]"), null=True, blank=True, validators=POSITIVE)
    stroke_mm = models.FloatField(_("stroke [mm]"), null=True, blank=True, validators=POSITIVE)
    rod_length_mm = models.FloatField(_("rod length [mm]"), null=True, blank=True, validators=POSITIVE)
    compression_ratio = models.FloatField(_("compression ratio"), null=True, blank=True, validators=POSITIVE)
    rated_speed_rpm = models.FloatField(_("rated speed [rpm]"), null=True, blank=True, validators=POSITIVE)
    intake_valves = models.PositiveSmallIntegerField(_("intake valves a cylinder"), default=1)
    exhaust_valves = models.PositiveSmallIntegerField(_("exhaust valves a cylinder"), default=1)
    bridges = models.BooleanField(_("valves worked in pairs over bridges"), default=False)
    adjustment = models.CharField(_("lash is set by"), max_length=9, choices=Adjustment, blank=True)
    screw_pitch_mm = models.FloatField(_("screw pitch [mm]"), null=True, blank=True, validators=POSITIVE)
    screw_ratio = models.FloatField(_("valve movement per screw movement"), default=1.0, validators=POSITIVE)
    left_hand_thread = models.BooleanField(_("left-hand thread"), default=False)
    intake_opens_btdc = models.FloatField(_("intake opens, ° before TDC"), null=True, blank=True)
    intake_closes_abdc = models.FloatField(_("intake shuts, ° after BDC"), null=True, blank=True)
    exhaust_opens_bbdc = models.FloatField(_("exhaust opens, ° before BDC"), null=True, blank=True)
    exhaust_closes_atdc = models.FloatField(_("exhaust shuts, ° after TDC"), null=True, blank=True)
    created_at = models.DateTimeField(_("kept since"))

    objects = ShopRows.as_manager()

    EVENTS = ("intake_opens_btdc", "intake_closes_abdc", "exhaust_opens_bbdc", "exhaust_closes_atdc")

    class Meta:
        ordering = ["name"]
        constraints = [
            models.UniqueConstraint(
                fields=["shop", "name"],
                name="engine_name_once_a_shop",
                violation_error_message=_("An engine of this name is here already."),
            ),
            models.CheckConstraint(
                condition=models.Q(cylinders__gte=1, cylinders__lte=40),
                name="engine_cylinders_1_to_40",
                violation_error_message=_("An engine has 1 to 40 cylinders."),
            ),
        ]

    def __str__(self) -> str:
        return self.name

    @property
    def events(self) -> dict[str, float] | None:
        """Valve events, when all four are known."""
        told = {name: getattr(self, name) for name in self.EVENTS}
        return None if None in told.values() else told

    def as_document(self) -> dict[str, object]:
        """The engine as `assess` reads it; what isn't known is left out."""
        train = {
            "adjustment": self.adjustment, "screw_ratio": self.screw_ratio,
            "screw_pitch": self.screw_pitch_mm and f"{self.screw_pitch_mm:.12g} mm",
            "thread": "left" if self.left_hand_thread else "", "bridges": self.bridges, "events": self.events,
        }  # fmt: skip
        told = {
            "name": self.name, "layout": self.layout, "cylinders": self.cylinders, "ignition": self.ignition,
            "firing_order": self.firing_order, "firing_angles": self.firing_angles, "banks": self.banks,
            "bore": self.bore_mm and f"{self.bore_mm:.12g} mm", "stroke": self.stroke_mm and f"{self.stroke_mm:.12g} mm",
            "rod_length": self.rod_length_mm and f"{self.rod_length_mm:.12g} mm",
            "compression_ratio": self.compression_ratio,
            "rated_speed": self.rated_speed_rpm and f"{self.rated_speed_rpm:.12g} rpm",
            "valves_per_cylinder": {"intake": self.intake_valves, "exhaust": self.exhaust_valves},
            "valve_train": {name: value for name, value in train.items() if value}, "service": self.service,
            "turning": self.turning, "seen_from": self.seen_from, "numbered_from": self.numbered_from,
        }  # fmt: skip
        return {name: value for name, value in told.items() if value}


class OutOfService(OfShop):
    """A time an engine was out of service: from when, until when, who was told, what stood in."""

    engine = models.ForeignKey(Engine, models.PROTECT, related_name="times_out")
    from_at = models.DateTimeField(_("from"))
    until_at = models.DateTimeField(_("until"), null=True, blank=True)
    who_was_told = models.CharField(_("who was told"), max_length=200)
    what_stood_in = models.CharField(_("what stood in"), max_length=200, blank=True)
    recorded_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    recorded_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["-from_at"]
        constraints = [
            models.CheckConstraint(
                condition=models.Q(until_at=None) | models.Q(until_at__gt=models.F("from_at")),
                name="out_of_service_ends_after_it_begins",
                violation_error_message=_("The end must come after the beginning."),
            )
        ]
