"""Writes the exports of the invented plant: python tests/make_demo_plant.py [FOLDER].

A small simulator of its own, with first-order lags and the losses of demo_schedule; it shares
nothing with the advisor. The same files come out every time, to the byte.
"""

from __future__ import annotations

import csv
import io
import json
import math
import random
import sys
from dataclasses import dataclass, field
from datetime import UTC, datetime, timedelta
from pathlib import Path
from statistics import NormalDist

import demo_schedule as demo
from demo_schedule import ZONE, moment

MINUTE = timedelta(minutes=1)
START, END = moment("2026-10-19 00:00"), moment("2026-10-26 00:00")
HEADINGS = (
    "Date", "Time", "Recipe", "Mix temp", "Stack temp", "Tank 1 temp", "Tank 2 temp",
    "Tank 3 temp", "Silo 1 temp", "Silo 2 temp", "Silo 1 level", "Silo 2 level", "Rate", "Burner",
    "Moisture set", "RAP", "Conveyor",
)  # fmt: skip
UNITS = ("", "", "", "°C", "°F", *["°C"] * 5, "t", "t", "t/h", "%", "%", "%", "")
SIGNALS = (
    "discharge_c", "stack_c", "binder_tank_1_c", "binder_tank_2_c", "binder_tank_3_c",
    "silo_1_c", "silo_2_c", "silo_1_kg", "silo_2_kg",
)  # fmt: skip


class Noise:
    """Normal draws that are the same on every machine and version of Python."""

    def __init__(self, name: str) -> None:
        self._random = random.Random(f"{demo.SEED} {name}")  # noqa: S311

    def normal(self, sd: float) -> float:
        return NormalDist().inv_cdf(self.uniform()) * sd

    def uniform(self) -> float:
        return min(max(self._random.random(), 1e-12), 1 - 1e-12)


@dataclass
class Silo:
    """Mix in a silo: mass, temperature and what it holds; the wall sensor's reading."""

    mass_kg: float = 0.0
    mix_c: float = 12.0
    sensor_c: float = 12.0
    mix: str = ""
    rested_s: float = 0.0


@dataclass
class Plant:
    """Everything that has a memory from one minute to the next."""

    discharge_c: float = 12.0
    base_c: float = 12.0
    scatter_k: float = 0.0
    stack_c: float = 12.0
    running: bool = False
    cold_for: float = 0.0
    settle_min: float = demo.SETTLE_MIN
    stopped_for: float = 1e6
    silos: dict[int, Silo] = field(default_factory=lambda: {1: Silo(), 2: Silo()})
    waiting_kg: dict[tuple[str, str, int], float] = field(default_factory=dict)


def local(at: datetime) -> datetime:
    return at.astimezone(ZONE)


def between(at: datetime, start: str, end: str) -> bool:
    return moment(start) <= at < moment(end)


def air_c(at: datetime) -> float:
    """Air at the plant: a cool week, coldest at five, with a cold Saturday night."""
    hours = (at - START).total_seconds() / 3600
    daily = 3.6 * math.cos(2 * math.pi * ((hours - 14.5) % 24) / 24)
    return 9.0 + daily - 3.0 * math.exp(-(((hours - 142) / 10) ** 2)) + 0.8 * math.sin(hours / 31)


def moisture(at: datetime) -> tuple[float, float]:
    """Moisture entered and moisture true, of dry mass."""
    entered = demo.MOISTURE_ENTERED[local(at).strftime("%Y-%m-%d")]
    true = entered + 0.002 * math.sin((at - START).total_seconds() / 9000)
    for start, end, value in demo.MOISTURE_TRUE:
        if between(at, start, end):
            true = value
    return entered, true


def run_at(at: datetime) -> demo.Run | None:
    return next((run for run in demo.RUNS if between(at, run.start, run.end)), None)


def halted(at: datetime) -> tuple[bool, bool]:
    """Whether a run is halted, and whether the conveyor runs on."""
    for start, end, conveyor in demo.HALTS:
        if between(at, start, end):
            return True, conveyor
    return False, False


def drift(value: float, goal: float, minutes: float, of_min: float) -> float:
    return goal + (value - goal) * math.exp(-minutes / of_min)


