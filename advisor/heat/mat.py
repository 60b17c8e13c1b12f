"""The mat: how it cools on its base, and how long until the end temperature of rolling."""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from advisor.errors import Fault, FaultyInput, raise_if_any
from advisor.heat.arrays import Floats, Numbers
from advisor.heat.conduction import Conduction, conduct, growing_times_s
from advisor.heat.ground import BaseThermal
from advisor.heat.layers import Layer
from advisor.heat.materials import MixThermal, film_drop_k
from advisor.heat.surroundings import Face, Moving, Series, absorbed_wm2, shape_of

Criterion = Literal["mean", "mid"]

LONGEST_S = 6 * 3600.0  # cooling that takes longer than this counts as not reached
_CELLS = 10, 8  # of mat and base, on the coarse grid: every depth to 0.05 K from 60 s on
_STEPS, _CELLS_ROLLING = 12, (8, 8)  # a time to 0.1 %, far below what the inputs allow
_REACH = 3.5  # depth of base taken, in spreads sqrt(diffusivity * time); 2.5 would do


@dataclass(frozen=True)
class Mat:
    """A mat just laid, its base and its weather; fields broadcast over cases.

    ``lift_m`` is the compacted thickness. ``base_c`` is the surface of the base; with
    ``base_deep_c`` the base runs towards that with depth. Air, coefficient, sun and sky may be
    Series counted from laying. ``coefficient_wm2k`` is convection alone, ``sun_wm2`` what falls
    on the horizontal, ``evaporation_wm2`` what rain or spray carries off. ``film_kgm2`` is water
    standing on the base, ``contact_m2kw`` the resistance between mat and base.
    """

    lift_m: Numbers
    base_c: Numbers
    air_c: Moving
    coefficient_wm2k: Moving
    sun_wm2: Moving
    sky_c: Moving
    mix: MixThermal
    base: BaseThermal
    base_deep_c: Numbers | None = None
    film_kgm2: Numbers = 0.0
    evaporation_wm2: Numbers = 0.0
    contact_m2kw: Numbers = 0.0


def cool_mat(
    mat: Mat,
    laydown_c: Numbers,
    times_s: Numbers,
    *,
    grids: int = 2,
    cells: tuple[int, int] = _CELLS,
) -> Conduction:
    """Temperatures [C] of a mat and its base after laying.

    The first layer of the answer is the mat, the second its base; its depths are the middle and the
    bottom of the mat.

    Args:
        mat: the mat, its base and its weather; one axis of cases.
        laydown_c: temperature behind the screed, (cases,) [C].
        times_s: rising from 0, which sets the steps, (times,) or (times, cases) [s].
        grids: 2 for full accuracy; 1 is quick and within about 0.3 K.
        cells: how many, of mat and base, on the coarse grid.

    Raises FaultyInput for a lift, a material or a temperature that cannot be, all at once.
    Validity: further from an edge or joint than the mat is thick; no water from rollers. A steel
    drum takes 0.5 to 1 K of a 50 mm mat with each pass (from memory).
    """
    _refuse_impossible(mat, laydown_c)
    times = np.asarray(times_s, float)
    lift = np.asarray(mat.lift_m, float)
    start = np.asarray(laydown_c, float) - film_drop_k(
        mat.film_kgm2, mat.base_c, lift, mat.mix.capacity_jm3k
    )
    reach = _REACH * np.sqrt(mat.base.diffusivity_m2s * times[-1])
    layers = (
        Layer(lift, mat.mix.conductivity_wmk, mat.mix.capacity_jm3k, start, cells=cells[0]),
        Layer(
            reach,
            mat.base.conductivity_wmk,
            mat.base.capacity_jm3k,
            mat.base_c,
            deep_c=mat.base_deep_c,
            contact_m2kw=mat.contact_m2kw,
            latent_jm3=mat.base.latent_jm3,
            cells=cells[1],
            spacing="top",
        ),
    )
    depths = np.stack([0.5 * lift, lift]).reshape(2, -1)
    return conduct(layers, _top(mat), times, depths_m=depths, grids=grids)


