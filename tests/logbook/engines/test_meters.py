"""Meters: fitted, read, replaced, corrected; what stands on a reading follows it."""

from datetime import UTC, datetime, timedelta

import pytest
from django.db import DatabaseError, transaction

from logbook.engines import queries, services
from logbook.engines.models import Meter, MeterReading, Part
from logbook.work.models import Interval
from tests.factories import NOW, make_engine, make_person, make_shop


def day(month: int, of: int, year: int = 2026) -> datetime:
    return datetime(year, month, of, 8, 0, tzinfo=UTC)


pytestmark = pytest.mark.django_db


@pytest.fixture
def supervisor():
    return make_person(make_shop(), "Ida", "supervisor")


@pytest.fixture
def technician(supervisor):
    return make_person(supervisor.shop, "Tom", "technician")


@pytest.fixture
def engine(supervisor):
    return make_engine(supervisor.shop)


@pytest.fixture
def meter(supervisor, engine):
    return services.fit_meter(by=supervisor, at=NOW, engine=engine, unit="h", fitted_at=day(1, 1), engine_before=1000.0)


def read(by, meter, shows, taken_at, **more):
    return services.read_meter(by=by, at=NOW, meter=meter, shows=shows, taken_at=taken_at, **more)


def refused(act, **told) -> list[tuple[str, str]]:
    with pytest.raises(services.EngineryRefused) as caught:
        act(**told)
    return caught.value.at_fields


def test_a_fitted_meter_counts_on_from_what_the_engine_had_run(meter, engine, technician):
    read(technician, meter, 120.0, day(2, 1))
    assert queries.hours_at(engine, NOW) == 1120.0
    assert queries.hours_at(engine, day(1, 15)) == 1000.0
    assert queries.hours_at(engine, day(1, 1) - timedelta(days=1)) is None
    assert queries.latest_total(engine, "starts") is None


def test_an_engine_has_one_meter_a_unit(meter, engine, supervisor):
    told = {"by": supervisor, "at": NOW, "engine": engine, "unit": "h", "fitted_at": day(2, 1)}
    assert refused(services.fit_meter, **told) == [
        ("__all__", "The engine has a meter that counts this already; replace it instead.")
    ]
    assert services.fit_meter(**{**told, "unit": "starts"}).unit == "starts"


def test_a_reading_below_the_last_one_is_asked_about_and_kept_with_a_remark(meter, engine, technician):
    read(technician, meter, 120.0, day(2, 1))
    told = {"by": technician, "at": NOW, "meter": meter, "shows": 102.0, "taken_at": day(2, 2)}
    with pytest.raises(services.MeterAsks) as caught:
        services.read_meter(**told)
    assert caught.value.at_fields == [
        ("shows", "Read 102, but the meter showed 120 on 2026-02-01. Was a digit misread? If the meter was replaced, record "
                  "that; if the other reading is wrong, correct it. Else say why this one stands all the same.")
    ]  # fmt: skip
    assert MeterReading.objects.count() == 2
    kept = services.read_meter(**told, remark="drum slipped, seen by both of us")
    assert kept.remark == "drum slipped, seen by both of us"


def test_a_reading_above_a_later_one_is_asked_about(meter, technician):
    read(technician, meter, 120.0, day(3, 1))
    told = refused(services.read_meter, by=technician, at=NOW, meter=meter, shows=130.0, taken_at=day(2, 20))
    assert told[0][1].startswith("Read 130, but the meter showed 120 on 2026-03-01.")


def test_more_hours_than_the_days_have_are_asked_about(meter, technician):
    told = refused(services.read_meter, by=technician, at=NOW, meter=meter, shows=4210.0, taken_at=day(1, 11))
    assert told[0][1].startswith(
        "Read 4210: that is 4210 h more than the 0 of 2026-01-01, in 10 days, which have fewer"
    )


def test_a_reading_far_above_the_usual_use_is_asked_about(meter, technician):
    read(technician, meter, 40.0, day(1, 11))  # 4 h a day
    read(technician, meter, 80.0, day(1, 21))
    told = refused(services.read_meter, by=technician, at=NOW, meter=meter, shows=290.0, taken_at=day(1, 31))
    assert told == [
        ("shows", "Read 290: that is 210 h since 2026-01-21; by its usual use of 4 a day it would be about 40. Was a digit "
                  "misread? Else say why it stands all the same.")
    ]  # fmt: skip
    assert read(technician, meter, 270.0, day(1, 31)).remark == ""  # 19 h a day: less than five times the usual


@pytest.mark.parametrize(
    ("taken_at", "said"),
    [
        (day(12, 1, 2025), "The meter was fitted on 2026-01-01; it can't have been read before."),
        (NOW + timedelta(minutes=1), "That moment is still to come; write when it happened."),
    ],
)
def test_a_meter_is_read_while_it_is_fitted(meter, technician, taken_at, said):
    told = {"by": technician, "at": NOW, "meter": meter, "shows": 3.0, "taken_at": taken_at}
    assert refused(services.read_meter, **told) == [("taken_at", said)]


