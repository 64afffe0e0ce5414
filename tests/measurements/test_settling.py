"""What would settle a close call is true: it settles, it is never rounded up, and it is never "None"."""

import pytest

from measurements.conformity import TOO_CLOSE, WITHIN, Zone, judge, zone_uncertainty

LOWEST = {"characteristic": "bore.diameter", "upper": "100.100 mm"}
COMPARATOR = {
    "id": "C",
    "quantity": "length",
    "resolution": "0.001 mm",
    "expanded_uncertainty": "0.001 mm",
    "coverage_factor": 2,
}


def test_a_derived_value_on_its_limit_is_said_to_be_settled_by_no_gauge(judged, derived):
    limit = [{"characteristic": "compression.difference", "upper": "1 bar"}]
    judgement = judged("compression", {"1": "10.0 bar", "2": "9.0 bar"}, limits=limit)

    found = derived(judgement, "compression.difference")
    assert (found["verdict"], found["needs"]["expanded_uncertainty"]) == (TOO_CLOSE, None)
    assert found["needs"]["sentence"] == "The value stands on its limit: no gauge settles that."


def test_repeats_of_a_comparator_settle_as_soon_as_those_of_the_same_sizes(judged, finding):
    signed = {"1.top.thrust": "+0.091; +0.094; +0.099; +0.096"}
    sizes = {"1.top.thrust": "100.091; 100.094; 100.099; 100.096"}
    set_to = {"set_size": "100.000 mm", "set_uncertainty": "0.000 mm", "zero_before": "0.000", "zero_after": "0.000"}
    common = {"limits": [{**LOWEST, "upper": "100.099 mm"}], "gauges": [COMPARATOR], "gauge": "C"}

    by_deviation = finding(judged("bore", signed, conditions=set_to, **common), "1.top.thrust")["needs"]
    by_size = finding(judged("bore", sizes, **common), "1.top.thrust")["needs"]

    # the mean stands 4 µm under the limit, s = 3.37 µm, calibration 0.5 µm, step 0.29 µm; t(0.95) from a printed table:
    # four readings, 3 degrees of freedom: 2.353 × 1.78 µm = 4.19 µm; five, 5 degrees of freedom: 2.015 × 1.61 µm = 3.25 µm
    assert by_deviation["repeats"] == by_size["repeats"] == 5


def test_the_uncertainty_told_is_never_rounded_up(judged, finding):
    limit = [{"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm"}]
    coarse = {"id": "G", "quantity": "length", "expanded_uncertainty": "0.02 mm", "coverage_factor": 2}
    found = finding(
        judged("valve_lash", {"1.intake": "0.255 mm"}, limits=limit, gauges=[coarse], gauge="G"), "1.intake"
    )

    # 2 × 0.005 / 1.645 = 0.00608: with 0.0061 it would still be too close
    assert found["needs"]["sentence"] == "Repeats can't settle it; a reading with U of 0.006 mm or less would."


@pytest.mark.parametrize("rule", ["guarded", "expanded"])
def test_the_uncertainty_named_for_a_vanished_zone_accepts_its_middle(rule):
    zone = Zone(0.29, 0.31, rule)
    enough = zone_uncertainty(zone) / 2

    assert judge(0.30, u=0.999 * enough, zone=zone).verdict == WITHIN
    assert judge(0.30, u=1.001 * enough, zone=zone).vanished


def test_a_value_on_the_edge_of_a_one_sided_acceptance_zone_is_within():
    for limit in (0.25, 9.1, 100.0, 1013.25):
        for u in (1e-4, 0.003, 0.7):
            assert judge(limit + 1.6448536269514722 * u, u=u, zone=Zone(limit, None)).verdict == WITHIN
