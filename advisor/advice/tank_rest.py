"""A binder tank while the plant rests: hold it, or set it back and reheat in time."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import datetime, timedelta

import numpy as np

from advisor.advice.bands import Band, band_of
from advisor.advice.case import spread
from advisor.advice.content import BinderState, binder_in_tank
from advisor.advice.facts import PlantFacts
from advisor.advice.ledger import tank_content
from advisor.advice.result import Caution
from advisor.advice.tank import range_of_binder
from advisor.advice.weather import mean_air_c
from advisor.binder import density_kgm3
from advisor.errors import FaultyInput, MissingInput
from advisor.heat import binder_tank, holding_w, plan_setback, reheat_s, tank_area_m2
from advisor.sampling import Draws, quantile
from advisor.settings.cautions import caution_text
from advisor.settings.plant import Tank

_DRAWS = 512
_LONGEST_DAYS = 21.0
_KWH_J = 3.6e6
_PLAIN_DENSITY_KGM3 = 950.0  # hot binder where the certificate tells none; from memory
_CONFIDENCE = 0.95
_WORTH_OF_HELD = 0.1  # a smaller share saved is told as little; common practice, no source


@dataclass(frozen=True)
class TankAhead:
    """Holding a tank against setting it back, from ``at`` to ``until``.

    Energies are heat into the binder [kWh], before losses of the heater. ``reheat_at`` is when to
    switch on so that 19 times in 20 the tank is up in time; ``lowest_c`` is how cold it gets until
    then. ``low_c`` is the lowest it may get, by ``low_set_by``. Money is None where no price is
    given. ``reaches`` is False where the heater cannot bring it up at all.
    """

    tank: str
    binder: str
    at: datetime
    until: datetime
    mass_kg: float
    mass_told_by: str
    now_c: float
    now_told_by: str
    wanted_c: float
    low_c: float
    low_set_by: str
    air_c: float
    hold_kw: Band
    hold_kwh: Band
    setback_kwh: Band
    saved_kwh: Band
    saved_money: Band | None
    hold_money: Band | None
    currency: str
    reheat_at: datetime
    reheat_usual: datetime
    reheat_h: Band
    lowest_c: Band
    heater_kw: float
    reaches: bool
    advised: str
    cautions: tuple[Caution, ...]


def tank_ahead(
    facts: PlantFacts,
    tank: str,
    at: datetime,
    until: datetime,
    *,
    now_c: float | None = None,
    wanted_c: float | None = None,
    mass_kg: float | None = None,
    low_c: float | None = None,
    air_c: float | None = None,
    price_per_kwh: float | None = None,
) -> TankAhead:
    """Hold or set back ``tank`` while it is not used, and when to switch the heater on again.

    Args:
        facts: the plant as it is known.
        tank: its name.
        at: now.
        until: when it is wanted again.
        now_c: temperature of the binder, in place of the tank's own reading [C].
        wanted_c: temperature wanted then; that of now where not given [C].
        mass_kg: binder in it, in place of deliveries and dips [kg].
        low_c: the lowest it may cool to, in place of the binder's own lower bound [C].
        air_c: mean air temperature, in place of the forecast [C].
        price_per_kwh: what a kWh of heat costs, in the plant's currency.

    Raises MissingInput for what nobody told, FaultyInput for what cannot be.
    """
    facts = facts if facts.known_at else replace(facts, known_at=at)
    own = facts.folder.tank(tank)
    away_s = (until - at).total_seconds()
    if not 0 < away_s <= _LONGEST_DAYS * 86400.0:
        raise FaultyInput.of(
            "rest-impossible",
            "The time it is wanted again has to lie after now, by three weeks at most.",
            field="until",
        )
    binder = binder_in_tank(facts, tank, at)
    now, now_by = _now_c(facts, own, at, now_c)
    mass, mass_by = _mass_kg(facts, own, at, mass_kg)
    wanted = now if wanted_c is None else wanted_c
    low, low_by = (low_c, "given") if low_c is not None else _low(binder, tank)
    if low > min(now, wanted):
        raise FaultyInput.of(
            "low-above-now",
            f"The tank may not fall under {low:.0f} C ({low_by}), and is or shall be at "
            f"{min(now, wanted):.0f} C.",
            "Hold it, and check the temperature and the lower limit.",
            field="low",
            value=f"{low:.0f} C",
        )
    air = mean_air_c(facts, at, until) if air_c is None else air_c
    walls = Draws(_DRAWS).lognormal("tank", 1.0, spread("tank wall doubt")["log_sd"])
    volume = mass / _density_kgm3(binder, now)
    fill = float(np.clip(volume / float(own.capacity), 0.0, 1.0))
    area = float(tank_area_m2(float(own.diameter), float(own.length), fill))
    model = binder_tank(
        mass, area, walls * float(own.insulation_u), float(own.heater), about_c=0.5 * (now + low)
    )
    # What it takes to come from now to the temperature wanted is the same both ways: it is left out
    # of the comparison, and the setback is planned from the temperature wanted.
    plan = plan_setback(model, wanted, low, air, away_s)
    hold_w = holding_w(model, wanted, air)
    kwh = {name: np.asarray(value) / _KWH_J for name, value in
           (("held", plan.held_j), ("spent", plan.spent_j), ("saved", plan.saved_j))}  # fmt: skip
    reaches = bool(np.all(plan.reaches))
    early_s = float(quantile(plan.reheat_at_s, 1.0 - _CONFIDENCE)) if reaches else 0.0
    price = price_per_kwh
    return TankAhead(
        tank=tank,
        binder=binder.words,
        at=at,
        until=until,
        mass_kg=mass,
        mass_told_by=mass_by,
        now_c=now,
        now_told_by=now_by,
        wanted_c=wanted,
        low_c=low,
        low_set_by=low_by,
        air_c=air,
        hold_kw=band_of(hold_w / 1000.0),
        hold_kwh=band_of(kwh["held"]),
        setback_kwh=band_of(kwh["spent"]),
        saved_kwh=band_of(kwh["saved"]),
        saved_money=band_of(kwh["saved"] * price) if price is not None else None,
        hold_money=band_of(kwh["held"] * price) if price is not None else None,
        currency=facts.folder.plant.currency,
        reheat_at=at + timedelta(seconds=round(early_s)),
        reheat_usual=at + timedelta(seconds=round(float(np.median(plan.reheat_at_s)))),
        reheat_h=band_of(plan.reheats_s / 3600.0),
        lowest_c=band_of(plan.lowest_c),
        heater_kw=float(own.heater) / 1000.0,
        reaches=reaches,
        advised=_advised(
            reaches, binder, own, float(np.median(kwh["saved"] / np.maximum(kwh["held"], 1e-9))),
            wanted - now, float(np.max(reheat_s(model, now, wanted, air))),
        ),
        cautions=_cautions(binder, own, mass),
    )  # fmt: skip


def _now_c(facts: PlantFacts, tank: Tank, at: datetime, given_c: float | None) -> tuple[float, str]:
    if given_c is not None:
        return given_c, "given"
    found = facts.latest(tank.temperature_signal, at)
    if found is None:
        raise MissingInput.of(
            "no-tank-temperature",
            f"The temperature of {tank.name} is not known.",
            "Bring the plant log up to date, or give the temperature.",
            field="now",
        )
    return found[0], "plant log"


def _mass_kg(
    facts: PlantFacts, tank: Tank, at: datetime, given_kg: float | None
) -> tuple[float, str]:
    mass, told_by = given_kg, "given"
    if mass is None:
        content = tank_content(facts, tank.name, at)
        if content is None:
            raise MissingInput.of(
                "no-tank-content",
                f"How much is in {tank.name} is not known.",
                "Record a dip, or give the tonnes.",
                field="mass",
            )
        mass, told_by = content.mass_kg, "deliveries and dips"
    if mass < float(tank.heel_min):
        raise FaultyInput.of(
            "heater-bare",
            f"{mass / 1000:.1f} t do not cover the heater of {tank.name}.",
            f"Do not heat it under {float(tank.heel_min) / 1000:.0f} t: binder burns on a bare "
            "heater. Fill it first.",
            field="mass",
            value=f"{mass / 1000:.1f} t",
        )
    return mass, told_by


def _low(binder: BinderState, tank: str) -> tuple[float, str]:
    """Lowest temperature [C] the binder may cool to, and who says so."""
    allowed = range_of_binder(binder)
    if allowed.low is None:
        raise MissingInput.of(
            "no-low",
            f"How far {tank} may cool is not known: {binder.words} has no lower bound of its own.",
            "Ask the supplier, and give the lowest temperature.",
            field="low",
        )
    return float(allowed.low.value_c), f"{allowed.low.set_by}, {allowed.low.source}"


def _density_kgm3(binder: BinderState, now_c: float) -> float:
    for certificate in binder.certificates:
        if certificate.density_15c_kgm3 is not None:
            return float(density_kgm3(now_c, certificate.density_15c_kgm3))
    return _PLAIN_DENSITY_KGM3


def _advised(
    reaches: bool,
    binder: BinderState,
    tank: Tank,
    saved_of_held: float,
    up_k: float,
    first_s: float,
) -> str:
    """What to do, in a sentence; ``first_s`` is the time to come from now to what is wanted."""
    if not reaches or not np.isfinite(first_s):
        return "Hold: the heater cannot bring it up in time."
    if binder.modified and not tank.agitated:
        return "Hold, and ask the supplier: modified binder may separate in a tank not stirred."
    more = " It has to be heated up first to what is wanted." if up_k > 1.0 else ""
    if saved_of_held < _WORTH_OF_HELD:
        return (
            f"Hold it or set it back: setting back saves only {saved_of_held:.0%} of the heat of "
            "holding. It keeps the binder cooler, which ages it less." + more
        )
    return (
        f"Set it back: {saved_of_held:.0%} of the heat of holding is saved. Heater off now, on "
        "again at the time below." + more
    )


def _cautions(binder: BinderState, tank: Tank, mass_kg: float) -> tuple[Caution, ...]:
    found = [Caution("C1", caution_text("C1")), Caution("C5", caution_text("C5"))]
    if mass_kg < 1.5 * float(tank.heel_min):
        heel = f"{float(tank.heel_min) / 1000:.0f} t"
        found.append(Caution("C7", caution_text("C7", heel=heel)))
    if binder.modified:
        found.append(Caution("C8", caution_text("C8")))
    return tuple(found)