def setpoint_c(at: datetime, run: demo.Run) -> float:
    """What the operator aims at, with the habit of the early morning."""
    early = run.mix == demo.SAFE_MIX and 4 <= local(at).hour < demo.SAFE_UNTIL_HOUR
    usual = demo.MIXES[run.mix].setpoint_c
    chosen = usual if run.setpoint_c is None else run.setpoint_c
    return chosen + (demo.SAFE_K if early else 0.0)


def step_discharge(plant: Plant, at: datetime, noise: Noise) -> tuple[demo.Run | None, bool]:
    """One minute of drum and conveyor; returns the run and whether the conveyor turns."""
    run = run_at(at)
    stop, conveyor_on = halted(at)
    making = run is not None and not stop
    innovation = demo.CONTROL_SD_K * math.sqrt(1 - demo.CONTROL_RHO**2)
    plant.scatter_k = demo.CONTROL_RHO * plant.scatter_k + noise.normal(innovation)
    if making and run is not None:
        aim = setpoint_c(at, run)
        if not plant.running:
            night = at == moment("2026-10-24 20:00")
            below = demo.COLD_NIGHT_K if night else demo.COLD_START_K
            plant.base_c = aim - (below if plant.stopped_for > 90 else 6.0)
            plant.settle_min = demo.COLD_NIGHT_SETTLE_MIN if night else demo.SETTLE_MIN
        start, end, hotter = demo.HOT_HOUR
        aim += hotter if between(at, start, end) else 0.0
        plant.base_c = drift(plant.base_c, aim, 1, plant.settle_min)
        if abs(plant.base_c - aim) < 2:
            plant.settle_min = demo.SETTLE_MIN
        plant.discharge_c = plant.base_c + plant.scatter_k
        plant.stopped_for = 0.0
    else:
        plant.discharge_c = drift(plant.discharge_c, air_c(at) + 4, 1, 5.0)
        plant.stopped_for += 1
    plant.running = making
    return (run if making else None), making or conveyor_on


def burner(plant: Plant, at: datetime, run: demo.Run | None) -> float:
    """Burner load; lit for warming up before a start, and at low fire in a halt."""
    if run is None:
        if run_at(at) is not None:
            return 0.12
        return 0.25 if run_at(at + 18 * MINUTE) is not None and plant.stopped_for > 60 else 0.0
    _, wet = moisture(at)
    if between(at, *demo.HOT_HOUR[:2]):
        wet = moisture(moment(demo.HOT_HOUR[0]) - MINUTE)[1]  # nobody turned it down
    return min(1.0, burner_w(run.rate_th, plant.base_c, air_c(at), wet) / demo.BURNER_NET_W)


def burner_w(rate_th: float, mix_c: float, air: float, wet: float) -> float:
    """Net heat of the burner [W]: stone and binder to ``mix_c``, water off as steam, the rest lost.

    Hotter mix leaves hotter gas, so that a smaller part of the heat is kept.
    """
    kept = demo.HEAT_KEPT - demo.HEAT_KEPT_PER_K * (mix_c - 155.0)
    return rate_th / 3.6 * (980.0 * (mix_c - air) + 2.62e6 * wet * 0.95) / kept


def step_stack(plant: Plant, at: datetime, run: demo.Run | None, load: float) -> None:
    if run is not None:
        goal = 104 + 0.35 * (plant.base_c - 155) + 160 * (moisture(at)[1] - 0.045)
        plant.stack_c = drift(plant.stack_c, goal, 1, 4.0)
    elif load > 0:
        plant.stack_c = drift(plant.stack_c, 88, 1, 6.0)
    else:
        plant.stack_c = drift(plant.stack_c, air_c(at) + 3, 1, 35.0)


