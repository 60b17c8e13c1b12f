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
from advisor.advice.burner import stack_rise_of
from advisor.advice.fuel import fuel_called, kelvin_too_much, money_per_j, operation_of
from advisor.advice.limits import collect_limits
from advisor.advice.path import PathDraws, rolling_times_s
from advisor.advice.result import Advice, PathPoint
from advisor.advice.situation import Situation
from advisor.advice.solve import discharge_bounds
from advisor.dryer import (
    HeatBalance,
    HeatChange,
    Operation,
    Range,
    at_discharge,
    degrees_worth_k,
    fume_growth,
    heat_change,
    moisture_cost,
    oxidation_growth,
    with_air_ratio,
    with_fuel,
)
from advisor.errors import FaultyInput, MissingInput
from advisor.sampling import Draws, quantile, share_true
from advisor.settings.faults import nearest
from advisor.settings.mixes import Additive
from advisor.settings.tables import Row, load_table

_J_KG_PER_KWH_T = 3600.0
_KG_PER_T = 1000.0
# A balance and a meter agree within this share; common practice, no source. No saving is told
# surer than that.
_MODEL_SHARE = 0.10
_POINT = 0.01  # one percent of moisture


@dataclass(frozen=True)
class Changes:
    """What is done otherwise; None and 0 leave a thing as it is.

    ``cooler_k``: discharge set lower [K]; None takes the advised target of the changed plant.
    ``drier``: water taken off the stone, of dry mass [1], below 0 for wetter; ``air_ratio``: all
    air over the air just needed [1]; ``rap_share``: of mix [1]; ``additive``: a row of
    config/modifiers.yaml with an offset; ``haul_s`` [s], ``wind_ms`` [m/s], ``air_c`` [C] and
    ``lift_m`` [m] in place of what they are.
    """

    cooler_k: float | None = None
    drier: float = 0.0
    fuel: str | None = None
    air_ratio: float | None = None
    rap_share: float | None = None
    additive: str | None = None
    haul_s: float | None = None
    wind_ms: float | None = None
    air_c: float | None = None
    lift_m: float | None = None


@dataclass(frozen=True)
class Saved:
    """What is saved per tonne and per hour: low, central, high; below 0 is spent.

    ``money_t`` is None where a price is not known.
    """

    gross_kwh_t: tuple[float, float, float]
    co2_kg_t: tuple[float, float, float]
    money_t: tuple[float, float, float] | None
    gross_kwh_h: tuple[float, float, float]
    money_h: tuple[float, float, float] | None
    currency: str


@dataclass(frozen=True)
class Way:
    """One way to run: its advice, the discharge set [C], where it is against the window.

    ``above_low_k``: distance of the discharge from the lowest allowed [K], below 0 where it is too
    cold; ``kept``: share of the mix that keeps every low bound, scatter and doubts included [1];
    both None where there is no window. ``parts``: where the fuel's gross heat goes [kWh/t].
    """

    advice: Advice
    discharge_c: float
    above_low_k: float | None
    kept: float | None
    gross_kwh_t: float
    parts: tuple[tuple[str, float], ...]
    arrives_c: float
    rolling_min: tuple[float, float, float]
    path: tuple[PathPoint, ...]


@dataclass(frozen=True)
class WhatIf:
    """Two ways to run side by side, and what the second saves."""

    before: Way
    after: Way
    saved: Saved
    fume_of_before: float
    oxidation_of_before: tuple[float, float]
    notes: tuple[str, ...] = ()


@dataclass(frozen=True)
class DegreeAndWater:
    """What one kelvin and one percent of moisture cost [kWh/t gross], never to be confused.

    ``percent_in_k`` is how many kelvin too much cost as much as the percent of moisture [K].
    """

    kelvin_kwh_t: tuple[float, float, float]
    percent_kwh_t: float
    percent_in_k: tuple[float, float, float]


