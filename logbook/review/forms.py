"""What a supervisor types beside a decision, and what anybody types to sign."""

from django import forms
from django.utils.translation import gettext_lazy as _

from measurements.number import split_number
from measurements.sentence import Refusal

from .models import Decision, Signature

DAY = forms.DateInput(attrs={"type": "date"}, format="%Y-%m-%d")


class HoursField(forms.CharField):
    """Engine hours as typed, with the shop's decimal mark."""

    widget = forms.TextInput(attrs={"inputmode": "decimal", "autocomplete": "off"})
    decimal_mark: str | None = None

    def clean(self, value: str) -> float | None:
        """Read the hours.

        Raises
        ------
        ValidationError
            With the sentence of the grammar that the readings go by too.
        """
        typed = super().clean(value)
        if not typed:
            return None
        try:
            number, rest = split_number(typed, self.decimal_mark)
        except Refusal as refused:
            raise forms.ValidationError(str(refused)) from refused
        if rest not in ("", "h"):
            raise forms.ValidationError(_("Read “%(typed)s”: engine hours are a number alone, such as 4500.")
                                        % {"typed": typed[:40]})  # fmt: skip
        return float(number.exact)


class DecisionForm(forms.Form):
    """One decision; which of its fields belong to which decision is the service's to say."""

    choice = forms.ChoiceField(choices=Decision.Choice.choices)
    reason = forms.CharField(label=_("in a sentence"), max_length=500, required=False)
    conditions = forms.CharField(label=_("conditions"), max_length=500, required=False)
    agreed_for_owner_by = forms.CharField(label=_("who agreed for the owner"), max_length=120, required=False)
    ends_on = forms.DateField(label=_("last day"), required=False, widget=DAY, input_formats=["%Y-%m-%d"])
    ends_at_hours = HoursField(label=_("or engine hours"), required=False)

    def __init__(self, *args: object, decimal_mark: str | None = None, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.fields["ends_at_hours"].decimal_mark = decimal_mark
        self.fields["ends_on"].error_messages["invalid"] = _("The last day is written year-month-day, like 2026-11-30.")


class SignForm(forms.Form):
    """A signature: as what, which readings where it witnesses, the fingerprint of what was shown, the password again."""

    role = forms.ChoiceField(
        choices=Signature.Role.choices,
        error_messages={"required": _("Say what you sign as; nothing is chosen for you.")},
    )
    stations = forms.MultipleChoiceField(required=False)
    shown_sha256 = forms.CharField(max_length=64)
    password = forms.CharField(
        strip=False, error_messages={"required": _("Type your password again: it is your signature.")}
    )

    def __init__(self, *args: object, stations: list[str], **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.fields["stations"].choices = [(name, name) for name in stations]


class UndecidedForm(forms.Form):
    """On whose word an engine runs before a decision."""

    on_whose_word = forms.CharField(
        label=_("on whose word"), max_length=120, error_messages={"required": _("Say on whose word the engine runs.")}
    )
