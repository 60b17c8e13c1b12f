"""What the simulator of the invented plant knows: the truth behind its exports."""

from __future__ import annotations

import csv
import json
from datetime import datetime
from functools import cache
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

HERE = Path(__file__).parent


@cache
def truth() -> dict:
    """The files, faults, loads and deliveries of demo_truth.json."""
    return json.loads((HERE / "demo_truth.json").read_text("utf-8"))


@cache
def minutes() -> dict[str, NDArray]:
    """True temperatures and moisture of every minute in which mix was made; ``time_s`` UTC."""
    with (HERE / "demo_minutes.csv").open(encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    found = {
        name: np.array([float(row[name]) for row in rows]) for name in rows[0] if name != "time"
    }
    found["time_s"] = np.array(
        [datetime.fromisoformat(row["time"].replace("Z", "+00:00")).timestamp() for row in rows]
    )
    return found


def faults(reason: str) -> list[tuple[str, datetime, datetime]]:
    """Planted faults of sensors with ``reason``: signal, begin and end."""
    return [
        (one["signal"], datetime.fromisoformat(one["start"]), datetime.fromisoformat(one["end"]))
        for one in truth()["faults"]
        if one["reason"] == reason
    ]
