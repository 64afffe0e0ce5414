"""The normal and Student's t distribution agree with a general-purpose library over their whole range."""

import pytest
from scipy import stats

from measurements.distributions import coverage_factor, normal_cdf, student_cdf, student_quantile

DOF = (1, 2, 3, 4, 7, 16, 30, 120, 5000)


@pytest.mark.parametrize("dof", DOF)
@pytest.mark.parametrize("t", [-40.0, -8.0, -2.5, -0.3, 0.0, 1e-9, 0.7, 1.96, 5.0, 60.0])
def test_student_cdf_agrees_with_scipy_also_far_out_in_the_tail(t, dof):
    assert student_cdf(t, dof) == pytest.approx(stats.t.cdf(t, dof), rel=1e-8)


@pytest.mark.parametrize("dof", DOF)
@pytest.mark.parametrize("p", [0.001, 0.3, 0.5, 0.9, 0.95, 0.975, 0.977249868, 0.995, 0.9999])
def test_student_quantile_agrees_with_scipy(p, dof):
    assert student_quantile(p, dof) == pytest.approx(stats.t.ppf(p, dof), rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("z", [-38.0, -6.0, -1.0, 0.0, 2.0, 7.0])
def test_normal_cdf_agrees_with_scipy(z):
    assert normal_cdf(z) == pytest.approx(stats.norm.cdf(z), rel=1e-12)


def test_the_coverage_factor_is_exactly_two_for_many_degrees_of_freedom():
    assert coverage_factor() == 2.0


@pytest.mark.parametrize("dof", [0, -1, float("nan")])
def test_degrees_of_freedom_at_or_below_zero_are_refused(dof):
    with pytest.raises(ValueError, match="degrees of freedom"):
        student_cdf(1.0, dof)


@pytest.mark.parametrize("p", [0, 1, -0.1, 1.5])
def test_a_chance_outside_zero_to_one_has_no_quantile(p):
    with pytest.raises(ValueError, match="between 0 and 1"):
        student_quantile(p, 5)
