"""How deep a face has cooled: closed forms for a thick body that loses heat through a coefficient.

Carslaw and Jaeger 1959, Conduction of Heat in Solids, section 2.7 (from memory; held by the tests
against series and quadrature). With a = diffusivity, s = sqrt(a t), H = coefficient/conductivity
and u = x/(2 s), the shortfall at depth x is S = erfc(u) - exp(-u^2) erfcx(u + H s).
"""

from __future__ import annotations

import numpy as np
from scipy.special import erfc, erfcx

from advisor.heat.arrays import Floats, Numbers

_LEAST = 1e-12  # a perfectly insulated face is taken at this coefficient over conductivity [1/m]


def shortfall(
    depth_m: Numbers,
    coefficient_wm2k: Numbers,
    duration_s: Numbers,
    conductivity_wmk: Numbers,
    diffusivity_m2s: Numbers,
) -> Floats:
    """Share [1] of the excess over the surroundings that is gone at ``depth_m`` [m]."""
    spread, ratio = _spread_ratio(coefficient_wm2k, duration_s, conductivity_wmk, diffusivity_m2s)
    u = np.asarray(depth_m, float) / np.maximum(2.0 * spread, 1e-12)
    return np.asarray(erfc(u) - np.exp(-u * u) * erfcx(u + ratio * spread))


def lost_depth_m(
    coefficient_wm2k: Numbers,
    duration_s: Numbers,
    conductivity_wmk: Numbers,
    diffusivity_m2s: Numbers,
) -> Floats:
    """Depth [m] of mix whose whole excess heat has left through a face in ``duration_s``.

    The shortfall summed over depth: 2 s/sqrt(pi) - (1 - erfcx(H s))/H.
    """
    spread, ratio = _spread_ratio(coefficient_wm2k, duration_s, conductivity_wmk, diffusivity_m2s)
    product = ratio * spread
    # Below 1e-3 the two terms cancel; the series of erfcx gives the difference.
    series = ratio * spread * spread * (1.0 - 4.0 / (3.0 * np.sqrt(np.pi)) * product)
    full = 2.0 * spread / np.sqrt(np.pi) - (1.0 - erfcx(product)) / ratio
    return np.asarray(np.where(product < 1e-3, series, full))


def lost_within_m(
    depth_m: Numbers,
    coefficient_wm2k: Numbers,
    duration_s: Numbers,
    conductivity_wmk: Numbers,
    diffusivity_m2s: Numbers,
) -> Floats:
    """Part [m] of ``lost_depth_m`` that comes from the first ``depth_m`` under the face."""
    given = coefficient_wm2k, duration_s, conductivity_wmk, diffusivity_m2s
    spread, ratio = _spread_ratio(*given)
    u = np.asarray(depth_m, float) / np.maximum(2.0 * spread, 1e-12)
    integral = np.exp(-u * u) / np.sqrt(np.pi) - u * erfc(u)
    beyond = 2.0 * spread * integral - shortfall(depth_m, *given) / ratio
    return np.asarray(lost_depth_m(*given) - np.maximum(beyond, 0.0))


def lost_depth_two_m(
    first_wm2k: Numbers,
    first_s: Numbers,
    second_wm2k: Numbers,
    second_s: Numbers,
    conductivity_wmk: Numbers,
    diffusivity_m2s: Numbers,
) -> Floats:
    """Depth [m] lost in two spells with different coefficients, such as driving and standing.

    The sum of both less their overlap, the integral of the product of both shortfalls (derived:
    the remaining share is the inner product of the two fields, as conduction is self-adjoint).
    The order of the spells does not matter. Gauss-Legendre over six spreads of the shorter spell.
    """
    body = np.asarray(conductivity_wmk, float), np.asarray(diffusivity_m2s, float)
    one, two = np.asarray(first_s, float), np.asarray(second_s, float)
    reach = 6.0 * np.sqrt(body[1] * np.minimum(one, two))
    overlap: Floats | float = 0.0
    for place, weight in zip(_PLACES, _WEIGHTS, strict=True):
        depth = reach * place
        both = shortfall(depth, first_wm2k, one, *body) * shortfall(depth, second_wm2k, two, *body)
        overlap = overlap + weight * both
    alone = lost_depth_m(first_wm2k, one, *body) + lost_depth_m(second_wm2k, two, *body)
    return np.asarray(alone - reach * overlap)


# Twelve nodes on 0 to 1, squared: the shortfall is steepest at the face.
_RAW, _RAW_WEIGHTS = np.polynomial.legendre.leggauss(12)
_HALF = (_RAW + 1.0) / 2.0
_PLACES, _WEIGHTS = _HALF**2, _RAW_WEIGHTS * _HALF


def _spread_ratio(
    coefficient_wm2k: Numbers,
    duration_s: Numbers,
    conductivity_wmk: Numbers,
    diffusivity_m2s: Numbers,
) -> tuple[Floats, Floats]:
    duration = np.asarray(duration_s, float)
    spread = np.sqrt(np.asarray(diffusivity_m2s, float) * duration)
    ratio = np.asarray(coefficient_wm2k, float) / np.asarray(conductivity_wmk, float)
    return np.asarray(spread), np.asarray(np.maximum(ratio, _LEAST))
