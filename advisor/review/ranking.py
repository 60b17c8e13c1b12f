"""Excursions summed by their likely cause, the dearest first."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from advisor.review.result import NO_WASTE, Excursion, Waste


@dataclass(frozen=True)
class CauseShare:
    """The excursions of one cause: how many, how long, how much, hot and cold apart."""

    cause: str
    count: int
    minutes: float
    hot_tonnes: float
    cold_tonnes: float
    waste: Waste


def cause_shares(excursions: Sequence[Excursion]) -> tuple[CauseShare, ...]:
    """Excursions at the drum summed by likely cause, the most fuel first, then the most tonnes.

    ``excursions`` at load-out and paver are the same tonnes once more and are left out.
    """
    found: dict[str, list[Excursion]] = {}
    for one in excursions:
        if one.point in ("discharge", "hot_aggregate"):
            found.setdefault(one.cause or "no cause found", []).append(one)
    shares = [
        CauseShare(
            cause,
            len(members),
            sum(one.minutes for one in members),
            sum(one.tonnes for one in members if one.side == "hot"),
            sum(one.tonnes for one in members if one.side == "cold"),
            sum((one.waste for one in members), NO_WASTE),
        )
        for cause, members in found.items()
    ]
    return tuple(
        sorted(
            shares,
            key=lambda one: (-one.waste.fuel_kwh.middle, -one.hot_tonnes - one.cold_tonnes),
        )
    )
