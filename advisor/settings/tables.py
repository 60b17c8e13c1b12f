"""The tables in config/: what is true for every plant, each number with unit, source, how known.

A number stands in a cell of its own (``{value, unit, source, how_known}``) or plain in a column
whose unit the file gives under ``units``; source and how known may be given once for a row or for
the file. Temperatures come out in C, differences (unit K) in K, everything else in SI.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from functools import cache
from pathlib import Path
from typing import Any

from advisor.errors import AdvisorError, Fault, FaultyInput, raise_if_any
from advisor.settings.faults import fault_at, nearest
from advisor.settings.shipped import shipped_folder
from advisor.settings.yaml_source import Steps, YamlSource, read_yaml
from advisor.units import kinds, to_si, units_of

HOW_KNOWN = ("looked up", "derived", "common practice", "from memory")

_TOP = {"rows", "units", "source", "how_known", "note"}
_CELL = {"value", "unit", "source", "how_known", "note", "year"}
# Units made of SI units alone need no conversion, whatever the quantity.
_SI_PART = r"(?:kg|m|s|K|J|W|Pa|mol|deg|1)(?:-?\d)?"
_COHERENT = re.compile(rf"{_SI_PART}(?:[./]\(?{_SI_PART}\)?)*\)?")


@dataclass(frozen=True)
class Provenance:
    """Where a number comes from and how it is known."""

    source: str
    how_known: str
    unit: str
    note: str = ""


@dataclass(frozen=True)
class Row(Mapping[str, Any]):
    """One row of a table: values by column, numbers in the inside unit; and where each is from."""

    values_of: dict[str, Any]
    origins: dict[str, Provenance] = field(repr=False)
    source: str = ""
    how_known: str = ""

    def __getitem__(self, column: str) -> Any:
        return self.values_of[column]

    def __iter__(self) -> Iterator[str]:
        return iter(self.values_of)

    def __len__(self) -> int:
        return len(self.values_of)

    def origin(self, column: str) -> Provenance:
        """Source, how known and written unit of the number in ``column``."""
        return self.origins[column]


@dataclass(frozen=True)
class Table:
    """A table of config/; ``file`` is where it stands."""

    name: str
    file: str
    rows: tuple[Row, ...]

    def row(self, name: str, column: str = "name") -> Row:
        """The row called ``name``; FaultyInput lists the names known where there is none."""
        for row in self.rows:
            if row.get(column) == name:
                return row
        raise FaultyInput.of(
            "unknown-name",
            f"'{name}' is not in config/{self.name}.yaml.",
            nearest(name, [str(row.get(column)) for row in self.rows]),
            value=name,
        )


@cache
def load_table(name: str) -> Table:
    """The table config/``name``.yaml. Raises FaultyInput with every number that lacks something."""
    return read_table(shipped_folder("config") / f"{name}.yaml")


@cache
def names_in(name: str) -> tuple[str, ...]:
    """Names of the rows of the table config/``name``.yaml."""
    return tuple(str(row["name"]) for row in load_table(name).rows)


def read_table(path: Path) -> Table:
    """The table in the file at ``path``."""
    source = read_yaml(path)
    faults: list[Fault] = []
    top = source.value
    if not isinstance(top, dict) or not isinstance(top.get("rows"), list):
        problem = "A table has its entries under 'rows'."
        raise FaultyInput(fault_at(source, (), "no-rows", problem, "Write 'rows:' and a list."))
    for key in sorted(set(top) - _TOP):
        problem = f"'{key}' is not a key of a table."
        faults.append(fault_at(source, (key,), "unknown-key", problem, nearest(key, sorted(_TOP))))
    rows = tuple(
        _row(source, at, given, faults)
        for at, given in enumerate(top["rows"])
        if isinstance(given, dict)
    )
    if len(rows) < len(top["rows"]):
        faults.append(fault_at(source, ("rows",), "no-keys", "A row has to have keys.", ""))
    raise_if_any(faults)
    return Table(path.stem, str(path), rows)


def _row(source: YamlSource, at: int, given: dict[str, Any], faults: list[Fault]) -> Row:
    top = source.value
    shared = {key: given.get(key) or top.get(key, "") for key in ("source", "how_known")}
    units = top.get("units") or {}
    values: dict[str, Any] = {}
    origins: dict[str, Provenance] = {}
    for column, raw in given.items():
        if column in shared:
            continue
        values[column] = _value(
            raw,
            column,
            ("rows", at, column),
            source,
            shared,
            units.get(column, ""),
            origins,
            faults,
        )
    return Row(values, origins, str(shared["source"]), str(shared["how_known"]))


def _value(
    raw: Any,
    column: str,
    steps: Steps,
    source: YamlSource,
    shared: Mapping[str, Any],
    unit: str,
    origins: dict[str, Provenance],
    faults: list[Fault],
) -> Any:
    """The value of a cell in the inside unit; its origin is kept, what it lacks is told."""
    if isinstance(raw, bool) or raw is None or isinstance(raw, str):
        return raw
    cell = raw if isinstance(raw, dict) else {"value": raw}
    if "value" not in cell:  # a table within the row: its own cells, told apart by a dot
        inner: dict[str, Any] = {}
        for key, part in cell.items():
            named = f"{column}.{key}"
            inner[key] = _value(part, named, (*steps, key), source, shared, unit, origins, faults)
        return inner
    for key in sorted(set(cell) - _CELL):
        problem = f"'{key}' is not a key of a number."
        known = nearest(key, sorted(_CELL))
        faults.append(fault_at(source, (*steps, key), "unknown-key", problem, known))
    origin = Provenance(
        str(cell.get("source") or shared["source"]),
        str(cell.get("how_known") or shared["how_known"]),
        str(cell.get("unit") or unit),
        str(cell.get("note", "")),
    )
    lacking = [
        word
        for word, there in (("unit", origin.unit), ("source", origin.source))
        if not there.strip()
    ]
    if origin.how_known not in HOW_KNOWN:
        lacking.append(f"how_known ({', '.join(HOW_KNOWN)})")
    if lacking:
        faults.append(
            fault_at(
                source,
                steps,
                "number-lacks",
                f"The number lacks {' and '.join(lacking)}.",
                "Give it in the cell, for the row or for the file.",
            )
        )
        return None
    origins[column] = origin
    try:
        return _inside(cell["value"], origin.unit)
    except AdvisorError as error:
        first = error.faults[0]
        faults.append(fault_at(source, steps, first.code, first.problem, first.remedy))
        return None


def _inside(number: Any, unit: str) -> Any:
    if isinstance(number, list):
        return tuple(_inside(each, unit) for each in number)
    if isinstance(number, bool) or not isinstance(number, int | float):
        raise FaultyInput.of("not-a-number", f"'{number}' is not a number.", "Write a number.")
    kind = kind_of_unit(unit)
    return to_si(float(number), unit, kind) if kind else float(number)


def kind_of_unit(unit: str) -> str | None:
    """The kind of quantity a unit in a table stands for; None for a unit made of SI units alone.

    C and F are temperatures, K is a difference.
    """
    if unit in ("K", "1"):
        return {"K": "temperature_delta", "1": "fraction"}[unit]
    found = next((kind for kind in kinds() if unit in units_of(kind)), None)
    if found is None and not _COHERENT.fullmatch(unit):
        raise FaultyInput.of(
            "unit",
            f"'{unit}' is not a unit known here.",
            "Write a unit of advisor/units.py, or one made of SI units such as J/kg.",
            value=unit,
        )
    return found
