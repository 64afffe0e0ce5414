"""The forms of the bench: how a pass is taken, one answer, an act, a correction."""

from collections.abc import Iterable, Mapping
from uuid import uuid4

from django import forms
from django.utils.translation import gettext as _
from django.utils.translation import gettext_lazy

from logbook.gauges.models import Gauge
from logbook.people.models import Person
from measurements.kind import COMMON_CONDITIONS, Kind, MethodCondition

from .models import Measurement
from .slips import ANSWERS

REASONS = (
    gettext_lazy("no access"), gettext_lazy("seized"), gettext_lazy("part missing or off"),
    gettext_lazy("gauge failed"), gettext_lazy("not asked for"),
)  # fmt: skip
NUMBER = {"inputmode": "decimal", "autocomplete": "off"}


class GaugeChoice(forms.ModelChoiceField):
    """A gauge to pick, with what speaks against it beside its name."""

    def label_from_instance(self, gauge: Gauge) -> str:
        if gauge.standing_failed:
            return _("%(gauge)s: failed its calibration") % {"gauge": gauge}
        if gauge.standing_due_on and gauge.standing_due_on < self.today:
            return _("%(gauge)s: past due since %(due)s") % {"gauge": gauge, "due": gauge.standing_due_on.isoformat()}
        return str(gauge)


class PassForm(forms.Form):
    """How a pass is taken: phase, gauge, and the conditions its kind declares; what is left empty isn't said."""

    phase = forms.ChoiceField(label=gettext_lazy("Pass"), choices=Measurement.Phase.choices)
    gauge = GaugeChoice(Gauge.objects.none(), label=gettext_lazy("Gauge"), required=False,
                        empty_label=gettext_lazy("none named"))  # fmt: skip
    engine_hours = forms.FloatField(
        label=gettext_lazy("Engine hours now"), required=False, min_value=0,
        widget=forms.TextInput(attrs=NUMBER), error_messages={"invalid": gettext_lazy("Write the hours as a number.")},
    )  # fmt: skip

    def __init__(
        self,
        kind: Kind,
        gauges: Iterable[Gauge],
        today: object,
        *args: object,
        states: Iterable[str] = (),
        **kwargs: object,
    ) -> None:
        super().__init__(*args, **kwargs)
        self.kind = kind
        self.fields["gauge"].queryset = gauges
        self.fields["gauge"].today = today
        for condition in sorted(kind.conditions, key=lambda one: one.name != "state"):
            self.fields[f"how_{condition.name}"] = field_for(condition, states)

    @classmethod
    def of(cls, measurement: Measurement, kind: Kind, *args: object, **more: object) -> "PassForm":
        """The form of a pass that is open: its conditions alone, as they were said."""
        said = {
            f"how_{one.name}": as_typed(one, measurement.conditions[one.name])
            for one in kind.conditions if one.name in measurement.conditions
        }  # fmt: skip
        form = cls(kind, Gauge.objects.none(), None, *args, initial=said, **more)
        for name in ("phase", "gauge", "engine_hours"):
            del form.fields[name]
        return form

    def usual_fields(self) -> list[forms.BoundField]:
        """Fields that every pass fills in."""
        rare = {f"how_{one.name}" for one in COMMON_CONDITIONS if one.name != "state"}
        return [field for field in self if field.name not in rare]

    def rare_fields(self) -> list[forms.BoundField]:
        """Fields for temperatures and the barometer."""
        usual = {field.name for field in self.usual_fields()}
        return [field for field in self if field.name not in usual]

    @property
    def conditions(self) -> dict[str, object]:
        """What was said of the method, as `assess` reads it."""
        told = {}
        for condition in self.kind.conditions:
            value = self.cleaned_data.get(f"how_{condition.name}")
            if value not in (None, ""):
                told[condition.name] = as_document(condition, value)
        return told


def field_for(condition: MethodCondition, states: Iterable[str]) -> forms.Field:
    """The field of a condition, by its form."""
    label = _(condition.title)
    if condition.form == "flag":
        return forms.ChoiceField(label=label, required=False,
                                 choices=[("", _("not said")), ("yes", _("yes")), ("no", _("no"))])  # fmt: skip
    if condition.form == "choice":
        choices = list(dict.fromkeys([*condition.choices, *(states if condition.name == "state" else ())]))
        told = [("", _("not said")), *((one, one.replace("_", " ")) for one in choices)]
        return forms.ChoiceField(label=label, required=False, choices=told)
    if condition.form == "count":
        return forms.IntegerField(label=label, required=False, min_value=1, widget=forms.TextInput(attrs=NUMBER))
    told = {
        "quantities": _("several, with ; between"),
        "quantity_by_cylinder": _("each with its cylinder, such as 1: 95.94; 2: 95.95"),
        "choices_by_cylinder": _("by cylinder, such as 2: exhaust, coolant; there are %(choices)s")
        % {"choices": ", ".join(condition.choices)},
    }  # fmt: skip
    help_text = ", ".join(part for part in (condition.unit, told.get(condition.form, "")) if part)
    return forms.CharField(label=label, required=False, max_length=400, help_text=help_text,
                           widget=forms.TextInput(attrs={"autocomplete": "off"}))  # fmt: skip