def step_silos(plant: Plant, at: datetime, run: demo.Run | None) -> None:
    """One minute of mix in, heat out; what is made waits for trucks of its job."""
    for number, silo in plant.silos.items():
        if run is not None and run.silo == number:
            inflow = run.rate_th * 1000 / 60
            drop = demo.CONVEYOR_UA_WK * (plant.discharge_c - air_c(at))
            arriving = plant.discharge_c - drop / (inflow / 60 * demo.MIX_JKGK)
            if silo.mass_kg < 1:
                silo.mix_c = arriving
            silo.mix_c += (arriving - silo.mix_c) * inflow / (silo.mass_kg + inflow)
            silo.mass_kg += inflow
            silo.mix = run.mix
            key = (run.job, run.mix, number)
            plant.waiting_kg[key] = plant.waiting_kg.get(key, 0.0) + inflow
            silo.rested_s = 0.0
        else:
            silo.rested_s += 60
        if silo.mass_kg > 1:
            flow_w = demo.SILO_UA_WK[number] * (silo.mix_c - air_c(at))
            silo.mix_c -= 60 * flow_w / (silo.mass_kg * demo.MIX_JKGK)
        held = silo.mass_kg > 3000
        goal = silo.mix_c - 1.0 if held else air_c(at) + 6
        silo.sensor_c = drift(silo.sensor_c, goal, 1, 6.0 if held else 150.0)


@dataclass(frozen=True)
class Load:
    """One truck: when and what it took, how hot it really was, what the sensor read."""

    ticket: int
    at: datetime
    silo: int
    mix: str
    job: str
    truck: str
    mass_kg: float
    true_c: float
    read_c: float


def take_load(plant: Plant, at: datetime, loads: list[Load], noise: Noise) -> None:
    """A truck a few minutes after its tonnes are made; the last of a run as soon as it is over."""
    for (job, mix, number), waiting in list(plant.waiting_kg.items()):
        silo = plant.silos[number]
        run = run_at(at)
        over = run is None or run.job != job
        stock_job, stock_kg, until = demo.STOCK
        kept = stock_kg if job == stock_job and moment(until) - at < timedelta(hours=18) else 0
        kept = kept if at < moment(until) else 0
        load_kg = demo.SITES[job].load_kg
        if waiting - kept < (5000 if over else load_kg + 30_000) or noise.uniform() < 0.35:
            continue
        mass = round(min(load_kg + noise.normal(450), waiting), -1)
        if waiting - mass < 5000:
            mass = round(waiting, -1)
        cone = demo.CONE_FIRST_LOAD_K if silo.rested_s > 3 * 3600 or _first_of_day(at, loads) else 0
        true = silo.mix_c - cone + noise.normal(1.2)
        since, offset = demo.LOAD_OUT_OFFSET_K
        read = true + noise.normal(1.0) + (offset if at >= moment(since) else 0.0)
        truck = f"T{1 + len(loads) % 14:02d}"
        ticket = 40110 + len(loads)
        loads.append(Load(ticket, at, number, mix, job, truck, mass, true, read))
        plant.waiting_kg[job, mix, number] = waiting - mass
        silo.mass_kg = max(0.0, silo.mass_kg - mass)
        return


def _first_of_day(at: datetime, loads: list[Load]) -> bool:
    return not loads or at - loads[-1].at > timedelta(hours=4)


def simulate() -> tuple[list[dict[str, object]], list[Load]]:
    """The truth and the readings of every minute, and every load."""
    plant = Plant()
    control, sensors, trucks = Noise("control"), Noise("sensors"), Noise("trucks")
    tanks = dict(demo.TANK_C)
    rows: list[dict[str, object]] = []
    loads: list[Load] = []
    mix = demo.RUNS[0].mix
    at = START
    while at < END:
        run, conveyor = step_discharge(plant, at, control)
        load = burner(plant, at, run)
        step_stack(plant, at, run, load)
        step_silos(plant, at, run)
        take_load(plant, at, loads, trucks)
        mix = run.mix if run else mix
        for number, goal in demo.TANK_C.items():
            drawn = 1.5 if run and demo.MIXES[run.mix].tank == number else 0.0
            wave = 1.2 * math.sin((at - START).total_seconds() / 5400 + number)
            tanks[number] = drift(tanks[number], goal + wave - drawn, 1, 60.0)
        row: dict[str, object] = {
            "time": at,
            "mix": mix,
            "true_discharge_c": plant.discharge_c,
            "discharge_c": plant.discharge_c + sensors.normal(0.4),
            "stack_c": plant.stack_c + sensors.normal(0.7 if run else 0.2),
            "rate_th": run.rate_th * (1 + sensors.normal(0.012)) if run else 0.0,
            "burner": min(1.0, load * (1 + sensors.normal(0.02))),
            "moisture": moisture(at)[0],
            "true_moisture": moisture(at)[1],
            "rap": demo.MIXES[mix].rap,
            "conveyor": conveyor,
        }
        for number in demo.TANK_C:
            row[f"binder_tank_{number}_c"] = tanks[number] + sensors.normal(0.15)
        for number, silo in plant.silos.items():
            row[f"true_silo_{number}_c"] = silo.mix_c
            row[f"silo_{number}_c"] = silo.sensor_c + sensors.normal(0.2)
            row[f"silo_{number}_kg"] = max(0.0, silo.mass_kg + sensors.normal(120)) * (
                silo.mass_kg > 1
            )
        rows.append(row)
        at += MINUTE
    return rows, loads


