"""What is typed about an engine, and about a time out of service."""

from collections.abc import Iterator

from django import forms
from django.utils.translation import gettext_lazy as _

from logbook.engines.models import Engine, OutOfService
from logbook.people.models import Shop

from .fields import AnglesField, BanksField, FigureField, OrderField, moment_field, read_with_the_marks_of

WHOLE = {"inputmode": "numeric", "autocomplete": "off"}
GROUPS = (
    (_("What it is"), ("name", "serial", "duty", "service", "ignition")),
    (_("Cylinders"), ("layout", "cylinders", "numbered_from", "banks", "first_bank", "firing_order", "firing_angles")),
    (_("Turning"), ("turning", "seen_from")),
    (_("Sizes"), ("bore_mm", "stroke_mm", "rod_length_mm", "compression_ratio", "rated_speed_rpm")),
    (_("Valve train"), ("intake_valves", "exhaust_valves", "bridges", "adjustment", "screw_pitch_mm", "screw_ratio",
                        "left_hand_thread")),
    (_("Valve events"), Engine.EVENTS),
)  # fmt: skip


def size(label: str, **more: object) -> FigureField:
    """A length that may be unknown."""
    return FigureField("length", "mm", label=label, required=False, **more)


def degrees(label: str) -> FigureField:
    """A valve event that may be unknown; below zero on the other side of its dead centre."""
    return FigureField("angle", "°", label=label, required=False, signed=True)


class EngineForm(forms.ModelForm):
    """An engine's papers; what stays empty isn't known and isn't assumed."""

    banks = BanksField(label=_("cylinders bank by bank"), required=False,
                       help_text=_("a vee or flat engine: 1-2-3 / 4-5-6; empty when not known"))  # fmt: skip
    firing_order = OrderField(label=_("firing order"), required=False,
                              help_text=_("1-3-4-2; empty when not known: then there is no crank plan"))  # fmt: skip
    firing_angles = AnglesField(label=_("firing angles"), required=False,
                                help_text=_("only where firing is uneven: 0 270 in firing order, in degrees"))  # fmt: skip
    bore_mm = size(_("bore"))
    stroke_mm = size(_("stroke"))
    rod_length_mm = size(_("rod length"), help_text=_("between centres"))
    compression_ratio = FigureField("count", "1", label=_("compression ratio"), required=False)
    rated_speed_rpm = FigureField("rotational_speed", "rpm", label=_("rated speed"), required=False)
    screw_pitch_mm = size(_("screw pitch"), help_text=_("of the adjusting screw; the turn to give follows from it"))
    screw_ratio = FigureField("count", "1", label=_("valve movement per screw movement"), initial=1.0)
    intake_opens_btdc = degrees(_("intake opens before TDC"))
    intake_closes_abdc = degrees(_("intake shuts after BDC"))
    exhaust_opens_bbdc = degrees(_("exhaust opens before BDC"))
    exhaust_closes_atdc = degrees(_("exhaust shuts after TDC"))

    class Meta:
        model = Engine
        fields = [name for _title, names in GROUPS for name in names]
        widgets = {name: forms.TextInput(WHOLE) for name in ("cylinders", "intake_valves", "exhaust_valves")}
        help_texts = {
            "serial": _("as it stands on the engine's plate"),
            "service": _("an industrial engine's brisk piston speed is noted"),
            "first_bank": _("where someone at the flywheel who looks along the engine has it"),
            "ignition": _("empty when not known; a compression test with oil needs spark ignition"),
            "bridges": _("one rocker works two valves over a bridge"),
        }

    def __init__(self, *args: object, shop: Shop, **kwargs: object) -> None:
        super().__init__(*args, **kwargs)
        self.instance.shop = shop
        read_with_the_marks_of(self, shop)
        for name in ("ignition", "turning", "adjustment"):
            self.fields[name].choices = [("", _("not known")), *self.fields[name].choices[1:]]

    def groups(self) -> Iterator[tuple[str, list[forms.BoundField]]]:
        """Its fields under the titles they belong to."""
        for title, names in GROUPS:
            yield title, [self[name] for name in names]


class OutOfServiceForm(forms.ModelForm):
    """A time out of service."""

    from_at = moment_field(_("out of service from"))
    until_at = moment_field(_("until"), required=False, help_text=_("empty as long as it is out"))

    class Meta:
        model = OutOfService
        fields = ("from_at", "until_at", "who_was_told", "what_stood_in")
        help_texts = {
            "who_was_told": _("names, and how"),
            "what_stood_in": _("what did its work meanwhile; empty when nothing did"),
        }
