"""README.md keeps its word: the two commands are real and the example runs as printed."""

from __future__ import annotations

import re
import subprocess
import sys

from advisor import first_run
from project.sources import ROOT

README = (ROOT / "README.md").read_text("utf-8")
BLOCKS = re.findall(r"^```(\w*)\n(.*?)^```$", README, re.MULTILINE | re.DOTALL)
COMMANDS = ["python3 advisor/first_run.py dashboard", "python3 advisor/first_run.py tests"]


def test_the_job_is_told_in_one_paragraph_at_the_top() -> None:
    title, first, *_ = README.split("\n\n")
    assert title.startswith("# ")
    assert len(first.split()) > 50
    assert not first.startswith(("#", "-", "*", "```"))


def test_each_of_the_two_commands_stands_in_one_block_of_its_own() -> None:
    shown = [text.strip() for _, text in BLOCKS]
    for command in COMMANDS:
        assert [text for text in shown if command in text] == [command]
    assert shown[:2] == COMMANDS


def test_the_two_commands_are_those_of_first_run() -> None:
    for command in COMMANDS:
        _, file, _ = command.split()
        assert ROOT / file == ROOT / "advisor" / "first_run.py"
        assert command in (first_run.__doc__ or "")


def test_the_example_for_programmers_runs_and_prints_its_answers() -> None:
    (example,) = [text for language, text in BLOCKS if language == "python"]
    lines = [line for line in example.splitlines() if line and not line.startswith("#")]
    assert len(lines) <= 15
    done = subprocess.run(
        [sys.executable, "-W", "error", "-c", example],
        cwd=ROOT.anchor,
        capture_output=True,
        text=True,
        timeout=120,
    )
    assert done.returncode == 0, done.stderr
    assert len(re.findall(r"\d", done.stdout)) >= 4


def test_a_command_shown_is_one_the_program_has() -> None:
    shown = re.findall(r"^advisor (\S+)", "\n".join(text for _, text in BLOCKS), re.MULTILINE)
    for name in set(shown):
        done = subprocess.run(
            [sys.executable, "-m", "advisor", name, "--help"], capture_output=True, text=True
        )
        assert done.returncode == 0, done.stderr
