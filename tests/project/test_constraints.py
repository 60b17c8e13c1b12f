"""constraints.txt pins every library for every Python we run on, and names no place."""

from __future__ import annotations

import re
import tomllib

import pytest
from packaging.markers import default_environment
from packaging.requirements import Requirement
from packaging.utils import canonicalize_name

from project.sources import ROOT

PROJECT = tomllib.loads((ROOT / "pyproject.toml").read_text("utf-8"))
WANTED = [
    *PROJECT["project"]["dependencies"],
    *PROJECT["project"]["optional-dependencies"]["tests"],
    *PROJECT["build-system"]["requires"],
]
LINES = [
    line
    for line in (ROOT / "constraints.txt").read_text("utf-8").splitlines()
    if line and not line.startswith("#")
]


@pytest.mark.parametrize("python", ["3.11", "3.12", "3.13"])
@pytest.mark.parametrize("wanted", WANTED)
def test_every_library_has_one_version_for_every_python(wanted: str, python: str) -> None:
    asked = Requirement(wanted)
    here = {**default_environment(), "python_version": python, "python_full_version": python + ".0"}
    pins = [
        pin
        for pin in map(Requirement, LINES)
        if canonicalize_name(pin.name) == canonicalize_name(asked.name)
        and (pin.marker is None or pin.marker.evaluate(here))
    ]
    assert len(pins) == 1
    (exact,) = pins[0].specifier
    assert exact.operator == "=="
    assert exact.version in asked.specifier


@pytest.mark.parametrize("line", LINES)
def test_a_line_is_a_name_a_version_and_perhaps_for_which_python(line: str) -> None:
    assert re.fullmatch(r"[a-z0-9-]+==[\w.]+( ; [\w.]+ (<|>=|==|!=) '[\w.]+')?", line)


def test_the_comment_says_how_it_was_made_and_nothing_of_a_machine() -> None:
    text = (ROOT / "constraints.txt").read_text("utf-8")
    assert "uv pip compile --universal" in text
    assert "://" not in text
    assert not re.search(r"(^|\s)[.~]?/", text)
