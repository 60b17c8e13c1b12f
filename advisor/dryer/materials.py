"""Heat taken up by stone and by binder between two temperatures."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.properties import Values

# Relative density 60/60 F of a paving binder where nobody gave one; enters as a square root.
BINDER_RELATIVE_DENSITY = 1.03


@dataclass(frozen=True)
class Aggregate:
    """A kind of stone by its specific heat: base + slope t + curvature t^2 [J/(kg K)], t in C.

    ``base_j_kgk`` [J/(kg K)], ``slope_j_kgk2`` [J/(kg K2)], ``curvature_j_kgk3`` [J/(kg K3)].
    """

    name: str
    base_j_kgk: float
    slope_j_kgk2: float = 0.0
    curvature_j_kgk3: float = 0.0

    def specific_heat_j_kgk(self, temperature_c: ArrayLike) -> Values:
        """Specific heat [J/(kg K)] at a temperature [C]."""
        t = np.asarray(temperature_c, float)
        return np.asarray(self.base_j_kgk + (self.slope_j_kgk2 + self.curvature_j_kgk3 * t) * t)

    def enthalpy_j_kg(self, temperature_c: ArrayLike) -> Values:
        """Enthalpy [J/kg] above 0 C at a temperature [C]."""
        t = np.asarray(temperature_c, float)
        half, third = self.slope_j_kgk2 / 2.0, self.curvature_j_kgk3 / 3.0
        return np.asarray((self.base_j_kgk + (half + third * t) * t) * t)


def aggregate_of_row(row: Mapping[str, Any]) -> Aggregate:
    """The aggregate of a row of a table of stone, its numbers in SI.

    Args:
        row: by column: name, base, slope and curvature.
    """
    return Aggregate(row["name"], row["base"], row["slope"], row["curvature"])


def binder_specific_heat_j_kgk(
    temperature_c: ArrayLike, relative_density: ArrayLike = BINDER_RELATIVE_DENSITY
) -> Values:
    """Specific heat [J/(kg K)] of paving binder.

    Args:
        temperature_c: binder temperature, any shape [C]
        relative_density: relative density at 60/60 F [1]

    Source: Cragoe's form for petroleum liquids (NBS Miscellaneous Publication 97, 1929), from
    memory; its 0.515 Btu/(lb F) at 300 F is published for typical binder.
    """
    t = np.asarray(temperature_c, float)
    return np.asarray((1685.0 + 3.4 * t) / np.sqrt(np.asarray(relative_density, float)))


def binder_enthalpy_j_kg(
    temperature_c: ArrayLike, relative_density: ArrayLike = BINDER_RELATIVE_DENSITY
) -> Values:
    """Enthalpy [J/kg] of paving binder above 0 C: the integral of its specific heat.

    Args:
        temperature_c: binder temperature, any shape [C]
        relative_density: relative density at 60/60 F [1]
    """
    t = np.asarray(temperature_c, float)
    return np.asarray((1685.0 + 1.7 * t) * t / np.sqrt(np.asarray(relative_density, float)))
