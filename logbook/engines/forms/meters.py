"""What is typed about meters and what they show."""

from django import forms
from django.utils.translation import gettext_lazy as _

from logbook.engines.models import Meter
from logbook.people.models import Shop

from .fields import FigureField, ShopForm, moment_field

DIMENSIONS = {"h": ("time", "h"), "starts": ("count", "1"), "km": ("distance", "km")}
REMARK = _("why it stands all the same")


def shows(unit: str, label: str, **more: object) -> FigureField:
    """What a meter shows, in its own unit."""
    return FigureField(*DIMENSIONS[unit], label=label, **more)


def remark() -> forms.CharField:
    """Shown once a reading was asked about."""
    return forms.CharField(label=REMARK, max_length=300, required=False)


class FitMeterForm(ShopForm):
    """A meter fitted to an engine that has none for this unit; figures are plain numbers of what it counts."""

    unit = forms.ChoiceField(label=_("counts"), choices=Meter.Unit.choices)
    mark = forms.CharField(label=_("serial or mark"), max_length=80, required=False)
    fitted_at = moment_field(_("fitted"), help_text=_("or since when it is known what it shows"))
    shows = FigureField("count", "1", label=_("it showed then"), initial=0)
    engine_before = FigureField("count", "1", label=_("the engine had run before, in all"), initial=0,
                                help_text=_("the same as the meter shows, where it was on the engine from new"))  # fmt: skip


class ReadMeterForm(ShopForm):
    """What a meter shows now, or showed at a moment."""

    def __init__(self, *args: object, meter: Meter, shop: Shop, **kwargs: object) -> None:
        super().__init__(*args, shop=shop, **kwargs)
        self.fields = {
            "shows": shows(meter.unit, _("the meter shows")), "remark": remark(), "taken_at": moment_field(_("read")),
        }  # fmt: skip
        self.fields["shows"].shop = shop


class CorrectReadingForm(ShopForm):
    """The right reading in place of a wrong one."""

    def __init__(self, *args: object, meter: Meter, shop: Shop, **kwargs: object) -> None:
        super().__init__(*args, shop=shop, **kwargs)
        self.fields = {
            "shows": shows(meter.unit, _("the meter really showed")), "remark": remark(),
            "taken_at": moment_field(_("read")),
            "reason": forms.CharField(label=_("why the earlier reading was wrong"), max_length=300),
        }  # fmt: skip
        self.fields["shows"].shop = shop


class ReplaceMeterForm(ShopForm):
    """Another meter in a meter's place, in one act."""

    def __init__(self, *args: object, meter: Meter, shop: Shop, **kwargs: object) -> None:
        super().__init__(*args, shop=shop, **kwargs)
        self.fields = {
            "last_shows": shows(meter.unit, _("the old meter's last reading"),
                                help_text=_("where it can't be read any more: the last that is known")),
            "remark": remark(),
            "new_shows": shows(meter.unit, _("the new meter's first reading"), initial=0),
            "new_mark": forms.CharField(label=_("the new meter's serial or mark"), max_length=80, required=False),
            "replaced_at": moment_field(_("replaced")),
        }  # fmt: skip
        for name in ("last_shows", "new_shows"):
            self.fields[name].shop = shop
