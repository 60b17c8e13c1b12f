"""From limits and the draws of the heat path to low, target and high at every point.

Numbers only: temperatures in C, one column per draw. The path from discharge to a point is linear
in every draw, T_point = lost + kept * T_discharge, so a limit anywhere is a limit on discharge.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from advisor.advice.result import AUTHORITIES, Clash, Limit, Point, Setpoint
from advisor.sampling import quantile, share_true

Floats = NDArray[np.float64]

LABELS: dict[Point, str] = {
    "binder_tank": "Binder tank",
    "hot_aggregate": "Hot aggregate",
    "discharge": "Discharge",
    "silo": "Silo",
    "load_out": "Load-out",
    "delivery": "At paver",
}


@dataclass(frozen=True)
class Leg:
    """The path from discharge to one point, a column per draw: T = lost_c + kept * T_discharge."""

    lost_c: Floats
    kept: Floats

    def at_point(self, discharge_c: Floats | float) -> Floats:
        """Temperature [C] at the point of every draw."""
        return self.lost_c + self.kept * discharge_c

    def at_discharge(self, point_c: Floats | float) -> Floats:
        """Discharge temperature [C] that gives ``point_c`` in every draw."""
        return (point_c - self.lost_c) / self.kept


@dataclass(frozen=True)
class Bound:
    """A limit seen from the discharge: its value in every draw, and at the confidence wanted."""

    limit: Limit
    draws_c: Floats
    at_discharge_c: float


@dataclass(frozen=True)
class Coating:
    """The window in which binder coats stone, at discharge; ``target_c`` [C] is its middle.

    ``high_gives_way``: the upper edge is a computed preference, not somebody's limit.
    """

    low: Limit
    target_c: float
    high: Limit
    high_gives_way: bool


@dataclass(frozen=True)
class Solution:
    """Setpoints, or the two bounds that clash; the bounds themselves for the reasons.

    ``kept`` is the share of the mix [1] that keeps every low bound at the target, scatter included.
    """

    setpoints: tuple[Setpoint, ...]
    lows: tuple[Bound, ...]
    highs: tuple[Bound, ...]
    clash: Clash | None
    set_aside: tuple[Limit, ...]
    squeezed: bool
    kept: float = 0.0

    def at(self, point: Point) -> Setpoint:
        """The setpoint at ``point``; KeyError where there is none."""
        return {one.point: one for one in self.setpoints}[point]


def discharge_bounds(
    limits: Sequence[tuple[Limit, Floats | float]], legs: Mapping[Point, Leg], confidence: float
) -> tuple[tuple[Bound, ...], tuple[Bound, ...]]:
    """Low bounds, highest first, and high bounds, lowest first, all seen from the discharge.

    Each limit comes with its value [C] at its own point, a number or a column of draws. A low
    bound holds in ``confidence`` of the draws, a high bound too.
    """
    lows: list[Bound] = []
    highs: list[Bound] = []
    for limit, value_c in limits:
        if limit.point not in legs:
            continue
        draws = np.asarray(legs[limit.point].at_discharge(value_c), float)
        low = limit.side == "low"
        at = float(quantile(draws, confidence if low else 1.0 - confidence))
        (lows if low else highs).append(Bound(limit, draws, at))
    rank = {name: place for place, name in enumerate(AUTHORITIES)}
    lows.sort(key=lambda one: (-one.at_discharge_c, rank[one.limit.authority]))
    highs.sort(key=lambda one: (one.at_discharge_c, rank[one.limit.authority]))
    return tuple(lows), tuple(highs)


def solve(
    limits: Sequence[tuple[Limit, Floats | float]],
    coating: Coating | None,
    legs: Mapping[Point, Leg],
    scatter_k: Floats,
    confidence: float,
) -> Solution:
    """The lowest discharge target that keeps every low bound with ``confidence``.

    ``scatter_k`` [K] is a column of draws of how far the discharge lies from where it is set
    (control and gauge). ``coating`` adds its own low bound, for which no higher target is taken
    than its middle; its upper edge, where only preferred, gives way to a need and is then named in
    ``set_aside``.
    """
    every = list(limits)
    if coating:
        every.append((coating.low, coating.low.value_c))
        if not coating.high_gives_way:
            every.append((coating.high, coating.high.value_c))
    lows, highs = discharge_bounds(every, legs, confidence)
    low, high = lows[0], highs[0]
    if low.at_discharge_c > high.at_discharge_c:
        clash = Clash(low.limit, high.limit, low.at_discharge_c, high.at_discharge_c)
        return Solution((), lows, highs, clash, (), False)
    target = _target_c(lows, coating, scatter_k, confidence)
    set_aside: tuple[Limit, ...] = ()
    if coating and coating.high_gives_way and coating.high.value_c < high.at_discharge_c:
        if coating.high.value_c >= target:
            edge = coating.high.value_c
            high = Bound(coating.high, np.full_like(low.draws_c, edge), edge)
        else:
            set_aside = (coating.high,)
    squeezed = target > high.at_discharge_c
    if squeezed:
        target = 0.5 * (low.at_discharge_c + high.at_discharge_c)
    target = max(target, low.at_discharge_c)
    points = tuple(_setpoint(point, legs, target, low, high, lows, confidence) for point in legs)
    needed = np.max(np.stack([one.draws_c for one in lows]), axis=0)
    kept = float(share_true(needed + scatter_k <= target))
    return Solution(points, lows, highs, None, set_aside, squeezed, kept)


def _target_c(
    lows: Sequence[Bound], coating: Coating | None, scatter_k: Floats, confidence: float
) -> float:
    """Discharge [C] from which ``confidence`` of the mix keeps every low bound."""

    def with_scatter(bounds: Sequence[Bound]) -> float:
        needed = np.max(np.stack([one.draws_c for one in bounds]), axis=0)
        return float(quantile(needed + scatter_k, confidence))

    if coating is None:
        return with_scatter(lows)
    others = [one for one in lows if one.limit is not coating.low]
    coated = [one for one in lows if one.limit is coating.low]
    aim = min(with_scatter(coated), coating.target_c)
    return max(aim, with_scatter(others)) if others else aim


def _setpoint(
    point: Point,
    legs: Mapping[Point, Leg],
    target_c: float,
    low: Bound,
    high: Bound,
    lows: Sequence[Bound],
    confidence: float,
) -> Setpoint:
    """The window at one point: what is needed from there on, and what may arrive there.

    A low limit further up the path asks nothing here: mix that is coated need not stay that hot.
    """
    leg = legs[point]
    order = list(legs)
    ahead = [one for one in lows if order.index(one.limit.point) >= order.index(point)] or [low]
    needs = [leg.at_point(one.draws_c) for one in ahead]
    values = [float(quantile(need, confidence)) for need in needs]
    binding = int(np.argmax(values))
    return Setpoint(
        point=point,
        label=LABELS[point],
        low_c=values[binding],
        target_c=float(np.median(leg.at_point(target_c))),
        high_c=float(np.median(leg.at_point(high.at_discharge_c))),
        low_set_by=ahead[binding].limit,
        high_set_by=high.limit,
        sd_k=max(float(np.std(needs[binding])), ahead[binding].limit.sd_k),
    )
