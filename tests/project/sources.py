"""The files of the project, as the checks of this folder read them."""

from __future__ import annotations

import ast
from collections.abc import Iterator
from functools import cache
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
SCIENCE = ("binder", "heat", "dryer", "sampling")
MADE = {"__pycache__", "archive", "build", "dist", "pictures"}  # as in .gitignore
TEXT = {".py", ".md", ".toml", ".yaml", ".yml", ".csv", ".txt", ".css", ".js", ".sql", ".html", ""}


def files(folder: Path = ROOT) -> Iterator[Path]:
    """Every file that is written by hand, in any folder; not what tools and runs leave behind."""
    for path in sorted(folder.iterdir()):
        if path.is_dir():
            hidden = path.name.startswith(".") and path.name != ".ci"
            if not hidden and path.name not in MADE and path.suffix != ".egg-info":
                yield from files(path)
        elif path.suffix in TEXT and path.name != ".git":
            yield path


def modules(*rooms: str) -> list[Path]:
    """Every Python file of the rooms named, or of the whole program."""
    folders = [ROOT / "advisor" / room for room in rooms] or [ROOT / "advisor"]
    return [path for folder in folders for path in files(folder) if path.suffix == ".py"]


@cache
def tree(path: Path) -> ast.Module:
    """The syntax tree of a Python file."""
    return ast.parse(path.read_text(encoding="utf-8"), str(path))


def name_of(path: Path) -> str:
    """Path below the project's folder, for messages and test names."""
    return path.relative_to(ROOT).as_posix()