def test_a_negative_reading_is_refused(meter, technician):
    told = {"by": technician, "at": NOW, "meter": meter, "shows": -3.0, "taken_at": day(2, 1), "remark": "so it says"}
    assert [field for field, _said in refused(services.read_meter, **told)] == ["shows"]


def test_who_keeps_gauges_reads_no_meter(meter, supervisor):
    keeper = make_person(supervisor.shop, "Bea", "toolroom")
    with pytest.raises(services.MeterRefused, match="done by a technician or supervisor; Bea has no such role"):
        read(keeper, meter, 5.0, day(2, 1))


def test_a_replaced_meter_hands_its_hours_on_in_one_act(meter, engine, supervisor, technician):
    new = services.replace_meter(
        by=supervisor, at=NOW, meter=meter, replaced_at=day(3, 1), last_shows=250.0, new_shows=12.0, new_mark="M-2"
    )
    meter.refresh_from_db()
    assert (meter.replaced_at, new.engine_before, new.mark) == (day(3, 1), 1250.0, "M-2")
    assert queries.hours_at(engine, day(3, 1)) == 1250.0
    read(technician, new, 62.0, day(4, 1))
    assert queries.hours_at(engine, NOW) == 1300.0
    with pytest.raises(services.MeterRefused, match="replaced already, on 2026-03-01"):
        services.replace_meter(by=supervisor, at=NOW, meter=meter, replaced_at=day(4, 1), last_shows=260.0)


def test_a_replacement_is_all_or_nothing(meter, supervisor, technician):
    read(technician, meter, 300.0, day(2, 20))
    told = refused(services.replace_meter, by=supervisor, at=NOW, meter=meter, replaced_at=day(3, 1), last_shows=250.0)
    assert [field for field, _said in told] == ["last_shows"]
    meter.refresh_from_db()
    assert (meter.replaced_at, Meter.objects.count(), MeterReading.objects.count()) == (None, 1, 2)


def test_a_meter_is_not_replaced_before_it_was_last_read(meter, supervisor, technician):
    read(technician, meter, 300.0, day(3, 20))
    told = refused(services.replace_meter, by=supervisor, at=NOW, meter=meter, replaced_at=day(3, 1), last_shows=250.0)
    assert told == [("replaced_at", "The meter was read after that moment; it can't have been replaced before.")]


def test_the_new_one_is_read_once_a_meter_is_replaced(meter, supervisor, technician):
    services.replace_meter(by=supervisor, at=NOW, meter=meter, replaced_at=day(3, 1), last_shows=250.0)
    meter.refresh_from_db()
    told = refused(services.read_meter, by=technician, at=NOW, meter=meter, shows=260.0, taken_at=day(3, 2))
    assert told == [("taken_at", "The meter was replaced on 2026-03-01; read the one that took its place.")]


# --- corrections


def test_a_wrong_reading_is_superseded_with_a_reason_and_stays_to_be_seen(meter, engine, technician):
    wrong = read(technician, meter, 520.0, day(2, 1))
    right = services.supersede_reading(by=technician, at=NOW, reading=wrong, shows=250.0, reason="digits swapped")
    assert (right.supersedes, right.taken_at, right.reason) == (wrong, wrong.taken_at, "digits swapped")
    assert queries.hours_at(engine, NOW) == 1250.0
    assert MeterReading.objects.filter(pk=wrong.pk, shows=520.0).exists()


def test_a_correction_says_why(meter, technician):
    wrong = read(technician, meter, 520.0, day(2, 1))
    told = {"by": technician, "at": NOW, "reading": wrong, "shows": 250.0, "reason": " "}
    assert refused(services.supersede_reading, **told) == [
        ("reason", "Nothing was written; say why the earlier reading was wrong.")
    ]


def test_a_reading_is_corrected_once_and_then_its_correction(meter, technician):
    wrong = read(technician, meter, 520.0, day(2, 1))
    services.supersede_reading(by=technician, at=NOW, reading=wrong, shows=250.0, reason="digits swapped")
    with pytest.raises(services.MeterRefused, match="corrected already, to 250; correct that one instead"):
        services.supersede_reading(by=technician, at=NOW, reading=wrong, shows=205.0, reason="again")


def test_the_database_itself_refuses_to_change_a_reading(meter, technician):
    reading = read(technician, meter, 52.0, day(2, 1))
    with pytest.raises(DatabaseError, match="never changed or deleted"), transaction.atomic():
        MeterReading.objects.filter(pk=reading.pk).update(shows=1.0)


def fitted(technician, engine, mark, at, **more):
    part = services.add_part(by=technician, at=NOW, kind=Part.Kind.INJECTOR, mark=mark)
    return services.fit_part(by=technician, at=NOW, part=part, engine=engine, position=f"cylinder {mark}", fitted_at=at,
                             **more)  # fmt: skip


