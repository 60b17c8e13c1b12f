"""Ways out of a clash, each worked out in degrees on the same draws."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from advisor.advice.case import path_case
from advisor.advice.path import PathCase, PathDraws, draw_path
from advisor.advice.result import Clash, Limit, Remedy
from advisor.advice.situation import Situation
from advisor.heat.mat import Criterion
from advisor.sampling import Draws, quantile
from advisor.settings.mixes import Truck

_SHORTER_S = 600.0
_THICKER_M = 0.01
_WARMER_K = 5.0
_WORTH_K = 0.5  # a gain below this is not told


@dataclass(frozen=True)
class _Change:
    action: str
    caution: str
    case: Callable[[Situation, PathCase], PathCase | None]


def remedies(
    situation: Situation, clash: Clash, case: PathCase, draws: Draws, criterion: Criterion
) -> tuple[Remedy, ...]:
    """What each change of haul, lift or weather would gain [K], largest first.

    Only where the low side is a need at the paver: a change of the road does not move a limit
    that somebody wrote down at the plant. Where no single one is enough, the largest together are
    worked out too.
    """
    lower = clash.lower
    if lower.point != "delivery":
        return ()
    changed = [(one, one.case(situation, case)) for one in _CHANGES]
    possible = [(one, new) for one, new in changed if new is not None]
    confidence = situation.facts.folder.plant.confidence

    def lows_c(cases: Sequence[PathCase]) -> list[float]:
        paths = draw_path(cases, draws, criterion)
        return [_discharge_low_c(path, lower, confidence) for path in paths]

    start, *lows = lows_c([case, *(new for _, new in possible)])
    found = [
        Remedy(change.action, start - low, start - low >= clash.gap_k, change.caution)
        for (change, _), low in zip(possible, lows, strict=True)
        if start - low > _WORTH_K
    ]
    found.sort(key=lambda one: -one.gain_k)
    if found and not found[0].enough:
        found.extend(
            _together(situation, clash, case, [one.action for one in found], start, lows_c)
        )
    return tuple(found)


def _together(
    situation: Situation,
    clash: Clash,
    case: PathCase,
    actions: Sequence[str],
    start_c: float,
    lows_c: Callable[[Sequence[PathCase]], list[float]],
) -> list[Remedy]:
    """The fewest of the largest changes that are enough together; none where all are not."""
    changes = {one.action: one for one in _CHANGES}
    cases, current = [], case
    for action in actions:
        current = changes[action].case(situation, current) or current
        cases.append(current)
    for count, low in enumerate(lows_c(cases)[1:], 2):
        if start_c - low >= clash.gap_k:
            words = " and ".join(f"{action}" for action in actions[:count])
            return [Remedy(f"together: {words}", start_c - low, True)]
    return []


def _discharge_low_c(path: PathDraws, lower: Limit, confidence: float) -> float:
    legs, need = path.legs, path.need_c
    value = need if lower.authority == "computed" else lower.value_c
    return float(quantile(np.asarray(legs["delivery"].at_discharge(value)), confidence))


def _insulated(situation: Situation, case: PathCase) -> PathCase | None:
    job = situation.job
    if job.truck.body == "insulated" and job.truck.cover == "insulated":
        return None
    return _with_truck(
        situation, case, Truck(body="insulated", cover="insulated", payload=job.truck.payload)
    )


def _covered(situation: Situation, case: PathCase) -> PathCase | None:
    truck = situation.job.truck
    if truck.cover != "none":
        return None
    return _with_truck(situation, case, truck.model_copy(update={"cover": "tarpaulin"}))


def _with_truck(situation: Situation, case: PathCase, truck: Truck) -> PathCase:
    """The case with another truck, everything else as it is."""
    job = situation.job.model_copy(update={"truck": truck})
    other = path_case(replace(situation, job=job))
    names = ("body_length_m", "body_width_m", "moving_wm2k", "standing_wm2k", "faces_log_sd")
    return replace(case, **{name: getattr(other, name) for name in names})


def _shorter(situation: Situation, case: PathCase) -> PathCase | None:
    if case.wait_s + case.haul_s <= 2 * _SHORTER_S:
        return None
    from_wait = min(case.wait_s - 1.0, _SHORTER_S)
    return replace(
        case, wait_s=case.wait_s - from_wait, haul_s=case.haul_s - (_SHORTER_S - from_wait)
    )


def _thicker(situation: Situation, case: PathCase) -> PathCase | None:
    return replace(case, lift_m=case.lift_m + _THICKER_M)


def _warmer(situation: Situation, case: PathCase) -> PathCase | None:
    return replace(case, air_c=case.air_c + _WARMER_K, base_c=case.base_c + _WARMER_K)


def _calmer(situation: Situation, case: PathCase) -> PathCase | None:
    return replace(case, wind_ms=case.wind_ms / 2.0) if case.wind_ms > 2.0 else None


def _less_rolling(situation: Situation, case: PathCase) -> PathCase | None:
    shorter = case.rolling_wanted_s - 180.0
    return replace(case, rolling_wanted_s=shorter) if shorter >= 240.0 else None


_CHANGES = (
    _Change("insulated body and cover", "", _insulated),
    _Change("cover the load with a tarpaulin", "", _covered),
    _Change("ten minutes less on the road or in the queue", "", _shorter),
    _Change("lift 10 mm thicker", "Only where the design of the road allows it.", _thicker),
    _Change("wait until air and base are 5 K warmer", "", _warmer),
    _Change("wait until the wind is half", "", _calmer),
    _Change(
        "rollers done three minutes sooner (one roller more, or closer up)",
        "Density has to be shown on site.",
        _less_rolling,
    ),
)
