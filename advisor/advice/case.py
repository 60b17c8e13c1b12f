"""The numbers of the heat path for one situation, from settings and the tables of config/."""

from __future__ import annotations

import math
from datetime import UTC

import numpy as np

from advisor.advice.facts import Weather
from advisor.advice.path import PathCase
from advisor.advice.situation import Situation
from advisor.heat import (
    Terrain,
    TruckBody,
    base_surface_c,
    clear_sky_wm2,
    cloud_share,
    cos_zenith,
    mat_convection_wm2k,
    mix_heat_jkgk,
    sky_temperature_c,
    truck_faces,
    wind_at_height_ms,
)
from advisor.settings.tables import Row, load_table

CONE_OF_DIAMETER = 0.6  # height of a silo cone over the diameter; common practice, no source
_CALM_MS = 0.3  # a calm is never quite still; keeps the log of the wind finite
_LIGHT_AIR_MS = 1.0  # air moves past a truck that stands


def spread(name: str) -> Row:
    """The row ``name`` of config/spreads.yaml."""
    return load_table("spreads").row(name)


def path_case(situation: Situation) -> PathCase:
    """The heat path of ``situation``; its weather and binder must be known."""
    weather, job, mix = situation.weather, situation.job, situation.mix
    assert weather is not None  # noqa: S101 - asked for only where nothing is missing
    plant = situation.facts.folder.plant
    station = load_table("terrain").row(weather.terrain or plant.weather_terrain)
    site = load_table("terrain").row(job.terrain)
    wind = float(
        wind_at_height_ms(
            weather.wind_ms,
            _terrain(site),
            station_height_m=weather.wind_height_m,
            station_terrain=_terrain(station),
        )
    )
    sun, sun_sd = _sun(situation, weather)
    sky = float(sky_temperature_c(weather.air_c, weather.dew_point_c, weather.cloud_of_sky))
    base = _base(situation)
    off_air, off_wind = 0.0, 0.0
    if weather.foretold:
        off_air, off_wind = spread("forecast air")["sd"], spread("forecast wind")["log_sd"]
    wet = situation.base_condition == "wet" or (
        weather.rain and situation.base_condition != "frozen"
    )
    if situation.base_reading_c is not None:
        base_c, base_sd = situation.base_reading_c, spread("base surface measured")["sd"]
    else:
        surface = base_surface_c(weather.air_c, sun, sky, mat_convection_wm2k(wind))
        base_c, base_sd = float(surface.base_c), math.hypot(float(surface.sd_k), off_air)
    family = load_table("mix_families").row(mix.family)
    end_c, end_sd = rolling_end(situation)
    loss = spread("paving loss")
    usual_loss = float(job.paving_loss) if job.paving_loss is not None else loss["usual"]
    body = _body(situation)
    cover = load_table("truck_covers").row(job.truck.cover)
    resistance = cover["resistance"] if cover.get("resistance") is not None else None
    speed = (
        job.haul.distance / job.haul.time
        if job.haul.distance is not None and job.haul.time > 0
        else spread("haul speed")["usual"]
    )
    conveyor, silo = plant.conveyor, situation.silo
    heat = float(mix_heat_jkgk(family["heat_at"], mix.binder_content))
    return PathCase(
        air_c=weather.air_c,
        air_sd_k=math.hypot(spread("air")["sd"], off_air),
        wind_ms=max(wind, _CALM_MS),
        wind_log_sd=math.hypot(site["wind_spread"], off_wind),
        sun_wm2=sun,
        sun_sd_wm2=sun_sd,
        sky_c=sky,
        sky_sd_k=spread("sky")["sd"],
        altitude_m=float(plant.altitude),
        base_c=base_c,
        base_sd_k=base_sd,
        base_conductivity_wmk=base["conductivity"],
        base_conductivity_log_sd=base["spread"],
        base_density_kgm3=base["density"],
        base_heat_jkgk=base["specific_heat"],
        base_latent_jm3=base["latent"],
        film_kgm2=spread("water film")["usual"] if wet else 0.0,
        lift_m=float(job.lift),
        lift_log_sd=spread("lift thickness")["log_sd"],
        convection_log_sd=spread("mat convection")["log_sd"],
        rolling_wanted_s=float(job.rolling_wanted),
        rolling_end_c=end_c,
        rolling_end_sd_k=end_sd,
        paving_loss_k=(
            usual_loss - (loss["usual"] - loss["low"]),
            usual_loss,
            usual_loss + (loss["high"] - loss["usual"]),
        ),
        laid_conductivity_wmk=family["laid_conductivity"],
        laid_density_kgm3=family["laid_density"],
        loose_conductivity_wmk=family["loose_conductivity"],
        loose_density_kgm3=family["loose_density"],
        mix_heat_jkgk=heat,
        conductivity_log_sd=spread("mat conductivity")["log_sd"],
        heat_log_sd=math.hypot(
            spread("mat specific heat")["log_sd"], spread("mat density")["log_sd"]
        ),
        haul_s=float(job.haul.time),
        haul_sd_s=float(job.haul.spread),
        wait_s=max(float(job.wait), 1.0),
        wait_log_sd=load_table("defaults").row("wait at the paver")["log_sd"],
        payload_kg=float(job.truck.payload),
        body_length_m=float(body.length_m),
        body_width_m=float(body.width_m),
        moving_wm2k=_coefficients(body, speed, resistance),
        standing_wm2k=_coefficients(body, max(wind, _LIGHT_AIR_MS), resistance),
        faces_log_sd=load_table("truck_bodies").row(job.truck.body)["wall_spread"],
        hold_s=situation.hold_s,
        silo_kg=max(situation.silo_kg, 1000.0),
        silo_radius_m=float(silo.diameter) / 2.0 if silo else 1.0,
        silo_cone_m=CONE_OF_DIAMETER * float(silo.diameter) if silo else 1.0,
        silo_wm2k=float(silo.wall_u) if silo else 0.0,
        silo_log_sd=spread("silo wall doubt")["log_sd"],
        rate_kgs=situation.rate_kgs,
        conveyor_length_m=float(conveyor.length) if conveyor else 0.0,
        conveyor_girth_m=float(conveyor.girth) if conveyor else 0.0,
        conveyor_wm2k=float(conveyor.u) if conveyor else 0.0,
    )