def test_what_stood_on_a_wrong_reading_is_named_and_follows_the_right_one(meter, engine, supervisor, technician):
    before = fitted(technician, engine, "1", day(1, 20))
    wrong = read(technician, meter, 520.0, day(2, 1))
    on_it = fitted(technician, engine, "2", day(2, 3))
    read(technician, meter, 540.0, day(3, 1))
    after = fitted(technician, engine, "3", day(3, 2))
    Interval.objects.create(shop=engine.shop, engine=engine, title="Oil", every_hours=250)
    Interval.objects.create(shop=engine.shop, engine=engine, title="Hoses", every_days=365)
    standing = queries.depends_on(wrong)
    assert ([one.part.mark for one in standing.fitted], standing.meters, standing.jobs) == (["2"], [], ["Oil"])
    services.supersede_reading(by=technician, at=NOW, reading=wrong, shows=502.0, reason="digits swapped")
    for one in (before, on_it, after):
        one.refresh_from_db()
    assert [before.fitted_total, on_it.fitted_total, after.fitted_total] == [1000.0, 1502.0, 1540.0]


def test_a_wrong_last_reading_of_a_replaced_meter_moves_all_that_came_after(meter, engine, supervisor, technician):
    new = services.replace_meter(by=supervisor, at=NOW, meter=meter, replaced_at=day(3, 1), last_shows=520.0)
    on_new = fitted(technician, engine, "1", day(3, 20))
    closing = meter.readings.get(shows=520.0)
    standing = queries.depends_on(closing)
    assert (standing.meters, [one.part.mark for one in standing.fitted]) == ([new], ["1"])
    services.supersede_reading(by=supervisor, at=NOW, reading=closing, shows=250.0, reason="digits swapped")
    new.refresh_from_db()
    on_new.refresh_from_db()
    assert (new.engine_before, on_new.fitted_total, queries.hours_at(engine, NOW)) == (1250.0, 1250.0, 1250.0)


def test_a_wrong_first_reading_leaves_what_the_engine_had_run_before(meter, engine, technician):
    first = meter.readings.get()
    read(technician, meter, 120.0, day(2, 1))
    on_it = fitted(technician, engine, "1", day(2, 2))
    services.supersede_reading(
        by=technician, at=NOW, reading=first, shows=20.0, reason="the new meter didn't start at 0"
    )
    on_it.refresh_from_db()
    assert queries.hours_at(engine, day(1, 2)) == 1000.0
    assert (queries.hours_at(engine, NOW), on_it.fitted_total) == (1100.0, 1100.0)


def test_a_correction_that_would_take_a_part_off_before_it_was_fitted_is_refused(meter, engine, technician):
    read(technician, meter, 200.0, day(2, 1))
    sits = fitted(technician, engine, "1", day(2, 2))
    off = read(technician, meter, 300.0, day(3, 1))
    services.take_off_part(by=technician, at=NOW, part=sits.part, taken_off_at=day(3, 2))
    told = refused(services.supersede_reading, by=technician, at=NOW, reading=off, shows=150.0, reason="misread",
                   remark="so it stands")  # fmt: skip
    assert told == [("shows", "By this reading injector 1 would have been taken off at 1150 h and fitted at 1200 h. Was a "
                              "digit misread?")]  # fmt: skip
    assert MeterReading.objects.filter(supersedes=off).count() == 0


# --- average use


def test_average_use_is_hours_over_days(meter, engine, technician):
    read(technician, meter, 90.0, day(1, 31))
    assert queries.usage(engine, "h", NOW).per_day == 3.0  # 90 h in 30 days


@pytest.mark.parametrize(
    ("shows", "why"),
    [
        ([], "one meter reading only"),
        ([(0.0, day(2, 1))], "no running between the meter readings"),
        ([(50.0, day(2, 1)), (40.0, day(2, 9))], "the meter ran backward, from 1050 to 1040"),
        ([(5.0, day(1, 1) + timedelta(hours=6))], "the meter readings are less than a day apart"),
    ],
)
def test_where_use_cannot_be_told_it_says_why(meter, engine, technician, shows, why):
    for value, taken_at in shows:
        read(technician, meter, value, taken_at, remark="so it shows")
    assert str(queries.usage(engine, "h", NOW)) == why


def test_an_engine_without_a_meter_has_no_use(engine):
    assert str(queries.usage(engine, "h", NOW)) == "no meter reading"


def test_use_is_counted_across_a_replaced_meter(meter, engine, supervisor, technician):
    new = services.replace_meter(by=supervisor, at=NOW, meter=meter, replaced_at=day(1, 11), last_shows=50.0)
    read(technician, new, 50.0, day(1, 21))
    assert queries.usage(engine, "h", NOW).per_day == 5.0  # 100 h in 20 days
