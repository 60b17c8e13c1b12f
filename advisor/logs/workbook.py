"""Sheets of an Excel workbook (.xlsx) as text with tabs, one line per row of the sheet.

A cell becomes what a person sees in it as far as that decides its meaning: dates and times of day
as ISO text, percentages with their sign, errors such as #N/A by name. Office Open XML is an open
standard (ECMA-376, ISO/IEC 29500); only what a log needs of it is read here.
"""

from __future__ import annotations

import csv
import io
import posixpath
import re
import zipfile
import zlib
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import datetime, timedelta
from xml.etree import ElementTree

from advisor.errors import AdvisorError, FaultyInput
from advisor.logs.text import MOST_BYTES, PlainText

ENCODING = "xlsx"
_ZIP, _OLD_OFFICE = b"PK\x03\x04", bytes.fromhex("d0cf11e0a1b11ae1")
_MOST_COLUMNS, _MOST_ROWS = 16_384, 1_048_576
# Number formats that every workbook has without saying so (ECMA-376 part 1, 18.8.30).
_DATE_FORMATS = frozenset((*range(14, 23), *range(45, 48)))
_PERCENT_FORMATS = frozenset((9, 10))
# Days are counted on the clock of whoever wrote them. The usual count holds a 29 February 1900 that
# never was, so that from March 1900 on its day 0 falls on 30 December.
_DAY_ZERO = datetime.fromisoformat("1899-12-30")
_DAY_ZERO_1904 = datetime.fromisoformat("1904-01-01")
_NOT_SHOWN = re.compile(r'"[^"]*"|\[[^\]]*\]|\\.')  # words, colours and single letters in a format
# All that a damaged archive or a damaged part of one is known to raise.
_BROKEN = (
    zipfile.BadZipFile, zlib.error, ElementTree.ParseError, EOFError, LookupError, OSError,
    OverflowError, RuntimeError, ValueError,
)  # fmt: skip
_PLACE = re.compile(r"([A-Z]+)(\d+)")


@dataclass(frozen=True)
class _Styles:
    """Which cell styles show a date or a percentage, and where the count of days begins."""

    dates: frozenset[int]
    percents: frozenset[int]
    day_zero: datetime


def is_workbook(raw: bytes) -> bool:
    """Whether ``raw`` is a workbook rather than text."""
    return raw.startswith((_ZIP, _OLD_OFFICE))


def sheets_of(raw: bytes, file: str) -> Iterator[tuple[str, PlainText]]:
    """Name and text of every sheet in ``raw``, in the order of the workbook.

    Raises FaultyInput, naming ``file``, where it is no .xlsx workbook, is damaged, or is locked by
    a password.
    """
    if raw.startswith(_OLD_OFFICE):
        raise _faulty(file, "This is an old .xls workbook, or one locked by a password.")
    try:
        with zipfile.ZipFile(io.BytesIO(raw)) as parts:
            if sum(part.file_size for part in parts.infolist()) > MOST_BYTES:
                raise _faulty(file, "The workbook is too large to be read at once.")
            strings = _strings(parts)
            styles = _styles(parts)
            for name, part in _sheet_parts(parts):
                yield name, _sheet_text(parts.read(part), strings, styles)
    except _BROKEN as error:
        raise _faulty(file, f"The workbook cannot be read: {error}.") from error


def _faulty(file: str, problem: str) -> AdvisorError:
    remedy = "Open it in an office program and save it as .xlsx or as CSV, without a password."
    return FaultyInput.of("workbook", problem, remedy, file=file)


def _tree(raw: bytes) -> ElementTree.Element:
    """The elements of one part, without the names of their vocabularies."""
    if b"<!DOCTYPE" in raw[:2000] or b"<!ENTITY" in raw:
        raise ValueError("a part of it defines entities, which no workbook needs")
    root = ElementTree.fromstring(raw)  # noqa: S314 - entities are refused above
    for one in root.iter():
        one.tag = one.tag.rpartition("}")[2]
    return root


def _sheet_parts(parts: zipfile.ZipFile) -> list[tuple[str, str]]:
    """Name of each sheet and the part of the file that holds it."""
    targets = {
        one.get("Id", ""): one.get("Target", "")
        for one in _tree(parts.read("xl/_rels/workbook.xml.rels"))
    }
    found = []
    for sheet in _tree(parts.read("xl/workbook.xml")).iter("sheet"):
        links = [value for key, value in sheet.attrib.items() if key.endswith("}id")]
        target = targets[links[0]]
        part = target.lstrip("/") if target.startswith("/") else posixpath.join("xl", target)
        if part in parts.namelist() and "worksheets" in part:
            found.append((sheet.get("name", ""), part))
    return found


