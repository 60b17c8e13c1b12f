"""Names in the science rooms say their unit: C for a temperature, K for a difference of two."""

from __future__ import annotations

import ast
import re
from collections.abc import Iterator

from project.sources import SCIENCE, modules, name_of, tree

# What is a difference, a width or an error of temperatures is in kelvin, never in C.
_DIFFERENCE = re.compile(r"(^|_)(delta|drop|rise|loss|lost|sd|difference|error|margin|spread)_")


def fault_of(name: str) -> str:
    """What is wrong with the ``name`` of a parameter or a field; empty if nothing."""
    if name.endswith("_f"):
        return "Fahrenheit belongs to the edges"
    if name.endswith("_delta_c"):
        return "a difference ends with _delta_k"
    if name.endswith("_c") and _DIFFERENCE.search(name):
        return "a difference ends with _k"
    if name.endswith("_temperature"):
        return "a temperature ends with _c"
    return ""


def names(module: ast.Module) -> Iterator[tuple[int, str]]:
    """Line and name of every parameter, field and constant of a module."""
    for node in ast.walk(module):
        if isinstance(node, ast.FunctionDef):
            for given in ast.walk(node.args):
                if isinstance(given, ast.arg):
                    yield given.lineno, given.arg
        elif isinstance(node, ast.ClassDef | ast.Module):
            for inner in node.body:
                if isinstance(inner, ast.AnnAssign) and isinstance(inner.target, ast.Name):
                    yield inner.lineno, inner.target.id
                elif isinstance(inner, ast.Assign):
                    for target in inner.targets:
                        if isinstance(target, ast.Name):
                            yield inner.lineno, target.id


def faults(module: ast.Module) -> list[str]:
    """Every wrong name with its line."""
    return [f"{line}: {name}: {fault_of(name)}" for line, name in names(module) if fault_of(name)]


def test_names_of_the_science_say_their_unit() -> None:
    wrong = [
        f"{name_of(path)}:{fault}" for path in modules(*SCIENCE) for fault in faults(tree(path))
    ]
    assert not wrong, "\n".join(wrong)


def test_wrong_names_are_found() -> None:
    module = ast.parse(
        "class Load:\n"
        "    drop_c: float\n"
        "    core_c: float\n"
        "def cooled(start_f, air_temperature, sd_delta_c, start_c, sd_k, *, casing_loss): ...\n"
    )
    assert [fault.split(":")[1].strip() for fault in faults(module)] == [
        "drop_c",
        "start_f",
        "air_temperature",
        "sd_delta_c",
    ]