def rolling_end(situation: Situation) -> tuple[float, float]:
    """Temperature [C] below which rolling adds no density, and its standard deviation [K]."""
    job, binder = situation.job, situation.binder
    if job.rolling_end is not None:
        return float(job.rolling_end), 0.0
    row = load_table("defaults").row("end of rolling")
    modified = binder is not None and binder.modified
    return row["modified" if modified else "plain"], row["sd"]


def _terrain(row: Row) -> Terrain:
    return Terrain(row["exponent"], row["depth"])


def _sun(situation: Situation, weather: Weather) -> tuple[float, float]:
    """Sun on the horizontal [W/m2] at the paving site, and its standard deviation."""
    plant, job = situation.facts.folder.plant, situation.job
    at = situation.at.astimezone(UTC)
    latitude = plant.latitude if job.latitude is None else job.latitude
    longitude = plant.longitude if job.longitude is None else job.longitude
    hour = at.hour + at.minute / 60.0
    up = cos_zenith(at.timetuple().tm_yday, hour, float(latitude), float(longitude))
    clear = float(clear_sky_wm2(up, float(plant.altitude)))
    share, doubt = cloud_share(weather.cloud_of_sky)
    return clear * float(share), clear * float(doubt)


def _base(situation: Situation) -> dict[str, float]:
    row = load_table("bases").row(situation.job.base.material)
    frozen = situation.base_condition == "frozen" and isinstance(row.get("frozen"), dict)
    part = row["frozen"] if frozen else row
    return {
        "conductivity": part["conductivity"],
        "density": part["density"],
        "specific_heat": part["specific_heat"],
        "latent": part["latent"] if frozen else 0.0,
        "spread": row["conductivity_spread"],
    }


def _body(situation: Situation) -> TruckBody:
    row = load_table("truck_bodies").row(situation.job.truck.body)
    return TruckBody(
        row["length"], row["width"], row["wall_resistance"], row["floor_resistance"], row["plate"]
    )


def _coefficients(
    body: TruckBody, speed_ms: float, cover_m2kw: float | None
) -> tuple[float, float, float, float, float]:
    faces = truck_faces(body, speed_ms, cover_m2kw=cover_m2kw)
    front, rear, side, top, floor = (
        float(np.asarray(part))
        for part in (
            faces.front_wm2k, faces.rear_wm2k, faces.side_wm2k, faces.top_wm2k, faces.floor_wm2k
        )
    )  # fmt: skip
    return front, rear, side, top, floor
