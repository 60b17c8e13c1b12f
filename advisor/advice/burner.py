"""What burner, stack and hot aggregate have to do for the advised mix, and what limits them."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cache

import numpy as np

from advisor.advice.fuel import operation_of
from advisor.advice.result import Burner, Limit, Setpoint
from advisor.advice.situation import Situation
from advisor.dryer import (
    StackRise,
    at_discharge,
    burner_advice,
    hot_aggregate_needed_c,
    most_rap_of_mix,
    production_limit,
    stack_limits,
)
from advisor.dryer.operation import Operation
from advisor.settings.tables import load_table
from advisor.units import shown

# Discharge temperatures [C] between which a limit of the hot aggregate is looked for.
_DISCHARGE_C = np.linspace(80.0, 240.0, 81)
# The mix is not judged against a log older or less steady than this.
_OLDEST_S = 600.0
# Model and gauge agree within this share; common practice, no source.
_AGREES = 0.10


def burner_of(situation: Situation, discharge_c: float) -> Burner:
    """Burner load, fuel, stack and most rate at ``discharge_c`` [C], and how the plant runs now.

    The stack is carried from what it reads now to the advised discharge; from the plant's usual
    one, as if at that discharge, where the log does not tell.

    Raises AdvisorError where the balance has no answer.
    """
    dryer = situation.facts.folder.plant.dryer
    rating = float(dryer.burner_rating)
    rise = stack_rise_of(dryer.kind)
    now = _readings(situation)
    running = operation_of(situation, discharge_c)
    load_expected = None
    if now.rate_kgs > 0.0 and np.isfinite(now.discharge_c):
        running = operation_of(situation, now.discharge_c)
        if now.stack_c is not None:
            running = replace(running, stack_c=now.stack_c)
        if now.load is not None:
            as_it_runs = burner_advice(running, now.discharge_c, now.rate_kgs, rating, rise)
            load_expected = float(as_it_runs.load)
    expected = burner_advice(running, discharge_c, situation.rate_kgs, rating, rise)
    most = production_limit(
        at_discharge(running, discharge_c, rise.central),
        rating,
        fan_m3s=float(dryer.fan_flow) if dryer.fan_flow is not None else np.inf,
        plant_kgs=float(dryer.rate_max),
    )
    table = load_table("stack")
    gas = stack_limits(
        expected.balance,
        expected.stack_c,
        float(dryer.cloth_max),
        table.row("above water dew point")["amount"],
        table.row("sulfur to trioxide")["amount"],
        running.air.pressure_pa,
    )
    return Burner(
        load=float(expected.load),
        fuel_kgs=float(expected.fuel_kgs),
        gross_w=float(expected.gross_w),
        stack_low_c=float(expected.stack_low_c),
        stack_c=float(expected.stack_c),
        stack_high_c=float(expected.stack_high_c),
        stack_limits=_stack_limits(float(gas.low_c), float(gas.high_c)),
        dew_point_c=float(gas.dew_point_c),
        acid_dew_point_c=float(gas.acid_c) if np.isfinite(gas.acid_c) else None,
        exhaust_m3s=float(expected.exhaust_m3s),
        rate_kgs=situation.rate_kgs,
        most_kgs=float(most.rate_kgs),
        most_set_by=str(most.set_by),
        load_now=now.load,
        load_expected_now=load_expected,
        stack_now_c=now.stack_c,
    )


def aggregate_setpoint(situation: Situation, discharge: Setpoint) -> Setpoint | None:
    """Low, target and high for the hot aggregate of a batch plant; None for a drum mixer.

    The window is that of the discharge, carried to the aggregate.
    """
    if situation.facts.folder.plant.dryer.kind != "batch":
        return None
    wanted = (discharge.low_c, discharge.target_c, discharge.high_c)
    carried = hot_aggregate_c(situation, np.array(wanted))
    if carried is None:
        return None
    low, target, high = (float(one) for one in carried)
    return Setpoint(
        "hot_aggregate", "Hot aggregate", low, target, high, discharge.low_set_by,
        discharge.high_set_by, discharge.sd_k,
    )  # fmt: skip


def hot_aggregate_c(situation: Situation, discharge_c: np.ndarray) -> np.ndarray | None:
    """Temperature [C] of the dried virgin aggregate for each of ``discharge_c`` [C].

    None where nothing cold meets the aggregate after the flame.
    """
    operation = operation_of(situation, float(discharge_c.flat[0]))
    if not _is_carried(operation):
        return None
    # The binder is taken to come in as hot as the mix.
    feed = replace(operation.feed, binder_c=discharge_c)
    return hot_aggregate_needed_c(discharge_c, feed, operation.transfer_drop_k)


def aggregate_limit(situation: Situation) -> Limit | None:
    """The dryer's hottest aggregate as a limit of the discharge; None where it limits nothing."""
    needed = hot_aggregate_c(situation, _DISCHARGE_C)
    if needed is None:
        return None
    hottest = situation.facts.folder.plant.dryer.aggregate_max
    return Limit(
        point="discharge",
        side="high",
        value_c=float(np.interp(float(hottest), needed, _DISCHARGE_C)),
        name=f"aggregate no hotter than {hottest.text}",
        authority="safety",
        source="the plant's dryer, carried through the heat balance of mixing",
        how_known="entered",
    )


