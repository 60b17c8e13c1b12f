"""Rows of a delimited text as columns of text, with the file line of each row.

Every column is read as dictionary-encoded text: a log repeats few distinct texts, so turning the
distinct ones into numbers costs little, and no cell is changed before it has been looked at.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np
import pyarrow as pa
import pyarrow.compute as pc
import pyarrow.csv
from numpy.typing import NDArray

from advisor.errors import FaultyInput
from advisor.logs.layout import Layout
from advisor.logs.report import LONGEST_TEXT, SetAsideRow
from advisor.logs.text import PlainText

_MOST_LINES_IN_A_CELL = 5
_BLOCK_BYTES = 8_000_000


@dataclass(frozen=True)
class TextColumn:
    """One column: its distinct ``texts`` (trimmed) and, per row, which of them it holds."""

    texts: tuple[str, ...]
    which: NDArray[np.int32]

    def as_array(self) -> NDArray[np.object_]:
        """The text of every row."""
        return np.array(self.texts, dtype=object)[self.which]


@dataclass(frozen=True)
class TextRows:
    """Rows that have the right number of fields, by column name; the rest is set aside."""

    columns: dict[str, TextColumn]
    lines: NDArray[np.int64]
    blank_lines: int
    set_aside: tuple[SetAsideRow, ...]

    def text(self, row: int) -> str:
        """The named cells of a row as one text."""
        cells = (column.texts[column.which[row]] for column in self.columns.values())
        return "; ".join(cells)[:LONGEST_TEXT]


def read_rows(text: PlainText, layout: Layout, file: str) -> TextRows:
    """All rows of ``text`` below its header, in the order of the file."""
    body, set_aside, gone = _without_stray_quotes(text.raw[layout.start :], layout.header_lines)
    body, cut = _without_cut_line(body, text.ended, layout.header_lines + gone.size)
    set_aside.extend(cut)
    names = {place: name for name, place in layout.columns.items()}
    everything = [f"column {place}" for place in range(layout.width)]
    refused: list[tuple[int, str, str]] = []
    table = _parsed(body, layout, everything, _refuser(refused), file)
    count = table.num_rows + len(refused)
    records = np.setdiff1d(
        np.arange(1, count + 1), np.array([number for number, *_ in refused], np.int64)
    )
    columns = {name: _text_column(table[f"column {place}"]) for place, name in names.items()}
    blank = _blank_rows(table)
    lines_of = _line_numbers(table, records, refused, count, layout.header_lines, gone)
    set_aside.extend(
        SetAsideRow(int(lines_of[number - 1]), reason, cells[:LONGEST_TEXT])
        for number, reason, cells in refused
    )
    kept = ~blank
    return TextRows(
        {name: TextColumn(column.texts, column.which[kept]) for name, column in columns.items()},
        lines_of[records - 1][kept],
        int(blank.sum()),
        tuple(set_aside),
    )


def _parsed(
    body: bytes,
    layout: Layout,
    names: list[str],
    refuse: Callable[[Any], str],
    file: str,
) -> pa.Table:
    text = pa.dictionary(pa.int32(), pa.string())
    if not body.strip(b"\n"):
        body = b""
    if not body:
        return pa.table({name: pa.array([], pa.string()).dictionary_encode() for name in names})
    try:
        return pa.csv.read_csv(
            pa.BufferReader(body),
            # With threads the refused rows would come without their number.
            read_options=pa.csv.ReadOptions(
                column_names=names, use_threads=False, block_size=max(_BLOCK_BYTES, 1)
            ),
            parse_options=pa.csv.ParseOptions(
                delimiter=layout.delimiter,
                newlines_in_values=b'"' in body,
                ignore_empty_lines=False,
                invalid_row_handler=refuse,
            ),
            convert_options=pa.csv.ConvertOptions(
                column_types=dict.fromkeys(names, text),
                strings_can_be_null=False,
                check_utf8=False,
            ),
        )
    except pa.ArrowInvalid as error:
        raise FaultyInput.of(
            "not-a-table",
            f"The rows cannot be read as a table: {error}.",
            "Export the file again.",
            file=file,
        ) from error


def _refuser(refused: list[tuple[int, str, str]]) -> Callable[[Any], str]:
    def refuse(row: Any) -> str:
        reason = f"{row.actual_columns} fields instead of {row.expected_columns}"
        refused.append((row.number, reason, row.text))
        return "skip"

    return refuse


def _text_column(column: pa.ChunkedArray) -> TextColumn:
    whole = column.unify_dictionaries().combine_chunks()
    if isinstance(whole, pa.ChunkedArray):
        whole = (
            whole.chunk(0) if whole.num_chunks else pa.array([], pa.string()).dictionary_encode()
        )
    trimmed = pc.utf8_trim_whitespace(whole.dictionary)
    texts = tuple(trimmed.to_pylist())
    return TextColumn(texts, whole.indices.to_numpy(zero_copy_only=False).astype(np.int32))


def _blank_rows(table: pa.Table) -> NDArray[np.bool_]:
    """Rows in which every field is empty."""
    blank = np.ones(table.num_rows, bool)
    for name in table.column_names:
        if not blank.any():
            break
        column = _text_column(table[name])
        empty = np.array([not text for text in column.texts], bool)
        blank &= empty[column.which]
    return blank


def _line_numbers(
    table: pa.Table,
    records: NDArray[np.int64],
    refused: list[tuple[int, str, str]],
    count: int,
    header_lines: int,
    gone: NDArray[np.int64],
) -> NDArray[np.int64]:
    """File line on which every record starts, records counted from 1."""
    more = np.zeros(count, np.int64)  # lines a record takes beyond its first
    for number, _, cells in refused:
        more[number - 1] = cells.count("\n")
    for name in table.column_names:
        for chunk in table[name].chunks:
            if any("\n" in text for text in chunk.dictionary.to_pylist()):
                breaks = np.array([text.count("\n") for text in _all_texts(table[name])], np.int64)
                more[records - 1] += breaks
                break
    lines = header_lines + 1 + np.arange(count) + np.concatenate(([0], np.cumsum(more)[:-1]))
    for line in gone:  # lines taken out before parsing push the ones after them down
        lines[lines >= line] += 1
    return lines


def _all_texts(column: pa.ChunkedArray) -> list[str]:
    return [text for chunk in column.chunks for text in chunk.to_pylist()]


def _without_stray_quotes(
    body: bytes, header_lines: int
) -> tuple[bytes, list[SetAsideRow], NDArray[np.int64]]:
    """``body`` without lines whose quote is never closed near by; it would swallow what follows.

    Returns the lines taken out as well, and their numbers in the file.
    """
    nothing = np.zeros(0, np.int64)
    if b'"' not in body:
        return body, [], nothing
    bytes_of = np.frombuffer(body, np.uint8)
    ends = np.flatnonzero(bytes_of == ord("\n"))
    quotes = np.searchsorted(ends, np.flatnonzero(bytes_of == ord('"')))
    odd = np.flatnonzero(np.bincount(quotes) % 2)
    stray: list[int] = []
    at = 0
    while at < len(odd):
        if at + 1 < len(odd) and odd[at + 1] - odd[at] < _MOST_LINES_IN_A_CELL:
            at += 2
        else:
            stray.append(int(odd[at]))
            at += 1
    if not stray:
        return body, [], nothing
    lines = body.split(b"\n")
    set_aside = [
        SetAsideRow(
            header_lines + line + 1,
            "a quote is never closed",
            lines[line].decode("utf-8", errors="replace")[:LONGEST_TEXT],
        )
        for line in stray
    ]
    left = [text for number, text in enumerate(lines) if number not in set(stray)]
    return b"\n".join(left), set_aside, np.array(stray, np.int64) + header_lines + 1


def _without_cut_line(
    body: bytes, ended: bool, lines_before: int
) -> tuple[bytes, list[SetAsideRow]]:
    """``body`` without a last line that has no line end: it may be cut inside a number."""
    if ended or not body:
        return body, []
    whole, _, last = body.rpartition(b"\n")
    if not last.strip():
        return body, []
    line = lines_before + body.count(b"\n") + 1
    cut = SetAsideRow(
        line,
        "last line has no line end, it may be cut short",
        last.decode("utf-8", errors="replace")[:LONGEST_TEXT],
    )
    return (whole + b"\n" if whole else b""), [cut]
