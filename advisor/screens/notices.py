"""Notices: what is outside or cannot be told, since when, how much, why, and what reaches when."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import timedelta

from advisor.advice.result import Point
from advisor.figures.drawn import Reading, Verdict, verdict_of
from advisor.review.result import Excursion
from advisor.screens.shift_view import ShiftView
from advisor.screens.words import (
    clock_words,
    delta_words,
    energy_words,
    mass_words,
    temperature_words,
)
from advisor.units import UnitSystem

# A reading nearer to its bound than this is not worth a notice; common practice, no source.
_WORTH_K = 1.0

LABELS: dict[Point, str] = {
    "binder_tank": "Binder tank",
    "hot_aggregate": "Hot aggregate",
    "discharge": "Drum discharge",
    "silo": "Silo",
    "load_out": "Load-out",
    "delivery": "At paver",
}


@dataclass(frozen=True)
class Notice:
    """One notice: ``kind`` gives its mark and colour, ``lines`` what to know and do."""

    kind: Verdict
    title: str
    lines: tuple[str, ...]


def notices(view: ShiftView, units: UnitSystem) -> tuple[Notice, ...]:
    """The notices of one moment, outside first, then what cannot be told."""
    told = [_running(one, view, units) for one in view.excursions]
    covered = {one.point for one in view.excursions}
    for reading in view.readings:
        setpoint = view.advice.setpoint(reading.point)
        if setpoint is None:
            continue
        verdict = verdict_of(reading.value_c, setpoint.low_c, setpoint.high_c, reading.doubt)
        if verdict in ("hot", "cold") and reading.point not in covered:
            bound = setpoint.high_c if verdict == "hot" else setpoint.low_c
            if abs((reading.value_c or bound) - bound) < max(_WORTH_K, reading.sd_k):
                continue
            told.append(_outside(reading, verdict, bound, view, units))
        elif verdict == "unknown" and reading.doubt and not view.stale:
            told.append(
                Notice(
                    "unknown",
                    f"{LABELS[reading.point]} reading not used",
                    (f"{reading.doubt[0].upper()}{reading.doubt[1:]}.",),
                )
            )
    order = {"hot": 0, "cold": 0, "unknown": 1, "inside": 2}
    return tuple(sorted(told, key=lambda one: order[one.kind]))


def _running(one: Excursion, view: ShiftView, units: UnitSystem) -> Notice:
    side = "above high" if one.side == "hot" else "below low"
    so_far = f"{one.minutes:.0f} min, {mass_words(one.tonnes, units)}"
    if one.side == "hot" and one.waste.fuel_kwh.middle > 0:
        so_far += f", {energy_words(one.waste.fuel_kwh, units)}"
    lines = [f"{so_far} so far."]
    if one.cause:
        lines.append(f"Likely: {one.cause}. {_sentence(one.evidence)}".strip())
    reach = reach_words(view)
    if reach and one.point == "discharge":
        lines.append(reach)
    return Notice(
        one.side,
        f"{LABELS[one.point]} up to {delta_words(one.peak_k, units)} {side} since "
        f"{clock_words(one.start, view.zone)}",
        tuple(lines),
    )


def _outside(
    reading: Reading, verdict: Verdict, bound_c: float, view: ShiftView, units: UnitSystem
) -> Notice:
    value = reading.value_c if reading.value_c is not None else bound_c
    side = "above high" if verdict == "hot" else "below low"
    bound = temperature_words(bound_c, units)
    lines = [f"Reads {temperature_words(value, units)}, the bound is {bound}."]
    reach = reach_words(view)
    if reach and reading.point == "discharge":
        lines.append(reach)
    return Notice(
        verdict,
        f"{LABELS[reading.point]} {delta_words(value - bound_c, units)} {side}",
        tuple(lines),
    )


def reach_words(view: ShiftView) -> str:
    """When a change made now is felt, or nothing where that is not known."""
    advice = view.advice
    if advice.felt_paver_min is None:
        return ""
    paver = clock_words(view.at + timedelta(minutes=advice.felt_paver_min), view.zone)
    if advice.felt_truck_min is None:
        return f"A change now reaches the paver at {paver}."
    truck = clock_words(view.at + timedelta(minutes=advice.felt_truck_min), view.zone)
    return f"A change now reaches the truck at {truck}, the paver at {paver}."


def _sentence(text: str) -> str:
    return f"{text[0].upper()}{text[1:].rstrip('.')}." if text else ""
