"""Every command as a person and as a program meets it: help, tables, JSON, faults, exit codes."""

from __future__ import annotations

import json
import re
import subprocess
import sys

import pytest
from click.testing import CliRunner

from advisor.cli import main as entry
from advisor.cli.main import COMMANDS, advisor

FRIDAY = "2026-10-23 10:10"


@pytest.mark.parametrize("name", COMMANDS)
def test_every_command_has_help_with_an_example(name):
    command = advisor.get_command(None, name)
    assert command is not None and command.name == name
    done = CliRunner().invoke(advisor, [name, "--help"], prog_name="advisor")
    assert done.exit_code == 0
    assert re.search(rf"Examples?:\n\s+advisor {name}\b", done.output)


def test_the_list_of_commands_says_what_each_answers():
    done = CliRunner().invoke(advisor, ["--help"], prog_name="advisor")
    for name, words in COMMANDS.items():
        assert name in done.output and words.split(":")[0] in done.output


def test_a_word_that_is_no_command_offers_the_nearest(run):
    code, _, err = run("setpoint")
    assert code == 2 and "setpoint" in err


def test_the_program_runs_as_a_module_and_finds_its_demo_plant_anywhere(tmp_path):
    done = subprocess.run(
        [sys.executable, "-m", "advisor", "check", "demo_plant"],
        cwd=tmp_path,
        capture_output=True,
        text=True,
        timeout=120,
    )
    assert done.returncode == 0, done.stderr
    assert "sound" in done.stdout


def test_setpoints_for_people_and_for_programs_are_the_same(run, demo_folder):
    code, table, _ = run("setpoints", demo_folder, "--at", FRIDAY)
    assert code == 0
    code, text, _ = run("setpoints", demo_folder, "--at", FRIDAY, "--json")
    assert code == 0
    advice = json.loads(text)
    assert [one["point"] for one in advice["setpoints"]] == [
        "binder_tank", "discharge", "silo", "load_out", "delivery",
    ]  # fmt: skip
    for one in advice["setpoints"]:
        (line,) = [row for row in table.splitlines() if row.startswith(one["label"] + " ")]
        shown = [int(number) for number in re.findall(r"(\d+) °C", line)[:3]]
        assert shown == [round(one[side]) for side in ("low_c", "target_c", "high_c")]
        assert one["low_set_by"]["name"] in line and one["high_set_by"]["name"] in line
        assert one["low_set_by"]["source"]
    assert "Valid until" in table and "Cautions:" in table and "PROVISIONAL" in table


def test_setpoints_in_us_units_convert_a_difference_as_one(run, demo_folder):
    _, si, _ = run("setpoints", demo_folder, "--at", FRIDAY)
    _, us, _ = run("setpoints", demo_folder, "--at", FRIDAY, "--us")
    low, target = (float(one) for one in re.findall(r"Discharge +(\d+) °C +(\d+) °C", si)[0])
    low_f, target_f = (float(one) for one in re.findall(r"Discharge +(\d+) °F +(\d+) °F", us)[0])
    assert low_f == pytest.approx(low * 1.8 + 32, abs=1.5)
    assert target_f == pytest.approx(target * 1.8 + 32, abs=1.5)
    margin = float(re.findall(r"Target: ([\d.]+) °C above", si)[0])
    margin_f = float(re.findall(r"Target: ([\d.]+) °F above", us)[0])
    assert margin_f == pytest.approx(margin * 1.8, abs=0.2)
    money, carbon = map(float, re.findall(r"([\d.]+) GBP/t, ([\d.]+) kg/t of CO2", si)[0])
    money_us, carbon_us = map(float, re.findall(r"([\d.]+) GBP/ton, ([\d.]+) lb/ton", us)[0])
    assert money_us == pytest.approx(money * 0.90718, abs=0.01)  # a short ton is 907.18 kg
    assert carbon_us == pytest.approx(2 * carbon, abs=0.15)
    # a contract's own figure stays as it was written
    assert "contract minimum 280 F" in si and "contract minimum 280 F" in us


