"""Likely cause of an excursion, with the evidence for it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.review.result import State
from advisor.units import UnitSystem, shown


@dataclass(frozen=True)
class CauseRules:
    """How far back to look and what counts as a change; values come from config/review.yaml.

    ``scatter_k`` is the standard deviation of the plant's own control about its setpoint;
    ``units`` are those of the evidence.
    """

    look_back_s: float
    rate_change: float
    heat_change: float
    window_change_k: float
    scatter_k: float
    units: UnitSystem = "si"


_LEAST_ROWS = 10  # fewer rows before an excursion say nothing about what changed
_BEYOND_SCATTER = 3.0  # standard deviations that control alone does not reach


@dataclass(frozen=True)
class Cause:
    """A likely cause and the sentence that supports it."""

    name: str
    evidence: str


def likely_cause(
    rows: pd.DataFrame, start: int, end: int, side: str, state: State, rules: CauseRules
) -> Cause:
    """The cause that best fits what changed at the start of rows ``start:end``.

    ``rows`` has time_s [s], discharge_c and window_c (the bound crossed) [C], rate_kgs [kg/s],
    burner_load [1], state, and over_k, missing where no mix is judged.
    """
    time_s = rows["time_s"].to_numpy()
    # A dryer starts cold: what began in a start-up and stayed cold is the start-up still.
    began = str(rows["state"].iloc[start])
    if state == "start-up" or (side == "cold" and began == "start-up"):
        minutes = (time_s[end - 1] - time_s[start]) / 60.0
        return Cause("start-up", f"It took {minutes:.0f} min after the start to reach the window.")
    if state == "mix change":
        return Cause("mix change", "The mix had just changed; the discharge had not settled.")
    since = time_s[start]
    back = (time_s >= since - rules.look_back_s) & (time_s < since) & _settled(rows)
    during = np.zeros(len(rows), bool)
    during[start:end] = True
    word = "above" if side == "hot" else "below"
    if np.count_nonzero(back) < _LEAST_ROWS:
        return Cause(
            "setpoint",
            f"It was so from the first minutes of this run: the discharge was set {word} the "
            "window.",
        )
    before, now = _means(rows[back]), _means(rows[during])
    outward = 1.0 if side == "hot" else -1.0
    window_shift = now["window_c"] - before["window_c"]
    if -outward * window_shift > rules.window_change_k:
        return Cause(
            "setpoint not changed",
            f"The window moved {difference(window_shift, rules.units)} "
            f"{'up' if window_shift > 0 else 'down'} and the discharge did not follow.",
        )
    rate_shift = _relative(now["rate_kgs"], before["rate_kgs"])
    if abs(rate_shift) > rules.rate_change:
        return Cause("rate change", f"The mix rate changed by {rate_shift:+.0%} just before.")
    heat_shift = _relative(_heat_per_mass(now), _heat_per_mass(before))
    if abs(heat_shift) > rules.heat_change and (heat_shift > 0) == (side == "hot"):
        return Cause(
            "burner", f"The burner gave {heat_shift:+.0%} heat per tonne against the time before."
        )
    moved = outward * (now["discharge_c"] - before["discharge_c"])
    if moved > _BEYOND_SCATTER * rules.scatter_k and abs(heat_shift) <= rules.heat_change:
        went, stone = ("hotter", "drier") if side == "hot" else ("colder", "wetter")
        return Cause(
            "moisture fell" if side == "hot" else "moisture rose",
            f"Rate and burner stayed ({heat_shift:+.0%} heat per tonne) while the mix got "
            f"{difference(moved, rules.units)} {went}, as {stone} stone would do.",
        )
    near = outward * (before["window_c"] - before["discharge_c"])
    if near < rules.scatter_k:
        place = "inside" if near > 0 else "outside"
        return Cause(
            "setpoint",
            f"It already ran {difference(near, rules.units)} {place} this edge before; control "
            f"scatters by {shown(rules.scatter_k, 'temperature_delta', rules.units)}.",
        )
    if moved <= _BEYOND_SCATTER * rules.scatter_k and time_s[end - 1] - since < rules.look_back_s:
        return Cause(
            "control scatter",
            f"A short swing of {difference(moved, rules.units)}; the plant's control scatters by "
            f"{shown(rules.scatter_k, 'temperature_delta', rules.units)}.",
        )
    return Cause("not known", "Rate, burner and window did not change enough to explain it.")


def difference(value_k: float, units: UnitSystem) -> str:
    """Size of a temperature difference ``value_k`` in ``units``, without its sign."""
    return shown(abs(value_k), "temperature_delta", units, 0)


def _settled(rows: pd.DataFrame) -> NDArray[np.bool_]:
    return np.asarray(rows["over_k"].notna() & (rows["state"] == "production"), bool)


def _heat_per_mass(means: dict[str, float]) -> float:
    return means["burner_load"] / means["rate_kgs"] if means["rate_kgs"] > 0 else float("nan")


def _means(rows: pd.DataFrame) -> dict[str, float]:
    return {
        name: float(rows[name].mean())
        for name in ("window_c", "rate_kgs", "burner_load", "discharge_c")
    }


def _relative(now: float, before: float) -> float:
    return now / before - 1.0 if before and np.isfinite(before) and np.isfinite(now) else 0.0
