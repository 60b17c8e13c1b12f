"""The law of three constants against the reference problem made for it, and its refusals."""

from __future__ import annotations

import numpy as np
import pytest

from advisor.binder import curve_avts, fit_vft, viscosity_vft, wlf_constants
from advisor.errors import MissingInput, OutsideValidity

# NIST Statistical Reference Datasets, nonlinear regression, MGH10 (Meyer 1970; higher difficulty):
# y = b1 exp(b2 / (x + b3)). Data and certified values from memory; that the fit meets the certified
# residual sum of squares to nine digits shows that they are remembered right.
X = np.arange(50.0, 126.0, 5.0)
Y = np.array([
    34780, 28610, 23650, 19630, 16370, 13720, 11540, 9744, 8261, 7030, 6005, 5147, 4427, 3820,
    3307, 2872,
], float)  # fmt: skip
B = np.array([5.6096364710e-03, 6.1813463463e03, 3.4522363462e02])
B_SD = np.array([1.5687892471e-04, 2.3309021107e01, 7.8486103508e-01])
RESIDUAL_SQUARES = 8.7945855171e01


def test_the_reference_problem_comes_out_to_seven_digits() -> None:
    fit = fit_vft(X, Y, 1.0 / Y)  # every reading weighs the same
    found = np.array([10.0**fit.level, fit.strength_k * np.log(10.0), -fit.pole_c])
    assert found == pytest.approx(B, rel=2e-7)
    assert fit.chi2 == pytest.approx(RESIDUAL_SQUARES, rel=1e-9)
    assert fit.degrees_of_freedom == 13


def test_the_standard_deviations_of_the_reference_problem_come_out() -> None:
    fit = fit_vft(X, Y, 1.0 / Y)
    sd = np.sqrt(np.diag(fit.covariance) * fit.chi2 / fit.degrees_of_freedom)
    found = sd * np.array([np.log(10.0) * 10.0**fit.level, np.log(10.0), 1.0])
    assert found == pytest.approx(B_SD, rel=1e-5)


def test_three_exact_readings_give_back_their_law() -> None:
    t = np.array([100.0, 135.0, 165.0])
    fit = fit_vft(t, viscosity_vft(t, -1.6, 760.0, -42.0), 0.01)
    assert (fit.level, fit.strength_k, fit.pole_c) == pytest.approx((-1.6, 760.0, -42.0), rel=1e-6)
    curve = fit.curve()
    assert curve.temperature_c(curve.viscosity_pas(150.0)) == pytest.approx(150.0)
    assert (curve.measured_low_c, curve.measured_high_c) == (100.0, 165.0)


def test_the_form_of_williams_landel_and_ferry_is_the_same_curve() -> None:
    first, second = wlf_constants(760.0, -42.0, 135.0)
    t = np.array([110.0, 150.0])
    ratio = 10.0 ** (-first * (t - 135.0) / (second + t - 135.0))
    at_reference = viscosity_vft(135.0, -1.6, 760.0, -42.0)
    assert viscosity_vft(t, -1.6, 760.0, -42.0) == pytest.approx(at_reference * ratio)


def test_the_band_grows_away_from_the_readings() -> None:
    t = np.array([100.0, 120.0, 135.0, 165.0])
    curve = fit_vft(t, viscosity_vft(t, -1.6, 760.0, -42.0), 0.03).curve()
    inside, outside = curve.relative_sd(140.0), curve.relative_sd(190.0)
    assert outside > 1.5 * inside
    low, high = curve.viscosity_band_pas(150.0)
    assert low < curve.viscosity_pas(150.0) < high


def test_two_readings_do_not_fix_three_constants() -> None:
    with pytest.raises(MissingInput):
        fit_vft([135.0, 165.0], [0.5, 0.12], 0.02)


def test_readings_that_bend_the_other_way_are_refused() -> None:
    t = np.array([100.0, 135.0, 165.0])
    plain = curve_avts(11.2, -3.76).viscosity_pas(t)
    with pytest.raises(OutsideValidity):
        fit_vft(t, plain * np.array([0.2, 1.0, 0.3]), 0.01)
