"""Excel workbooks as logs: the same rows as the text export, and clear words where one is none."""

from __future__ import annotations

import io
import zipfile
from datetime import date, time

import numpy as np
import pytest
import xlsxwriter

from advisor.errors import FaultyInput
from advisor.logs import read_export
from advisor.settings.signals import LogSource

MAPPING = LogSource.model_validate(
    {
        "kind": "plant_log",
        "files": "*.xlsx",
        "decimal": ",",
        "time": {
            "column": "Time", "date_column": "Day", "format": "%d/%m/%Y %H:%M", "zone": "plant"
        },
        "columns": {
            "Mix": {"signal": "mix_id"},
            "Temp": {"signal": "discharge_c", "unit": "C"},
            "Rate": {"signal": "rate_kgs", "unit": "t/h"},
            "Burner": {"signal": "burner_load", "unit": "%"},
        },
    }
)  # fmt: skip
HEADER = ["Day", "Time", "Mix", "Temp", "Rate", "Burner"]


def workbook(rows, **options):
    """A workbook of a title, a blank line, header, units and ``rows``, as an office writes it."""
    out = io.BytesIO()
    with xlsxwriter.Workbook(out, {"in_memory": True, **options}) as book:
        book.add_worksheet("Notes").write(0, 0, "Made by hand")
        sheet = book.add_worksheet("Log")
        day, clock = (book.add_format({"num_format": one}) for one in ("dd/mm/yyyy", "hh:mm:ss"))
        percent, plain = book.add_format({"num_format": "0.0%"}), None
        sheet.write(0, 0, "Plant log (invented)")
        sheet.write_row(2, 0, HEADER)
        sheet.write_row(3, 3, ["°C", "t/h", "%"])
        for number, row in enumerate(rows, start=4):
            for place, cell in enumerate(row):
                if isinstance(cell, (date, time)):
                    sheet.write_datetime(number, place, cell, clock if place else day)
                else:
                    sheet.write(number, place, cell, percent if place == 5 else plain)
    return out.getvalue()


def read(tmp_path, raw, name="export.xlsx"):
    path = tmp_path / name
    path.write_bytes(raw)
    return read_export(path, MAPPING, "Europe/London")


DAY = date(2026, 10, 19)
ROWS = [
    (DAY, time(6, 0), "A", 160.5, 180, 0.55),
    (DAY, time(6, 1), "A", 161, 180, 0.625),
]


@pytest.mark.parametrize("options", [{}, {"date_1904": True}], ids=["1900", "1904"])
def test_numbers_dates_and_percentages_are_what_a_person_sees(tmp_path, options):
    intake = read(tmp_path, workbook(ROWS, **options))
    np.testing.assert_allclose(intake.frame["discharge_c"], [160.5, 161.0])
    np.testing.assert_allclose(intake.frame["rate_kgs"], [50.0, 50.0])
    np.testing.assert_allclose(intake.frame["burner_load"], [0.55, 0.625])
    assert [f"{one:%Y-%m-%dT%H:%M:%S%z}" for one in intake.frame["time"]] == [
        "2026-10-19T05:00:00+0000",
        "2026-10-19T05:01:00+0000",
    ]
    assert intake.lines.tolist() == [5, 6]
    assert any("sheet Log" in note for note in intake.report.notes)


def test_times_typed_as_text_follow_the_mapping(tmp_path):
    intake = read(tmp_path, workbook([("19/10/2026", "06:00", "A", 160.5, 180, 0.5)]))
    assert intake.frame["time"].iloc[0].isoformat() == "2026-10-19T05:00:00+00:00"


@pytest.mark.parametrize(
    ("row", "reason"),
    [
        (("Total", None, None, None, 360), "a line of totals"),
        (tuple(HEADER), "the header again"),
        (("soon", None, "A", 160, 180), "no readable time"),
        (ROWS[1], "same time as line"),
    ],
)
def test_a_row_that_is_none_is_set_aside_by_its_number_in_the_sheet(tmp_path, row, reason):
    report = read(tmp_path, workbook([*ROWS, row])).report
    (aside,) = report.set_aside
    assert reason in aside.reason and aside.line in (6, 7)
    assert (report.rows_read, report.rows_used) == (3, 2)


def test_errors_and_empty_cells_are_no_numbers(tmp_path):
    rows = [(*ROWS[0][:3], "#N/A", 180, 0.5), (*ROWS[1][:3], None, 180, 0.5)]
    intake = read(tmp_path, workbook(rows))
    assert intake.frame["discharge_c"].isna().all()
    (cells,) = intake.report.unread_cells
    assert (cells.reason, cells.count, cells.first_line) == ("no value written", 2, 5)


def test_a_sheet_without_the_columns_is_named(tmp_path):
    out = io.BytesIO()
    with xlsxwriter.Workbook(out, {"in_memory": True}) as book:
        book.add_worksheet("Log").write_row(0, 0, [*HEADER[:3], "Tmep", *HEADER[4:]])
    with pytest.raises(FaultyInput, match="Did you mean 'Tmep'") as refused:
        read(tmp_path, out.getvalue())
    assert "sheet Log" in str(refused.value)


def damaged(raw, part, text):
    """``raw`` with ``text`` in place of one of its parts."""
    out = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(raw)) as old, zipfile.ZipFile(out, "w") as new:
        for name in old.namelist():
            new.writestr(name, text if name == part else old.read(name))
    return out.getvalue()


SHEET = "xl/worksheets/sheet2.xml"


@pytest.mark.parametrize(
    ("raw", "said"),
    [
        (bytes.fromhex("d0cf11e0a1b11ae1") + bytes(600), "old .xls workbook"),
        (workbook(ROWS)[:900], "cannot be read"),
        (damaged(workbook(ROWS), SHEET, "<worksheet><sheetData><row"), "cannot be read"),
        (damaged(workbook(ROWS), SHEET, '<a><row r="9999999"/></a>'), "stands out of order"),
        (damaged(workbook(ROWS), SHEET, '<!DOCTYPE a [<!ENTITY b "c">]><a/>'), "entities"),
    ],
    ids=["old", "cut short", "broken sheet", "row beyond the last", "entities"],
)
def test_what_is_no_workbook_says_what_to_do(tmp_path, raw, said):
    with pytest.raises(FaultyInput, match=said) as refused:
        read(tmp_path, raw)
    assert "export.xlsx" in str(refused.value) and "save it as .xlsx or as CSV" in str(
        refused.value
    )
