"""Service intervals and deferrals, work orders with their tasks, and the locks that a task stands under."""

from django.core.validators import MinValueValidator
from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.engines.models import Engine, Part
from logbook.people.models import OfShop, Person, ShopRows

ONE = [MinValueValidator(1)]
INSIDE = ("technician", "supervisor", "toolroom")  # roles of who works in the shop; a witness comes from outside


class Interval(OfShop):
    """A job that comes due again: by hours, days, starts or distance, whichever comes first."""

    engine = models.ForeignKey(Engine, models.PROTECT, related_name="intervals")
    title = models.CharField(_("job"), max_length=120)
    kind = models.CharField(_("measures"), max_length=40, blank=True)
    every_hours = models.FloatField(_("every [h]"), null=True, blank=True, validators=ONE)
    every_days = models.PositiveIntegerField(_("every [days]"), null=True, blank=True, validators=ONE)
    every_starts = models.PositiveIntegerField(_("every [starts]"), null=True, blank=True, validators=ONE)
    every_km = models.FloatField(_("every [km]"), null=True, blank=True, validators=ONE)
    window_percent = models.PositiveSmallIntegerField(_("window ± [%]"), default=10)
    opens = models.CharField(_("cover or stop it shares"), max_length=80, blank=True)
    is_stopped = models.BooleanField(_("no longer kept"), default=False)

    objects = ShopRows.as_manager()

    LENGTHS = {"h": "every_hours", "d": "every_days", "starts": "every_starts", "km": "every_km"}

    class Meta:
        ordering = ["engine__name", "title"]
        constraints = [
            models.UniqueConstraint(
                fields=["engine", "title"],
                name="interval_title_once_an_engine",
                violation_error_message=_("This engine has a job of this name already."),
            ),
            models.CheckConstraint(
                condition=models.Q(every_hours__isnull=False) | models.Q(every_days__isnull=False)
                | models.Q(every_starts__isnull=False) | models.Q(every_km__isnull=False),
                name="interval_counts_something",
                violation_error_message=_("Say how often: by hours, days, starts or distance."),
            ),
        ]  # fmt: skip

    def __str__(self) -> str:
        return f"{self.engine} · {self.title}"


class Done(OfShop):
    """A job of an interval done: when, and at how many hours, starts or kilometres in all."""

    interval = models.ForeignKey(Interval, models.PROTECT, related_name="times_done")
    done_at = models.DateTimeField(_("done"))
    totals = models.JSONField(_("meters then, by what they count"), default=dict)
    counts_from = models.JSONField(_("where the next is counted from, by what it counts"), default=dict)
    work_order = models.ForeignKey("WorkOrder", models.PROTECT, null=True, blank=True, related_name="jobs_done")
    recorded_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    recorded_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["-done_at", "-pk"]


class Deferral(OfShop):
    """A job put off: who, why, until when."""

    interval = models.ForeignKey(Interval, models.PROTECT, related_name="deferrals")
    until_on = models.DateField(_("until"))
    reason = models.CharField(_("why"), max_length=300)
    deferred_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    deferred_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["-deferred_at"]
        constraints = [
            models.CheckConstraint(
                condition=~models.Q(reason=""),
                name="deferral_says_why",
                violation_error_message=_("Say why it is put off."),
            )
        ]


class WorkOrderRows(ShopRows):
    """Work orders of one shop."""

    def seen_by(self, person: Person) -> "WorkOrderRows":
        """Work orders a person may see: their shop's; for who only witnesses, those with stations to be witnessed."""
        rows = super().seen_by(person)
        if not person.is_authenticated or person.has_role(*INSIDE):
            return rows
        return rows.filter(
            models.Exists(Task.objects.filter(work_order=models.OuterRef("pk")).exclude(witnessed_stations=[]))
        )


class WorkOrder(OfShop):
    """A job on an engine or on loose parts; its states and their moves are the table in `work.states`."""

    class State(models.TextChoices):
        PLANNED = "planned", _("planned")
        AT_THE_BENCH = "at_the_bench", _("at the bench")
        STOPPED_SHORT = "stopped_short", _("stopped short")
        TO_DECIDE = "to_decide", _("to decide")
        SIGNED = "signed", _("signed")
        DROPPED = "dropped", _("dropped")

    number = models.PositiveIntegerField(_("number"))
    engine = models.ForeignKey(Engine, models.PROTECT, null=True, blank=True, related_name="work_orders")
    part = models.ForeignKey(Part, models.PROTECT, null=True, blank=True, related_name="work_orders")
    title = models.CharField(_("job"), max_length=120)
    state = models.CharField(_("state"), max_length=13, choices=State, default=State.PLANNED)
    intervals = models.ManyToManyField(Interval, blank=True, related_name="work_orders")
    opened_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    opened_at = models.DateTimeField(_("opened"))
    at_bench_since = models.DateTimeField(null=True, blank=True)
    finished_at = models.DateTimeField(_("measuring finished"), null=True, blank=True)
    crank_at = models.CharField(_("crank stands at"), max_length=60, blank=True)

    objects = WorkOrderRows.as_manager()

    class Meta:
        ordering = ["-number"]
        constraints = [
            models.UniqueConstraint(fields=["shop", "number"], name="work_order_number_once_a_shop"),
            models.CheckConstraint(
                condition=models.Q(engine__isnull=False, part=None) | models.Q(engine=None, part__isnull=False),
                name="work_order_is_for_an_engine_or_a_part",
                violation_error_message=_("A work order is for an engine or for a loose part, one of the two."),
            ),
        ]

    def __str__(self) -> str:
        return f"{self.number} · {self.title}"


