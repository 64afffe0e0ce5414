"""What is typed about intervals and jobs, tidied; what it means is decided in the services."""

from collections.abc import Iterable, Mapping
from datetime import datetime, time
from fractions import Fraction
from zoneinfo import ZoneInfo

from django import forms
from django.utils.translation import gettext_lazy as _

from logbook.people.models import Person
from measurements.kind import find_kinds

from .fields import MILE, NumberField, ShopForm
from .lockout import STATES
from .models import Interval, Task, WorkOrder

DAY = forms.DateInput(attrs={"type": "date"}, format="%Y-%m-%d")
TEXT = forms.Textarea(attrs={"rows": 3})


def kinds_by_title() -> list[tuple[str, str]]:
    """Every kind of measurement, by its title."""
    return sorted(((kind.name, kind.title) for kind in find_kinds().values()), key=lambda choice: choice[1])


class IntervalForm(ShopForm):
    """A job that comes due again."""

    title = forms.CharField(label=_("Job"), max_length=120)
    kind = forms.ChoiceField(label=_("What it measures"), required=False)
    every_hours = NumberField(label=_("Every … running hours"), required=False, units={"h": Fraction(1)})
    every_days = NumberField(
        label=_("Every … days"), required=False, whole=True, help_text=_("Six months are 183 days, a year 365.")
    )
    every_starts = NumberField(label=_("Every … starts"), required=False, whole=True)
    every_km = NumberField(
        label=_("Every … km"), required=False, units={"km": Fraction(1), "mi": MILE},
        help_text=_("Miles with their unit behind: 1500 mi."),
    )  # fmt: skip
    window_percent = NumberField(
        label=_("Window ± [%]"), whole=True, or_none=True,
        help_text=_("Done so much earlier or later, the next due date doesn't move."),
    )  # fmt: skip
    opens = forms.CharField(
        label=_("Cover or stop it shares"), max_length=80, required=False,
        help_text=_("Jobs with the same words here are offered together: valve cover off."),
    )  # fmt: skip

    def __init__(self, *args: object, interval: Interval, **more: object) -> None:
        names = [name for name in self.base_fields]
        super().__init__(*args, initial={name: getattr(interval, name) for name in names}, **more)
        self.interval = interval
        self.fields["kind"].choices = [("", _("nothing: other work")), *kinds_by_title()]

    def filled_in(self) -> Interval:
        """The interval as it was filled in."""
        for name, value in self.cleaned_data.items():
            setattr(self.interval, name, value)
        return self.interval


class DoneForm(ShopForm):
    """A job recorded as done: when, and where the meters stood."""

    done_on = forms.DateField(label=_("Done on"), widget=DAY)

    UNITS = {"h": _("Engine had run in all [h]"), "starts": _("Starts in all"), "km": _("Distance in all [km]")}

    def __init__(
        self, *args: object, totals: Mapping[str, float], units: Iterable[str], at: datetime, **more: object
    ) -> None:
        zone = ZoneInfo(more["shop"].time_zone)
        super().__init__(*args, initial={"done_on": at.astimezone(zone).date(), **totals}, **more)
        self.at, self.zone = at, zone
        for unit in units:
            if unit in self.UNITS:
                field = NumberField(
                    label=self.UNITS[unit], required=False, or_none=True, help_text=_("Empty: not known.")
                )
                field.decimal_mark = self.shop.decimal_mark
                self.fields[unit] = field

    def totals(self) -> dict[str, float]:
        """What the meters stood at, where it is known."""
        return {unit: value for unit, value in self.cleaned_data.items() if unit in self.UNITS and value is not None}

    def done_at(self) -> datetime:
        """Now for today, noon for another day."""
        on = self.cleaned_data["done_on"]
        today = self.at.astimezone(self.zone).date()
        return self.at if on == today else datetime.combine(on, time(12), self.zone)


class DeferForm(ShopForm):
    """A job put off."""

    until_on = forms.DateField(label=_("Until"), widget=DAY)
    reason = forms.CharField(label=_("Why"), max_length=300, widget=TEXT)