def what_if(
    situation: Situation,
    changes: Sequence[Changes],
    draw_count: int = DRAW_COUNT,
) -> list[WhatIf]:
    """Each of ``changes`` against the advised target of ``situation``.

    Raises MissingInput where there is no target to compare with, FaultyInput for a change that
    cannot be, naming it.
    """
    if situation.missing:
        raise MissingInput.of("no-advice", " ".join(situation.missing), "Enter it first.")
    changed = [_changed(situation, one) for one in changes]
    draws = Draws(draw_count)
    every = [situation, *changed]
    ways = [
        _Drawn(one, path, draws)
        for one, path in zip(every, draw_paths(every, draws), strict=True)
        if path is not None
    ]
    before = ways[0]
    start = before.advice.setpoint("discharge")
    if start is None:
        raise MissingInput.of(
            "no-target",
            "There is no safe window for this job, so there is no target to compare with.",
            "Choose another job, or look at the remedies of its advice.",
        )
    found = []
    for one, after in zip(changes, ways[1:], strict=True):
        target = after.advice.setpoint("discharge")
        if one.cooler_k is not None:
            discharge = start.target_c - one.cooler_k
        else:
            discharge = target.target_c if target else start.target_c
        found.append(_compared(before, after, one, start.target_c, discharge))
    return found


