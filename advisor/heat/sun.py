"""Sun on the horizontal: where the sun stands, what a clear sky lets through, what cloud takes."""

from __future__ import annotations

from types import MappingProxyType

import numpy as np

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers


def declination_deg(day_of_year: Numbers) -> Floats:
    """Declination of the sun [deg] on ``day_of_year``, 1 is 1 January (Spencer 1971)."""
    g = _day_angle(day_of_year)
    radians = (
        0.006918
        - 0.399912 * np.cos(g)
        + 0.070257 * np.sin(g)
        - 0.006758 * np.cos(2 * g)
        + 0.000907 * np.sin(2 * g)
        - 0.002697 * np.cos(3 * g)
        + 0.00148 * np.sin(3 * g)
    )
    return np.asarray(np.degrees(radians))


def equation_of_time_s(day_of_year: Numbers) -> Floats:
    """Sun time minus mean time [s] on ``day_of_year`` (Spencer 1971)."""
    g = _day_angle(day_of_year)
    terms = (
        0.000075
        + 0.001868 * np.cos(g)
        - 0.032077 * np.sin(g)
        - 0.014615 * np.cos(2 * g)
        - 0.04089 * np.sin(2 * g)
    )
    return np.asarray(229.18 * 60.0 * terms)


def cos_zenith(
    day_of_year: Numbers, utc_h: Numbers, latitude_deg: Numbers, longitude_deg: Numbers
) -> Floats:
    """Cosine [1] of the angle of the sun from straight up; below 0 when it has set.

    Args:
        day_of_year: 1 is 1 January, (...) [1].
        utc_h: hour of the day in UTC with its fraction, (...) [h].
        latitude_deg: north positive, (...) [deg].
        longitude_deg: east positive, (...) [deg].

    Raises FaultyInput for a latitude that cannot be.
    Source: Spencer 1971 for declination and equation of time, from memory.
    """
    equation_h = equation_of_time_s(day_of_year) / 3600.0
    solar_h = np.asarray(utc_h, float) + np.asarray(longitude_deg, float) / 15.0 + equation_h
    return cos_zenith_solar(day_of_year, solar_h, latitude_deg)


def cos_zenith_solar(day_of_year: Numbers, solar_h: Numbers, latitude_deg: Numbers) -> Floats:
    """Cosine [1] of the angle of the sun from straight up at ``solar_h``, 12 being solar noon."""
    latitude = np.radians(np.asarray(latitude_deg, float))
    if (np.abs(latitude) > np.pi / 2 + 1e-9).any():
        raise FaultyInput.of(
            "latitude-impossible", "Latitude lies between -90 and 90 deg.", field="latitude_deg"
        )
    declination = np.radians(declination_deg(day_of_year))
    hour_angle = np.radians(15.0 * (np.asarray(solar_h, float) - 12.0))
    return np.asarray(
        np.sin(latitude) * np.sin(declination)
        + np.cos(latitude) * np.cos(declination) * np.cos(hour_angle)
    )


def clear_sky_wm2(cos_zenith_1: Numbers, altitude_m: Numbers = 0.0) -> Floats:
    """Sun on the horizontal [W/m2] under a clear sky.

    Args:
        cos_zenith_1: cosine of the angle of the sun from straight up, (...) [1].
        altitude_m: height above the sea; 5 % more sun each kilometre (from memory), (...) [m].

    Source: Haurwitz 1945, 1098 c exp(-0.059/c), as given by an open solar library.
    """
    cosine = np.asarray(cos_zenith_1, float)
    up = np.maximum(cosine, 1e-6)
    high = 1.0 + 5e-5 * np.asarray(altitude_m, float)
    return np.asarray(np.where(cosine > 0, 1098.0 * up * np.exp(-0.059 / up) * high, 0.0))


def kasten_czeplak_share(cloud_of_sky: Numbers) -> Floats:
    """Share [1] of the clear-sky sun that passes cloud: 1 - 0.75 n^3.4 (Kasten and Czeplak 1980).

    ``cloud_of_sky`` [1] from 0 to 1; constants from memory.
    """
    return np.asarray(1.0 - 0.75 * _cloud(cloud_of_sky) ** 3.4)


def linear_cloud_share(cloud_of_sky: Numbers) -> Floats:
    """Share [1] of the clear-sky sun that passes cloud: 0.35 + 0.65 (1 - n).

    As in an open solar library's conversion of cloud cover; ``cloud_of_sky`` [1] from 0 to 1.
    """
    return np.asarray(0.35 + 0.65 * (1.0 - _cloud(cloud_of_sky)))


CLOUD_METHODS = MappingProxyType(
    {"Kasten-Czeplak": kasten_czeplak_share, "linear": linear_cloud_share}
)


def cloud_share(cloud_of_sky: Numbers) -> tuple[Floats, Floats]:
    """Share [1] of the clear-sky sun that passes cloud, and its standard deviation [1].

    The mean of two relations and half their difference: at half cover they give 0.93 and 0.68, and
    neither is known to be right for a given cloud.

    Args:
        cloud_of_sky: share of the sky under cloud, (...) [1].

    Raises FaultyInput outside 0 to 1.
    """
    one, two = kasten_czeplak_share(cloud_of_sky), linear_cloud_share(cloud_of_sky)
    return np.asarray((one + two) / 2.0), np.asarray(np.abs(one - two) / 2.0)


def _day_angle(day_of_year: Numbers) -> Floats:
    return np.asarray(2.0 * np.pi * (np.asarray(day_of_year, float) - 1.0) / 365.0)


def _cloud(cloud_of_sky: Numbers) -> Floats:
    cloud = np.asarray(cloud_of_sky, float)
    if (cloud < 0).any() or (cloud > 1).any():
        raise FaultyInput.of(
            "cloud-impossible",
            "Cloud is a share of the sky from 0 to 1.",
            "Divide oktas by 8 and tenths by 10.",
            field="cloud_of_sky",
            value=f"{cloud.min():g} to {cloud.max():g}",
        )
    return cloud
