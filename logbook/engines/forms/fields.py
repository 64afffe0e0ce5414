"""Fields that are read by the measuring library's own grammar: figures with a unit, orders, banks, angles, moments."""

import re

from django import forms
from django.core.exceptions import ValidationError
from django.utils.translation import gettext as _

from logbook.engines.words import in_words
from logbook.engines.written import written
from logbook.people.models import Shop
from measurements.entry import Field, Reading, read_entry
from measurements.number import shown
from measurements.sentence import Refusal
from measurements.units import convert, find_unit

BETWEEN = re.compile(r"\s*(?:[-\u2010-\u2015\u2212,;>]|\s)\s*")
MOMENT = "%Y-%m-%dT%H:%M"


class ShopForm(forms.Form):
    """A form whose figures are read with the shop's decimal mark; `asked` shows the field for a remark."""

    asked = False

    def __init__(self, *args: object, shop: Shop, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        read_with_the_marks_of(self, shop)

    @property
    def shown_fields(self) -> list[forms.BoundField]:
        """Its fields; the remark only where something was asked, or was remarked already."""
        hides_remark = not (self.asked or self.data.get("remark"))
        return [field for field in self.visible_fields() if not (field.name == "remark" and hides_remark)]


def read_with_the_marks_of(form: forms.BaseForm, shop: Shop) -> None:
    """Tell every figure of a form the shop's decimal mark and units."""
    for field in form.fields.values():
        if isinstance(field, FigureField | AnglesField):
            field.shop = shop


class FigureField(forms.CharField):
    """One figure with its unit as a person types it; it comes out as a number in `unit`.

    A figure without a unit is taken in the unit shown beside the field: in a shop that works in inches, lengths in inches.
    """

    def __init__(self, dimension: str, unit: str, *, signed: bool = False, **more: object) -> None:
        self.dimension, self.unit, self.signed, self.shop = dimension, unit, signed, Shop()
        super().__init__(max_length=40, **more)
        self.widget.attrs |= {"inputmode": "decimal", "autocomplete": "off"}

    @property
    def unit_beside(self) -> str:
        """The unit taken where none is typed; empty for plain numbers."""
        if self.dimension == "length" and self.shop.units == Shop.Units.INCH:
            return "in"
        return "" if self.unit == "1" else self.unit

    def prepare_value(self, value: object) -> object:
        """A stored number is written with its unit, unless that stands beside the field; what was typed stays as typed."""
        if not isinstance(value, int | float):
            return value
        unit = "" if self.unit in ("1", self.unit_beside) else f" {self.unit}"
        return written(value, self.shop.decimal_mark) + unit

    def clean(self, value: object) -> float | None:
        text = super().clean(value)
        return read_figure(text, self, str(self.label or _("the figure")).lower()) if text else None


def read_figure(text: str, field: FigureField, name: str) -> float:
    """Read one exact figure, in the field's own unit."""
    try:
        asked = Field(field.dimension, field.unit_beside or "1", name, signed=field.signed)
        reading = only(read_entry(text, asked, decimal_mark=field.shop.decimal_mark).readings, text)
        return float(convert(reading.value, reading.unit, find_unit(field.unit, field.dimension)))
    except Refusal as refusal:
        raise ValidationError(in_words(refusal.sentence)) from refusal


def only(readings: tuple[Reading, ...], text: str) -> Reading:
    """The one reading; repeats, a bracket or a bound are refused."""
    if len(readings) > 1 or readings[0].bound or readings[0].half_width is not None:
        raise Refusal("Read “{read}”; one figure belongs here.", read=shown(text))
    return readings[0]


class OrderField(forms.CharField):
    """Cylinders in sequence, typed 1-3-4-2; empty when it isn't known."""

    def prepare_value(self, value: object) -> object:
        return "-".join(map(str, value)) if isinstance(value, list) else value

    def clean(self, value: object) -> list[int] | None:
        text = super().clean(value)
        return numbers_in(text) if text else None


class BanksField(forms.CharField):
    """Cylinders bank by bank, typed 1-2-3 / 4-5-6; empty when it isn't known."""

    def prepare_value(self, value: object) -> object:
        return " / ".join("-".join(map(str, bank)) for bank in value) if isinstance(value, list) else value

    def clean(self, value: object) -> list[list[int]] | None:
        text = super().clean(value)
        return [numbers_in(bank) for bank in text.split("/")] if text else None


def numbers_in(text: str) -> list[int]:
    """Cylinder numbers with a dash, comma or space between them."""
    words = [word for word in BETWEEN.split(text.strip()) if word]
    if strange := next((word for word in words if not re.fullmatch("[0-9]{1,3}", word)), None):
        raise ValidationError(
            _("Read “%(read)s” where a cylinder's number belongs; write them with a dash between, such as 1-3-4-2.")
            % {"read": shown(strange)}
        )
    return [int(word) for word in words]


class AnglesField(forms.CharField):
    """Firing angles in degrees with a space or a semicolon between, typed 0 90 270 360; empty when firing is even."""

    shop = Shop()

    def prepare_value(self, value: object) -> object:
        return "; ".join(written(one, self.shop.decimal_mark) for one in value) if isinstance(value, list) else value

    def clean(self, value: object) -> list[float] | None:
        text = super().clean(value)
        if not text:
            return None
        one = FigureField("angle", "°")
        one.shop = self.shop
        return [read_figure(word, one, _("firing angle")) for word in re.split(r"\s*;\s*|\s+", text.strip(" ;"))]


def moment_field(label: str, *, required: bool = True, help_text: str = "") -> forms.DateTimeField:
    """A moment by the shop's own clock."""
    widget = forms.DateTimeInput({"type": "datetime-local"}, format=MOMENT)
    return forms.DateTimeField(label=label, required=required, help_text=help_text, widget=widget)
