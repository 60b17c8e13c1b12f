"""How an export is laid out: delimiter, header line, units and where its rows begin.

The header is the line that holds the column names of the mapping; nothing is guessed from looks.
"""

from __future__ import annotations

import csv
import difflib
import re
import unicodedata
from collections import Counter
from dataclasses import dataclass

from advisor.errors import Fault, FaultyInput
from advisor.logs.text import PlainText

DELIMITERS = (";", ",", "\t", "|")
_LINES_SEARCHED = 60
_BYTES_SEARCHED = 400_000
_MOST_LINES_AFTER_HEADER = 4

_UNIT_IN_NAME = re.compile(r"^(?P<name>.*?)\s*[\[({](?P<unit>[^\[\](){}]*)[\])}]\s*$")
_NUMBER_LIKE = re.compile(r"^\s*[+-]?[\d.,' ]*\d[\d.,' ]*\s*$")


@dataclass(frozen=True)
class Layout:
    """Where the columns of an export are and where its rows begin.

    ``columns`` is the place of every name asked for; ``units`` what the file states beside it,
    empty where it states none. ``width`` is the number of fields of a row. ``start`` is the byte
    of the first row and ``header_lines`` the number of lines before it.
    """

    delimiter: str
    width: int
    columns: dict[str, int]
    units: dict[str, str]
    header: tuple[str, ...]
    start: int
    header_lines: int


def plain_name(text: str) -> str:
    """``text`` for comparing names: no case, no degree signs, single spaces."""
    folded = unicodedata.normalize("NFKC", text).casefold()
    folded = re.sub(r"[°º˚\ufffd]|â°|ã‚", "", folded)
    return re.sub(r"\s+", " ", folded).strip()


def name_and_unit(cell: str) -> tuple[str, str]:
    """A header cell such as 'Stack (°F)' as its name and the unit in it, empty if none."""
    found = _UNIT_IN_NAME.match(cell)
    return (found["name"], found["unit"].strip()) if found else (cell.strip(), "")


def find_layout(
    text: PlainText,
    file: str,
    needed: tuple[str, ...],
    optional: tuple[str, ...],
    delimiter: str | None = None,
) -> Layout:
    """The layout of ``text`` in which all ``needed`` names, and what there is of ``optional``, are
    columns.

    Raises FaultyInput naming every column that is missing or there twice.
    """
    lines = _first_lines(text.raw)
    marks = (delimiter,) if delimiter else DELIMITERS
    best = _best_header(lines, marks, {plain_name(name) for name in (*needed, *optional)})
    if best is None:
        raise FaultyInput.of(
            "header-missing",
            f"No line holds the columns of the mapping ({', '.join((*needed, *optional)[:4])} …).",
            f"The first lines read: {' / '.join(line[:60] for line in lines[:3])}. "
            "Check that this is the right file, or name its columns in signals.yaml.",
            file=file,
        )
    header_at, mark = best
    header = split_line(lines[header_at], mark)
    columns = _columns(header, needed, optional, file, header_at + 1)
    first_row, unit_cells = _after_header(lines, header_at, mark)
    units = {
        name: name_and_unit(header[place])[1]
        or (unit_cells[place].strip(" []()") if place < len(unit_cells) else "")
        for name, place in columns.items()
    }
    return Layout(
        delimiter=mark,
        width=_width(lines[first_row:], mark, header),
        columns=columns,
        units=units,
        header=tuple(header),
        start=_byte_of_line(text.raw, first_row),
        header_lines=first_row,
    )


def _best_header(
    lines: list[str], marks: tuple[str, ...], wanted: set[str]
) -> tuple[int, str] | None:
    """The first line, and its delimiter, that names most of ``wanted``; None where none does."""
    best: tuple[int, str] | None = None
    most = 0
    for number, line in enumerate(lines):
        for mark in marks:
            cells = {plain_name(cell) for cell in split_line(line, mark)}
            hits = len(wanted & (cells | {name_and_unit(cell)[0] for cell in cells}))
            if hits > most and len(cells) > 1:
                best, most = (number, mark), hits
        if most == len(wanted):
            break
    return best


def split_line(line: str, delimiter: str) -> list[str]:
    """Fields of one line; one field where the quotes in it do not match up."""
    try:
        return next(csv.reader([line], delimiter=delimiter), [""])
    except csv.Error:
        return [line]


def _first_lines(raw: bytes) -> list[str]:
    start = raw[:_BYTES_SEARCHED].decode("utf-8", errors="replace")
    return start.split("\n")[:_LINES_SEARCHED]


def _places(name: str, plain_cells: list[str]) -> list[int]:
    """Where ``name`` stands among the cells: as a whole, or else without the unit beside it."""
    wanted = plain_name(name)
    whole = [place for place, cell in enumerate(plain_cells) if cell == wanted]
    return whole or [
        place for place, cell in enumerate(plain_cells) if name_and_unit(cell)[0] == wanted
    ]


def _columns(
    header: list[str], needed: tuple[str, ...], optional: tuple[str, ...], file: str, line: int
) -> dict[str, int]:
    cells = [plain_name(cell) for cell in header]
    columns: dict[str, int] = {}
    faults: list[Fault] = []
    for name in (*needed, *optional):
        places = _places(name, cells)
        if len(places) == 1:
            columns[name] = places[0]
        elif places:
            remedy = "Rename one of them in the export, or write its full name in signals.yaml."
            problem = f"The column '{name}' is there {len(places)} times."
            faults.append(Fault("column-twice", problem, remedy, file=file, line=line, field=name))
        elif name in needed:
            near = difflib.get_close_matches(plain_name(name), cells, n=1, cutoff=0.5)
            meant = f"Did you mean '{header[cells.index(near[0])]}'? " if near else ""
            remedy = f"{meant}The columns are: {', '.join(cell.strip() for cell in header)}."
            problem = f"There is no column '{name}'."
            faults.append(
                Fault("column-missing", problem, remedy, file=file, line=line, field=name)
            )
    if faults:
        raise FaultyInput(*faults)
    return columns


def _after_header(lines: list[str], header_at: int, mark: str) -> tuple[int, list[str]]:
    """Line of the first row, and the cells of the units row, empty where there is none.

    Lines right after the header that hold no number belong to the header: units, tags, dashes.
    """
    unit_cells: list[str] = []
    for number in range(header_at + 1, min(len(lines), header_at + 1 + _MOST_LINES_AFTER_HEADER)):
        cells = split_line(lines[number], mark)
        if not any(cell.strip() for cell in cells) or any(map(_NUMBER_LIKE.match, cells)):
            return number, unit_cells
        if any(":" in cell and any(map(str.isdigit, cell)) for cell in cells):  # a time of day
            return number, unit_cells
        unit_cells = unit_cells or cells
    return min(len(lines), header_at + 1 + bool(unit_cells)), unit_cells


def _width(rows: list[str], mark: str, header: list[str]) -> int:
    """Fields of a usual row: those of the header, give or take empty ones at the end."""
    named = max(place for place, cell in enumerate(header, 1) if cell.strip())
    widths = Counter(len(split_line(line, mark)) for line in rows if line.strip())
    usual = widths.most_common(1)[0][0] if widths else len(header)
    return usual if named <= usual <= len(header) + 2 else len(header)


def _byte_of_line(raw: bytes, line: int) -> int:
    at = 0
    for _ in range(line):
        at = raw.find(b"\n", at) + 1
        if at == 0:
            return len(raw)
    return at
