"""Why a number is what it is, which cautions belong to it, and when it ends: sentences as data."""

from __future__ import annotations

from datetime import datetime, timedelta

from advisor.advice.limits import CollectedLimits
from advisor.advice.result import Caution, Limit, Reason, Setpoint
from advisor.advice.situation import Situation
from advisor.advice.solve import Solution
from advisor.settings.cautions import caution_text
from advisor.units import shown

_HOUR = timedelta(hours=1)
_WITHIN = 0.01  # a share told as a whole percent


def reasons_of(situation: Situation, solution: Solution) -> tuple[Reason, ...]:
    """Reasons for the setpoints, most important first."""
    found: list[Reason] = []
    discharge = next((one for one in solution.setpoints if one.point == "discharge"), None)
    if discharge is None:
        return ()
    found.append(Reason("low", f"Low: {_bound_words(discharge, 'low')}."))
    units = situation.facts.units
    margin = shown(discharge.target_c - discharge.low_c, "temperature_delta", units)
    if solution.squeezed:
        found.append(
            Reason(
                "squeezed",
                "The window is narrower than the plant's own scatter: the target is its middle, "
                "and some mix will fall outside. Watch the discharge closely.",
            )
        )
    elif solution.kept < situation.facts.folder.plant.confidence - _WITHIN:
        found.append(
            Reason(
                "target",
                f"Target: {margin} above low, the middle of the coating window, as wide as the "
                f"plant's scatter: {solution.kept:.0%} of the mix stays above low. Hotter would "
                "put as much above high.",
            )
        )
    else:
        confidence = situation.facts.folder.plant.confidence
        found.append(
            Reason(
                "target",
                f"Target: {margin} above low, the lowest that keeps {confidence:.0%} of the mix "
                "above what is needed, the plant's scatter included. Hotter only costs fuel, "
                "fume and binder.",
            )
        )
    found.append(Reason("high", f"High: {_bound_words(discharge, 'high')}."))
    found.extend(
        Reason(
            "passed-over",
            f"The upper coating edge ({shown(limit.value_c, 'temperature', units)}) is passed "
            "over: the paving needs more, and no firm limit forbids it.",
        )
        for limit in solution.set_aside
    )
    binder = situation.binder
    if binder:
        found.extend(Reason("binder", sentence) for sentence in binder.refused)
        if binder.provisional:
            found.append(
                Reason(
                    "provisional",
                    f"The tank holds a blend ({binder.words}) reckoned from deliveries, not "
                    "tested: the numbers are provisional.",
                )
            )
    if situation.mix.rap:
        found.append(
            Reason(
                "rap",
                "Coating is reckoned for the new binder alone: how much of the RAP's binder mixes "
                "with it in the plant is not known.",
            )
        )
    return tuple(found)


def _bound_words(setpoint: Setpoint, side: str) -> str:
    limit = setpoint.low_set_by if side == "low" else setpoint.high_set_by
    written = f" ({limit.as_written})" if limit.as_written else ""
    place = "" if limit.point == setpoint.point else f" at {_PLACE[limit.point]}"
    which = "below" if side == "low" else "above"
    beyond = f"; {which} it {limit.beyond}" if limit.beyond else ""
    return f"{limit.name}{written}{place}, {limit.source}{beyond}"


_PLACE = {
    "binder_tank": "the tank",
    "hot_aggregate": "the aggregate",
    "discharge": "discharge",
    "silo": "the silo",
    "load_out": "load-out",
    "delivery": "the paver",
}


def weather_limits(situation: Situation, limits: CollectedLimits) -> tuple[Limit, ...]:
    """Limits on air or base that are not kept now: no paving, says their owner."""
    weather = situation.weather
    broken = []
    for limit in limits.elsewhere:
        value = {
            "air": weather.air_c if weather else None,
            "base": situation.base_reading_c,
        }.get(limit.point)
        if value is None:
            continue
        if (limit.side == "low" and value < limit.value_c) or (
            limit.side == "high" and value > limit.value_c
        ):
            broken.append(limit)
    return tuple(broken)


def cautions_of(situation: Situation, setpoints: tuple[Setpoint, ...]) -> tuple[Caution, ...]:
    """Cautions that belong beside this advice."""
    found = [Caution("C1", caution_text("C1"))]
    binder, silo, units = situation.binder, situation.silo, situation.facts.units
    if binder and binder.flash_c is not None:
        point = shown(binder.flash_c, "temperature", units)
        flash = f"{point}, {binder.flash_method or 'method not told'}"
        found.append(
            Caution(
                "C4",
                caution_text("C4", margin=shown(30.0, "temperature_delta", units, 0), flash=flash),
            )
        )
    if binder and binder.modified:
        found.append(Caution("C8", caution_text("C8")))
    if binder and binder.provisional:
        until = situation.at + timedelta(hours=12)
        local = until.astimezone(situation.facts.folder.zone)
        found.append(Caution("C9", caution_text("C9", time=f"{local:%H:%M}")))
    if silo and setpoints:
        found.append(Caution("C11", caution_text("C11")))
    if setpoints:
        found.append(Caution("C12", caution_text("C12")))
    return tuple(found)


def expiry(situation: Situation) -> tuple[datetime, str]:
    """Until when the advice holds, and what ends it."""
    at, facts = situation.at, situation.facts
    ends: list[tuple[datetime, str]] = [(at + 3 * _HOUR, "weather is looked at again")]
    if situation.run and situation.run.valid_from <= at < situation.run.fact.until:
        ends.append((situation.run.fact.until, "end of the job's run"))
    horizon = at + 12 * _HOUR
    later = at + timedelta(seconds=1)
    for receipt in facts.all_held("receipt", situation.tank.name, later, horizon):
        ends.append((receipt.valid_from, f"next receipt into {situation.tank.name}"))
    for run in facts.all_held("job_run", "plant", later, horizon):
        ends.append((run.valid_from, "next job"))
    return min(ends)
