"""One load on its way: how it arrives, how long it may wait, how long it can be rolled."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime, timedelta

import numpy as np
from numpy.typing import NDArray

from advisor.advice.advise import CRITERION, sensor_sd_k
from advisor.advice.bands import Band, band_of
from advisor.advice.case import path_case
from advisor.advice.limits import collect_limits
from advisor.advice.path import DRAWN, PathCase, draw_path, rolling_times_s
from advisor.advice.result import Caution, Contribution, Limit
from advisor.advice.situation import Situation
from advisor.errors import Fault, FaultyInput, MissingInput
from advisor.heat import Box, Faces, MixThermal, load_state, retained_in_truck, share_below
from advisor.sampling import Draws, contributions_sd, quantile, share_true
from advisor.settings.cautions import caution_text

Floats = NDArray[np.float64]

LONGEST_WAIT_S = 2 * 3600.0
_WAITS_S = np.linspace(0.0, LONGEST_WAIT_S, 25)
_DRAWS = 512
_BELIEVABLE_C = 60.0, 260.0


@dataclass(frozen=True)
class LoadAhead:
    """What becomes of one load; bands hold 90 % of what may happen.

    ``arrives_c`` is the remixed bulk as the truck reaches the paver, ``delivered_c`` after the wait
    planned there. ``wait_min`` is how long it may wait from arriving on, at most two hours;
    ``wait_safe_min`` is what holds with the plant's confidence. ``need_c`` is the temperature
    wanted at delivery, set by ``need_set_by``; ``chance`` that the planned wait keeps it.
    ``crust_c`` is the middle of the coldest face of a usual load as it is tipped.
    ``cold_share`` is how much of the load is colder than that, were it not remixed;
    ``contributions`` are the degrees of doubt each input adds to ``delivered_c``.
    """

    job: str
    loaded_at: datetime
    arrives_at: tuple[datetime, datetime, datetime]
    load_out_c: float
    arrives_c: Band
    delivered_c: Band
    need_c: float
    need_set_by: Limit
    chance: float
    wait_min: Band
    wait_safe_min: float
    confidence: float
    planned_wait_min: float
    rolling_min: Band
    rolling_wanted_min: float
    rolling_end_c: float
    crust_c: float
    cold_share: float
    weather_from: str
    contributions: tuple[Contribution, ...]
    cautions: tuple[Caution, ...]


def load_ahead(situation: Situation, load_out_c: float, loaded_at: datetime) -> LoadAhead:
    """What becomes of a load that left the silo at ``load_out_c`` [C] at ``loaded_at``.

    Raises MissingInput where something of the situation is not known, FaultyInput for a load-out
    temperature no mix has.
    """
    refuse_missing(situation)
    low, high = _BELIEVABLE_C
    if not low <= load_out_c <= high:
        raise FaultyInput.of(
            "not-believable",
            f"No mix is loaded at {load_out_c:.0f} C.",
            f"Believable is {low:.0f} to {high:.0f} C.",
            field="load_out",
            value=f"{load_out_c:.0f} C",
        )
    draws = Draws(_DRAWS)
    case, job = path_case(situation), situation.job
    path = draw_path([case], draws, CRITERION)[0]
    plant = situation.facts.folder.plant
    gauge = plant.sensors.get("load_out_c")
    off = draws.normal("load-out gauge", 0.0, sensor_sd_k(gauge, load_out_c) if gauge else 0.0)
    air = draws.normal("air", case.air_c, case.air_sd_k)
    start = load_out_c + off
    haul = _haul_s(case, draws)
    at_wait = air + _kept(case, draws, haul, _WAITS_S[:, None]) * (start - air)
    planned = draws.lognormal("wait", case.wait_s, case.wait_log_sd)
    delivered = air + _kept(case, draws, haul, planned) * (start - air)

    assert situation.binder is not None  # noqa: S101 - refused above
    collected = collect_limits(
        situation.facts.folder, situation.mix, job, situation.binder, path, situation.facts.units
    )
    lows = [
        (limit, np.broadcast_to(np.asarray(value, float), delivered.shape))
        for limit, value in collected.path
        if limit.point == "delivery" and limit.side == "low"
    ]
    confidence = float(plant.confidence)
    needed = [float(quantile(values, confidence)) for _, values in lows]
    governs = int(np.argmax(needed))
    need = np.max(np.stack([values for _, values in lows]), axis=0)
    wait_min = _crossing_s(at_wait, need) / 60.0
    return LoadAhead(
        job=job.code,
        loaded_at=loaded_at,
        arrives_at=_moments(loaded_at, haul),
        load_out_c=load_out_c,
        arrives_c=band_of(at_wait[0]),
        delivered_c=band_of(delivered),
        need_c=needed[governs],
        need_set_by=lows[governs][0],
        chance=float(share_true(delivered >= need)),
        wait_min=band_of(wait_min),
        wait_safe_min=float(quantile(wait_min, 1.0 - confidence)),
        confidence=confidence,
        planned_wait_min=case.wait_s / 60.0,
        rolling_min=band_of(rolling_times_s(path, delivered, CRITERION) / 60.0),
        rolling_wanted_min=float(job.rolling_wanted) / 60.0,
        rolling_end_c=case.rolling_end_c,
        crust_c=_crust_c(case, load_out_c),
        cold_share=_cold_share(case, load_out_c, needed[governs]),
        contributions=_contributions(delivered, draws),
        weather_from=situation.weather.origin if situation.weather else "",
        cautions=(Caution("C1", caution_text("C1")), Caution("C12", caution_text("C12"))),
    )


def _contributions(delivered_c: Floats, draws: Draws) -> tuple[Contribution, ...]:
    names = {name: DRAWN[name] for name in ("air", "haul", "wait", "truck", "conductivity",
                                            "heat capacity")}  # fmt: skip
    inputs = {words: draws.scores(name) for name, words in names.items()}
    inputs["load-out gauge"] = draws.scores("load-out gauge")
    shares = contributions_sd(delivered_c, inputs)
    return tuple(Contribution(name, sd) for name, sd in shares.items() if sd >= 0.05)


def refuse_missing(situation: Situation) -> None:
    """Raise MissingInput with everything the situation lacks."""
    if situation.missing:
        raise MissingInput(*(Fault("missing", sentence) for sentence in situation.missing))


def _haul_s(case: PathCase, draws: Draws) -> Floats:
    return np.maximum(draws.normal("haul", case.haul_s, case.haul_sd_s), 0.25 * case.haul_s)


def _kept(case: PathCase, draws: Draws, haul_s: Floats, wait_s: Floats) -> Floats:
    """Share of its excess the load keeps, with the same draws as everywhere on the path."""
    conductivity = draws.lognormal("conductivity", 1.0, case.conductivity_log_sd)
    heat = draws.lognormal("heat capacity", case.mix_heat_jkgk, case.heat_log_sd)
    truck = draws.lognormal("truck", 1.0, case.faces_log_sd)
    loose = MixThermal(conductivity * case.loose_conductivity_wmk, case.loose_density_kgm3, heat)
    return retained_in_truck(
        haul_s,
        _box(case),
        Faces(*(truck * one for one in case.moving_wm2k)),
        loose,
        standing_s=wait_s,
        standing=Faces(*(truck * one for one in case.standing_wm2k)),
    )


def _box(case: PathCase) -> Box:
    return Box.of_payload(
        case.payload_kg, case.body_length_m, case.body_width_m, case.loose_density_kgm3
    )


def _crossing_s(at_wait: Floats, need: Floats) -> Floats:
    """Wait [s] after which each draw is down to its need; the longest looked at where it is not.

    ``at_wait`` [C] is (waits, draws) and falls with the wait.
    """
    above = at_wait > need
    count = above.sum(axis=0)
    last = np.clip(count, 1, len(_WAITS_S) - 1)
    column = np.arange(at_wait.shape[1])
    hot, cold = at_wait[last - 1, column], at_wait[last, column]
    part = np.clip((hot - need) / np.maximum(hot - cold, 1e-9), 0.0, 1.0)
    found = _WAITS_S[last - 1] + part * (_WAITS_S[last] - _WAITS_S[last - 1])
    return np.where(count == 0, 0.0, np.where(count == len(_WAITS_S), LONGEST_WAIT_S, found))


def _crust_c(case: PathCase, load_out_c: float) -> float:
    state = load_state(
        case.haul_s, _box(case), Faces(*case.moving_wm2k), _loose(case),
        standing_s=case.wait_s, standing=Faces(*case.standing_wm2k),
    )  # fmt: skip
    return case.air_c + float(state.crust) * (load_out_c - case.air_c)


def _cold_share(case: PathCase, load_out_c: float, need_c: float) -> float:
    """Share of a usual load colder than ``need_c`` after haul and wait, unmixed."""
    limit = (need_c - case.air_c) / (load_out_c - case.air_c)
    return float(
        share_below(
            limit, case.haul_s, _box(case), Faces(*case.moving_wm2k), _loose(case),
            standing_s=case.wait_s, standing=Faces(*case.standing_wm2k),
        )
    )  # fmt: skip


def _loose(case: PathCase) -> MixThermal:
    return MixThermal(case.loose_conductivity_wmk, case.loose_density_kgm3, case.mix_heat_jkgk)


def _moments(loaded_at: datetime, haul_s: Floats) -> tuple[datetime, datetime, datetime]:
    band = band_of(haul_s)
    early, usual, late = (
        loaded_at + timedelta(seconds=round(one)) for one in (band.low, band.usual, band.high)
    )
    return early, usual, late
