"""Likely cause of loads outside their window at load-out or at the paver, with the evidence."""

from __future__ import annotations

import numpy as np
import pandas as pd

from advisor.review.causes import Cause, CauseRules, difference

_MOST_TICKETS = 6
_LONG_IN_SILO_S = 2 * 3600.0  # common practice, no source: past it the cone has cooled
_FEW_READ = 3  # fewer readings at the paver contradict no thermometer


def load_cause(part: pd.DataFrame, point: str, side: str, rules: CauseRules) -> Cause:
    """The cause that best fits the loads of ``part``, rows of judged_loads, and its evidence.

    ``point`` is load_out or delivery, ``side`` hot or cold. In this order: so made, long in the
    silo, other mix in the silo, the road, the heat lost on it, the thermometers.
    """
    loads = _loads(part)
    over = "over" if side == "hot" else "under"
    word = "hotter" if side == "hot" else "colder"
    made_k = part[f"made_{over}_k"].to_numpy(float)
    so_made = made_k > 0.0
    if 2 * np.count_nonzero(so_made) >= len(part):
        return Cause(
            f"made {side}",
            f"{loads}: {np.count_nonzero(so_made)} left the drum {word} than the window, by "
            f"{difference(float(made_k[so_made].mean()), rules.units)} in the mean.",
        )
    rested_s = (part["time"] - part["made"]).dt.total_seconds().to_numpy(float)
    if side == "cold" and np.median(rested_s) > _LONG_IN_SILO_S:
        return Cause("long in the silo", f"{loads}: {np.median(rested_s) / 3600.0:.1f} h in it.")
    mingled_k = part[f"silo_{over}_k"].to_numpy(float)
    if 2 * np.count_nonzero(mingled_k > rules.scatter_k) >= len(part):
        return Cause(
            f"{side} mix in the silo",
            f"{loads}: while they lay in the silo the drum ran up to "
            f"{difference(float(np.nanmax(mingled_k)), rules.units)} {word} than the window.",
        )
    return (
        _at_load_out(part, loads, side, over)
        if point == "load_out"
        else _on_the_road(part, loads, side, rules)
    )


def _loads(part: pd.DataFrame) -> str:
    count = len(part)
    tickets = ", ".join(str(one) for one in part["ticket"].head(_MOST_TICKETS))
    more = " ..." if count > _MOST_TICKETS else ""
    return f"{count} load{'s' if count > 1 else ''} ({tickets}{more})"


def _at_load_out(part: pd.DataFrame, loads: str, side: str, over: str) -> Cause:
    """The drum was inside: what the paver read tells the silo from the thermometer."""
    if "delivery_c" in part:
        beyond = (
            part["delivery_c"] - part["delivery_high_c"]
            if over == "over"
            else part["delivery_low_c"] - part["delivery_c"]
        ).dropna()
        if len(beyond) >= _FEW_READ and not (beyond > 0.0).any():
            return Cause(
                "load-out thermometer",
                f"{loads}: made inside, and none of the {len(beyond)} read at the paver arrived "
                f"{side}; compare the thermometer with a probe.",
            )
    return Cause(
        "silo or thermometer",
        f"{loads}: the drum was inside its window; compare the load-out thermometer with a probe.",
    )


def _on_the_road(part: pd.DataFrame, loads: str, side: str, rules: CauseRules) -> Cause:
    """Made inside: time on the road against the plan, then heat lost against the reckoning."""
    road_s = (part["arrived"] - part["time"]).dt.total_seconds()
    late_s = (road_s - part["planned_road_s"]).median()
    spread_s = part["road_spread_s"].median()
    outward = 1.0 if side == "cold" else -1.0
    times = f"{road_s.median() / 60.0:.0f} min on the road"
    if outward * late_s > spread_s:
        planned = part["planned_road_s"].median() / 60.0
        return Cause(
            "long haul" if side == "cold" else "short haul",
            f"{loads}: {times} where {planned:.0f} min were planned.",
        )
    if "load_out_c" in part:
        lost_k = float((part["load_out_c"] - part["delivery_c"]).median())
        reckoned_k = float((part["load_out_target_c"] - part["delivery_target_c"]).median())
        if lost_k < 0.0:
            return Cause(
                "load-out thermometer",
                f"{loads}: the paver read {difference(lost_k, rules.units)} more than load-out, "
                "and no mix warms up on the road; compare both thermometers with a probe.",
            )
        if outward * (lost_k - reckoned_k) > rules.window_change_k:
            return Cause(
                f"{'more' if side == 'cold' else 'less'} lost on the road",
                f"{loads}: they lost {difference(lost_k, rules.units)}, {times}, where "
                f"{difference(reckoned_k, rules.units)} is reckoned; or a thermometer is off.",
            )
    return Cause("haul or thermometer", f"{loads}: made inside, {times} as planned.")
