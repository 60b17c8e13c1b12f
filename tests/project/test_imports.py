"""What is loaded to answer: a command starts with little, a science room with numpy."""

from __future__ import annotations

import json
import subprocess
import sys

import pytest

from project.sources import SCIENCE

HEAVY = {
    "chemicals",
    "dash",
    "fluids",
    "flask",
    "pandas",
    "plotly",
    "pyarrow",
    "reportlab",
    "scipy.optimize",
    "scipy.stats",
}


def loaded_by(module: str) -> set[str]:
    """Names of every module that a new Python has loaded after importing ``module``."""
    ask = f"import json, sys, {module}; print(json.dumps(list(sys.modules)))"
    done = subprocess.run(
        [sys.executable, "-c", ask], check=True, capture_output=True, text=True, timeout=120
    )
    return set(json.loads(done.stdout))


@pytest.mark.parametrize("module", ["advisor.cli.main", *(f"advisor.{room}" for room in SCIENCE)])
def test_nothing_heavy_is_loaded_before_it_is_needed(module: str) -> None:
    assert not HEAVY & loaded_by(module)


def test_a_heavy_library_would_be_seen() -> None:
    assert HEAVY & loaded_by("scipy.optimize") == {"scipy.optimize"}


@pytest.mark.parametrize("room", SCIENCE)
def test_a_science_room_loads_no_room_but_units_and_errors(room: str) -> None:
    allowed = {"", room, "units", "glossary", "errors"}
    parts = [name.split(".") for name in loaded_by(f"advisor.{room}") if name.startswith("advisor")]
    assert {part[1] if len(part) > 1 else "" for part in parts} <= allowed
