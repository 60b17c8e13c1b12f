"""A block of mix that loses heat through its faces: shares of the start and of each face.

The product of one-dimensional solutions (Carslaw and Jaeger 1959, section 1.15; from memory, held
by the tests against series and a grid). Opposite faces do not reach each other while
diffusivity * time stays below 3 % of the length squared: a day for a load a metre deep.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from scipy.special import erfcx

from advisor.heat.arrays import Floats, Numbers
from advisor.heat.crust import lost_depth_m
from advisor.heat.materials import MixThermal


@dataclass(frozen=True)
class Span:
    """One direction of a block: its length [m] and the coefficients [W/m2K] of its two faces.

    With ``curvature`` 1 it is the radius of a cylinder, with 2 of a ball; the second face is
    then sealed and ``length_m`` is the radius.
    """

    length_m: Numbers
    first_wm2k: Numbers
    second_wm2k: Numbers = 0.0
    curvature: int = 0

    def retained(self, duration_s: Numbers, mix: MixThermal) -> Floats:
        """Share [1] of the excess over the surroundings that the mean still has."""
        body = np.asarray(mix.conductivity_wmk, float), mix.diffusivity_m2s
        length = np.asarray(self.length_m, float)
        first = lost_depth_m(self.first_wm2k, duration_s, *body) / length
        if not self.curvature:
            second = lost_depth_m(self.second_wm2k, duration_s, *body) / length
            return np.asarray(np.maximum(1.0 - first - second, 0.0))
        # A curved face has less body behind it the deeper the crust: exact to second order for a
        # barely and for a perfectly cooled face (derived from Laplace transforms), and between.
        spread = np.sqrt(body[1] * np.asarray(duration_s, float))
        cold = 1.0 - erfcx(np.asarray(self.first_wm2k, float) / body[0] * spread)
        bend = self.curvature / 4.0 * (1.0 + (np.pi / 2.0 - 1.0) * cold)
        lost = (1 + self.curvature) * first * (1.0 - bend * first)
        return np.asarray(np.clip(1.0 - lost, 0.0, 1.0))


def start_share(spans: tuple[Span, ...], duration_s: Numbers, mix: MixThermal) -> Floats:
    """Share [1] of the excess over one surroundings that the mean of the block still has."""
    share = np.ones(())
    for span in spans:
        share = share * span.retained(duration_s, mix)
    return np.asarray(share)


# Eight nodes on 0 to 1 for the root of time, in which a flux through a face is smooth.
_RAW, _RAW_WEIGHTS = np.polynomial.legendre.leggauss(8)
_PLACES, _WEIGHTS = (_RAW + 1.0) / 2.0, _RAW_WEIGHTS / 2.0


def face_share(
    spans: tuple[Span, ...], at: int, first: bool, duration_s: Numbers, mix: MixThermal
) -> Floats:
    """Share [1] of the surroundings of one face in the mean of the block.

    The face is the first or second of flat span number ``at``. The mean temperature is the start
    share times the start plus each face's share times its surroundings; all shares sum to 1
    (Green's functions of a product body; derived).
    """
    span = spans[at]
    coefficient = np.asarray(span.first_wm2k if first else span.second_wm2k, float)
    ratio = coefficient / np.asarray(mix.conductivity_wmk, float)
    duration = np.asarray(duration_s, float)
    others = tuple(one for i, one in enumerate(spans) if i != at)
    total: Floats = np.zeros(())
    for place, weight in zip(_PLACES, _WEIGHTS, strict=True):
        then = duration * place**2
        flow = erfcx(ratio * np.sqrt(mix.diffusivity_m2s * then))
        total = total + weight * 2.0 * place * flow * start_share(others, then, mix)
    rate = coefficient / (mix.capacity_jm3k * np.asarray(span.length_m, float))
    return np.asarray(total * rate * duration)


def mean_temperature_c(
    start_c: Numbers,
    air_c: Numbers,
    retained: Numbers,
    other_faces: Mapping[str, tuple[Numbers, Numbers]] | None = None,
) -> Floats:
    """Mean temperature [C] of a block from its shares.

    Args:
        start_c: temperature at the start, (...) [C].
        air_c: temperature of the air, (...) [C].
        retained: share of the excess over the air that is kept, (...) [1].
        other_faces: share [1] and temperature seen [C] of each face that does not see the air.

    Source: superposition (derived).
    """
    air = np.asarray(air_c, float)
    mean = air + np.asarray(retained, float) * (np.asarray(start_c, float) - air)
    for share, sees_c in (other_faces or {}).values():
        mean = mean + np.asarray(share, float) * (np.asarray(sees_c, float) - air)
    return np.asarray(mean)
