"""What may be changed where no window is left: truck, lift, rollers, mix, start; and its cost."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from datetime import timedelta

from advisor.advice.case import path_case, spread
from advisor.advice.path import PathCase
from advisor.advice.situation import Situation, gather_situation
from advisor.errors import AdvisorError
from advisor.settings.mixes import Truck
from advisor.settings.tables import load_table
from advisor.units import from_si, shown

_SHORTER_S = 600.0
_THICKER_M = 0.01
_WARMER_K = 5.0
_ROLLED_SOONER_S = 180.0
_UNLOADED_S = 120.0  # a truck at a transfer vehicle unloads at once; common practice, no source
_LATEST_H = 12

Apply = Callable[[PathCase], PathCase]


@dataclass(frozen=True)
class Change:
    """One thing to change: in words, what it costs, and what it makes of a heat path.

    Of one ``group`` only one can be done. ``cost`` says in time, mass or words what is known of it;
    no price of these is known to a plant folder, which it says.
    """

    action: str
    cost: str
    group: str
    apply: Apply
    caution: str = ""


def changes(situation: Situation, case: PathCase) -> list[Change]:
    """What can be changed in ``situation``, in the order a site would think of it."""
    return [
        *_trucks(situation),
        *_waits(case),
        *_mat(situation, case),
        *_mix(situation, case),
        *_weather(situation, case),
    ]


def later_starts(situation: Situation) -> list[Change]:
    """The same job laid one to twelve hours later, as the forecast has it; none without one."""
    facts = situation.facts
    facts = replace(facts, known_at=facts.known_at or situation.at)
    zone = facts.folder.zone
    found = []
    for hour in range(1, _LATEST_H + 1):
        at = situation.at + timedelta(hours=hour)
        try:
            then = gather_situation(facts, at, situation.job.code, situation.tank.name)
        except AdvisorError:
            continue
        if then.weather is None or not then.weather.foretold or situation.binder is None:
            continue
        # Only the weather is that of later: what is measured or planned stays as it is.
        other = path_case(replace(situation, at=at, weather=then.weather, base_reading_c=None))
        found.append(
            Change(
                f"start at {at.astimezone(zone):%H:%M} instead",
                f"{hour} h later",
                "weather",
                _taking(other, _OF_WEATHER),
                "By the forecast; look again before then.",
            )
        )
    return found


_OF_WEATHER = (
    "air_c", "air_sd_k", "wind_ms", "wind_log_sd", "sun_wm2", "sun_sd_wm2", "sky_c", "sky_sd_k",
    "base_c", "base_sd_k", "film_kgm2",
)  # fmt: skip
_OF_TRUCK = ("body_length_m", "body_width_m", "moving_wm2k", "standing_wm2k", "faces_log_sd")


def _taking(other: PathCase, names: tuple[str, ...]) -> Apply:
    """The change that takes the fields ``names`` from ``other``."""
    taken = {name: getattr(other, name) for name in names}
    return lambda case: replace(case, **taken)


def _trucks(situation: Situation) -> Iterator[Change]:
    job = situation.job

    def with_truck(truck: Truck) -> Apply:
        other = path_case(replace(situation, job=job.model_copy(update={"truck": truck})))
        return _taking(other, _OF_TRUCK)

    insulated = Truck(body="insulated", cover="insulated", payload=job.truck.payload)
    if job.truck.body != "insulated" or job.truck.cover != "insulated":
        yield Change(
            "insulated body and cover", "other trucks, not priced", "truck", with_truck(insulated)
        )
    if job.truck.cover == "none":
        tarped = job.truck.model_copy(update={"cover": "tarpaulin"})
        yield Change(
            "cover the load with a tarpaulin", "a tarpaulin on each truck, not priced", "truck",
            with_truck(tarped),
        )  # fmt: skip


def _waits(case: PathCase) -> Iterator[Change]:
    if case.wait_s + case.haul_s > 2 * _SHORTER_S:
        from_wait = min(case.wait_s - 1.0, _SHORTER_S)

        def shorter(one: PathCase) -> PathCase:
            return replace(
                one,
                wait_s=max(one.wait_s - from_wait, 1.0),
                haul_s=one.haul_s - (_SHORTER_S - from_wait),
            )

        yield Change(
            "ten minutes less on the road or in the queue", "trucks sent in step, not priced",
            "wait", shorter,
        )  # fmt: skip
    if case.wait_s > _UNLOADED_S:
        own = spread("transfer vehicle")["usual"]

        def at_once(one: PathCase) -> PathCase:
            least, usual, most = one.paving_loss_k
            return replace(
                one, wait_s=_UNLOADED_S, paving_loss_k=(least + own, usual + own, most + own)
            )

        yield Change(
            "transfer vehicle, trucks unload at once", "hire of the vehicle, not priced", "wait",
            at_once,
            "It also mixes the cold crust in, which this reckoning takes for granted without it.",
        )  # fmt: skip


def _mat(situation: Situation, case: PathCase) -> Iterator[Change]:
    units = situation.facts.units
    more_kgm2 = _THICKER_M * case.laid_density_kgm3
    thicker = shown(_THICKER_M, "length", units)
    mass = (
        f"{more_kgm2:.0f} kg/m2"
        if units == "si"
        else f"{from_si(more_kgm2, 'lb/yd2', 'mass_per_area'):.0f} lb/yd2"
    )
    yield Change(
        f"lift {thicker} thicker",
        f"{mass} more mix ({_THICKER_M / case.lift_m:.0%}), not priced",
        "lift",
        lambda one: replace(one, lift_m=one.lift_m + _THICKER_M),
        "Only where the design of the road allows it.",
    )
    if case.rolling_wanted_s - _ROLLED_SOONER_S >= 240.0:
        yield Change(
            "rollers done three minutes sooner (one roller more, or closer up)",
            "a roller and its driver, not priced",
            "rollers",
            lambda one: replace(one, rolling_wanted_s=one.rolling_wanted_s - _ROLLED_SOONER_S),
            "Density has to be shown on site.",
        )


def _mix(situation: Situation, case: PathCase) -> Iterator[Change]:
    if situation.mix.additive is not None:
        return
    row = load_table("modifiers").row("surfactant")
    lower = float(row["offset_low"])
    words = shown(lower, "temperature_delta", situation.facts.units, 0)
    yield Change(
        f"warm-mix additive that lets rolling end {words} lower",
        "the additive, not priced",
        "mix",
        lambda one: replace(one, rolling_end_c=one.rolling_end_c - lower),
        f"{row['caution']} Needs the approval of whoever approved the mix.",
    )


def _weather(situation: Situation, case: PathCase) -> Iterator[Change]:
    warmer = shown(_WARMER_K, "temperature_delta", situation.facts.units, 0)
    yield Change(
        f"wait until air and base are {warmer} warmer",
        "time, how long is not foretold",
        "weather",
        lambda one: replace(one, air_c=one.air_c + _WARMER_K, base_c=one.base_c + _WARMER_K),
    )
    if case.wind_ms > 2.0:
        yield Change(
            "wait until the wind is half",
            "time, how long is not foretold",
            "wind",
            lambda one: replace(one, wind_ms=one.wind_ms / 2.0),
        )
