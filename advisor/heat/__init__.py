"""Heat: from the drum to the last roller pass; materials, weather, silo, truck, mat and tank."""

from advisor.heat.conduction import Conduction, conduct, growing_times_s
from advisor.heat.convection import CONVECTION_METHODS, mat_convection_wm2k
from advisor.heat.ground import BaseThermal, contact_temperature_c, granular_base
from advisor.heat.laydown import laydown_needed_c
from advisor.heat.layers import Layer
from advisor.heat.mat import LONGEST_S, Mat, cool_mat, rolling_time_s
from advisor.heat.mat import Criterion as Criterion
from advisor.heat.materials import (
    MixThermal,
    aggregate_heat_jkgk,
    binder_heat_jkgk,
    film_drop_k,
    mix_conductivity_wmk,
    mix_heat_jkgk,
    moisture_drop_k,
)
from advisor.heat.product import mean_temperature_c
from advisor.heat.silo import (
    Silo,
    StoredMix,
    cone_share,
    hold_left_s,
    retained_in_silo,
    stored_mix,
    wall_coefficient_wm2k,
)
from advisor.heat.sky import SKY_METHODS, sky_temperature_c
from advisor.heat.sun import clear_sky_wm2, cloud_share, cos_zenith
from advisor.heat.surface import BaseHistory, Surface, base_history, base_surface_c
from advisor.heat.surroundings import Face, Series
from advisor.heat.tank import (
    BinderTank,
    Setback,
    binder_tank,
    holding_w,
    plan_setback,
    reheat_s,
    tank_after_c,
    tank_area_m2,
)
from advisor.heat.transfer import transfer_drop_k
from advisor.heat.truck import (
    Box,
    ColdBody,
    Faces,
    LoadState,
    load_state,
    retained_in_truck,
    share_below,
    surroundings_shares,
)
from advisor.heat.truck_body import TruckBody, truck_faces
from advisor.heat.wind import OPEN_COUNTRY, Terrain, pressure_share, wind_at_height_ms

__all__ = [
    "CONVECTION_METHODS",
    "LONGEST_S",
    "OPEN_COUNTRY",
    "SKY_METHODS",
    "BaseHistory",
    "BaseThermal",
    "BinderTank",
    "Box",
    "ColdBody",
    "Conduction",
    "Face",
    "Faces",
    "Layer",
    "LoadState",
    "Mat",
    "MixThermal",
    "Series",
    "Setback",
    "Silo",
    "StoredMix",
    "Surface",
    "Terrain",
    "TruckBody",
    "aggregate_heat_jkgk",
    "base_history",
    "base_surface_c",
    "binder_heat_jkgk",
    "binder_tank",
    "clear_sky_wm2",
    "cloud_share",
    "conduct",
    "cone_share",
    "contact_temperature_c",
    "cool_mat",
    "cos_zenith",
    "film_drop_k",
    "granular_base",
    "growing_times_s",
    "hold_left_s",
    "holding_w",
    "laydown_needed_c",
    "load_state",
    "mat_convection_wm2k",
    "mean_temperature_c",
    "mix_conductivity_wmk",
    "mix_heat_jkgk",
    "moisture_drop_k",
    "plan_setback",
    "pressure_share",
    "reheat_s",
    "retained_in_silo",
    "retained_in_truck",
    "rolling_time_s",
    "share_below",
    "sky_temperature_c",
    "stored_mix",
    "surroundings_shares",
    "tank_after_c",
    "tank_area_m2",
    "transfer_drop_k",
    "truck_faces",
    "wall_coefficient_wm2k",
    "wind_at_height_ms",
]