def most_rap(situation: Situation, discharge_c: float) -> float | None:
    """Largest share of RAP in the mix [1] that the hottest aggregate allowed can carry.

    None for a mix without RAP, or with RAP the gas heats too.
    """
    operation = operation_of(situation, discharge_c)
    if not operation.feed.rap or not _is_carried(operation):
        return None
    hottest = float(situation.facts.folder.plant.dryer.aggregate_max)
    share = most_rap_of_mix(discharge_c, operation.feed, operation.transfer_drop_k, hottest)
    return float(share)


@cache
def stack_rise_of(kind: str) -> StackRise:
    """Degrees the stack moves for each degree of the mix, for a dryer of ``kind``."""
    row = load_table("dryer_kinds").row(kind)
    return StackRise(row["low"], row["central"], row["high"])


def _is_carried(operation: Operation) -> bool:
    """Whether the virgin aggregate carries heat to something that meets it after the flame."""
    if any(one.point == "drum" for one in operation.feed.rap):
        return False
    return operation.kind == "batch" or bool(operation.feed.rap)


def _stack_limits(low_c: float, high_c: float) -> tuple[Limit, Limit]:
    margin = load_table("stack").row("above water dew point").origin("amount")
    dew = f"dew point of the gas, worked out; {margin.source} ({margin.how_known})"
    cloth = "rating entered for the plant's cloth"
    return (
        Limit("stack", "low", low_c, "water dew point and margin", "safety", dew, "derived"),
        Limit("stack", "high", high_c, "filter cloth", "safety", cloth, "entered"),
    )


@dataclass(frozen=True)
class _Readings:
    """What the log says of the dryer now; NaN, 0 or None where it does not tell."""

    load: float | None
    stack_c: float | None
    rate_kgs: float
    discharge_c: float


def _readings(situation: Situation) -> _Readings:
    def fresh(signal: str) -> float | None:
        found = situation.facts.latest(signal, situation.at)
        return found[0] if found and found[1] <= _OLDEST_S else None

    return _Readings(
        load=fresh("burner_load"),
        stack_c=fresh("stack_c"),
        rate_kgs=fresh("rate_kgs") or 0.0,
        discharge_c=fresh("discharge_c") or float("nan"),
    )


def burner_words(situation: Situation, burner: Burner) -> tuple[str, ...]:
    """What the operator should know of burner and stack, as sentences."""
    units = situation.facts.units
    low, high = burner.stack_limits

    def degrees(value_c: float) -> str:
        return shown(value_c, "temperature", units)

    rate, most = (shown(one, "mass_rate", units) for one in (burner.rate_kgs, burner.most_kgs))
    told: list[str] = []
    told.append(
        f"Burner about {burner.load:.0%} of its rating at {rate}; at {situation.moisture:.1%} "
        f"moisture the plant can make {most}, set by the {burner.most_set_by}."
    )
    band = ""
    if burner.stack_high_c - burner.stack_low_c >= 1.0:
        band = f" ({degrees(burner.stack_low_c)} to {degrees(burner.stack_high_c)})"
    told.append(
        f"Stack expected at {degrees(burner.stack_c)}{band}, between {degrees(low.value_c)} "
        f"({low.name}) and {degrees(high.value_c)} ({high.name})."
    )
    if burner.acid_dew_point_c is not None:
        told.append(
            f"The fuel holds sulfur: its acid may condense up to {degrees(burner.acid_dew_point_c)}"
            ", less where stone dust takes it up."
        )
    if burner.load_now is not None and burner.load_expected_now:
        off = burner.load_now / burner.load_expected_now - 1.0
        reads = f"reads {burner.load_now:.0%} where {burner.load_expected_now:.0%} is expected"
        if abs(off) <= _AGREES:
            told.append(f"The burner {reads} for what is made now: model and gauge agree.")
        else:
            told.append(
                f"The burner {reads} for what is made now, {abs(off):.0%} "
                f"{'more' if off > 0 else 'less'}: check moisture, leaking air and the gauge. A "
                "position of the burner is not its fuel."
            )
    now_c = burner.stack_now_c
    if now_c is not None and not low.value_c <= now_c <= high.value_c:
        side, bound = ("above", high) if now_c > high.value_c else ("below", low)
        told.append(
            f"The stack reads {degrees(now_c)}, {side} {degrees(bound.value_c)} ({bound.name})."
        )
    if burner.load > 1.0:
        told.append("The burner does not suffice for this rate: run slower or dry the stone.")
    return tuple(told)


def rap_words(situation: Situation, discharge_c: float, most: float | None) -> tuple[str, ...]:
    """How hot the aggregate is where RAP meets it, and how much RAP it could carry."""
    rap, units = situation.mix.rap, situation.facts.units
    carried = hot_aggregate_c(situation, np.array([discharge_c]))
    if rap is None or most is None or carried is None:
        return ()
    hottest = float(situation.facts.folder.plant.dryer.aggregate_max)
    here, limit = (shown(float(one), "temperature", units) for one in (carried[0], hottest))
    told = (
        f"Virgin aggregate about {here} where it meets the RAP. At {limit}, the dryer's limit, it "
        f"could heat {most:.0%} RAP at {situation.rap_moisture:.1%} moisture; this mix has "
        f"{rap.share:.0%}."
    )
    return (told,)
