"""What the bench learns about a gauge: its document, what speaks against it, which may be picked."""

from datetime import date, timedelta

import pytest

from logbook.gauges import queries, services
from logbook.gauges.models import Calibration
from measurements.assess import assess
from tests.factories import NOW, make_gauge, make_person, make_shop

pytestmark = pytest.mark.django_db

BEFORE, AFTER = date(2026, 2, 1), date(2026, 5, 2)


@pytest.fixture
def keeper():
    return make_person(make_shop(), "Vera Alm", "toolroom")


def test_the_document_carries_the_calibration_in_force_on_the_day(keeper):
    gauge = make_gauge(keeper.shop, keeper, max_permissible_error="0.02 mm", range_lower="0 mm", range_upper="1 mm",
                       repeatability="0.004 mm", repeatability_dof=9)  # fmt: skip
    papers = {
        "id": "FG-2", "quantity": "length", "resolution": "0.01 mm", "max_permissible_error": "0.02 mm",
        "repeatability": "0.004 mm", "repeatability_degrees_of_freedom": 9, "range": ["0 mm", "1 mm"],
    }  # fmt: skip
    calibrated = {"calibrated_on": "2026-03-01", "due_on": "2027-03-01", "expanded_uncertainty": "0.008 mm",
                  "coverage_factor": 2.0}  # fmt: skip
    assert queries.gauge_document(gauge, AFTER) == papers | calibrated
    assert queries.gauge_document(gauge, BEFORE) == papers


