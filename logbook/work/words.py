"""What is due in words and as a tape, with the shop's decimal mark."""

from datetime import date

from django.utils.formats import date_format
from django.utils.safestring import SafeString
from django.utils.translation import gettext as _
from django.utils.translation import ngettext

from logbook.core.figures import trimmed
from logbook.core.tape import tape
from measurements.sentence import Sentence

from .due import DAYS, Count
from .models import Interval

ABOUT_AFTER = 100  # days from which a projected day is told by its month only


def amount(unit: str, value: float, mark: str = ".") -> str:
    """An amount of what a job is counted by; from a hundred on without decimals.

    >>> amount("h", 37.5), amount("d", 1), amount("starts", 40), amount("km", 2414.016)
    ('37.5 h', '1 day', '40 starts', '2414 km')
    """
    text = f"{value:.0f}" if abs(value) >= 100 else trimmed(round(value, 1)).replace(".", mark)
    if unit == DAYS:
        return ngettext("%(n)s day", "%(n)s days", round(value)) % {"n": text}
    if unit == "starts":
        return ngettext("%(n)s start", "%(n)s starts", round(value)) % {"n": text}
    return f"{text} {unit}"


def day(on: date) -> str:
    """A day in words."""
    return date_format(on, "j F Y")


def told(sentence: Sentence, mark: str = ".") -> str:
    """A sentence of ours, translated, its numbers with the shop's decimal mark."""
    values = {
        name: trimmed(value).replace(".", mark) if isinstance(value, float) else value
        for name, value in sentence.values.items()
    }
    return _(sentence.template).format(**values)


def count_words(count: Count, mark: str = ".") -> str:
    """Where one count of a job stands, in a sentence without its full stop."""
    if count.left is None:
        return told(count.why_not, mark) if count.why_not else _("not known")
    if count.is_over:
        return _("%(amount)s over") % {"amount": amount(count.unit, -count.left, mark)}
    left = amount(count.unit, count.left, mark)
    if count.why_not is not None:
        return _("%(left)s left; no day can be told: %(why)s") % {"left": left, "why": told(count.why_not, mark)}
    if count.unit == DAYS:
        return _("today") if count.left < 1 else _("in %(left)s, on %(day)s") % {"left": left, "day": day(count.due_on)}
    if count.is_probably_over:
        return _("%(left)s left when the meter was last read; by average use over since %(day)s: read the meter") % {
            "left": left,
            "day": day(count.due_on),
        }
    about = day(count.due_on) if count.days_left < ABOUT_AFTER else date_format(count.due_on, "F Y")
    return _("in %(left)s, about %(day)s") % {"left": left, "day": about}


def window_words(count: Count) -> str:
    """The days on which a job may be done without moving the next date; empty where they aren't days."""
    if count.window_days is None or count.window_days[0] == count.window_days[1]:
        return ""
    first, last = count.window_days
    return _("window %(first)s to %(last)s") % {"first": day(first), "last": day(last)}


def every_words(interval: Interval, mark: str = ".") -> str:
    """How often a job is due, whichever comes first."""
    lengths = [
        amount(unit, getattr(interval, name), mark)
        for unit, name in Interval.LENGTHS.items()
        if getattr(interval, name) is not None
    ]
    told = _(" or ").join(lengths)
    return _("every %(told)s, whichever comes first") % {"told": told} if len(lengths) > 1 else _("every %s") % told


def tape_of(count: Count, mark: str = ".") -> SafeString:
    """The tape of a count; empty where nothing can be projected."""
    if not count.can_be_drawn:
        return SafeString("")
    length = amount(count.unit, count.length, mark)
    gone = count.now - count.start
    label = _("%(gone)s of %(length)s gone since last done") % {
        "gone": amount(count.unit, gone, mark),
        "length": length,
    }
    return tape(length=count.length, gone=gone, window=count.window, begins=_("last done"), ends=length, label=label)
