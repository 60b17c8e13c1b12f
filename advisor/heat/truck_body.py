"""What stands between a load and the air: plates, insulation, cover, and the wind along them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.heat.arrays import Floats, Numbers
from advisor.heat.convection import plate_turbulent_wm2k
from advisor.heat.truck import Faces

# Share of the flow along a free plate that each face of a body gets: ribs and mudguards shelter
# the sides, the cab the front, the rear lies in the wake, the floor between wheels (from memory).
_EXPOSURE = {"front": 0.7, "rear": 0.5, "side": 0.7, "top": 1.0, "floor": 0.6}
_CALM_WM2K = 6.0  # natural convection of a warm body, 5 to 7 (derived)
_RADIATED_WM2K = 6.5  # painted steel at 60 to 100 C, 6 to 8 (derived)
_RADIATED_BARE_WM2K = 8.0  # bare mix at 100 to 150 C, 7 to 9 (derived)


@dataclass(frozen=True)
class TruckBody:
    """Body of a truck; fields broadcast over cases.

    Resistances [m2K/W] of insulation at the temperature of the load, 15 to 25 % below what is
    stated at 20 C (from memory); a bare plate has none. ``plate_jm2k`` is the heat capacity of
    the plate that touches the mix. ``length_m`` and ``width_m`` are of its inside.
    """

    length_m: Numbers
    width_m: Numbers
    wall_m2kw: Numbers
    floor_m2kw: Numbers
    plate_jm2k: Numbers


def truck_faces(
    body: TruckBody,
    speed_ms: Numbers,
    *,
    cover_m2kw: Numbers | None,
    factor: Numbers = 1.0,
) -> Faces:
    """Coefficients [W/m2K] from the mix to the air through each face of a truck.

    Args:
        body: the truck body.
        speed_ms: speed of the truck, or of the wind where it stands and that is more, (...) [m/s].
        cover_m2kw: resistance of the cover and the air under it, None where bare, (...) [m2K/W].
        factor: doubt of the coefficients outside, (...) [1].

    Source: turbulent plate along the body (see ``convection``), sheltered 0.5 to 0.7 (from memory),
    no less than natural convection 6, and radiation of painted steel 6.5 or of bare mix 8
    (derived).
    """

    def outside(face: str, radiated: float = _RADIATED_WM2K) -> Floats:
        flow = plate_turbulent_wm2k(np.asarray(speed_ms, float), body.length_m)
        moved = np.maximum(_EXPOSURE[face] * flow, _CALM_WM2K)
        return np.asarray((moved + radiated) * np.asarray(factor, float))

    def through(face: str, resistance: Numbers) -> Floats:
        return np.asarray(1.0 / (np.asarray(resistance, float) + 1.0 / outside(face)))

    return Faces(
        front_wm2k=through("front", body.wall_m2kw),
        rear_wm2k=through("rear", body.wall_m2kw),
        side_wm2k=through("side", body.wall_m2kw),
        top_wm2k=(
            outside("top", _RADIATED_BARE_WM2K)
            if cover_m2kw is None
            else through("top", cover_m2kw)
        ),
        floor_wm2k=through("floor", body.floor_m2kw),
    )
