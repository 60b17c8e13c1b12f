"""One name, symbol, unit and plausible range for every quantity.

Column names, form labels and docstrings use these names. A name ends with its inside unit; a
difference of temperature ends with ``_delta_k``.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Quantity:
    """A quantity: ``kind`` is its family of units, ``low`` to ``high`` what is believable."""

    name: str
    symbol: str
    label: str
    kind: str
    unit: str
    low: float
    high: float
    meaning: str


def _all(*rows: tuple[str, str, str, str, str, float, float, str]) -> dict[str, Quantity]:
    return {row[0]: Quantity(*row) for row in rows}


# Believable ranges are common practice at hot-mix plants, no single source; a reading outside is
# set aside with the reason, a setting outside is refused.
QUANTITIES: dict[str, Quantity] = _all(
    # the heat path, in the order the mix travels
    (
        "binder_tank_c",
        "T_b",
        "Binder tank",
        "temperature",
        "C",
        20,
        230,
        "temperature of the binder in its tank",
    ),
    (
        "hot_aggregate_c",
        "T_agg",
        "Hot aggregate",
        "temperature",
        "C",
        100,
        450,
        "temperature of the dried aggregate before binder is added",
    ),
    (
        "discharge_c",
        "T_d",
        "Drum discharge",
        "temperature",
        "C",
        90,
        250,
        "temperature of the mix as it leaves the drum or mixer",
    ),
    (
        "silo_c",
        "T_s",
        "Silo",
        "temperature",
        "C",
        60,
        230,
        "temperature of the mix stored in the silo",
    ),
    (
        "load_out_c",
        "T_l",
        "Load-out",
        "temperature",
        "C",
        60,
        230,
        "temperature of the mix as it drops into the truck",
    ),
    (
        "delivery_c",
        "T_p",
        "At paver",
        "temperature",
        "C",
        60,
        220,
        "mean temperature of the load, remixed, as it reaches the paver",
    ),
    (
        "laydown_c",
        "T_0",
        "Behind screed",
        "temperature",
        "C",
        60,
        210,
        "temperature of the mat just behind the screed",
    ),
    (
        "rolling_end_c",
        "T_e",
        "End of rolling",
        "temperature",
        "C",
        50,
        130,
        "temperature of the mat below which rolling adds no density",
    ),
    (
        "stack_c",
        "T_st",
        "Stack",
        "temperature",
        "C",
        40,
        230,
        "temperature of the exhaust gas in the stack",
    ),
    ("air_c", "T_a", "Air", "temperature", "C", -40, 55, "air temperature in the shade"),
    (
        "base_c",
        "T_g",
        "Base surface",
        "temperature",
        "C",
        -30,
        75,
        "surface temperature of the layer that is paved on",
    ),
    (
        "temperature_delta_k",
        "dT",
        "Difference",
        "temperature_delta",
        "K",
        -200,
        200,
        "difference of two temperatures",
    ),
    # binder
    (
        "viscosity_pas",
        "eta",
        "Viscosity",
        "viscosity",
        "Pa.s",
        1e-3,
        1e9,
        "dynamic viscosity of the binder",
    ),
    (
        "kinematic_viscosity_m2s",
        "nu",
        "Kinematic viscosity",
        "kinematic_viscosity",
        "m2/s",
        1e-6,
        1.0,
        "dynamic viscosity over density",
    ),
    ("density_kgm3", "rho", "Density", "density", "kg/m3", 800, 3000, "mass over volume"),
    (
        "penetration_dmm",
        "pen",
        "Penetration",
        "penetration",
        "dmm",
        1,
        500,
        "needle penetration at 25 C, 100 g, 5 s",
    ),
    (
        "softening_point_c",
        "T_rb",
        "Softening point",
        "temperature",
        "C",
        25,
        110,
        "ring-and-ball softening point",
    ),
    (
        "flash_point_c",
        "T_f",
        "Flash point",
        "temperature",
        "C",
        150,
        400,
        "flash point by the method named",
    ),
    (
        "binder_of_mix",
        "b",
        "Binder content",
        "fraction",
        "1",
        0.02,
        0.12,
        "binder as a fraction of the mass of the mix",
    ),
    # stone, water, recycled material
    (
        "moisture_of_dry_mass",
        "w",
        "Moisture",
        "fraction",
        "1",
        0.0,
        0.2,
        "mass of water over mass of dry stone",
    ),
    (
        "rap_of_mix",
        "r",
        "RAP share",
        "fraction",
        "1",
        0.0,
        0.8,
        "reclaimed asphalt as a fraction of the mass of the mix",
    ),
    # plant
    ("rate_kgs", "m", "Mix rate", "mass_rate", "kg/s", 0, 250, "mass of mix made per time"),
    ("mass_kg", "M", "Mass", "mass", "kg", 0, 1e9, "mass"),
    ("silo_kg", "M_s", "Silo content", "mass", "kg", 0, 1e6, "mass of mix in the silo"),
    ("fuel_w", "P", "Burner heat", "power", "W", 0, 1e8, "heat release of the burner, net"),
    ("burner_load", "B", "Burner", "fraction", "1", 0, 1, "burner load as a fraction of rating"),
    # weather and paving
    ("wind_ms", "v", "Wind", "speed", "m/s", 0, 40, "wind speed at the height stated"),
    ("cloud_of_sky", "n", "Cloud", "fraction", "1", 0, 1, "share of the sky under cloud"),
    ("dew_point_c", "T_dp", "Dew point", "temperature", "C", -50, 40, "dew point of the air"),
    (
        "irradiance_wm2",
        "G",
        "Sun",
        "irradiance",
        "W/m2",
        0,
        1400,
        "solar irradiance on the horizontal",
    ),
    ("lift_m", "d", "Lift", "length", "m", 0.01, 0.35, "compacted thickness of the layer"),
    (
        "haul_s",
        "t_h",
        "Haul",
        "duration",
        "s",
        0,
        43200,
        "time from load-out to the start of unloading",
    ),
    (
        "rolling_s",
        "t_r",
        "Rolling time",
        "duration",
        "s",
        0,
        14400,
        "time from laying until the end temperature of rolling",
    ),
    (
        "hold_s",
        "t_s",
        "Time in silo",
        "duration",
        "s",
        0,
        345600,
        "time the mix spends in the silo",
    ),
)


def quantity(name: str) -> Quantity:
    """The entry called ``name``; KeyError lists nothing, so ask for names that exist."""
    return QUANTITIES[name]
