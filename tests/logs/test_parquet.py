"""Parquet exports are read by the same rules as text."""

from __future__ import annotations

import numpy as np
import pandas as pd
import pytest

from advisor.errors import FaultyInput
from advisor.logs import read_export, read_logs
from advisor.settings import read_plant
from advisor.settings.signals import LogSource

COLUMNS = {
    "Mix": {"signal": "mix_id"},
    "Temp": {"signal": "discharge_c", "unit": "F"},
    "Rate": {"signal": "rate_kgs", "unit": "t/h"},
}


def source(style="%Y-%m-%d %H:%M", **more):
    return LogSource.model_validate(
        {
            "kind": "plant_log",
            "files": "*.parquet",
            "time": {"column": "Time", "format": style, "zone": "plant"},
            "columns": COLUMNS,
            **more,
        }
    )


def rows(times):
    count = len(times)
    return pd.DataFrame(
        {"Time": times, "Mix": ["A"] * count, "Temp": [320.0] * count, "Rate": [180.0] * count}
    )


def read(tmp_path, frame, mapping=None):
    path = tmp_path / "export.parquet"
    frame.to_parquet(path)
    return read_export(path, mapping or source(), "Europe/London")


@pytest.mark.parametrize(
    "times",
    [
        pd.to_datetime(["2026-10-19 06:00", "2026-10-19 06:01"]),
        pd.to_datetime(["2026-10-19 05:00", "2026-10-19 05:01"], utc=True),
        pd.to_datetime(["2026-10-19 07:00", "2026-10-19 07:01"]).tz_localize("Europe/Berlin"),
        ["2026-10-19 06:00", "2026-10-19 06:01"],
    ],
    ids=["plant time", "UTC", "another zone", "text"],
)
def test_times_of_any_kind_become_moments_and_units_are_converted_once(tmp_path, times):
    intake = read(tmp_path, rows(times))
    assert [f"{one:%H:%M}" for one in intake.frame["time"]] == ["05:00", "05:01"]
    np.testing.assert_allclose(intake.frame["discharge_c"], 160.0)
    np.testing.assert_allclose(intake.frame["rate_kgs"], 50.0)
    assert intake.report.rows_read == intake.report.rows_used == 2


def test_missing_values_and_repeated_times_are_told(tmp_path):
    frame = rows(pd.to_datetime(["2026-10-19 06:00", "2026-10-19 06:00", None]))
    frame.loc[1, "Temp"] = np.nan
    report = read(tmp_path, frame).report
    assert report.rows_used == 1
    assert [row.line for row in report.set_aside] == [2, 4]
    assert "same time as line 3" in report.set_aside[0].reason
    assert report.unread_cells[0].signal == "discharge_c"


def test_what_is_no_parquet_file_is_refused_by_name(tmp_path):
    path = tmp_path / "export.parquet"
    path.write_text("Time,Mix,Temp,Rate\n", "utf-8")
    with pytest.raises(FaultyInput, match=r"export\.parquet: It is no Parquet file"):
        read_export(path, source(), "Europe/London")


def test_a_day_of_the_plant_as_parquet_is_the_day_as_text(own_demo):
    folder = read_plant(own_demo)
    before = read_logs(folder).frame
    text = own_demo / "logs" / "plant_2026-10-20.csv"
    table = pd.read_csv(
        text, sep=";", decimal=",", encoding="cp1252", skiprows=[0, 2], skipfooter=1,
        engine="python", na_values=["-9999", "---", "Bad"], dtype={"Date": str, "Time": str},
    )  # fmt: skip
    table.to_parquet(text.with_suffix(".parquet"))
    text.unlink()
    signals = own_demo / "signals.yaml"
    signals.write_text(signals.read_text("utf-8").replace("logs/plant_*.csv", "logs/plant_*"))
    after = read_logs(read_plant(own_demo)).frame
    pd.testing.assert_frame_equal(before, after)
