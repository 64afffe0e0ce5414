"""What may be done to gauges, by whom, and what is refused."""

from datetime import UTC, date, datetime

import pytest
from django.core.exceptions import ValidationError

from logbook.gauges import queries, services
from logbook.gauges.models import Calibration, Gauge
from tests.factories import NOW, make_gauge, make_person, make_shop

pytestmark = pytest.mark.django_db


@pytest.fixture
def keeper():
    return make_person(make_shop(), "Vera Alm", "toolroom")


def test_the_interval_says_when_a_calibration_is_due_again(keeper):
    gauge = make_gauge(keeper.shop, keeper, interval_days=365)
    done = services.record_calibration(by=keeper, at=NOW, gauge=gauge, calibrated_on=date(2026, 5, 1))
    assert done.due_on == date(2027, 5, 1)
    failed = services.record_calibration(
        by=keeper, at=NOW, gauge=gauge, calibrated_on=date(2026, 5, 2), has_failed=True
    )
    assert failed.due_on is None


def test_a_calibration_in_days_to_come_is_refused_by_the_shops_own_clock(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    gauge.shop.time_zone = keeper.shop.time_zone = "Pacific/Auckland"
    late = datetime(2026, 5, 2, 20, 0, tzinfo=UTC)  # eight in the morning of the 3rd there
    services.record_calibration(by=keeper, at=late, gauge=gauge, calibrated_on=date(2026, 5, 3))
    with pytest.raises(services.GaugeRefused) as refused:
        services.record_calibration(by=keeper, at=late, gauge=gauge, calibrated_on=date(2026, 5, 4))
    assert str(refused.value) == (
        "Read 2026-05-04 as the day of the calibration, which is still to come; today is 2026-05-03."
    )


def test_an_entry_is_corrected_once_and_the_correction_can_be_corrected(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    first = gauge.calibrations.get()
    second = services.supersede_calibration(by=keeper, at=NOW, calibration=first, reason="wrong day",
                                            calibrated_on=date(2026, 3, 2))  # fmt: skip
    with pytest.raises(services.GaugeRefused) as refused:
        services.supersede_calibration(
            by=keeper, at=NOW, calibration=first, reason="again", calibrated_on=date(2026, 3, 3)
        )
    assert str(refused.value) == (
        "The calibration of 2026-03-01 was corrected already, by Vera Alm; correct that entry instead."
    )
    third = services.supersede_calibration(by=keeper, at=NOW, calibration=second, reason="and the month",
                                           calibrated_on=date(2026, 4, 2))  # fmt: skip
    assert list(queries.standing_calibrations().filter(gauge=gauge)) == [third]


def test_a_correction_without_a_reason_is_refused(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    with pytest.raises(services.GaugeRefused) as refused:
        services.supersede_calibration(by=keeper, at=NOW, calibration=gauge.calibrations.get(), reason=" ",
                                       calibrated_on=date(2026, 3, 2))  # fmt: skip
    assert str(refused.value) == "Nothing was written in the reason; say why the earlier entry was wrong."


def test_what_the_judgement_could_not_read_is_not_kept(keeper):
    with pytest.raises(services.GaugeRefused) as refused:
        services.add_gauge(by=keeper, at=NOW, mark="X", title="dial", quantity="length", range_lower="10 mm",
                           range_upper="1 mm")  # fmt: skip
    assert str(refused.value) == "The first figure of a range must be the lower one."
    with pytest.raises(services.GaugeRefused):
        services.add_gauge(by=keeper, at=NOW, mark="X", title="dial", quantity="length", resolution="0.01 bar")
    assert Gauge.objects.count() == 0


def test_u_without_its_factor_is_refused(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    with pytest.raises(ValidationError) as refused:
        services.record_calibration(by=keeper, at=NOW, gauge=gauge, calibrated_on=date(2026, 5, 1),
                                    expanded_uncertainty="0.01 mm")  # fmt: skip
    assert refused.value.messages == ["U and its coverage factor k stand on the certificate together; give both."]


def test_a_used_gauge_keeps_its_quantity(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    with pytest.raises(services.GaugeRefused) as refused:
        services.change_gauge(by=keeper, gauge=gauge, quantity="pressure")
    assert str(refused.value) == (
        "Gauge FG-2 measures length and was used or calibrated so; add another gauge for pressure."
    )


def test_a_technician_keeps_no_gauges(keeper):
    technician = make_person(keeper.shop, "Bo Lind", "technician")
    gauge = make_gauge(keeper.shop, keeper)
    for act in (
        lambda: services.add_gauge(by=technician, at=NOW, mark="X", title="dial", quantity="length"),
        lambda: services.change_gauge(by=technician, gauge=gauge, title="other"),
        lambda: services.record_calibration(by=technician, at=NOW, gauge=gauge, calibrated_on=date(2026, 5, 1)),
        lambda: services.retire_gauge(by=technician, at=NOW, gauge=gauge),
    ):
        with pytest.raises(services.GaugeRefused) as refused:
            act()
        assert str(refused.value) == "Gauges are kept by the toolroom or a supervisor; Bo Lind is neither."
    assert (Calibration.objects.count(), Gauge.objects.get().title) == (1, "feeler gauge")


def test_a_gauge_of_another_shop_is_not_touched(keeper):
    stranger = make_person(make_shop("Elsewhere"), "Ivo Berg", "supervisor")
    with pytest.raises(services.GaugeRefused) as refused:
        services.retire_gauge(by=stranger, at=NOW, gauge=make_gauge(keeper.shop, keeper))
    assert str(refused.value) == "This gauge belongs to another shop."


def test_a_retired_gauge_can_be_brought_back(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    services.retire_gauge(by=keeper, at=NOW, gauge=gauge)
    with pytest.raises(services.GaugeRefused) as refused:
        services.retire_gauge(by=keeper, at=NOW, gauge=gauge)
    assert str(refused.value) == "Gauge FG-2 is retired already."
    services.bring_back_gauge(by=keeper, gauge=gauge)
    assert Gauge.objects.get().retired_at is None
