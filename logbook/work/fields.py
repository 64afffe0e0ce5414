"""Numbers as a person types them into a form: with the shop's decimal mark, kept as typed when they can't be read."""

from fractions import Fraction

from django import forms
from django.core.exceptions import ValidationError
from django.utils.translation import gettext as _

from logbook.people.models import Shop
from measurements.number import shown, split_number
from measurements.sentence import Refusal

MILE = Fraction("1.609344")  # km; international yard and pound agreement of 1959


class NumberField(forms.CharField):
    """A number above zero, or zero where that is allowed.

    Attributes
    ----------
    units : mapping
        Units that may be written behind it, each with its size in the field's own unit.
    """

    def __init__(
        self, *args: object, units: dict[str, Fraction] | None = None, whole: bool = False, or_none: bool = False, **more: object,
    ) -> None:  # fmt: skip
        super().__init__(*args, **more)
        self.units, self.whole, self.or_none, self.decimal_mark = units or {}, whole, or_none, None
        self.widget.attrs |= {"inputmode": "numeric" if whole else "decimal", "autocomplete": "off"}

    def clean(self, value: str) -> float | int | None:
        text = super().clean(value).strip()
        if not text:
            return None
        try:
            number, unit = split_number(text, self.decimal_mark)
        except Refusal as refusal:
            raise ValidationError(_(refusal.sentence.template).format(**refusal.sentence.values)) from None
        if unit and unit.casefold() not in self.units:
            told = {"read": shown(text), "unit": shown(unit), "units": ", ".join(self.units) or _("none")}
            raise ValidationError(
                _("Read “%(read)s” with “%(unit)s” behind the number; units known here: %(units)s.") % told
            )
        exact = number.exact * self.units.get(unit.casefold(), 1)
        if exact == 0 and not self.or_none:
            raise ValidationError(_("Read “%(read)s”: it must be more than zero.") % {"read": shown(text)})
        if self.whole and exact.denominator != 1:
            raise ValidationError(_("Read “%(read)s”: write a whole number.") % {"read": shown(text)})
        return int(exact) if self.whole else float(exact)

    def prepare_value(self, value: object) -> object:
        """Write a kept number the way the shop does."""
        if isinstance(value, float | int) and not isinstance(value, bool):
            return f"{value:.12g}".replace(".", self.decimal_mark or ".")
        return value


class ShopForm(forms.Form):
    """A form whose numbers are read with its shop's decimal mark."""

    def __init__(self, *args: object, shop: Shop, **more: object) -> None:
        super().__init__(*args, label_suffix="", **more)
        self.shop = shop
        for field in self.fields.values():
            if isinstance(field, NumberField):
                field.decimal_mark = shop.decimal_mark
