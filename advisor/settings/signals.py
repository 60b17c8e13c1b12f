"""How the plant's exports are written: which column is which signal, in which unit."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from advisor.settings.fields import Name, Strict, refusal
from advisor.settings.plant import Terrain
from advisor.units import kinds, units_of

_UNITS = {unit for kind in kinds() for unit in units_of(kind)}


class TimeColumn(Strict):
    """How an export writes the time."""

    column: Name
    """heading of the column; with ``date_column`` it holds the time of day only"""
    date_column: Name | None = None
    format: Name
    """as strptime reads it, such as %d/%m/%Y %H:%M:%S, or 'iso' for ISO 8601"""
    zone: Name
    """'plant' for the plant's clock with its clock changes, 'UTC', or a zone name"""


class Column(Strict):
    """One column of an export."""

    signal: Name
    """name the advisor uses"""
    unit: Name | None = None
    """unit of the numbers; absent for words and ids, and where the headings state it"""
    basis: Literal["dry", "wet"] | None = None
    """for moisture: whether it is a share of the dry or of the wet mass"""
    words: dict[str, bool] | None = None
    """for yes-or-no columns: what each written word means"""

    @model_validator(mode="after")
    def _known_unit(self) -> Column:
        if self.unit is not None and self.unit not in _UNITS:
            raise refusal("unit", f"'{self.unit}' is not a unit.", "Write it as C, F, t/h, %, kg.")
        return self


class LogSource(Strict):
    """One kind of export."""

    kind: Literal["plant_log", "tickets", "arrivals", "weather", "forecast"]
    """what it holds"""
    files: Name
    """files it is found in, relative to the plant folder; * stands for anything"""
    delimiter: Literal[",", ";", "\t", "|"] | None = None
    """absent: found from the file, as are the next two and the line of the headings"""
    decimal: Literal[".", ","] | None = None
    encoding: Literal["utf-8", "utf-16", "cp1252"] | None = None
    missing: Annotated[tuple[str, ...], Field(strict=False)] = ("",)
    """texts that stand for no reading, beside the usual ones"""
    time: TimeColumn
    columns: Annotated[dict[str, Column], Field(min_length=1)]
    """columns by their heading"""


class AirportReports(Strict):
    """Reports of an airport near by, as text (METAR)."""

    files: Name
    """files they are found in, relative to the plant folder; * stands for anything"""
    station: Annotated[str, Field(pattern=r"^[A-Z][A-Z0-9]{3}$")]
    """four letters of the airport; reports of others are set aside"""
    terrain: Terrain
    """what surrounds its wind gauge; an airport is mostly open"""


class Signals(Strict):
    """signals.yaml"""

    sources: Annotated[tuple[LogSource, ...], Field(strict=False, min_length=1)]
    """the exports the plant has"""
    metar: AirportReports | None = None

    def of_kind(self, kind: str) -> tuple[LogSource, ...]:
        """The exports that hold ``kind``."""
        return tuple(source for source in self.sources if source.kind == kind)
