"""Engines taken in and changed: what is impossible is refused at its field, what isn't known stays unknown."""

from datetime import UTC, datetime, timedelta

import pytest

from logbook.bench.models import Measurement
from logbook.engines import queries, services
from logbook.engines.models import Engine
from logbook.engines.papers import follows
from logbook.work.models import Task, WorkOrder
from tests.factories import NOW, make_engine, make_person, make_shop

pytestmark = pytest.mark.django_db


@pytest.fixture
def supervisor():
    return make_person(make_shop(), "Ida", "supervisor")


def refused(act, **told) -> list[tuple[str, str]]:
    with pytest.raises(services.EngineRefused) as caught:
        act(**told)
    return caught.value.at_fields


def test_an_engine_of_which_little_is_known_is_taken_in(supervisor):
    engine = services.add_engine(by=supervisor, at=NOW, name="Old barge", layout="vee", cylinders=6)
    engine.refresh_from_db()
    assert (engine.firing_order, engine.banks, engine.bore_mm, engine.turning) == (None, None, None, "")


@pytest.mark.parametrize(
    ("papers", "field", "said"),
    [
        ({"firing_order": [1, 3, 4]}, "firing_order", "The firing order leaves out 2: name each of the 4 cylinders once."),
        ({"firing_order": [1, 3, 4, 5]}, "firing_order", "The firing order names 5, but cylinders are numbered 1 to 4."),
        ({"layout": "vee", "banks": [[1, 2, 3]]}, "banks", "Banks given: 1; this layout has 2."),
        ({"stroke_mm": 103.0, "rod_length_mm": 50.0}, "rod_length_mm",
         "A rod of 50 mm is no longer than half the stroke of 103 mm: the crank could not turn. Give the length between "
         "centres."),
        ({"compression_ratio": 0.9}, "compression_ratio", "Read 0.9; a number above 1 and up to 40 belongs here."),
        ({"intake_opens_btdc": 12.0}, "intake_closes_abdc",
         "Some valve events are given and this one isn't: give all four, or none."),
        ({"cylinders": 41}, "cylinders", "Ensure this value is less than or equal to 40."),
        ({"bridges": True}, "bridges", "A bridge works two valves of a side, but no side has two: leave bridges out."),
    ],
)  # fmt: skip
def test_impossible_papers_are_refused_at_the_field_at_fault(supervisor, papers, field, said):
    told = {"name": "North pump", "layout": "inline", "cylinders": 4} | papers
    assert (field, said) in refused(services.add_engine, by=supervisor, at=NOW, **told)
    assert Engine.objects.count() == 0


def test_a_name_stands_once_in_a_shop(supervisor):
    make_engine(supervisor.shop, "North pump")
    told = {"name": "North pump", "layout": "inline", "cylinders": 4}
    assert refused(services.add_engine, by=supervisor, at=NOW, **told) == [
        ("__all__", "An engine of this name is here already.")
    ]


def test_only_a_supervisor_takes_engines_in_and_changes_them(supervisor):
    technician = make_person(supervisor.shop, "Tom", "technician", "toolroom")
    engine = make_engine(supervisor.shop)
    for act, told in ((services.add_engine, {"at": NOW, "name": "New"}), (services.change_engine, {"engine": engine})):
        with pytest.raises(services.EngineRefused, match="This is done by a supervisor; Tom has no such role."):
            act(by=technician, **told)


def test_an_engine_of_another_shop_is_not_changed(supervisor):
    engine = make_engine(make_shop("Other shop"))
    with pytest.raises(services.EngineRefused, match="This belongs to another shop."):
        services.change_engine(by=supervisor, engine=engine, name="Mine")


def test_a_change_is_kept(supervisor):
    engine = make_engine(supervisor.shop)
    services.change_engine(by=supervisor, engine=engine, firing_order=[1, 2, 4, 3])
    engine.refresh_from_db()
    assert engine.firing_order == [1, 2, 4, 3]