def plant_faults(rows: list[dict[str, object]]) -> None:
    """Put the sensors' faults over the readings; texts stand for what is written in the cell."""
    by_time = {row["time"]: row for row in rows}
    signal, start, end = demo.STUCK
    frozen = by_time[moment(start)][signal]
    for row in rows:
        at = row["time"]
        assert isinstance(at, datetime)
        if between(at, start, end):
            row[signal] = frozen
        if between(at, *demo.FAHRENHEIT[1:]):
            row[demo.FAHRENHEIT[0]] = row[demo.FAHRENHEIT[0]] * 1.8 + 32  # type: ignore[operator]
        for broken, since, until, value in demo.OUT_OF_RANGE:
            if between(at, since, until):
                row[broken] = value
    for spiking, when, height in demo.SPIKES:
        by_time[moment(when)][spiking] += height  # type: ignore[operator]
    for silent, when, text in demo.SENTINELS:
        by_time[moment(when)][silent] = text


def comma(value: float, places: int = 1) -> str:
    return f"{value:.{places}f}".replace(".", ",")


def log_line(row: dict[str, object]) -> str:
    """One row as the controls export it: plant time without zone, decimal comma, stack in F."""
    at = row["time"]
    assert isinstance(at, datetime)
    cells = [local(at).strftime("%d/%m/%Y;%H:%M:%S"), str(row["mix"])]
    for signal in SIGNALS:
        value = row[signal]
        if not isinstance(value, float):
            cells.append(str(value))
        elif signal.endswith("_kg"):
            cells.append(comma(value / 1000))
        else:
            cells.append(comma(value * 1.8 + 32 if signal == "stack_c" else value))
    cells += [comma(float(row["rate_th"])), comma(100 * float(row["burner"]))]  # type: ignore[arg-type]
    cells += [comma(100 * float(row["moisture"])), comma(100 * float(row["rap"]), 0)]  # type: ignore[arg-type]
    return ";".join([*cells, "RUN" if row["conveyor"] else "STOP"])


def day_file(day: str, rows: list[dict[str, object]]) -> tuple[bytes, dict[str, object]]:
    """One day's export, and what in it is no row: line numbers counted from 1."""
    lines = [
        f"Plant log;Harrow Fen plant (invented);{day};1 min",
        ";".join(HEADINGS),
        ";".join(UNITS),
    ]
    set_aside: dict[int, str] = {}
    blank: list[int] = []
    total = 0.0
    for row in rows:
        at = row["time"]
        assert isinstance(at, datetime)
        lines.append(log_line(row))
        total += float(row["rate_th"]) / 60  # type: ignore[arg-type]
        for when, text in demo.JUNK:
            if at == moment(when):
                lines.append(lines[1] if text == "HEADER" else text)
                if text:
                    set_aside[len(lines)] = lines[-1]
                else:
                    blank.append(len(lines))
    whole = day != demo.DAYS[-1]
    if whole:
        lines.append("Total" + ";" * HEADINGS.index("Rate") + comma(total) + ";" * 4)
    else:  # the file is still being written when it is copied
        lines[-1] = lines[-1][:37]
    set_aside[len(lines)] = lines[-1]
    text = "\r\n".join(lines) + ("\r\n" if whole else "")
    told = {"rows_read": len(lines) - 3 - len(blank), "blank_lines": blank, "set_aside": set_aside}
    return text.encode("cp1252"), told


