"""Airport reports, hourly forecasts and weather noted by hand: read right, or set aside and why."""

from __future__ import annotations

from datetime import UTC, datetime
from pathlib import Path

import pytest

from advisor.errors import FaultyInput
from advisor.logs import read_forecast, read_metar
from advisor.logs.weather_reports import metar_rows
from advisor.settings.folder import read_plant
from advisor.settings.shipped import shipped_folder
from heat.published import Case, cases

DEMO = shipped_folder("demo_plant")


def one(report: str, station: str, name: str = "metar_2026-10.txt"):
    frame, intake = metar_rows(report + "\n", name, station)
    assert len(frame) + len(intake.set_aside) == intake.rows_read
    return frame, intake


@pytest.mark.parametrize("case", cases("METAR"), ids=str)
def test_published_reports(case: Case) -> None:
    text = case.inputs["metar"]
    frame, _ = one(text, text.split()[0], "metar_2026-10.txt")
    row = frame.iloc[0]
    found = {
        "V": row["wind_ms"],
        "TR": row["air_c"],
        "TD": row["dew_point_c"],
        "UTC": row["time"].hour + row["time"].minute / 60,
        "N": 10 * row["cloud_of_sky"],
    }.get(case.id.split("-")[-1])
    if found is None:  # gust, direction and pressure decide nothing here and are not kept
        assert case.id.split("-")[-1] in ("G", "DIR", "P")
        return
    assert found == pytest.approx(case.expected, abs=max(case.tolerance, 1e-6))


def test_what_a_report_says_of_rain_and_cloud() -> None:
    def wet_and_cloud(groups: str) -> tuple[bool, float]:
        frame, _ = one(f"METAR XHFN 230950Z 24012KT 9999 {groups} 09/07 Q1009", "XHFN")
        return bool(frame["rain"][0]), float(frame["cloud_of_sky"][0])

    assert wet_and_cloud("-RA FEW008 BKN020") == (True, 0.75)
    assert wet_and_cloud("VCSH SCT020") == (False, 3.5 / 8)
    assert wet_and_cloud("+TSRA OVC008CB") == (True, 1.0)
    assert wet_and_cloud("NSC") == (False, 0.0)
    assert wet_and_cloud("VV001") == (False, 1.0)


def test_wind_in_any_unit_and_from_anywhere() -> None:
    for group, expected in (
        ("24010KT", 5.14444), ("VRB02MPS", 2.0), ("24036KMH", 10.0), ("00000KT", 0.0),
        ("24010G25KT 200V280", 5.14444),
    ):  # fmt: skip
        frame, _ = one(f"METAR XHFN 230950Z {group} 9999 NSC M02/M05 Q1009", "XHFN")
        assert frame["wind_ms"][0] == pytest.approx(expected, abs=0.01)
        assert (frame["air_c"][0], frame["dew_point_c"][0]) == (-2.0, -5.0)


@pytest.mark.parametrize(
    ("report", "reason"),
    [
        ("METAR XHFN 230950Z NIL", "NIL"),
        ("METAR XHFN 230950Z 24012KT 9999 NSC 09/ Q1009", "dew point"),
        ("METAR XHFN 230950Z /////KT 9999 NSC 09/07 Q1009", "wind"),
        ("METAR XHFN 230950Z 24012KT 9999 ////// 09/07 Q1009", "cloud"),
        ("METAR XABC 230950Z 24012KT 9999 NSC 09/07 Q1009", "another station, XABC"),
        ("TAF XHFN 230900Z 2309/2318 24012KT 9999 NSC", "TAF"),
        ("METAR XHFN 310950Z 24012KT 9999 NSC 09/07 Q1009", "not readable"),
        ("the weather was fine", "not an airport report"),
    ],
)
def test_what_cannot_be_used_is_set_aside_with_its_reason(report: str, reason: str) -> None:
    frame, intake = one(f"# head\n{report}", "XHFN", "metar_2026-11.txt")
    assert frame.empty
    assert [row.line for row in intake.set_aside] == [2]
    assert reason in intake.set_aside[0].reason