def test_no_safe_window_is_an_answer_with_its_two_limits_and_remedies(run, demo_folder):
    code, out, _ = run("setpoints", demo_folder, "--at", FRIDAY, "--job", "J08")
    assert code == 0
    assert "No safe window" in out and "wants at least" in out and "allows at most" in out
    assert "What would help" in out
    _, text, _ = run("setpoints", demo_folder, "--at", FRIDAY, "--job", "J08", "--json")
    advice = json.loads(text)
    assert advice["setpoints"] == [] and (
        advice["clash"]["at_least_c"] > advice["clash"]["at_most_c"]
    )
    assert any(one["enough"] for one in advice["clash"]["remedies"])


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["--job", "J99"], ["J99", "J01"]),
        (["--at", "next tuesday"], ["next tuesday"]),
        (["--at", "2026-10-25 01:30"], ["twice"]),
        (["--tank", "tank 9"], ["tank 9", "tank 1"]),
    ],
)
def test_a_wrong_word_is_refused_with_what_would_be_right(run, demo_folder, words, said):
    code, out, err = run("setpoints", demo_folder, *words)
    assert code == 2 and out == ""
    assert all(one in err for one in said), err
    code, out, _ = run("setpoints", demo_folder, *words, "--json")
    faults = json.loads(out)["faults"]
    assert code == 2 and faults and faults[0]["problem"] and faults[0]["remedy"]


def test_between_runs_it_asks_for_the_job(run, demo_folder):
    code, _, err = run("setpoints", demo_folder, "--at", "2026-10-23 18:00")
    assert code == 1
    assert "No job runs" in err and "J01" in err


def test_review_for_people_and_for_programs_are_the_same(run, demo_folder):
    period = ["--from", "2026-10-22 05:00", "--to", "2026-10-22 16:00"]
    code, table, _ = run("review", demo_folder, *period)
    assert code == 0
    code, text, _ = run("review", demo_folder, *period, "--json")
    assert code == 0
    found = json.loads(text)
    assert found["sentence"] in table
    at_drum = [one for one in found["excursions"] if one["point"] == "discharge"]
    listed = re.findall(r"^\w{3} \d\d \d\d:\d\d  discharge", table, re.MULTILINE)
    assert len(listed) == len(at_drum) > 0
    for mix in found["mixes"]:
        assert re.search(rf"^{mix['mix']} +{mix['tonnes']:.0f} t", table, re.MULTILINE)
    _, longer, _ = run("review", demo_folder, *period, "--loads")
    assert "Loads outside their window:\n" in longer


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["--from", "2026-10-22", "--to", "2026-10-21"], ["--to", "not after its begin"]),
        (["--from", "yesterday"], ["yesterday"]),
        (["--from", "2026-01-01", "--to", "2026-01-02"], ["holds nothing"]),
    ],
)
def test_a_period_that_cannot_be_reviewed_is_refused(run, demo_folder, words, said):
    code, out, err = run("review", demo_folder, *words)
    assert code in (1, 2) and out == ""
    assert all(one in err for one in said), err


def test_check_tells_everything_that_is_wrong(run, own_demo):
    assert run("check", own_demo)[0] == 0
    for name, old, new in (
        ("plant.yaml", "altitude: 4 m", "altitude: 4"),
        ("mixes.yaml", "family: dense", "family: dens"),
    ):
        path = own_demo / name
        path.write_text(path.read_text("utf-8").replace(old, new, 1), "utf-8")
    code, out, err = run("check", own_demo)
    assert code == 2 and out == ""
    assert "plant.yaml:9" in err and "mixes.yaml:5" in err and "2 faults." in err
    code, out, _ = run("check", own_demo, "--json")
    faults = json.loads(out)["faults"]
    assert code == 2 and [one["line"] for one in faults] == [9, 5]


def test_check_looks_at_columns_and_records_too(run, own_demo):
    path = own_demo / "signals.yaml"
    text = path.read_text("utf-8")
    path.write_text(text.replace("signal: stack_c", "signal: stak_c", 1), "utf-8")
    runs = own_demo / "records" / "job_runs.csv"
    runs.write_text(runs.read_text("utf-8").replace(",J02,", ",J22,", 1), "utf-8")
    code, _, err = run("check", own_demo)
    assert code == 2
    assert "stak_c" in err and "stack_c" in err
    assert "J22" in err and "Did you mean 'J02'" in err


