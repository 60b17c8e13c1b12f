"""Parquet files as the text they would be in CSV, so that one set of rules reads both."""

from __future__ import annotations

import io
from pathlib import Path

import pyarrow as pa
import pyarrow.parquet as pq

from advisor.errors import FaultyInput
from advisor.settings.signals import LogSource

_ISO = "%Y-%m-%dT%H:%M:%S.%f%z"


def parquet_as_csv(path: Path, source: LogSource) -> tuple[bytes, LogSource]:
    """The rows of a Parquet file as CSV, and ``source`` as it reads that.

    A column of timestamps with a zone is a moment; one without is what the clock of the source
    showed. Line 1 is the headings, so row n of the file is line n + 1.

    Raises FaultyInput where the file is no Parquet file.
    """
    try:
        table = pq.read_table(path)
    except (pa.ArrowException, OSError, ValueError) as error:
        raise FaultyInput.of(
            "no-parquet",
            f"It is no Parquet file that can be read: {str(error).splitlines()[0]}.",
            "Write it again; a file that ends in .parquet has to be one.",
            file=path.name,
        ) from error
    out = io.StringIO()
    table.to_pandas().to_csv(out, index=False, date_format=_ISO, lineterminator="\n")
    changes: dict[str, object] = {"delimiter": ",", "decimal": ".", "encoding": "utf-8"}
    place = table.schema.get_field_index(source.time.column)
    if place >= 0 and pa.types.is_temporal(table.schema.field(place).type):
        timed = {"format": "iso", "date_column": None}
        changes["time"] = source.time.model_copy(update=timed)
    return out.getvalue().encode(), source.model_copy(update=changes)
