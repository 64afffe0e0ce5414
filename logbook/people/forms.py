"""What is typed about people and their shop."""

from collections.abc import Iterator

from django import forms
from django.contrib.auth import password_validation
from django.core.exceptions import ValidationError
from django.utils.html import format_html
from django.utils.translation import gettext_lazy as _

from measurements.conformity import EXPANDED, GUARDED, SIMPLE
from measurements.document import Node
from measurements.intake.shop import read_barometer

from .models import ROLES, Person, Shop
from .zones import zone_choices

ROLE_FIELDS = [f"is_{role}" for role in ROLES]
RULES = {
    GUARDED: _("A reading is within only where it lies inside the limit by what the gauge can't tell (95 % sure on that "
               "side). Closer to the limit the answer is “too close to call”. ISO 14253-1; take this one if in doubt."),
    EXPANDED: _("The same with the whole expanded uncertainty U as the margin: stricter, so more readings are too close to "
                "call. ILAC-G8 calls it non-binary acceptance."),
    SIMPLE: _("A reading is taken for what it says: inside is within, outside is beyond, nothing is too close to call. Right "
              "at a limit half of such verdicts may be wrong. ILAC-G8 calls it simple acceptance."),
}  # fmt: skip


def explained_rules() -> Iterator[tuple[str, str]]:
    """Give the decision rules, each with what it means."""
    for rule, meaning in RULES.items():
        yield rule, format_html("<span><strong>{}</strong> {}</span>", rule, meaning)


class Asking:
    """A form that says in a sentence what is missing at a field."""

    def __init__(self, *args: object, **more: object) -> None:
        super().__init__(*args, **more)
        for field in self.fields.values():
            chosen = isinstance(field, forms.ChoiceField)
            field.error_messages["required"] = _("Choose one.") if chosen else _("Nothing stands here; fill it in.")


class NewPassword(Asking, forms.Form):
    """A password typed twice; nobody can read back what was typed once."""

    password = forms.CharField(
        label=_("Password"),
        strip=False,
        max_length=200,
        help_text=_("At least 10 characters; a few words in a row are easy to keep in mind and hard to guess."),
        widget=forms.PasswordInput(attrs={"autocomplete": "new-password"}),
    )
    again = forms.CharField(
        label=_("Password again"),
        strip=False,
        max_length=200,
        widget=forms.PasswordInput(attrs={"autocomplete": "new-password"}),
    )

    def clean(self) -> dict[str, object]:
        cleaned = super().clean()
        password, again = cleaned.get("password"), cleaned.get("again")
        if password and again and password != again:
            self.add_error("again", _("The two aren't the same; type both anew."))
        elif password:
            try:
                password_validation.validate_password(password, self.whose())
            except ValidationError as weak:
                self.add_error("password", weak)
        return cleaned

    def whose(self) -> Person | None:
        """Whose password it becomes: it mustn't be much like the name."""
        return None


class SignInForm(Asking, forms.Form):
    """Who comes, and the proof."""

    name = forms.CharField(
        label=_("Name"),
        max_length=80,
        widget=forms.TextInput(attrs={"autocomplete": "username", "autocapitalize": "words", "spellcheck": "false"}),
    )
    password = forms.CharField(
        label=_("Password"),
        strip=False,
        max_length=200,
        widget=forms.PasswordInput(attrs={"autocomplete": "current-password"}),
    )

    def clean_name(self) -> str:
        return Person.normalize_username(self.cleaned_data["name"])


class ShopForm(Asking, forms.ModelForm):
    """The shop's name and ways."""

    time_zone = forms.ChoiceField(label=_("Time zone"), choices=zone_choices)
    decision_rule = forms.ChoiceField(
        label=_("Decision rule: when is a reading within its limits?"),
        choices=explained_rules,
        widget=forms.RadioSelect,
        initial=GUARDED,
    )

    class Meta:
        model = Shop
        fields = ["name", "units", "decimal_mark", "paper", "time_zone", "decision_rule"]
        widgets = {name: forms.RadioSelect for name in ("units", "decimal_mark", "paper")}


