"""The situation at one moment: what is known for one job, where each number came from."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import datetime

from advisor.advice.content import BinderState, binder_in_tank
from advisor.advice.facts import PlantFacts, Weather
from advisor.advice.result import InputUsed
from advisor.advice.weather import weather_told
from advisor.errors import AdvisorError
from advisor.records import Entry
from advisor.settings.mixes import Job, Mix
from advisor.settings.plant import Silo, Tank
from advisor.settings.tables import load_table
from advisor.units import from_si, shown


@dataclass(frozen=True, eq=False)
class Situation:
    """Everything an advice is worked out from; ``missing`` says in sentences what is not known.

    ``hold_s`` is (least, usual, most); ``base_reading_c`` is None where nobody measured.
    """

    facts: PlantFacts
    at: datetime
    job: Job
    mix: Mix
    tank: Tank
    silo: Silo | None
    run: Entry | None
    binder: BinderState | None
    weather: Weather | None
    base_reading_c: float | None
    base_condition: str
    rate_kgs: float
    silo_kg: float
    hold_s: tuple[float, float, float]
    moisture: float
    rap_moisture: float
    inputs: tuple[InputUsed, ...]
    missing: tuple[str, ...]


def gather_situation(
    facts: PlantFacts, at: datetime, job: str | None = None, tank: str | None = None
) -> Situation:
    """What is known at ``at`` for ``job``, or for the job that runs then.

    Raises MissingInput where no job runs and none is named, FaultyInput for a name not known.
    """
    # What was recorded later was not known then: an advice of the past is worked out as it was.
    facts = facts if facts.known_at else replace(facts, known_at=at)
    folder = facts.folder
    run = facts.run_at(at)
    if job is None and run is None:
        raise _no_job(facts, at)
    chosen = folder.job(job or (run.fact.job if run else ""))
    mix = folder.mix(chosen.mix)
    on = run if run and run.fact.job == chosen.code else _next_run(facts, chosen.code, at)
    fed = folder.tank(tank or (on.fact.tank if on else mix.tanks[0]))
    silo = folder.silo(on.fact.silo) if on and on.fact.silo else _first(folder.plant.silos)
    noted = _Notes(facts, at)
    noted.plain("job", f"{chosen.code} {chosen.name}", "chosen" if job else "order sheet")
    if not tank and not on:
        noted.assume("tank", fed.name, "first tank the mix may be fed from")
    binder = _binder(facts, fed, at, noted)
    weather = _weather(facts, chosen, at, noted)
    base_c, condition = _base(facts, chosen, at, noted)
    rate, silo_kg, hold = _silo(facts, silo, on, at, noted)
    moisture = noted.moisture(mix.moisture_from, "stone moisture")
    rap = noted.moisture(mix.rap.moisture_from, "RAP moisture") if mix.rap else 0.0
    _job_inputs(chosen, noted)
    return Situation(
        facts, at, chosen, mix, fed, silo, on, binder, weather, base_c, condition, rate, silo_kg,
        hold, moisture, rap, tuple(noted.inputs), tuple(noted.missing),
    )  # fmt: skip


class _Notes:
    """Inputs used and inputs missing, in the order met."""

    def __init__(self, facts: PlantFacts, at: datetime) -> None:
        self.facts, self.at = facts, at
        self.inputs: list[InputUsed] = []
        self.missing: list[str] = []

    def shown(self, value: float, kind: str) -> str:
        """``value`` in the units of the reader."""
        return shown(value, kind, self.facts.units)

    def plain(self, name: str, text: str, origin: str, age_s: float | None = None) -> None:
        self.inputs.append(InputUsed(name, text, origin, age_s))

    def assume(self, name: str, text: str, origin: str) -> None:
        self.inputs.append(InputUsed(name, text, origin, assumed=True))

    def moisture(self, pile: str, name: str) -> float:
        """Moisture [1, of dry mass] of ``pile``, or the usual one, which is then listed."""
        defaults = load_table("defaults")
        entry = self.facts.held("moisture", pile, self.at)
        age = (self.at - entry.valid_from).total_seconds() if entry else None
        if entry and age is not None and age <= defaults.row("moisture age")["most"]:
            self.plain(name, f"{entry.fact.of_dry_mass:.1%}", f"record of {entry.who}", age)
            return float(entry.fact.of_dry_mass)
        usual = defaults.row(name)
        self.assume(name, f"{usual['usual']:.1%}", usual.source)
        return float(usual["usual"])


def _no_job(facts: PlantFacts, at: datetime) -> AdvisorError:
    from advisor.errors import MissingInput

    local = at.astimezone(facts.folder.zone)
    codes = ", ".join(job.code for job in facts.folder.jobs)
    return MissingInput.of(
        "no-job",
        f"No job runs at {local:%a %d %b %H:%M}.",
        f"Name one with --job: {codes}; or choose another time.",
        field="job",
    )


def _next_run(facts: PlantFacts, job: str, at: datetime) -> Entry | None:
    """The run of ``job`` nearest to ``at``, for its tank, silo and rate."""
    runs = [run for run in facts.all_held("job_run", "plant") if run.fact.job == job]
    return min(runs, key=lambda run: abs((run.valid_from - at).total_seconds()), default=None)


def _first(silos: Sequence[Silo]) -> Silo | None:
    return silos[0] if silos else None


def _binder(facts: PlantFacts, tank: Tank, at: datetime, noted: _Notes) -> BinderState | None:
    try:
        binder = binder_in_tank(facts, tank.name, at)
    except AdvisorError as error:
        noted.missing.extend(str(fault) for fault in error.faults)
        return None
    noted.plain(
        f"binder in {tank.name}",
        binder.words,
        "estimate from deliveries and levels" if binder.provisional else "certificate",
        binder.age_s,
    )
    return binder


def _weather(facts: PlantFacts, job: Job, at: datetime, noted: _Notes) -> Weather | None:
    told = weather_told(facts, at, job.code)
    if not told:
        noted.missing.append(
            "The weather is not known: nothing was seen in the last hour and a half, and no "
            "forecast tells it. Bring the weather file up to date, or record what is seen "
            "('advisor records import', kind weather)."
        )
        return None
    taken, *others = told
    noted.plain("weather", _weather_words(taken, noted), taken.origin, taken.age_s)
    for other in others:
        if not other.foretold:
            noted.plain("weather also", _weather_words(other, noted), other.origin, other.age_s)
    return taken


def _weather_words(weather: Weather, noted: _Notes) -> str:
    rain = ", rain" if weather.rain else ""
    in_ft = noted.facts.units == "us"
    height = (
        f"{from_si(weather.wind_height_m, 'ft', 'length'):.0f} ft"
        if in_ft
        else f"{weather.wind_height_m:g} m"
    )
    return (
        f"air {noted.shown(weather.air_c, 'temperature')}, "
        f"wind {noted.shown(weather.wind_ms, 'speed')} at {height}, "
        f"cloud {weather.cloud_of_sky:.0%}{rain}"
    )


def _base(facts: PlantFacts, job: Job, at: datetime, noted: _Notes) -> tuple[float | None, str]:
    entry = facts.held("surface_reading", job.code, at)
    oldest = load_table("defaults").row("surface age")["most"]
    age = (at - entry.valid_from).total_seconds() if entry else None
    if entry and age is not None and age <= oldest:
        text = f"{noted.shown(entry.fact.temperature, 'temperature')}, {entry.fact.condition}"
        noted.plain("base surface", text, f"measured by {entry.who}", age)
        return float(entry.fact.temperature), str(entry.fact.condition)
    noted.assume(
        "base surface", f"from air and sun, {job.base.condition}", "worked out; measure it"
    )
    return None, job.base.condition


def _silo(
    facts: PlantFacts, silo: Silo | None, run: Entry | None, at: datetime, noted: _Notes
) -> tuple[float, float, tuple[float, float, float]]:
    """Rate [kg/s], content [kg] and time in the silo [s] as (least, usual, most)."""
    dryer = facts.folder.plant.dryer
    if run:
        rate = float(run.fact.rate)
        noted.plain("mix rate", noted.shown(rate, "mass_rate"), "order sheet")
    else:
        rate = float(dryer.rate_max) * 0.8
        noted.assume(
            "mix rate", noted.shown(rate, "mass_rate"), "four fifths of the plant's maximum"
        )
    if silo is None:
        return rate, 0.0, (0.0, 0.0, 0.0)
    reading = facts.latest(silo.content_signal, at) if silo.content_signal else None
    if reading and reading[0] > 0:
        kg, age = reading
        usual = kg / rate
        noted.plain(f"content of {silo.name}", noted.shown(kg, "mass"), "plant log", age)
        return rate, kg, (0.5 * usual, usual, 2.0 * usual + 300.0)
    row = load_table("defaults").row("time in silo")
    noted.assume("time in silo", noted.shown(row["usual"], "duration"), row.source)
    return rate, rate * row["usual"], (row["low"], row["usual"], row["high"])


def _job_inputs(job: Job, noted: _Notes) -> None:
    lift, spread = noted.shown(job.lift, "length"), noted.shown(job.haul.spread, "duration")
    noted.plain("lift", f"{lift} on {job.base.material}", "job")
    noted.plain(
        "haul",
        f"{noted.shown(job.haul.time, 'duration')} ± {spread} and "
        f"{noted.shown(job.wait, 'duration')} wait, {job.truck.body} body, cover {job.truck.cover}",
        "job",
    )
    noted.plain("rolling time wanted", noted.shown(job.rolling_wanted, "duration"), "job")
