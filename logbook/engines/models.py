"""Engines, their meters, the parts that sit in them for a while, and their limit sheets."""

from django.core.validators import MaxValueValidator, MinValueValidator
from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.people.models import OfShop, Person, ShopRows
from measurements.conformity import RULES

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


class MeterReading(OfShop):
    """What a meter showed; a wrong one is superseded by another with the reason, never changed."""

    meter = models.ForeignKey(Meter, models.PROTECT, related_name="readings")
    shows = models.FloatField(_("shows"), validators=[MinValueValidator(0.0)])
    taken_at = models.DateTimeField(_("read"))
    recorded_at = models.DateTimeField()
    recorded_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    supersedes = models.OneToOneField("self", models.PROTECT, null=True, blank=True, related_name="superseded_by")
    reason = models.CharField(_("why the earlier one was wrong"), max_length=300, blank=True)

    objects = ShopRows.as_manager()

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
    def total(self) -> float:
        """What the engine had run in all."""
        return self.meter.engine_total(self.shows)


class Part(OfShop):
    """A part with a serial or shop mark: it can be measured off the engine, and carries its own hours."""

    class Kind(models.TextChoices):
        HEAD = "head", _("cylinder head")
        LINER = "liner", _("liner")
        PISTON = "piston", _("piston")
        SHELL = "shell", _("bearing shell")
        INJECTOR = "injector", _("injector")
        PUMP = "pump", _("injection pump")

    kind = models.CharField(_("part"), max_length=8, choices=Kind)
    mark = models.CharField(_("serial or shop mark"), max_length=80)
    note = models.CharField(_("note"), max_length=300, blank=True)
    hours_when_new_here = models.FloatField(_("hours it had run when it came"), default=0.0)
    created_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["kind", "mark"]
        constraints = [
            models.UniqueConstraint(
                fields=["shop", "kind", "mark"],
                name="part_mark_once_a_shop",
                violation_error_message=_("A part of this kind with this mark is here already."),
            )
        ]

    def __str__(self) -> str:
        return f"{self.get_kind_display()} {self.mark}"


class Fitting(OfShop):
    """A part at a position of an engine, from one meter reading to the next."""

    part = models.ForeignKey(Part, models.PROTECT, related_name="fittings")
    engine = models.ForeignKey(Engine, models.PROTECT, related_name="fittings")
    position = models.CharField(_("position, such as cylinder 3"), max_length=40)
    fitted_at = models.DateTimeField(_("fitted"))
    fitted_total = models.FloatField(_("engine hours when fitted"))
    taken_off_at = models.DateTimeField(_("taken off"), null=True, blank=True)
    taken_off_total = models.FloatField(_("engine hours when taken off"), null=True, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["fitted_at"]
        constraints = [
            models.UniqueConstraint(
                fields=["part"],
                condition=models.Q(taken_off_at=None),
                name="part_in_one_place_at_a_time",
                violation_error_message=_("This part still sits in an engine; take it off there first."),
            ),
            models.CheckConstraint(
                condition=models.Q(taken_off_at=None, taken_off_total=None)
                | models.Q(taken_off_at__gte=models.F("fitted_at"), taken_off_total__gte=models.F("fitted_total")),
                name="fitting_ends_after_it_begins",
                violation_error_message=_("A part is taken off after it was fitted, at no fewer hours."),
            ),
        ]


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

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["-version"]
        constraints = [
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

    objects = ShopRows.as_manager()

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
            )
        ]

    def as_document(self) -> dict[str, object]:
        """The line as `assess` reads it."""
        told = {name: getattr(self, name) for name in (*self.FIGURES, "condition", "source", "decision_rule")}
        given = {name: value for name, value in told.items() if value}
        return {"characteristic": self.characteristic, **given} | (
            {"allows_for_gauge": True} if self.allows_for_gauge else {}
        )