def as_document(condition: MethodCondition, value: object) -> object:
    """What was typed for a condition, in the shape that `assess` reads."""
    if condition.form == "flag":
        return value == "yes"
    if condition.form == "quantities":
        return [part.strip() for part in value.split(";") if part.strip()]
    if condition.form == "quantity_by_cylinder":
        return by_cylinder(value)
    if condition.form == "choices_by_cylinder":
        listed = {name: told.split(",") for name, told in by_cylinder(value).items()}
        return {name: [one.strip() for one in told if one.strip()] for name, told in listed.items()}
    return value


def as_typed(condition: MethodCondition, value: object) -> object:
    """A condition as its field shows it again; the other way of `as_document`."""
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, Mapping):
        told = {name: ", ".join(one) if isinstance(one, list) else one for name, one in value.items()}
        return "; ".join(f"{name}: {one}" for name, one in told.items())
    return "; ".join(map(str, value)) if isinstance(value, list) else value


def by_cylinder(text: str) -> Mapping[str, str]:
    """Read "1: 95.94; 2: 95.95"."""
    pairs = (part.partition(":") for part in text.split(";") if part.strip())
    return {name.strip(): value.strip() for name, _colon, value in pairs}


class AnswerForm(forms.Form):
    """One answer at one station: what was typed, or why nothing was measured; who measured it."""

    client_id = forms.UUIDField(widget=forms.HiddenInput)
    station = forms.CharField(max_length=60, widget=forms.HiddenInput)
    phase = forms.ChoiceField(choices=Measurement.Phase.choices, widget=forms.HiddenInput)
    typed = forms.CharField(required=False, max_length=200, strip=True)
    not_measured = forms.CharField(required=False, max_length=300)
    other_reason = forms.CharField(required=False, max_length=300)
    slip_answer = forms.ChoiceField(required=False, choices=[("", ""), *((one, one) for one in ANSWERS)])
    measured_by = forms.ModelChoiceField(Person.objects.none(), required=False, empty_label=None,
                                         label=gettext_lazy("Measured by"))  # fmt: skip

    def __init__(self, people: object, *args: object, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.fields["measured_by"].queryset = people

    @property
    def reason(self) -> str:
        """Why nothing was measured: the reason picked, or the one written."""
        return self.cleaned_data["other_reason"] or self.cleaned_data["not_measured"]


class ActForm(forms.Form):
    """What was done at a station."""

    client_id = forms.UUIDField(widget=forms.HiddenInput)
    station = forms.CharField(max_length=60, widget=forms.HiddenInput)
    what = forms.CharField(max_length=200, label=gettext_lazy("What was done"))


class CorrectionForm(forms.Form):
    """A reading corrected, struck or moved, each with its reason."""

    CORRECT, STRIKE, MOVE = "correct", "strike", "move"
    DOES = [
        (CORRECT, gettext_lazy("It was keyed wrongly: put this in its place")),
        (STRIKE, gettext_lazy("It was spoilt at the gauge: strike it")),
        (MOVE, gettext_lazy("It belongs to another station: move it")),
    ]

    client_id = forms.UUIDField(widget=forms.HiddenInput, initial=uuid4)
    does = forms.ChoiceField(label=gettext_lazy("What is wrong"), choices=DOES, widget=forms.RadioSelect)
    typed = forms.CharField(label=gettext_lazy("Put in its place"), required=False, max_length=200,
                            widget=forms.TextInput(attrs=NUMBER))  # fmt: skip
    station = forms.ChoiceField(label=gettext_lazy("Moved to"), required=False)
    reason = forms.CharField(label=gettext_lazy("Why"), max_length=300, required=False)
    slip_answer = forms.ChoiceField(required=False, choices=[("", ""), *((one, one) for one in ANSWERS)])

    def __init__(self, stations: Iterable[tuple[str, str]], *args: object, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.fields["station"].choices = [("", _("choose")), *stations]

    def values(self) -> list[forms.BoundField]:
        """What is put in its place, where it is moved to, and why."""
        return [self[name] for name in ("typed", "station", "reason")]
