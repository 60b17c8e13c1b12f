"""What the invented plant really did in its week: the truth behind demo_plant, written out.

Every coefficient here is invented, of the size that is common practice at such a plant. None of it
is computed by the advisor: the advisor has to find it again in the logs.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import UTC, datetime
from functools import cache
from zoneinfo import ZoneInfo

SEED = 20261019
ZONE = ZoneInfo("Europe/London")
DAYS = ("2026-10-19", "2026-10-20", "2026-10-21", "2026-10-22", "2026-10-23", "2026-10-24",
        "2026-10-25")  # fmt: skip


@cache
def moment(local: str, fold: int = 0) -> datetime:
    """UTC of a plant time such as '2026-10-19 05:40'; ``fold`` 1: the second of a repeated one."""
    wall = datetime.fromisoformat(local).replace(tzinfo=ZONE, fold=fold)
    return wall.astimezone(UTC)


@dataclass(frozen=True)
class Mix:
    """How a mix is run: setpoint at the discharge [C], tank, RAP of mix, moisture entered."""

    setpoint_c: float
    tank: int
    rap: float = 0.0


MIXES = {
    "AC32": Mix(156.0, 1),
    "AC20R": Mix(155.0, 1, 0.20),
    "AC14": Mix(157.0, 2),
    "AC10W": Mix(150.0, 1),
    "SMA10": Mix(174.0, 3),
    "AC14P": Mix(173.0, 3),
}
TANK_C = {1: 160.0, 2: 156.0, 3: 172.0}


@dataclass(frozen=True)
class Site:
    """The road to a job: minutes of haul and wait, their spread, the bodies, tonnes of a load."""

    road_min: float
    spread_min: float
    body: str
    load_kg: float = 20_000


SITES = {
    "J01": Site(45, 6, "tarpaulin"),
    "J02": Site(33, 5, "tarpaulin"),
    "J03": Site(21, 3, "bare"),
    "J04": Site(60, 8, "insulated"),
    "J05": Site(48, 7, "tarpaulin", 16_000),
    "J06": Site(67, 9, "tarpaulin"),
    "J07": Site(80, 10, "insulated"),
}


@dataclass(frozen=True)
class Run:
    """Production of one mix for one job: from and to in plant time, into which silo, how fast.

    ``setpoint_c`` [C] is what the operator chose where it was not the mix's usual one.
    """

    start: str
    end: str
    job: str
    mix: str
    silo: int
    rate_th: float
    setpoint_c: float | None = None


RUNS = (
    Run("2026-10-19 05:40", "2026-10-19 09:00", "J03", "AC32", 1, 200),
    Run("2026-10-19 09:00", "2026-10-19 12:10", "J02", "AC14", 2, 180),
    Run("2026-10-19 12:50", "2026-10-19 15:30", "J01", "AC20R", 1, 190),
    Run("2026-10-20 05:40", "2026-10-20 08:20", "J03", "AC32", 1, 200),
    Run("2026-10-20 08:20", "2026-10-20 11:40", "J02", "AC14", 2, 180),
    Run("2026-10-20 12:30", "2026-10-20 15:30", "J04", "SMA10", 2, 160),
    Run("2026-10-21 05:30", "2026-10-21 10:20", "J01", "AC20R", 1, 190),
    Run("2026-10-21 10:20", "2026-10-21 12:00", "J05", "AC10W", 2, 180),
    Run("2026-10-21 12:40", "2026-10-21 15:20", "J06", "AC14P", 1, 150),
    Run("2026-10-22 05:40", "2026-10-22 08:40", "J02", "AC14", 2, 180, 159.0),
    Run("2026-10-22 08:40", "2026-10-22 12:20", "J01", "AC20R", 1, 200),
    Run("2026-10-22 12:50", "2026-10-22 15:30", "J04", "SMA10", 2, 160),
    Run("2026-10-23 05:40", "2026-10-23 08:50", "J01", "AC20R", 1, 190),
    Run("2026-10-23 08:50", "2026-10-23 12:10", "J02", "AC14", 2, 180, 161.0),
    Run("2026-10-23 12:50", "2026-10-23 15:10", "J05", "AC10W", 1, 180),
    Run("2026-10-24 20:00", "2026-10-25 00:30", "J07", "AC14", 1, 170, 171.0),
    Run("2026-10-25 00:30", "2026-10-25 04:00", "J04", "SMA10", 2, 150),
)
# Mix kept overnight for the first trucks of the next day: job, kg, until.
STOCK = ("J01", 40_000, "2026-10-23 05:35")
# Halts inside runs: the conveyor runs on empty, or stands.
HALTS = (
    ("2026-10-19 10:38", "2026-10-19 10:52", False),
    ("2026-10-20 13:20", "2026-10-20 13:29", True),
    ("2026-10-22 09:12", "2026-10-22 09:21", False),
    ("2026-10-24 22:05", "2026-10-24 22:25", False),
)

# The habit of adding degrees to be safe before nine, with one mix.
SAFE_MIX, SAFE_UNTIL_HOUR, SAFE_K = "AC20R", 9, 9.0
HOT_HOUR = ("2026-10-22 10:05", "2026-10-22 11:10", 12.0)  # moisture fell, the burner did not
COLD_START_K, COLD_NIGHT_K = 22.0, 48.0  # below the setpoint at the first mix, by day and Sat 20:00
CONTROL_SD_K, CONTROL_RHO = 2.5, 0.75  # scatter of the discharge, minute to minute
SETTLE_MIN, COLD_NIGHT_SETTLE_MIN = 6.0, 18.0

# Moisture of dry mass: what was entered each day and what it was, by stretch.
MOISTURE_ENTERED = dict(zip(DAYS, (0.042, 0.042, 0.040, 0.050, 0.045, 0.045, 0.045), strict=True))
MOISTURE_TRUE = (
    ("2026-10-21 05:00", "2026-10-21 09:40", 0.056),  # a wet morning nobody entered
    ("2026-10-22 10:05", "2026-10-22 16:00", 0.037),
)

# Losses, invented: W/K of conveyor and silo, and trucks' mean loss at 60 min over 145 K.
CONVEYOR_UA_WK = 430.0
SILO_UA_WK = {1: 60.0, 2: 55.0}
MIX_JKGK = 1000.0
# Burner at full load, net; the share of its heat that mix and steam keep at 155 C, and how that
# share falls as mix and with it the gas in the stack get hotter.
BURNER_NET_W, HEAT_KEPT, HEAT_KEPT_PER_K = 24.6e6, 0.86, 0.00025
CONE_FIRST_LOAD_K = 8.0
TRUCK_LOSS_K = {"bare": (12.6, 0.72), "tarpaulin": (10.2, 0.74), "insulated": (2.0, 0.87)}
LOAD_OUT_OFFSET_K = ("2026-10-22 00:00", -4.0)  # the load-out sensor reads low from Thursday on

# Faults of sensors and of the export: signal, reason, from, to (plant time).
STUCK = ("silo_2_c", "2026-10-20 09:10", "2026-10-20 09:55")
FAHRENHEIT = ("silo_1_c", "2026-10-21 13:00", "2026-10-21 14:20")
SPIKES = (
    ("discharge_c", "2026-10-19 07:13", 41.0),
    ("discharge_c", "2026-10-21 08:47", -38.0),
    ("stack_c", "2026-10-23 11:02", 55.0),
    ("binder_tank_1_c", "2026-10-20 14:14", -35.0),
    ("discharge_c", "2026-10-25 03:31", 36.0),
)
SENTINELS = (
    ("stack_c", "2026-10-20 06:31", "-9999"),
    ("binder_tank_2_c", "2026-10-21 11:05", "Bad"),
    ("binder_tank_2_c", "2026-10-21 11:06", "Bad"),
    ("discharge_c", "2026-10-23 14:40", "---"),
    ("silo_1_kg", "2026-10-24 21:17", ""),
)
OUT_OF_RANGE = (("binder_tank_3_c", "2026-10-22 03:00", "2026-10-22 03:06", 850.0),)
# Lines that are no rows: after which plant time, and what stands there.
JUNK = (
    ("2026-10-19 06:12", "*** link to controller restored ***"),
    ("2026-10-21 05:20", "HEADER"),
    ("2026-10-23 12:30", "23/10/2026 12:30:30;AC14;31,2"),
    ("2026-10-24 19:50", ""),
)
