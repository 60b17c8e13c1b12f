"""Blends of binders: tank heels, RAP and RAS binder, by the published rules."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.curve import ViscosityCurve, curve_through
from advisor.binder.laws import loglog_viscosity
from advisor.errors import FaultyInput, OutsideValidity

Floats = NDArray[np.float64]
Rule = Literal["loglog", "loglinear"]

# The two temperatures at which blends are computed and the line refitted, C.
_BLEND_AT_C = np.array([60.0, 135.0])
# Share of the uniform width of an uncertain fraction that is its standard deviation.
_UNIFORM = 12**-0.5


def blend_loglog_pas(viscosity_pas: ArrayLike, mass_share: ArrayLike) -> Floats:
    """Viscosity [Pa.s] of a blend by adding loglog viscosities, always in centipoise.

    The rule depends on the unit inside the logarithms; centipoise is the one of the chart.

    Args:
        viscosity_pas: viscosities [Pa.s] at one temperature, shape (..., n).
        mass_share: mass fractions [1], shape (..., n), summing to 1.

    Raises:
        FaultyInput: the shares do not sum to 1 or one is negative.

    Source: ASTM D4887 and Asphalt Institute MS-2 (looked up).
    """
    shares = _shares(mass_share)
    found: Floats = 10.0 ** (10.0 ** np.sum(shares * loglog_viscosity(viscosity_pas), axis=-1))
    return found / 1000.0


def blend_loglinear_pas(viscosity_pas: ArrayLike, mass_share: ArrayLike) -> Floats:
    """Viscosity [Pa.s] of a blend by adding logarithms.

    Args:
        viscosity_pas: viscosities [Pa.s] at one temperature, shape (..., n).
        mass_share: mass fractions [1], shape (..., n), summing to 1.

    Source: Arrhenius' mixing rule (textbook).
    """
    shares = _shares(mass_share)
    found: Floats = np.exp(np.sum(shares * np.log(np.asarray(viscosity_pas, float)), axis=-1))
    return found


_RULES: dict[Rule, Callable[[ArrayLike, ArrayLike], Floats]] = {
    "loglog": blend_loglog_pas,
    "loglinear": blend_loglinear_pas,
}


def blend_grunberg_pas(
    first_pas: ArrayLike, second_pas: ArrayLike, second_share: ArrayLike, interaction: ArrayLike
) -> Floats:
    """Viscosity [Pa.s] of two binders with an interaction term.

    Args:
        first_pas: viscosity of the first [Pa.s].
        second_pas: viscosity of the second [Pa.s].
        second_share: mass fraction of the second [1].
        interaction: G of the rule [1], measured for the pair.

    Source: Grunberg and Nissan 1949; 45 of 47 aged and softening pairs follow it (Chaffin et al.
    1995, looked up).
    """
    share = np.asarray(second_share, float)
    logs = (1.0 - share) * np.log(np.asarray(first_pas, float)) + share * np.log(
        np.asarray(second_pas, float)
    )
    found: Floats = np.exp(logs + share * (1.0 - share) * np.asarray(interaction, float))
    return found


def refutas_index(kinematic_m2s: ArrayLike) -> Floats:
    """Blending index [1] of a kinematic viscosity; natural logarithms.

    Args:
        kinematic_m2s: kinematic viscosity [m2/s].

    Source: Refutas, as quoted from Maples 2000 (looked up second hand).
    """
    centistokes = np.asarray(kinematic_m2s, float) * 1e6
    found: Floats = 14.534 * np.log(np.log(centistokes + 0.8)) + 10.975
    return found


def blend_refutas_m2s(kinematic_m2s: ArrayLike, mass_share: ArrayLike) -> Floats:
    """Kinematic viscosity [m2/s] of a blend by the Refutas index.

    Args:
        kinematic_m2s: kinematic viscosities [m2/s] at one temperature, shape (..., n).
        mass_share: mass fractions [1], shape (..., n), summing to 1; sources disagree on mass or
            volume.

    Source: Refutas, as quoted from Maples 2000 (looked up second hand).
    """
    index = np.sum(_shares(mass_share) * refutas_index(kinematic_m2s), axis=-1)
    found: Floats = (np.exp(np.exp((index - 10.975) / 14.534)) - 0.8) * 1e-6
    return found


def rap_binder_share(
    rap_of_mix: ArrayLike, binder_of_rap: ArrayLike, binder_of_mix: ArrayLike
) -> Floats:
    """Share [1] of the total binder that comes with RAP or RAS; not its share of the mix.

    Args:
        rap_of_mix: RAP as a fraction of the mix [1].
        binder_of_rap: binder as a fraction of the RAP [1].
        binder_of_mix: total binder as a fraction of the mix [1].

    Source: mass balance.
    """
    found: Floats = (
        np.asarray(rap_of_mix, float)
        * np.asarray(binder_of_rap, float)
        / np.asarray(binder_of_mix, float)
    )
    return found


def critical_temperature_c(virgin_c: ArrayLike, rap_c: ArrayLike, share: ArrayLike) -> Floats:
    """Critical grade temperature [C] of a blend with RAP binder.

    Args:
        virgin_c: critical temperature of the virgin binder [C].
        rap_c: critical temperature of the RAP binder [C].
        share: share of RAP in the binder [1].

    Source: linear blending chart, NCHRP Report 452; Asphalt Institute MS-2 eq. 11.21 (looked up).
    """
    virgin = np.asarray(virgin_c, float)
    found: Floats = virgin + np.asarray(share, float) * (np.asarray(rap_c, float) - virgin)
    return found


def share_for_critical_temperature(
    wanted_c: ArrayLike, virgin_c: ArrayLike, rap_c: ArrayLike
) -> Floats:
    """Share of RAP in the binder [1] that brings the blend to a critical temperature.

    Args:
        wanted_c: critical temperature wanted [C].
        virgin_c: critical temperature of the virgin binder [C].
        rap_c: critical temperature of the RAP binder [C].

    Source: Asphalt Institute MS-2 eq. 11.21 (looked up).
    """
    virgin = np.asarray(virgin_c, float)
    found: Floats = (np.asarray(wanted_c, float) - virgin) / (np.asarray(rap_c, float) - virgin)
    return found


def blend_curves(
    curves: Sequence[ViscosityCurve],
    mass_share: Sequence[float],
    *,
    rule: Rule = "loglog",
    share_sd: float = 0.0,
    polymer_kinds: Sequence[str] = (),
) -> ViscosityCurve:
    """Curve of a blend: the rule at 60 and 135 C and a line through the two.

    Args:
        curves: A-VTS curves of one case each, n of them.
        mass_share: mass fractions [1], n of them, summing to 1.
        rule: 'loglog' (ASTM D4887) or 'loglinear'.
        share_sd: standard deviation [1] of the last share, moved against the first.
        polymer_kinds: names of the polymers in the parts; more than one different is refused.

    Raises:
        OutsideValidity: different polymers meet, or a curve is not A-VTS.
        FaultyInput: the shares do not sum to 1.

    Source: ASTM D4887 rule at two temperatures (looked up), refitted on ASTM D2493.
    """
    if len(set(polymer_kinds)) > 1:
        raise OutsideValidity.of(
            "polymers-mixed",
            f"Different polymers are not blended by calculation: {', '.join(polymer_kinds)}.",
            "Ask both suppliers; measure the blend.",
        )
    if any(curve.law != "avts" for curve in curves):
        raise OutsideValidity.of(
            "blend-law",
            "Only A-VTS lines are blended.",
            "Fit the A-VTS line of each part first.",
        )
    shares = _shares(mass_share)
    at_two = np.stack([curve.viscosity_pas(_BLEND_AT_C) for curve in curves], axis=-1)

    def blended(moved: float) -> ViscosityCurve:
        step = np.zeros_like(shares)
        step[0], step[-1] = -moved, moved
        cool, hot = _RULES[rule](at_two, np.broadcast_to(shares + step, at_two.shape))
        return curve_through(_BLEND_AT_C[0], cool, _BLEND_AT_C[1], hot)

    covariance = np.einsum("n,nij->ij", shares**2, np.stack([one.covariance for one in curves]))
    if share_sd > 0.0:
        reach = min(share_sd, float(shares[0]), float(shares[-1]))
        slope = (blended(reach).parameters - blended(-reach).parameters) / (2.0 * reach)
        covariance = covariance + share_sd**2 * np.outer(slope, slope)
    return replace(
        blended(0.0),
        covariance=covariance,
        basis="blend of " + " and ".join(f"{share:.0%}" for share in shares),
        notes=tuple(note for curve in curves for note in curve.notes),
    )


def rap_blend_curve(
    virgin: ViscosityCurve,
    rap: ViscosityCurve,
    rap_share_of_binder: float,
    blending_low: float = 0.5,
    blending_high: float = 1.0,
) -> ViscosityCurve:
    """Curve of the binder that coats a mix with RAP, with the doubt of how far it blends.

    Only the degree of blending of the RAP binder takes part; the rest stays on the stone.

    Args:
        virgin: curve of the virgin binder.
        rap: curve of the recovered RAP binder.
        rap_share_of_binder: share of the total binder that comes with RAP [1].
        blending_low: least degree of blending believed [1].
        blending_high: greatest degree of blending believed [1].

    Raises:
        FaultyInput: a share or degree outside 0 to 1, or the degrees in the wrong order.

    Source: ASTM D4887 rule; full blending is an assumption, and below 15 to 20 % RAP it is often
    treated as stone (from memory). The default range is common practice, no source.
    """
    if not 0.0 <= rap_share_of_binder < 1.0 or not 0.0 <= blending_low <= blending_high <= 1.0:
        raise FaultyInput.of(
            "blend-share",
            f"RAP share {rap_share_of_binder:g} with blending {blending_low:g} to "
            f"{blending_high:g}.",
            "Shares and degrees lie between 0 and 1, the lower degree first.",
            field="rap_share_of_binder",
        )
    low, high = (
        _active_share(rap_share_of_binder, degree) for degree in (blending_low, blending_high)
    )
    middle = 0.5 * (low + high)
    blend = blend_curves([virgin, rap], [1.0 - middle, middle], share_sd=(high - low) * _UNIFORM)
    return blend.noted(
        f"Of the RAP binder {blending_low:.0%} to {blending_high:.0%} is taken to blend."
    )


def _active_share(share: float, degree: float) -> float:
    active = share * degree
    return active / (1.0 - share + active)


def _shares(mass_share: ArrayLike) -> Floats:
    shares = np.asarray(mass_share, float)
    if np.any(shares < 0.0) or np.any(np.abs(shares.sum(axis=-1) - 1.0) > 1e-6):
        raise FaultyInput.of(
            "shares",
            "The mass fractions of a blend do not sum to 1.",
            "Give fractions between 0 and 1 that sum to 1.",
            field="mass_share",
        )
    return shares