class NewJobForm(ShopForm):
    """A job to be opened: what for, what is measured, which intervals it answers."""

    title = forms.CharField(label=_("Job"), max_length=120)
    kinds = forms.MultipleChoiceField(label=_("Measure"), required=False, widget=forms.CheckboxSelectMultiple)
    intervals = forms.MultipleChoiceField(
        label=_("Jobs of the due list"), required=False, widget=forms.CheckboxSelectMultiple
    )

    def __init__(self, *args: object, intervals: Mapping[str, str], **more: object) -> None:
        super().__init__(*args, **more)
        self.fields["kinds"].choices = kinds_by_title()
        self.fields["intervals"].choices = list(intervals.items())
        if not intervals:
            del self.fields["intervals"]


class TaskForm(ShopForm):
    """A task added to a job."""

    kind = forms.ChoiceField(label=_("What it measures"), required=False)
    title = forms.CharField(
        label=_("Task"), max_length=120, required=False, help_text=_("Empty: the name of what is measured.")
    )
    lock_state = forms.ChoiceField(
        label=_("State the engine must be in"), required=False, help_text=_("Empty: what the measurement needs.")
    )

    def __init__(self, *args: object, for_engine: bool, **more: object) -> None:
        super().__init__(*args, **more)
        self.for_engine = for_engine
        self.fields["kind"].choices = [("", _("nothing: other work")), *kinds_by_title()]
        self.fields["lock_state"].choices = [("", "—"), *((state, asked.title) for state, asked in STATES.items())]
        if not for_engine:
            del self.fields["lock_state"]

    def clean(self) -> dict[str, object]:
        filled = super().clean()
        kind = find_kinds().get(filled.get("kind", ""))
        if not filled.get("title"):
            if kind is None:
                self.add_error("title", _("Say what is to be done, or choose what is measured."))
            else:
                filled["title"] = kind.title
        needed = kind.lock_state if kind and self.for_engine else next(iter(STATES))
        filled["lock_state"] = filled.get("lock_state") or needed
        return filled


class FinishForm(ShopForm):
    """A task finished."""

    minutes = NumberField(
        label=_("Time it took [min]"), required=False, whole=True, or_none=True, help_text=_("Empty: not told.")
    )


class PartForm(ShopForm):
    """A part used up."""

    what = forms.CharField(label=_("Part"), max_length=160)
    count = NumberField(label=_("How many"), initial=1)
    task = forms.ModelChoiceField(
        label=_("On which task"), queryset=Task.objects.none(), required=False, empty_label="—"
    )

    def __init__(self, *args: object, order: WorkOrder, **more: object) -> None:
        super().__init__(*args, **more)
        self.fields["task"].queryset = order.tasks.all()


class HandOverForm(ShopForm):
    """A job handed over."""

    to_person = forms.ModelChoiceField(
        label=_("To"), queryset=Person.objects.none(), required=False, empty_label=_("whoever comes next")
    )
    told = forms.CharField(label=_("What to know"), required=False, widget=TEXT)

    def __init__(self, *args: object, by: Person, **more: object) -> None:
        super().__init__(*args, **more)
        others = Person.objects.seen_by(by).filter(is_technician=True, is_active=True).exclude(pk=by.pk)
        self.fields["to_person"].queryset = others.order_by("name")


class ReasonForm(ShopForm):
    """Why, in a sentence."""

    reason = forms.CharField(label=_("Why"), max_length=300, widget=TEXT)


class OpenedForm(ShopForm):
    """Something opened that must be closed up again."""

    what = forms.CharField(label=_("What is open"), max_length=160)


class LockForm(ShopForm):
    """A lock on a point of one's own naming."""

    point = forms.CharField(label=_("What is locked"), max_length=120)


class WitnessForm(ShopForm):
    """The stations of a task that are to be witnessed: ticked from its kind's, or typed."""

    stations = forms.MultipleChoiceField(label=_("Stations"), required=False, widget=forms.CheckboxSelectMultiple)
    more = forms.CharField(
        label=_("Other places"),
        max_length=500,
        required=False,
        help_text=_("With commas between: flange left, flange right."),
    )

    def __init__(self, *args: object, stations: list[str], **more: object) -> None:
        super().__init__(*args, **more)
        self.fields["stations"].choices = [(station, station.replace(".", " ")) for station in stations]
        if not stations:
            del self.fields["stations"]

    def named(self) -> list[str]:
        """The stations ticked, then those typed."""
        return [*self.cleaned_data.get("stations", []), *self.cleaned_data["more"].split(",")]