class ShopWaysForm(ShopForm):
    """All of the shop's ways, the rarer ones too."""

    class Meta(ShopForm.Meta):
        fields = [*ShopForm.Meta.fields, "setting_rule", "barometer"]
        widgets = {**ShopForm.Meta.widgets, "setting_rule": forms.RadioSelect}
        help_texts = {
            "setting_rule": _(
                "Judges an adjustment against its setting zone; simple is usual, for it was set on purpose."
            ),
            "barometer": _("Station pressure, like 1013 hPa; taken where nobody reads one. Blank: none is taken."),
        }

    def clean_barometer(self) -> str:
        typed = self.cleaned_data["barometer"].strip()
        errors: list = []
        if typed:
            read_barometer(Node(typed, "barometer", errors), self.cleaned_data.get("decimal_mark"))
        if errors:
            raise ValidationError([str(sentence) for _path, sentence in errors])
        return typed


class FirstStartForm(NewPassword, ShopForm):
    """A shop and its first supervisor, and the code that shows who may open the logbook."""

    code = forms.CharField(
        label=_("Code"),
        max_length=40,
        help_text=_("It stands in the window where the program was started, like 7KQ4-M2XP-9TBC."),
        widget=forms.TextInput(
            attrs={"autocomplete": "off", "autocapitalize": "characters", "spellcheck": "false", "class": "reading"}
        ),
    )
    person = forms.CharField(
        label=_("Your name"),
        max_length=80,
        help_text=_("As it shall stand on the sheets that you sign."),
        widget=forms.TextInput(attrs={"autocomplete": "username", "spellcheck": "false"}),
    )
    is_technician = forms.BooleanField(label=_("Technician: measures and keys"), required=False)
    is_toolroom = forms.BooleanField(label=_("Toolroom: keeps gauges and limit sheets"), required=False)

    OF_SHOP = ShopForm.Meta.fields

    def clean_person(self) -> str:
        return Person.normalize_username(self.cleaned_data["person"])

    def whose(self) -> Person:
        return Person(name=self.cleaned_data.get("person", ""))

    def shop_told(self) -> dict[str, str]:
        """Give the shop's fields."""
        return {name: self.cleaned_data[name] for name in self.OF_SHOP}

    def supervisor_told(self) -> dict[str, object]:
        """Give the first supervisor's fields."""
        told = {name: self.cleaned_data[name] for name in ("is_technician", "is_toolroom")}
        return {"name": self.cleaned_data["person"], "is_supervisor": True, **told}


class Ticked:
    """A form with ticks for what a person may do."""

    def ticks(self) -> list[forms.BoundField]:
        """Give the fields that are ticked."""
        return [field for field in self if isinstance(field.field, forms.BooleanField)]


class NewPersonForm(Ticked, NewPassword, forms.ModelForm):
    """A person to be added."""

    class Meta:
        model = Person
        fields = ["name", *ROLE_FIELDS]
        help_texts = {"name": _("As it shall stand on the sheets that this person signs.")}
        widgets = {"name": forms.TextInput(attrs={"autocomplete": "off", "spellcheck": "false"})}

    def whose(self) -> Person:
        return Person(name=self.cleaned_data.get("name", ""))


class RolesForm(Ticked, forms.ModelForm):
    """What a person may do."""

    class Meta:
        model = Person
        fields = [*ROLE_FIELDS, "is_active"]

    def roles(self) -> dict[str, bool]:
        """Give each role: theirs or not."""
        return {role: self.cleaned_data[f"is_{role}"] for role in ROLES}


class GivenPasswordForm(NewPassword):
    """A new password for somebody."""

    def __init__(self, *args: object, person: Person, **more: object) -> None:
        super().__init__(*args, **more)
        self.person = person

    def whose(self) -> Person:
        return self.person


class OwnPasswordForm(GivenPasswordForm):
    """A new password for oneself, with the present one as proof."""

    current = forms.CharField(
        label=_("Password now"),
        strip=False,
        max_length=200,
        widget=forms.PasswordInput(attrs={"autocomplete": "current-password"}),
    )
    field_order = ["current", "password", "again"]

    def __init__(self, *args: object, **more: object) -> None:
        super().__init__(*args, **more)
        self.fields["password"].label, self.fields["again"].label = _("New password"), _("New password again")
