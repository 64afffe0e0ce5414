"""Limit sheets: begun, typed, compared by a second person, in force; nothing in them ever changes."""

from datetime import date, timedelta
from io import BytesIO

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.db import DatabaseError, transaction
from PIL import Image

from logbook.bench.queries import lines_for
from logbook.engines import photos, queries, services
from logbook.engines.models import LimitLine, LimitSheet
from measurements.assess import assess
from tests.factories import NOW, make_engine, make_limits, make_person, make_shop

pytestmark = pytest.mark.django_db
LASH = {"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm", "source": "manual 3, page 12"}


@pytest.fixture
def keeper():
    return make_person(make_shop(), "Bea", "toolroom")


@pytest.fixture
def second(keeper):
    return make_person(keeper.shop, "Ida", "supervisor")


@pytest.fixture
def engine(keeper):
    return make_engine(keeper.shop)


@pytest.fixture
def sheet(keeper, engine):
    return services.begin_sheet(by=keeper, at=NOW, engine=engine)


def refused(act, **told) -> list[tuple[str, str]] | str:
    with pytest.raises(services.LimitRefused) as caught:
        act(**told)
    return caught.value.at_fields or str(caught.value)


def picture(kind: str = "JPEG", size: tuple[int, int] = (30, 20)) -> bytes:
    kept = BytesIO()
    Image.new("RGB", size, "white").save(kept, kind)
    return kept.getvalue()


def test_a_sheet_comes_into_force_when_a_second_person_has_compared_it(keeper, second, engine, sheet):
    services.add_line(by=keeper, sheet=sheet, **LASH)
    assert queries.sheet_in_force(engine, NOW) is None
    services.compare_sheet(by=second, at=NOW, sheet=sheet)
    assert queries.sheet_in_force(engine, NOW) == sheet
    assert queries.sheet_in_force(engine, NOW - timedelta(seconds=1)) is None


def test_whoever_entered_a_sheet_does_not_compare_it(keeper, sheet):
    services.add_line(by=keeper, sheet=sheet, **LASH)
    assert refused(services.compare_sheet, by=keeper, at=NOW, sheet=sheet) == (
        "Bea entered this sheet and can't be the one who compares it with its source; a second person does, or say why "
        "nobody else did."
    )


def test_only_who_began_a_sheet_types_in_it(second, sheet):
    assert refused(services.add_line, by=second, sheet=sheet, **LASH) == (
        "Bea entered this sheet; only they type in it, so that somebody else can compare it. Tell them, or give it up and "
        "begin another."
    )


def test_a_sheet_that_nobody_else_compared_says_why(keeper, engine, sheet):
    services.add_line(by=keeper, sheet=sheet, **LASH)
    told = {"by": keeper, "at": NOW, "sheet": sheet}
    assert refused(services.bring_into_force_uncompared, **told, why=" ") == [
        ("why", "Nothing was written; say why nobody else compared the sheet.")
    ]
    services.bring_into_force_uncompared(**told, why="one-person shop")
    held = queries.sheet_in_force(engine, NOW)
    assert (held.compared_by, held.nobody_compared) == (None, "one-person shop")


def test_an_empty_sheet_comes_into_force_by_nobody(second, sheet):
    assert refused(services.compare_sheet, by=second, at=NOW, sheet=sheet) == (
        "The sheet has no line yet; a sheet without lines would take every limit away."
    )


def test_the_next_version_starts_from_the_one_in_force(keeper, second, engine):
    first = make_limits(engine, keeper, second)
    following = services.begin_sheet(by=keeper, at=NOW, engine=engine, note="new manual")
    assert (following.version, following.note) == (2, "new manual")
    assert [line.as_document() for line in following.lines.all()] == [line.as_document() for line in first.lines.all()]
    assert queries.sheet_in_force(engine, NOW) == first


def test_a_sheet_is_copied_from_another_engine_and_says_so(keeper, second, engine):
    twin = make_engine(keeper.shop, "South pump")
    make_limits(twin, keeper, second)
    copied = services.begin_sheet(by=keeper, at=NOW, engine=engine, copied_from=twin)
    assert (copied.lines.count(), copied.note) == (2, "copied from South pump, sheet 1")


def test_an_engine_without_limits_is_not_copied_from_nor_one_of_another_shop(keeper, engine):
    bare = make_engine(keeper.shop, "South pump")
    told = {"by": keeper, "at": NOW, "engine": engine}
    assert refused(services.begin_sheet, **told, copied_from=bare) == [
        ("copied_from", "South pump has no limit sheet in force to copy from.")
    ]
    stranger = make_engine(make_shop("Other shop"), "Strange")
    assert refused(services.begin_sheet, **told, copied_from=stranger) == "This belongs to another shop."


