"""What the plant makes and for whom: mixes and jobs."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from advisor.settings.fields import (
    Angle,
    BinderContent,
    Duration,
    Fraction,
    Haul,
    Length,
    Lift,
    Mass,
    Name,
    RapShare,
    RollingEnd,
    RollingTime,
    Sentence,
    Strict,
    TemperatureDelta,
    Written,
    refusal,
)
from advisor.settings.plant import Latitude, OwnLimit, Terrain

Limits = Annotated[tuple[OwnLimit, ...], Field(strict=False)]


class Rap(Strict):
    """Reclaimed asphalt in a mix."""

    share: RapShare
    """reclaimed asphalt as a share of the mass of the mix"""
    binder_content: BinderContent
    """binder in the reclaimed asphalt, as a share of its mass"""
    added: Literal["collar", "mixer", "with the stone"]
    """where it is added"""
    moisture_from: Name
    """subject of the moisture records of its pile"""


class Additive(Strict):
    """A warm-mix additive and how far its supplier says the mix may be cooler."""

    kind: Literal["surfactant", "foam", "wax"]
    """how it works"""
    offset_low: TemperatureDelta
    """least lowering of mixing and laying temperature the supplier states"""
    offset_high: TemperatureDelta
    """greatest lowering the supplier states"""
    source: Sentence
    """where the supplier says so"""

    @model_validator(mode="after")
    def _ordered(self) -> Additive:
        if not 0 <= self.offset_low <= self.offset_high:
            raise refusal(
                "crossed",
                f"'offset_low' {self.offset_low.text} and 'offset_high' {self.offset_high.text} "
                "are not in order.",
                "Write the lowering as positive differences, the smaller one as 'offset_low'.",
            )
        return self


class Mix(Strict):
    """A mix by its formula."""

    code: Name
    """what the plant's control and the tickets call it"""
    name: Sentence
    """what people call it"""
    family: Literal["dense", "sma", "open"]
    """dense, stone matrix or open graded"""
    nominal_size: Length
    """largest stone size it is named after"""
    binder_content: BinderContent
    """all binder, as a share of the mass of the mix"""
    tanks: Annotated[tuple[Name, ...], Field(strict=False, min_length=1)]
    """tanks it may be fed from"""
    grade: Name
    """binder grade the formula asks for"""
    filler_share: Fraction
    """added filler, cold, as a share of the mass of the mix"""
    moisture_from: Name = "aggregate"
    """subject of the moisture records of its stone"""
    rap: Rap | None = None
    additive: Additive | None = None
    limits: Limits = ()


class MixesFile(Strict):
    """mixes.yaml"""

    mixes: Annotated[tuple[Mix, ...], Field(strict=False, min_length=1)]
    """the mixes"""


class Base(Strict):
    """What is paved on."""

    material: Name
    """a material of config/bases.yaml"""
    condition: Literal["dry", "wet", "frozen"]
    """state of its surface"""


class HaulRoad(Strict):
    """The way from the plant to the paver."""

    time: Haul
    """usual time from load-out to the start of unloading, waiting not counted"""
    spread: Duration
    """standard deviation of that time"""
    distance: Length | None = None


class Truck(Strict):
    """The trucks on the job."""

    body: Name
    """a body of config/truck_bodies.yaml"""
    cover: Literal["none", "tarpaulin", "insulated"]
    """what covers the load"""
    payload: Mass
    """mix per load"""


class Job(Strict):
    """Where a mix goes and how it is laid."""

    code: Name
    """what tickets call it"""
    name: Sentence
    """what people call it"""
    mix: Name
    """code of the mix"""
    lift: Lift
    """compacted thickness"""
    base: Base
    haul: HaulRoad
    truck: Truck
    wait: Duration
    """usual wait at the paver before unloading"""
    paving_loss: TemperatureDelta | None = None
    """drop from truck to behind the screed where it was measured"""
    rolling_wanted: RollingTime
    """minutes the rollers need from laying to the last effective pass"""
    rolling_end: RollingEnd | None = None
    """temperature below which rolling adds no density, where the job sets it"""
    terrain: Terrain
    """what surrounds the paving site"""
    latitude: Latitude | None = None
    longitude: Angle | None = None
    limits: Limits = ()

    @property
    def on_road_s(self) -> Written:
        """Haul and wait together [s]."""
        return Written(self.haul.time + self.wait)


class JobsFile(Strict):
    """jobs.yaml"""

    jobs: Annotated[tuple[Job, ...], Field(strict=False, min_length=1)]
    """the jobs"""
