"""advisor review as a person calls it: periods, units, rows not used."""

from __future__ import annotations

import csv
import json
import re

import pytest

NIGHT = ["--from", "2026-10-21 05:00", "--to", "2026-10-21 07:00"]


def test_differences_are_converted_as_differences(run, demo_folder):
    code, out, _ = run("review", demo_folder, *NIGHT, "--us")
    assert code == 0
    _, text, _ = run("review", demo_folder, *NIGHT, "--us", "--json")
    found = json.loads(text)
    peaks = re.findall(r"discharge +(?:hot|cold) +\d+ +\d+ ton +(\d+) °F", out)
    at_drum = [one for one in found["excursions"] if one["point"] == "discharge"]
    assert [int(one) for one in peaks] == [round(1.8 * one["peak_k"]) for one in at_drum]
    assert at_drum and "°C" not in out
    assert "MMBtu" in found["sentence"] and "kWh" not in out
    _, si, _ = run("review", demo_folder, *NIGHT)
    assert re.search(r"kWh of fuel", si) and "MMBtu" not in si
    low_mmbtu, low_kwh = (
        float(re.search(r"^([\d.,]+) to ", text, re.MULTILINE)[1].replace(",", ""))
        for text in (out, si)
    )
    # both rounded to two digits; 1 MMBtu is 293.07 kWh
    assert low_mmbtu * 293.07 == pytest.approx(low_kwh, rel=0.06)
    assert " K" not in " ".join(one["evidence"] for one in found["excursions"])


def test_only_rows_of_the_period_are_counted(run, demo_folder, tmp_path):
    path = tmp_path / "not_used.csv"
    code, text, _ = run("review", demo_folder, *NIGHT, "--json", "--set-aside", path)
    found = json.loads(text)
    assert code == 0
    # two hours of minutes, and the header that was written again at 05:20
    assert (found["rows_read"], found["rows_used"], found["rows_set_aside"]) == (121, 120, 1)
    with path.open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    assert {"plant_2026-10-21.csv", "plant_2026-10-25.csv"} <= {row["source"] for row in rows}
    assert all(row["reason"] and row["line"] for row in rows)


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["--from", "21/10/2026"], ["--from", "'21/10/2026' is not a moment", "2026-10-19 06:10"]),
        (["--to", "soon"], ["--to", "'soon' is not a moment"]),
        (["--to", "2026-10-25 01:30"], ["--to", "happened twice", "+01:00"]),
        (["--from", "2026-10-22", "--to", "2026-10-21"], ["--to", "not after its begin"]),
    ],
)
def test_a_bad_date_names_its_option_and_what_would_be_right(run, demo_folder, words, said):
    code, out, err = run("review", demo_folder, *words)
    assert code == 2 and out == ""
    assert all(one in err for one in said), err
