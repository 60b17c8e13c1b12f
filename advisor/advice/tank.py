"""Low, target and high for the binder tank."""

from __future__ import annotations

from collections.abc import Sequence

from advisor.advice.content import BinderState
from advisor.advice.result import Authority, Limit, Reason, Setpoint, Side
from advisor.advice.situation import Situation
from advisor.binder.tank import Bound, TankRange, tank_range
from advisor.errors import OutsideValidity
from advisor.units import shown

# The tank is set this far inside its range where the mixing target lies outside it; common
# practice, no source.
_INSIDE_K = 3.0


def tank_setpoint(
    situation: Situation, binder: BinderState, elsewhere: Sequence[Limit]
) -> tuple[Setpoint | None, tuple[Reason, ...]]:
    """The tank's setpoint and remarks; no setpoint where its bounds cross.

    The target is the coating target where the range allows it: binder that meets the stone at the
    temperature of mixing neither cools nor heats it.
    """
    try:
        allowed = range_of_binder(binder)
    except OutsideValidity as error:
        return None, tuple(Reason("tank", str(fault)) for fault in error.faults)
    own = [limit for limit in elsewhere if limit.point == "binder_tank"]
    lows = [*_bounds(allowed, "low"), *(one for one in own if one.side == "low")]
    highs = [*_bounds(allowed, "high"), *(one for one in own if one.side == "high")]
    if not lows:
        return None, (Reason("tank", "No lower bound of the tank temperature is known."),)
    low = max(lows, key=lambda one: one.value_c)
    high = min(highs, key=lambda one: one.value_c)
    if low.value_c > high.value_c:
        low_at, high_at = (
            shown(one.value_c, "temperature", situation.facts.units) for one in (low, high)
        )
        words = f"{low.name} {low_at} lies above {high.name} {high_at}."
        return None, (Reason("tank", f"The tank has no temperature: {words}"),)
    wanted = float(binder.mixing.target_c) if binder.mixing else 0.5 * (low.value_c + high.value_c)
    inside = min(_INSIDE_K, 0.5 * (high.value_c - low.value_c))
    target = min(max(wanted, low.value_c + inside), high.value_c - inside)
    remarks = tuple(Reason("tank", sentence) for sentence in allowed.cautions)
    return (
        Setpoint(
            "binder_tank", f"Binder, {situation.tank.name}", low.value_c, target, high.value_c,
            low, high, low.sd_k,
        ),
        remarks,
    )  # fmt: skip


def range_of_binder(binder: BinderState) -> TankRange:
    """The range a tank may be kept in for the sake of ``binder``.

    Raises OutsideValidity where no bound can be told.
    """
    return tank_range(
        None if binder.modified else binder.curve,
        flash_point_c=binder.flash_c,
        flash_method=binder.flash_method,
        supplier_low_c=binder.storage_low_c,
        supplier_high_c=binder.supplier_most_c[0] if binder.supplier_most_c else None,
        supplier_source=binder.supplier_most_c[1] if binder.supplier_most_c else "",
    )


def _bounds(allowed: TankRange, side: Side) -> list[Limit]:
    bounds: tuple[Bound, ...] = allowed.lows if side == "low" else allowed.highs
    return [
        Limit(
            "binder_tank",
            side,
            bound.value_c,
            bound.set_by,
            _owner(bound, side),
            bound.source,
            bound.how_known,  # type: ignore[arg-type]
            sd_k=bound.sd_k,
        )
        for bound in bounds
    ]


def _owner(bound: Bound, side: Side) -> Authority:
    if bound.how_known == "entered":
        return "supplier"
    return "safety" if side == "high" else "computed"
