"""What most commands are asked with: the plant folder, a moment, JSON or a table."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

if TYPE_CHECKING:
    from collections.abc import Callable

DEMO = "demo_plant"


class PlantPath(click.ParamType[Path]):
    """A plant folder; 'demo_plant' is the invented one that comes with the program."""

    name = "plant"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> Path:
        """The path of the folder ``value`` names."""
        path = Path(value)
        if path.is_dir() or str(value) != DEMO:
            return path
        from advisor.settings.shipped import shipped_folder

        return shipped_folder("demo_plant")


class Asked(click.ParamType[float]):
    """A quantity of ``kind`` written with its unit, such as '10 C', as a number in SI."""

    def __init__(self, kind: str) -> None:
        self.kind = kind
        self.name = kind

    def convert(
        self, value: Any, param: click.Parameter | None, ctx: click.Context | None
    ) -> float:
        """The number that ``value`` says."""
        from advisor.errors import FaultyInput
        from advisor.units import parse_quantity

        try:
            return parse_quantity(value, self.kind)
        except FaultyInput as error:
            self.fail(str(error), param, ctx)


def plant_argument(command: Callable[..., Any]) -> Callable[..., Any]:
    """Add the argument PLANT to ``command``."""
    return click.argument("plant", type=PlantPath(), metavar="PLANT")(command)


def json_option(command: Callable[..., Any]) -> Callable[..., Any]:
    """Add the option --json, as ``as_json``, to ``command``."""
    option = click.option("--json", "as_json", is_flag=True, help="Print JSON, for programs.")
    return option(command)


def us_option(command: Callable[..., Any]) -> Callable[..., Any]:
    """Add the option --us, as ``units`` ('si' or 'us'), to ``command``."""
    option = click.option(
        "--us", "units", flag_value="us", default="si", help="Show US customary units."
    )
    return option(command)
