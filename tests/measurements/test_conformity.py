"""Verdicts follow from the chance, the guard band and the rule; what would settle a close call really would."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from measurements.conformity import (
    BEYOND,
    NO_LIMIT,
    RULES,
    TOO_CLOSE,
    WITHIN,
    Zone,
    chance_within,
    guard_band,
    judge,
    settling_expanded_uncertainty,
    settling_repeats,
    zone_uncertainty,
)

LASH = Zone(0.25, 0.35, "guarded")


@pytest.mark.parametrize(
    ("value", "rule", "verdict"),
    [
        (0.18, "guarded", BEYOND),
        (0.30, "guarded", WITHIN),
        (0.26, "guarded", WITHIN),  # w = 1.645 × 0.005 = 0.0082, so the zone accepts from 0.2582
        (0.258, "guarded", TOO_CLOSE),
        (0.25, "guarded", TOO_CLOSE),
        (0.242, "guarded", TOO_CLOSE),
        (0.2417, "guarded", BEYOND),
        (0.2595, "expanded", TOO_CLOSE),  # w = 2 × 0.005
        (0.26, "expanded", WITHIN),
        (0.2399, "expanded", BEYOND),
        (0.25, "simple", WITHIN),  # the edge counts as within
        (0.2499, "simple", BEYOND),
        (0.35, "simple", WITHIN),
        (0.3501, "simple", BEYOND),
    ],
)
def test_the_verdict_follows_the_rule(value, rule, verdict):
    assert judge(value, u=0.005, zone=Zone(0.25, 0.35, rule)).verdict == verdict


def test_guarded_within_also_needs_a_chance_of_95_percent():
    """Two limits at 1.7 u each: the value is inside both guarded edges, but its chance is only 91 %."""
    near_both = judge(0.0, u=1.0, zone=Zone(-1.7, 1.7, "guarded"))

    assert near_both.guard_band < 1.7
    assert near_both.probability_within == pytest.approx(0.9109, abs=1e-4)  # 2 Phi(1.7) − 1, normal table: 0.9109
    assert near_both.verdict == TOO_CLOSE


def test_without_limits_there_is_no_verdict():
    judgement = judge(0.3, u=0.005, zone=Zone(None, None))

    assert (judgement.verdict, judgement.probability_within, judgement.guard_band) == (NO_LIMIT, None, None)


def test_few_degrees_of_freedom_widen_the_guard_band():
    assert guard_band("guarded", u=0.01, dof=2) == pytest.approx(0.0292, abs=5e-5)  # t(0.95; 2) = 2.920
    assert guard_band("expanded", u=0.01, dof=2) == pytest.approx(0.0453, abs=5e-5)  # t(95.45 %; 2) = 4.53


def test_an_unknown_rule_is_refused_by_name():
    with pytest.raises(ValueError, match="'strict' is no decision rule"):
        guard_band("strict", u=1)


@pytest.mark.parametrize(
    ("value", "bound", "zone", "verdict"),
    [
        (0.05, "below", Zone(0.25, 0.35, "guarded"), BEYOND),  # under 0.05 is under 0.25
        (0.05, "below", Zone(None, 0.35, "guarded"), WITHIN),
        (0.30, "below", Zone(0.25, 0.35, "guarded"), TOO_CLOSE),  # could be either
        (16.0, "above", Zone(10.0, None, "guarded"), WITHIN),
        (16.0, "above", Zone(10.0, 14.0, "guarded"), BEYOND),
        (9.0, "above", Zone(10.0, None, "guarded"), TOO_CLOSE),
        (0.25, "below", Zone(0.25, None, "simple"), BEYOND),
    ],
)
def test_a_censored_reading_is_judged_on_the_side_it_proves(value, bound, zone, verdict):
    judgement = judge(value, u=0.005, zone=zone, bound=bound)

    assert (judgement.verdict, judgement.probability_within) == (verdict, None)


@pytest.mark.parametrize("value_mm", [0.25, 0.35])
def test_a_change_of_unit_does_not_flip_an_edge(value_mm):
    inches = Zone(0.25 / 25.4, 0.35 / 25.4, "simple")

    assert judge(value_mm / 25.4, u=0.005 / 25.4, zone=inches).verdict == WITHIN
    assert judge(value_mm / 25.4 * (1 + 1e-15), u=0.005 / 25.4, zone=inches).verdict == WITHIN


def test_a_vanished_zone_proves_nothing_within_and_names_the_uncertainty_it_takes():
    zone = Zone(0.0, 0.03, "guarded")
    judgement = judge(0.015, u=0.01, zone=zone)

    assert (judgement.vanished, judgement.verdict) == (True, TOO_CLOSE)
    assert zone_uncertainty(zone) == pytest.approx(2 * 0.015 / 1.9600, rel=1e-4)  # 95 % between both limits
    assert judge(0.015, u=zone_uncertainty(zone) / 2 * 0.999, zone=zone).verdict == WITHIN
    assert judge(0.015, u=zone_uncertainty(zone) / 2 * 1.001, zone=zone).vanished


@given(y=st.floats(-3, 3), u=st.floats(0.01, 2), half=st.floats(0.1, 2), dof=st.sampled_from([1, 3, 10, math.inf]))
def test_the_chance_agrees_with_scipy(y, u, half, dof):
    ours = chance_within(y, u=u, lower=-half, upper=half, dof=dof)
    law = stats.norm if math.isinf(dof) else stats.t(dof)

    assert ours == pytest.approx(law.cdf((half - y) / u) - law.cdf((-half - y) / u), abs=1e-9)


@given(y=st.floats(-3, 3), u=st.floats(0.01, 2), rule=st.sampled_from(RULES))
def test_a_verdict_never_contradicts_its_chance(y, u, rule):
    judgement = judge(y, u=u, zone=Zone(-1.0, 1.0, rule))

    if judgement.verdict == WITHIN and rule == "guarded":
        assert judgement.probability_within >= 0.95
    if judgement.verdict == BEYOND:
        assert judgement.probability_within <= 0.5
    assert (judgement.verdict == TOO_CLOSE) is False or rule != "simple"


def test_the_repeats_named_settle_it_and_one_fewer_does_not():
    def combined(n):
        return math.hypot(0.002, 0.01 / math.sqrt(n)), math.inf

    needed = settling_repeats(0.26, zone=LASH, combined=combined, taken=1)

    assert judge(0.26, u=combined(needed)[0], zone=LASH).verdict == WITHIN
    assert judge(0.26, u=combined(needed - 1)[0], zone=LASH).verdict == TOO_CLOSE


def test_repeats_that_cannot_settle_it_are_not_asked_for():
    assert settling_repeats(0.252, zone=LASH, combined=lambda n: (0.004, math.inf), taken=1) is None


@pytest.mark.parametrize("value", [0.252, 0.248, 0.349])
def test_the_uncertainty_named_settles_it_and_a_little_more_does_not(value):
    expanded = settling_expanded_uncertainty(value, zone=LASH)

    assert judge(value, u=expanded / 2, zone=LASH).verdict != TOO_CLOSE
    assert judge(value, u=expanded / 2 * 1.001, zone=LASH).verdict == TOO_CLOSE


def test_on_the_limit_itself_no_gauge_settles_it():
    assert settling_expanded_uncertainty(0.25, zone=LASH) is None
