"""One export file to a frame of signals in inside units and UTC, and the report of every row."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.errors import Fault, FaultyInput, raise_if_any
from advisor.glossary import Quantity
from advisor.logs.cells import (
    Decimal,
    Numbers,
    decimal_sign,
    numbers_from,
    stated_unit,
    switches_from,
)
from advisor.logs.clock import utc_from_wall, zone_named
from advisor.logs.layout import Layout, find_layout, plain_name
from advisor.logs.mapping import SIGNALS_FILE, check_mapping
from advisor.logs.report import IntakeReport, SetAsideRow, UnreadCells
from advisor.logs.rows import TextColumn, TextRows, read_rows
from advisor.logs.signals import SHAPES, is_switch, is_text, signal_quantity
from advisor.logs.text import PlainText, plain_text
from advisor.logs.workbook import ENCODING, is_workbook, sheets_of
from advisor.settings.signals import LogSource
from advisor.units import to_si

_TOTALS = frozenset(
    ("total", "totals", "sum", "summe", "gesamt", "mean", "average", "mittelwert", "min", "max")
)
_FAR_AWAY = np.timedelta64(400, "D")
_FIRST_TIME, _LAST_TIME = np.datetime64("1990-01-01"), np.datetime64("2100-01-01")
_NO_TIME = np.datetime64("NaT", "us")
_ISO_DATE = r"\d{4}-\d\d-\d\d"
_OFFSET = r"(?:[zZ]|[+-]\d\d(?::?\d\d)?)$"


@dataclass(frozen=True)
class _Cells:
    """The cells of one signal: its distinct texts as numbers, and which of them each row holds."""

    signal: str
    texts: tuple[str, ...]
    numbers: Numbers
    which: NDArray[np.int32]


@dataclass(frozen=True)
class Intake:
    """A frame sorted by time, the file line of each of its rows, and the report."""

    frame: pd.DataFrame
    lines: NDArray[np.int64]
    report: IntakeReport


def read_export(path: Path, source: LogSource, plant_zone: str) -> Intake:
    """The export at ``path``, text or Parquet, read as ``source`` says.

    ``plant_zone`` is the plant's time zone.

    Raises FaultyInput where the file as a whole cannot be read: missing, empty, no such columns,
    a unit that is stated nowhere or in two ways, a decimal sign that can be read either way.
    """
    check_mapping(source)
    try:
        raw = path.read_bytes()
    except OSError as error:
        raise FaultyInput.of(
            "file-unreadable",
            f"The file cannot be read: {error.strerror or error}.",
            "Check its name and that you may read it.",
            file=str(path),
        ) from error
    if path.suffix == ".parquet":
        from advisor.logs.parquet import parquet_as_csv  # slow to load, seldom needed

        raw, source = parquet_as_csv(path, source)
    return read_export_bytes(raw, path.name, source, plant_zone)


def read_export_bytes(raw: bytes, file: str, source: LogSource, plant_zone: str) -> Intake:
    """The export in ``raw``, as read_export; ``file`` is its name in messages."""
    times = [name for name in (source.time.date_column, source.time.column) if name]
    needed = tuple(dict.fromkeys([*times, *source.columns]))
    if is_workbook(raw):
        text, layout = _sheet_and_layout(raw, file, needed)
        source = source.model_copy(update={"decimal": None})  # its numbers are no text
    else:
        text = plain_text(raw, file, source.encoding)
        layout = find_layout(text, file, needed, (), source.delimiter)
    rows = read_rows(text, layout, file)
    utc, reasons, notes = _times(rows, layout, source, times, plant_zone, text.encoding == ENCODING)
    columns, cells = _signals(rows, layout, source, file)
    frame = pd.DataFrame({"time": pd.DatetimeIndex(utc).tz_localize("UTC"), **columns})
    _drop_repeats(frame, rows, reasons, SHAPES[source.kind].key)
    kept = reasons == ""
    set_aside = [
        SetAsideRow(int(rows.lines[place]), str(reasons[place]), rows.text(int(place)))
        for place in np.flatnonzero(~kept)
    ]
    used = frame[kept]
    order = np.argsort(used["time"].to_numpy(), kind="stable")
    if (np.diff(order) < 0).any():
        notes.append("The rows were not in order of time; they are sorted.")
    together = _placed_in_time(
        sorted((*rows.set_aside, *set_aside), key=lambda row: row.line), rows.lines[kept], used
    )
    report = IntakeReport(
        source=file,
        kind=source.kind,
        rows_read=len(used) + len(together),
        rows_used=len(used),
        set_aside=tuple(together),
        header_lines=layout.header_lines,
        blank_lines=rows.blank_lines,
        unread_cells=tuple(_unread(cells, kept, rows.lines)),
        notes=(*text.notes, *notes),
    )
    sorted_frame = used.iloc[order].reset_index(drop=True)
    return Intake(sorted_frame, rows.lines[kept][order], report)


def _sheet_and_layout(raw: bytes, file: str, needed: tuple[str, ...]) -> tuple[PlainText, Layout]:
    """The first sheet of a workbook that holds the columns ``needed``, and its layout."""
    refused: FaultyInput | None = None
    for name, text in sheets_of(raw, file):
        try:
            layout = find_layout(text, f"{file}, sheet {name}", needed, (), "\t")
        except FaultyInput as error:
            refused = refused or error
            continue
        return replace(text, notes=(f"Read from sheet {name}.",)), layout
    raise refused or FaultyInput.of(
        "file-empty", "The workbook holds no sheet.", "Export it again.", file=file
    )


def _placed_in_time(
    set_aside: list[SetAsideRow], lines: NDArray[np.int64], used: pd.DataFrame
) -> list[SetAsideRow]:
    """``set_aside`` with the moment of the used row before each, by their lines in the file."""
    if not len(used):
        return set_aside
    order = np.argsort(lines, kind="stable")
    before = np.searchsorted(lines[order], [row.line for row in set_aside]) - 1
    near = used["time"].iloc[order[np.maximum(before, 0)]]
    return [
        replace(row, near=moment.to_pydatetime())
        for row, moment in zip(set_aside, near, strict=True)
    ]


def _times(
    rows: TextRows,
    layout: Layout,
    source: LogSource,
    names: list[str],
    plant_zone: str,
    from_workbook: bool,
) -> tuple[NDArray[np.datetime64], NDArray[np.object_], list[str]]:
    """UTC of every row, NaT with a reason where there is none; and what was decided on the way."""
    parts = [rows.columns[name].as_array() for name in names]
    texts = pd.Series(parts[0] if len(parts) == 1 else parts[0] + " " + parts[1], dtype="str")
    style = "ISO8601" if source.time.format == "iso" else source.time.format
    # A time with its offset is a moment; one without is what the clock of the source showed.
    if source.time.format == "iso":
        exact = texts.str.contains(_OFFSET).to_numpy(dtype=bool)
    else:
        exact = np.full(len(texts), "%z" in style)
    shown = np.full(len(texts), _NO_TIME)
    shown[exact] = _read_times(texts[exact], style, utc=True)
    shown[~exact] = _read_times(texts[~exact], style, utc=False)
    if from_workbook:  # its own dates come as ISO text, however the mapping writes a time
        own = np.isnat(shown) & texts.str.match(_ISO_DATE).to_numpy(dtype=bool)
        shown[own] = _read_times(texts[own], "ISO8601", utc=False)
    reasons = np.full(len(texts), "", dtype=object)
    headings = {plain_name(layout.header[layout.columns[name]]) for name in names}
    for place in np.flatnonzero(np.isnat(shown)):
        if plain_name(parts[0][place]) in headings:
            reasons[place] = "the header again"
        elif _is_total(rows, int(place)):
            reasons[place] = "a line of totals"
        else:
            reasons[place] = "no readable time"
    far = _far_away(shown)
    reasons[far] = "a time more than a year away from the rest of the file"
    shown[far] = _NO_TIME
    zone = zone_named(plant_zone if source.time.zone == "plant" else source.time.zone)
    placed = utc_from_wall(np.where(exact, _NO_TIME, shown), zone, SHAPES[source.kind].regular)
    reasons[placed.skipped] = "a time that did not exist: the clocks went forward over it"
    reasons[placed.undecided] = "the repeated hour of the clock change, nothing tells which"
    return np.where(exact, shown, placed.utc), reasons, list(placed.notes)


def _read_times(texts: pd.Series, style: str, utc: bool) -> NDArray[np.datetime64]:
    read = pd.to_datetime(texts, format=style, errors="coerce", utc=utc)
    plain = read.dt.tz_localize(None) if read.dt.tz is not None else read
    times: NDArray[np.datetime64] = plain.to_numpy(dtype="datetime64[us]", copy=True)
    return times


def _far_away(times: NDArray[np.datetime64]) -> NDArray[np.bool_]:
    """Times that cannot belong to the file: a damaged digit of the year, a clock not yet set."""
    far = (times < _FIRST_TIME) | (times > _LAST_TIME)
    sound = np.sort(times[~np.isnat(times) & ~far])
    if len(sound):
        far |= np.abs(times - sound[len(sound) // 2]) > _FAR_AWAY
    return far


def _is_total(rows: TextRows, place: int) -> bool:
    """Whether a row without a time says in its first filled cell that it sums the others up."""
    cells = (column.texts[column.which[place]] for column in rows.columns.values())
    first = next((cell for cell in cells if cell), "")
    return plain_name(first).strip(" :=").split(" ")[0].strip(":") in _TOTALS


def _signals(
    rows: TextRows, layout: Layout, source: LogSource, file: str
) -> tuple[dict[str, Any], list[_Cells]]:
    """Every mapped signal in its inside unit, and which cells hold no number."""
    faults: list[Fault] = []
    units: dict[str, str] = {}
    numeric = {}
    for heading, column in source.columns.items():
        quantity = signal_quantity(column.signal)
        if quantity is not None:
            numeric[heading] = quantity
            try:
                units[heading] = _unit_of(heading, column.unit, layout, quantity, file)
            except FaultyInput as error:
                faults.extend(error.faults)
    raise_if_any(faults)
    decimal = source.decimal or decimal_sign(
        [text for heading in numeric for text in rows.columns[heading].texts], file
    )
    columns: dict[str, Any] = {}
    cells: list[_Cells] = []
    for heading, mapped in source.columns.items():
        signal, texts = mapped.signal, rows.columns[heading]
        if is_text(signal):
            columns[signal] = pd.array(texts.as_array(), dtype="str")
            continue
        numbers = _numbers(texts, signal, units.get(heading, ""), decimal, source, mapped.words)
        cells.append(_Cells(signal, texts.texts, numbers, texts.which))
        values = numbers.inside[texts.which]
        if is_switch(signal):
            columns[signal] = pd.array(
                [None if np.isnan(value) else bool(value) for value in values], dtype="boolean"
            )
        else:
            kind = numeric[heading].kind
            inside = _inside(values, units[heading], kind)
            columns[signal] = inside / (1 - inside) if mapped.basis == "wet" else inside
    return columns, cells


def _unit_of(
    heading: str, mapped: str | None, layout: Layout, quantity: Quantity, file: str
) -> str:
    """Unit of a column, from the mapping or from the file; the two have to agree."""
    stated = stated_unit(layout.units.get(heading, ""), quantity.kind)
    if mapped is None and stated is None:
        raise FaultyInput.of(
            "unit-missing",
            f"Neither the file nor the mapping says the unit of '{heading}'.",
            f"Write its unit in {SIGNALS_FILE}.",
            file=file,
            field=heading,
        )
    if (
        mapped is not None
        and stated is not None
        and to_si(1.0, mapped, quantity.kind) != to_si(1.0, stated, quantity.kind)
    ):
        raise FaultyInput.of(
            "unit-clash",
            f"The file says that '{heading}' is in {stated}, the mapping says {mapped}.",
            f"Correct {SIGNALS_FILE}, or leave the unit out there to follow the file.",
            file=file,
            field=heading,
        )
    return mapped or stated or ""


def _numbers(
    texts: TextColumn,
    signal: str,
    unit: str,
    decimal: Decimal,
    source: LogSource,
    words: dict[str, bool] | None,
) -> Numbers:
    empty = {text.casefold() for text in source.missing}
    shown = tuple("" if text.casefold() in empty else text for text in texts.texts)
    if not is_switch(signal):
        return numbers_from(shown, decimal, unit)
    if words:
        plain = {word.casefold(): "1" if on else "0" for word, on in words.items()}
        shown = tuple(plain.get(text.casefold(), text and f"?{text}") for text in shown)
    return switches_from(shown)


def _inside(values: NDArray[np.float64], unit: str, kind: str) -> NDArray[np.float64]:
    offset = to_si(0.0, unit, kind)
    return values * (to_si(1.0, unit, kind) - offset) + offset


def _unread(
    cells: list[_Cells], kept: NDArray[np.bool_], lines: NDArray[np.int64]
) -> Iterator[UnreadCells]:
    """Cells without a number in the rows that are used, by signal and reason."""
    for column in cells:
        for reason, which in (
            ("no value written", column.numbers.no_value),
            ("not a number", column.numbers.unreadable),
        ):
            hit = which[column.which] & kept if which.any() else kept & False
            if hit.any():
                first = int(lines[int(np.argmax(hit))])
                text = column.texts[column.which[int(np.argmax(hit))]]
                yield UnreadCells(column.signal, reason, int(hit.sum()), first, text)


def _drop_repeats(
    frame: pd.DataFrame, rows: TextRows, reasons: NDArray[np.object_], key: str
) -> None:
    """Give all but the last row of the same key a reason; the last one corrects the others."""
    usable = np.flatnonzero(reasons == "")
    if key != "time" and key in frame:
        nameless = usable[(frame[key].to_numpy(dtype=object)[usable] == "")]
        reasons[nameless] = f"no {key}"
        usable = np.flatnonzero(reasons == "")
    part = frame.iloc[usable]
    again = part.duplicated(key, keep="last").to_numpy()
    if not again.any():
        return
    last_of = {value: place for place, value in zip(usable, part[key], strict=True)}
    for place in usable[again]:
        line = rows.lines[last_of[frame[key].iloc[place]]]
        reasons[place] = f"same {key} as line {line}, which is used"
