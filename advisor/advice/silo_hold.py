"""Mix held in a silo overnight: what it is at a time, and how long it may stay."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import datetime, timedelta

import numpy as np

from advisor.advice.advise import advise
from advisor.advice.bands import Band, band_of
from advisor.advice.case import CONE_OF_DIAMETER, spread
from advisor.advice.facts import PlantFacts
from advisor.advice.result import Caution
from advisor.advice.situation import gather_situation
from advisor.advice.weather import mean_air_c
from advisor.errors import AdvisorError, FaultyInput, MissingInput
from advisor.heat import MixThermal, StoredMix, hold_left_s, mix_heat_jkgk, stored_mix
from advisor.heat import Silo as HeldSilo
from advisor.records import Entry
from advisor.sampling import Draws
from advisor.settings.cautions import caution_text
from advisor.settings.mixes import Mix
from advisor.settings.plant import Silo
from advisor.settings.tables import load_table

_DRAWS = 512
_LEAST_KG = 3000.0  # below, nothing is held that could be loaded; common practice, no source
_LONGEST_H = 96.0


@dataclass(frozen=True)
class SiloAhead:
    """Mix of a silo at a time; bands hold 90 % of what may happen, temperatures in C.

    ``first_out_c`` is what leaves the cone first; ``cone_off_c`` the same if the heating of the
    cone fails, None where it has none. ``rule_left_h`` are the hours left of the hours allowed, a
    rule and no model, counted from ``filled_at``; ``counted_from_now`` where nobody said when it
    was filled. ``needed_c`` is the lowest load-out the next job takes, ``good_left_h`` how long
    the first mix out stays above it.
    """

    silo: str
    mix: str
    at: datetime
    until: datetime
    mass_kg: float
    stored_c: float
    stored_told_by: str
    air_c: float
    mean_c: Band
    first_out_c: Band
    wall_c: Band
    cone_off_c: Band | None
    rule_h: float
    rule_source: str
    rule_left_h: float
    filled_at: datetime
    counted_from_now: bool
    needed_c: float | None
    needed_for: str
    good_left_h: float | None
    cautions: tuple[Caution, ...]


def silo_ahead(
    facts: PlantFacts,
    silo: str,
    at: datetime,
    until: datetime,
    *,
    stored_c: float | None = None,
    mass_kg: float | None = None,
    air_c: float | None = None,
    filled_at: datetime | None = None,
) -> SiloAhead:
    """What mix that is in ``silo`` at ``at`` will be at ``until``.

    Args:
        facts: the plant as it is known.
        silo: its name.
        at: now.
        until: when it is wanted.
        stored_c: temperature of the mix now, in place of the silo's own reading [C].
        mass_kg: mix in it, in place of the log [kg].
        air_c: mean air temperature, in place of the forecast [C].
        filled_at: when the oldest mix went in.

    Raises MissingInput for what nobody told, FaultyInput for a time before now and an empty silo.
    """
    facts = facts if facts.known_at else replace(facts, known_at=at)
    own = facts.folder.silo(silo)
    hold_s = (until - at).total_seconds()
    if not 0 < hold_s <= _LONGEST_H * 3600.0:
        raise FaultyInput.of(
            "hold-impossible",
            "The time asked about has to lie after now, by four days at most.",
            field="until",
        )
    run = _latest_run(facts, silo, at)
    if run is None:
        raise MissingInput.of(
            "no-mix",
            f"No job ran through {silo} in the last two days: what is in it is not known.",
            "Record the run (kind job_run), or choose another silo.",
            field="silo",
        )
    mix = facts.folder.mix(facts.folder.job(run.fact.job).mix)
    stored, told_by = _stored_c(facts, own, at, stored_c)
    mass = _mass_kg(facts, own, at, mass_kg)
    air = mean_air_c(facts, at, until) if air_c is None else air_c
    loose = _loose(mix)
    draws = Draws(_DRAWS)
    walls = draws.lognormal("silo", 1.0, spread("silo wall doubt")["log_sd"])
    airs = draws.normal("air", air, spread("air")["sd"])
    held = _after(hold_s, own, mass, walls, loose, stored, airs, own.cone_heated)
    failed = _after(hold_s, own, mass, walls, loose, stored, airs, False)
    since = at if filled_at is None else filled_at
    needed, needed_for = _needed_c(facts, silo, until)
    good = None
    if needed is not None:
        one = np.ones(())
        held_silo = _held(own, mass, one, loose, own.cone_heated)
        good = float(hold_left_s(needed, held_silo, loose, stored, air)) / 3600.0
    rule = float(own.hold_max) / 3600.0
    return SiloAhead(
        silo=silo,
        mix=mix.code,
        at=at,
        until=until,
        mass_kg=mass,
        stored_c=stored,
        stored_told_by=told_by,
        air_c=air,
        mean_c=band_of(held.mean_c),
        first_out_c=band_of(held.first_out_c),
        wall_c=band_of(held.wall_c),
        cone_off_c=band_of(failed.first_out_c) if own.cone_heated else None,
        rule_h=rule,
        rule_source=own.hold_max_source,
        rule_left_h=rule - (until - since).total_seconds() / 3600.0,
        filled_at=since,
        counted_from_now=filled_at is None,
        needed_c=needed,
        needed_for=needed_for,
        good_left_h=good,
        cautions=(Caution("C1", caution_text("C1")), Caution("C11", caution_text("C11"))),
    )


def _latest_run(facts: PlantFacts, silo: str, at: datetime) -> Entry | None:
    runs = facts.all_held("job_run", "plant", at - timedelta(days=2), at + timedelta(seconds=1))
    own = [run for run in runs if run.fact.silo == silo]
    return max(own, key=lambda run: run.valid_from, default=None)


def _stored_c(
    facts: PlantFacts, silo: Silo, at: datetime, given_c: float | None
) -> tuple[float, str]:
    if given_c is not None:
        return given_c, "given"
    found = facts.latest(silo.temperature_signal, at) if silo.temperature_signal else None
    if found is None:
        raise MissingInput.of(
            "no-silo-temperature",
            f"The temperature of the mix in {silo.name} is not known.",
            "Bring the plant log up to date, or give the temperature.",
            field="stored",
        )
    return found[0], "plant log"


def _mass_kg(facts: PlantFacts, silo: Silo, at: datetime, given_kg: float | None) -> float:
    mass = given_kg
    if mass is None:
        found = facts.latest(silo.content_signal, at) if silo.content_signal else None
        if found is None:
            raise MissingInput.of(
                "no-silo-content",
                f"How much is in {silo.name} is not known.",
                "Bring the plant log up to date, or give the tonnes.",
                field="mass",
            )
        mass = found[0]
    if not _LEAST_KG <= mass <= float(silo.capacity) * 1.05:
        raise FaultyInput.of(
            "silo-content",
            f"{mass / 1000:.1f} t is nothing to hold in {silo.name}.",
            f"It holds 3 to {float(silo.capacity) / 1000:.0f} t; give what will be in it.",
            field="mass",
            value=f"{mass / 1000:.1f} t",
        )
    return mass


def _loose(mix: Mix) -> MixThermal:
    family = load_table("mix_families").row(mix.family)
    heat = float(mix_heat_jkgk(family["heat_at"], mix.binder_content))
    return MixThermal(family["loose_conductivity"], family["loose_density"], heat)


def _held(silo: Silo, mass_kg: float, walls: np.ndarray, mix: MixThermal, heated: bool) -> HeldSilo:
    """The silo for the model; a heated cone is taken to lose nothing and to add nothing."""
    wall = walls * float(silo.wall_u)
    gate = walls * max(spread("silo cone")["usual"], float(silo.wall_u))
    diameter = float(silo.diameter)
    return HeldSilo.holding(
        mass_kg,
        diameter / 2.0,
        CONE_OF_DIAMETER * diameter,
        mix.density_kgm3,
        wall_wm2k=wall,
        top_wm2k=wall,
        cone_wm2k=np.zeros_like(gate) if heated else gate,
    )


def _after(
    hold_s: float, silo: Silo, mass_kg: float, walls: np.ndarray, mix: MixThermal,
    stored_c: float, airs_c: np.ndarray, heated: bool,
) -> StoredMix:  # fmt: skip
    return stored_mix(hold_s, _held(silo, mass_kg, walls, mix, heated), mix, stored_c, airs_c)


def _needed_c(facts: PlantFacts, silo: str, until: datetime) -> tuple[float | None, str]:
    """Lowest load-out [C] of the first job that takes from ``silo`` at ``until`` or later."""
    runs = facts.all_held("job_run", "plant", until - timedelta(days=1), until + timedelta(days=1))
    ahead = [run for run in runs if run.fact.silo == silo and run.fact.until > until]
    if not ahead:
        return None, "no job is planned from this silo"
    run = min(ahead, key=lambda one: one.valid_from)
    try:
        advice = advise(gather_situation(facts, max(run.valid_from, until), run.fact.job))
    except AdvisorError as error:
        return None, f"{run.fact.job}: {error.faults[0].problem}"
    point = advice.setpoint("load_out")
    if point is None:
        return None, f"{run.fact.job}: no window then"
    return point.low_c, run.fact.job
