"""Timing: ten thousand curves fitted with covariance, and four windows of each.

Run as a script; prints seconds. The goal is under one second on one core.
"""

from __future__ import annotations

import time

import numpy as np

from advisor.binder import ViscosityTarget, curve_avts, fit_avts, window_for

CASES = 10_000
TEMPERATURE_C = np.array([60.0, 135.0, 165.0])
RELATIVE_SD = np.array([0.035, 0.031, 0.043])
TARGETS = (
    ViscosityTarget("mixing", "mixing", "dynamic", 0.15, 0.17, 0.19, "bench", "derived"),
    ViscosityTarget("compaction", "compaction", "dynamic", 0.25, 0.28, 0.31, "bench", "derived"),
    ViscosityTarget("kinematic", "mixing", "kinematic", 150e-6, 170e-6, 190e-6, "bench", "derived"),
    ViscosityTarget("coating", "mixing", "dynamic", 0.08, 0.10, 0.20, "bench", "derived"),
)


def main() -> None:
    """Print the best of five runs."""
    generator = np.random.default_rng(11)
    truth = curve_avts(generator.normal(11.2, 0.1, (CASES, 1)), -3.76)
    noise = np.exp(RELATIVE_SD * generator.standard_normal((CASES, 3)))
    measured = truth.viscosity_pas(TEMPERATURE_C) * noise
    best_fit = best_windows = float("inf")
    for _ in range(5):
        start = time.perf_counter()
        curve = fit_avts(TEMPERATURE_C, measured, RELATIVE_SD).curve()
        middle = time.perf_counter()
        windows = [window_for(curve, target, 1030.0) for target in TARGETS]
        end = time.perf_counter()
        assert all(np.all(np.isfinite(window.target_sd_k)) for window in windows)
        best_fit, best_windows = min(best_fit, middle - start), min(best_windows, end - middle)
    print(f"{CASES} fits with covariance: {best_fit:.3f} s")
    print(f"{CASES} curves, four windows each: {best_windows:.3f} s")
    print(f"together: {best_fit + best_windows:.3f} s")


if __name__ == "__main__":
    main()
