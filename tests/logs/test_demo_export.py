"""The exports of the invented plant against what its simulator put into them."""

from __future__ import annotations

import json
import subprocess
import sys
from datetime import datetime
from pathlib import Path

import numpy as np
import pandas as pd
import pytest

from advisor.logs import read_logs, write_set_aside
from truth.known import faults, minutes, truth

TESTS = Path(__file__).parents[1]


@pytest.fixture(scope="module")
def log(demo):
    return read_logs(demo.folder)


def test_every_line_is_a_row_used_a_row_set_aside_a_heading_or_blank(log):
    reports = {report.source: report for report in log.reports}
    for name, told in truth()["files"].items():
        report = reports[name]
        assert report.rows_read == told["rows_read"]
        assert report.rows_read == report.rows_used + len(report.set_aside)
        assert report.blank_lines == len(told["blank_lines"])
        # a row of cells is shown with its cells apart
        shown = {str(row.line): row.text.replace(" ", "") for row in report.set_aside}
        assert shown == {line: text.replace(" ", "") for line, text in told["set_aside"].items()}
        assert all(row.reason for row in report.set_aside)


def test_the_week_is_whole_and_in_order_across_the_clock_change(log):
    times = log.frame["time"]
    assert times.is_monotonic_increasing and times.is_unique
    start, end = (datetime.fromisoformat(truth()[side]) for side in ("start", "end"))
    # The last line of the last file is cut short: all minutes but that one.
    assert len(times) == (end - start).total_seconds() / 60 - 1
    assert (times.diff().dropna() == pd.Timedelta(minutes=1)).all()


def believed(log, signal):
    frame = log.frame
    return frame[signal].where(frame[f"{signal}_mark"] == "")


def test_believed_discharge_is_the_true_one_within_the_sensor_noise(log):
    known = minutes()
    time_s = log.frame["time"].astype("int64").to_numpy() / 1e6
    place = np.searchsorted(time_s, known["time_s"])
    inside = place < len(time_s)
    off = believed(log, "discharge_c").to_numpy()[place[inside]] - known["discharge_c"][inside]
    seen = np.isfinite(off)
    assert seen.mean() > 0.995
    # 0.4 K of noise, rounded to 0.1: none of several thousand is further off than five of them
    assert np.nanstd(off) == pytest.approx(0.4, abs=0.05)
    assert np.nanmax(np.abs(off)) < 2.1


@pytest.mark.parametrize("reason", ["stuck", "unit mix-up", "out of range", "spike", "missing"])
def test_every_planted_fault_is_found_with_its_reason(log, reason):
    frame = log.frame
    for signal, start, end in faults(reason):
        rows = (frame["time"] >= start) & (frame["time"] < end)
        marks = frame.loc[rows, f"{signal}_mark"]
        found = (marks == reason).mean()
        assert found >= 0.9, f"{signal} from {start}: {found:.0%} of {rows.sum()} rows"


def test_hardly_a_sound_reading_is_suspected(log):
    """Marks of broken sensors where nothing was planted: fewer than one in ten thousand."""
    frame = log.frame
    planted = {name: np.zeros(len(frame), bool) for name in frame.columns}
    for reason in ("stuck", "unit mix-up", "out of range", "spike", "missing"):
        for signal, start, end in faults(reason):
            near = pd.Timedelta(minutes=1)
            rows = (frame["time"] >= start - near) & (frame["time"] < end + near)
            planted[signal] |= rows.to_numpy()
    broken = ("stuck", "unit mix-up", "out of range", "spike", "step", "drift")
    wrong, seen = 0, 0
    for column in [name for name in frame.columns if name.endswith("_mark")]:
        signal = column.removesuffix("_mark")
        sound = ~planted[signal]
        wrong += int((frame[column].isin(broken).to_numpy() & sound).sum())
        seen += int(sound.sum())
    assert wrong / seen < 1e-4


def test_the_stack_column_in_fahrenheit_is_read_in_celsius(log):
    making = log.frame["rate_kgs"] > 0
    stack = believed(log, "stack_c")[making]
    assert stack.quantile(0.01) > 60 and stack.quantile(0.99) < 160


def test_loads_and_arrivals_are_all_there(log):
    assert set(log.tickets["ticket"]) == {one["ticket"] for one in truth()["loads"]}
    assert set(log.arrivals["ticket"]) == {one["ticket"] for one in truth()["deliveries"]}
    true = {one["ticket"]: one["delivery_c"] for one in truth()["deliveries"]}
    off = log.arrivals["delivery_c"] - log.arrivals["ticket"].map(true)
    assert off.std() == pytest.approx(1.5, abs=0.25)
    # an arrival after its load, in UTC on both sides of the clock change
    both = log.arrivals.merge(log.tickets, on="ticket", suffixes=("_arrived", "_loaded"))
    assert (both["time_arrived"] > both["time_loaded"]).all()


def test_rows_set_aside_can_be_opened_as_a_file(log, tmp_path):
    path = tmp_path / "set_aside.csv"
    count = write_set_aside(log.reports, path)
    table = pd.read_csv(path, dtype=str, keep_default_na=False)
    assert len(table) == count == sum(len(report.set_aside) for report in log.reports)
    assert "Total" in " ".join(table["text"])


def test_the_exports_are_made_again_to_the_byte(demo_folder, tmp_path):
    done = subprocess.run(
        [sys.executable, "-c", _AGAIN, str(TESTS), str(tmp_path)], capture_output=True, text=True
    )
    assert done.returncode == 0, done.stderr
    for made in sorted(tmp_path.rglob("*.csv")):
        assert made.read_bytes() == (demo_folder / made.relative_to(tmp_path)).read_bytes()
    assert json.loads(done.stdout) == truth()


_AGAIN = """
import json, sys
from pathlib import Path
sys.path.insert(0, sys.argv[1])
from make_demo_plant import exports
files, truth, minutes = exports()
for name, raw in files.items():
    path = Path(sys.argv[2]) / name
    path.parent.mkdir(parents=True, exist_ok=True)
    path.write_bytes(raw)
print(json.dumps(truth))
"""
