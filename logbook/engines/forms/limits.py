"""What is typed about limit sheets and their lines."""

from django import forms
from django.utils.translation import gettext_lazy as _

from logbook.engines.models import Engine, LimitLine, LimitSheet
from logbook.engines.queries import characteristics
from logbook.people.models import Person

FIGURE = {"inputmode": "decimal", "autocomplete": "off"}


def choices() -> list[tuple[str, object]]:
    """What a limit can be given for, under its kind."""
    groups: dict[str, list[tuple[str, str]]] = {}
    for name, (kind, one) in characteristics().items():
        unit = "" if one.unit == "1" else f" [{one.unit}]"
        groups.setdefault(kind.title, []).append((name, f"{one.title}{unit}"))
    return [("", "—"), *groups.items()]


class BeginSheetForm(forms.Form):
    """What the next version starts from, and what changes."""

    copied_from = forms.ModelChoiceField(Engine.objects.none(), label=_("copy the sheet of another engine"), required=False,
                                         empty_label=_("no: start from this engine's own"))  # fmt: skip
    note = forms.CharField(label=_("what changes"), max_length=200, required=False)

    def __init__(self, *args: object, person: Person, engine: Engine, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        held = LimitSheet.objects.seen_by(person).filter(in_force_at__isnull=False).values("engine")
        others = Engine.objects.seen_by(person).filter(pk__in=held).exclude(pk=engine.pk)
        self.fields["copied_from"].queryset = others


class LineForm(forms.ModelForm):
    """One line of a limit sheet, as its source prints it."""

    characteristic = forms.ChoiceField(label=_("what is limited"), choices=choices)
    photo = forms.FileField(label=_("photo of the page"), required=False,
                            help_text=_("JPEG or PNG, 8 MB at most; seen only in this shop"),
                            widget=forms.FileInput({"accept": "image/jpeg,image/png"}))  # fmt: skip

    class Meta:
        model = LimitLine
        fields = [name for name in LimitLine.TYPED if name != "photo"]
        widgets = {name: forms.TextInput(FIGURE) for name in (*LimitLine.FIGURES, "reference_barometer")} | {
            "provisional_until": forms.DateInput({"type": "date"}, format="%Y-%m-%d"),
        }
        help_texts = {
            "lower": _("with its unit, as printed: 0.25 mm; empty where there is none"),
            "set_lower": _("what as left must lie between, where the source says so"),
            "nominal": _("what to set it to"),
            "condition": _("cold, hot, torque plate on …, or a span 15..30 °C; empty when it always holds"),
            "decision_rule": _("empty: the shop's own"),
            "reference_barometer": _("a compression only, with its unit; empty: 1013.25 hPa"),
            "provisional_by": _("a limit of the shop's own, where none is published: who set it"),
        }

    GROUPS = (
        (_("The limit"), ("characteristic", "lower", "upper", "condition")),
        (_("Where to set it"), ("set_lower", "set_upper", "nominal")),
        (_("Where it comes from"), ("source", "photo", "allows_for_gauge")),
        (_("Only where the source says so"), ("decision_rule", "reference_barometer")),
        (_("A provisional limit"), ("provisional_by", "provisional_grounds", "provisional_until")),
    )

    def groups(self) -> list[tuple[str, list[forms.BoundField]]]:
        """Its fields under the titles they belong to."""
        return [(title, [self[name] for name in names]) for title, names in self.GROUPS]


class WhyForm(forms.Form):
    """A reason."""

    why = forms.CharField(max_length=300)

    def __init__(self, *args: object, label: str, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.fields["why"].label = label
