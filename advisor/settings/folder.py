"""The plant folder: its settings files read together, everything wrong with them told at once."""

from __future__ import annotations

import difflib
from collections.abc import Iterable
from dataclasses import dataclass, field
from pathlib import Path
from typing import TypeVar
from zoneinfo import ZoneInfo

from advisor.errors import AdvisorError, Fault, FaultyInput
from advisor.settings.agreement import disagreements
from advisor.settings.faults import Model, nearest, read_model
from advisor.settings.mixes import Job, JobsFile, Mix, MixesFile
from advisor.settings.plant import Plant, Silo, Tank, TanksFile
from advisor.settings.signals import Signals
from advisor.settings.yaml_source import YamlSource, read_yaml

Named = TypeVar("Named", Tank, Silo, Mix, Job)

FILES = ("plant.yaml", "tanks.yaml", "mixes.yaml", "jobs.yaml", "signals.yaml")


@dataclass(frozen=True)
class PlantFolder:
    """All a plant knows about itself, checked; ``path`` is where it stands."""

    path: Path
    plant: Plant
    tanks: tuple[Tank, ...]
    mixes: tuple[Mix, ...]
    jobs: tuple[Job, ...]
    signals: Signals
    sources: dict[str, YamlSource] = field(repr=False, compare=False, default_factory=dict)

    @property
    def zone(self) -> ZoneInfo:
        """The zone of the plant's clock."""
        return self.plant.zone

    def tank(self, name: str) -> Tank:
        """The tank called ``name``; FaultyInput names the nearest one where there is none."""
        return _named(self.tanks, "name", name, "tank")

    def silo(self, name: str) -> Silo:
        """The silo called ``name``."""
        return _named(self.plant.silos, "name", name, "silo")

    def mix(self, code: str) -> Mix:
        """The mix with the code ``code``."""
        return _named(self.mixes, "code", code, "mix")

    def job(self, code: str) -> Job:
        """The job with the code ``code``."""
        return _named(self.jobs, "code", code, "job")

    def job_limit_line(self, job: Job, index: int) -> str:
        """Where in jobs.yaml the limit ``index`` of ``job`` stands: 'jobs.yaml:41'."""
        at = self.jobs.index(job)
        place = self.sources["jobs.yaml"].place(("jobs", at, "limits", index))
        return f"jobs.yaml:{place.line}"


def read_plant(path: str | Path) -> PlantFolder:
    """The settings in the plant folder at ``path``.

    Raises FaultyInput with every fault of every file: what is written wrong, and what does not
    agree between files.
    """
    folder = Path(path)
    if not folder.is_dir():
        raise FaultyInput.of(
            "no-folder",
            f"There is no plant folder '{path}'.",
            "Give the folder that holds plant.yaml.",
            value=str(path),
        )
    faults: list[Fault] = []
    sources: dict[str, YamlSource] = {}

    def read(model: type[Model], name: str) -> Model | None:
        try:
            sources[name] = read_yaml(_existing(folder, name))
        except AdvisorError as error:
            faults.extend(error.faults)
            return None
        found, wrong = read_model(model, sources[name])
        faults.extend(wrong)
        return found

    plant, tanks = read(Plant, "plant.yaml"), read(TanksFile, "tanks.yaml")
    mixes, jobs = read(MixesFile, "mixes.yaml"), read(JobsFile, "jobs.yaml")
    signals = read(Signals, "signals.yaml")
    faults.extend(disagreements(sources, plant, tanks, mixes, jobs, signals))
    if faults or not (plant and tanks and mixes and jobs and signals):
        raise FaultyInput(*_in_order(faults, folder))
    return PlantFolder(folder, plant, tanks.tanks, mixes.mixes, jobs.jobs, signals, sources)


def _existing(folder: Path, name: str) -> Path:
    path = folder / name
    if path.is_file():
        return path
    there = sorted(each.name for each in folder.iterdir() if each.suffix in (".yaml", ".yml"))
    near = difflib.get_close_matches(name, set(there) - set(FILES), n=1, cutoff=0.6)
    raise FaultyInput.of(
        "file-missing",
        f"The plant folder has no '{name}'.",
        f"There is '{near[0]}': rename it." if near else f"Add it; there is: {', '.join(there)}.",
        file=str(path),
    )


def _in_order(faults: Iterable[Fault], folder: Path) -> list[Fault]:
    """The faults file by file, as a reader goes through them from the top."""
    at = {str(folder / name): place for place, name in enumerate(FILES)}
    return sorted(
        faults, key=lambda fault: (at.get(fault.file, 0), fault.line or 0, fault.column or 0)
    )


def _named(all_of: Iterable[Named], key: str, wanted: str, what: str) -> Named:
    things = list(all_of)
    for thing in things:
        if getattr(thing, key) == wanted:
            return thing
    raise FaultyInput.of(
        f"no-such-{what}",
        f"There is no {what} '{wanted}'.",
        nearest(wanted, [getattr(thing, key) for thing in things]),
        value=wanted,
    )
