"""Limit sheets: begun, typed line by line, compared by a second person, in force; lines are never changed, only followed."""

from datetime import datetime

from django.core.files.uploadedfile import UploadedFile
from django.db import transaction
from django.utils.translation import gettext as _

from logbook.engines import queries
from logbook.engines.limit_figures import problems, with_units
from logbook.engines.models import Engine, LimitLine, LimitSheet
from logbook.engines.photos import PhotoRefused, named_photo
from logbook.engines.words import in_words
from logbook.people.models import Person

from .guards import KEEP_LIMITS, WHO_COMPARES, EngineryRefused, refuse_others, saved


class LimitRefused(EngineryRefused):
    """Something asked of a limit sheet that can't be done."""


@transaction.atomic
def begin_sheet(
    *, by: Person, at: datetime, engine: Engine, note: str = "", copied_from: Engine | None = None
) -> LimitSheet:
    """Begin the next version of an engine's limits: from the sheet in force, or from another engine's."""
    refuse_others(by, KEEP_LIMITS, LimitRefused, engine, *([copied_from] if copied_from else []))
    Engine.objects.select_for_update().get(pk=engine.pk)  # two who begin at once would both become the same version
    if waiting := engine.limit_sheets.filter(in_force_at=None, given_up_at=None).first():
        said = _("Sheet %(version)s of this engine is in preparation; finish it or give it up first.")
        raise LimitRefused(said % {"version": waiting.version})
    source = queries.sheet_in_force(copied_from or engine, at)
    if copied_from and source is None:
        said = _("%(engine)s has no limit sheet in force to copy from.") % {"engine": copied_from}
        raise LimitRefused(at_fields=[("copied_from", said)])
    if copied_from:
        said = _("copied from %(engine)s, sheet %(version)s") % {"engine": copied_from, "version": source.version}
        note = f"{note} ({said})" if note else said
    newest = engine.limit_sheets.order_by("-version").first()
    sheet = LimitSheet(shop=engine.shop, engine=engine, version=newest.version + 1 if newest else 1, entered_by=by,
                       entered_at=at, note=note)  # fmt: skip
    saved(sheet, LimitRefused)
    for line in source.lines.all() if source else ():
        saved(
            LimitLine(shop=engine.shop, sheet=sheet, **{name: getattr(line, name) for name in LimitLine.TYPED}),
            LimitRefused,
        )
    return sheet


@transaction.atomic
def add_line(
    *, by: Person, sheet: LimitSheet, photo: UploadedFile | None = None, **typed: object
) -> LimitLine:  # fmt: skip
    """Type a line into a sheet in preparation; figures as typed, with their unit."""
    _refuse_typing(by, sheet)
    return _written(LimitLine(shop=sheet.shop, sheet=sheet), photo, typed)


@transaction.atomic
def change_line(
    *, by: Person, line: LimitLine, photo: UploadedFile | None = None, **typed: object
) -> LimitLine:  # fmt: skip
    """Put a line in another's place while the sheet is in preparation; the earlier one stays to be seen."""
    _refuse_typing(by, line.sheet)
    _refuse_gone(line)
    kept = {name: getattr(line, name) for name in LimitLine.TYPED}
    return _written(LimitLine(shop=line.shop, sheet=line.sheet, replaces=line, **kept), photo, typed)


@transaction.atomic
def withdraw_line(*, by: Person, line: LimitLine) -> LimitLine:
    """Take a line out of a sheet in preparation; it stays to be seen."""
    _refuse_typing(by, line.sheet)
    _refuse_gone(line)
    kept = {name: getattr(line, name) for name in LimitLine.TYPED}
    return saved(LimitLine(shop=line.shop, sheet=line.sheet, replaces=line, is_withdrawn=True, **kept), LimitRefused)


@transaction.atomic
def compare_sheet(*, by: Person, at: datetime, sheet: LimitSheet) -> LimitSheet:
    """Bring a sheet into force: a second person has compared every line with its source."""
    refuse_others(by, WHO_COMPARES, LimitRefused, sheet)
    sheet = _ready(sheet)
    if by == sheet.entered_by:
        raise LimitRefused(_(
            "%(who)s entered this sheet and can't be the one who compares it with its source; a second person does, or say "
            "why nobody else did.") % {"who": by})  # fmt: skip
    sheet.compared_by, sheet.in_force_at = by, at
    return saved(sheet, LimitRefused)


