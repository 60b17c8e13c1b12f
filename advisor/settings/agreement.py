"""What does not agree between the settings files of a plant, or within one of them."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping

from advisor.errors import AdvisorError, Fault
from advisor.settings.faults import fault_at, nearest
from advisor.settings.limits import limit_schemes
from advisor.settings.mixes import Job, JobsFile, Mix, MixesFile
from advisor.settings.moments import utc_of
from advisor.settings.plant import OwnLimit, Plant, Tank, TanksFile
from advisor.settings.signals import Signals
from advisor.settings.tables import names_in
from advisor.settings.yaml_source import Steps, YamlSource


def disagreements(
    sources: Mapping[str, YamlSource],
    plant: Plant | None,
    tanks: TanksFile | None,
    mixes: MixesFile | None,
    jobs: JobsFile | None,
    signals: Signals | None,
) -> Iterator[Fault]:
    """Everything in the files read so far that cannot be true together."""
    tank_names = [tank.name for tank in tanks.tanks] if tanks else None
    mix_codes = [mix.code for mix in mixes.mixes] if mixes else None
    if plant:
        yield from _of_plant(plant, sources["plant.yaml"])
    if tanks:
        yield from _of_tanks(tanks.tanks, sources["tanks.yaml"])
    if mixes:
        yield from _of_mixes(mixes.mixes, sources["mixes.yaml"], tank_names)
    if jobs:
        yield from _of_jobs(jobs.jobs, sources["jobs.yaml"], mix_codes)
    if signals:
        yield from _of_signals(signals, sources["signals.yaml"])
    if plant and signals:
        yield from _unmapped(plant, signals, sources["plant.yaml"])


def _of_plant(plant: Plant, source: YamlSource) -> Iterator[Fault]:
    yield from _twice([silo.name for silo in plant.silos], source, ("silos",), "name")
    yield from _crossed(plant.house_limits, source, ("house_limits",))
    yield from _unknown(plant.dryer.fuel.name, "fuels", source, ("dryer", "fuel", "name"))
    for at, scheme in enumerate(plant.published_limits):
        if scheme not in limit_schemes():
            yield fault_at(
                source,
                ("published_limits", at),
                "unknown-name",
                f"'{scheme}' is no scheme of config/limits.csv.",
                nearest(scheme, limit_schemes()),
            )
    for signal, sensor in plant.sensors.items():
        if sensor.kind is not None:
            yield from _unknown(sensor.kind, "sensors", source, ("sensors", signal, "kind"))
    if plant.shown_at is not None:
        if not plant.invented:
            yield fault_at(
                source,
                ("shown_at",),
                "only-invented",
                "'shown_at' is for an invented plant; a real one uses the clock.",
                "Remove it.",
            )
        try:
            utc_of(plant.shown_at, plant.zone)
        except AdvisorError as error:
            first = error.faults[0]
            yield fault_at(source, ("shown_at",), first.code, first.problem, first.remedy)
    for at, silo in enumerate(plant.silos):
        for key in ("temperature_signal", "content_signal"):
            signal = getattr(silo, key)
            ending = "_c" if key == "temperature_signal" else "_kg"
            if signal and not (signal.startswith("silo_") and signal.endswith(ending)):
                yield fault_at(
                    source,
                    ("silos", at, key),
                    "wrong-signal",
                    f"'{signal}' is not such a signal of a silo.",
                    f"Write it as silo_{at + 1}{ending}.",
                )


def _of_tanks(tanks: tuple[Tank, ...], source: YamlSource) -> Iterator[Fault]:
    yield from _twice([tank.name for tank in tanks], source, ("tanks",), "name")
    signals = [tank.temperature_signal for tank in tanks]
    yield from _twice(signals, source, ("tanks",), "temperature_signal")
    for at, tank in enumerate(tanks):
        if not tank.temperature_signal.startswith("binder_tank_"):
            yield fault_at(
                source,
                ("tanks", at, "temperature_signal"),
                "wrong-signal",
                f"'{tank.temperature_signal}' is not the thermometer of a binder tank.",
                f"Write it as binder_tank_{at + 1}_c.",
            )
        if tank.heel_min >= 1200.0 * tank.capacity:  # no binder is denser than 1200 kg/m3
            yield fault_at(
                source,
                ("tanks", at, "heel_min"),
                "heel-too-large",
                f"A heel of {tank.heel_min.text} is more than the tank holds.",
                f"The tank holds {tank.capacity.text}.",
            )


def _of_mixes(
    mixes: tuple[Mix, ...], source: YamlSource, tanks: list[str] | None
) -> Iterator[Fault]:
    yield from _twice([mix.code for mix in mixes], source, ("mixes",), "code")
    for at, mix in enumerate(mixes):
        here: Steps = ("mixes", at)
        yield from _crossed(mix.limits, source, (*here, "limits"))
        for index, name in enumerate(mix.tanks):
            if tanks is not None and name not in tanks:
                yield fault_at(
                    source,
                    (*here, "tanks", index),
                    "no-such-tank",
                    f"There is no tank '{name}' in tanks.yaml.",
                    nearest(name, tanks),
                )
        if mix.rap is not None:
            old = mix.rap.share * mix.rap.binder_content
            if old >= mix.binder_content:
                yield fault_at(
                    source,
                    (*here, "rap"),
                    "too-much-binder",
                    f"The RAP alone brings {100 * old:.1f} % binder.",
                    f"The mix has {mix.binder_content.text} in all: check the share of RAP.",
                )


def _of_jobs(jobs: tuple[Job, ...], source: YamlSource, mixes: list[str] | None) -> Iterator[Fault]:
    yield from _twice([job.code for job in jobs], source, ("jobs",), "code")
    for at, job in enumerate(jobs):
        here: Steps = ("jobs", at)
        yield from _crossed(job.limits, source, (*here, "limits"))
        yield from _unknown(job.base.material, "bases", source, (*here, "base", "material"))
        yield from _unknown(job.truck.body, "truck_bodies", source, (*here, "truck", "body"))
        if mixes is not None and job.mix not in mixes:
            yield fault_at(
                source,
                (*here, "mix"),
                "no-such-mix",
                f"There is no mix '{job.mix}' in mixes.yaml.",
                nearest(job.mix, mixes),
            )
        if (job.latitude is None) != (job.longitude is None):
            yield fault_at(
                source,
                here,
                "half-a-place",
                "Only one of 'latitude' and 'longitude' is given.",
                "Give both, or none where the job is near the plant.",
            )
        if job.haul.spread > job.haul.time:
            yield fault_at(
                source,
                (*here, "haul", "spread"),
                "spread-too-large",
                f"A spread of {job.haul.spread.text} is more than the haul of "
                f"{job.haul.time.text}.",
                "Write the standard deviation of the haul time.",
            )


def _of_signals(signals: Signals, source: YamlSource) -> Iterator[Fault]:
    for at, each in enumerate(signals.sources):
        seen: dict[str, str] = {}
        for heading, column in each.columns.items():
            if column.signal in seen:
                yield fault_at(
                    source,
                    ("sources", at, "columns", heading, "signal"),
                    "signal-twice",
                    f"'{column.signal}' already comes from '{seen[column.signal]}'.",
                    "Keep one column for each signal.",
                )
            seen[column.signal] = heading


def _unmapped(plant: Plant, signals: Signals, source: YamlSource) -> Iterator[Fault]:
    """Signals that silos name and no export brings."""
    brought = {column.signal for each in signals.sources for column in each.columns.values()}
    for at, silo in enumerate(plant.silos):
        for key in ("temperature_signal", "content_signal"):
            signal = getattr(silo, key)
            if signal and signal not in brought:
                yield fault_at(
                    source,
                    ("silos", at, key),
                    "no-column",
                    f"No column in signals.yaml brings '{signal}'.",
                    f"Map it there, or leave out '{key}'. {nearest(signal, sorted(brought))}",
                )


def _twice(names: Iterable[str], source: YamlSource, above: Steps, key: str) -> Iterator[Fault]:
    seen: dict[str, int] = {}
    for at, name in enumerate(names):
        if name in seen:
            line = source.place((*above, seen[name], key)).line
            yield fault_at(
                source,
                (*above, at, key),
                "name-twice",
                f"'{name}' is used twice, first in line {line}.",
                f"Give each its own '{key}'.",
            )
        seen.setdefault(name, at)


def _crossed(limits: tuple[OwnLimit, ...], source: YamlSource, above: Steps) -> Iterator[Fault]:
    """Limits of one list that leave nothing between them."""
    for at, high in enumerate(limits):
        lows = (low for low in limits if low.side == "low" and low.point == high.point)
        for low in lows if high.side == "high" else ():
            if low.value >= high.value:
                yield fault_at(
                    source,
                    (*above, at, "value"),
                    "crossed",
                    f"The high limit {high.value.text} at {high.point} is not above the low "
                    f"limit {low.value.text} of the same list.",
                    "Check which of the two is written wrong.",
                )


def _unknown(name: str, table: str, source: YamlSource, steps: Steps) -> Iterator[Fault]:
    known = names_in(table)
    if name not in known:
        yield fault_at(
            source,
            steps,
            "unknown-name",
            f"'{name}' is not in config/{table}.yaml.",
            nearest(name, known),
        )