def tickets_file(loads: list[Load]) -> bytes:
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(["Ticket", "Loaded", "Silo", "Mix", "Truck", "Net (t)", "Temp (°C)", "Job"])
    for one in loads:
        when = local(one.at).strftime("%d/%m/%Y %H:%M")
        mass = f"{one.mass_kg / 1000:.2f}"
        read = f"{one.read_c:.0f}"
        writer.writerow(
            [one.ticket, when, f"silo {one.silo}", one.mix, one.truck, mass, read, one.job]
        )
    return out.getvalue().encode("utf-8-sig")


def arrivals_file(loads: list[Load]) -> tuple[bytes, list[dict[str, object]]]:
    """Readings at the paver for about two loads in three, and the truth of each."""
    noise = Noise("arrivals")
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(["Ticket", "Arrived", "Temp (°C)", "Where"])
    truth: list[dict[str, object]] = []
    for one in loads:
        site = demo.SITES[one.job]
        minutes = max(8.0, site.road_min + noise.normal(site.spread_min))
        loss, power = demo.TRUCK_LOSS_K[site.body]
        true = one.true_c - loss * (minutes / 60) ** power * (one.true_c - air_c(one.at)) / 145
        read = true + noise.normal(1.5)
        arrived = one.at + timedelta(minutes=round(minutes))
        if noise.uniform() < 0.35:
            continue
        # The crew's phones write the offset, so the repeated hour is told apart.
        writer.writerow([one.ticket, local(arrived).isoformat(), f"{read:.1f}", "hopper"])
        truth.append({"ticket": str(one.ticket), "delivery_c": round(true, 1)})
    return out.getvalue().encode(), truth


def weather_file() -> bytes:
    noise = Noise("weather")
    lines = [
        "# Invented weather for Harrow Fen plant (invented)",
        "time,air (C),wind (m/s),cloud (%),dew_point (C),rain",
    ]
    at = START
    wind, cloud = 4.5, 60.0
    while at < END:
        wind = min(max(4.5 + 0.8 * (wind - 4.5) + noise.normal(0.8), 0.4), 12)
        cloud = min(max(60 + 0.85 * (cloud - 60) + noise.normal(15), 5), 100)
        air = air_c(at)
        rain = cloud > 92 or between(at, "2026-10-20 19:00", "2026-10-21 04:00")
        dew = air - (0.8 if rain else 1.5 + 0.03 * (100 - cloud))
        stamp = at.astimezone(UTC).strftime("%Y-%m-%dT%H:%M:%SZ")
        wet = "yes" if rain else "no"
        lines.append(f"{stamp},{air:.1f},{wind:.1f},{cloud:.0f},{dew:.1f},{wet}")
        at += timedelta(hours=1)
    return ("\n".join(lines) + "\n").encode()


def forecast_files(weather: bytes) -> dict[str, bytes]:
    """One forecast each morning at 04:00 UTC for 42 hours, wrong by more the further ahead."""
    seen = [line.split(",") for line in weather.decode().splitlines()[2:]]
    files = {}
    for first in range(5, len(seen), 24):  # the file begins at 23:00 UTC
        issued = seen[first][0]
        noise = Noise(f"forecast {issued}")
        air_off, wind_off, cloud_off = noise.normal(0.6), noise.normal(0.1), noise.normal(8)
        lines = [
            "# Invented forecast for Harrow Fen plant (invented)",
            "issued,time,air (C),wind (m/s),cloud (%),dew_point (C),rain",
        ]
        for ahead, (stamp, air, wind, cloud, dew, wet) in enumerate(seen[first : first + 43]):
            grows = 0.4 + ahead / 24
            warm = float(air) + grows * air_off + noise.normal(0.2)
            wind_ms = max(float(wind) * (1 + grows * wind_off), 0.5)
            sky = min(max(float(cloud) + grows * cloud_off, 0), 100)
            below = float(air) - float(dew)
            lines.append(
                f"{issued},{stamp},{warm:.1f},{wind_ms:.1f},{sky:.0f},{warm - below:.1f},{wet}"
            )
        files[f"series/forecast_{issued[:10]}.csv"] = ("\n".join(lines) + "\n").encode()
    return files


