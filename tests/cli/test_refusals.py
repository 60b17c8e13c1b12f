"""What every command says of a wrong word, a wrong folder, a broken store, a mistake of its own."""

from __future__ import annotations

import json
import subprocess
import sys

import pytest

from advisor.cli import main as entry
from advisor.cli.main import COMMANDS

# What each command needs beside the plant folder, which stands where '{}' is.
WORDS = {
    "setpoints": ["{}"],
    "ahead": ["day", "{}"],
    "what-if": ["{}"],
    "review": ["{}"],
    "dashboard": ["{}", "--quiet-start"],
    "records": ["show", "{}", "--kind", "moisture"],
    "check": ["{}"],
}


def words_for(name, folder):
    return [name, *(word.replace("{}", str(folder)) for word in WORDS[name])]


def test_every_command_on_a_plant_is_tried_here():
    assert set(COMMANDS) - set(WORDS) == {"binder"}  # it reads sheets, without a plant


@pytest.mark.parametrize("name", WORDS)
def test_a_folder_that_is_not_there_is_named(run, tmp_path, name):
    code, out, err = run(*words_for(name, tmp_path / "nowhere"))
    assert code == 2 and out == ""
    assert "nowhere" in err and "plant.yaml" in err


@pytest.mark.parametrize("name", WORDS)
def test_a_store_that_is_none_is_named_and_left_alone(run, own_demo, name):
    path = own_demo / "records.sqlite"
    path.write_bytes(b"a note somebody saved here " * 200)
    code, out, err = run(*words_for(name, own_demo))
    assert code == 1 and out == ""
    assert "records.sqlite" in err and "Nothing was changed" in err and "Traceback" not in err
    assert path.read_bytes().startswith(b"a note somebody")


@pytest.mark.parametrize("name", ["setpoints", "records", "check"])
def test_a_store_damaged_inside_is_named_too(run, own_demo, name):
    assert run("check", own_demo)[0] == 0  # which builds it
    path = own_demo / "records.sqlite"
    whole = path.read_bytes()
    path.write_bytes(whole[:4096] + b"\xaa" * (len(whole) - 4096))
    code, out, err = run(*words_for(name, own_demo))
    assert code == 1 and out == "" and "records.sqlite" in err
    code, out, err = run(*words_for(name, own_demo), "--json")
    assert code == 1 and err == "" and "records.sqlite" in json.loads(out)["faults"][0]["file"]


@pytest.mark.parametrize("name", ["setpoints", "what-if", "check", "review"])
def test_a_fault_of_the_settings_is_told_by_every_command(run, own_demo, name):
    path = own_demo / "plant.yaml"
    path.write_text(path.read_text("utf-8").replace("altitude: 4 m", "altitude: 4"), "utf-8")
    code, out, err = run(*words_for(name, own_demo))
    assert code == 2 and out == "" and "plant.yaml:9" in err
    code, out, _ = run(*words_for(name, own_demo), "--json")
    (fault,) = json.loads(out)["faults"]
    assert code == 2 and (fault["line"], fault["field"]) == (9, "altitude")


@pytest.mark.parametrize(("word", "meant"), [("setpoint", "setpoints"), ("what_if", "what-if")])
def test_a_word_that_is_no_command_offers_the_nearest(run, word, meant):
    code, out, err = run(word, "demo_plant")
    assert code == 2 and out == "" and f"Did you mean '{meant}'" in err
    code, out, err = run(word, "demo_plant", "--json")
    (fault,) = json.loads(out)["faults"]
    assert code == 2 and err == "" and meant in fault["problem"] and "--help" in fault["remedy"]


def test_a_moment_left_empty_is_not_taken_for_now(run, demo_folder):
    code, out, err = run("setpoints", demo_folder, "--at", "")
    assert code == 2 and out == "" and "not a moment" in err


def test_nothing_found_is_said_with_what_there_is(run, demo_folder):
    code, out, _ = run("records", "show", demo_folder, "--kind", "certificate", "--subject", "X-1")
    assert code == 0 and "No certificate about 'X-1'" in out and "A-2641" in out


def test_a_tank_nobody_knows_the_binder_of_is_told_by_check(run, own_demo):
    for name in ("receipts.csv", "dips.csv"):
        (own_demo / "records" / name).unlink()
    code, out, _ = run("check", own_demo)
    assert code == 0 and all(f"What tank {number} holds" in out for number in (1, 2, 3))
    _, text, _ = run("check", own_demo, "--json")
    assert len(json.loads(text)["not_yet_known"]) == 3


def test_a_lot_without_certificate_is_one_fault_however_many_loads_name_it(run, own_demo):
    (own_demo / "records" / "certificates.yaml").unlink()
    code, out, err = run("check", own_demo)
    assert code == 2 and out == ""
    for lot in ("A-2641", "A-2642", "B-4410", "P-0917"):
        assert err.count(f"'{lot}', whose certificate is not recorded. Record it") == 1


def test_a_mistake_of_the_program_is_one_sentence_with_its_place(run, monkeypatch):
    def wrong(*_, **__):
        raise ZeroDivisionError("division by zero")

    monkeypatch.setattr(entry.advisor, "main", wrong)
    code, out, err = run("check", "demo_plant")
    assert code == 1 and out == "" and "Traceback" not in err
    assert "test_refusals.py" in err and "ZeroDivisionError: division by zero" in err
    code, out, err = run("check", "demo_plant", "--json")
    assert code == 1 and err == "" and json.loads(out)["faults"][0]["code"] == "program"


def test_two_programs_recording_at_once_lose_nothing(run, own_demo, tmp_path):
    assert run("check", own_demo)[0] == 0
    _, before, _ = run("records", "show", own_demo, "--kind", "moisture", "--json")
    programs = []
    for number in range(2):
        file = tmp_path / f"{number}.csv"
        rows = [
            f"moisture,pile {number},2026-10-2{day} 09:00,lab,{number + 3} %,dry,oven\n"
            for day in range(5)
        ]
        file.write_text("kind,subject,valid_from,who,water,basis,method\n" + "".join(rows), "utf-8")
        words = [sys.executable, "-m", "advisor", "records", "import", str(own_demo), str(file)]
        programs.append(subprocess.Popen(words, stdout=subprocess.PIPE, text=True))
    for program in programs:
        said, _ = program.communicate(timeout=60)
        assert program.returncode == 0 and "5 recorded" in said
    _, after, _ = run("records", "show", own_demo, "--kind", "moisture", "--json")
    assert len(json.loads(after)["entries"]) == len(json.loads(before)["entries"]) + 10
