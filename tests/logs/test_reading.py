"""Reading exports of any dialect: every row used or set aside, every fault with its place."""

from __future__ import annotations

import numpy as np
import pytest
from pydantic import ValidationError

from advisor.errors import FaultyInput
from advisor.logs import read_export
from advisor.settings.signals import LogSource

COLUMNS = {
    "Mix": {"signal": "mix_id"},
    "Temp": {"signal": "discharge_c", "unit": "C"},
    "Rate": {"signal": "rate_kgs", "unit": "t/h"},
}


def source(columns=None, **more):
    return LogSource.model_validate(
        {
            "kind": "plant_log",
            "files": "*.csv",
            "time": {"column": "Time", "format": "%Y-%m-%d %H:%M", "zone": "plant"},
            "columns": columns or COLUMNS,
            **more,
        }
    )


def read(tmp_path, text, mapping=None, zone="Europe/London"):
    path = tmp_path / "export.csv"
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return read_export(path, mapping or source(), zone)


PLAIN = "Time,Mix,Temp,Rate\n2026-10-19 06:00,A,160.5,180\n2026-10-19 06:01,A,161.0,180\n"


@pytest.mark.parametrize(
    "raw",
    [
        PLAIN.encode(),
        b"\xef\xbb\xbf" + PLAIN.encode(),
        PLAIN.encode("utf-16"),
        PLAIN.replace("\n", "\r\n").encode(),
        PLAIN.replace(",", ";").replace(".", ",").encode(),
        PLAIN.replace(",", "\t").encode(),
        ("Plant log;;;\nmade by hand;;;\n" + PLAIN.replace(",", ";")).encode(),
        PLAIN.replace("Rate\n", "Rate\n,,°C,t/h\n").encode(),
        PLAIN.replace("Temp", "Temp (°C)").encode("cp1252"),
        (PLAIN + "Total,,,360\n").encode(),
        PLAIN.replace("\n", ",x\n").replace("Rate,x", "Rate,Note").encode(),
    ],
    ids=["plain", "bom", "utf-16", "crlf", "decimal comma", "tab", "head lines", "unit row",
         "unit in heading", "total", "more columns"],
)  # fmt: skip
def test_any_dialect_gives_the_same_numbers(tmp_path, raw):
    intake = read(tmp_path, raw)
    np.testing.assert_allclose(intake.frame["discharge_c"], [160.5, 161.0])
    np.testing.assert_allclose(intake.frame["rate_kgs"], [50.0, 50.0])
    assert intake.frame["mix_id"].tolist() == ["A", "A"]
    assert str(intake.frame["time"].iloc[0]) == "2026-10-19 05:00:00+00:00"
    report = intake.report
    assert report.rows_read == report.rows_used + len(report.set_aside)


def test_a_column_in_fahrenheit_is_converted_once(tmp_path):
    mapping = source({**COLUMNS, "Temp": {"signal": "discharge_c", "unit": "F"}})
    intake = read(tmp_path, PLAIN.replace("160.5", "320").replace("161.0", "305"), mapping)
    np.testing.assert_allclose(intake.frame["discharge_c"], [160.0, 151.6667], atol=1e-3)


def test_wet_moisture_becomes_dry(tmp_path):
    mapping = source({**COLUMNS, "W": {"signal": "moisture_entered", "unit": "%", "basis": "wet"}})
    text = "Time,Mix,Temp,Rate,W\n2026-10-19 06:00,A,160,180,5.0\n"
    intake = read(tmp_path, text, mapping)
    assert intake.frame["moisture_entered"].iloc[0] == pytest.approx(0.05 / 0.95)


@pytest.mark.parametrize(
    ("line", "reason"),
    [
        ("2026-10-19 06:02,A,160\n", "fields instead of"),
        ("2026-10-19 06:02,A,160,180,9,9\n", "fields instead of"),
        ("Time,Mix,Temp,Rate\n", "the header again"),
        ("Total,,,540\n", "a line of totals"),
        ("yesterday,A,160,180\n", "no readable time"),
        ("2062-10-19 06:02,A,160,180\n", "a year away"),
        ("2026-10-19 06:01,A,150,180\n", "same time as line"),
        ("2026-10-19 06:02,A,160,18", "cut short"),
    ],
)
def test_a_row_that_is_none_is_set_aside_with_its_line_and_reason(tmp_path, line, reason):
    report = read(tmp_path, PLAIN + line).report
    (row,) = report.set_aside
    assert reason in row.reason
    assert row.line in (3, 4)
    assert (report.rows_read, report.rows_used) == (3, 2)


