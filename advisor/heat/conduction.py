"""Heat conduction in a layered body: the one solver under mat, truck, silo and ground.

Cell-centred finite volumes in space, TR-BDF2 in time (Bank et al. 1985, IEEE Trans. CAD 4(4);
form as in Hosea and Shampine 1996, Applied Numerical Mathematics 20), two grids with Richardson
extrapolation (Richardson 1911, Phil. Trans. A 210); from memory, held by the tests against exact
solutions. All cases advance together as rows of vectors: ten thousand mats are one pass.
"""

from __future__ import annotations

from dataclasses import dataclass, fields

import numpy as np

from advisor.heat.arrays import Floats, Numbers
from advisor.heat.layers import Layer, cut
from advisor.heat.stepping import advance
from advisor.heat.surroundings import Face

_BLOCK = 2048  # cases at a time: rows of this length stay in the cache of one core
_SEALED = Face(0.0, 0.0)
_NO_DEPTHS = np.empty(0)


@dataclass(frozen=True)
class Conduction:
    """What happened in a body, at each of the times asked.

    ``times_s`` (times, cases); ``mean_c`` (layers, times, cases); ``depth_c`` (depths, times,
    cases) at the depths asked; ``top_c`` and ``bottom_c`` (times, cases) of the faces;
    ``left_top_jm2`` and ``left_bottom_jm2`` (times, cases) heat that left through them, and
    ``stored_jm2`` (times, cases) heat gained by the body, both since the start.
    """

    times_s: Floats
    mean_c: Floats
    depth_c: Floats
    top_c: Floats
    bottom_c: Floats
    left_top_jm2: Floats
    left_bottom_jm2: Floats
    stored_jm2: Floats


def growing_times_s(end_s: Numbers, steps: int) -> Floats:
    """Times [s] of shape (steps + 1, ...) from 0 in steps that grow evenly.

    The cooling after laying is steep at first and fades with the root of time.

    Args:
        end_s: last time, of shape (...) [s].
        steps: how many steps.
    """
    places = (np.arange(steps + 1) / steps) ** 2
    return np.asarray(np.multiply.outer(places, np.asarray(end_s, float)))


def conduct(
    layers: tuple[Layer, ...],
    top: Face,
    times_s: Numbers,
    *,
    bottom: Face = _SEALED,
    depths_m: Numbers = _NO_DEPTHS,
    radius_m: Numbers | None = None,
    grids: int = 2,
) -> Conduction:
    """Temperatures [C] of a layered body that starts hot or cold and meets its surroundings.

    Args:
        layers: the layers from the top face down; their numbers broadcast over cases.
        top: surroundings of the top face, which may radiate and move in time.
        times_s: rising from 0, which sets the steps, (times,) or (times, cases) [s].
        bottom: surroundings of the bottom face, which must not radiate; sealed where not given.
        depths_m: depths below the top to record, (depths,) or (depths, cases) [m].
        radius_m: makes the body a long cylinder, its wall on top, its axis at the bottom [m].
        grids: 2 extrapolates from two grids, 1 uses the coarse one alone.

    Returns what happened at each time, and the heat that crossed the faces.
    Raises ValueError where the inputs do not broadcast to one axis of cases.
    Validity: heat flows along one axis and no water moves.
    Source: see the module; held against exact solutions and a stiff integrator in the tests.
    """
    times, depths = np.asarray(times_s, float), np.asarray(depths_m, float)
    shape = np.broadcast_shapes(
        times.shape[1:],
        depths.shape[1:],
        np.shape(0.0 if radius_m is None else radius_m),
        *(np.shape(number) for layer in layers for number in layer.numbers().values()),
        *top.shapes(),
        *bottom.shapes(),
    )
    if len(shape) > 1:
        raise ValueError(f"cases lie along one axis; the inputs broadcast to {shape}")
    count = shape[0] if shape else 1

    def block(at: int) -> Conduction:
        cases = slice(at, min(at + _BLOCK, count))

        def some(values: Numbers) -> Floats:
            return np.broadcast_to(np.asarray(values, float), (count,))[cases]

        def some_rows(values: Floats) -> Floats:
            rows = values if values.ndim == 2 else values[:, None]
            return np.broadcast_to(rows, (len(rows), count))[:, cases]

        ours = tuple(layer.part(some) for layer in layers)
        radius = None if radius_m is None else some(radius_m)
        found = [
            advance(
                cut(ours, cases.stop - at, finer, radius),
                top.part(cases, count),
                bottom.part(cases, count),
                times if times.ndim == 1 else some_rows(times),
                some_rows(depths),
                finer,
            )
            for finer in range(grids, 0, -1)
        ]
        if grids == 1:
            merged = found[0]
        else:
            # second order in space and time, and both cells and steps are halved
            merged = tuple(
                fine + (fine - coarse) / 3.0 for fine, coarse in zip(*found, strict=True)
            )
        return Conduction(some_rows(times), *merged)

    blocks = [block(at) for at in range(0, count, _BLOCK)]
    if len(blocks) == 1:
        return blocks[0]
    names = [one.name for one in fields(Conduction)]
    return Conduction(
        *(np.concatenate([getattr(one, name) for one in blocks], axis=-1) for name in names)
    )
