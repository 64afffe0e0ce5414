"""Parts with a mark of their own, and the positions they sit at for a while."""

from django.db import models
from django.utils.translation import gettext_lazy as _

from logbook.people.models import OfShop, ShopRows

from .engine import Engine


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
    """A part at a position of an engine, from one meter reading to the next; without an hour meter no hours are known."""

    part = models.ForeignKey(Part, models.PROTECT, related_name="fittings")
    engine = models.ForeignKey(Engine, models.PROTECT, related_name="fittings")
    position = models.CharField(_("position, such as cylinder 3"), max_length=40)
    fitted_at = models.DateTimeField(_("fitted"))
    fitted_total = models.FloatField(_("engine hours when fitted"), null=True, blank=True)
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
                | models.Q(taken_off_at__gte=models.F("fitted_at")),
                name="fitting_ends_after_it_begins",
                violation_error_message=_("A part is taken off after it was fitted."),
            ),
            models.CheckConstraint(
                condition=models.Q(taken_off_total=None)
                | models.Q(fitted_total=None)
                | models.Q(taken_off_total__gte=models.F("fitted_total")),
                name="fitting_ends_at_no_fewer_hours",
                violation_error_message=_("A part is taken off at no fewer engine hours than it was fitted at."),
            ),
        ]
