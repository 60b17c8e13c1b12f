"""What no file of the project may hold, and how large and how called a file may be."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from project.sources import ROOT, files, modules, name_of

EVERY_FILE = [path for path in files() if path != Path(__file__)]

NOWHERE = {
    "a path of one machine": r"(?<![\w.~:/*-])/(root|home|Users|work|tmp|opt|mnt|srv)/\w",
    "a path of one Windows machine": r"\b[A-Z]:\\Users\\",
    "a package host": r"pypi\.org|pythonhosted|anaconda\.org|npmjs|(?<!fonts-)cdn\.|unpkg|"
    r"--(extra-)?index-url|--find-links",
    "a source that is no publication": r"(?i)\blecture|\btranscript",
    "work left for later": r"\b(TODO|FIXME|XXX|HACK)\b",
    "a test that does not run": r"pytest\.mark\.(skip\b|xfail)|unittest\.skip",
}

VAGUE = {"utils", "util", "helpers", "helper", "manager", "common", "misc", "data", "info"}


@pytest.mark.parametrize(("what", "pattern"), NOWHERE.items(), ids=list(NOWHERE))
def test_no_file_holds(what: str, pattern: str) -> None:
    sought = re.compile(pattern)
    found = [
        f"{name_of(path)}:{number}: {line.strip()[:90]}"
        for path in EVERY_FILE
        for number, line in enumerate(path.read_text("utf-8", "replace").splitlines(), start=1)
        if sought.search(line)
    ]
    assert not found, f"{what}:\n" + "\n".join(found)


@pytest.mark.parametrize(
    ("what", "line"),
    [
        ("a path of one machine", 'read("/home/someone/plant.yaml")'),
        ("a path of one Windows machine", r"C:\Users\someone\plant"),
        ("a package host", "pip install --index-url https://example.invalid"),
        ("a source that is no publication", "from memory of a Lecture"),
        ("work left for later", "x = 1  # TODO: ask"),
        ("a test that does not run", "@pytest.mark.skip"),
    ],
)
def test_the_search_finds_what_it_should(what: str, line: str) -> None:
    assert re.search(NOWHERE[what], line)


@pytest.mark.parametrize("path", modules(), ids=name_of)
def test_a_file_answers_one_question(path: Path) -> None:
    lines = path.read_text(encoding="utf-8").count("\n")
    assert lines <= 420, "split it by the questions it answers"


def test_no_room_and_no_file_has_a_vague_name() -> None:
    vague = [
        name_of(path)
        for path in modules()
        if VAGUE & set(path.relative_to(ROOT).with_suffix("").parts)
    ]
    assert not vague


def test_text_files_are_utf8_with_unix_ends_of_line() -> None:
    # The logs of a plant are kept byte for byte as exported, faulty inputs as they are.
    wrong = [
        name_of(path)
        for path in EVERY_FILE
        if not {"logs", "bad"} & set(path.parts) and b"\r" in path.read_bytes()
    ]
    assert not wrong


def test_nothing_is_hosted_elsewhere() -> None:
    hosted = {".github", ".gitlab-ci.yml", ".circleci", ".travis.yml", ".pre-commit-config.yaml"}
    assert not hosted & {path.name for path in ROOT.iterdir()}
