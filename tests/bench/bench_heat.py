"""Ten thousand heat paths, and the mat beside scipy's stiff integrator at equal accuracy.

As a script it prints the ratios as well, all from one run: the error of both against a fine run,
to 0.1 C, and the time of one mat and of ten thousand.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable
from datetime import UTC, datetime
from functools import cache
from pathlib import Path

import numpy as np
from scipy.integrate import solve_ivp

from advisor.advice.advise import advise
from advisor.advice.open_plant import open_plant
from advisor.advice.situation import Situation, gather_situation
from advisor.heat import (
    BaseThermal,
    Box,
    Faces,
    Mat,
    MixThermal,
    Silo,
    cool_mat,
    growing_times_s,
    laydown_needed_c,
    retained_in_silo,
    retained_in_truck,
    rolling_time_s,
    transfer_drop_k,
)
from advisor.settings.shipped import shipped_folder

MANY, DRAWS = 10_000, 1_000
# Enough for 0.1 C, as main() shows; the finer grid halves cells and steps.
QUICK_STEPS, QUICK_CELLS = 3, (4, 4)


def _mats(count: int) -> Mat:
    draw = np.random.default_rng(3).uniform
    return Mat(
        lift_m=draw(0.03, 0.10, count),
        base_c=draw(0.0, 35.0, count),
        air_c=draw(0.0, 30.0, count),
        coefficient_wm2k=draw(8.0, 40.0, count),
        sun_wm2=draw(0.0, 800.0, count),
        sky_c=draw(-15.0, 10.0, count),
        mix=MixThermal(draw(0.9, 1.4, count), draw(2200.0, 2400.0, count), 980.0),
        base=BaseThermal(draw(0.8, 2.0, count), 2300.0, draw(850.0, 1000.0, count)),
    )


MATS, MATS_DRAWN, ONE = _mats(MANY), _mats(DRAWS), _mats(1)


def _chain(mats: Mat, count: int) -> np.ndarray:
    """Drum discharge [C] that the end of rolling needs, each case with inputs of its own."""
    draw = np.random.default_rng(5).uniform
    laydown = laydown_needed_c(mats, draw(600.0, 1200.0, count), draw(75.0, 95.0, count))
    loose = MixThermal(draw(0.8, 1.0, count), 1900.0, draw(930.0, 1020.0, count))
    faces, standing = (Faces(*draw(low, high, (5, count))) for low, high in ((15, 35), (8, 16)))
    truck = retained_in_truck(
        draw(900.0, 4000.0, count), Box(5.4, 2.3, draw(0.8, 1.1, count)), faces, loose,
        standing_s=draw(0.0, 2400.0, count), standing=standing,
    )  # fmt: skip
    silo = Silo(2.0, 7.0, 2.8, draw(0.5, 1.5, count), 0.8, 0.8)
    stored = retained_in_silo(draw(600.0, 40_000.0, count), silo, loose)
    conveyor = 1.0 - transfer_drop_k(
        1.0, 0.0, draw(30.0, 70.0, count), 30.0, 2.5, 12.0, loose.specific_heat_jkgk
    )
    return mats.air_c + (laydown + 6.0 - mats.air_c) / (truck * stored * conveyor)


def bench_chains() -> int:
    """Drum to end of rolling, solved backwards, every input different."""
    assert np.isfinite(_chain(MATS, MANY)).all()
    return MANY


def bench_draws_of_one_job() -> int:
    """The heat of one advice: a thousand draws of one chain."""
    _chain(MATS_DRAWN, DRAWS)
    return DRAWS


@cache
def _job() -> Situation:
    facts = open_plant(shipped_folder("demo_plant"), latest_only=True)
    return gather_situation(facts, datetime(2026, 10, 23, 9, 10, tzinfo=UTC), "J04")


def bench_one_advice() -> int:
    """One job's whole advice with a thousand draws: window, rolling time, doubts, fuel."""
    assert advise(_job(), DRAWS).setpoints
    return 1


def bench_rolling_time() -> int:
    """Time to the end temperature of ten thousand mats, to 0.1 %."""
    rolling_time_s(MATS, 150.0, 80.0)
    return MANY


def bench_mats() -> int:
    """Ten thousand mats followed for half an hour, to 0.1 C."""
    cool_mat(MATS, 150.0, growing_times_s(1800.0, QUICK_STEPS), cells=QUICK_CELLS)
    return MANY