def test_assess_takes_the_document_and_corrects_by_its_errors(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    services.record_calibration(
        by=keeper, at=NOW, gauge=gauge, calibrated_on=date(2026, 4, 1), expanded_uncertainty="0.004 mm",
        coverage_factor=2.0, errors=[{"at": "0 mm", "error": "+0.01 mm"}, {"at": "1 mm", "error": "+0.01 mm"}],
    )  # fmt: skip
    judged = assess({
        "engine": {"layout": "inline", "cylinders": 1},
        "gauges": [queries.gauge_document(gauge, AFTER)],
        "measurements": [{"kind": "valve_lash", "taken_on": "2026-05-02", "gauge": "FG-2",
                          "readings": {"1.intake": "0.30 mm"}}],
    })  # fmt: skip
    assert judged["findings"][0]["value"] == pytest.approx(0.29, abs=1e-12)  # shown 0.01 too much: 0.30 - 0.01


def test_a_superseded_calibration_no_longer_counts(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    wrong = gauge.calibrations.get()
    services.supersede_calibration(
        by=keeper, at=NOW, calibration=wrong, reason="U was the one of FG-3", calibrated_on=date(2026, 3, 1),
        due_on=date(2027, 3, 1), certificate="C-118", expanded_uncertainty="0.006 mm", coverage_factor=2.0,
    )  # fmt: skip
    assert queries.gauge_document(gauge, AFTER)["expanded_uncertainty"] == "0.006 mm"
    assert gauge.calibrations.count() == 2


def test_of_two_calibrations_the_later_one_holds_from_its_day_on(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    services.record_calibration(by=keeper, at=NOW, gauge=gauge, calibrated_on=date(2026, 4, 10), has_failed=True)
    assert queries.gauge_document(gauge, date(2026, 4, 9)).get("failed") is None
    assert queries.gauge_document(gauge, date(2026, 4, 10))["failed"] is True


@pytest.mark.parametrize(
    ("on", "quantity", "said"),
    [
        (AFTER, "length", []),
        (date(2027, 3, 1), "length", []),
        (date(2027, 3, 2), "length", ["Gauge FG-2 is past due: its next calibration was due 2027-03-01."]),
        (AFTER, "pressure", ["Gauge FG-2 measures length; this needs pressure."]),
        (BEFORE, "length",
         ["Gauge FG-2 has neither a calibration nor a permissible error: how wrong it can be isn't known."]),
    ],
)  # fmt: skip
def test_what_speaks_against_a_gauge(keeper, on, quantity, said):
    assert queries.complaints(make_gauge(keeper.shop, keeper), on, quantity) == said


def test_a_calibration_in_a_line_for_a_sheet(keeper):
    calibration = make_gauge(keeper.shop, keeper).calibrations.get()
    assert calibration.in_words() == "C-118, 2026-03-01, U = 0.008 mm (k = 2), due 2027-03-01"
    bare = Calibration(gauge=calibration.gauge, calibrated_on=date(2026, 4, 1), has_failed=True)
    assert bare.in_words() == "2026-04-01, failed"


def test_a_failed_and_retired_gauge_is_said_to_be_both(keeper):
    gauge = make_gauge(keeper.shop, keeper)
    services.record_calibration(by=keeper, at=NOW, gauge=gauge, calibrated_on=date(2026, 5, 1), has_failed=True)
    services.retire_gauge(by=keeper, at=NOW, gauge=gauge)
    assert queries.complaints(gauge, AFTER, "length") == [
        "Gauge FG-2 is retired; take another.",
        "Gauge FG-2 failed its calibration of 2026-05-01: its readings can't be relied on.",
    ]


def test_gauges_to_pick_from_come_in_date_first(keeper):
    def calibrated(mark, due_on=None, **more):
        gauge = make_gauge(keeper.shop, keeper, mark)
        services.record_calibration(
            by=keeper, at=NOW, gauge=gauge, calibrated_on=date(2026, 4, 1), due_on=due_on, **more
        )

    calibrated("A-late", date(2026, 4, 20))
    calibrated("B-failed", date(2028, 1, 1), has_failed=True)
    calibrated("C-fresh", date(2027, 4, 1))
    services.add_gauge(by=keeper, at=NOW, mark="D-never", title="feeler gauge", quantity="length")
    services.add_gauge(by=keeper, at=NOW, mark="E-ring", title="ring", quantity="length", is_setting_master=True)
    services.add_gauge(by=keeper, at=NOW, mark="F-dial", title="dial", quantity="pressure")
    services.retire_gauge(by=keeper, at=NOW, gauge=make_gauge(keeper.shop, keeper, "G-gone"))
    make_gauge(make_shop("Elsewhere"), make_person(make_shop("Third"), "Ivo"), "H-theirs")
    assert [one.mark for one in queries.usable_for("length", keeper)] == ["C-fresh", "A-late", "D-never", "B-failed"]


def test_the_list_begins_with_what_needs_something(keeper):
    for mark, days in (("A", 200), ("B", -3), ("C", -40), ("D", 20)):
        gauge = make_gauge(keeper.shop, keeper, mark)
        Calibration.objects.create(
            shop=keeper.shop, gauge=gauge, calibrated_on=date(2026, 3, 2), due_on=AFTER + timedelta(days=days),
            has_failed=mark == "D", recorded_by=keeper, recorded_at=NOW,
        )  # fmt: skip
    rows = [(one.mark, *queries.state_of(one, AFTER)) for one in queries.neediest_first(keeper)]
    assert rows == [
        ("D", "failed", "failed its calibration: not to be used"),
        ("C", "past_due", "past due since 2026-03-23, 40 days"),
        ("B", "past_due", "past due since 2026-04-29, 3 days"),
        ("A", "in_date", "next calibration 2026-11-18, in 200 days"),
    ]


def test_a_tester_brings_its_supply_and_orifice_as_assess_names_them(keeper):
    tester = services.add_gauge(by=keeper, at=NOW, mark="LD-1", title="leak-down tester", quantity="pressure",
                                orifice_diameter="1.0 mm", supply_pressure="5.5 bar")  # fmt: skip
    assert queries.tester_conditions(tester) == {"supply_pressure": "5.5 bar", "orifice_diameter": "1.0 mm"}
