"""What a dryer does at one moment: feed, air, temperatures and losses. Any field may be an array.

All masses are per kilogram of mix, residual water left out; moisture is on dry mass.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.fuel import Fuel
from advisor.dryer.materials import BINDER_RELATIVE_DENSITY, Aggregate
from advisor.dryer.properties import STANDARD_PRESSURE_PA, Values
from advisor.errors import Fault, raise_if_any

Kind = Literal["counterflow", "parallel", "batch"]
RapPoint = Literal["collar", "drum", "elevator", "mixer"]

# Where recycled material is added, and whether the steam it gives off leaves through the stack
# (else it leaves the mixer at the temperature of the mix, past the dryer's fan). Common practice.
STEAM_TO_STACK: dict[RapPoint, bool] = {
    "collar": True,  # ring into the drum, behind the flame
    "drum": True,  # with the virgin aggregate, heated by the gas as well
    "elevator": True,  # onto the hot aggregate, vented into the filter
    "mixer": False,  # into the mixer or its weigh hopper, vented apart
}


@dataclass(frozen=True, eq=False)
class Fraction:
    """A cold-feed fraction: dry stone over mix [1], water over dry stone [1], temperature [C]."""

    of_mix: ArrayLike
    moisture_of_dry_mass: ArrayLike
    cold_c: ArrayLike
    aggregate: Aggregate


@dataclass(frozen=True, eq=False)
class Rap:
    """Recycled material as it is added.

    ``of_mix``: dry, over mix [1]; ``moisture_of_dry_mass`` [1]; ``cold_c``: its temperature [C];
    ``binder_of_rap``: binder over dry RAP [1]; ``point``: where it is added.
    """

    of_mix: ArrayLike
    moisture_of_dry_mass: ArrayLike
    cold_c: ArrayLike
    binder_of_rap: ArrayLike
    aggregate: Aggregate
    point: RapPoint = "collar"


@dataclass(frozen=True, eq=False)
class Filler:
    """Filler added cold and dry: over mix [1], temperature [C]."""

    of_mix: ArrayLike
    cold_c: ArrayLike
    aggregate: Aggregate


@dataclass(frozen=True, eq=False)
class Feed:
    """Everything that becomes a kilogram of mix; the shares sum to 1.

    ``binder_of_mix``: new binder [1]; ``binder_c``: as it is added [C]; ``rap`` and ``filler`` may
    be several or none; ``residual_of_mix``: water still in the mix [kg/kg].
    """

    fractions: tuple[Fraction, ...]
    binder_of_mix: ArrayLike
    binder_c: ArrayLike
    rap: tuple[Rap, ...] = ()
    filler: tuple[Filler, ...] = ()
    residual_of_mix: ArrayLike = 0.0
    binder_relative_density: ArrayLike = BINDER_RELATIVE_DENSITY

    @property
    def water_kg_kg(self) -> Values:
        """Water that enters [kg/kg mix]."""
        wet: tuple[Fraction | Rap, ...] = (*self.fractions, *self.rap)
        return np.asarray(sum(_array(s.of_mix) * _array(s.moisture_of_dry_mass) for s in wet))

    @property
    def aggregate_of_mix(self) -> Values:
        """Dry virgin aggregate [kg/kg mix]."""
        return np.asarray(sum(_array(one.of_mix) for one in self.fractions))


@dataclass(frozen=True, eq=False)
class Air:
    """Air around the plant: temperature [C], relative humidity [1], pressure [Pa]."""

    air_c: ArrayLike
    relative_humidity: ArrayLike
    pressure_pa: ArrayLike = STANDARD_PRESSURE_PA


@dataclass(frozen=True, eq=False)
class Operation:
    """A dryer at work.

    ``discharge_c``: mix as it leaves drum or mixer [C]; ``stack_c``: gas as it leaves [C];
    ``air_ratio``: all air that grows with the fuel, burner excess and leakage, over the air just
    needed [1]; ``burner_air_ratio``: the part through the burner, only to tell excess from leakage
    [1], ``None`` counts all as excess; ``leakage_air_kg_kg``: further dry air that does not grow
    with the fuel [kg/kg mix]; ``casing_of_net``: loss as a share of net fuel heat [1];
    ``casing_j_kg``: loss that does not grow with the fuel [J/kg mix]; ``transfer_drop_k``: drop of
    the hot aggregate between dryer and mixer [K], 0 in a drum mixer.
    """

    fuel: Fuel
    feed: Feed
    air: Air
    discharge_c: ArrayLike
    stack_c: ArrayLike
    air_ratio: ArrayLike
    casing_of_net: ArrayLike
    kind: Kind = "counterflow"
    casing_j_kg: ArrayLike = 0.0
    leakage_air_kg_kg: ArrayLike = 0.0
    burner_air_ratio: ArrayLike | None = None
    transfer_drop_k: ArrayLike = 0.0


def _array(values: ArrayLike) -> Values:
    return np.asarray(values, float)


def combined_moisture(shares: ArrayLike, moistures: ArrayLike) -> Values:
    """Moisture of all fractions together [kg water per kg dry stone].

    Args:
        shares: dry mass of each fraction, shape (..., n), any unit
        moistures: water over dry mass of each fraction, shape (..., n) [1]
    """
    mass = _array(shares)
    return np.asarray((mass * _array(moistures)).sum(-1) / mass.sum(-1))


def moisture_of_wet_mass(moisture_of_dry_mass: ArrayLike) -> Values:
    """Water over wet mass, from water over dry mass.

    Args:
        moisture_of_dry_mass: water over dry mass, any shape [1]
    """
    w = _array(moisture_of_dry_mass)
    return np.asarray(w / (1.0 + w))


def moisture_of_dry_mass(moisture_of_wet_mass: ArrayLike) -> Values:
    """Water over dry mass, from water over wet mass.

    Args:
        moisture_of_wet_mass: water over wet mass, any shape, below 1 [1]
    """
    w = _array(moisture_of_wet_mass)
    return np.asarray(w / (1.0 - w))


def refuse_impossible(operation: Operation) -> None:
    """Raise FaultyInput naming every input of ``operation`` that cannot be; NaN passes."""
    feed, faults = operation.feed, list[Fault]()

    def within(place: str, values: ArrayLike, low: float, high: float, remedy: str) -> None:
        array = _array(values)
        wrong = (array < low) | (array > high)
        if np.any(wrong):
            value = f"{array[wrong].flat[0]:g}"
            faults.append(Fault(
                "out-of-range", f"{value} is not between {low:g} and {high:g}.", remedy,
                field=place, value=value))  # fmt: skip

    parts: list[tuple[str, Fraction | Rap]] = []
    parts += [(f"fractions[{i}]", one) for i, one in enumerate(feed.fractions)]
    parts += [(f"rap[{i}]", one) for i, one in enumerate(feed.rap)]
    for place, part in parts:
        within(f"{place}.of_mix", part.of_mix, 0.0, 1.0, "Give dry mass over mass of mix.")
        within(f"{place}.moisture_of_dry_mass", part.moisture_of_dry_mass, 0.0, 0.5,
               "Give water over dry mass.")  # fmt: skip
        # wet material cannot be hotter than boiling water
        wet = _array(part.moisture_of_dry_mass) > 0.0
        within(f"{place}.cold_c", np.where(wet, _array(part.cold_c), 0.0), -40.0, 99.0,
               "Give the temperature as it is fed; wet material stays below 100 C.")  # fmt: skip
    for i, filler in enumerate(feed.filler):
        within(f"filler[{i}].of_mix", filler.of_mix, 0.0, 1.0, "Give mass over mass of mix.")
    within("binder_of_mix", feed.binder_of_mix, 0.0, 0.3, "Give binder over mass of mix.")
    solid: tuple[Fraction | Rap | Filler, ...] = (*feed.fractions, *feed.rap, *feed.filler)
    whole = sum((_array(one.of_mix) for one in solid), _array(feed.binder_of_mix))
    within("feed", whole, 1.0 - 1e-6, 1.0 + 1e-6,
           "Fractions, RAP, filler and new binder must sum to 1 by dry mass.")  # fmt: skip
    within("residual_of_mix", feed.water_kg_kg - _array(feed.residual_of_mix), 0.0, 1.0,
           "No more water can stay in the mix than was fed.")  # fmt: skip
    within("residual_of_mix", feed.residual_of_mix, 0.0, 0.1, "Give water over mass of mix.")
    within("air_c", operation.air.air_c, -40.0, 60.0, "Give the air temperature in the shade.")
    within("relative_humidity", operation.air.relative_humidity, 0.0, 1.0, "Give a fraction.")
    within("pressure_pa", operation.air.pressure_pa, 5e4, 1.1e5, "Give the air pressure.")
    # stone that is dried alone may be hotter than any mix
    most = 250.0 if np.any(_array(feed.binder_of_mix) > 0.0) or feed.rap else 450.0
    within("discharge_c", operation.discharge_c, 60.0, most, "Give the mix temperature.")
    within("stack_c", operation.stack_c, 40.0, 400.0, "Give the gas temperature.")
    within("air_ratio", operation.air_ratio, 1.0, 20.0, "Give all air over the air needed.")
    within("casing_of_net", operation.casing_of_net, 0.0, 0.5, "Give a share of net heat.")
    within("casing_j_kg", operation.casing_j_kg, 0.0, 1e6, "Give a loss per mass of mix.")
    within("leakage_air_kg_kg", operation.leakage_air_kg_kg, 0.0, 5.0, "Give air over mix.")
    within("transfer_drop_k", operation.transfer_drop_k, 0.0, 60.0, "Give a drop above 0.")
    if operation.burner_air_ratio is not None:
        within("burner_air_ratio", operation.burner_air_ratio, 1.0, 20.0, "Give 1 or more.")
        within("burner_air_ratio",
               _array(operation.air_ratio) - _array(operation.burner_air_ratio), 0.0, 20.0,
               "Air through the burner cannot exceed all air.")  # fmt: skip
    raise_if_any(faults)