def airport_file(weather: bytes) -> bytes:
    """Reports of an invented airport some way off: hourly, ten minutes before the hour, METAR."""
    noise = Noise("airport")
    lines = ["# Invented reports of an invented airport; the letters belong to none"]
    for line in weather.decode().splitlines()[2:]:
        stamp, air, wind, cloud, dew, wet = line.split(",")
        at = datetime.fromisoformat(stamp) - timedelta(minutes=10)
        warm, damp = round(float(air) - 0.4 + noise.normal(0.3)), round(float(dew) - 0.4)
        knots = round(max(float(wind) * 1.05 + noise.normal(0.4), 0) / 0.514444)
        oktas = round(float(cloud) / 12.5)
        layer = "NSC" if oktas == 0 else f"{('FEW', 'SCT', 'BKN', 'OVC')[_layer(oktas)]}018"
        shown = "/".join(
            f"{'M' if one < 0 else ''}{abs(one):02d}" for one in (warm, min(damp, warm))
        )
        rain = "-RA " if wet == "yes" else ""
        lines.append(
            f"{at:%Y%m%d%H%M} METAR XHFN {at:%d%H%M}Z {230 + 10 * (knots % 4):03d}{knots:02d}KT "
            f"9999 {rain}{layer} {shown} Q1011="
        )
    return ("\n".join(lines) + "\n").encode()


def _layer(oktas: int) -> int:
    return 0 if oktas <= 2 else 1 if oktas <= 4 else 2 if oktas <= 7 else 3


def exports() -> tuple[dict[str, bytes], dict[str, object], bytes]:
    """Every file of the demo by its path in the plant folder, the truth, and its minutes."""
    rows, loads = simulate()
    plant_faults(rows)
    files: dict[str, bytes] = {}
    told: dict[str, object] = {}
    for day in demo.DAYS:
        of_day = [row for row in rows if local(row["time"]).strftime("%Y-%m-%d") == day]  # type: ignore[arg-type]
        files[f"logs/plant_{day}.csv"], told[f"plant_{day}.csv"] = day_file(day, of_day)
    files["logs/tickets.csv"] = tickets_file(loads)
    files["logs/arrivals.csv"], deliveries = arrivals_file(loads)
    files["series/weather.csv"] = weather_file()
    files |= forecast_files(files["series/weather.csv"])
    files["series/airport_2026-10.txt"] = airport_file(files["series/weather.csv"])
    truth = {
        "about": "Invented. What the simulator of demo_plant knows and its exports do not say.",
        "start": START.isoformat(),
        "end": END.isoformat(),
        "files": told,
        "faults": _fault_list(),
        "loads": [
            {"ticket": str(one.ticket), "time": one.at.isoformat(), "true_c": round(one.true_c, 1)}
            for one in loads
        ],
        "deliveries": deliveries,
    }
    names = ("true_discharge_c", "true_silo_1_c", "true_silo_2_c")
    minutes = ["time," + ",".join(name.removeprefix("true_") for name in names) + ",moisture"]
    for row in rows:
        if float(row["rate_th"]) > 0:  # type: ignore[arg-type]
            cells = [f"{row[name]:.1f}" for name in names]
            stamp = row["time"].strftime("%Y-%m-%dT%H:%MZ")  # type: ignore[attr-defined]
            minutes.append(f"{stamp},{','.join(cells)},{row['true_moisture']:.4f}")
    return files, truth, ("\n".join(minutes) + "\n").encode()


def _fault_list() -> list[dict[str, str]]:
    faults = [(*demo.STUCK, "stuck"), (*demo.FAHRENHEIT, "unit mix-up")]
    faults += [(signal, start, end, "out of range") for signal, start, end, _ in demo.OUT_OF_RANGE]
    for signal, when, reason in [(s, w, "spike") for s, w, _ in demo.SPIKES] + [
        (s, w, "missing") for s, w, _ in demo.SENTINELS
    ]:
        faults.append(
            (signal, when, (moment(when) + MINUTE).astimezone(ZONE).isoformat()[:16], reason)
        )
    return [
        {
            "signal": signal,
            "reason": reason,
            "start": moment(start).isoformat(),
            "end": moment(end.replace("T", " ")).isoformat(),
        }
        for signal, start, end, reason in faults
    ]


def main(folder: Path) -> None:
    files, truth, minutes = exports()
    for name, raw in files.items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(raw)
    told = Path(__file__).parent / "truth"
    (told / "demo_truth.json").write_text(json.dumps(truth, indent=1) + "\n", "utf-8")
    (told / "demo_minutes.csv").write_bytes(minutes)


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parents[1] / "demo_plant")