def rolling_time_s(
    mat: Mat, laydown_c: Numbers, end_c: Numbers, *, criterion: Criterion = "mean"
) -> Floats:
    """Time [s] from laying until the mat has fallen to its end temperature.

    0 where it is laid at or below it; infinite where it never gets there, or not in six hours.

    Args:
        mat: the mat, its base and its weather.
        laydown_c: temperature behind the screed, (...) [C].
        end_c: temperature at which rolling ends, (...) [C].
        criterion: 'mean' for the thickness mean, 'mid' for mid-depth, which is 10 to 20 % later.

    Raises FaultyInput as ``cool_mat`` does, and for another criterion.
    """
    refuse_criterion(criterion)
    _refuse_impossible(mat, laydown_c)
    shape = cases_of(mat, laydown_c, end_c)
    every = some_cases(mat, shape, slice(None))
    count = int(np.prod(shape))
    laydown, end = (
        np.broadcast_to(np.asarray(one, float), shape).ravel() for one in (laydown_c, end_c)
    )
    found = np.full(count, np.inf)
    until = np.clip(1.6 * _rough_time_s(every, laydown, end), 60.0, LONGEST_S)
    until = np.broadcast_to(until, (count,))
    left = np.arange(count)
    while left.size:
        part = some_cases(every, (count,), left)
        times = steps_until_s(part, until[left])
        run = cool_mat(part, laydown[left], times, cells=_CELLS_ROLLING)
        found[left] = first_crossing_s(times, chosen(run, criterion), end[left])
        left = left[~np.isfinite(found[left]) & (until[left] < LONGEST_S)]
        until = np.minimum(4.0 * until, LONGEST_S)
    found[found > LONGEST_S] = np.inf
    return found.reshape(shape)


def chosen(cooling: Conduction, criterion: Criterion) -> Floats:
    """Temperature [C] (times, cases) of the mat that ``criterion`` names."""
    return np.asarray(cooling.mean_c[0] if criterion == "mean" else cooling.depth_c[0])


def first_crossing_s(times_s: Floats, values_c: Floats, end_c: Numbers) -> Floats:
    """First time [s] (cases,) at which ``values_c`` (times, cases) are down to ``end_c``.

    0 where they start there, infinite where they never come there. Inverse cubic in the root of
    time, in which cooling is nearly straight.
    """
    end = np.asarray(end_c, float)
    reached = values_c <= end
    at = reached.argmax(axis=0)
    case = np.arange(values_c.shape[1])
    last = len(values_c) - 1
    here = np.clip(at, 1, last)
    roots = np.broadcast_to(np.sqrt(times_s).reshape(len(times_s), -1), values_c.shape)
    before, after = ((values_c[i, case], roots[i, case]) for i in (here - 1, here))
    first = np.clip(here - 2, 0, last - 3)
    nodes = [(values_c[first + i, case], roots[first + i, case]) for i in range(4)]
    with np.errstate(divide="ignore", invalid="ignore"):
        straight = before[1] + (after[1] - before[1]) * (end - before[0]) / (after[0] - before[0])
        curved = np.zeros_like(straight)
        for i, (own, root) in enumerate(nodes):
            others = [value for j, (value, _) in enumerate(nodes) if j != i]
            curved += root * np.prod([(end - one) / (own - one) for one in others], axis=0)
    usable = np.isfinite(curved) & (curved >= before[1]) & (curved <= after[1])
    root = np.where(usable, curved, straight)
    return np.where(reached.any(axis=0), np.where(at == 0, 0.0, root**2), np.inf)


def cases_of(mat: Mat, *others: Numbers) -> tuple[int, ...]:
    """Shape over cases of everything the mat and ``others`` hold."""
    parts = [getattr(part, one.name) for part in (mat.mix, mat.base) for one in fields(part)]
    own = [getattr(mat, one.name) for one in fields(mat) if one.name not in ("mix", "base")]
    return np.broadcast_shapes(*(shape_of(one) for one in (*own, *parts, *others)))


def some_cases(mat: Mat, shape: tuple[int, ...], index: slice | NDArray[np.intp]) -> Mat:
    """The mat of the cases at ``index`` of all those of ``shape`` laid in one row."""

    def pick(value: Numbers) -> Floats:
        array = np.asarray(value, float)
        return (
            array.reshape(()) if array.size == 1 else np.broadcast_to(array, shape).ravel()[index]
        )

    def pick_moving(value: Moving) -> Moving:
        if not isinstance(value, Series):
            return pick(value)
        rows = value.values if value.values.ndim == 1 else value.values[:, index]
        return Series(value.times_s, rows)

    mix, base = mat.mix, mat.base
    return Mat(
        lift_m=pick(mat.lift_m),
        base_c=pick(mat.base_c),
        air_c=pick_moving(mat.air_c),
        coefficient_wm2k=pick_moving(mat.coefficient_wm2k),
        sun_wm2=pick_moving(mat.sun_wm2),
        sky_c=pick_moving(mat.sky_c),
        mix=MixThermal(
            pick(mix.conductivity_wmk),
            pick(mix.density_kgm3),
            pick(mix.specific_heat_jkgk),
            pick(mix.emissivity),
            pick(mix.absorptivity),
        ),
        base=BaseThermal(
            pick(base.conductivity_wmk),
            pick(base.density_kgm3),
            pick(base.specific_heat_jkgk),
            pick(base.latent_jm3),
        ),
        base_deep_c=None if mat.base_deep_c is None else pick(mat.base_deep_c),
        film_kgm2=pick(mat.film_kgm2),
        evaporation_wm2=pick(mat.evaporation_wm2),
        contact_m2kw=pick(mat.contact_m2kw),
    )


