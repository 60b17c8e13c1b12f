"""Ways out of a clash, each worked out in degrees on the same draws, with what it costs."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import combinations

import numpy as np

from advisor.advice.path import PathCase, PathDraws, draw_path
from advisor.advice.remedy_changes import Change, changes, later_starts
from advisor.advice.result import Clash, Limit, Remedy
from advisor.advice.situation import Situation
from advisor.heat.mat import Criterion
from advisor.sampling import Draws, quantile

_WORTH_K = 0.5  # a gain below this is not told
_ROUGH = 64  # draws to choose by; what is told is worked out again on all of them
_TOGETHER = 3  # combinations told
_LARGEST = 6  # changes that are tried together


class _Gains:
    """How far changes lower the discharge that the lower bound of a clash asks for [K]."""

    def __init__(
        self, situation: Situation, lower: Limit, case: PathCase, criterion: Criterion
    ) -> None:
        self._lower, self._case, self._criterion = lower, case, criterion
        self._confidence = float(situation.facts.folder.plant.confidence)

    def of(self, sets: Sequence[Sequence[Change]], draws: Draws) -> list[float]:
        """What each set of changes gains, done together."""
        cases = [self._case]
        for together in sets:
            one = self._case
            for change in together:
                one = change.apply(one)
            cases.append(one)
        start, *lows = (self._low_c(path) for path in draw_path(cases, draws, self._criterion))
        return [start - low for low in lows]

    def _low_c(self, path: PathDraws) -> float:
        value = path.need_c if self._lower.authority == "computed" else self._lower.value_c
        needed = path.legs["delivery"].at_discharge(value)
        return float(quantile(np.asarray(needed), self._confidence))


def remedies(
    situation: Situation, clash: Clash, case: PathCase, draws: Draws, criterion: Criterion
) -> tuple[Remedy, ...]:
    """What each change of haul, lift, mix or start would gain [K], largest first, and its cost.

    Only where the low side is a need at the paver: a change of the road does not move a limit
    that somebody wrote down at the plant. Where no single change is enough, the best combinations
    follow: fewest changes first, then the largest gain; where nothing is enough, all together.
    """
    if clash.lower.point != "delivery":
        return ()
    gains = _Gains(situation, clash.lower, case, criterion)
    possible = [*changes(situation, case), *_best_start(situation, clash, gains)]
    each = gains.of([(one,) for one in possible], draws)
    worth = sorted(
        ((gain, one) for gain, one in zip(each, possible, strict=True) if gain > _WORTH_K),
        key=lambda pair: -pair[0],
    )
    found = [
        Remedy(one.action, gain, gain >= clash.gap_k, one.caution, one.cost) for gain, one in worth
    ]
    if found and not found[0].enough:
        found.extend(_together([one for _, one in worth], clash, gains, draws))
    return tuple(found)


def _best_start(situation: Situation, clash: Clash, gains: _Gains) -> list[Change]:
    """The first later start that is enough, else the one that gains most; none without gain."""
    starts = later_starts(situation)
    if not starts:
        return []
    found = gains.of([(one,) for one in starts], Draws(_ROUGH))
    enough = [one for one, gain in zip(starts, found, strict=True) if gain >= clash.gap_k]
    if enough:
        return enough[:1]
    best = int(np.argmax(found))
    return [starts[best]] if found[best] > _WORTH_K else []


def _together(worth: Sequence[Change], clash: Clash, gains: _Gains, draws: Draws) -> list[Remedy]:
    """The best combinations of the largest changes; all that go together where none is enough."""
    largest = worth[:_LARGEST]
    rough = Draws(_ROUGH)
    for count in range(2, len(largest) + 1):
        sets = [one for one in combinations(largest, count) if _go_together(one)]
        if not sets:
            break
        near = gains.of(sets, rough)
        order = sorted(range(len(sets)), key=lambda at: -near[at])[: 2 * _TOGETHER]
        likely = [sets[at] for at in order if near[at] >= clash.gap_k - _ROUGH_OFF_K]
        exact = gains.of(likely, draws) if likely else []
        enough = sorted(
            ((gain, one) for gain, one in zip(exact, likely, strict=True) if gain >= clash.gap_k),
            key=lambda pair: -pair[0],
        )
        if enough:
            return [_joined(one, gain, clash) for gain, one in enough[:_TOGETHER]]
    whole: list[Change] = []
    for one in worth:
        if _go_together((*whole, one)):
            whole.append(one)
    if len(whole) < 2:
        return []
    return [_joined(whole, gains.of([whole], draws)[0], clash)]


_ROUGH_OFF_K = 3.0  # how far the few draws may be off


def _go_together(some: Sequence[Change]) -> bool:
    groups = [one.group for one in some]
    return len(set(groups)) == len(groups)


def _joined(some: Sequence[Change], gain_k: float, clash: Clash) -> Remedy:
    words = " and ".join(one.action for one in some)
    cautions = " ".join(dict.fromkeys(one.caution for one in some if one.caution))
    cost = "; ".join(one.cost for one in some)
    return Remedy(f"together: {words}", gain_k, gain_k >= clash.gap_k, cautions, cost)
