"""Where the folders that come with the program are: in its source tree or inside the wheel."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import Literal

from advisor.errors import MissingInput

_HERE = Path(__file__).resolve().parent


@cache
def shipped_folder(name: Literal["config", "demo_plant"]) -> Path:
    """The folder ``name`` that came with the program."""
    for parent in (_HERE.parent / "shipped", _HERE.parents[1]):
        if (parent / name).is_dir():
            return parent / name
    raise MissingInput.of(
        "not-shipped",
        f"The folder '{name}' that comes with the program is not there.",
        "Install the program again.",
        value=name,
    )