def bench_one_mat() -> int:
    """One mat followed for half an hour, to 0.1 C."""
    cool_mat(ONE, 150.0, growing_times_s(1800.0, QUICK_STEPS), cells=QUICK_CELLS)
    return 1


def _stiff(mat: Mat, case: int, cells: tuple[int, int], rtol: float, method: str) -> float:
    """Mean [C] after half an hour by scipy's stiff integrator on evenly cut layers."""
    first = np.arange(cells[0])
    lift, end = float(mat.lift_m[case]), 1800.0
    k, capacity = float(mat.mix.conductivity_wmk[case]), float(mat.mix.capacity_jm3k[case])
    k_base, c_base = float(mat.base.conductivity_wmk[case]), float(mat.base.capacity_jm3k[case])
    reach = 3.5 * np.sqrt(k_base / c_base * end)
    growth = np.linspace(0.0, 1.0, cells[1] + 1)
    width = np.concatenate([
        np.diff(0.5 * (1 - np.cos(np.pi * np.linspace(0, 1, cells[0] + 1)))) * lift,
        np.diff(np.expm1(3.0 * growth) / np.expm1(3.0)) * reach,
    ])  # fmt: skip
    half = 0.5 * width / np.repeat([k, k_base], cells)
    link, heat = 1 / (half[:-1] + half[1:]), width * np.repeat([capacity, c_base], cells)
    h, air = float(mat.coefficient_wm2k[case]), float(mat.air_c[case])
    gain = 0.92 * float(mat.sun_wm2[case])
    grey, sky4 = 0.93 * 5.670374419e-8, (float(mat.sky_c[case]) + 273.15) ** 4
    face = [145.0]

    def rate(_: float, warm: np.ndarray) -> np.ndarray:
        surface = face[0]
        for _ in range(3):
            kelvin = surface + 273.15
            excess = (surface - warm[0]) / half[0] + h * (surface - air)
            excess += grey * (kelvin**4 - sky4) - gain
            surface -= excess / (1 / half[0] + h + 4 * grey * kelvin**3)
        face[0] = surface
        gained = np.zeros_like(warm)
        flow = link * (warm[:-1] - warm[1:])
        gained[:-1] -= flow
        gained[1:] += flow
        gained[0] -= (warm[0] - surface) / half[0]
        return gained / heat

    bands = {"lband": 1, "uband": 1} if method == "LSODA" else {}
    start = np.repeat([150.0, float(mat.base_c[case])], cells)
    run = solve_ivp(rate, (0.0, end), start, method=method, rtol=rtol, atol=rtol, **bands)
    return float((run.y[first, -1] * width[first]).sum() / lift)


def _least_s(work: Callable[[], object], times: int) -> float:
    found = []
    for _ in range(times):
        start = time.perf_counter()
        work()
        found.append(time.perf_counter() - start)
    return min(found)


def main() -> None:
    """Print errors and ratios of this run."""
    judged = range(40)
    some = MATS
    fine = np.array([_stiff(some, i, (160, 100), 1e-9, "LSODA") for i in judged])
    run = cool_mat(some, 150.0, growing_times_s(1800.0, QUICK_STEPS), cells=QUICK_CELLS)
    ours = np.abs(run.mean_c[0, -1, judged] - fine).max()
    many_s = _least_s(bench_mats, 5) / MANY
    one_s = _least_s(bench_one_mat, 9)
    print(f"ours: off by {ours:.3f} C, one in {one_s * 1e3:.2f} ms, many in {many_s * 1e6:.1f} µs")
    # The grid of the integrator is what 0.1 C takes; LSODA is told the bands of the matrix.
    for method, cells, rtol in (
        ("BDF", (24, 24), 1e-4),
        ("Radau", (24, 24), 1e-4),
        ("LSODA", (24, 24), 1e-3),
    ):
        found = np.array([_stiff(some, i, cells, rtol, method) for i in judged])
        error = np.abs(found - fine).max()
        each_s = _least_s(
            lambda m=method, c=cells, r=rtol: [_stiff(some, i, c, r, m) for i in judged], 3
        ) / len(judged)
        print(
            f"{method} {cells}: off by {error:.3f} C, {each_s * 1e3:.1f} ms; "
            f"ours is {each_s / many_s:.0f} times faster over many, {each_s / one_s:.1f} on one"
        )
    for bench in (bench_chains, bench_draws_of_one_job, bench_one_advice, bench_rolling_time):
        print(f"{bench.__name__}: {_least_s(bench, 5):.3f} s")


if __name__ == "__main__":
    sys.path.insert(0, str(Path(__file__).parents[2]))
    main()