def test_the_month_comes_from_a_date_or_the_name_and_is_never_guessed() -> None:
    report = "XHFN 230950Z 24012KT 9999 NSC 09/07 Q1009"
    for text in (f"2025/02/23 09:50\n{report}", f"202502230950 METAR {report}=",
                 f"2025-02-23T09:50Z {report}"):  # fmt: skip
        frame, _ = one(text, "XHFN", "reports.txt")
        assert frame["time"][0].isoformat() == "2025-02-23T09:50:00+00:00"
    frame, intake = one(report, "XHFN", "reports.txt")
    assert frame.empty
    assert "month" in intake.set_aside[0].reason


def test_clear_as_an_instrument_sees_it_is_told() -> None:
    frame, intake = one("METAR XHFN 230950Z AUTO 24012KT 10SM CLR 09/07 A2992", "XHFN")
    assert frame["cloud_of_sky"][0] == 0.0
    assert "12,000 ft" in intake.notes[0]


def plant_with(tmp_path: Path, forecast: str) -> Path:
    """A copy of the demo's settings with one forecast file."""
    for file in DEMO.glob("*.yaml"):
        (tmp_path / file.name).write_text(file.read_text("utf-8"), "utf-8")
    (tmp_path / "series").mkdir()
    (tmp_path / "series" / "forecast_1.csv").write_text(forecast, "utf-8")
    return tmp_path


HEAD = "issued,time,air (C),wind (m/s),cloud (%),dew_point (C),rain\n"


def test_the_demo_has_an_issue_a_day_and_reports_of_an_airport() -> None:
    folder = read_plant(DEMO)
    forecast, reports = read_forecast(folder)
    assert forecast["issued"].nunique() == len(reports) == 7
    assert not any(report.refused or report.set_aside for report in reports)
    assert (forecast["time"] >= forecast["issued"]).all()
    metar, (report,) = read_metar(folder)
    assert report.rows_used == len(metar) == report.rows_read > 160


def test_a_forecast_without_an_issue_says_what_is_taken(tmp_path: Path) -> None:
    row = ",2026-10-23T04:00:00Z,5.5,4.2,73,3.0,no\n,2026-10-23T05:00:00Z,6.0,4.2,73,3.0,no\n"
    frame, (report,) = read_forecast(read_plant(plant_with(tmp_path, HEAD + row)))
    assert not frame["issue_told"].any()
    assert frame["issued"][0] == datetime(2026, 10, 23, 4, tzinfo=UTC)
    assert "first hour" in report.notes[-1]


@pytest.mark.parametrize(
    ("text", "problem"),
    [
        ("time,air\n2026-10-23T04:00:00Z,5\n", "There is no column"),
        (HEAD + "soon,2026-10-23T04:00:00Z,5.5,4.2,73,3.0,no\n", "not a moment"),
        ("", ""),
    ],
)
def test_a_forecast_that_cannot_be_read_is_told_in_its_report(
    tmp_path: Path, text: str, problem: str
) -> None:
    frame, (report,) = read_forecast(read_plant(plant_with(tmp_path, text)))
    assert frame.empty
    assert report.refused is not None
    assert problem in report.refused.problem


def test_weather_noted_by_hand_is_checked() -> None:
    from advisor.records.kinds import WeatherSeen

    good = {"air": "9 C", "wind": "3 m/s", "wind_height": "1.5 m", "cloud": "50 %", "rain": False}
    assert WeatherSeen.model_validate(good | {"humidity": "80 %"}).air == 9.0
    for wrong in ({}, {"humidity": "80 %", "dew_point": "2 C"}, {"dew_point": "12 C"}):
        with pytest.raises(ValueError, match=r"dew_point|dew point"):
            WeatherSeen.model_validate(good | wrong)


def test_files_outside_the_plant_folder_are_refused(tmp_path: Path) -> None:
    folder = plant_with(tmp_path, HEAD)
    text = (folder / "signals.yaml").read_text("utf-8")
    (folder / "signals.yaml").write_text(text.replace("series/airport_", "../airport_"), "utf-8")
    with pytest.raises(FaultyInput, match="out of the plant folder"):
        read_metar(read_plant(folder))
