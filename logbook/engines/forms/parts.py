"""What is typed about parts and where they sit."""

from django import forms
from django.utils.translation import gettext_lazy as _

from logbook.engines.models import Engine, Part
from logbook.people.models import Person, Shop

from .fields import FigureField, ShopForm, moment_field, read_with_the_marks_of
from .meters import remark, shows

METER_HELP = _("recorded as a reading; empty: the last reading counts")


class PartForm(forms.ModelForm):
    """A part with a mark of its own."""

    hours_when_new_here = FigureField("time", "h", label=_("hours it had run when it came"), initial=0.0)

    class Meta:
        model = Part
        fields = ("kind", "mark", "hours_when_new_here", "note")
        help_texts = {"mark": _("as it is stamped or painted on the part")}

    def __init__(self, *args: object, shop: Shop, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.instance.shop = shop
        read_with_the_marks_of(self, shop)


class FitPartForm(ShopForm):
    """Where a part is fitted, and when."""

    engine = forms.ModelChoiceField(Engine.objects.none(), label=_("engine"))
    position = forms.CharField(label=_("position"), max_length=40, help_text=_("such as cylinder 3, or main 2 upper"),
                               widget=forms.TextInput({"list": "positions", "autocomplete": "off"}))  # fmt: skip
    fitted_at = moment_field(_("fitted"))
    meter_shows = shows("h", _("the engine's hour meter shows"), required=False, help_text=METER_HELP)
    remark = remark()

    def __init__(self, *args: object, person: Person, **kwargs: object) -> None:
        super().__init__(*args, shop=person.shop, **kwargs)
        self.fields["engine"].queryset = Engine.objects.seen_by(person)


class MovePartForm(FitPartForm):
    """Where a part is moved to, and when: taken off there and fitted here in one act."""

    left_meter_shows = shows("h", _("hour meter of the engine it leaves shows"), required=False, help_text=METER_HELP)
    field_order = ("engine", "position", "fitted_at", "left_meter_shows", "meter_shows", "remark")

    def __init__(self, *args: object, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.fields["fitted_at"].label = _("moved")
        self.fields["meter_shows"].label = _("hour meter of the engine it comes to shows")


class TakeOffForm(ShopForm):
    """When a part is taken off."""

    taken_off_at = moment_field(_("taken off"))
    meter_shows = shows("h", _("the engine's hour meter shows"), required=False, help_text=METER_HELP)
    remark = remark()
