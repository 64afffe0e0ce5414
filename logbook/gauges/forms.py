"""What the toolroom types about gauges and calibrations, each figure read where it stands."""

from collections.abc import Callable

from django import forms
from django.utils.translation import gettext as _
from django.utils.translation import gettext_lazy

from logbook.core.figures import figure
from logbook.people.models import Shop
from measurements.sentence import Refusal

from . import figures
from .models import Calibration, Gauge

FIGURE = {"inputmode": "decimal", "autocomplete": "off"}
DAY = {"type": "date"}


def typed(form: forms.Form, name: str, read: Callable[[str], object]) -> None:
    """Read what stands in a field; a refusal becomes the field's error, and what was typed stays."""
    if not form.cleaned_data.get(name):
        return
    try:
        form.cleaned_data[name] = read(form.cleaned_data[name])
    except Refusal as refusal:
        form.add_error(name, _(refusal.sentence.template).format(**refusal.sentence.values))


class GaugeForm(forms.ModelForm):
    """A gauge's papers."""

    class Meta:
        model = Gauge
        fields = (
            "mark", "title", "quantity", "is_setting_master", "resolution", "range_lower", "range_upper",
            "max_permissible_error", "repeatability", "repeatability_dof", "orifice_diameter", "supply_pressure",
            "interval_days",
        )  # fmt: skip
        widgets = {
            name: forms.TextInput(FIGURE)
            for name in (
                "resolution",
                "range_lower",
                "range_upper",
                "max_permissible_error",
                "repeatability",
                "orifice_diameter",
                "supply_pressure",
            )
        } | {name: forms.TextInput({"inputmode": "numeric"}) for name in ("repeatability_dof", "interval_days")}
        help_texts = {
            "mark": gettext_lazy("as it is written on the gauge or its box"),
            "resolution": gettext_lazy("smallest graduation, or the step from leaf to leaf: 0.01 mm"),
            "repeatability_dof": gettext_lazy("how many readings the study had, less one for each thing measured"),
            "orifice_diameter": gettext_lazy("of a leak-down tester only"),
            "supply_pressure": gettext_lazy("of a leak-down tester only: what it is set to before the orifice"),
        }  # fmt: skip

    POSITIVE = ("resolution", "max_permissible_error", "repeatability")
    ENDS = ("range_lower", "range_upper")

    def __init__(self, *args: object, shop: Shop, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.shop = shop
        self.instance.shop = shop

    def clean(self) -> dict[str, object]:
        told = super().clean()
        quantity = told.get("quantity")
        if not quantity:
            return told
        for name in self.POSITIVE:
            words = str(Gauge._meta.get_field(name).verbose_name)
            typed(self, name, lambda text, words=words: figures.read_positive(text, quantity, self.shop, words))
        for name in self.ENDS:
            words = str(Gauge._meta.get_field(name).verbose_name)
            typed(self, name, lambda text, words=words: figures.read_figure(
                text, quantity, self.shop, words, signed=True)[0])  # fmt: skip
        typed(self, "orifice_diameter", lambda text: figures.read_positive(text, "length", self.shop, _("the orifice")))
        typed(self, "supply_pressure", lambda text: figures.read_positive(text, "pressure", self.shop, _("the supply")))
        self._refuse_halves(told)
        return told

    def _refuse_halves(self, told: dict[str, object]) -> None:
        """A range has two ends; only a tester, which shows a pressure or a share, has an orifice and a supply."""
        lower, upper = (told.get(name) for name in self.ENDS)
        if bool(lower) != bool(upper) and not any(name in self.errors for name in self.ENDS):
            self.add_error("range_upper" if lower else "range_lower", _("A range has two ends; give both, or neither."))
        if told.get("repeatability_dof") and not told.get("repeatability") and "repeatability" not in self.errors:
            self.add_error(
                "repeatability", _("Degrees of freedom without the s they belong to; give both, or neither.")
            )
        for name in ("orifice_diameter", "supply_pressure"):
            if told.get(name) and told["quantity"] not in (Gauge.Quantity.PRESSURE, Gauge.Quantity.RATIO):
                self.add_error(name, _("Only a leak-down tester has one, and that measures pressure or a share; "
                                       "leave it empty, or change what the gauge measures."))  # fmt: skip


class CalibrationForm(forms.ModelForm):
    """One calibration as its certificate states it."""

    coverage_factor = forms.CharField(
        label=gettext_lazy("Coverage factor k"),
        required=False,
        widget=forms.TextInput(FIGURE),
        help_text=gettext_lazy("stands beside U on the certificate, mostly 2"),
    )
    found = forms.CharField(
        label=gettext_lazy("Errors found, a line each"),
        required=False,
        widget=forms.Textarea({"rows": 4}),
        help_text=gettext_lazy("the point, a colon, what the gauge showed too much there: 10 mm: +0.003 mm"),
    )

    class Meta:
        model = Calibration
        fields = ("calibrated_on", "due_on", "certificate", "expanded_uncertainty", "coverage_factor", "has_failed")
        widgets = {
            "calibrated_on": forms.DateInput(DAY, format="%Y-%m-%d"),
            "due_on": forms.DateInput(DAY, format="%Y-%m-%d"),
            "expanded_uncertainty": forms.TextInput(FIGURE),
        }
        help_texts = {
            "due_on": gettext_lazy("left empty, the gauge's own interval counts from the calibration"),
            "has_failed": gettext_lazy("it was found outside what is allowed: its readings can't be relied on"),
        }

    def __init__(self, *args: object, gauge: Gauge, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.gauge = gauge
        self.instance.gauge, self.instance.shop = gauge, gauge.shop
        if self.initial.get("errors") is not None:
            self.initial["found"] = "\n".join(f"{one['at']}: {one['error']}" for one in self.initial["errors"])
        if self.initial.get("coverage_factor"):
            self.initial["coverage_factor"] = figure(
                self.initial["coverage_factor"], decimal_mark=gauge.shop.decimal_mark
            )

    def clean(self) -> dict[str, object]:
        told = super().clean()
        shop, quantity = self.gauge.shop, self.gauge.quantity
        typed(self, "coverage_factor", lambda text: figures.read_plain(text, shop, _("k")))
        told["coverage_factor"] = told.get("coverage_factor") or None
        typed(self, "expanded_uncertainty", lambda text: figures.read_positive(text, quantity, shop, _("U")))
        typed(self, "found", lambda text: figures.read_errors(text, quantity, shop))
        return told

    def figures(self) -> dict[str, object]:
        """What was read, as the services take it."""
        told = {name: self.cleaned_data[name] for name in self._meta.fields}
        return told | {"errors": self.cleaned_data["found"] or []}


class CorrectionForm(CalibrationForm):
    """The right calibration in place of a wrong entry, with the reason."""

    reason = forms.CharField(label=gettext_lazy("Why the earlier entry was wrong"), max_length=300)
