"""advisor check: whether a plant folder is sound."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from advisor.cli.asked import json_option, plant_argument

if TYPE_CHECKING:
    from advisor.errors import Fault


@click.command()
@plant_argument
@json_option
def check(plant: Path, as_json: bool) -> None:
    """Read all of PLANT and tell everything that is wrong in it, with file and line.

    Settings, the columns of the exports, and the dated facts; what does not agree between them
    too. Ends with 2 where something is wrong.

    \b
    Example:
      advisor check demo_plant
    """
    from advisor.cli.output import print_json, print_table
    from advisor.errors import AdvisorError, FaultyInput
    from advisor.logs.mapping import check_mapping
    from advisor.records import disagreements, open_records
    from advisor.settings import read_plant

    folder = read_plant(plant)
    faults: list[Fault] = []
    for source in folder.signals.sources:
        try:
            check_mapping(source)
        except AdvisorError as error:
            faults.extend(error.faults)
    with open_records(folder) as records:
        faults.extend(disagreements(records, folder))
        entries = records.count()
    if faults:
        raise FaultyInput(*faults)
    found = {
        "tanks": len(folder.tanks),
        "silos": len(folder.plant.silos),
        "mixes": len(folder.mixes),
        "jobs": len(folder.jobs),
        "exports": len(folder.signals.sources),
        "dated facts": entries,
    }
    if as_json:
        print_json({"plant": folder.plant.name, "faults": [], "found": found})
        return
    click.echo(f"{folder.plant.name}: the plant folder is sound.\n")
    print_table(("what", "count"), found.items())
