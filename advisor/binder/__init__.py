"""Binder: laboratory readings to a viscosity curve with its uncertainty, and what follows."""

from advisor.binder.capillary import (
    Bulb,
    bulb_disagreement,
    kinematic_capillary_reading,
    kinematic_value_reading,
    vacuum_capillary_reading,
)
from advisor.binder.curve import ViscosityCurve, curve_avts, curve_through
from advisor.binder.density import (
    density_15c_from_density,
    density_15c_from_specific_gravity,
    density_kgm3,
    dynamic_from_kinematic_pas,
    kinematic_from_dynamic_m2s,
)
from advisor.binder.fit import (
    AvtsFit,
    AvtsPrior,
    Suspicion,
    fit_avts,
    prior_from_viscosities,
    suspect_reading,
)
from advisor.binder.laws import temperature_avts, viscosity_avts
from advisor.binder.readings import Precision, Reading, Sample, viscosity_value_reading
from advisor.binder.rotational import SPINDLES, rotational_reading
from advisor.binder.windows import ViscosityTarget, Window, equiviscous_window, window_for

__all__ = [
    "SPINDLES",
    "AvtsFit",
    "AvtsPrior",
    "Bulb",
    "Precision",
    "Reading",
    "Sample",
    "Suspicion",
    "ViscosityCurve",
    "ViscosityTarget",
    "Window",
    "bulb_disagreement",
    "curve_avts",
    "curve_through",
    "density_15c_from_density",
    "density_15c_from_specific_gravity",
    "density_kgm3",
    "dynamic_from_kinematic_pas",
    "equiviscous_window",
    "fit_avts",
    "kinematic_capillary_reading",
    "kinematic_from_dynamic_m2s",
    "kinematic_value_reading",
    "prior_from_viscosities",
    "rotational_reading",
    "suspect_reading",
    "temperature_avts",
    "vacuum_capillary_reading",
    "viscosity_avts",
    "viscosity_value_reading",
    "window_for",
]
