"""A mat on its base by scipy's stiff integrator: the same problem, nothing of ours in it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import solve_ivp

Floats = NDArray[np.float64]
_SIGMA = 5.670374419e-8


_At = Callable[[float], float]


@dataclass(frozen=True)
class Problem:
    """One mat; the weather as functions of the time [s] since laying."""

    lift_m: float
    k: float
    capacity: float
    k_base: float
    capacity_base: float
    laid_c: float
    base_c: float
    coefficient: _At = lambda time_s: 22.0
    air_c: _At = lambda time_s: 10.0
    sun_absorbed: _At = lambda time_s: 0.0
    sky_c: float = 0.0
    emissivity: float = 0.95
    contact_m2kw: float = 0.0


def solve(
    problem: Problem, times_s: Floats, *, mat_cells: int, base_cells: int, rtol: float,
    breaks_s: tuple[float, ...] = (), radiation: float | None = None,
) -> tuple[Floats, Floats]:  # fmt: skip
    """Mean and mid-depth [C] at ``times_s``; ``radiation`` fixes its coefficient [W/m2K]."""
    p = problem
    reach = 4.0 * np.sqrt(p.k_base / p.capacity_base * times_s[-1])
    mat_width = np.full(mat_cells, p.lift_m / mat_cells)
    growth = 1.0
    ratio = reach / mat_width[0]
    for _ in range(200):  # edges of the base grow by a fixed factor from the width of the mat
        growth = ((growth - 1) * ratio + 1) ** (1 / base_cells) if growth > 1 else 1.05
    base_width = mat_width[0] * growth ** np.arange(base_cells)
    width = np.concatenate([mat_width, base_width])
    k = np.repeat([p.k, p.k_base], [mat_cells, base_cells])
    capacity = width * np.repeat([p.capacity, p.capacity_base], [mat_cells, base_cells])
    half = 0.5 * width / k
    resistance = half[:-1] + half[1:]
    resistance[mat_cells - 1] += p.contact_m2kw
    link = 1.0 / resistance

    def leaves(top_c: float, time_s: float) -> float:
        h, air, sun = p.coefficient(time_s), p.air_c(time_s), p.sun_absorbed(time_s)
        surface = top_c - 5.0
        for _ in range(30):
            kelvin = surface + 273.15
            if radiation is None:
                lost = p.emissivity * _SIGMA * (kelvin**4 - (p.sky_c + 273.15) ** 4)
                slope = 4 * p.emissivity * _SIGMA * kelvin**3
            else:
                lost, slope = radiation * (surface - p.sky_c), radiation
            excess = (surface - top_c) / half[0] + h * (surface - air) + lost - sun
            step = excess / (1 / half[0] + h + slope)
            surface -= step
            if abs(step) < 1e-10:
                break
        return float((top_c - surface) / half[0])

    def rate(time_s: float, temperature_c: Floats) -> Floats:
        flow = link * (temperature_c[:-1] - temperature_c[1:])
        gained = np.zeros_like(temperature_c)
        gained[:-1] -= flow
        gained[1:] += flow
        gained[0] -= leaves(float(temperature_c[0]), time_s)
        return np.asarray(gained / capacity)

    state = np.repeat([p.laid_c, p.base_c], [mat_cells, base_cells])
    found = np.empty((len(times_s), len(state)))
    found[0] = state
    edges = [0.0, *breaks_s, float(times_s[-1])]
    for start, end in pairwise(edges):
        # Weather may jump at an edge: the integrator stops there and sees one side only.
        inside = (times_s > start) & (times_s <= end)
        run = solve_ivp(
            lambda t, y, first=start + 1e-9, last=end - 1e-9: rate(np.clip(t, first, last), y),
            (start, end),
            state,
            method="LSODA",  # with bands: scipy's quickest stiff way by far
            rtol=rtol,
            atol=rtol,
            t_eval=np.union1d(times_s[inside], [end]),
            lband=1,
            uband=1,
        )
        assert run.success
        found[inside] = run.y.T[np.isin(run.t, times_s[inside])]
        state = run.y[:, -1]
    mat = found[:, :mat_cells]
    middle = mat_cells // 2
    mid = (9 * (mat[:, middle - 1] + mat[:, middle]) - mat[:, middle - 2] - mat[:, middle + 1]) / 16
    return mat.mean(axis=1), mid