def test_one_sheet_is_in_preparation_at_a_time_and_may_be_given_up(keeper, second, engine, sheet):
    told = {"by": second, "at": NOW, "engine": engine}
    assert refused(services.begin_sheet, **told) == (
        "Sheet 1 of this engine is in preparation; finish it or give it up first."
    )
    services.give_up_sheet(by=second, at=NOW, sheet=sheet, why="wrong manual")
    assert services.begin_sheet(**told).version == 2
    assert refused(services.add_line, by=keeper, sheet=LimitSheet.objects.get(pk=sheet.pk), **LASH) == (
        "Sheet 1 was given up; begin another."
    )


# --- lines


def test_a_figure_keeps_what_was_typed_and_its_unit_is_written_out(keeper, sheet):
    line = services.add_line(by=keeper, sheet=sheet, **{**LASH, "lower": "0.25", "upper": "0.35 mm", "nominal": ".30"})
    line.refresh_from_db()
    assert (line.lower, line.upper, line.nominal) == ("0.25 mm", "0.35 mm", ".30 mm")


@pytest.mark.parametrize(
    ("typed", "field", "said"),
    [
        ({"lower": "0.25", "upper": "0.35"}, "lower",
         "Read “0.25” without a unit; write it behind at least one figure, such as 0.25 mm."),
        ({"lower": "0.40 mm"}, "lower", "lower 0.4 is not below upper 0.35: give the smaller figure as lower."),
        ({"lower": "0.25 bar"}, "lower", None),
        ({"lower": "a quarter"}, "lower", None),
        ({"lower": "", "upper": ""}, "lower", "The limit has no figure: give lower, upper, set_lower or set_upper."),
        ({"condition": "15..x °C"}, "condition", "Read the condition 15..x °C: a span of temperatures looks like 15..30 °C."),
        ({"characteristic": "horn.loudness"}, "characteristic", "Choose what is limited."),
        ({"source": ""}, "source", "This field cannot be blank."),
        ({"lower": "0.25 mm; 0.26 mm"}, "lower", None),
        ({"provisional_by": "Ida"}, "__all__", "A provisional limit names its author, its grounds and the day it ends."),
    ],
)  # fmt: skip
def test_a_line_that_cannot_be_judged_by_is_refused_at_its_field(keeper, sheet, typed, field, said):
    told = refused(services.add_line, by=keeper, sheet=sheet, **{**LASH, **typed})
    assert [name for name, _said in told] == [field]
    assert said is None or told[0][1] == said
    assert LimitLine.every.count() == 0


def test_a_limit_is_given_once_for_a_condition(keeper, sheet):
    services.add_line(by=keeper, sheet=sheet, **LASH, condition="cold")
    told = refused(services.add_line, by=keeper, sheet=sheet, **LASH, condition="cold")
    assert told == [
        ("lower", "valve_lash.intake has this limit twice for the same condition and stations; which one holds?")
    ]
    assert services.add_line(by=keeper, sheet=sheet, **LASH, condition="hot").pk


def test_a_changed_line_follows_the_earlier_one_which_stays_to_be_seen(keeper, second, engine, sheet):
    first = services.add_line(by=keeper, sheet=sheet, **LASH)
    changed = services.change_line(by=keeper, line=first, upper="0.40 mm")
    assert [(line.upper, line.source) for line in sheet.lines.all()] == [("0.40 mm", "manual 3, page 12")]
    assert queries.lines_with_their_past(sheet) == [first, changed]
    services.compare_sheet(by=second, at=NOW, sheet=sheet)
    assert lines_for(sheet, "valve_lash", NOW.date()) == [changed]


def test_a_line_is_changed_once(keeper, sheet):
    first = services.add_line(by=keeper, sheet=sheet, **LASH)
    services.change_line(by=keeper, line=first, upper="0.40 mm")
    assert refused(services.change_line, by=keeper, line=first, upper="0.45 mm") == (
        "This line was changed or withdrawn meanwhile; look at the sheet again."
    )


def test_a_withdrawn_line_judges_no_more(keeper, sheet):
    line = services.add_line(by=keeper, sheet=sheet, **LASH)
    services.withdraw_line(by=keeper, line=line)
    assert (sheet.lines.count(), LimitLine.every.count()) == (0, 2)


def test_a_sheet_in_force_takes_no_line_and_loses_none(keeper, second, engine):
    held = make_limits(engine, keeper, second)
    said = "Sheet 1 came into force on 2023-01-03 and never changes; begin the next version."
    assert refused(services.add_line, by=keeper, sheet=held, **LASH, condition="hot") == said
    assert refused(services.change_line, by=keeper, line=held.lines.first(), upper="1 mm") == said
    assert refused(services.withdraw_line, by=keeper, line=held.lines.first()) == said
    assert refused(services.give_up_sheet, by=keeper, at=NOW, sheet=held, why="x") == said
    assert refused(services.compare_sheet, by=second, at=NOW, sheet=held) == said


