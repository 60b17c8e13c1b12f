"""One grid of a layered body carried through time; ``conduction`` is the door to it."""

from __future__ import annotations

import numpy as np

from advisor.heat.arrays import Floats, Numbers
from advisor.heat.layers import Cells
from advisor.heat.storage import Storage
from advisor.heat.surroundings import STEFAN_BOLTZMANN_WM2K4, ZERO_C_IN_K, Face

# TR-BDF2: the trapezium to _G of the step, then the second-order backward difference to its end.
# With this _G both stages have the same matrix, so one elimination serves both.
_G = 2.0 - np.sqrt(2.0)
_SHARE = 1.0 / (_G * (2.0 - _G))
_OLD = (1.0 - _G) ** 2 * _SHARE


class Stepper:
    """A body cut into ``cells`` between two faces, advanced step by step.

    ``temperature_c`` (cells, cases) is where it stands; ``into_wm2`` is the heat that flows into
    each cell from its neighbours, without what passes the faces.
    """

    def __init__(self, cells: Cells, top: Face, bottom: Face) -> None:
        self.top, self.bottom = top, bottom
        self.moves = bool(top.knots_s().size or bottom.knots_s().size)
        self.radiates = bool(np.any(top.at(0.0).emissivity))
        self.storage = Storage(cells)
        self.temperature_c = cells.start_c.copy()
        self.left_top = np.zeros_like(cells.to_top)
        self.left_bottom = np.zeros_like(cells.to_top)
        self.neighbours = np.zeros_like(cells.start_c)
        self.neighbours[:-1] += cells.link
        self.neighbours[1:] += cells.link
        flow = cells.link * (self.temperature_c[:-1] - self.temperature_c[1:])
        self.into_wm2 = np.zeros_like(cells.start_c)
        self.into_wm2[:-1] -= flow
        self.into_wm2[1:] += flow
        self.half_top, self.half_bottom = cells.to_top, cells.to_bottom
        # Rows are taken once: a view of a row costs as much as arithmetic on it.
        self._links = list(cells.link)
        self._pivot = np.empty_like(cells.start_c)
        self._pivots = list(self._pivot)
        self._inverse = np.empty_like(cells.start_c)
        self._factors = list(np.empty_like(cells.link))
        self._spare = np.empty_like(cells.to_top)
        # A single case is worked out in plain numbers: an array of one costs ten times as much.
        self._alone = cells.start_c.shape[1] == 1
        self._set_faces(0.0, just_before=False)
        self._set_conductance()
        self.surface_c = self.temperature_c[0].copy()
        for _ in range(3):
            self._begins = self._at_faces()

    def step(self, start_s: Floats, end_s: Floats) -> None:
        """Advance from ``start_s`` to ``end_s`` [s], scalar or (cases,)."""
        length = end_s - start_s
        tau = length * (0.5 * _G)
        if self.moves:
            # One conductance through both stages, so it is taken half-way; the rest as it moves.
            self._set_faces(start_s + 0.5 * length, just_before=False)
            self._set_conductance()
            self._set_faces(start_s, just_before=False)
            self._begins = self._at_faces()
        begins_top, begins_bottom = self._begins
        old = self.storage.heat(self.temperature_c)
        known = old / tau
        known += self.into_wm2
        known[0] -= begins_top
        known[-1] -= begins_bottom
        if self.moves:
            self._set_faces(start_s + _G * length, just_before=True)
        middle, passed_top, passed_bottom = self._stage(known, tau, first=True)
        self.left_top += tau * _SHARE * (passed_top + begins_top)
        self.left_bottom += tau * _SHARE * (passed_bottom + begins_bottom)

        middle *= _SHARE
        old *= _OLD
        middle -= old
        middle /= tau
        known = middle
        if self.moves:
            self._set_faces(end_s, just_before=True)
        new, passed_top, passed_bottom = self._stage(known, tau, first=False)
        self.left_top += tau * passed_top
        self.left_bottom += tau * passed_bottom
        new /= tau
        new -= known
        new[0] += passed_top
        new[-1] += passed_bottom
        self.into_wm2 = new
        self._begins = passed_top, passed_bottom

    def _stage(self, known: Floats, tau: Floats, first: bool) -> tuple[Floats, Floats, Floats]:
        """Heat in the cells [J/m2] with heat/tau + outflow = ``known``, and what the faces pass.

        One pass where the heat is linear in temperature; else Newton on the heat, and the heat
        is what the flows of the last pass left, so that none is lost.
        """
        for _ in range(self.storage.passes):
            weight, constant = self.storage.linear_at(self.temperature_c)
            if first or not self.storage.linear:
                self._eliminate(weight / tau)
            right = known.copy() if constant is None else known - constant / tau
            right[-1] += self._source
            passed_top = self._solve(right)
            heat = weight * right
            if constant is not None:
                heat += constant
            passed_bottom = self._passed_bottom(right[-1])
            self.temperature_c = self.storage.temperature(heat, right)
        return heat, passed_top, passed_bottom

    def _eliminate(self, weight: Floats) -> None:
        """Pivots and factors of the matrix, from the bottom up, so that the top comes last."""
        pivots, links, factors, spare = self._pivots, self._links, self._factors, self._spare
        np.add(weight, self.neighbours, out=self._pivot)
        self._pivot[-1] += self._conductance
        if self._alone:
            self._single = _eliminated(self._pivot[:, 0].tolist(), self._links)
            return
        for i in range(len(factors) - 1, -1, -1):
            np.divide(links[i], pivots[i + 1], out=factors[i])
            np.multiply(factors[i], links[i], out=spare)
            np.subtract(pivots[i], spare, out=pivots[i])
        np.divide(1.0, self._pivot, out=self._inverse)

    def _solve(self, right: Floats) -> Floats:
        """Solves in place for the temperatures; returns what the top face passes [W/m2]."""
        if self._alone:
            return self._solve_one(right)
        rows, factors, spare = list(right), self._factors, self._spare
        for i in range(len(factors) - 1, -1, -1):
            np.multiply(factors[i], rows[i + 1], out=spare)
            np.add(rows[i], spare, out=rows[i])
        right *= self._inverse
        # The top cell now sees one conductance to one temperature behind it, so radiation is
        # solved to the end on a single row.
        pivot, half = self._pivots[0], self.half_top
        passed = self._surface(pivot * half / (pivot + half), rows[0])
        rows[0] -= passed * self._inverse[0]
        for i, factor in enumerate(factors):
            np.multiply(factor, rows[i], out=spare)
            np.add(rows[i + 1], spare, out=rows[i + 1])
        return passed

    def _solve_one(self, right: Floats) -> Floats:
        """What ``_solve`` does, for a single case in plain numbers."""
        pivots, factors = self._single
        rows = right[:, 0].tolist()
        for i in range(len(factors) - 1, -1, -1):
            rows[i] += factors[i] * rows[i + 1]
        pivot = pivots[0]
        half = float(self.half_top[0])
        passed = self._surface_one(pivot * half / (pivot + half), rows[0] / pivot)
        rows[0] = (rows[0] - passed) / pivot
        for i, factor in enumerate(factors):
            rows[i + 1] = rows[i + 1] / pivots[i + 1] + factor * rows[i]
        right[:, 0] = rows
        return np.array([passed])

    def _surface_one(self, conductance: float, behind_c: float) -> float:
        """What ``_surface`` does, for a single case in plain numbers."""
        lost = conductance + self._coefficient_one
        gained = conductance * behind_c + self._given_one
        surface, grey = float(self.surface_c[0]), self._grey_one
        for _ in range(2 if self.radiates else 0):
            kelvin = surface + ZERO_C_IN_K
            cubed = grey * kelvin**3
            surface -= (lost * surface + cubed * kelvin - gained) / (lost + 4.0 * cubed)
        self.surface_c = np.array([surface if self.radiates else gained / lost])
        return conductance * (behind_c - float(self.surface_c[0]))

    def _surface(self, conductance: Floats, behind_c: Floats) -> Floats:
        """Heat [W/m2] that passes the top face; moves ``surface_c`` to where it balances."""
        face = self._top
        lost = conductance + face.coefficient_wm2k
        gained = conductance * behind_c
        gained += self._given_top
        if self.radiates:
            grey = self._grey
            for _ in range(2):
                kelvin = self.surface_c + ZERO_C_IN_K
                cubed = kelvin * kelvin
                cubed *= kelvin
                cubed *= grey
                excess = lost * self.surface_c
                excess += cubed * kelvin
                excess -= gained
                cubed *= 4.0
                cubed += lost
                excess /= cubed
                self.surface_c = self.surface_c - excess
        else:
            self.surface_c = gained / lost
        return np.asarray(conductance * (behind_c - self.surface_c))

    def _at_faces(self) -> tuple[Floats, Floats]:
        """Heat [W/m2] that passes top and bottom now."""
        return (
            self._surface(self.half_top, self.temperature_c[0]),
            self._passed_bottom(self.temperature_c[-1]),
        )

    def _passed_bottom(self, last_c: Floats) -> Floats:
        return np.asarray(self._conductance * last_c - self._source)

    def bottom_c(self) -> Floats:
        """Temperature [C] of the bottom face (cases,)."""
        outside = self._bottom.coefficient_wm2k
        given = outside * self._bottom.air_c + self._bottom.gain_wm2
        return np.asarray(
            (self.half_bottom * self.temperature_c[-1] + given) / (self.half_bottom + outside)
        )

    def _set_faces(self, time_s: Numbers, just_before: bool) -> None:
        """Take both faces as they are at ``time_s``."""
        self._top = top = self.top.at(time_s, just_before)
        self._bottom = bottom = self.bottom.at(time_s, just_before)
        self._grey = top.emissivity * STEFAN_BOLTZMANN_WM2K4
        radiated = self._grey * (top.sky_c + ZERO_C_IN_K) ** 4
        self._given_top = top.coefficient_wm2k * top.air_c + top.gain_wm2 + radiated
        if self._alone:
            self._grey_one, self._given_one, self._coefficient_one = (
                float(np.ravel(one)[0])
                for one in (self._grey, self._given_top, top.coefficient_wm2k)
            )
        outside = bottom.coefficient_wm2k
        given = outside * bottom.air_c + bottom.gain_wm2
        self._source = self.half_bottom * given / (self.half_bottom + outside)

    def _set_conductance(self) -> None:
        outside = self._bottom.coefficient_wm2k
        self._conductance = self.half_bottom * outside / (self.half_bottom + outside)