def degree_and_water(situation: Situation, discharge_c: float) -> DegreeAndWater:
    """What a kelvin and a percent of moisture cost at ``discharge_c`` [C], side by side."""
    kelvin = kelvin_too_much(situation, discharge_c)
    wetter = moisture_cost(operation_of(situation, discharge_c), -_POINT)
    worth = degrees_worth_k(wetter, kelvin)
    return DegreeAndWater(
        _three(kelvin.gross_j_kg_k, 1.0 / _J_KG_PER_KWH_T),
        float(wetter.gross_j_kg) / _J_KG_PER_KWH_T,
        _three(worth, 1.0),
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
        rolling = rolling_times_s(self.path, arriving, CRITERION) / 60.0
        return Way(
            advice=self.advice,
            discharge_c=discharge_c,
            above_low_k=discharge_c - window.low_c if window else None,
            kept=self._kept(discharge_c) if window else None,
            gross_kwh_t=float(balance.gross_j_kg) / _J_KG_PER_KWH_T,
            parts=tuple(
                (name.replace("_", " "), float(part) / _J_KG_PER_KWH_T)
                for name, part in balance.parts.rows()
            ),
            arrives_c=float(np.median(arriving)),
            rolling_min=(
                float(quantile(rolling, 0.05)),
                float(quantile(rolling, 0.5)),
                float(quantile(rolling, 0.95)),
            ),
            path=self._path(discharge_c) if window else (),
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


def _changed(situation: Situation, changes: Changes) -> Situation:
    """The situation with its mix, stone, haul and weather changed."""
    mix, job, weather = situation.mix, situation.job, situation.weather
    if changes.rap_share is not None:
        if mix.rap is None:
            raise FaultyInput.of(
                "no-rap", f"The mix {mix.code} has no RAP.", "Choose a mix with RAP.", field="rap"
            )
        mix = mix.model_copy(
            update={"rap": mix.rap.model_copy(update={"share": changes.rap_share})}
        )
    if changes.additive is not None:
        mix = mix.model_copy(update={"additive": _additive(changes.additive)})
    if changes.haul_s is not None:
        job = job.model_copy(update={"haul": job.haul.model_copy(update={"time": changes.haul_s})})
    if changes.lift_m is not None:
        job = job.model_copy(update={"lift": changes.lift_m})
    if weather is not None and changes.wind_ms is not None:
        weather = replace(weather, wind_ms=changes.wind_ms)
    if weather is not None and changes.air_c is not None:
        # The air is taken to stay as dry as it is: its dew point moves along.
        dew_c = weather.dew_point_c + changes.air_c - weather.air_c
        weather = replace(weather, air_c=changes.air_c, dew_point_c=dew_c)
    moisture = situation.moisture - changes.drier
    if moisture < 0.0:
        raise FaultyInput.of(
            "drier-than-dry",
            f"The stone holds {situation.moisture:.1%} of water; "
            f"{changes.drier:.1%} cannot be taken off.",
            f"Give at most {100.0 * situation.moisture:.1f} %.",
            field="drier",
        )
    return replace(situation, mix=mix, job=job, weather=weather, moisture=moisture)


def additives() -> tuple[str, ...]:
    """Names of the additives that let a mix be made cooler by an offset."""
    return tuple(str(row["name"]) for row in load_table("modifiers").rows if _has_offset(row))


def _has_offset(row: Row) -> bool:
    return row.get("offset_high") is not None and row["kind"] in ("surfactant", "foam")


def _additive(name: str) -> Additive:
    if name not in additives():
        raise FaultyInput.of(
            "unknown-additive",
            f"'{name}' is no additive that lets a mix be made cooler.",
            nearest(name, additives()),
            field="additive",
            value=name,
        )
    row = load_table("modifiers").row(name)
    return Additive.model_validate(
        {
            "kind": row["kind"],
            "offset_low": f"{row['offset_low']:g} K",
            "offset_high": f"{row['offset_high']:g} K",
            "source": row.origin("offset_high").source,
        }
    )


def _compared(
    before: _Drawn, after: _Drawn, changes: Changes, from_c: float, to_c: float
) -> WhatIf:
    dryer = before.situation.facts.folder.plant.dryer
    rise = stack_rise_of(dryer.kind)
    base = operation_of(before.situation, from_c)
    other = _other_dryer(operation_of(after.situation, from_c), changes)
    moved = [
        heat_change(base, at_discharge(other, to_c, one))
        for one in (rise.low, rise.central, rise.high)
    ]
    spent = sorted(float(one.gross_j_kg) for one in moved)
    central = float(moved[1].gross_j_kg)
    doubt = _MODEL_SHARE * abs(central)
    low = central - float(np.hypot(central - spent[0], doubt))
    high = central + float(np.hypot(spent[2] - central, doubt))
    saved_j_kg = Range(np.asarray(-high), np.asarray(-central), np.asarray(-low))
    notes = []
    energies = load_table("overheating").row("oxidation of binder")
    oxidation = sorted(
        float(oxidation_growth(to_c, from_c, energies[side])) for side in ("low", "high")
    )
    if changes.fuel is not None:
        notes.append(f"The price of {changes.fuel} is not known here: no money is told.")
    clash = after.advice.clash
    if clash:
        notes.append(f"No safe window: {clash.lower.name} clashes with {clash.upper.name}.")
    return WhatIf(
        before=before.way(from_c, moved[1].before),
        after=after.way(to_c, moved[1].after),
        saved=_saved(before.situation, saved_j_kg, moved[1], priced=changes.fuel is None),
        fume_of_before=float(fume_growth(to_c, from_c)),
        oxidation_of_before=(oxidation[0], oxidation[1]),
        notes=tuple(notes),
    )


def _other_dryer(operation: Operation, changes: Changes) -> Operation:
    if changes.fuel is not None:
        operation = with_fuel(operation, fuel_called(changes.fuel))
    if changes.air_ratio is not None:
        operation = with_air_ratio(operation, changes.air_ratio)
    return operation


def _saved(situation: Situation, saved_j_kg: Range, change: HeatChange, *, priced: bool) -> Saved:
    money = money_per_j(situation.facts.folder.plant.dryer) if priced else None
    per_h = situation.rate_kgs * 3600.0 / _KG_PER_T
    kwh_t = _three(saved_j_kg, 1.0 / _J_KG_PER_KWH_T)
    co2_share = float(change.co2_kg_kg) / float(change.gross_j_kg) if change.gross_j_kg else 0.0
    money_t = _three(saved_j_kg, _KG_PER_T * money) if money is not None else None
    return Saved(
        gross_kwh_t=kwh_t,
        co2_kg_t=_three(saved_j_kg, _KG_PER_T * co2_share),
        money_t=money_t,
        gross_kwh_h=(kwh_t[0] * per_h, kwh_t[1] * per_h, kwh_t[2] * per_h),
        money_h=(money_t[0] * per_h, money_t[1] * per_h, money_t[2] * per_h) if money_t else None,
        currency=situation.facts.folder.plant.currency,
    )


def _three(span: Range, factor: float) -> tuple[float, float, float]:
    return float(span.low) * factor, float(span.central) * factor, float(span.high) * factor