def test_the_database_itself_refuses_to_change_a_line(keeper, second, engine):
    held = make_limits(engine, keeper, second)
    with pytest.raises(DatabaseError, match="never changed or deleted"), transaction.atomic():
        held.lines.update(upper="1 mm")


def test_a_provisional_limit_past_its_end_is_flagged(keeper, second, engine, sheet):
    line = services.add_line(by=keeper, sheet=sheet, **LASH, provisional_by="Bea", provisional_grounds="like engine",
                             provisional_until=date(2026, 4, 30))  # fmt: skip
    services.compare_sheet(by=second, at=NOW, sheet=sheet)
    assert queries.provisional_past_end(sheet, date(2026, 4, 30)) == []
    assert queries.provisional_past_end(sheet, date(2026, 5, 1)) == [line]


def test_what_is_kept_is_what_assess_reads(keeper, engine, sheet):
    services.add_line(by=keeper, sheet=sheet, characteristic="compression.pressure", lower="24", upper="29 bar",
                      source="manual", reference_barometer="1013 hPa", decision_rule="simple")  # fmt: skip
    told = assess({
        "engine": engine.as_document(), "shop": keeper.shop.as_document(),
        "limits": [line.as_document() for line in sheet.lines.all()],
        "measurements": [{"kind": "compression", "readings": {"1": "26"}}],
    })  # fmt: skip
    finding = told["findings"][0]
    assert (finding["lower"], finding["upper"], finding["verdict"]) == (24, 29, "within")


def test_technicians_and_witnesses_enter_no_limits_but_a_technician_may_compare(keeper, engine, sheet):
    technician = make_person(keeper.shop, "Tom", "technician")
    witness = make_person(keeper.shop, "Wim", "witness")
    services.add_line(by=keeper, sheet=sheet, **LASH)
    assert refused(services.begin_sheet, by=technician, at=NOW, engine=engine) == (
        "This is done by a toolroom or supervisor; Tom has no such role."
    )
    assert refused(services.compare_sheet, by=witness, at=NOW, sheet=sheet) == (
        "This is done by a technician or toolroom or supervisor; Wim has no such role."
    )
    assert services.compare_sheet(by=technician, at=NOW, sheet=sheet).compared_by == technician


# --- photos


@pytest.mark.parametrize(("kind", "ending"), [("JPEG", ".jpg"), ("PNG", ".png")])
def test_a_photo_is_kept_under_a_name_of_our_own(keeper, sheet, kind, ending):
    upload = SimpleUploadedFile("../../my page.php", picture(kind))
    line = services.add_line(by=keeper, sheet=sheet, photo=upload, **LASH)
    assert line.photo.name.startswith("limits/") and line.photo.name.endswith(ending)
    assert "page" not in line.photo.name
    assert line.photo.read() == picture(kind)


@pytest.mark.parametrize(
    "content",
    [b"<svg xmlns='http://www.w3.org/2000/svg'/>", picture()[:200], b"", picture("GIF"), b"%PDF-1.7"],
    ids=["svg", "cut off", "empty", "gif", "pdf"],
)
def test_what_is_no_whole_jpeg_or_png_is_refused(keeper, sheet, content):
    told = refused(services.add_line, by=keeper, sheet=sheet, photo=SimpleUploadedFile("a.jpg", content), **LASH)
    assert told == [("photo", "This is no whole JPEG or PNG picture; take the photo again, or choose another file.")]


def test_a_photo_larger_than_8_mb_is_refused(keeper, sheet):
    upload = SimpleUploadedFile("a.jpg", picture() + bytes(8_000_000))
    told = refused(services.add_line, by=keeper, sheet=sheet, photo=upload, **LASH)
    assert told == [("photo", "The file has 8.0 MB; a photo has 8 MB at most. Take it at a lower resolution.")]


def test_a_picture_that_unpacks_to_too_much_is_refused_before_it_is_unpacked(monkeypatch):
    monkeypatch.setattr(photos, "MOST_PIXELS", 500)
    with pytest.raises(photos.PhotoRefused, match="too many pixels"):
        photos.named_photo(SimpleUploadedFile("a.png", picture("PNG", (30, 20))))


def test_a_photo_goes_along_when_a_line_is_changed_or_copied(keeper, second, engine, sheet):
    line = services.add_line(by=keeper, sheet=sheet, photo=SimpleUploadedFile("a.jpg", picture()), **LASH)
    changed = services.change_line(by=keeper, line=line, upper="0.40 mm")
    services.compare_sheet(by=second, at=NOW, sheet=sheet)
    following = services.begin_sheet(by=keeper, at=NOW, engine=engine)
    assert [changed.photo.name, following.lines.get().photo.name] == [line.photo.name] * 2
