"""What a plant could do otherwise, and the situation and dryer that this makes."""

from __future__ import annotations

from dataclasses import dataclass, replace

from advisor.advice.fuel import fuel_called
from advisor.advice.situation import Situation
from advisor.dryer import Operation, with_air_ratio, with_fuel
from advisor.errors import Fault, FaultyInput, raise_if_any
from advisor.settings.faults import nearest
from advisor.settings.mixes import Additive, Mix
from advisor.settings.plant import Price
from advisor.settings.tables import Row, load_table

_DISCHARGE_C = (80.0, 220.0)
_AIR_RATIO = (1.0, 6.0)  # as for the plant's own dryer


@dataclass(frozen=True)
class Changes:
    """What is done otherwise; None and 0 leave a thing as it is.

    ``cooler_k``: discharge set lower [K]; None takes the advised target of the changed plant.
    ``drier``: water taken off the stone, of dry mass [1], below 0 for wetter; ``pile``: a row of
    config/stockpiles.yaml, whose stone is drier by what stands there; ``fuel``: a row of
    config/fuels.yaml and ``price`` what it costs; ``air_ratio``: all air over the air just needed
    [1]; ``rap_share``: of mix [1]; ``rap_moisture``: of dry RAP [1]; ``rap_added``: 'collar',
    'mixer' or 'with the stone'; ``additive``: a row of config/modifiers.yaml with an offset;
    ``haul_s`` [s], ``wind_ms`` [m/s], ``air_c`` [C] and ``lift_m`` [m] in place of what they are.
    """

    cooler_k: float | None = None
    drier: float = 0.0
    pile: str | None = None
    fuel: str | None = None
    price: Price | None = None
    air_ratio: float | None = None
    rap_share: float | None = None
    rap_moisture: float | None = None
    rap_added: str | None = None
    additive: str | None = None
    haul_s: float | None = None
    wind_ms: float | None = None
    air_c: float | None = None
    lift_m: float | None = None


def changed_situation(situation: Situation, changes: Changes) -> Situation:
    """The situation with its mix, stone, haul and weather changed.

    Raises FaultyInput for a change that cannot be, naming it.
    """
    mix, job, weather = situation.mix, situation.job, situation.weather
    rap_moisture = situation.rap_moisture
    if (changes.rap_share, changes.rap_moisture, changes.rap_added) != (None, None, None):
        mix = _with_rap(mix, changes)
        if changes.rap_moisture is not None:
            rap_moisture = changes.rap_moisture
    if changes.additive is not None:
        mix = mix.model_copy(update={"additive": _additive(changes.additive)})
    if changes.haul_s is not None:
        job = job.model_copy(update={"haul": job.haul.model_copy(update={"time": changes.haul_s})})
    if changes.lift_m is not None:
        job = job.model_copy(update={"lift": changes.lift_m})
    if weather is not None and changes.wind_ms is not None:
        weather = replace(weather, wind_ms=changes.wind_ms)
    if weather is not None and changes.air_c is not None:
        # The air is taken to stay as dry as it is: its dew point moves along.
        dew_c = weather.dew_point_c + changes.air_c - weather.air_c
        weather = replace(weather, air_c=changes.air_c, dew_point_c=dew_c)
    off = changes.drier + (_pile(changes.pile)["drier"] if changes.pile is not None else 0.0)
    moisture = situation.moisture - off
    if moisture < 0.0:
        raise FaultyInput.of(
            "drier-than-dry",
            f"The stone holds {situation.moisture:.1%} of water; {off:.1%} cannot be taken off.",
            f"Give at most {100.0 * situation.moisture:.1f} %.",
            field="drier",
        )
    return replace(
        situation,
        mix=mix,
        job=job,
        weather=weather,
        moisture=moisture,
        rap_moisture=rap_moisture,
    )


