"""Ten thousand viscosity curves fitted with covariance, and four windows of each.

The goal is under one second for both together on one core.
"""

from __future__ import annotations

import numpy as np

from advisor.binder import ViscosityCurve, ViscosityTarget, curve_avts, fit_avts, window_for

CASES = 10_000
TEMPERATURE_C = np.array([60.0, 135.0, 165.0])
RELATIVE_SD = np.array([0.035, 0.031, 0.043])
TARGETS = (
    ViscosityTarget("mixing", "mixing", "dynamic", 0.15, 0.17, 0.19, "bench", "derived"),
    ViscosityTarget("compaction", "compaction", "dynamic", 0.25, 0.28, 0.31, "bench", "derived"),
    ViscosityTarget("kinematic", "mixing", "kinematic", 150e-6, 170e-6, 190e-6, "bench", "derived"),
    ViscosityTarget("coating", "mixing", "dynamic", 0.08, 0.10, 0.20, "bench", "derived"),
)
_generator = np.random.default_rng(11)
MEASURED_PAS = curve_avts(_generator.normal(11.2, 0.1, (CASES, 1)), -3.76).viscosity_pas(
    TEMPERATURE_C
) * np.exp(RELATIVE_SD * _generator.standard_normal((CASES, 3)))


def _curves() -> ViscosityCurve:
    return fit_avts(TEMPERATURE_C, MEASURED_PAS, RELATIVE_SD).curve()


CURVES = _curves()


def bench_curves() -> int:
    """Lines through three readings each, with covariance and outlier scores."""
    assert np.isfinite(_curves().covariance).all()
    return CASES


def bench_windows() -> int:
    """Four windows of each curve, one of them kinematic, with their deviations."""
    found = [window_for(CURVES, target, 1030.0) for target in TARGETS]
    assert all(np.isfinite(window.target_sd_k).all() for window in found)
    return CASES


def bench_curves_and_windows() -> int:
    """Both together: the goal is under a second."""
    curves = _curves()
    for target in TARGETS:
        window_for(curves, target, 1030.0)
    return CASES


def bench_one_certificate() -> int:
    """One curve and four windows, as an advice asks for them."""
    curve = fit_avts(TEMPERATURE_C, MEASURED_PAS[0], RELATIVE_SD).curve()
    for target in TARGETS:
        window_for(curve, target, 1030.0)
    return 1
