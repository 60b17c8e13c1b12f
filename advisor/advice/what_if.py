"""What would change if the plant ran another way: fuel, money and CO2 against margin lost."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from advisor.advice.advise import (
    CRITERION,
    DRAW_COUNT,
    advise_on,
    draw_paths,
    path_points,
    scatter_k,
)
from advisor.advice.burner import hot_aggregate_c, most_rap, stack_rise_of
from advisor.advice.fuel import fuel_called, money_per_j, operation_of
from advisor.advice.limits import collect_limits
from advisor.advice.otherwise import (
    Changes,
    changed_dryer,
    changed_situation,
    notes_on,
    refuse_impossible,
)
from advisor.advice.path import PathDraws, rolling_times_s
from advisor.advice.result import Advice, PathPoint
from advisor.advice.situation import Situation
from advisor.advice.solve import discharge_bounds
from advisor.advice.wastes import (
    J_KG_PER_KWH_T,
    KG_PER_T,
    Three,
    doubted,
    oxidation_of,
    three,
    times,
)
from advisor.dryer import (
    HeatBalance,
    HeatChange,
    at_discharge,
    fume_growth,
    heat_balance,
    heat_change,
    money_per_gross_j,
)
from advisor.errors import MissingInput
from advisor.sampling import Draws, quantile, share_true


@dataclass(frozen=True)
class Saved:
    """What is saved per tonne and per hour: low, central, high; below 0 is spent.

    ``money_t`` is None where a price is not known.
    """

    gross_kwh_t: Three
    co2_kg_t: Three
    money_t: Three | None
    gross_kwh_h: Three
    money_h: Three | None
    currency: str


@dataclass(frozen=True)
class Way:
    """One way to run: its advice, the discharge set [C], where it is against the window.

    ``above_low_k``: distance of the discharge from the lowest allowed [K], below 0 where it is too
    cold; ``kept``: share of the mix that keeps every low bound, scatter and doubts included [1];
    both None where there is no window. ``aggregate_c``: dried virgin aggregate where it meets RAP
    or mixer [C] and ``most_rap``: RAP it could carry at the dryer's limit [1], None where nothing
    cold meets it. ``parts``: where the fuel's gross heat goes [kWh/t].
    """

    advice: Advice
    discharge_c: float
    above_low_k: float | None
    kept: float | None
    gross_kwh_t: float
    parts: tuple[tuple[str, float], ...]
    arrives_c: float
    rolling_min: Three
    path: tuple[PathPoint, ...]
    aggregate_c: float | None = None
    most_rap: float | None = None


@dataclass(frozen=True)
class WhatIf:
    """Two ways to run side by side, and what the second saves."""

    before: Way
    after: Way
    saved: Saved
    fume_of_before: float
    oxidation_of_before: tuple[float, float]
    notes: tuple[str, ...] = ()


def what_if(
    situation: Situation,
    changes: Sequence[Changes],
    draw_count: int = DRAW_COUNT,
) -> list[WhatIf]:
    """Each of ``changes`` against the advised target of ``situation``.

    Raises MissingInput where there is no target to compare with, FaultyInput for a change that
    cannot be, naming it.
    """
    return AsAdvised(situation, draw_count).against(changes)


class AsAdvised:
    """The plant run as advised, with the draws of its heat path, to compare other ways with.

    Raises MissingInput where there is no target to compare with.
    """

    def __init__(self, situation: Situation, draw_count: int = DRAW_COUNT) -> None:
        if situation.missing:
            raise MissingInput.of("no-advice", " ".join(situation.missing), "Enter it first.")
        self._draws = Draws(draw_count)
        (self._drawn,) = self._drawn_of([situation])
        start = self._drawn.advice.setpoint("discharge")
        if start is None:
            raise MissingInput.of(
                "no-target",
                "There is no safe window for this job, so there is no target to compare with.",
                "Choose another job, or look at the remedies of its advice.",
            )
        self._target_c = start.target_c
        self._dryer = operation_of(situation, start.target_c)
        self._way = self._drawn.way(start.target_c, heat_balance(self._dryer))

    def against(self, changes: Sequence[Changes]) -> list[WhatIf]:
        """Each of ``changes`` beside it; FaultyInput for one that cannot be, naming it."""
        for one in changes:
            refuse_impossible(one, self._target_c)
        situation = self._drawn.situation
        changed = self._drawn_of([changed_situation(situation, one) for one in changes])
        found = []
        for one, after in zip(changes, changed, strict=True):
            target = after.advice.setpoint("discharge")
            if one.cooler_k is not None:
                discharge_c = self._target_c - one.cooler_k
            else:
                discharge_c = target.target_c if target else self._target_c
            found.append(self._compared(after, one, discharge_c))
        return found

    def _drawn_of(self, situations: list[Situation]) -> list[_Drawn]:
        paths = draw_paths(situations, self._draws)
        return [
            _Drawn(one, path, self._draws)
            for one, path in zip(situations, paths, strict=True)
            if path is not None
        ]

    def _compared(self, after: _Drawn, changes: Changes, to_c: float) -> WhatIf:
        situation, from_c = self._drawn.situation, self._target_c
        rise = stack_rise_of(situation.facts.folder.plant.dryer.kind)
        other = changed_dryer(operation_of(after.situation, from_c), changes)
        moved = [
            heat_change(self._dryer, at_discharge(other, to_c, one))
            for one in (rise.low, rise.central, rise.high)
        ]
        least, central, most = sorted(-float(one.gross_j_kg) for one in moved)
        saved = doubted(central, central - least, most - central)
        notes = notes_on(changes)
        clash = after.advice.clash
        if clash:
            notes.append(f"No safe window: {clash.lower.name} clashes with {clash.upper.name}.")
        return WhatIf(
            before=self._way,
            after=after.way(to_c, moved[1].after),
            saved=_saved(situation, three(saved, 1.0), moved[1], changes),
            fume_of_before=float(fume_growth(to_c, from_c)),
            oxidation_of_before=oxidation_of(to_c, from_c),
            notes=tuple(notes),
        )


class _Drawn:
    """A situation with its heat path in draws and its advice in brief."""

    def __init__(self, situation: Situation, path: PathDraws, draws: Draws) -> None:
        self.situation, self.path = situation, path
        self.advice = advise_on(situation, path, draws, brief=True)
        self._scatter_k = scatter_k(situation, draws)

    def way(self, discharge_c: float, balance: HeatBalance) -> Way:
        """How it runs at ``discharge_c`` [C]."""
        window = self.advice.setpoint("discharge")
        arriving = self.path.legs["delivery"].at_point(discharge_c)
        carried = hot_aggregate_c(self.situation, np.array([discharge_c]))
        rolling = rolling_times_s(self.path, arriving, CRITERION) / 60.0
        return Way(
            advice=self.advice,
            discharge_c=discharge_c,
            above_low_k=discharge_c - window.low_c if window else None,
            kept=self._kept(discharge_c) if window else None,
            gross_kwh_t=float(balance.gross_j_kg) / J_KG_PER_KWH_T,
            parts=tuple(
                (name.replace("_", " "), float(part) / J_KG_PER_KWH_T)
                for name, part in balance.parts.rows()
            ),
            arrives_c=float(np.median(arriving)),
            rolling_min=(
                float(quantile(rolling, 0.05)),
                float(quantile(rolling, 0.5)),
                float(quantile(rolling, 0.95)),
            ),
            path=self._path(discharge_c) if window else (),
            aggregate_c=None if carried is None else float(carried[0]),
            most_rap=most_rap(self.situation, discharge_c),
        )

    def _kept(self, discharge_c: float) -> float:
        """Share [1] of the mix at ``discharge_c`` [C] that keeps every low bound."""
        situation = self.situation
        assert situation.binder is not None  # noqa: S101 - nothing is missing here
        folder = situation.facts.folder
        limits = collect_limits(folder, situation.mix, situation.job, situation.binder, self.path)
        every = list(limits.path)
        if limits.coating:
            every.append((limits.coating.low, limits.coating.low.value_c))
        lows, _ = discharge_bounds(every, self.path.legs, float(folder.plant.confidence))
        needed = np.max(np.stack([low.draws_c for low in lows]), axis=0)
        return float(share_true(needed + self._scatter_k <= discharge_c))

    def _path(self, discharge_c: float) -> tuple[PathPoint, ...]:
        """The window along the path, with the line of ``discharge_c`` [C] as its target."""
        legs = self.path.legs
        moved = [
            replace(one, target_c=float(np.median(legs[one.point].at_point(discharge_c))))
            for one in self.advice.setpoints
            if one.point in legs
        ]
        return path_points(moved, self.path, self.situation)


def _saved(situation: Situation, saved_j_kg: Three, change: HeatChange, changes: Changes) -> Saved:
    dryer = situation.facts.folder.plant.dryer
    fuel = changes.fuel or dryer.fuel.name
    price = money_per_j(dryer)
    then = price if changes.fuel is None else None
    if changes.price is not None:
        then = money_per_gross_j(fuel_called(fuel), changes.price.amount, changes.price.per)
    before_j_kg = float(change.before.gross_j_kg)
    co2_now = float(change.before.co2_kg_kg) / before_j_kg
    co2_then = float(change.after.co2_kg_kg) / float(change.after.gross_j_kg)

    def worth_t(now: float, later: float) -> Three:
        """What is saved per tonne where a joule is worth ``now``, and ``later`` on."""
        low, central, high = (
            KG_PER_T * (now * before_j_kg - later * (before_j_kg - one)) for one in saved_j_kg
        )
        return low, central, high

    per_h = situation.rate_kgs * 3600.0 / KG_PER_T
    kwh_t = times(saved_j_kg, 1.0 / J_KG_PER_KWH_T)
    money_t = worth_t(price, then) if price is not None and then is not None else None
    return Saved(
        gross_kwh_t=kwh_t,
        co2_kg_t=worth_t(co2_now, co2_then),
        money_t=money_t,
        gross_kwh_h=times(kwh_t, per_h),
        money_h=times(money_t, per_h) if money_t else None,
        currency=situation.facts.folder.plant.currency,
    )
