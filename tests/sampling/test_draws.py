"""Draws: shared by name, right in mean, spread and correlation."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.sampling import Draws, contributions_sd, quantile, share_true


def test_the_same_name_gives_the_same_draws_in_any_order():
    first, second = Draws(64), Draws(64)
    first.scores("rain")
    np.testing.assert_array_equal(first.scores("wind"), second.scores("wind"))


def test_different_names_are_independent():
    draws = Draws(4000)
    assert abs(np.corrcoef(draws.scores("wind"), draws.scores("sun"))[0, 1]) < 0.05


def test_another_seed_gives_other_draws():
    assert not np.array_equal(Draws(64, seed=1).scores("a"), Draws(64, seed=2).scores("a"))


@given(mean=st.floats(-100, 100), sd=st.floats(0, 50))
def test_normal_draws_have_the_mean_and_spread_asked_for(mean, sd):
    values = Draws(512).normal("x", mean, sd)
    assert values.mean() == pytest.approx(mean, abs=0.02 * sd + 1e-9)
    assert values.std() == pytest.approx(sd, rel=0.02, abs=1e-9)


def test_uniform_and_triangular_stay_between_their_ends():
    draws = Draws(512)
    uniform = draws.uniform("u", [0.0, 10.0], [1.0, 20.0])
    assert uniform.shape == (2, 512)
    assert uniform[1].min() >= 10 and uniform[1].max() <= 20
    triangular = draws.triangular("t", 3.0, 6.0, 10.0)
    assert triangular.min() >= 3 and triangular.max() <= 10
    # mean of a triangular distribution is the mean of its three corners
    assert triangular.mean() == pytest.approx(19 / 3, rel=0.005)


def test_a_triangle_of_no_width_is_its_mode():
    np.testing.assert_allclose(Draws(16).triangular("t", 5.0, 5.0, 5.0), 5.0)


def test_correlated_draws_have_the_covariance_asked_for():
    covariance = np.array([[4.0, -1.9], [-1.9, 1.0]])
    values = Draws(4000).multinormal("line", [1.0, 2.0], covariance)
    np.testing.assert_allclose(np.cov(values.T), covariance, rtol=0.05)


def test_a_singular_covariance_gives_the_mean():
    values = Draws(16).multinormal("line", [1.0, 2.0], np.zeros((2, 2)))
    np.testing.assert_allclose(values, np.tile([1.0, 2.0], (16, 1)))


def test_one_draw_is_refused():
    with pytest.raises(ValueError, match="at least 2"):
        Draws(1)


def test_quantile_keeps_infinite_draws():
    rows = [[1.0, 2.0, 3.0, 4.0, 5.0], [1.0, 2.0, 3.0, 4.0, np.inf]]
    np.testing.assert_array_equal(quantile(rows, 0.95), [4.8, np.inf])
    np.testing.assert_array_equal(quantile(rows, 0.5), [3.0, 3.0])


def test_share_true_counts():
    assert share_true([True, False, True, True]) == 0.75


def test_contributions_of_a_sum_are_its_parts():
    draws = Draws(2000)
    wind, haul = draws.normal("wind", 0, 3.0), draws.normal("haul", 0, 1.0)
    found = contributions_sd(100 + wind - haul, {"haul": haul, "wind": wind})
    assert list(found)[:2] == ["wind", "haul"]
    assert found["wind"] == pytest.approx(3.0, rel=0.05)
    assert found["haul"] == pytest.approx(1.0, rel=0.05)
    assert found["interaction"] < 0.01