def test_an_export_that_cannot_be_read_is_told_by_check_and_by_the_advice(run, own_demo):
    path = own_demo / "logs" / "plant_2026-10-23.csv"
    path.write_text(path.read_text("cp1252").replace("Mix temp", "Mx temp", 1), "cp1252")
    code, _, err = run("check", own_demo)
    assert code == 2 and "plant_2026-10-23.csv" in err and "Mix temp" in err and "Mx temp" in err
    code, out, _ = run("setpoints", own_demo, "--at", FRIDAY)
    assert code == 0
    assert "not read: plant_2026-10-23.csv" in out
    # without the log of the day the time in the silo is assumed, and says so
    assert "time in silo" in out.split("Inputs:")[0]


def test_without_weather_there_is_no_advice_and_it_says_what_is_missing(run, own_demo):
    for file in (own_demo / "series").iterdir():
        file.unlink()
    code, out, _ = run("setpoints", own_demo, "--at", FRIDAY)
    assert code == 0
    assert "No advice" in out and "weather is not known" in out
    assert "°C  " not in out


def test_without_a_log_setpoints_stand_and_a_review_is_refused(run, own_demo):
    for file in (own_demo / "logs").glob("plant_*.csv"):
        file.unlink()
    code, out, _ = run("setpoints", own_demo, "--at", FRIDAY)
    assert code == 0 and "Discharge" in out and "time in silo" in out
    code, out, err = run("review", own_demo)
    assert code == 1 and out == "" and "no export of the plant log" in err


def test_a_folder_that_is_none_is_refused_by_every_command(run, tmp_path):
    for name in ("setpoints", "review", "check"):
        code, out, err = run(name, tmp_path / "nowhere")
        assert code == 2 and out == "" and "nowhere" in err


def test_records_are_brought_in_written_out_and_looked_up(run, own_demo, tmp_path):
    code, out, _ = run("records", "export", own_demo, tmp_path / "out", "--csv")
    assert code == 0 and "moisture.csv" in out
    code, out, _ = run("records", "import", own_demo, tmp_path / "out" / "moisture.csv")
    assert code == 0 and "0 recorded" in out
    new = tmp_path / "new.csv"
    new.write_text(
        "kind,subject,valid_from,who,water,basis,method\n"
        "moisture,stone,2026-10-23 09:00,lab,5.5 %,dry,oven\n",
        "utf-8",
    )
    code, out, _ = run("records", "import", own_demo, new)
    assert code == 0 and "1 recorded" in out
    words = ["--kind", "moisture", "--subject", "stone", "--at", FRIDAY]
    code, out, _ = run("records", "show", own_demo, *words)
    assert code == 0 and "5.5 %" in out
    code, out, _ = run("records", "show", own_demo, *words, "--json")
    assert json.loads(out)["entries"][0]["written"]["water"] == "5.5 %"
    new.write_text(new.read_text("utf-8").replace("5.5 %", "5.5"), "utf-8")
    code, out, err = run("records", "import", own_demo, new)
    assert code == 2 and "new.csv:2" in err and "no unit" in err
    code, _, err = run("records", "show", own_demo, "--kind", "moistur")
    assert code == 2 and "Did you mean 'moisture'" in err


def test_a_reader_that_has_seen_enough_is_no_fault(demo_folder):
    words = [sys.executable, "-m", "advisor", "setpoints", str(demo_folder), "--at", FRIDAY]
    with subprocess.Popen(words, stdout=subprocess.PIPE, stderr=subprocess.PIPE) as program:
        program.stdout.close()
        errors = program.stderr.read()
    assert program.returncode == 1 and errors == b""


def test_a_file_that_may_not_be_read_is_named_without_a_traceback(run, monkeypatch, tmp_path):
    def refused(*_, **__):
        raise PermissionError(13, "Permission denied", str(tmp_path / "plant.yaml"))

    monkeypatch.setattr(entry.advisor, "main", refused)
    code, _, err = run("check", "demo_plant")
    assert code == 1 and "plant.yaml" in err and "Permission denied" in err
