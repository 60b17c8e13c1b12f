"""The heat path of one or many cases, every uncertain input drawn once and carried through.

Arrays only: a PathCase is the numbers of one situation with their doubts; ``draw_path`` runs all
cases at once, a column per draw. The same name is the same draw in every case.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from advisor.advice.result import Point
from advisor.advice.solve import Leg
from advisor.heat import (
    BaseThermal,
    Box,
    Faces,
    Mat,
    MixThermal,
    Silo,
    laydown_needed_c,
    mat_convection_wm2k,
    retained_in_silo,
    retained_in_truck,
    rolling_time_s,
    transfer_drop_k,
)
from advisor.heat.mat import Criterion, some_cases
from advisor.sampling import Draws

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class PathCase:
    """The heat path of one situation; ``_sd`` is a standard deviation, ``_log_sd`` one of the log.

    Triangles are (least, usual, most). Coefficients of the faces include body and cover.
    """

    # weather at the paver
    air_c: float
    air_sd_k: float
    wind_ms: float
    wind_log_sd: float
    sun_wm2: float
    sun_sd_wm2: float
    sky_c: float
    sky_sd_k: float
    altitude_m: float
    # paving
    base_c: float
    base_sd_k: float
    base_conductivity_wmk: float
    base_conductivity_log_sd: float
    base_density_kgm3: float
    base_heat_jkgk: float
    base_latent_jm3: float
    film_kgm2: float
    lift_m: float
    lift_log_sd: float
    convection_log_sd: float
    rolling_wanted_s: float
    rolling_end_c: float
    rolling_end_sd_k: float
    paving_loss_k: tuple[float, float, float]
    # mix, laid and loose
    laid_conductivity_wmk: float
    laid_density_kgm3: float
    loose_conductivity_wmk: float
    loose_density_kgm3: float
    mix_heat_jkgk: float
    conductivity_log_sd: float
    heat_log_sd: float
    # haul
    haul_s: float
    haul_sd_s: float
    wait_s: float
    wait_log_sd: float
    payload_kg: float
    body_length_m: float
    body_width_m: float
    moving_wm2k: tuple[float, float, float, float, float]  # front, rear, side, top, floor
    standing_wm2k: tuple[float, float, float, float, float]
    faces_log_sd: float
    # silo and conveyor
    hold_s: tuple[float, float, float]
    silo_kg: float
    silo_radius_m: float
    silo_cone_m: float
    silo_wm2k: float
    silo_log_sd: float
    rate_kgs: float
    conveyor_length_m: float
    conveyor_girth_m: float
    conveyor_wm2k: float


@dataclass(frozen=True, eq=False)
class PathDraws:
    """What the draws of one case say; arrays (count,).

    ``need_c`` [C] is the temperature needed at delivery so that rolling takes as long as wanted;
    ``inputs`` are the drawn inputs by name, for the ranking of doubts.
    """

    legs: dict[Point, Leg]
    need_c: Floats
    inputs: dict[str, Floats]
    mat: Mat
    paving_loss_k: Floats
    rolling_end_c: Floats
    retained_per_wait: tuple[Floats, Floats]  # wait [s] and share kept, median case
    case: PathCase


# Words a reader sees for what was drawn, in the ranking of doubts.
DRAWN = {
    "air": "air temperature",
    "wind": "wind at the mat",
    "sun": "sun",
    "sky": "sky",
    "base": "base temperature",
    "base material": "base material",
    "lift": "lift thickness",
    "convection": "heat loss of the mat to the air",
    "rolling end": "end of rolling",
    "paving loss": "drop from truck to screed",
    "conductivity": "conductivity of the mix",
    "heat capacity": "heat capacity of the mix",
    "haul": "haul time",
    "wait": "wait at the paver",
    "truck": "heat loss of the truck",
    "hold": "time in the silo",
    "silo": "heat loss of the silo",
}


def draw_path(cases: Sequence[PathCase], draws: Draws, criterion: Criterion) -> list[PathDraws]:
    """The heat path of every case, in the order given.

    ``criterion`` says which temperature of the mat must stay above the end of rolling.
    """
    one = _Columns(cases)
    d = draws
    air = d.normal("air", one["air_c"], one["air_sd_k"])
    wind = d.lognormal("wind", one["wind_ms"], one["wind_log_sd"])
    sun = np.maximum(d.normal("sun", one["sun_wm2"], one["sun_sd_wm2"]), 0.0)
    sky = np.minimum(d.normal("sky", one["sky_c"], one["sky_sd_k"]), air)
    base_c = d.normal("base", one["base_c"], one["base_sd_k"])
    base_log = d.lognormal("base material", 1.0, one["base_conductivity_log_sd"])
    lift = d.lognormal("lift", one["lift_m"], one["lift_log_sd"])
    convection = d.lognormal("convection", 1.0, one["convection_log_sd"])
    end = d.normal("rolling end", one["rolling_end_c"], one["rolling_end_sd_k"])
    loss = d.triangular("paving loss", *_three(one["paving_loss_k"]))
    conductivity = d.lognormal("conductivity", 1.0, one["conductivity_log_sd"])
    heat = d.lognormal("heat capacity", one["mix_heat_jkgk"], one["heat_log_sd"])
    haul = np.maximum(d.normal("haul", one["haul_s"], one["haul_sd_s"]), 0.25 * _col(one["haul_s"]))
    wait = d.lognormal("wait", one["wait_s"], one["wait_log_sd"])
    truck = d.lognormal("truck", 1.0, one["faces_log_sd"])
    hold = d.triangular("hold", *_three(one["hold_s"]))
    silo_factor = d.lognormal("silo", 1.0, one["silo_log_sd"])

    shape = np.broadcast_shapes(air.shape, (len(cases), d.count))
    laid = MixThermal(
        conductivity * _col(one["laid_conductivity_wmk"]), _col(one["laid_density_kgm3"]), heat
    )
    base = BaseThermal(
        base_log * _col(one["base_conductivity_wmk"]),
        _col(one["base_density_kgm3"]),
        _col(one["base_heat_jkgk"]),
        _col(one["base_latent_jm3"]),
    )
    mat = Mat(
        lift_m=lift,
        base_c=base_c,
        air_c=air,
        coefficient_wm2k=convection * mat_convection_wm2k(wind, altitude_m=_col(one["altitude_m"])),
        sun_wm2=sun,
        sky_c=sky,
        mix=laid,
        base=base,
        film_kgm2=_col(one["film_kgm2"]),
    )
    flat = _flat_mat(mat, shape)
    wanted = np.broadcast_to(_col(one["rolling_wanted_s"]), shape).ravel()
    laydown = laydown_needed_c(flat, wanted, end.ravel(), criterion=criterion).reshape(shape)
    need = laydown + loss

    loose = MixThermal(
        conductivity * _col(one["loose_conductivity_wmk"]), _col(one["loose_density_kgm3"]), heat
    )
    box = Box.of_payload(
        _col(one["payload_kg"]),
        _col(one["body_length_m"]),
        _col(one["body_width_m"]),
        _col(one["loose_density_kgm3"]),
    )
    moving, standing = _faces(one["moving_wm2k"], truck), _faces(one["standing_wm2k"], truck)
    kept_truck = retained_in_truck(haul, box, moving, loose, standing_s=wait, standing=standing)
    silo = Silo.holding(
        _col(one["silo_kg"]),
        _col(one["silo_radius_m"]),
        _col(one["silo_cone_m"]),
        _col(one["loose_density_kgm3"]),
        wall_wm2k=silo_factor * _col(one["silo_wm2k"]),
        top_wm2k=silo_factor * _col(one["silo_wm2k"]),
        cone_wm2k=silo_factor * _col(one["silo_wm2k"]),
    )
    kept_silo = retained_in_silo(hold, silo, loose)
    # The drop is proportional to the excess, so that of one kelvin is the share lost.
    kept_conveyor = 1.0 - transfer_drop_k(
        1.0,
        0.0,
        _col(one["rate_kgs"]),
        _col(one["conveyor_length_m"]),
        _col(one["conveyor_girth_m"]),
        _col(one["conveyor_wm2k"]),
        heat,
    )
    kept_conveyor, kept_silo, kept_truck, need = (
        np.broadcast_to(part, shape) for part in (kept_conveyor, kept_silo, kept_truck, need)
    )
    drawn = {name: d.scores(name) for name in DRAWN}
    waits = np.array([0.0, 600.0, 1200.0, 1800.0, 3600.0, 7200.0])
    return [
        PathDraws(
            legs=_legs(air[at], kept_conveyor[at], kept_silo[at], kept_truck[at]),
            need_c=need[at],
            inputs=drawn,
            mat=_one_mat(flat, at, d.count),
            paving_loss_k=loss[at],
            rolling_end_c=end[at],
            retained_per_wait=(waits, _kept_by_wait(cases[at], waits)),
            case=cases[at],
        )
        for at in range(len(cases))
    ]


def rolling_times_s(
    path: PathDraws, delivery_c: Floats, criterion: Criterion, most: int | None = None
) -> Floats:
    """Rolling time [s] of every draw for loads that arrive at ``delivery_c`` (count,) [C].

    ``most`` takes no more than so many of the draws: a band needs fewer than a bound.
    """
    few = slice(most)
    laid = (delivery_c - path.paving_loss_k)[few]
    mat = some_cases(path.mat, delivery_c.shape, few)
    return rolling_time_s(mat, laid, path.rolling_end_c[few], criterion=criterion)


def _kept_by_wait(case: PathCase, waits_s: Floats) -> Floats:
    """Share of its excess a load of the usual case keeps after waiting ``waits_s`` [s]."""
    loose = MixThermal(case.loose_conductivity_wmk, case.loose_density_kgm3, case.mix_heat_jkgk)
    box = Box.of_payload(
        case.payload_kg, case.body_length_m, case.body_width_m, case.loose_density_kgm3
    )
    return retained_in_truck(
        case.haul_s,
        box,
        Faces(*case.moving_wm2k),
        loose,
        standing_s=waits_s,
        standing=Faces(*case.standing_wm2k),
    )


def _legs(air_c: Floats, conveyor: Floats, silo: Floats, truck: Floats) -> dict[Point, Leg]:
    def leg(kept: Floats) -> Leg:
        return Leg((1.0 - kept) * air_c, kept)

    return {
        "discharge": leg(np.ones_like(conveyor)),
        "silo": leg(conveyor),
        "load_out": leg(conveyor * silo),
        "delivery": leg(conveyor * silo * truck),
    }


class _Columns(dict[str, Floats]):
    """The cases turned into one array per field, the cases along the first axis."""

    def __init__(self, cases: Sequence[PathCase]) -> None:
        super().__init__(
            {
                one.name: np.array([getattr(case, one.name) for case in cases], float)
                for one in fields(PathCase)
            }
        )


def _col(values: Floats) -> Floats:
    return np.asarray(values)[..., None]


def _three(values: Floats) -> tuple[Floats, Floats, Floats]:
    return values[:, 0], values[:, 1], values[:, 2]


def _faces(coefficients: Floats, factor: Floats) -> Faces:
    return Faces(*(factor * _col(coefficients[:, face]) for face in range(5)))


def _flat_mat(mat: Mat, shape: tuple[int, ...]) -> Mat:
    """The mat with every field spread over all cases and draws, in one row."""

    def flat(value: object) -> object:
        if value is None:
            return None
        return np.ascontiguousarray(np.broadcast_to(np.asarray(value, float), shape)).ravel()

    return _each_field(mat, flat)


def _one_mat(flat: Mat, case: int, count: int) -> Mat:
    """The draws of one case out of a flat mat."""

    def part(value: object) -> object:
        return None if value is None else np.asarray(value)[case * count : (case + 1) * count]

    return _each_field(flat, part)


def _each_field(mat: Mat, change: object) -> Mat:
    def changed(part: object) -> dict[str, object]:
        return {
            one.name: change(getattr(part, one.name))  # type: ignore[operator]
            for one in fields(part)  # type: ignore[arg-type]
            if one.name not in ("mix", "base")
        }

    return Mat(
        **changed(mat),  # type: ignore[arg-type]
        mix=MixThermal(**changed(mat.mix)),  # type: ignore[arg-type]
        base=BaseThermal(**changed(mat.base)),  # type: ignore[arg-type]
    )
