"""Layers of a body, cut into cells: volumes, conductances, capacities and start temperatures."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, fields
from typing import Literal

import numpy as np

from advisor.heat.arrays import Floats, Numbers


@dataclass(frozen=True)
class Layer:
    """One layer of a body; every number broadcasts over cases.

    At the start it has ``start_c`` at its top; with ``deep_c`` it runs from there to ``deep_c``
    with the depth, falling to 1/e of the difference at ``fade_m``. ``contact_m2kw`` is the
    resistance between this layer and the one above. The capacity at temperature T is
    ``capacity_jm3k * (1 + capacity_slope_per_k * (T - capacity_at_c))``; ``latent_jm3`` melts
    between -1 and 0 C. ``cells`` is the count on the coarse grid; ``spacing`` says where cells
    are thin: at both faces, or at the top only.
    """

    thickness_m: Numbers
    conductivity_wmk: Numbers
    capacity_jm3k: Numbers
    start_c: Numbers
    deep_c: Numbers | None = None
    fade_m: Numbers = 0.12
    contact_m2kw: Numbers = 0.0
    capacity_slope_per_k: Numbers = 0.0
    capacity_at_c: Numbers = 0.0
    latent_jm3: Numbers = 0.0
    cells: int = 8
    spacing: Literal["both faces", "top"] = "both faces"

    def numbers(self) -> dict[str, Numbers]:
        """The numbers of the layer that broadcast over cases, by name."""
        own = {one.name: getattr(self, one.name) for one in fields(self)}
        return {
            name: value
            for name, value in own.items()
            if name not in ("cells", "spacing") and value is not None
        }

    def part(self, some: Callable[[Numbers], Floats]) -> Layer:
        """The layer with each number replaced by what ``some`` makes of it."""
        numbers = {name: some(value) for name, value in self.numbers().items()}
        return Layer(**numbers, cells=self.cells, spacing=self.spacing)

    def start_at(self, depth_m: Floats) -> Floats:
        """Start temperature [C] at ``depth_m`` (cells, cases) below the top of the layer."""
        if self.deep_c is None:
            return np.broadcast_to(np.asarray(self.start_c, float), depth_m.shape)
        deep = np.asarray(self.deep_c, float)
        return np.asarray(deep + (self.start_c - deep) * np.exp(-depth_m / self.fade_m))


@dataclass(frozen=True)
class Cells:
    """A body cut into cells, arrays (cells, cases) per unit of top face.

    ``depth_m`` are the middles of the cells, ``edge_m`` their lower edges.
    ``link`` is the conductance [W/m2K] from each cell to the next, ``to_top`` and ``to_bottom``
    (cases,) the half cells at the faces; ``spans`` are the cells of each layer. ``capacity`` and
    ``latent`` are of the whole cell [J/m2K, J/m2]; ``slope`` and ``latent`` are None where 0.
    """

    volume_m: Floats
    depth_m: Floats
    edge_m: Floats
    link: Floats
    to_top: Floats
    to_bottom: Floats
    start_c: Floats
    spans: tuple[slice, ...]
    capacity: Floats
    slope: Floats | None
    slope_at_c: Floats
    latent: Floats | None

    def weights_at(self, depths_m: Floats) -> Floats:
        """Weights (depths, cells, cases) that give the temperature at ``depths_m`` (depths, cases).

        A cubic through the four nearest cells of the layer the depth lies in.
        """
        ends = np.array([span.stop for span in self.spans])
        layer = np.zeros(depths_m.shape, int)
        for end in ends[:-1]:
            # a depth on a contact counts to the layer above it
            layer += depths_m > self.edge_m[end - 1] * (1.0 + 1e-9)
        start, stop = np.concatenate([[0], ends[:-1]])[layer], ends[layer]
        above = (self.depth_m[None] < depths_m[:, None]).sum(axis=1)
        first = np.clip(above - 2, start, stop - 4)
        rows, cases = np.indices(depths_m.shape)
        places = [self.depth_m[first + i, cases] for i in range(4)]
        weights = np.zeros((len(depths_m), *self.depth_m.shape))
        for i, own in enumerate(places):
            part = np.ones(depths_m.shape)
            for j, other in enumerate(places):
                if j != i:
                    part *= (depths_m - other) / (own - other)
            weights[rows, first + i, cases] = part
        return weights


def cut(layers: tuple[Layer, ...], cases: int, finer: int, radius_m: Floats | None) -> Cells:
    """The ``layers`` cut into cells, each coarse cell into ``finer``.

    With ``radius_m`` the body is a long cylinder, its wall on top and its axis at the bottom.
    """
    widths: list[Floats] = []
    rows: dict[str, list[Floats]] = {}
    above: tuple[Layer, Floats] | None = None
    for layer in layers:
        edges = _edges(layer, cases, finer, above)
        width = np.diff(edges, axis=0)
        above = layer, edges[-1] - edges[-1 - finer]  # its last coarse cell
        widths.append(width)
        for name, value in (
            ("k", layer.conductivity_wmk),
            ("capacity", layer.capacity_jm3k),
            ("start", layer.start_at(np.cumsum(width, axis=0) - width / 2)),
            ("slope", layer.capacity_slope_per_k),
            ("slope_at", layer.capacity_at_c),
            ("latent", layer.latent_jm3),
        ):
            full = np.broadcast_to(np.asarray(value, float), (len(width), cases))
            rows.setdefault(name, []).append(full)
    width = np.concatenate(widths)
    joined = {name: np.concatenate(parts) for name, parts in rows.items()}
    edge = np.cumsum(width, axis=0)
    depth = edge - width / 2
    half = 0.5 * width / joined["k"]
    resistance = half[:-1] + half[1:]
    ends = np.cumsum([len(part) for part in widths])
    for layer, end in zip(layers[1:], ends[:-1], strict=True):
        resistance[end - 1] += np.asarray(layer.contact_m2kw, float)
    link, volume = 1.0 / resistance, width
    if radius_m is not None:
        link = link * (1.0 - edge[:-1] / radius_m)
        volume = width * (1.0 - depth / radius_m)
    slope, latent = joined["slope"], joined["latent"]
    return Cells(
        volume_m=volume,
        depth_m=depth,
        edge_m=edge,
        link=link,
        to_top=1.0 / half[0],
        to_bottom=1.0 / half[-1],
        start_c=joined["start"],
        spans=tuple(slice(end - len(part), end) for end, part in zip(ends, widths, strict=True)),
        capacity=joined["capacity"] * volume,
        slope=slope if slope.any() else None,
        slope_at_c=joined["slope_at"],
        latent=latent * volume if latent.any() else None,
    )


def _edges(layer: Layer, cases: int, finer: int, above: tuple[Layer, Floats] | None) -> Floats:
    """Edges (cells + 1, cases) [m] of one layer, each coarse cell cut into ``finer``.

    The stretching is that of the coarse grid whatever ``finer`` is, as extrapolation needs.
    ``above`` is the layer above with the width of its last coarse cell.
    """
    place = np.linspace(0.0, 1.0, layer.cells * finer + 1)[:, None]
    thickness = np.broadcast_to(np.asarray(layer.thickness_m, float), (cases,))
    if layer.spacing == "both faces":
        return np.asarray((0.4 * place + 0.3 * (1.0 - np.cos(np.pi * place))) * thickness)
    if above is None:
        first = thickness / (4 * layer.cells)
    else:
        # The first cell passes heat as fast as the last one above: equal width over root of
        # diffusivity, so that the jump at the contact is resolved alike on both sides.
        other, width = above
        own = np.divide(layer.conductivity_wmk, layer.capacity_jm3k)
        its = np.divide(other.conductivity_wmk, other.capacity_jm3k)
        first = width * np.sqrt(own / its)
    stretch = _stretch(thickness / first, layer.cells)
    return np.asarray(np.expm1(stretch * place) / np.expm1(stretch) * thickness)


def _stretch(total_over_first: Floats, cells: int) -> Floats:
    """Stretch a of the edges (exp(a s) - 1)/(exp(a) - 1) whose first of ``cells`` fits."""
    wanted = np.log(np.maximum(total_over_first, cells * 1.02))
    stretch = 2.0 * cells / (cells - 1) * (wanted - np.log(cells))  # mean over geometric mean
    for _ in range(4):
        whole, one = np.expm1(stretch), np.expm1(stretch / cells)
        slope = 1.0 + 1.0 / whole - (1.0 + 1.0 / one) / cells
        stretch = np.maximum(stretch - (np.log(whole / one) - wanted) / slope, 1e-3)
    return np.asarray(stretch)
