"""Every public function of the science rooms says what it takes and what comes out.

The convention: the first line says what comes out, with its unit in brackets; a section ``Args:``
has one line ``name: meaning [unit]`` for each parameter; ``any unit`` where it does not matter.
"""

from __future__ import annotations

import importlib
import inspect
import re
from collections.abc import Callable

import pytest

from project.sources import SCIENCE

_ENTRY = re.compile(r"^    (\w+):", re.MULTILINE)
_NUMBER = re.compile(r"ArrayLike|Floats|float|NDArray")


def public_functions() -> dict[str, Callable[..., object]]:
    """Every function in ``__all__`` of a science room, by its full name."""
    found = {}
    for room in SCIENCE:
        module = importlib.import_module(f"advisor.{room}")
        for name in getattr(module, "__all__", ()):
            part = getattr(module, name)
            if inspect.isfunction(part):
                found[f"{room}.{name}"] = part
    return found


def section(text: str) -> str:
    """The lines under ``Args:``, up to the next line that is not indented."""
    found = re.search(r"^Args:\n((?:    .*\n?|\n)+)", text, re.MULTILINE)
    return found[1] if found else ""


def faults(function: Callable[..., object]) -> list[str]:
    """What the docstring of ``function`` leaves out or has left over."""
    text = inspect.getdoc(function) or ""
    given = inspect.signature(function).parameters
    told = section(text)
    named = _ENTRY.findall(told)
    wrong = [f"{name} is not told" for name in given if name not in named]
    wrong += [f"{name} is no parameter" for name in named if name not in given]
    entries = dict(zip(named, _ENTRY.split(told)[2::2], strict=True))
    for name, parameter in given.items():
        numeric = _NUMBER.search(str(parameter.annotation))
        entry = entries.get(name, "[")
        if numeric and "[" not in entry and "any unit" not in entry:
            wrong.append(f"{name} has no unit in brackets")
    if not text.partition("\n")[0].strip().endswith((".", ":")):
        wrong.append("the first line is no sentence")
    return wrong


@pytest.mark.parametrize("name", public_functions())
def test_a_docstring_names_the_parameters(name: str) -> None:
    assert not faults(public_functions()[name])


@pytest.mark.parametrize("room", SCIENCE)
def test_a_room_lists_what_is_public(room: str) -> None:
    module = importlib.import_module(f"advisor.{room}")
    assert module.__doc__
    assert len(module.__all__) == len(set(module.__all__))
    for name in module.__all__:
        assert not name.startswith("_")
        assert inspect.getdoc(getattr(module, name)), f"{name} says nothing of itself"


def test_what_is_missing_is_found() -> None:
    def cooled(start_c: float, duration_s: float, cover: str) -> float:
        """Temperature [C] after a haul

        Args:
            start_c: temperature at the start.
            time_s: how long [s].
            cover: name of the cover.

        Source: nobody.
        """
        return start_c + duration_s + len(cover)

    assert faults(cooled) == [
        "duration_s is not told",
        "time_s is no parameter",
        "start_c has no unit in brackets",
        "the first line is no sentence",
    ]
