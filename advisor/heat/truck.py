"""A load on its way: how warm its bulk, its core and its crust still are.

Never one lump: the surface of a bare load is a hundred kelvin below its core after an hour. The
closed form below costs less than the lumped one is wrong.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from scipy.special import erfcx

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers
from advisor.heat.crust import lost_depth_m, lost_depth_two_m, shortfall
from advisor.heat.materials import MixThermal
from advisor.heat.product import Span, face_share

_FACES = ("front", "rear", "side", "top", "floor")


@dataclass(frozen=True)
class Box:
    """Inside of a truck body up to the mix: length, width and height of fill [m]."""

    length_m: Numbers
    width_m: Numbers
    height_m: Numbers

    @classmethod
    def of_payload(
        cls,
        payload_kg: Numbers,
        length_m: Numbers,
        width_m: Numbers,
        loose_density_kgm3: Numbers,
    ) -> Box:
        """The box whose height of fill fits ``payload_kg`` at ``loose_density_kgm3``."""
        floor = np.asarray(length_m, float) * np.asarray(width_m, float)
        height = np.asarray(payload_kg, float) / (np.asarray(loose_density_kgm3, float) * floor)
        return cls(length_m, width_m, height)

    @property
    def volume_m3(self) -> Floats:
        """Volume of the mix [m3]."""
        return np.asarray(
            np.asarray(self.length_m, float)
            * np.asarray(self.width_m, float)
            * np.asarray(self.height_m, float)
        )


@dataclass(frozen=True)
class Faces:
    """Coefficients [W/m2K] from the mix to the air through each face, body and cover included."""

    front_wm2k: Numbers
    rear_wm2k: Numbers
    side_wm2k: Numbers
    top_wm2k: Numbers
    floor_wm2k: Numbers

    def of(self, face: str) -> Floats:
        """Coefficient [W/m2K] of the face called ``face``."""
        return np.asarray(getattr(self, f"{face}_wm2k"), float)


@dataclass(frozen=True)
class LoadState:
    """A load at the end of its haul, as shares of the excess over the air it started with.

    T = air + share * (start - air). ``retained`` is the bulk, as remixed; ``core`` the middle;
    ``crust`` the middle of the coldest face; ``corner`` the coldest corner of the open top.
    """

    retained: Floats
    core: Floats
    crust: Floats
    corner: Floats


@dataclass(frozen=True)
class ColdBody:
    """A body that starts cold and takes heat from the first load.

    ``heat_jm2k`` is the heat capacity of wall and floor plate per area; ``cold`` is how cold it
    starts, 1 at air temperature, 0 at that of the mix.
    """

    heat_jm2k: Numbers
    cold: Numbers = 1.0


def retained_in_truck(
    duration_s: Numbers,
    box: Box,
    faces: Faces,
    mix: MixThermal,
    *,
    standing_s: Numbers = 0.0,
    standing: Faces | None = None,
    body: ColdBody | None = None,
) -> Floats:
    """Share [1] of its excess over the air that the bulk of a load keeps.

    Bulk mean, as remixed = air + share * (start - air).

    Args:
        duration_s: time with ``faces``, (...) [s].
        box: the load.
        faces: coefficients of its faces.
        mix: the loose mix.
        standing_s: time with ``standing``, waits and queue together, (...) [s].
        standing: coefficients while it stands.
        body: counts while it is cold, on the first load.

    Raises FaultyInput for a negative time, a box without volume, a wait without its faces.
    Validity: up to about 20 h for a load 1.1 m deep; all faces see the air. Two spells are exact in
    any order; a wait before and one after the drive are taken as one, within 1 % of the loss.
    Source: product of crusts (see ``crust`` and ``product``); a plate as warm as its face
    (derived).
    """
    _refuse_impossible(duration_s, standing_s, box, standing)
    depths = _lost_depths_m(duration_s, faces, mix, standing_s, standing)
    total_s = np.asarray(duration_s, float) + np.asarray(standing_s, float)
    if body is not None:
        for face in ("front", "rear", "side", "floor"):
            depths[face] = depths[face] + _into_body_m(body, faces.of(face), total_s, mix)
    share = np.ones(())
    for length, one, other in _directions(box):
        share = share * np.maximum(1.0 - (depths[one] + depths[other]) / length, 0.0)
    return np.asarray(share)


def load_state(
    duration_s: Numbers,
    box: Box,
    faces: Faces,
    mix: MixThermal,
    *,
    standing_s: Numbers = 0.0,
    standing: Faces | None = None,
) -> LoadState:
    """Shares [1] of its excess that bulk, core and crust of a load keep.

    Two spells enter core and crust through the one coefficient that loses the same heat in the same
    time; how cold the outermost centimetre is depends on which came last.

    Args:
        duration_s: time with ``faces``, (...) [s].
        box: the load.
        faces: coefficients of its faces.
        mix: the loose mix.
        standing_s: time with ``standing``, (...) [s].
        standing: coefficients while it stands.

    Raises FaultyInput as ``retained_in_truck`` does.
    """
    even, total = _even_faces(duration_s, faces, mix, standing_s, standing)
    retained = retained_in_truck(
        duration_s, box, faces, mix, standing_s=standing_s, standing=standing
    )
    given = total, np.asarray(mix.conductivity_wmk, float), mix.diffusivity_m2s
    core, at_face = np.ones(()), {}
    middles = {}
    for length, one, other in _directions(box):
        half = np.asarray(length, float) / 2.0
        middle = (
            1.0 - shortfall(half, even.of(one), *given) - shortfall(half, even.of(other), *given)
        )
        middles[one] = middles[other] = middle
        core = core * middle
    spread = np.sqrt(given[2] * total)
    for face in _FACES:
        at_face[face] = erfcx(even.of(face) / given[1] * spread)
    crust = np.min(
        np.stack(np.broadcast_arrays(*(at_face[face] * core / middles[face] for face in _FACES))),
        axis=0,
    )
    ends = np.minimum(at_face["front"], at_face["rear"])
    corner = at_face["top"] * at_face["side"] * ends
    return LoadState(retained, np.asarray(core), crust, np.asarray(corner))


def share_below(
    limit: Numbers,
    duration_s: Numbers,
    box: Box,
    faces: Faces,
    mix: MixThermal,
    *,
    standing_s: Numbers = 0.0,
    standing: Faces | None = None,
    cuts: int = 10,
) -> Floats:
    """Share [1] of a load that is colder than a limit, were it not remixed.

    Args:
        limit: the limit as a share of the starting excess, (limit - air)/(start - air), (...) [1].
        duration_s: time with ``faces``, (...) [s].
        box: the load.
        faces: coefficients of its faces.
        mix: the loose mix.
        standing_s: time with ``standing``, (...) [s].
        standing: coefficients while it stands.
        cuts: cells per half length; 10 are good to 0.01 of the load.
    """
    even, total = _even_faces(duration_s, faces, mix, standing_s, standing)
    given = total, np.asarray(mix.conductivity_wmk, float), mix.diffusivity_m2s
    limit = np.asarray(limit, float)

    def profile(length: Numbers, one: str, other: str, places: Floats) -> list[Floats]:
        size = np.asarray(length, float)
        return [
            1.0
            - shortfall(place * size, even.of(one), *given)
            - shortfall((1.0 - place) * size, even.of(other), *given)
            for place in places
        ]

    # Cells are thin at the faces, where the crust is; middles along and across, edges in height,
    # so that the height at which the limit is crossed is found inside a cell.
    half = 0.5 * (np.arange(cuts + 1) / cuts) ** 2
    edges = np.concatenate([half, 1.0 - half[-2::-1]])
    middles, widths = (edges[:-1] + edges[1:]) / 2.0, np.diff(edges)
    along, across, upright = _directions(box)
    xs = profile(*along, middles)
    ys = profile(*across, middles[:cuts])
    zs = np.stack(np.broadcast_arrays(*profile(*upright, edges)))
    shape = np.broadcast_shapes(zs.shape[1:], xs[0].shape, ys[0].shape, limit.shape)
    zs = np.stack([np.broadcast_to(z, shape) for z in zs])
    low = np.minimum(zs[:-1], zs[1:])
    rise = np.maximum(np.abs(np.diff(zs, axis=0)), 1e-12)
    heights = widths.reshape(-1, *(1,) * len(shape))
    total_share = np.zeros(shape)
    for x, x_width in zip(xs, widths, strict=True):
        for y, y_width in zip(ys, widths[:cuts], strict=True):
            needed = limit / np.maximum(x * y, 1e-12)
            cold = np.clip((needed - low) / rise, 0.0, 1.0)
            total_share += 2.0 * x_width * y_width * (cold * heights).sum(axis=0)
    return total_share


def surroundings_shares(
    duration_s: Numbers, box: Box, faces: Faces, mix: MixThermal
) -> dict[str, Floats]:
    """Share [1] of each face's surroundings in the bulk mean, by face; ``side`` is both sides.

    For faces that see different surroundings, such as a floor heated by exhaust: the bulk is
    ``retained_in_truck`` times the start plus each share times what that face sees.

    Args:
        duration_s: time with ``faces``, (...) [s].
        box: the load.
        faces: coefficients of its faces.
        mix: the loose mix.

    Source: Green's functions of a product body (derived).
    """
    spans = tuple(
        Span(length, faces.of(one), faces.of(other)) for length, one, other in _directions(box)
    )
    shares: dict[str, Floats] = {}
    for at, (_, one, other) in enumerate(_directions(box)):
        for face, first in ((one, True), (other, False)):
            found = face_share(spans, at, first, duration_s, mix)
            shares[face] = shares.get(face, np.zeros(())) + found
    return shares


def _directions(box: Box) -> tuple[tuple[Numbers, str, str], ...]:
    return (
        (box.length_m, "front", "rear"),
        (box.width_m, "side", "side"),
        (box.height_m, "top", "floor"),
    )


def _lost_depths_m(
    duration_s: Numbers,
    faces: Faces,
    mix: MixThermal,
    standing_s: Numbers,
    standing: Faces | None,
) -> dict[str, Floats]:
    body = np.asarray(mix.conductivity_wmk, float), mix.diffusivity_m2s
    if standing is None:
        return {face: lost_depth_m(faces.of(face), duration_s, *body) for face in _FACES}
    return {
        face: lost_depth_two_m(faces.of(face), duration_s, standing.of(face), standing_s, *body)
        for face in _FACES
    }


def _even_faces(
    duration_s: Numbers,
    faces: Faces,
    mix: MixThermal,
    standing_s: Numbers,
    standing: Faces | None,
) -> tuple[Faces, Floats]:
    """The one set of coefficients that loses in the whole time what the two spells lose."""
    total = np.asarray(duration_s, float) + np.asarray(standing_s, float)
    if standing is None:
        return faces, total
    body = np.asarray(mix.conductivity_wmk, float), mix.diffusivity_m2s
    depths = _lost_depths_m(duration_s, faces, mix, standing_s, standing)
    parts = np.asarray(duration_s, float) / np.maximum(total, 1e-9)
    found = []
    for face in _FACES:
        even = parts * faces.of(face) + (1.0 - parts) * standing.of(face)
        for _ in range(4):
            # loss grows more slowly than the coefficient, so the ratio closes in from one side
            even = even * depths[face] / np.maximum(lost_depth_m(even, total, *body), 1e-15)
        found.append(even)
    return Faces(*found), total


def _into_body_m(
    body: ColdBody, coefficient_wm2k: Floats, total_s: Floats, mix: MixThermal
) -> Floats:
    """Depth [m] of mix whose excess heat has gone into the plate: it ends as warm as the face."""
    ratio = coefficient_wm2k / np.asarray(mix.conductivity_wmk, float)
    warm = erfcx(ratio * np.sqrt(mix.diffusivity_m2s * total_s))
    taken = np.maximum(warm - (1.0 - np.asarray(body.cold, float)), 0.0)
    return np.asarray(np.asarray(body.heat_jm2k, float) * taken / mix.capacity_jm3k)


def _refuse_impossible(
    duration_s: Numbers, standing_s: Numbers, box: Box, standing: Faces | None
) -> None:
    if (np.asarray(duration_s, float) < 0).any() or (np.asarray(standing_s, float) < 0).any():
        raise FaultyInput.of("time-negative", "A haul or a wait cannot last less than nothing.")
    if (box.volume_m3 <= 0).any():
        raise FaultyInput.of("box-empty", "The box of a truck body must have a volume.")
    if standing is None and np.asarray(standing_s, float).any():
        raise FaultyInput.of(
            "standing-faces-missing", "A wait is given without the faces as they are standing."
        )
