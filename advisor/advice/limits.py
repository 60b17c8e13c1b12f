"""Every bound that holds for one mix, tank and job, with its owner, name and source."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from advisor.advice.content import BinderState
from advisor.advice.path import PathDraws
from advisor.advice.result import Limit, Point, Side
from advisor.advice.solve import Coating
from advisor.settings.binders import kinds_in
from advisor.settings.folder import PlantFolder
from advisor.settings.limits import PublishedLimit, published_limits
from advisor.settings.mixes import Job, Mix
from advisor.settings.plant import OwnLimit
from advisor.units import UnitSystem, shown

Floats = NDArray[np.float64]
Drawn = tuple[Limit, Floats | float]

PATH_POINTS: tuple[Point, ...] = ("discharge", "silo", "load_out", "delivery")


@dataclass(frozen=True, eq=False)
class CollectedLimits:
    """Bounds on the heat path with their values, the coating window, and bounds elsewhere.

    ``elsewhere`` holds for the tank, the base or the air; ``silenced`` are national figures on
    which the contract has spoken.
    """

    path: tuple[Drawn, ...]
    coating: Coating | None
    elsewhere: tuple[Limit, ...]
    silenced: tuple[Limit, ...]


def collect_limits(
    folder: PlantFolder,
    mix: Mix,
    job: Job,
    binder: BinderState,
    path: PathDraws,
    units: UnitSystem = "si",
) -> CollectedLimits:
    """All bounds for ``mix`` made from ``binder`` for ``job``, named in ``units``."""
    own = [_entered(one) for one in (*folder.plant.house_limits, *mix.limits, *job.limits)]
    spoken = {(one.point, one.side) for one in own if one.authority == "contract"}
    schemes = folder.plant.published_limits
    published = [
        limit
        for row in published_limits(schemes, mix.family, mix.grade, binder.modified, job.lift)
        for limit in _published(row)
    ]
    # A national table holds where the contract is silent.
    silenced = [one for one in published if (one.point, one.side) in spoken]
    every = own + [one for one in published if (one.point, one.side) not in spoken]
    firm: list[Drawn] = [(one, one.value_c) for one in every if one.point in PATH_POINTS]
    firm.extend(_supplier_most(binder))
    firm.append((_need(job, path, units), path.need_c))
    elsewhere = tuple(one for one in every if one.point not in PATH_POINTS)
    return CollectedLimits(tuple(firm), _coating(mix, binder), elsewhere, tuple(silenced))


def _entered(own: OwnLimit) -> Limit:
    words = f"{own.source}, {own.clause}" if own.clause else own.source
    side = "minimum" if own.side == "low" else "maximum"
    return Limit(
        point=own.point,  # type: ignore[arg-type]
        side=own.side,
        value_c=float(own.value),
        name=f"{own.authority} {side}",
        authority=own.authority,
        source=words,
        how_known="entered",
        as_written=own.value.text,
    )


def _published(row: PublishedLimit) -> Iterator[Limit]:
    if row.kind != "temperature" or not row.point:
        return
    for side, value, written in (
        ("low", row.low, row.low_written),
        ("high", row.high, row.high_written),
    ):
        if value is not None:
            yield Limit(
                point=row.point,  # type: ignore[arg-type]
                side=side,  # type: ignore[arg-type]
                value_c=value,
                name=f"{row.scheme} {row.quantity}",
                authority="national",
                source=f"{row.source}, {row.clause}" if row.clause else row.source,
                how_known=row.how_known,  # type: ignore[arg-type]
                as_written=written,
            )


def _coating(mix: Mix, binder: BinderState) -> Coating | None:
    """The coating window: the supplier's range where it governs, else equal viscosity."""
    window = binder.mixing
    if window is None:
        return None
    named = "supplier's mixing range" if binder.modified else f"viscosity {window.method}"
    lowering, doubt = 0.0, 0.0
    additive = mix.additive
    if additive and additive.kind in kinds_in(binder.certificates):
        additive = None  # the binder brings it already: its window is lowered once
    if additive:
        least, most = additive.offset_low, additive.offset_high
        lowering, doubt = 0.5 * (least + most), (most - least) / 12.0**0.5
        named += f", {additive.kind} lowers it by {least.text} to {most.text}"
    source = window.source + (f"; {additive.source}" if additive else "")

    def edge(side: Side, value: object, sd: object, beyond: str) -> Limit:
        return Limit(
            point="discharge",
            side=side,
            value_c=float(value) - lowering,  # type: ignore[arg-type]
            name=f"coating: {named}",
            authority="supplier" if binder.modified else "computed",
            source=source,
            how_known=window.how_known,  # type: ignore[arg-type]
            sd_k=float(np.hypot(sd, doubt)),  # type: ignore[call-overload]
            beyond=beyond,
        )

    return Coating(
        low=edge("low", window.low_c, window.low_sd_k, "the binder is too thick to coat the stone"),
        target_c=float(window.target_c) - lowering,
        high=edge(
            "high",
            window.high_c,
            window.high_sd_k,
            "the binder is thinner than coating needs, hardens faster and may drain",
        ),
        high_gives_way=not binder.modified,
    )


def _supplier_most(binder: BinderState) -> list[Drawn]:
    if binder.supplier_most_c is None:
        return []
    value, source = binder.supplier_most_c
    name = "supplier's maximum"
    return [(Limit("discharge", "high", value, name, "supplier", source, "entered"), value)]


def _need(job: Job, path: PathDraws, units: UnitSystem) -> Limit:
    minutes = job.rolling_wanted / 60.0
    end = shown(path.case.rolling_end_c, "temperature", units)
    return Limit(
        point="delivery",
        side="low",
        value_c=float(np.median(path.need_c)),
        name=f"paving needs {minutes:.0f} min of rolling above {end}",
        authority="computed",
        source="cooling of the mat, worked out from lift, base and weather",
        how_known="derived",
        sd_k=float(np.std(path.need_c)),
    )
