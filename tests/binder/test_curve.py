"""The line: forwards and backwards, many at once, its spread against draws, and refusals."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.binder import (
    ViscosityCurve,
    ViscosityTarget,
    curve_avts,
    curve_through,
    equiviscous_window,
    fit_avts,
    fit_vft,
    prior_from_viscosities,
    suspect_reading,
    temperature_avts,
    viscosity_avts,
    viscosity_vft,
    window_for,
)
from advisor.errors import FaultyInput, MissingInput, OutsideValidity

A, VTS = 10.98, -3.68  # PG 64-22 after mixing, NCHRP 1-37A (from memory)
SLOPES = st.floats(-4.5, -2.8)
MIXING = st.floats(0.02, 400.0)


def line_through_150c(slope: float) -> ViscosityCurve:
    """A line of any slope that has 0.25 Pa.s at 150 C."""
    flat = curve_avts(0.0, slope)
    level = np.log10(np.log10(250.0)) - flat.parameters[1] * np.log10(423.15 * 1.8)
    return curve_avts(level, slope)


@given(SLOPES, MIXING)
def test_temperature_and_viscosity_are_each_others_inverse(slope: float, eta: float) -> None:
    curve = line_through_150c(slope)
    assert curve.viscosity_pas(curve.temperature_c(eta)) == pytest.approx(eta, rel=1e-9)


@given(SLOPES, st.floats(40.0, 220.0))
def test_viscosity_falls_with_temperature_as_the_slope_says(slope: float, at: float) -> None:
    curve = line_through_150c(slope)
    cool, warm = curve.viscosity_pas([at - 0.05, at + 0.05])
    assert cool > warm
    assert np.log(warm / cool) / 0.1 == pytest.approx(float(curve.log_slope_per_k(at)), rel=1e-4)


def test_many_lines_at_once_are_the_same_as_each_alone() -> None:
    many = curve_avts(A + np.linspace(-0.1, 0.1, 5)[:, None], VTS)
    t = np.array([60.0, 135.0, 165.0])
    assert many.viscosity_pas(t).shape == (5, 3)
    for row, level in zip(many.viscosity_pas(t), many.parameters[:, 0, 0], strict=True):
        assert row == pytest.approx(viscosity_avts(t, level, VTS), rel=1e-12)
    assert np.ndim(viscosity_avts(135.0, A, VTS)) == 0


def test_what_is_not_known_stays_not_known() -> None:
    found = viscosity_avts([135.0, np.nan], A, VTS)
    assert np.isfinite(found[0])
    assert np.isnan(found[1])
    assert np.isnan(curve_avts(A, VTS).outside_measured_k(150.0))


@pytest.mark.parametrize("eta", [0.001, 0.0, -1.0])
def test_below_one_centipoise_the_line_is_refused(eta: float) -> None:
    with pytest.raises(OutsideValidity):
        temperature_avts(eta, A, VTS)


def test_the_spread_of_draws_is_the_spread_that_is_stated() -> None:
    curve = fit_avts([60.0, 135.0], viscosity_avts([60.0, 135.0], A, VTS), [0.035, 0.031]).curve()
    drawn = curve.draws(np.random.default_rng(4).standard_normal((40_000, 2)))
    spread = float(np.std(drawn.temperature_c(0.17)))
    assert spread == pytest.approx(float(curve.temperature_sd_k(0.17)), rel=0.02)
    low, high = np.quantile(drawn.temperature_c(0.17), [0.025, 0.975])
    assert (low, high) == pytest.approx(
        tuple(float(part) for part in curve.temperature_interval_c(0.17)), abs=0.05
    )


def test_the_fit_goes_through_two_readings_and_weighs_more() -> None:
    t = np.array([60.0, 135.0])
    two = fit_avts(t, [250.0, 0.42], [0.03, 0.03])
    assert two.curve().viscosity_pas(t) == pytest.approx([250.0, 0.42], rel=1e-9)
    assert two.degrees_of_freedom == 0
    assert np.isnan(two.probability)
    t3 = np.array([60.0, 135.0, 165.0])
    eta = viscosity_avts(t3, A, VTS) * [1.0, 1.0, 1.10]
    rough, fine = (fit_avts(t3, eta, [0.03, 0.03, sd]) for sd in (0.30, 0.003))
    assert abs(float(rough.residual_ln[2])) > 5.0 * abs(float(fine.residual_ln[2]))


def test_the_covariance_is_that_of_a_general_least_squares_solution() -> None:
    t = np.array([60.0, 100.0, 135.0, 165.0])
    eta = viscosity_avts(t, A, VTS) * [1.01, 0.98, 1.02, 0.99]
    sd = np.array([0.035, 0.05, 0.031, 0.043])
    fit = fit_avts(t, eta, sd)
    x = np.log10((t + 273.15) * 1.8)
    y = np.log10(np.log10(1000.0 * eta))
    weight = np.diag((np.log(10.0) ** 2 * 10.0**y / sd) ** 2)
    design = np.stack([np.ones(4), x], axis=-1)
    inverse = np.linalg.inv(design.T @ weight @ design)
    expected = inverse @ design.T @ weight @ y
    assert (fit.intercept, fit.slope) == pytest.approx(tuple(expected), rel=1e-7)
    assert fit.covariance == pytest.approx(inverse, rel=1e-5)
    assert fit.widened == 1.0


def test_the_mistyped_reading_of_four_is_named() -> None:
    t = np.array([60.0, 100.0, 135.0, 165.0])
    eta = viscosity_avts(t, A, VTS) * [1.0, 1.0, 1.0, 1.5]
    fit = fit_avts(t, eta, np.full(4, 0.03))
    assert fit.probability < 1e-6
    assert fit.widened > 10.0
    found = suspect_reading(fit)
    assert found.index == 3
    assert "165 C" in found.sentence


def test_three_readings_disagree_without_naming_one_and_two_cannot_be_tested() -> None:
    t = np.array([60.0, 135.0, 165.0])
    three = suspect_reading(fit_avts(t, viscosity_avts(t, A, VTS) * [1.0, 1.0, 1.5], [0.03] * 3))
    assert three.index is None
    assert "cannot tell" in three.sentence
    two = suspect_reading(fit_avts(t[:2], viscosity_avts(t[:2], A, VTS), [0.03] * 2))
    assert two.index is None
    assert "no test is possible" in two.sentence


def test_sound_readings_are_left_alone() -> None:
    t = np.array([60.0, 100.0, 135.0, 165.0])
    found = suspect_reading(fit_avts(t, viscosity_avts(t, A, VTS), [0.03] * 4))
    assert found.index is None
    assert found.sentence == "No reading stands out from the others."


def test_a_bend_is_seen_by_the_line_and_met_by_the_third_law() -> None:
    t = np.array([60.0, 90.0, 135.0, 165.0])
    eta = viscosity_vft(t, -4.35, 660.0, -31.0)
    line = fit_avts(t, eta, np.full(4, 0.03))
    assert line.probability < 0.05
    assert fit_vft(t, eta, 0.03).chi2 < 1e-6


def test_one_reading_needs_the_grade_and_two_of_one_temperature_are_refused() -> None:
    with pytest.raises(MissingInput):
        fit_avts([135.0], [0.4], [0.03])
    with pytest.raises(FaultyInput):
        fit_avts([135.0, 135.0], [0.4, 0.41], [0.03, 0.03])
    with pytest.raises(FaultyInput):
        fit_avts([60.0, 135.0], [0.4, 250.0], [0.03, 0.03])
    with pytest.raises(FaultyInput):
        fit_avts([60.0, 135.0], [250.0, 0.4], [0.03, 0.0])


def test_a_prior_gives_back_the_viscosities_it_was_made_from() -> None:
    prior = prior_from_viscosities([60.0, 135.0], [240.0, 0.4], [0.3, 0.2], 0.4, "test", "derived")
    curve = prior.curve()
    assert curve.viscosity_pas([60.0, 135.0]) == pytest.approx([240.0, 0.4], rel=1e-9)
    assert curve.relative_sd([60.0, 135.0]) == pytest.approx([0.3, 0.2], rel=1e-6)


def test_where_the_slope_is_not_known_the_interval_is_open() -> None:
    # three hundredths apart: the two readings hardly fix even the sign of the slope
    fit = fit_avts([135.0, 136.5], viscosity_avts([135.0, 136.5], A, VTS), [0.05, 0.05])
    low, high = fit.curve().temperature_interval_c(0.17)
    assert (low, high) == (-np.inf, np.inf)


def test_windows_run_from_thick_to_thin_and_warn_far_from_the_readings() -> None:
    curve = curve_through(60.0, 250.0, 135.0, 0.42)
    window = equiviscous_window(curve, 0.17, 0.02)
    assert window.low_c < window.target_c < window.high_c
    assert window.cautions == ()
    measured = fit_avts([60.0, 90.0], curve.viscosity_pas([60.0, 90.0]), [0.03, 0.03]).curve()
    far = equiviscous_window(measured, 0.17, 0.02)
    assert any("extrapolated" in caution for caution in far.cautions)


def test_a_kinematic_target_needs_a_density_and_lies_hotter() -> None:
    curve = curve_avts(A, VTS)
    target = ViscosityTarget("k", "mixing", "kinematic", 150e-6, 170e-6, 190e-6, "test", "derived")
    with pytest.raises(FaultyInput):
        window_for(curve, target)
    at = float(window_for(curve, target, 1030.0).target_c)
    assert at > float(curve.temperature_c(0.17)) + 1.0


def test_a_target_in_the_wrong_order_is_refused() -> None:
    with pytest.raises(FaultyInput):
        ViscosityTarget("k", "mixing", "dynamic", 0.3, 0.2, 0.1, "test", "derived")
