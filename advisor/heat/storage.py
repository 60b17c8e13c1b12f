"""Heat held by cells: linear in temperature, or with a capacity that rises and ice that melts."""

from __future__ import annotations

import numpy as np

from advisor.heat.arrays import Floats
from advisor.heat.layers import Cells

THAW_FROM_C, THAW_TO_C = -1.0, 0.0  # the ice of a frozen layer melts over this kelvin


class Storage:
    """Heat [J/m2] in cells against their temperature [C], both (cells, cases).

    ``passes`` is how often a stage is solved: once where the heat is linear.
    """

    def __init__(self, cells: Cells) -> None:
        self.capacity, self.latent = cells.capacity, cells.latent
        self.slope, self.at_c = cells.slope, cells.slope_at_c
        self.linear = self.slope is None and self.latent is None
        self.passes = 1 if self.linear else 3

    def heat(self, temperature_c: Floats) -> Floats:
        """Heat [J/m2] at ``temperature_c``, from 0 C (from ``slope_at_c`` with a slope)."""
        if self.slope is None:
            heat = self.capacity * temperature_c
        else:
            above = temperature_c - self.at_c
            heat = self.capacity * (above + 0.5 * self.slope * above * above)
        if self.latent is not None:
            melted = np.clip(temperature_c - THAW_FROM_C, 0.0, 1.0)
            heat = heat + self.latent * melted
        return heat

    def held(self, temperature_c: Floats) -> Floats:
        """Heat [J/m2] of all cells (cases,)."""
        if self.linear:
            return np.asarray(np.einsum("ij,ij->j", self.capacity, temperature_c))
        return np.asarray(self.heat(temperature_c).sum(axis=0))

    def linear_at(self, temperature_c: Floats) -> tuple[Floats, Floats | None]:
        """Slope [J/m2K] and rest [J/m2], None for 0, of the heat as a line at ``temperature_c``."""
        if self.linear:
            return self.capacity, None
        slope = self.capacity
        if self.slope is not None:
            slope = slope * (1.0 + self.slope * (temperature_c - self.at_c))
        if self.latent is not None:
            melting = (temperature_c >= THAW_FROM_C) & (temperature_c <= THAW_TO_C)
            slope = slope + self.latent * melting
        return slope, self.heat(temperature_c) - slope * temperature_c

    def temperature(self, heat: Floats, linear_c: Floats) -> Floats:
        """Temperature [C] that holds ``heat``; ``linear_c`` is what the line would say."""
        if self.linear:
            return linear_c
        if self.latent is None:
            return self._sensible(heat)
        below, above = self.heat(np.full_like(heat, THAW_FROM_C)), self.heat(np.zeros_like(heat))
        melting = THAW_FROM_C + (heat - below) / (above - below)
        thawed = self._sensible(heat - self.latent)
        frozen = self._sensible(heat)
        return np.where(heat < below, frozen, np.where(heat > above, thawed, melting))

    def _sensible(self, heat: Floats) -> Floats:
        above = heat / self.capacity
        if self.slope is None:
            return above
        root = np.sqrt(np.maximum(1.0 + 2.0 * self.slope * above, 1e-12))
        return np.asarray(self.at_c + 2.0 * above / (1.0 + root))
