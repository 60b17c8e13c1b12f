"""advisor ahead as a person and as a program meets it: answers, JSON, US units, bad input."""

from __future__ import annotations

import json
import re

import pytest
from click.testing import CliRunner

from advisor.cli.main import advisor, main

EVENING = "2026-10-22 15:30"
SILO = ("silo", "silo 1", "--until", "06:00", "--mass", "80 t", "--at", EVENING)
TANK = ("tank", "tank 2", "--at", "2026-10-23 15:30", "--until", "2026-10-26 05:30", "--air", "7 C")
QUESTIONS = {
    "load": ("load", "--ticket", "40483"),
    "change": ("change",),
    "silo": SILO,
    "tank": TANK,
    "day": ("day", "--hours", "3"),
}


@pytest.fixture
def ask(capsys, demo_folder):
    """Exit code, output and errors of ``advisor ahead`` about the demo plant."""

    def asked(name, *words):
        given = [name, str(demo_folder), *words]
        with pytest.raises(SystemExit) as left:
            main(["ahead", *given])
        out, err = capsys.readouterr()
        return left.value.code, out, err

    return asked


@pytest.mark.parametrize("question", QUESTIONS)
def test_every_question_has_help_with_an_example(question):
    done = CliRunner().invoke(advisor, ["ahead", question, "--help"], prog_name="advisor")
    assert done.exit_code == 0
    assert re.search(rf"Examples?:\n\s+advisor ahead {question}\b", done.output)


@pytest.mark.parametrize("question", QUESTIONS)
def test_json_holds_the_whole_answer(ask, question):
    code, out, _ = ask(*QUESTIONS[question], "--json")
    assert code == 0
    answer = json.loads(out)
    assert len(answer) > 4
    assert question == "change" or answer["cautions"]


def test_a_load_is_told_with_band_wait_and_rolling(ask):
    code, out, _ = ask(*QUESTIONS["load"])
    assert code == 0
    for words in ("Load for J02, left Fri 23 Oct 10:00 at 157 °C", "minutes it may wait",
                  "minutes of rolling", "Wanted at delivery", "Advice only"):  # fmt: skip
        assert words in out


def test_us_readers_see_fahrenheit_and_no_celsius(ask):
    for question in ("load", "silo", "tank", "day"):
        code, out, _ = ask(*QUESTIONS[question], "--us")
        assert code == 0
        assert "°F" in out
        assert "°C" not in out


def test_a_bare_time_is_the_next_one(ask):
    _, out, _ = ask(*SILO)
    assert "At Fri 23 Oct 06:00, after 14.5 h" in out
    assert "a rule and no model" in out


def test_the_weekend_says_when_to_reheat_and_what_it_costs(ask):
    _, out, _ = ask(*TANK, "--price", "0.09")
    assert re.search(r"Heater on at (Sun|Mon) \d\d:\d\d", out)
    assert "GBP" in out
    assert "Water may have gathered" in out
    _, out, _ = ask(*TANK)
    assert "Not priced" in out


def test_the_day_names_who_told_the_weather(ask):
    _, out, _ = ask(*QUESTIONS["day"])
    assert "Weather told by: forecast issued Fri 05:00." in out


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("load",), "Give --load-out"),
        (("load", "--ticket", "12"), "There is no ticket '12'"),
        (("load", "--load-out", "158"), "load-out"),
        (("load", "--load-out", "158 kg"), "load-out"),
        (("load", "--load-out", "900 F"), "No mix is loaded"),
        (("load", "--load-out", "158 C", "--loaded", "yesterday"), "not a moment"),
        (("load", "--load-out", "158 C", "--job", "J99"), "J99"),
        (("change", "--at", "2026-10-24 12:00"), "No job runs"),
        (("silo", "silo 9", "--until", "06:00"), "silo 9"),
        (("silo", "silo 1", "--until", "2026-10-01 06:00", "--stored", "160 C"), "after now"),
        (("silo", "silo 1", "--until", "13:00", "--at", "2026-10-26 12:00"), "not known"),
        (("silo", "silo 1", "--until", "13:00", "--stored", "150 C"), "nothing to hold"),
        (("silo", "silo 1", "--until", "06:00", "--stored", "hot"), "stored"),
        (("tank", "tank 2", "--until", "2026-10-26 05:30"), "No forecast tells"),
        (("tank", "tank 2", "--until", "2027-10-26 05:30", "--air", "7 C"), "three weeks"),
        ((*TANK, "--mass", "2 t"), "do not cover the heater"),
        ((*TANK, "--low", "170 C"), "may not fall under"),
        ((*TANK, "--price", "-1"), "--price"),
        ((*TANK, "--price", "dear"), "dear"),
        (("day", "--hours", "99"), "between 1 and 36"),
        (("day", "--hours", "x"), "x"),
    ],
)
def test_what_cannot_be_answered_is_refused_in_a_sentence(ask, words, said):
    code, out, err = ask(*words)
    assert code in (1, 2)
    assert said in err
    assert "Traceback" not in err
    assert out == ""
    code, out, _ = ask(*words, "--json")
    assert code in (1, 2)
    assert json.loads(out)["faults"]


def test_silo_and_until_have_to_be_named(ask):
    code, _, err = ask("silo")
    assert code == 2
    assert "SILO" in err
    code, _, err = ask("silo", "silo 1")
    assert code == 2
    assert "--until" in err
