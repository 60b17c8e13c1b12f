"""When a change made now is felt: at the trucks and at the paver."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.advice.bands import Band, band_of
from advisor.advice.situation import Situation
from advisor.sampling import Draws
from advisor.settings.tables import load_table

_DRAWS = 512


@dataclass(frozen=True)
class ChangeFelt:
    """Minutes from a changed discharge to the first truck with it, and to the paver."""

    job: str
    silo: str
    silo_kg: float
    truck_min: Band
    paver_min: Band
    silo_told_by: str


def change_felt(situation: Situation) -> ChangeFelt:
    """Minutes until mix discharged now is loaded, and until it reaches the screed.

    What lies in the silo goes first. How long the dryer itself takes to a new discharge temperature
    is not in it: that is seen at the discharge gauge.
    """
    draws, job = Draws(_DRAWS), situation.job
    hold = draws.triangular("hold", *situation.hold_s)
    haul = np.maximum(draws.normal("haul", job.haul.time, job.haul.spread), 0.25 * job.haul.time)
    log_sd = load_table("defaults").row("wait at the paver")["log_sd"]
    wait = draws.lognormal("wait", max(float(job.wait), 1.0), log_sd)
    told = next(
        (one.origin for one in situation.inputs if one.name.startswith(("content", "time in"))),
        "no silo",
    )
    return ChangeFelt(
        job=job.code,
        silo=situation.silo.name if situation.silo else "",
        silo_kg=situation.silo_kg,
        truck_min=band_of(hold / 60.0),
        paver_min=band_of((hold + haul + wait) / 60.0),
        silo_told_by=told,
    )