def _strings(parts: zipfile.ZipFile) -> list[str]:
    if "xl/sharedStrings.xml" not in parts.namelist():
        return []
    return [_text_in(one) for one in _tree(parts.read("xl/sharedStrings.xml")).iter("si")]


def _text_in(element: ElementTree.Element) -> str:
    """All text of a string, without the reading aids that some scripts carry."""
    aids = {part for aid in element.iter("rPh") for part in aid.iter("t")}
    return "".join(part.text or "" for part in element.iter("t") if part not in aids)


def _styles(parts: zipfile.ZipFile) -> _Styles:
    dates, percents = set(), set()
    if "xl/styles.xml" in parts.namelist():
        root = _tree(parts.read("xl/styles.xml"))
        own = {
            int(one.get("numFmtId", 0)): _NOT_SHOWN.sub("", one.get("formatCode", "")).casefold()
            for one in root.iter("numFmt")
        }
        cells = root.find("cellXfs")
        for style, one in enumerate(cells if cells is not None else ()):
            number = int(one.get("numFmtId", 0))
            shown = own.get(number, "")
            if number in _PERCENT_FORMATS or "%" in shown:
                percents.add(style)
            elif number in _DATE_FORMATS or re.search(r"[ymdhs]", shown):
                dates.add(style)
    settings = _tree(parts.read("xl/workbook.xml")).find("workbookPr")
    since_1904 = settings is not None and settings.get("date1904", "0") in ("1", "true")
    return _Styles(
        frozenset(dates), frozenset(percents), _DAY_ZERO_1904 if since_1904 else _DAY_ZERO
    )


def _sheet_text(raw: bytes, strings: list[str], styles: _Styles) -> PlainText:
    rows: list[list[str]] = []
    for row in _tree(raw).iter("row"):
        number = int(row.get("r", len(rows) + 1))
        if not len(rows) < number <= _MOST_ROWS:
            raise ValueError(f"row {number} stands out of order")
        rows.extend([] for _ in range(number - 1 - len(rows)))  # rows that were never filled
        cells: list[str] = []
        for cell in row.iter("c"):
            place = _column(cell.get("r", ""), len(cells))
            cells.extend([""] * (place - len(cells)))
            cells.append(re.sub(r"\s+", " ", _cell_text(cell, strings, styles)))
        rows.append(cells)
    width = max(map(len, rows), default=0)
    out = io.StringIO()
    writer = csv.writer(out, delimiter="\t", lineterminator="\n")
    writer.writerows(cells + [""] * (width - len(cells)) for cells in rows)
    return PlainText(out.getvalue().encode(), ENCODING, True, ())


def _column(reference: str, following: int) -> int:
    """Place of a cell in its row, from a reference such as AB12; the next where it has none."""
    found = _PLACE.fullmatch(reference)
    if not found:
        return following
    place = 0
    for letter in found[1]:
        place = 26 * place + ord(letter) - ord("A") + 1
    if not following < place <= _MOST_COLUMNS:
        raise ValueError(f"cell {reference} stands out of order")
    return place - 1


def _cell_text(cell: ElementTree.Element, strings: list[str], styles: _Styles) -> str:
    kind = cell.get("t", "n")
    if kind == "inlineStr":
        return _text_in(cell)
    value = cell.findtext("v") or ""
    if kind == "s":
        return strings[int(value)] if value else ""
    if kind == "b":
        return {"1": "true", "0": "false"}.get(value, value)
    if kind != "n" or not value:
        return value
    number = float(value)
    style = int(cell.get("s", 0))
    if style in styles.dates:
        return _moment_text(number, styles.day_zero)
    if style in styles.percents:
        return f"{round(100.0 * number, 10):.10g}%"
    return repr(int(number)) if number.is_integer() else repr(number)


def _moment_text(days: float, day_zero: datetime) -> str:
    """ISO text of a count of days: a date, a time of day, or both; to the millisecond."""
    moment = day_zero + timedelta(milliseconds=round(days * 86_400_000))
    if 0.0 <= days < 1.0:
        return moment.time().isoformat()
    return moment.date().isoformat() if days.is_integer() else moment.isoformat(sep=" ")
