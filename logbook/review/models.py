"""Decisions finding by finding, signatures bound to what was shown, and sealed sheets."""

from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.bench.models import Finding
from logbook.people.models import OfShop, Person, ShopRows
from logbook.work.models import WorkOrder


class Decision(OfShop):
    """What was decided on one finding; a later decision on it stands over an earlier one, which stays."""

    class Choice(models.TextChoices):
        PUT_RIGHT = "put_right", _("put right")
        MEASURE_AGAIN = "measure_again", _("measure again")
        MAY_RUN_UNTIL = "may_run_until", _("may run until …")
        KEEP_STOPPED = "keep_stopped", _("keep stopped")
        OTHER = "other", _("something else, with its reason")

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="decisions")
    finding = models.ForeignKey(Finding, models.PROTECT, null=True, blank=True, related_name="decisions")
    derived = models.CharField(_("derived value decided on: characteristic and station"), max_length=120, blank=True)
    choice = models.CharField(_("decision"), max_length=13, choices=Choice)
    reason = models.CharField(_("in a sentence"), max_length=500, blank=True)
    conditions = models.CharField(_("conditions"), max_length=500, blank=True)
    agreed_for_owner_by = models.CharField(_("who agreed for the owner"), max_length=120, blank=True)
    ends_on = models.DateField(_("until"), null=True, blank=True)
    ends_at_hours = models.FloatField(_("until engine hours"), null=True, blank=True)
    extends = models.OneToOneField("self", models.PROTECT, null=True, blank=True, related_name="extended_by")
    decided_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    decided_at = models.DateTimeField()

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["decided_at", "pk"]
        constraints = [
            models.CheckConstraint(
                condition=~models.Q(choice="may_run_until")
                | (~models.Q(agreed_for_owner_by="") & ~models.Q(conditions="")
                   & (models.Q(ends_on__isnull=False) | models.Q(ends_at_hours__isnull=False))),
                name="concession_has_conditions_an_agreement_and_an_end",
                violation_error_message=_("A concession says its conditions, who agreed for the owner, and when it ends."),
            ),
            models.CheckConstraint(
                condition=~models.Q(choice="other") | ~models.Q(reason=""),
                name="other_decision_says_why",
                violation_error_message=_("Say in a sentence what is decided and why."),
            ),
            models.CheckConstraint(
                condition=models.Q(finding__isnull=False, derived="") | (models.Q(finding=None) & ~models.Q(derived="")),
                name="decision_is_on_a_finding_or_a_derived_value",
            ),
        ]  # fmt: skip


class Signature(OfShop):
    """A name under a sheet, given by password, bound to exactly what was shown then."""

    class Role(models.TextChoices):
        MEASURED = "measured", _("measured")
        DECIDED = "decided", _("decided")
        WITNESSED = "witnessed", _("witnessed")

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="signatures")
    role = models.CharField(_("signed as"), max_length=9, choices=Role)
    person = models.ForeignKey(Person, models.PROTECT, related_name="+")
    signed_at = models.DateTimeField(_("signed"))
    shown_sha256 = models.CharField(_("fingerprint of what was shown"), max_length=64)
    shown = models.JSONField(_("what was shown"))
    stations = models.JSONField(_("readings witnessed"), default=list, blank=True)
    not_checked_by_second = models.BooleanField(_("not checked by a second person"), default=False)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["signed_at", "pk"]
        constraints = [
            models.UniqueConstraint(
                fields=["work_order", "role", "person"],
                name="signature_once_a_role_and_person",
                violation_error_message=_("You have signed this sheet in this role already."),
            )
        ]


class RunningUndecided(OfShop):
    """An engine put back before a decision: since when, on whose word."""

    work_order = models.ForeignKey(WorkOrder, models.PROTECT, related_name="running_undecided")
    since_at = models.DateTimeField(_("since"))
    on_whose_word = models.CharField(_("on whose word"), max_length=120)
    recorded_by = models.ForeignKey(Person, models.PROTECT, related_name="+")
    recorded_at = models.DateTimeField()
    ended_at = models.DateTimeField(_("ended"), null=True, blank=True)

    objects = ShopRows.as_manager()

    class Meta:
        ordering = ["-since_at"]


class SealedSheet(OfShop):
    """A job sheet drawn once and kept: its bytes, their fingerprint, the program's version."""

    work_order = models.OneToOneField(WorkOrder, models.PROTECT, related_name="sealed_sheet")
    sealed_at = models.DateTimeField()
    sha256 = models.CharField(_("fingerprint"), max_length=64)
    file = models.CharField(_("where it lies under the sheets"), max_length=200)
    version = models.CharField(_("program version"), max_length=40)

    objects = ShopRows.as_manager()
