"""Parts: fitted, taken off, moved; the hours they have run follow them from engine to engine."""

from datetime import UTC, datetime

import pytest

from logbook.engines import queries, services
from logbook.engines.models import Fitting, MeterReading, Part
from tests.factories import NOW, make_engine, make_person, make_shop

pytestmark = pytest.mark.django_db


def day(month: int, of: int) -> datetime:
    return datetime(2026, month, of, 8, 0, tzinfo=UTC)


@pytest.fixture
def supervisor():
    return make_person(make_shop(), "Ida", "supervisor")


@pytest.fixture
def technician(supervisor):
    return make_person(supervisor.shop, "Tom", "technician")


def engine_with_meter(by, name, before):
    engine = make_engine(by.shop, name)
    services.fit_meter(by=by, at=NOW, engine=engine, unit="h", fitted_at=day(1, 1), engine_before=before)
    return engine


@pytest.fixture
def north(supervisor):
    return engine_with_meter(supervisor, "North pump", 1000.0)


@pytest.fixture
def south(supervisor):
    return engine_with_meter(supervisor, "South pump", 7000.0)


@pytest.fixture
def head(technician):
    return services.add_part(by=technician, at=NOW, kind=Part.Kind.HEAD, mark="H-12", hours_when_new_here=300.0)


def fit(by, part, engine, position="cylinder 3", fitted_at=None, **more):
    fitted_at = fitted_at or day(2, 1)
    return services.fit_part(by=by, at=NOW, part=part, engine=engine, position=position, fitted_at=fitted_at, **more)


def hours(part, person):
    part = queries.parts_with_places(person).get(pk=part.pk)
    return queries.hours_of([part], NOW)[part.pk]


def refused(act, **told) -> list[tuple[str, str]]:
    with pytest.raises(services.EngineryRefused) as caught:
        act(**told)
    return caught.value.at_fields or str(caught.value)


def test_hours_follow_a_part_from_engine_to_engine(technician, north, south, head):
    fit(technician, head, north, meter_shows=100.0)
    services.move_part(by=technician, at=NOW, part=head, engine=south, position="cylinder 1", moved_at=day(3, 1),
                       left_meter_shows=350.0, meter_shows=80.0)  # fmt: skip
    services.read_meter(by=technician, at=NOW, meter=south.meters.get(), shows=130.0, taken_at=day(4, 1))
    # 300 h when it came, 250 h in the first engine, 50 h in the second
    assert hours(head, technician) == queries.PartHours(600.0)
    assert [one.part for one in queries.sitting_in(south)] == [head]
    assert list(queries.sitting_in(north)) == []


def test_a_part_is_fitted_at_the_last_meter_reading_when_none_is_taken(technician, north, head):
    assert fit(technician, head, north).fitted_total == 1000.0


def test_what_the_meter_shows_at_the_fitting_is_a_reading(technician, north, head):
    fit(technician, head, north, meter_shows=100.0)
    assert MeterReading.objects.get(shows=100.0).taken_at == day(2, 1)


def test_a_slip_of_the_meter_is_asked_about_here_too(technician, north, head):
    told = {"by": technician, "at": NOW, "part": head, "engine": north, "position": "cylinder 3", "fitted_at": day(2, 1),
            "meter_shows": 9000.0}  # fmt: skip
    assert refused(services.fit_part, **told)[0][0] == "meter_shows"
    assert Fitting.objects.count() == 0
    assert services.fit_part(**told, remark="ran on the test stand").fitted_total == 10000.0


def test_without_a_meter_no_hours_are_made_up(technician, head):
    bare = make_engine(technician.shop, "No meter")
    assert fit(technician, head, bare).fitted_total is None
    assert hours(head, technician) == queries.PartHours(None, "no hours are known of its time in No meter")
    told = {"by": technician, "at": NOW, "part": head, "taken_off_at": day(3, 1), "meter_shows": 5.0}
    assert refused(services.take_off_part, **told) == [
        ("meter_shows", "No meter has no hour meter; fit one first, or leave this empty.")
    ]


def test_hours_that_would_run_backward_are_not_told(technician, north, head):
    fit(technician, head, north, meter_shows=100.0)
    services.read_meter(
        by=technician, at=NOW, meter=north.meters.get(), shows=40.0, taken_at=day(3, 1), remark="so it is"
    )
    assert hours(head, technician).why_not == "North pump stands at 1040 h, below the 1100 h it was fitted at"