class Move(OfShop):
    """A work order going from one state to another: by whom, when, why."""

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="moves")
    from_state = models.CharField(max_length=13, choices=WorkOrder.State, blank=True)
    to_state = models.CharField(max_length=13, choices=WorkOrder.State)
    reason = models.CharField(_("why"), max_length=300, blank=True)
    moved_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    moved_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["moved_at", "pk"]


class Task(OfShop):
    """One thing to do on a work order: a kind of measurement, or other work; with the lock state it needs."""

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="tasks")
    place = models.PositiveSmallIntegerField(_("order"))
    title = models.CharField(_("task"), max_length=120)
    kind = models.CharField(_("measures"), max_length=40, blank=True)
    lock_state = models.CharField(_("state of the engine it needs"), max_length=20)
    started_at = models.DateTimeField(null=True, blank=True)
    done_at = models.DateTimeField(null=True, blank=True)
    done_by = models.ForeignKey(Person, models.PROTECT, null=True, blank=True, related_name="+")
    minutes = models.PositiveIntegerField(_("time taken [min]"), null=True, blank=True)
    witnessed_stations = models.JSONField(_("stations to be witnessed"), default=list, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["place"]
        constraints = [
            models.UniqueConstraint(fields=["work_order", "place"], name="task_place_once_an_order"),
            models.CheckConstraint(
                condition=models.Q(done_at=None, done_by=None) | models.Q(done_at__isnull=False, done_by__isnull=False),
                name="task_done_says_by_whom",
            ),
        ]

    def __str__(self) -> str:
        return self.title


class Lock(OfShop):
    """A person's lock on a work order's engine; only that person lifts it."""

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="locks")
    state = models.CharField(_("state of the engine"), max_length=20)
    point = models.CharField(_("what is locked"), max_length=120)
    person = models.ForeignKey(Person, models.PROTECT, related_name="locks")
    taken_at = models.DateTimeField(_("taken"))
    lifted_at = models.DateTimeField(_("lifted"), null=True, blank=True)
    lifted_for = models.CharField(_("lifted for"), max_length=120, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["taken_at"]
        constraints = [
            models.UniqueConstraint(
                fields=["work_order", "person", "point"],
                condition=models.Q(lifted_at=None),
                name="lock_once_a_person_and_point",
                violation_error_message=_("Your lock is on this point already."),
            )
        ]


class PartUsed(OfShop):
    """A part used up on a job; what it costs is nobody's business here."""

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="parts_used")
    task = models.ForeignKey(Task, models.PROTECT, null=True, blank=True, related_name="parts_used")
    what = models.CharField(_("part"), max_length=160)
    count = models.FloatField(_("how many"), default=1.0, validators=[MinValueValidator(0.0)])
    used_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    used_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["used_at"]


class HandOver(OfShop):
    """A job handed from one technician to the next, with what stood open then."""

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="hand_overs")
    from_person = models.ForeignKey(Person, models.PROTECT, related_name="+")
    to_person = models.ForeignKey(Person, models.PROTECT, null=True, blank=True, related_name="+")
    told = models.TextField(_("what to know"), blank=True)
    open_items = models.JSONField(_("closing-up list then"), default=list)
    handed_at = models.DateTimeField()
    taken_at = models.DateTimeField(null=True, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["handed_at"]


class ClosingItem(OfShop):
    """Something a job left open that must be closed up: a cover off, a locknut loose, air on, the crank held."""

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="closing_items")
    what = models.CharField(_("what is open"), max_length=160)
    since_at = models.DateTimeField()
    opened_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    closed_at = models.DateTimeField(null=True, blank=True)
    closed_by = models.ForeignKey(Person, models.PROTECT, null=True, blank=True, related_name="+")
    explanation = models.CharField(_("why it stays open"), max_length=300, blank=True)
    explained_at = models.DateTimeField(null=True, blank=True)
    explained_by = models.ForeignKey(Person, models.PROTECT, null=True, blank=True, related_name="+")

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["since_at", "pk"]
        constraints = [
            models.UniqueConstraint(
                fields=["work_order", "what"], condition=models.Q(closed_at=None), name="closing_item_open_once"
            ),
            models.CheckConstraint(
                condition=models.Q(closed_at=None, closed_by=None)
                | models.Q(closed_at__isnull=False, closed_by__isnull=False),
                name="closing_item_closed_says_by_whom",
            ),
            models.CheckConstraint(
                condition=models.Q(explanation="", explained_at=None, explained_by=None)
                | (~models.Q(explanation="") & models.Q(explained_at__isnull=False, explained_by__isnull=False)),
                name="closing_item_explained_says_by_whom",
            ),
        ]
