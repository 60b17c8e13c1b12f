"""Temperatures a binder tank may have: pumpable below, supplier and flash point above."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from advisor.binder.curve import ViscosityCurve
from advisor.errors import OutsideValidity

# Store at least this far below the flash point: Eurobitume, Loading and storage (looked up).
FLASH_MARGIN_K = 30.0
# Road bitumen is stored at or below this: Eurobitume, as quoted in guidance seen (looked up).
ROAD_BITUMEN_MOST_C = 200.0
# Viscosity up to which binder pumps easily, Pa.s: European practice (from memory). A
# specification cap of 3 Pa.s at 135 C stands in AASHTO M 320 (looked up).
PUMPABLE_PAS = 2.0


@dataclass(frozen=True)
class Bound:
    """One bound [C] of a tank temperature, what sets it, and its standard deviation [K]."""

    value_c: float
    set_by: str
    source: str
    how_known: str
    sd_k: float = 0.0


@dataclass(frozen=True)
class TankRange:
    """Lowest and highest tank temperature with all bounds considered, binding ones first."""

    low: Bound | None
    high: Bound
    lows: tuple[Bound, ...]
    highs: tuple[Bound, ...]
    cautions: tuple[str, ...] = ()


def pumping_temperature_c(
    curve: ViscosityCurve, viscosity_pas: float = PUMPABLE_PAS
) -> tuple[float, float]:
    """Lowest temperature [C] at which a binder pumps, and its standard deviation [K].

    Args:
        curve: viscosity curve of one binder.
        viscosity_pas: highest viscosity the pump takes [Pa.s].

    Source: 2 Pa.s, European practice (from memory).
    """
    return float(curve.temperature_c(viscosity_pas)), float(curve.temperature_sd_k(viscosity_pas))


def flash_margin_k(tank_c: float, flash_point_c: float) -> float:
    """Distance [K] from a tank temperature up to the flash point.

    Args:
        tank_c: temperature of the tank [C].
        flash_point_c: flash point by the method on the sheet [C].

    Source: subtraction; the margin wanted is 30 K (Eurobitume, looked up).
    """
    return flash_point_c - tank_c


def tank_range(
    curve: ViscosityCurve | None,
    *,
    flash_point_c: float | None = None,
    flash_method: str = "",
    supplier_low_c: float | None = None,
    supplier_high_c: float | None = None,
    supplier_source: str = "",
    pumpable_pas: float = PUMPABLE_PAS,
) -> TankRange:
    """Lowest and highest temperature of a binder tank, and what sets each.

    Args:
        curve: viscosity curve of the binder, or none where it must not be used.
        flash_point_c: flash point [C].
        flash_method: cup of the flash point, 'open cup' or 'closed cup'.
        supplier_low_c: supplier's lowest storage temperature [C].
        supplier_high_c: supplier's highest storage temperature [C].
        supplier_source: the supplier's sheet.
        pumpable_pas: highest viscosity the pump takes [Pa.s].

    Raises:
        OutsideValidity: the bounds cross.

    Source: Eurobitume, Loading and storage (looked up) for margin and ceiling.
    """
    lows: list[Bound] = []
    highs = [
        Bound(ROAD_BITUMEN_MOST_C, "ceiling for road bitumen", "Eurobitume guidance", "looked up")
    ]
    cautions = [
        "A temperature below the flash point does not make the vapour space of a tank safe."
    ]
    if curve is not None:
        value, sd = pumping_temperature_c(curve, pumpable_pas)
        words = f"pumpable, {pumpable_pas:g} Pa.s"
        lows.append(Bound(value, words, "European practice", "from memory", sd))
    if supplier_low_c is not None:
        lows.append(Bound(supplier_low_c, "supplier's storage range", supplier_source, "entered"))
    if supplier_high_c is not None:
        highs.append(Bound(supplier_high_c, "supplier's storage range", supplier_source, "entered"))
    if flash_point_c is None:
        cautions.append("No flash point on the sheet: the margin to it cannot be checked.")
    else:
        words = "margin kept below the flash point"
        source = "Eurobitume, Loading and storage"
        highs.append(Bound(flash_point_c - FLASH_MARGIN_K, words, source, "looked up"))
        if not flash_method:
            cautions.append("The sheet does not say open or closed cup; the two differ.")
    lows = _ordered(lows, highest_first=True)
    highs = _ordered(highs, highest_first=False)
    if lows and lows[0].value_c > highs[0].value_c:
        raise OutsideValidity.of(
            "tank-range-crosses",
            f"The tank would need {lows[0].value_c:.0f} C ({lows[0].set_by}) but may not exceed "
            f"{highs[0].value_c:.0f} C ({highs[0].set_by}).",
            "Check the sheet; ask the supplier.",
        )
    return TankRange(
        lows[0] if lows else None, highs[0], tuple(lows), tuple(highs), tuple(cautions)
    )


def _ordered(bounds: Sequence[Bound], highest_first: bool) -> list[Bound]:
    return sorted(bounds, key=lambda bound: bound.value_c, reverse=highest_first)