def _top(mat: Mat) -> Face:
    gain = absorbed_wm2(mat.sun_wm2, mat.mix.absorptivity)
    evaporated = np.asarray(mat.evaporation_wm2, float)
    gain = gain.plus(-evaporated) if isinstance(gain, Series) else gain - evaporated
    return Face(mat.coefficient_wm2k, mat.air_c, mat.mix.emissivity, mat.sky_c, gain)


def steps_until_s(mat: Mat, until_s: Floats, steps: int = _STEPS) -> Floats:
    """Times [s] that step to ``until_s``: each case its own, (steps + 1, cases).

    Where the weather moves they are shared, (times,), and pass through its knots.
    """
    knots = _top(mat).knots_s()
    if not knots.size:
        return growing_times_s(until_s, steps)
    longest = float(np.max(until_s))
    inside = knots[(knots > 0) & (knots < longest)]
    # Cases end at times of their own between shared steps, so these are closer.
    return np.unique(np.concatenate([growing_times_s(longest, 3 * steps), inside]))


def value_at(times_s: Floats, values_c: Floats, at_s: Numbers) -> Floats:
    """Value (cases,) at ``at_s`` of ``values_c`` (times, cases), quadratic in the root of time."""
    at = np.sqrt(np.broadcast_to(np.asarray(at_s, float), values_c.shape[1:]))
    roots = np.broadcast_to(np.sqrt(times_s).reshape(len(times_s), -1), values_c.shape)
    first = np.clip((roots < at * (1 - 1e-12)).sum(axis=0) - 2, 0, len(roots) - 3)
    case = np.arange(values_c.shape[1])
    places = [roots[first + i, case] for i in range(3)]
    value = np.zeros(values_c.shape[1])
    for i, own in enumerate(places):
        one, two = (place for j, place in enumerate(places) if j != i)
        weight = (at - one) * (at - two) / ((own - one) * (own - two))
        value += weight * values_c[first + i, case]
    return value


def _rough_time_s(mat: Mat, laydown_c: Floats, end_c: Floats) -> Floats:
    """Cooling time [s] to within a factor of two, to choose the steps by.

    Heat to a cold base grows with the root of time, heat to the air with time.
    """
    top = _top(mat).at(0.0)
    capacity = mat.mix.capacity_jm3k * np.asarray(mat.lift_m, float)
    own = np.sqrt(mat.mix.capacity_jm3k * np.asarray(mat.mix.conductivity_wmk, float))
    base = np.sqrt(mat.base.capacity_jm3k * np.asarray(mat.base.conductivity_wmk, float))
    middle = 0.5 * (laydown_c + end_c)
    down = own * base / (own + base) * (laydown_c - mat.base_c) * (2.0 / np.sqrt(np.pi))
    up = (top.coefficient_wm2k + 7.0) * 0.7 * (middle - top.air_c) - top.gain_wm2
    down, up = np.maximum(down, 0.0), np.maximum(up, 10.0)
    heat = capacity * np.maximum(laydown_c - end_c, 0.0)
    root = (np.sqrt(down**2 + 4.0 * up * heat) - down) / (2.0 * up)
    return np.asarray(1.5 * root**2)


def refuse_criterion(criterion: str) -> None:
    """Raise FaultyInput where ``criterion`` names no temperature of the mat."""
    if criterion not in ("mean", "mid"):
        raise FaultyInput.of(
            "criterion-unknown",
            f"'{criterion}' is not a temperature of the mat.",
            "Say 'mean' for the thickness mean or 'mid' for mid-depth.",
            field="criterion",
            value=criterion,
        )


def _refuse_impossible(mat: Mat, laydown_c: Numbers) -> None:
    checks: tuple[tuple[str, Numbers, float, float, str], ...] = (
        ("lift_m", mat.lift_m, 0.001, 1.0, "m"),
        ("laydown_c", laydown_c, -50.0, 400.0, "C"),
        ("base_c", mat.base_c, -60.0, 200.0, "C"),
        ("mix.conductivity_wmk", mat.mix.conductivity_wmk, 0.05, 20.0, "W/mK"),
        ("mix.density_kgm3", mat.mix.density_kgm3, 500.0, 5000.0, "kg/m3"),
        ("mix.specific_heat_jkgk", mat.mix.specific_heat_jkgk, 100.0, 6000.0, "J/kgK"),
        ("base.conductivity_wmk", mat.base.conductivity_wmk, 0.02, 20.0, "W/mK"),
    )
    raise_if_any(
        Fault(
            "out-of-range",
            f"must lie between {low:g} and {high:g} {unit}.",
            "",
            field=name,
            value=f"{np.min(values):g} to {np.max(values):g}",
        )
        for name, values, low, high, unit in checks
        if not np.all((np.asarray(values) >= low) & (np.asarray(values) <= high))
    )
