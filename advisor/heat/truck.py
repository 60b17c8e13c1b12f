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
        cuts: cells per crust; 10 are within 0.006 of the load.
    """
    even, total = _even_faces(duration_s, faces, mix, standing_s, standing)
    given = total, np.asarray(mix.conductivity_wmk, float), mix.diffusivity_m2s
    limit = np.asarray(limit, float)

    def edges_m(length: Numbers) -> Floats:
        # Cells lie where the crust is, thinner at the face; one cell is the core.
        size = np.asarray(length, float)
        reach = np.minimum(6.0 * np.sqrt(given[2] * total), 0.499 * size)
        near = np.multiply.outer((np.arange(cuts + 1) / cuts) ** 1.5, reach)
        return np.concatenate([near, size - near[::-1]])

    def profile(length: Numbers, one: str, other: str, depth_m: Floats) -> Floats:
        far_m = np.asarray(length, float) - depth_m
        near, far = (
            shortfall(at, even.of(face), *given) for at, face in ((depth_m, one), (far_m, other))
        )
        return np.asarray(1.0 - near - far)

    along, across, upright = _directions(box)
    cells = []
    for length, one, other in (along, across, upright):
        edges = edges_m(length)
        warm = profile(length, one, other, edges)
        low, high = np.minimum(warm[:-1], warm[1:]), np.maximum(warm[:-1], warm[1:])
        cells.append((low, high, np.diff(edges, axis=0) / np.asarray(length, float)))
    xs, ys, (z_low, z_high, z_share) = cells
    share: Floats = np.zeros(())
    for x_low, x_high, x_share in zip(*xs, strict=True):
        for at, (y_low, y_high, y_share) in enumerate(zip(*ys, strict=True)):
            if at > cuts:
                break  # both sides are alike: one half, the core cell between them once
            low, high = x_low * y_low * z_low, x_high * y_high * z_high
            cold = np.clip((limit - low) / np.maximum(high - low, 1e-9), 0.0, 1.0)
            part = x_share * y_share * (cold * z_share).sum(axis=0)
            share = share + (part if at == cuts else 2.0 * part)
    return np.asarray(share)


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
    """Depth [m] of mix whose excess heat has gone into the plate.

    The plate ends as warm as the face would be, less what the crust could not pass to it yet: a
    plate on a thick body with nothing beyond it warms as 1 - erfcx(root(k C t)/plate).
    """
    root = np.sqrt(mix.conductivity_wmk * mix.capacity_jm3k * total_s)
    plate = np.asarray(body.heat_jm2k, float)
    ratio = coefficient_wm2k / np.asarray(mix.conductivity_wmk, float)
    face = erfcx(ratio * np.sqrt(mix.diffusivity_m2s * total_s))
    warm = face * (1.0 - erfcx(root / np.maximum(plate, 1e-9)))
    taken = np.maximum(warm - (1.0 - np.asarray(body.cold, float)), 0.0)
    return np.asarray(plate * taken / mix.capacity_jm3k)


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