@transaction.atomic
def bring_into_force_uncompared(*, by: Person, at: datetime, sheet: LimitSheet, why: str) -> LimitSheet:
    """Bring a sheet into force that nobody else compared; it says so, and why, wherever it judges."""
    refuse_others(by, KEEP_LIMITS, LimitRefused, sheet)
    sheet = _ready(sheet)
    if not why.strip():
        raise LimitRefused(at_fields=[("why", _("Nothing was written; say why nobody else compared the sheet."))])
    sheet.nobody_compared, sheet.in_force_at = why.strip(), at
    return saved(sheet, LimitRefused)


@transaction.atomic
def give_up_sheet(*, by: Person, at: datetime, sheet: LimitSheet, why: str) -> LimitSheet:
    """Give up a sheet in preparation; it stays to be seen, and never judges."""
    refuse_others(by, KEEP_LIMITS, LimitRefused, sheet)
    sheet = LimitSheet.objects.select_for_update().get(pk=sheet.pk)
    _refuse_closed(sheet)
    if not why.strip():
        raise LimitRefused(at_fields=[("why", _("Nothing was written; say why the sheet is given up."))])
    sheet.given_up_at, sheet.given_up_because = at, why.strip()
    return saved(sheet, LimitRefused)


def _written(line: LimitLine, photo: UploadedFile | None, typed: dict[str, object]) -> LimitLine:
    for name, value in typed.items():
        setattr(line, name, value)
    if line.characteristic not in queries.characteristics():
        raise LimitRefused(at_fields=[("characteristic", _("Choose what is limited."))])
    figures = {name: getattr(line, name) for name in LimitLine.FIGURES}
    figures, unreadable = with_units(figures, line.characteristic, line.shop)
    if unreadable:
        raise LimitRefused(at_fields=[(name, in_words(sentence)) for name, sentence in unreadable])
    for name, text in figures.items():
        setattr(line, name, text)
    others = [one for one in line.sheet.lines.all() if one.pk != line.replaces_id]
    wrong = [(field or "lower", in_words(sentence)) for place, field, sentence in problems([*others, line], line.shop)
             if place == len(others)]  # fmt: skip
    if wrong:
        raise LimitRefused(at_fields=wrong)
    if photo:
        line.photo = _checked(photo)
    return saved(line, LimitRefused)


def _checked(photo: UploadedFile) -> UploadedFile:
    try:
        return named_photo(photo)
    except PhotoRefused as refused:
        raise LimitRefused(at_fields=[("photo", str(refused))]) from refused


def _ready(sheet: LimitSheet) -> LimitSheet:
    """The sheet, fit to judge: in preparation, with lines, all of them readable."""
    sheet = LimitSheet.objects.select_for_update().select_related("engine").get(pk=sheet.pk)
    _refuse_closed(sheet)
    lines = list(sheet.lines.all())
    if not lines:
        raise LimitRefused(_("The sheet has no line yet; a sheet without lines would take every limit away."))
    if wrong := problems(lines, sheet.shop):
        place, _field, sentence = wrong[0]
        raise LimitRefused(f"{lines[place].characteristic}: {in_words(sentence)}")
    return sheet


def _refuse_typing(by: Person, sheet: LimitSheet) -> None:
    refuse_others(by, KEEP_LIMITS, LimitRefused, sheet)
    _refuse_closed(sheet)
    if by != sheet.entered_by:
        raise LimitRefused(_(
            "%(who)s entered this sheet; only they type in it, so that somebody else can compare it. Tell them, or give it "
            "up and begin another.") % {"who": sheet.entered_by})  # fmt: skip


def _refuse_closed(sheet: LimitSheet) -> None:
    if sheet.given_up_at:
        raise LimitRefused(_("Sheet %(version)s was given up; begin another.") % {"version": sheet.version})
    if sheet.in_force_at:
        said = _("Sheet %(version)s came into force on %(on)s and never changes; begin the next version.")
        raise LimitRefused(said % {"version": sheet.version, "on": f"{sheet.in_force_at:%Y-%m-%d}"})


def _refuse_gone(line: LimitLine) -> None:
    if line.is_withdrawn or LimitLine.every.filter(replaces=line).exists():
        raise LimitRefused(_("This line was changed or withdrawn meanwhile; look at the sheet again."))
