"""Mix in a silo: bulk, first material out of the cone, wall crust, and how long it may wait."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from scipy.special import erfcx

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers
from advisor.heat.materials import MixThermal
from advisor.heat.product import Span, face_share, start_share


@dataclass(frozen=True)
class Silo:
    """A silo and the mix in it; fields broadcast over cases.

    ``fill_m`` is the height of mix in the barrel, ``cone_m`` the height of the cone, full.
    Coefficients are from the mix to the air, insulation and bridges included. A heated cone is
    ``cone_c``, the temperature its heaters hold outside the mix, and the coefficient to that;
    None leaves the cone to the air.
    """

    radius_m: Numbers
    fill_m: Numbers
    cone_m: Numbers
    wall_wm2k: Numbers
    top_wm2k: Numbers
    cone_wm2k: Numbers
    cone_c: Numbers | None = None

    @classmethod
    def holding(
        cls,
        mass_kg: Numbers,
        radius_m: Numbers,
        cone_m: Numbers,
        density_kgm3: Numbers,
        *,
        wall_wm2k: Numbers,
        top_wm2k: Numbers,
        cone_wm2k: Numbers,
        cone_c: Numbers | None = None,
    ) -> Silo:
        """The silo filled with ``mass_kg`` of loose mix; a fifth of a metre of barrel at least."""
        radius, cone = np.asarray(radius_m, float), np.asarray(cone_m, float)
        area = np.pi * radius**2
        volume = np.asarray(mass_kg, float) / np.asarray(density_kgm3, float)
        fill = np.maximum((volume - area * cone / 3.0) / area, 0.2)
        return cls(radius, fill, cone, wall_wm2k, top_wm2k, cone_wm2k, cone_c)

    @property
    def cone_volume_m3(self) -> Floats:
        """Volume of the cone [m3]."""
        radius, cone = np.asarray(self.radius_m, float), np.asarray(self.cone_m, float)
        return np.asarray(np.pi * radius**2 * cone / 3.0)

    @property
    def cone_ball_m(self) -> Floats:
        """Radius [m] of the ball with as much volume behind each area of face as the cone."""
        radius, cone = np.asarray(self.radius_m, float), np.asarray(self.cone_m, float)
        return np.asarray(radius * cone / np.hypot(radius, cone))


@dataclass(frozen=True)
class StoredMix:
    """Temperatures [C] after a hold: ``mean_c`` of all, ``first_out_c`` of the cone, ``wall_c``."""

    mean_c: Floats
    first_out_c: Floats
    wall_c: Floats


def retained_in_silo(hold_s: Numbers, silo: Silo, mix: MixThermal) -> Floats:
    """Share [1] of its excess over the air that the mean of the barrel keeps.

    Barrel as a cylinder between its top and its cone, all towards the air; a heated cone adds to
    it.

    Args:
        hold_s: time in the silo, (...) [s].
        silo: the silo and its filling.
        mix: the loose mix.

    Raises FaultyInput for a negative time.
    Validity: within 0.1 K of the Bessel series for two days in an ordinary silo. No draught through
    open hatches, which can lose more than an insulated wall (from memory).
    """
    _refuse_negative(hold_s)
    return start_share(_spans(silo), hold_s, mix)


def cone_share(hold_s: Numbers, silo: Silo, mix: MixThermal) -> Floats:
    """Share [1] of the cone's surroundings in the mean of the barrel, for a heated cone.

    Args:
        hold_s: time in the silo, (...) [s].
        silo: the silo and its filling.
        mix: the loose mix.
    """
    return face_share(_spans(silo), 1, False, hold_s, mix)


def stored_mix(
    hold_s: Numbers, silo: Silo, mix: MixThermal, start_c: Numbers, air_c: Numbers
) -> StoredMix:
    """Temperatures [C] of mix after a hold: all of it, the first out of the cone, the wall.

    The cone comes out first and coldest; it has as much face for its volume as a ball (derived).
    The wall is the crust of the barrel, which comes last where the flow is a funnel (common
    practice).

    Args:
        hold_s: time in the silo, (...) [s].
        silo: the silo and its filling.
        mix: the loose mix.
        start_c: temperature as stored, (...) [C].
        air_c: mean air temperature of the hold, (...) [C].

    Raises FaultyInput for a negative time.
    """
    start, air = np.asarray(start_c, float), np.asarray(air_c, float)
    # Mix in the cone lies between the barrel and the faces of the cone: heat comes a few decimetres
    # in a day, so the barrel loses through wall and top alone, and the cone for itself.
    shielded = replace(silo, cone_wm2k=0.0)
    barrel = air + retained_in_silo(hold_s, shielded, mix) * (start - air)
    sees = air if silo.cone_c is None else np.asarray(silo.cone_c, float)
    ball = Span(silo.cone_ball_m, silo.cone_wm2k, curvature=2)
    first = sees + ball.retained(hold_s, mix) * (start - sees)
    volume = np.pi * np.asarray(silo.radius_m, float) ** 2 * np.asarray(silo.fill_m, float)
    cone = silo.cone_volume_m3
    spread = np.sqrt(mix.diffusivity_m2s * np.asarray(hold_s, float))
    ratio = np.asarray(silo.wall_wm2k, float) / np.asarray(mix.conductivity_wmk, float)
    wall = air + erfcx(ratio * spread) * (start - air)
    return StoredMix(
        mean_c=np.asarray((volume * barrel + cone * first) / (volume + cone)),
        first_out_c=np.asarray(first),
        wall_c=np.asarray(wall),
    )


def hold_left_s(
    limit_c: Numbers,
    silo: Silo,
    mix: MixThermal,
    start_c: Numbers,
    air_c: Numbers,
    *,
    longest_s: float = 72 * 3600.0,
) -> Floats:
    """Time [s] until the first mix out of the cone is down to a limit; infinite where it is not.

    A rule on hours in the silo is a rule and no part of this model.

    Args:
        limit_c: lowest temperature allowed, (...) [C].
        silo: the silo and its filling.
        mix: the loose mix.
        start_c: temperature as stored, (...) [C].
        air_c: mean air temperature of the hold, (...) [C].
        longest_s: how far to look [s].
    """
    limit = np.asarray(limit_c, float)

    def first_out_c(hold_s: Numbers) -> Floats:
        return stored_mix(hold_s, silo, mix, start_c, air_c).first_out_c

    low = np.zeros(np.broadcast_shapes(limit.shape, first_out_c(1.0).shape))
    high = np.full_like(low, longest_s)
    lasts = first_out_c(high) > limit
    for _ in range(30):
        middle = 0.5 * (low + high)
        warm = first_out_c(middle) > limit
        low, high = np.where(warm, middle, low), np.where(warm, high, middle)
    return np.where(lasts, np.inf, high)


def wall_coefficient_wm2k(
    thickness_m: Numbers,
    conductivity_wmk: Numbers,
    *,
    inside_wm2k: Numbers = np.inf,
    outside_wm2k: Numbers = 20.0,
    bridges: Numbers = 0.0,
) -> Floats:
    """Coefficient [W/m2K] of an insulated wall, 1/(1/inside + thickness/conductivity + 1/outside).

    Args:
        thickness_m: thickness of the insulation, (...) [m].
        conductivity_wmk: its conductivity, hot, (...) [W/mK].
        inside_wm2k: coefficient inside; none where mix touches the wall, (...) [W/m2K].
        outside_wm2k: coefficient outside, (...) [W/m2K].
        bridges: share added for supports, gates and ladders, 0.2 to 0.5 (from memory), (...) [1].
    """
    resistance = (
        1.0 / np.asarray(inside_wm2k, float)
        + np.asarray(thickness_m, float) / np.asarray(conductivity_wmk, float)
        + 1.0 / np.asarray(outside_wm2k, float)
    )
    return np.asarray((1.0 + np.asarray(bridges, float)) / resistance)


def _spans(silo: Silo) -> tuple[Span, Span]:
    return (
        Span(silo.radius_m, silo.wall_wm2k, curvature=1),
        Span(silo.fill_m, silo.top_wm2k, silo.cone_wm2k),
    )


def _refuse_negative(hold_s: Numbers) -> None:
    if (np.asarray(hold_s, float) < 0).any():
        raise FaultyInput.of(
            "hold-negative", "Mix cannot be held for less than no time.", field="hold_s"
        )
