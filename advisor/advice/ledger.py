"""What a tank holds by lot: dips, receipts and what production drew, added up."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime, timedelta

from advisor.advice.facts import PlantFacts
from advisor.binder import density_kgm3

_LOOK_BACK = timedelta(days=60)
_LEAST_SHARE = 0.01  # a lot below this share of the tank is not told


@dataclass(frozen=True)
class TankContent:
    """Shares [1] by lot, largest first, the mass [kg], and when a lot last came in."""

    shares: tuple[tuple[str, float], ...]
    mass_kg: float
    last_receipt: datetime | None
    counted_from: datetime


def tank_content(facts: PlantFacts, tank: str, at: datetime) -> TankContent | None:
    """Content of ``tank`` at ``at`` by mass balance; None where no dip or receipt names a lot.

    Each receipt is taken as mixed in at once; production draws at the planned rate. A dip sets
    the mass and leaves the shares.
    """
    start, end = at - _LOOK_BACK, at + timedelta(seconds=1)
    events = sorted(
        (*facts.all_held("dip", tank, start, end), *facts.all_held("receipt", tank, start, end)),
        key=lambda entry: entry.valid_from,
    )
    masses: dict[str, float] = {}
    last_receipt = None
    since = None
    for event in events:
        fact = event.fact
        if since is not None:
            _draw(masses, _drawn_kg(facts, tank, since, event.valid_from))
        since = event.valid_from
        if event.kind == "receipt":
            masses[fact.certificate] = masses.get(fact.certificate, 0.0) + fact.mass
            last_receipt = event.valid_from
            continue
        if fact.certificate and not masses:
            masses = {fact.certificate: 1.0}
        total = sum(masses.values())
        if total > 0:
            found = _dip_kg(facts, fact, masses, event.valid_from)
            masses = {lot: mass * found / total for lot, mass in masses.items()}
    if since is None or not masses:
        return None
    _draw(masses, _drawn_kg(facts, tank, since, at))
    total = sum(masses.values())
    shares = sorted(
        ((lot, mass / total) for lot, mass in masses.items() if mass / total >= _LEAST_SHARE),
        key=lambda pair: -pair[1],
    )
    whole = sum(share for _, share in shares)
    return TankContent(
        tuple((lot, share / whole) for lot, share in shares),
        total,
        last_receipt,
        events[0].valid_from,
    )


def _draw(masses: dict[str, float], drawn_kg: float) -> None:
    """Take ``drawn_kg`` out of the mixed tank; a tank is never drawn quite empty by reckoning."""
    total = sum(masses.values())
    if total > 0:
        left = max(total - drawn_kg, 0.02 * total) / total
        for lot in masses:
            masses[lot] *= left


def _drawn_kg(facts: PlantFacts, tank: str, start: datetime, end: datetime) -> float:
    """New binder drawn from ``tank`` by the runs between ``start`` and ``end``."""
    drawn = 0.0
    for run in facts.all_held("job_run", "plant", start - timedelta(days=1), end):
        if run.fact.tank != tank:
            continue
        seconds = (min(run.fact.until, end) - max(run.valid_from, start)).total_seconds()
        mix = facts.folder.mix(facts.folder.job(run.fact.job).mix)
        new = mix.binder_content - (mix.rap.share * mix.rap.binder_content if mix.rap else 0.0)
        drawn += max(seconds, 0.0) * run.fact.rate * new
    return drawn


def _dip_kg(facts: PlantFacts, dip: object, masses: dict[str, float], at: datetime) -> float:
    """Mass a dip found; a volume is turned into mass at the temperature of the dip."""
    mass = getattr(dip, "mass", None)
    if mass is not None:
        return float(mass)
    lot = max(masses, key=lambda name: masses[name])
    entry = facts.held("certificate", lot, at)
    density_15c = entry.fact.density_15c_kgm3 if entry else None
    if density_15c is None:
        return float(sum(masses.values()))
    volume, temperature = getattr(dip, "volume"), getattr(dip, "temperature")  # noqa: B009
    return float(volume * density_kgm3(temperature, density_15c))