def test_a_part_sits_in_one_place(technician, north, south, head):
    fit(technician, head, north)
    told = {
        "by": technician,
        "at": NOW,
        "part": head,
        "engine": south,
        "position": "cylinder 1",
        "fitted_at": day(3, 1),
    }
    assert refused(services.fit_part, **told) == (
        "cylinder head H-12 sits in North pump, cylinder 3; take it off there first, or move it."
    )


def test_a_position_holds_one_part_of_a_kind(technician, north, head):
    fit(technician, head, north)
    other = services.add_part(by=technician, at=NOW, kind=Part.Kind.HEAD, mark="H-13")
    told = {
        "by": technician,
        "at": NOW,
        "part": other,
        "engine": north,
        "position": "Cylinder  3",
        "fitted_at": day(3, 1),
    }
    assert refused(services.fit_part, **told) == [
        ("position", "cylinder head H-12 sits at Cylinder 3 since 2026-02-01; take it off first.")
    ]
    liner = services.add_part(by=technician, at=NOW, kind=Part.Kind.LINER, mark="L-3")
    assert fit(technician, liner, north).position == "cylinder 3"


@pytest.mark.parametrize(
    ("position", "said"),
    [
        ("cylinder 5", "Read “cylinder 5”; North pump has cylinders 1 to 4."),
        ("  ", "Nothing was written; say where it sits, such as cylinder 3."),
    ],
)
def test_a_position_that_cannot_be_is_refused(technician, north, head, position, said):
    told = {"by": technician, "at": NOW, "part": head, "engine": north, "position": position, "fitted_at": day(2, 1)}
    assert refused(services.fit_part, **told) == [("position", said)]


def test_moments_must_follow_one_another(technician, north, head):
    fit(technician, head, north, fitted_at=day(2, 1))
    told = {"by": technician, "at": NOW, "part": head, "taken_off_at": day(1, 20)}
    assert refused(services.take_off_part, **told) == [
        ("taken_off_at", "It was fitted on 2026-02-01; it can't have been taken off before.")
    ]
    services.take_off_part(by=technician, at=NOW, part=head, taken_off_at=day(3, 1))
    told = {
        "by": technician,
        "at": NOW,
        "part": head,
        "engine": north,
        "position": "cylinder 1",
        "fitted_at": day(2, 9),
    }
    assert refused(services.fit_part, **told) == [
        ("fitted_at", "It sat elsewhere until 2026-03-01; it can't have been fitted before.")
    ]


def test_what_sits_nowhere_is_not_taken_off(technician, head):
    told = {"by": technician, "at": NOW, "part": head, "taken_off_at": day(3, 1)}
    assert refused(services.take_off_part, **told) == (
        "cylinder head H-12 sits in no engine; there is nothing to take it off."
    )


def test_a_move_is_all_or_nothing(technician, north, south, head):
    fit(technician, head, north)
    told = {"by": technician, "at": NOW, "part": head, "engine": south, "position": "cylinder 9", "moved_at": day(3, 1)}
    assert refused(services.move_part, **told) == [("position", "Read “cylinder 9”; South pump has cylinders 1 to 4.")]
    assert [one.part for one in queries.sitting_in(north)] == [head]


def test_a_move_within_an_engine_reads_its_meter_once(technician, north, head):
    fit(technician, head, north)
    moved = services.move_part(by=technician, at=NOW, part=head, engine=north, position="cylinder 1", moved_at=day(3, 1),
                               left_meter_shows=70.0, meter_shows=70.0)  # fmt: skip
    assert (moved.fitted_total, MeterReading.objects.filter(shows=70.0).count()) == (1070.0, 1)


def test_a_mark_stands_once_for_a_kind(technician, head):
    told = {"by": technician, "at": NOW, "kind": Part.Kind.HEAD, "mark": " H-12 "}
    assert refused(services.add_part, **told) == [("__all__", "A part of this kind with this mark is here already.")]


def test_a_witness_fits_nothing_and_another_shops_engine_takes_nothing(technician, north, head):
    witness = make_person(technician.shop, "Wim", "witness")
    with pytest.raises(services.PartRefused, match="done by a technician or supervisor; Wim has no such role"):
        fit(witness, head, north)
    with pytest.raises(services.PartRefused, match="This belongs to another shop."):
        fit(technician, head, make_engine(make_shop("Other shop")))


def test_hours_of_many_parts_take_as_many_queries_as_those_of_few(technician, north, django_assert_num_queries):
    for number in range(4):
        part = services.add_part(by=technician, at=NOW, kind=Part.Kind.INJECTOR, mark=f"I-{number}")
        fit(technician, part, north, position=f"cylinder {number + 1}")
    with django_assert_num_queries(3):  # parts, their fittings with engines, the engines' hours
        queries.hours_of(queries.parts_with_places(technician), NOW)