@pytest.mark.parametrize("text", ["---", "Bad", "", "-9999", "#N/A", "n/a"])
def test_a_cell_without_a_value_is_no_zero(tmp_path, text):
    intake = read(tmp_path, PLAIN.replace("160.5", text))
    assert np.isnan(intake.frame["discharge_c"].iloc[0])
    (cell,) = intake.report.unread_cells
    assert (cell.signal, cell.reason, cell.count, cell.first_line) == (
        "discharge_c", "no value written", 1, 2,
    )  # fmt: skip


def test_a_cell_that_is_no_number_is_told(tmp_path):
    intake = read(tmp_path, PLAIN.replace("160.5", "1x0"))
    (cell,) = intake.report.unread_cells
    assert cell.reason == "not a number"
    assert np.isnan(intake.frame["discharge_c"].iloc[0])


@pytest.mark.parametrize(
    ("raw", "mapping", "words"),
    [
        (b"", None, ["export.csv", "holds nothing"]),
        (b"\x00\x00\x00", None, ["export.csv", "holds nothing"]),
        (PLAIN.replace("Temp", "Tmep").encode(), None, ["export.csv", "Temp", "Tmep"]),
        (PLAIN.replace("Temp", "Temp (°F)").encode(), None, ["Temp", "in F", "says C"]),
        (PLAIN.encode(), source({**COLUMNS, "Temp": {"signal": "discharge_c"}}),
         ["Temp", "unit"]),
        (PLAIN.replace("160.5", "160,5").replace(",161.0", ";161.0").replace(",", ";").encode(),
         None, []),
    ],
    ids=["empty", "zeros", "column missing", "unit clash", "no unit", "mixed"],
)  # fmt: skip
def test_a_file_that_cannot_be_read_says_what_is_wrong(tmp_path, raw, mapping, words):
    if not words:
        intake = read(tmp_path, raw, mapping)
        assert intake.report.rows_read == intake.report.rows_used + len(intake.report.set_aside)
        return
    with pytest.raises(FaultyInput) as refused:
        read(tmp_path, raw, mapping)
    for word in words:
        assert word in str(refused.value)


@pytest.mark.parametrize(
    ("columns", "words"),
    [
        ({**COLUMNS, "T2": {"signal": "discharge_c", "unit": "C"}}, ["mapped twice", "T2"]),
        ({k: v for k, v in COLUMNS.items() if k != "Temp"}, ["discharge_c", "No column"]),
        ({**COLUMNS, "X": {"signal": "dischrge_c", "unit": "C"}}, ["Did you mean 'discharge_c'"]),
        ({**COLUMNS, "Temp": {"signal": "discharge_c", "unit": "t/h"}}, ["'t/h' is not a unit"]),
        ({**COLUMNS, "Mix": {"signal": "mix_id", "unit": "C"}}, ["has no unit"]),
    ],
)
def test_a_mapping_that_cannot_be_right_is_refused_by_name(tmp_path, columns, words):
    with pytest.raises(FaultyInput) as refused:
        read(tmp_path, PLAIN, source(columns))
    assert "signals.yaml" in str(refused.value)
    for word in words:
        assert word in str(refused.value)


def test_an_unknown_unit_of_a_mapping_is_refused_when_it_is_read():
    with pytest.raises(ValidationError, match="'Kelvins' is not a unit"):
        source({**COLUMNS, "Temp": {"signal": "discharge_c", "unit": "Kelvins"}})


def minutes_text(rows):
    return "Time,Mix,Temp,Rate\n" + "".join(f"{row},A,160,180\n" for row in rows)


def test_the_repeated_hour_is_told_apart_by_the_order_of_the_rows(tmp_path):
    twice = [f"2026-10-25 01:{m:02d}" for m in range(0, 60, 10)]
    rows = ["2026-10-25 00:50", *twice, *twice, "2026-10-25 02:00"]
    intake = read(tmp_path, minutes_text(rows))
    utc = intake.frame["time"]
    assert len(utc) == len(rows) and utc.is_monotonic_increasing and utc.is_unique
    assert (utc.diff().dropna().dt.total_seconds() == 600).all()
    assert any("Clocks went back" in note for note in intake.report.notes)


def test_times_that_did_not_exist_are_set_aside(tmp_path):
    rows = ["2026-03-29 00:50", "2026-03-29 01:10", "2026-03-29 02:00"]
    report = read(tmp_path, minutes_text(rows)).report
    (row,) = report.set_aside
    assert "the clocks went forward" in row.reason and row.line == 3


def test_rows_out_of_order_are_sorted_and_it_is_said(tmp_path):
    rows = ["2026-10-19 06:02", "2026-10-19 06:00", "2026-10-19 06:01"]
    intake = read(tmp_path, minutes_text(rows))
    assert intake.frame["time"].is_monotonic_increasing
    assert intake.lines.tolist() == [3, 4, 2]
    assert any("order" in note for note in intake.report.notes)
