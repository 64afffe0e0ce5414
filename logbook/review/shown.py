"""A case as the decide page shows it: large values, one ruler, sentences, history, and which decisions are offered."""

from collections.abc import Sequence
from dataclasses import dataclass

from django.urls import reverse
from django.utils.http import urlencode
from django.utils.safestring import SafeString
from django.utils.translation import gettext as _

from logbook.bench.judging import kinds
from logbook.bench.words import VERDICTS
from logbook.core.figures import uncertainty
from logbook.people.models import Person
from measurements.conformity import NO_LIMIT

from .cases import Case, Outcome
from .models import Decision
from .second_person import barred_in_words, is_unchecked, why_not
from .services.deciding import not_put_right
from .sheets.decisions import decision_words, extended_words
from .visits import Visit, change_words
from .words import (
    case_words,
    characteristic_words,
    drawn,
    grounds_words,
    limits_words,
    plain,
    ruler_told,
    source_words,
    value_words,
    with_uncertainty,
)


@dataclass(frozen=True)
class Line:
    """One earlier visit in the history of a station, or this one."""

    visit: Visit
    hours: str
    found: str
    left: str


@dataclass(frozen=True)
class Shown:
    """One case on the page of a person; `visits` are the earlier ones, oldest first."""

    case: Case
    person: Person
    visits: Sequence[Visit]
    extensions: int = 0

    @property
    def mark(self) -> str:
        """The shop's decimal mark."""
        return self.case.work_order.shop.decimal_mark

    @property
    def key(self) -> str:
        """Its name in addresses and forms."""
        return self.case.subject.key

    @property
    def address(self) -> str:
        """The address of its page."""
        base = reverse("review:decide", args=[self.case.work_order.number])
        return f"{base}?{urlencode({'on': self.key})}"

    @property
    def title(self) -> str:
        """Where it is."""
        return case_words(self.case)

    @property
    def what(self) -> str:
        """What was measured there."""
        return characteristic_words(self.case.characteristic, kinds())

    @property
    def limits(self) -> str:
        """Service limits, and the setting beside them where as left was judged against another zone."""
        found, left = self.case.found, self.case.left
        judged = (found or left).judgement
        told = _("limit %(limits)s") if None in (judged["lower"], judged["upper"]) else _("limits %(limits)s")
        told %= {"limits": limits_words(judged, self.mark)}
        if found and left and left.verdict != NO_LIMIT and zone_of(left) != zone_of(found):
            told += ", " + _("set %(limits)s") % {"limits": limits_words(left.judgement, self.mark)}
        return told

    @property
    def unit(self) -> str:
        """Unit of the large values."""
        return self.case.subject.judgement["unit"]

    @property
    def found(self) -> str:
        """What was found, large."""
        return value_words(self.case.found.judgement, self.mark) if self.case.found else ""

    @property
    def left(self) -> str:
        """What was left, beside it."""
        return value_words(self.case.left.judgement, self.mark) if self.case.left else ""

    @property
    def picture(self) -> SafeString:
        """Found, left and the last visit's ghost on one ruler."""
        main, beside = self.case.found or self.case.left, self.case.left if self.case.found else None
        last = self.visits[-1].last if self.visits else None
        return drawn(ruler_told(main, last, self.title, self.mark, beside))

    @property
    def legend(self) -> str:
        """Which mark on the ruler is which, where there is more than one."""
        parts = [_("with its whisker: found")] if self.case.found and (self.case.left or self.visits) else []
        parts += [_("without: left")] if self.case.found and self.case.left else []
        parts += [_("dashed ring: last visit")] if self.visits else []
        return "; ".join(parts) if self.picture else ""

    @property
    def now_value(self) -> str:
        """How it stands now, in figures: for lists."""
        return with_uncertainty(self.case.now.judgement, self.mark)

    @property
    def now_verdict(self) -> str:
        """How it stands now, in words: for lists."""
        return str(VERDICTS[self.case.now.verdict])

    @property
    def now_words(self) -> str:
        """How it stands now, with its value: for lists."""
        return self.told(self.case.now.judgement)

    @property
    def measured_by(self) -> str:
        """Who measured and keyed."""
        return ", ".join(one.name for one in self.case.took)

    @property
    def gauge(self) -> str:
        """The gauge it was measured with."""
        gauge = self.case.subject.measurement.gauge
        return gauge.mark if gauge else _("none named")

    @property
    def found_verdict(self) -> str:
        """What was found, in words: "Found beyond"."""
        return self.verdict_of(self.case.found, _("Found %(verdict)s"))

    @property
    def found_grounds(self) -> str:
        """How far from the limit, and how sure."""
        return grounds_words(self.case.found.judgement, self.mark) if self.case.found else ""

    @property
    def left_verdict(self) -> str:
        """What was left, in words."""
        return self.verdict_of(self.case.left, _("Left %(verdict)s"))

    @property
    def left_grounds(self) -> str:
        """Against what it was judged, and how far from it."""
        left = self.case.left
        if left is None or left.verdict == NO_LIMIT:
            return ""
        if self.case.found and zone_of(left) != zone_of(self.case.found):
            return _("against its setting, %(grounds)s") % {"grounds": grounds_words(left.judgement, self.mark)}
        return grounds_words(left.judgement, self.mark)

    def verdict_of(self, outcome: Outcome | None, words: str) -> str:
        """A verdict in a phrase; empty without one."""
        return words % {"verdict": VERDICTS[outcome.verdict]} if outcome else ""

    @property
    def change(self) -> str:
        """What changed since the last visit."""
        return change_words(self.case, self.visits, self.mark)

    @property
    def needs(self) -> str:
        """What would settle a close call."""
        needs = self.case.subject.judgement.get("needs")
        return needs["sentence"] if needs else ""

    @property
    def history(self) -> list[Line]:
        """Earlier visits, the latest first."""
        return [
            Line(
                one,
                "–" if one.hours is None else plain(one.hours, self.mark),
                self.told(one.found),
                self.told(one.left),
            )
            for one in reversed(self.visits)
        ]

    def told(self, judgement: dict | None) -> str:
        """A value of an earlier visit with its verdict."""
        if judgement is None:
            return "–"
        return f"{with_uncertainty(judgement, self.mark)}, {VERDICTS[judgement['verdict']]}"

    @property
    def judged_by(self) -> str:
        """The limit's source, the rule and its guard band."""
        told = self.case.subject.judgement
        source = source_words(self.case.subject)
        if not told["guard_band"]:
            return _("%(source)s. Rule %(rule)s: no guard band.") % {"source": source, "rule": told["decision_rule"]}
        return _("%(source)s. Rule %(rule)s: guard band %(band)s %(unit)s.") % {
            "source": source, "rule": told["decision_rule"], "unit": told["unit"],
            "band": uncertainty(told["guard_band"], self.mark),
        }  # fmt: skip

    @property
    def working(self) -> list[tuple[str, Sequence[str]]]:
        """How each reading was judged, step by step, with its notes."""
        told = ((_("As found"), self.case.found), (_("As left"), self.case.left))
        return [(name, [*one.judgement["working"], *one.judgement["notes"]]) for name, one in told if one]

    @property
    def decision(self) -> str:
        """The decision that stands, in words."""
        decision = self.case.decision
        if decision is None:
            return ""
        told = decision_words(decision, self.case.work_order.shop)
        again = extended_words(self.extensions)
        return f"{told} ({again})" if again else told

    @property
    def why_not(self) -> str:
        """Why this person can't decide here, and who can."""
        return why_not(self.person, self.case.took)

    @property
    def barred(self) -> str:
        """Who can't decide on this, said to everybody."""
        return barred_in_words([one for one in self.case.took if one != self.person])

    @property
    def is_unchecked(self) -> bool:
        """Tell whether this person decides on their own reading, as nobody else is there."""
        return is_unchecked(self.person, self.case.took)

    @property
    def why_not_put_right(self) -> str:
        """Why "put right" isn't offered."""
        return "" if self.case.is_left_within else not_put_right(self.case)

    @property
    def at_once(self) -> list[tuple[str, str]]:
        """Decisions that need nothing typed beside them, as they are offered."""
        choices = [Decision.Choice.MEASURE_AGAIN, Decision.Choice.KEEP_STOPPED]
        if self.case.is_left_within:
            choices.insert(0, Decision.Choice.PUT_RIGHT)
        return [(choice.value, choice.label.capitalize()) for choice in choices]


def zone_of(outcome: Outcome) -> tuple:
    """The limits an outcome was judged against."""
    return outcome.judgement["lower"], outcome.judgement["upper"]
