"""From a certificate to what an advice needs: readings, curve, mixing window."""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache

import numpy as np

from advisor.binder import (
    Bulb,
    Precision,
    Reading,
    ViscosityCurve,
    Window,
    equiviscous_window,
    fit_avts,
    kinematic_capillary_reading,
    kinematic_value_reading,
    rotational_reading,
    vacuum_capillary_reading,
    viscosity_value_reading,
)
from advisor.binder.modified import SupplierRange, govern, supplier_window
from advisor.binder.readings import error_correlation
from advisor.errors import MissingInput
from advisor.settings.certificate import Certificate, LabReading
from advisor.settings.tables import load_table


@lru_cache(maxsize=64)
def certificate_readings(certificate: Certificate) -> tuple[Reading, ...]:
    """Readings of a certificate turned into viscosity; those that measure it."""
    found = (_reading(certificate, one) for one in certificate.readings)
    return tuple(one for one in found if one is not None)


@lru_cache(maxsize=64)
def certificate_curve(certificate: Certificate) -> ViscosityCurve | None:
    """The curve through the usable readings; None where fewer than two are."""
    usable = [one for one in certificate_readings(certificate) if one.usable]
    if len({one.temperature_c for one in usable}) < 2:
        return None
    return fit_avts(
        np.array([one.temperature_c for one in usable]),
        np.array([one.viscosity_pas for one in usable]),
        np.array([one.relative_sd for one in usable]),
        error_correlation(usable),
    ).curve()


def mixing_window(
    certificates: Sequence[Certificate], curve: ViscosityCurve | None
) -> tuple[Window | None, tuple[str, ...]]:
    """The window that governs mixing, and what was refused and why."""
    row = load_table("viscosity_targets").row("mixing")
    plain = None
    if curve is not None:
        plain = equiviscous_window(
            curve,
            row["target"],
            row["tolerance"],
            method=f"{row['target'] - row['tolerance']:.2f} to "
            f"{row['target'] + row['tolerance']:.2f} Pa.s",
            source=row.origin("target").source,
            how_known=row.origin("target").how_known,
        )
    because = "; ".join(f"{one.modifier} in lot {one.lot}" for one in certificates if one.modified)
    governed = govern("mixing", plain, _supplier(certificates), modified_because=because)
    return governed.governing, governed.refused


def _supplier(certificates: Sequence[Certificate]) -> Window | None:
    """What all suppliers' mixing ranges allow together."""
    ranges = [(one, one.supplier.mixing) for one in certificates if one.supplier.mixing]
    if not ranges:
        return None
    source = " and ".join(f"{one.source}, lot {one.lot}" for one, _ in ranges)
    low = max(float(one.low) for _, one in ranges)
    high = min(float(one.high) for _, one in ranges)
    return supplier_window(SupplierRange("mixing", low, high, source))


def _precision(method: str) -> Precision:
    row = load_table("precision").row(method)
    origin = row.origin("several_share")
    return Precision(
        method, row["one_share"], row["several_share"], True, origin.source, origin.how_known
    )


def _reading(certificate: Certificate, one: LabReading) -> Reading | None:
    if one.method == "vacuum capillary":
        bulb = Bulb("", float(one.factor), float(one.time))
        return vacuum_capillary_reading(one.temperature, [bulb], _precision(one.method))
    if one.method == "rotational":
        return rotational_reading(
            one.temperature,
            [float(one.viscosity)],
            _precision(one.method),
            spindle=one.spindle,
            speed_rad_s=None if one.speed is None else float(one.speed),
        )
    if one.method == "viscosity":
        return viscosity_value_reading(one.temperature, one.viscosity, _precision("rotational"))
    if one.method in ("kinematic capillary", "kinematic viscosity"):
        density = certificate.density_15c_kgm3
        if density is None:
            raise MissingInput.of(
                "density",
                f"Lot {certificate.lot} has a kinematic viscosity and no density.",
                "Enter the density of the certificate.",
                field="density",
            )
        precision = _precision("kinematic capillary")
        if one.method == "kinematic viscosity":
            return kinematic_value_reading(one.temperature, one.viscosity, density, precision)
        bulb = Bulb("", float(one.factor), float(one.time))
        return kinematic_capillary_reading(one.temperature, [bulb], density, precision)
    return None
