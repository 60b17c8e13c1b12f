"""Airport weather reports (METAR, WMO FM 15) as text: a row of weather each, or why not."""

from __future__ import annotations

import datetime as dt
import re
import warnings
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import pandas as pd

from advisor.logs.plant_log import files_of
from advisor.logs.report import IntakeReport, SetAsideRow
from advisor.settings.folder import PlantFolder

KIND = "metar"
COLUMNS = ("air_c", "wind_ms", "cloud_of_sky", "dew_point_c", "rain")

# Share of the sky under one layer. FEW is 1 to 2 oktas, SCT 3 to 4, BKN 5 to 7, OVC 8; middles
# (from memory). Layers count from the ground up, so the largest one is the cover of the sky.
_OKTAS = {"FEW": 1.5, "SCT": 3.5, "BKN": 6.0, "OVC": 8.0, "VV": 8.0}
_NO_CLOUD = {"SKC", "CLR", "NSC", "NCD"}
_WET = re.compile(r"DZ|RA|SN|SG|PL|GR|GS|IC|UP")
_REPORT = re.compile(
    r"^(?:(?:METAR|SPECI)\s+)?(?:COR\s+)?(?P<station>[A-Z][A-Z0-9]{3})\s+"
    r"(?P<day>\d{2})(?P<hour>\d{2})(?P<minute>\d{2})Z\b"
)
# What stands before a report or on the line above it: '2026/10/23 09:50', '202610230950'.
_DATE = re.compile(
    r"^(?P<year>(?:19|20)\d\d)[-/]?(?P<month>\d\d)[-/]?(?P<day>\d\d)"
    r"[T ]?(?:\d\d:?\d\d(?::?\d\d)?)?Z?\s*(?P<rest>.*)$"
)
_MONTH_IN_NAME = re.compile(r"(?P<year>(?:19|20)\d\d)-?(?P<month>0[1-9]|1[0-2])")


@dataclass(frozen=True)
class _Line:
    """One report in a file: its line, its text, and the year and month it is from."""

    number: int
    text: str
    year_month: tuple[int, int] | None


def read_metar(folder: PlantFolder) -> tuple[pd.DataFrame, tuple[IntakeReport, ...]]:
    """All airport reports of a plant folder as weather sorted by time, and a report of each file.

    Empty where signals.yaml names no such files.
    """
    source = folder.signals.metar
    frames, reports = [], []
    if source is not None:
        for path in files_of(folder.path, source.files):
            text = path.read_text("utf-8", errors="replace")
            frame, report = metar_rows(text, path.name, source.station)
            frames.append(frame)
            reports.append(report)
    if not frames:
        return _frame([]), ()
    whole = pd.concat(frames, ignore_index=True)
    used = whole.drop_duplicates("time", keep="last").sort_values("time", ignore_index=True)
    return used, tuple(reports)


def metar_rows(text: str, file: str, station: str) -> tuple[pd.DataFrame, IntakeReport]:
    """The reports of ``station`` in ``text`` as weather, and what became of every line.

    A report tells day and hour but no month: that comes from a date before it, as archives write
    it, or from a month in ``file``, such as metar_2026-10.txt.
    """
    named = _MONTH_IN_NAME.search(file)
    of_name = (int(named["year"]), int(named["month"])) if named else None
    rows: list[tuple[object, ...]] = []
    aside: list[SetAsideRow] = []
    clear = 0
    for line in _lines(text, of_name):
        try:
            row, automatic_clear = _row(line, station)
        except _SetAside as reason:
            aside.append(SetAsideRow(line.number, str(reason), line.text))
            continue
        rows.append(row)
        clear += automatic_clear
    notes = []
    if clear:
        notes.append(
            f"{clear} reports say CLR: no cloud below 12,000 ft as an instrument sees it, taken "
            "as a clear sky."
        )
    return _frame(rows), IntakeReport(
        file, KIND, len(rows) + len(aside), len(rows), tuple(aside), notes=tuple(notes)
    )


class _SetAside(Exception):
    """A report that is not used, and why."""


def _lines(text: str, of_name: tuple[int, int] | None) -> Iterator[_Line]:
    """The reports of a file; an indented line goes on with the one before."""
    joined: list[tuple[int, str]] = []
    for number, raw in enumerate(text.splitlines(), 1):
        if raw.strip() and not raw.startswith("#"):
            if raw[0].isspace() and joined:
                joined[-1] = (joined[-1][0], f"{joined[-1][1]} {raw.strip()}")
            else:
                joined.append((number, raw.strip()))
    of_line: tuple[int, int] | None = None
    for number, line in joined:
        dated = _DATE.match(line)
        here, rest = of_line, line
        if dated:
            here, rest = (int(dated["year"]), int(dated["month"])), dated["rest"]
        of_line = here if dated and not rest else None
        if rest:
            yield _Line(number, rest.rstrip("= "), here or of_name)


def _row(line: _Line, station: str) -> tuple[tuple[object, ...], bool]:
    from metar.Metar import Metar, ParserError

    found = _REPORT.match(line.text)
    if line.text.startswith("TAF"):
        raise _SetAside("a forecast without temperatures (TAF)")
    if found is None:
        raise _SetAside("not an airport report")
    if found["station"] != station:
        raise _SetAside(f"another station, {found['station']}")
    if re.search(r"\bNIL\b", line.text):
        raise _SetAside("the report says that there is none (NIL)")
    if line.year_month is None:
        raise _SetAside("the month is nowhere told: put it into the name of the file")
    year, month = line.year_month
    try:
        moment = dt.datetime(
            year, month, int(found["day"]), int(found["hour"]), int(found["minute"]), tzinfo=dt.UTC
        )
        with warnings.catch_warnings():  # groups it does not know are no concern of ours
            warnings.simplefilter("ignore")
            seen = Metar(line.text, month=month, year=year, strict=False)
    except (ParserError, ValueError) as error:
        raise _SetAside(f"not readable: {error}") from None
    if seen.temp is None or seen.dewpt is None:
        raise _SetAside("no air temperature or no dew point")
    if seen.wind_speed is None:
        raise _SetAside("no wind")
    cloud, clear = _cloud(line.text, seen.sky)
    wet = any(
        _WET.search(what or "") and where != "VC" and "RE" not in (kind or "")
        for where, kind, what, *_ in seen.weather
    )
    row = (
        moment,
        float(seen.temp.value("C")),
        float(seen.wind_speed.value("MPS")),
        cloud,
        float(seen.dewpt.value("C")),
        wet,
    )
    return row, clear


def _cloud(text: str, layers: Sequence[tuple[str, object, object]]) -> tuple[float, bool]:
    """Share of the sky under cloud, and whether it is an instrument's 'clear'."""
    oktas = [_OKTAS[cover] for cover, *_ in layers if cover in _OKTAS]
    if oktas:
        return max(oktas) / 8.0, False
    words = set(text.partition(" RMK")[0].split())
    if words & {"CAVOK", *_NO_CLOUD} or any(cover in _NO_CLOUD for cover, *_ in layers):
        return 0.0, "CLR" in words
    raise _SetAside("no cloud told")


def _frame(rows: list[tuple[object, ...]]) -> pd.DataFrame:
    frame = pd.DataFrame(rows, columns=["time", *COLUMNS])
    frame["time"] = pd.to_datetime(frame["time"], utc=True).astype("datetime64[us, UTC]")
    return frame.astype({name: "float64" for name in COLUMNS[:-1]} | {"rain": "bool"})