def test_the_stations_of_a_measured_engine_stay(supervisor):
    engine = make_engine(supervisor.shop)
    order = WorkOrder.objects.create(shop=engine.shop, number=1, engine=engine, title="Lash", opened_by=supervisor,
                                     opened_at=NOW)  # fmt: skip
    task = Task.objects.create(shop=engine.shop, work_order=order, title="Lash", kind="valve_lash", place=1)
    services.change_engine(by=supervisor, engine=engine, cylinders=4, bore_mm=97.0)
    Measurement.objects.create(shop=engine.shop, task=task, kind="valve_lash", phase="as_found", opened_by=supervisor,
                               opened_at=NOW)  # fmt: skip
    told = refused(services.change_engine, by=supervisor, engine=engine, cylinders=6, firing_order=None)
    assert [field for field, _said in told] == ["cylinders"]
    assert told[0][1].startswith(
        "Readings were taken on this engine, and its stations hang on this: it stays as it is."
    )
    services.change_engine(by=supervisor, engine=engine, bore_mm=98.0)
    engine.refresh_from_db()
    assert (engine.cylinders, engine.bore_mm) == (4, 98.0)


def test_what_follows_from_the_papers_agrees_with_the_trades_arithmetic(supervisor):
    # pi/4 x 96² x 103 mm x 4 = 2.982 L; 2 x 0.103 m x 1500/60 /s = 5.15 m/s; 165/103 = 1.602: arithmetic of the trade
    told = follows(make_engine(supervisor.shop)).figures
    assert f"{told['displacement']['value']:.3f} {told['mean_piston_speed']['value']:.2f} {told['rod_ratio']:.3f}" == (
        "2.982 5.15 1.602"
    )


def test_valves_go_by_the_crank_plan_and_by_the_banks_where_there_is_none(supervisor):
    engine = make_engine(supervisor.shop)
    # TM 5-3805-258-24-1: a four is set at two stops, the first reaching 1 in, 1 ex, 2 in, 3 ex
    assert follows(engine).by_hand[:4] == ["1.intake", "1.exhaust", "2.intake", "3.exhaust"]
    engine.firing_order = None
    assert follows(engine).by_hand[:4] == ["1.intake", "1.exhaust", "2.intake", "2.exhaust"]


# --- out of service


def test_a_time_out_of_service_is_recorded_and_ended(supervisor):
    engine = make_engine(supervisor.shop)
    time_out = services.record_out_of_service(
        by=supervisor, at=NOW, engine=engine, from_at=NOW - timedelta(hours=2), who_was_told="harbour office",
        what_stood_in="South pump",
    )  # fmt: skip
    assert queries.out_now(engine, NOW) == time_out
    services.change_out_of_service(by=supervisor, at=NOW, time_out=time_out, until_at=NOW)
    assert queries.out_now(engine, NOW) is None


@pytest.mark.parametrize(
    ("told", "field", "said"),
    [
        ({"from_at": NOW + timedelta(hours=1)}, "from_at", "That moment is still to come; write when it happened."),
        ({"until_at": NOW - timedelta(days=9)}, "__all__", "The end must come after the beginning."),
        ({"who_was_told": ""}, "who_was_told", "This field cannot be blank."),
        ({"from_at": NOW - timedelta(days=3)}, "from_at",
         "The engine is out of service already then, since 2026-04-28."),
    ],
)  # fmt: skip
def test_a_time_out_of_service_that_cannot_be_is_refused(supervisor, told, field, said):
    engine = make_engine(supervisor.shop)
    services.record_out_of_service(
        by=supervisor, at=NOW, engine=engine, from_at=datetime(2026, 4, 28, tzinfo=UTC), who_was_told="owner",
        until_at=datetime(2026, 4, 30, tzinfo=UTC),
    )  # fmt: skip
    whole = {"from_at": NOW - timedelta(hours=5), "who_was_told": "owner"} | told
    assert refused(services.record_out_of_service, by=supervisor, at=NOW, engine=engine, **whole) == [(field, said)]
