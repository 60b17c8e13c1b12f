"""Plant clock to UTC, with the hour that is missing in spring and the one repeated in autumn."""

from __future__ import annotations

from dataclasses import dataclass
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.errors import FaultyInput

Times = NDArray[np.datetime64]
Steps = NDArray[np.timedelta64]
Bools = NDArray[np.bool_]

_NO_TIME = np.datetime64("NaT", "us")
_HOUR = np.timedelta64(3600, "s")


@dataclass(frozen=True)
class UtcTimes:
    """Times in UTC, NaT where the plant clock alone does not say which; and what was decided."""

    utc: Times
    skipped: Bools  # wall times that no clock showed: the clocks went forward over them
    undecided: Bools  # wall times shown twice, with nothing that tells which
    notes: tuple[str, ...]


def zone_named(name: str) -> ZoneInfo:
    """The time zone ``name``, such as Europe/London. Raises FaultyInput for an unknown one."""
    try:
        return ZoneInfo(name)
    except (ZoneInfoNotFoundError, ValueError, OSError) as error:
        raise FaultyInput.of(
            "time-zone",
            f"'{name}' is not a time zone.",
            "Write it as Area/City, for example Europe/London or America/Chicago, or UTC.",
            value=name,
        ) from error


def utc_from_wall(wall: Times, zone: ZoneInfo, regular: bool) -> UtcTimes:
    """UTC of ``wall`` times [datetime64, NaT allowed] of a clock in ``zone``, in row order.

    The hour repeated in autumn is told apart by the order of the rows: rows before the step back
    are summer time, rows after it winter time. Where there is no step back, a ``regular`` source
    is followed from the row before or back from the row after; else the row stays undecided.
    """
    wall = wall.astype("datetime64[us]")
    steps = np.diff(wall[~np.isnat(wall)])
    if len(steps) and np.median(steps) < np.timedelta64(0, "us"):  # newest row first
        turned = utc_from_wall(wall[::-1], zone, regular)
        return UtcTimes(
            turned.utc[::-1], turned.skipped[::-1], turned.undecided[::-1], turned.notes
        )
    index = pd.DatetimeIndex(wall)
    missing = np.isnat(wall)
    sure = index.tz_localize(zone, ambiguous="NaT", nonexistent="shift_forward")
    twice = np.asarray(sure.isna()) & ~missing
    summer = np.zeros(len(wall), bool)
    undecided = np.zeros(len(wall), bool)
    notes: list[str] = []
    for day in np.unique(wall[twice].astype("datetime64[D]")):
        rows = np.flatnonzero(twice & (wall.astype("datetime64[D]") == day))
        first_pass = _first_pass(wall, rows, steps, regular)
        if first_pass is None:
            undecided[rows] = True
            notes.append(
                f"Clocks went back on {day}: {len(rows)} rows in the repeated hour do not say "
                "which of the two they belong to and are set aside."
            )
            continue
        summer[rows[:first_pass]] = True
        notes.append(
            f"Clocks went back on {day}: by the order of the rows, {first_pass} rows of the "
            f"repeated hour are before the change and {len(rows) - first_pass} after it."
        )
    placed = index.tz_localize(zone, ambiguous=summer, nonexistent="NaT").tz_convert("UTC")
    utc = placed.tz_localize(None).to_numpy(dtype="datetime64[us]", copy=True)
    skipped = np.isnat(utc) & ~missing
    utc[undecided] = _NO_TIME
    if skipped.any():
        day = wall[skipped][0].astype("datetime64[D]")
        notes.append(
            f"Clocks went forward on {day}: {int(skipped.sum())} rows show times that did not "
            "exist and are set aside."
        )
    return UtcTimes(utc, skipped, undecided, tuple(notes))


def _first_pass(wall: Times, rows: NDArray[np.intp], steps: Steps, regular: bool) -> int | None:
    """How many of the ``rows`` in a repeated hour come before the change; None if unknown."""
    usual = np.median(steps) if len(steps) else np.timedelta64(0, "us")
    inside = np.diff(wall[rows])
    if len(inside):
        back = int(np.argmin(inside))
        # An hourly source shows the change as the same hour twice, not as a step back.
        if inside[back] < 0 * _HOUR or (regular and usual >= _HOUR and inside[back] == 0 * _HOUR):
            return back + 1
    if not regular:
        return None
    near = usual + usual // 2
    before, after = rows[0] - 1, rows[-1] + 1
    if before >= 0 and wall[rows[0]] - wall[before] <= near:
        return len(rows)
    if after < len(wall) and wall[after] - wall[rows[-1]] <= near:
        return 0
    return None
