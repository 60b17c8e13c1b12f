"""How far the clock of the tickets is from that of the plant log, from what left the silos.

A ticket is written when its mass leaves a silo; the log sees the silo's content fall. The offset at
which the two fit best is proposed, never applied.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.settings.tables import load_table

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class ClockRules:
    """Bounds of the search and what counts as found; values come from config/cleaning.yaml."""

    most_s: float
    least_s: float
    clearly: float
    loads: int


@dataclass(frozen=True)
class ClockOffset:
    """Tickets are ``offset_s`` [s] late against the log (early below 0), give or take ``doubt_s``.

    ``fits`` is how many of the ``loads`` looked at leave a silo in the log at that offset.
    """

    offset_s: float
    doubt_s: float
    fits: int
    loads: int


def clock_rules() -> ClockRules:
    """The rules of config/cleaning.yaml."""
    row = load_table("cleaning").row("clock offset")
    return ClockRules(row["most"], row["least"], row["clearly"], int(row["loads"]))


def clock_offset(
    frame: pd.DataFrame, tickets: pd.DataFrame, rules: ClockRules | None = None
) -> ClockOffset | None:
    """Offset of the clock of ``tickets`` against that of the plant log ``frame``.

    None where there is too little to go by, or where no offset fits clearly better than chance:
    its fit has to stand ``clearly`` standard deviations above that of the other offsets.
    """
    rules = rules or clock_rules()
    if len(frame) < 3 or "silo" not in tickets or len(tickets) < rules.loads:
        return None
    time_s = frame["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    step_s = float(np.median(np.diff(time_s)))
    offsets = np.arange(-rules.most_s, rules.most_s + step_s / 2, step_s)
    left = np.zeros((0, len(offsets)))
    for silo, own in tickets.groupby("silo"):
        content = f"{str(silo).replace(' ', '_')}_kg"
        if content in frame:
            held = frame[content].to_numpy(dtype=float)
            left = np.vstack([left, _left(time_s, held, own, offsets, step_s)])
    if len(left) < rules.loads:
        return None
    score = left.mean(axis=0)
    best = int(np.argmax(score))
    elsewhere = score[np.abs(offsets - offsets[best]) > 2.0 * step_s]
    if not len(elsewhere) or score[best] < elsewhere.mean() + rules.clearly * elsewhere.std():
        return None
    return ClockOffset(
        float(offsets[best]), step_s, int(np.count_nonzero(left[:, best] > 0.5)), len(left)
    )


def _left(
    time_s: Floats, held_kg: Floats, own: pd.DataFrame, offsets: Floats, step_s: float
) -> Floats:
    """Share of the mass of each ticket (row) that left the silo at its time less each offset.

    Between 0 and 1, so that one great fall of content does not outweigh many loads.
    """
    fall = np.nan_to_num(-np.diff(held_kg))
    at_s = own["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    moment = at_s[:, None] - offsets[None, :]
    place = np.searchsorted(time_s, moment - step_s / 2)  # the row at that moment
    inside = (place > 0) & (place < len(time_s))
    fell = np.where(inside, fall[np.clip(place - 1, 0, len(fall) - 1)], 0.0)
    mass = own["mass_kg"].to_numpy(dtype=float)[:, None]
    return np.asarray(np.clip(np.where(mass > 0, fell / mass, 0.0), 0.0, 1.0))
