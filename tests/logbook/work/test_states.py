"""The states of a work order: every pair of them, by every role, against the one table."""

from itertools import product

import pytest

from logbook.work.models import Move, WorkOrder
from logbook.work.roles import NotTheirs
from logbook.work.services import NotNow, move, resume
from logbook.work.states import MOVES, NEEDS_REASON, drawn_as_picture, drawn_as_text
from tests.factories import NOW, make_engine, make_person, make_shop

pytestmark = pytest.mark.django_db
ROLES = ("technician", "supervisor", "toolroom", "witness")
# product.md, "The words" and "A day", written out again by hand: what leads where, and who may
ALLOWED = {
    ("planned", "at_the_bench"): "technician",
    ("planned", "dropped"): "supervisor",
    ("at_the_bench", "stopped_short"): "technician",
    ("at_the_bench", "to_decide"): "technician",
    ("at_the_bench", "dropped"): "supervisor",
    ("stopped_short", "at_the_bench"): "technician",
    ("stopped_short", "to_decide"): "technician",
    ("stopped_short", "dropped"): "supervisor",
    ("to_decide", "at_the_bench"): "supervisor",
    ("to_decide", "signed"): "supervisor",
}


@pytest.fixture
def order():
    shop = make_shop()
    opener = make_person(shop, "Supervisor 1", "supervisor")
    return WorkOrder.objects.create(
        shop=shop, number=1, engine=make_engine(shop), title="Valve lash", opened_by=opener, opened_at=NOW
    )


@pytest.mark.parametrize(("from_state", "to_state"), list(product(WorkOrder.State.values, repeat=2)))
def test_a_work_order_moves_only_where_the_trade_leads_it(order, from_state, to_state):
    order.state = from_state
    order.save()
    persons = {role: make_person(order.shop, role, role) for role in ROLES}

    got_there = set()
    for role, person in persons.items():
        try:
            move(order, to_state, by=person, at=NOW, reason="it was agreed")
            got_there.add(role)
        except (NotNow, NotTheirs):
            continue
        WorkOrder.objects.filter(pk=order.pk).update(state=from_state)

    allowed = ALLOWED.get((from_state, to_state))
    assert got_there == ({allowed} if allowed else set())
    assert set(Move.objects.values_list("from_state", "to_state")) == ({(from_state, to_state)} if allowed else set())


def test_every_state_is_in_the_table():
    assert set(MOVES) == set(WorkOrder.State.values)


def test_a_move_that_is_not_in_the_table_says_where_the_job_stands(order):
    with pytest.raises(NotNow) as refused:
        move(order, "signed", by=make_person(order.shop, "Supervisor 2", "supervisor"), at=NOW)
    assert str(refused.value) == "Job 1 · Valve lash is “planned”; from there it can't become “signed”."


def test_a_move_for_another_role_says_which(order):
    with pytest.raises(NotTheirs) as refused:
        move(order, "dropped", by=make_person(order.shop, "Technician 3"), at=NOW, reason="sold")
    assert str(refused.value) == "Technician 3 can't do that: it takes the role supervisor."


def test_somebody_of_another_shop_moves_nothing(order):
    stranger = make_person(make_shop("Weir workshop"), "Supervisor 9", "supervisor")
    with pytest.raises(NotTheirs, match="Supervisor 9 has no say in this shop"):
        move(order, "dropped", by=stranger, at=NOW, reason="sold")


@pytest.mark.parametrize("to_state", sorted(NEEDS_REASON))
def test_stopping_short_and_dropping_need_a_reason(order, to_state):
    order.state = "at_the_bench"
    order.save()
    person = make_person(order.shop, "Both 1", "technician", "supervisor")
    with pytest.raises(NotNow, match="Say why in a sentence"):
        move(order, to_state, by=person, at=NOW, reason="  ")


def test_a_move_is_kept_with_who_when_and_why(order):
    supervisor = make_person(order.shop, "Supervisor 2", "supervisor")
    move(order, "dropped", by=supervisor, at=NOW, reason=" engine sold ")
    kept = order.moves.get()
    assert (kept.from_state, kept.to_state, kept.reason) == ("planned", "dropped", "engine sold")
    assert (kept.moved_by, kept.moved_at) == (supervisor, NOW)
    assert order.state == WorkOrder.objects.get().state == "dropped"


def test_only_a_job_that_was_stopped_short_is_gone_on_with(order):
    with pytest.raises(NotNow, match="wasn't stopped short"):
        resume(order, by=make_person(order.shop, "Technician 3"), at=NOW)


def test_the_drawing_shows_every_move_of_the_table():
    text, picture = drawn_as_text(), drawn_as_picture()
    assert len(text.splitlines()) == 1 + len(ALLOWED)
    assert picture.count('class="move"') == picture.count('class="move-head"') == len(ALLOWED)
    assert picture.count("<rect") == len(WorkOrder.State)
    assert "at the bench  → stopped short  technician: Work stops before its end" in text
