"""What in the records does not agree with the plant's settings, or names what nobody recorded."""

from __future__ import annotations

from collections.abc import Iterator

from advisor.errors import Fault
from advisor.records.entry import Entry
from advisor.records.store import Records
from advisor.settings.faults import nearest
from advisor.settings.folder import PlantFolder
from advisor.settings.moments import local_text


def disagreements(records: Records, folder: PlantFolder) -> Iterator[Fault]:
    """Everything the facts in force name that is not there: tanks, jobs, silos, lots."""
    tanks = [tank.name for tank in folder.tanks]
    silos = [silo.name for silo in folder.plant.silos]
    jobs = {job.code: job for job in folder.jobs}
    lots = [entry.subject for entry in records.all_held("certificate")]
    told: set[str] = set()

    def fault(entry: Entry, field: str, what: str, name: str, known: list[str]) -> Iterator[Fault]:
        if name not in known:
            yield Fault(
                "names-nothing",
                f"The {entry.kind} of {entry.subject} from "
                f"{local_text(entry.valid_from, folder.zone)} names the {what} '{name}', "
                "which is not there.",
                f"Record a correction of {entry.id}. {nearest(name, known)}",
                file=str(records.path),
                field=field,
                value=name,
            )

    for kind in ("receipt", "dip"):
        for entry in records.all_held(kind):
            yield from fault(entry, "subject", "tank", entry.subject, tanks)
            lot = entry.fact.certificate
            if lot is not None and lot not in lots and lot not in told:  # many loads, one lot
                told.add(lot)
                yield Fault(
                    "no-certificate",
                    f"The {kind} of {entry.subject} from "
                    f"{local_text(entry.valid_from, folder.zone)} names the lot '{lot}', whose "
                    "certificate is not recorded.",
                    f"Record it, or a correction of {entry.id}. {nearest(lot, lots)}".rstrip(),
                    file=str(records.path),
                    field="certificate",
                    value=lot,
                )
    for entry in records.all_held("job_run"):
        run = entry.fact
        yield from fault(entry, "tank", "tank", run.tank, tanks)
        if run.silo is not None:
            yield from fault(entry, "silo", "silo", run.silo, silos)
        yield from fault(entry, "job", "job", run.job, list(jobs))
        if run.job in jobs and run.tank in tanks:
            fed = list(folder.mix(jobs[run.job].mix).tanks)
            yield from fault(entry, "tank", f"tank for mix {jobs[run.job].mix}", run.tank, fed)
    for entry in records.all_held("surface_reading"):
        yield from fault(entry, "subject", "job", entry.subject, list(jobs))
    for entry in records.all_held("weather"):
        yield from fault(entry, "subject", "job", entry.subject, [*jobs, "plant"])


def not_yet_known(records: Records, folder: PlantFolder) -> Iterator[str]:
    """What nobody recorded yet and advice cannot do without, one sentence each."""
    filled = {
        entry.subject
        for kind in ("receipt", "dip")
        for entry in records.all_held(kind)
        if entry.fact.certificate is not None
    }
    for tank in folder.tanks:
        if tank.name not in filled:
            yield (
                f"What {tank.name} holds: no dip or receipt names a certificate, so there is no "
                "advice from it. Record a dip with the lot in the tank."
            )
