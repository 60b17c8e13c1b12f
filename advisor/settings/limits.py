"""Published limits: config/limits.csv, one row per bound, in the unit it was printed in."""

from __future__ import annotations

import csv
from dataclasses import dataclass
from functools import cache
from pathlib import Path

from advisor.errors import AdvisorError, Fault, raise_if_any
from advisor.settings.shipped import shipped_folder
from advisor.settings.tables import HOW_KNOWN
from advisor.units import parse_quantity

COLUMNS = (
    "id", "scheme", "quantity", "point", "grade", "family", "binder", "lift_from", "lift_below",
    "condition", "low", "high", "kind", "unit", "source", "clause", "how_known",
)  # fmt: skip
FAMILIES = ("", "dense", "sma", "open")
BINDERS = ("", "modified", "unmodified")
POINTS = (
    "", "binder_tank", "hot_aggregate", "discharge", "delivery", "laydown", "rolling_end", "base",
    "air",
)  # fmt: skip


@dataclass(frozen=True)
class PublishedLimit:
    """A published bound; ``low`` and ``high`` in the inside unit, None where none is stated.

    ``point`` is where on the heat path it holds, empty for what bounds no temperature there.
    ``grade``, ``family`` and ``binder`` are empty where it holds for all; ``condition`` is what
    else the source says. ``low_written`` and ``high_written`` are as printed.
    """

    id: str
    scheme: str
    quantity: str
    point: str
    grade: str
    family: str
    binder: str
    lift_from_m: float
    lift_below_m: float
    condition: str
    low: float | None
    high: float | None
    low_written: str
    high_written: str
    kind: str
    source: str
    clause: str
    how_known: str


@cache
def load_limits() -> tuple[PublishedLimit, ...]:
    """All published limits the program knows. Raises FaultyInput with every faulty row."""
    return read_limits(shipped_folder("config") / "limits.csv")


@cache
def limit_schemes() -> tuple[str, ...]:
    """Names of the schemes that published limits belong to."""
    return tuple(dict.fromkeys(limit.scheme for limit in load_limits()))


def published_limits(
    schemes: tuple[str, ...], family: str, grade: str, modified: bool, lift_m: float
) -> tuple[PublishedLimit, ...]:
    """The limits of ``schemes`` that hold for a mix ``family``, binder ``grade`` and lift [m].

    What a row says beyond these stands in its ``condition`` and is for a person to judge.
    """
    binder = "modified" if modified else "unmodified"
    return tuple(
        limit
        for limit in load_limits()
        if limit.scheme in schemes
        and limit.family in ("", family)
        and limit.grade in ("", grade)
        and limit.binder in ("", binder)
        and limit.lift_from_m <= lift_m < limit.lift_below_m
    )


def read_limits(path: Path) -> tuple[PublishedLimit, ...]:
    """The limits in the CSV file at ``path``."""
    faults: list[Fault] = []
    limits: list[PublishedLimit] = []
    seen: set[str] = set()
    with path.open(encoding="utf-8", newline="") as lines:
        reader = csv.DictReader(lines)
        for row in reader:
            wrong = _wrong(row, seen)
            if not wrong:
                try:
                    limits.append(_limit(row))
                except AdvisorError as error:
                    wrong = error.faults[0].problem
            if wrong:
                faults.append(
                    Fault("limit-row", wrong, "", str(path), reader.line_num, field=row.get("id"))  # type: ignore[arg-type]
                )
            seen.add(str(row.get("id")))
    raise_if_any(faults)
    return tuple(limits)


def _wrong(row: dict[str, str], seen: set[str]) -> str:
    """What is wrong with a row, empty where nothing is."""
    if tuple(row) != COLUMNS or None in row.values():
        return f"The columns are to be: {', '.join(COLUMNS)}."
    empty = [name for name in ("id", "scheme", "quantity", "unit", "source") if not row[name]]
    if empty:
        return f"{', '.join(empty)} is empty."
    if row["id"] in seen:
        return "The id is used twice."
    for name, known in (
        ("how_known", HOW_KNOWN),
        ("family", FAMILIES),
        ("binder", BINDERS),
        ("point", POINTS),
    ):
        if row[name] not in known:
            return f"'{row[name]}' is no {name}: {', '.join(filter(None, known))}."
    return "" if row["low"] or row["high"] else "It has neither low nor high."


def _limit(row: dict[str, str]) -> PublishedLimit:
    kind = row["kind"]
    written = {side: f"{row[side]} {row['unit']}" if row[side] else "" for side in ("low", "high")}
    bounds = {side: parse_quantity(text, kind) if text else None for side, text in written.items()}
    lift_from, lift_below = row["lift_from"], row["lift_below"]
    return PublishedLimit(
        **{name: row[name] for name in COLUMNS[:7]},
        lift_from_m=parse_quantity(lift_from, "length") if lift_from else 0.0,
        lift_below_m=parse_quantity(lift_below, "length") if lift_below else float("inf"),
        condition=row["condition"],
        low=bounds["low"],
        high=bounds["high"],
        low_written=written["low"],
        high_written=written["high"],
        kind=kind,
        source=row["source"],
        clause=row["clause"],
        how_known=row["how_known"],
    )
