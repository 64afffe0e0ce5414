"""A shop that writes decimal commas: figures are read and written with them, and never as thousands."""

import pytest

from logbook.bench.judging import engine_of
from logbook.bench.services import SlipAsked
from tests.logbook.bench.test_bench_page import address, answer_to, at_first_stop, post


@pytest.fixture
def comma(make_bench):
    return make_bench(shop={"decimal_mark": ","}, bore_mm=95.995, screw_pitch_mm=1.125)


def test_an_engines_size_of_three_decimals_is_not_read_as_thousands(comma):
    engine = engine_of(comma.task.work_order)
    assert (engine.bore, engine.screw_pitch) == (95.995, 1.125)


def test_a_reading_typed_with_a_comma_is_judged_and_told_with_commas(client, comma):
    client.force_login(comma.technician)
    at_first_stop(comma)
    text = post(client, comma, "read", **answer_to("1.intake", "0,18")).content.decode()
    assert "beyond: 0,07 mm under the lower limit" in text
    assert 'data-key=","' in text


def test_a_slip_is_offered_with_the_shops_mark_so_that_it_can_be_kept(comma):
    with pytest.raises(SlipAsked) as caught:
        comma.read("1.intake", "3,02")
    assert caught.value.meant == "0,302 mm"
    kept = comma.read("1.intake", "3,02", slip_answer="as meant")
    assert (kept.typed, kept.finding.judgement["value"]) == ("0,302 mm", 0.302)


def test_the_table_opens_for_a_shop_with_commas(client, comma):
    client.force_login(comma.technician)
    comma.read("1.intake", "0,30")
    assert "0,30" in client.get(address(comma, "table")).content.decode()
