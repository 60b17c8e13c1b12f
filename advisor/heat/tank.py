"""A binder tank: what it loses, where it drifts to, and when to switch the heater on again.

The whole content is taken at one temperature. A tank that has been let cold is not: binder melts
around the heater first, can overheat there, and water foams when it thaws out.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers
from advisor.heat.materials import binder_heat_jkgk


@dataclass(frozen=True)
class BinderTank:
    """A tank with binder in it; fields broadcast over cases.

    ``area_m2`` loses heat with ``coefficient_wm2k``; ``heater_w`` is heating power into the
    binder; ``specific_heat_jkgk`` is that of the binder half-way.
    """

    mass_kg: Numbers
    area_m2: Numbers
    coefficient_wm2k: Numbers
    heater_w: Numbers
    specific_heat_jkgk: Numbers

    @property
    def loss_wk(self) -> Floats:
        """Heat lost for each kelvin above the air [W/K]."""
        return np.asarray(np.multiply(self.area_m2, self.coefficient_wm2k))

    @property
    def lasts_s(self) -> Floats:
        """Time constant of cooling [s]: after it, 37 % of the excess is left."""
        heat = np.asarray(self.mass_kg, float) * np.asarray(self.specific_heat_jkgk, float)
        return np.asarray(heat / self.loss_wk)


@dataclass(frozen=True)
class Setback:
    """Letting a tank cool while it is not used.

    ``reheat_at_s`` is when to switch the heater on, from now; ``lowest_c`` how cold it gets;
    ``reheats_s`` how long the heater then runs. ``held_j`` is the heat that holding would take,
    ``spent_j`` the heat of the setback, ``saved_j`` the difference, before heater losses.
    ``reaches`` is False where the heater cannot reach the temperature wanted at all.
    """

    reheat_at_s: Floats
    lowest_c: Floats
    reheats_s: Floats
    held_j: Floats
    spent_j: Floats
    saved_j: Floats
    reaches: NDArray[np.bool_]


def tank_area_m2(
    diameter_m: Numbers, length_m: Numbers, fill_of_volume: Numbers, *, dry_share: Numbers = 0.4
) -> Floats:
    """Area [m2] of a cylindrical tank that loses heat, its dry part counted in part.

    Args:
        diameter_m: diameter, (...) [m].
        length_m: length, or height of one that stands, (...) [m].
        fill_of_volume: how full it is, (...) [1].
        dry_share: how much of the loss of wetted wall a dry one has, 0.3 to 0.5 (from memory),
            (...) [1].

    Raises FaultyInput for a filling outside 0 to 1.
    """
    diameter, length = np.asarray(diameter_m, float), np.asarray(length_m, float)
    fill = np.asarray(fill_of_volume, float)
    if (fill < 0).any() or (fill > 1).any():
        raise FaultyInput.of(
            "fill-impossible", "A tank is filled from 0 to 1.", field="fill_of_volume"
        )
    whole = np.pi * diameter * length + np.pi * diameter**2 / 2.0
    return np.asarray(whole * (fill + (1.0 - fill) * np.asarray(dry_share, float)))


def binder_tank(
    mass_kg: Numbers,
    area_m2: Numbers,
    coefficient_wm2k: Numbers,
    heater_w: Numbers,
    *,
    about_c: Numbers,
) -> BinderTank:
    """The tank with the specific heat of its binder at about the temperature it has.

    Args:
        mass_kg: binder in it, (...) [kg].
        area_m2: area that loses heat, (...) [m2].
        coefficient_wm2k: through the insulation, (...) [W/m2K].
        heater_w: heating power into the binder, (...) [W].
        about_c: temperature half-way, (...) [C].
    """
    return BinderTank(mass_kg, area_m2, coefficient_wm2k, heater_w, binder_heat_jkgk(about_c))


def tank_after_c(
    duration_s: Numbers,
    tank: BinderTank,
    start_c: Numbers,
    air_c: Numbers,
    *,
    heating_w: Numbers = 0.0,
) -> Floats:
    """Temperature [C] of the binder in a tank after a time.

    Args:
        duration_s: the time, (...) [s].
        tank: the tank.
        start_c: temperature now, (...) [C].
        air_c: mean air temperature, (...) [C].
        heating_w: heat put in all the time, (...) [W].

    Source: one body, exponential (derived).
    """
    rests = np.asarray(air_c, float) + np.asarray(heating_w, float) / tank.loss_wk
    left = np.exp(-np.asarray(duration_s, float) / tank.lasts_s)
    return np.asarray(rests + (np.asarray(start_c, float) - rests) * left)


def holding_w(tank: BinderTank, at_c: Numbers, air_c: Numbers) -> Floats:
    """Heat [W] that holds the binder of a tank where it is.

    Args:
        tank: the tank.
        at_c: temperature held, (...) [C].
        air_c: mean air temperature, (...) [C].
    """
    return np.asarray(tank.loss_wk * (np.asarray(at_c, float) - np.asarray(air_c, float)))


def reheat_s(tank: BinderTank, start_c: Numbers, wanted_c: Numbers, air_c: Numbers) -> Floats:
    """Time [s] the heater of a tank needs; infinite where it cannot.

    Args:
        tank: the tank.
        start_c: temperature at the start, (...) [C].
        wanted_c: temperature wanted, (...) [C].
        air_c: mean air temperature, (...) [C].
    """
    rests = np.asarray(air_c, float) + np.asarray(tank.heater_w, float) / tank.loss_wk
    start, wanted = np.asarray(start_c, float), np.asarray(wanted_c, float)
    with np.errstate(divide="ignore", invalid="ignore"):
        needed = tank.lasts_s * np.log((rests - start) / (rests - wanted))
    return np.where(start >= wanted, 0.0, np.where(rests > wanted, needed, np.inf))


def plan_setback(
    tank: BinderTank, wanted_c: Numbers, low_c: Numbers, air_c: Numbers, away_s: Numbers
) -> Setback:
    """When [s] to reheat a tank that is set back while it is not used, and the heat [J] that saves.

    Args:
        tank: the tank.
        wanted_c: its temperature now and at the end, (...) [C].
        low_c: the lowest it may cool to, (...) [C].
        air_c: mean air temperature, (...) [C].
        away_s: time until it is used again, (...) [s].

    Raises FaultyInput for a negative time and for a lower limit above the temperature wanted.
    """
    away = np.asarray(away_s, float)
    wanted, low = np.asarray(wanted_c, float), np.asarray(low_c, float)
    if (away < 0).any() or (low > wanted).any():
        raise FaultyInput.of(
            "setback-impossible",
            "A setback needs time, and a lower temperature than the one wanted.",
        )

    def at_c(time_s: Numbers) -> Floats:
        return np.asarray(np.maximum(tank_after_c(time_s, tank, wanted, air_c), low))

    def free_s(time_s: Numbers) -> Floats:
        return np.asarray(away - time_s - reheat_s(tank, at_c(time_s), wanted, air_c))

    early = np.zeros_like(free_s(0.0))
    late = np.broadcast_to(away, early.shape).astype(float)
    for _ in range(50):
        middle = 0.5 * (early + late)
        free = free_s(middle) >= 0
        early, late = np.where(free, middle, early), np.where(free, late, middle)
    lowest = at_c(early)
    reheats = reheat_s(tank, lowest, wanted, air_c)
    # Coasting ends where the low limit is reached; from there the low temperature is held.
    rests = np.asarray(air_c, float)
    with np.errstate(divide="ignore", invalid="ignore"):
        coasts = np.minimum(
            np.where(low > rests, tank.lasts_s * np.log((wanted - rests) / (low - rests)), np.inf),
            early,
        )
    held = holding_w(tank, wanted, air_c) * away
    spent = holding_w(tank, low, air_c) * (early - coasts) + tank.heater_w * np.where(
        np.isfinite(reheats), reheats, 0.0
    )
    reaches = reheat_s(tank, low, wanted, air_c) < np.inf
    return Setback(
        reheat_at_s=early,
        lowest_c=lowest,
        reheats_s=reheats,
        held_j=held,
        spent_j=np.asarray(spent),
        saved_j=np.asarray(held - spent),
        reaches=np.asarray(reaches),
    )