def _eliminated(pivots: list[float], links: list[Floats]) -> tuple[list[float], list[float]]:
    """Pivots and factors of a single case, from the bottom up."""
    factors = [0.0] * (len(pivots) - 1)
    for i in range(len(factors) - 1, -1, -1):
        link = float(links[i][0])
        factors[i] = link / pivots[i + 1]
        pivots[i] -= factors[i] * link
    return pivots, factors


def advance(
    cells: Cells, top: Face, bottom: Face, times_s: Floats, depths_m: Floats, substeps: int
) -> tuple[Floats, ...]:
    """Means, depths, faces and heat [C, J/m2] at ``times_s``, in the order of ``Conduction``.

    Each interval is taken in ``substeps``, even in the root of time.
    """
    body = Stepper(cells, top, bottom)
    count, cases = len(times_s), cells.start_c.shape[1]
    shares = [cells.volume_m[span] / cells.volume_m[span].sum(axis=0) for span in cells.spans]
    weights = cells.weights_at(depths_m)
    mean = np.empty((len(shares), count, cases))
    depth = np.empty((len(weights), count, cases))
    faces = np.empty((5, count, cases))
    start = body.storage.held(cells.start_c)
    roots = np.sqrt(times_s)
    least = 1e-9 * np.max(times_s)  # times that differ by rounding only are one
    for at in range(count):
        since = times_s[at - 1]
        moved = at > 0 and np.max(times_s[at] - since) > least
        for part in range(1, substeps + 1 if moved else 0):
            share = part / substeps
            low, high = roots[at - 1], roots[at]
            passed = share * (2.0 * low + share * (high - low)) / (low + high)
            until = times_s[at - 1] + (times_s[at] - times_s[at - 1]) * passed
            body.step(since, until)
            since = until
        now = body.temperature_c
        for row, share, span in zip(mean, shares, cells.spans, strict=True):
            row[at] = np.einsum("ij,ij->j", share, now[span])
        for row, weight in zip(depth, weights, strict=True):
            row[at] = np.einsum("ij,ij->j", weight, now)
        stored = body.storage.held(now) - start
        faces[:, at] = body.surface_c, body.bottom_c(), body.left_top, body.left_bottom, stored
    return mean, depth, *faces