def _with_rap(mix: Mix, changes: Changes) -> Mix:
    """The mix with its RAP changed; refused where it has none or would have no stone left."""
    if mix.rap is None:
        raise FaultyInput.of(
            "no-rap", f"The mix {mix.code} has no RAP.", "Choose a mix with RAP.", field="rap"
        )
    asked = {"share": changes.rap_share, "added": changes.rap_added}
    rap = mix.rap.model_copy(
        update={name: value for name, value in asked.items() if value is not None}
    )
    most = 1.0 - mix.filler_share - mix.binder_content
    if not 0.0 < rap.share < most or rap.share * rap.binder_content > mix.binder_content:
        raise FaultyInput.of(
            "rap-share",
            f"The mix {mix.code} cannot be made with {rap.share:.0%} RAP.",
            f"Give more than 0 and less than {most:.0%}, with no more old binder than the mix "
            f"holds, {mix.binder_content:.1%}.",
            field="rap_share",
        )
    return mix.model_copy(update={"rap": rap})


def refuse_impossible(changes: Changes, discharge_c: float) -> None:
    """Refuse degrees and air that no dryer can run with, for a mix set at ``discharge_c`` [C]."""
    faults = []
    least_c, most_c = _DISCHARGE_C
    cooler = changes.cooler_k
    if cooler is not None and not least_c <= discharge_c - cooler <= most_c:
        faults.append(
            Fault(
                "out-of-range",
                f"{cooler:g} K cooler than {discharge_c:.0f} C is no mix of asphalt.",
                f"Give what leaves the discharge between {least_c:g} and {most_c:g} C.",
                field="cooler",
                value=f"{cooler:g}",
            )
        )
    least, most = _AIR_RATIO
    if changes.air_ratio is not None and not least <= changes.air_ratio <= most:
        faults.append(
            Fault(
                "out-of-range",
                f"An air ratio of {changes.air_ratio:g} is not between {least:g} and {most:g}.",
                "Give all air, leaks included, over the air the fuel needs.",
                field="air_ratio",
                value=f"{changes.air_ratio:g}",
            )
        )
    raise_if_any(faults)


def piles() -> tuple[str, ...]:
    """Names of the ways to keep a stockpile drier."""
    return tuple(str(row["name"]) for row in load_table("stockpiles").rows)


def _pile(name: str) -> Row:
    if name not in piles():
        raise FaultyInput.of(
            "unknown-pile",
            f"'{name}' is no way to keep a stockpile that is known here.",
            nearest(name, piles()),
            field="pile",
            value=name,
        )
    return load_table("stockpiles").row(name)


def additives() -> tuple[str, ...]:
    """Names of the additives that let a mix be made cooler by an offset."""
    return tuple(str(row["name"]) for row in load_table("modifiers").rows if _has_offset(row))


def _has_offset(row: Row) -> bool:
    return row.get("offset_high") is not None and row["kind"] in ("surfactant", "foam")


def _additive(name: str) -> Additive:
    if name not in additives():
        raise FaultyInput.of(
            "unknown-additive",
            f"'{name}' is no additive that lets a mix be made cooler.",
            nearest(name, additives()),
            field="additive",
            value=name,
        )
    row = load_table("modifiers").row(name)
    return Additive.model_validate(
        {
            "kind": row["kind"],
            "offset_low": f"{row['offset_low']:g} K",
            "offset_high": f"{row['offset_high']:g} K",
            "source": row.origin("offset_high").source,
        }
    )


def changed_dryer(operation: Operation, changes: Changes) -> Operation:
    """The dryer with its fuel and air changed."""
    if changes.fuel is not None:
        operation = with_fuel(operation, fuel_called(changes.fuel))
    if changes.air_ratio is not None:
        operation = with_air_ratio(operation, changes.air_ratio)
    return operation


def notes_on(changes: Changes) -> list[str]:
    """What to know of a change before its numbers are believed."""
    notes = []
    if changes.pile is not None:
        row = _pile(changes.pile)
        origin = row.origin("drier")
        notes.append(
            f"All stone is taken to be {row['drier']:.1%} drier from a {changes.pile} pile: "
            f"{origin.source} ({origin.how_known})."
        )
    if changes.fuel is not None and changes.price is None:
        notes.append(f"The price of {changes.fuel} is not known here: no money is told.")
    if changes.air_ratio is not None:
        notes.append(
            "Air that leaks in behind the dryer costs the fan, not the fuel: for that part nothing "
            "is saved."
        )
    return notes
