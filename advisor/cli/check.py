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

    Settings, the exports and their columns, and the dated facts; what does not agree between
    them too. Ends with 2 where something is wrong.

    \b
    Example:
      advisor check demo_plant
    """
    from advisor.advice.open_plant import open_plant
    from advisor.cli.output import print_json, print_table
    from advisor.errors import AdvisorError, FaultyInput
    from advisor.logs import read_kind
    from advisor.logs.mapping import check_mapping
    from advisor.records import disagreements, not_yet_known

    facts = open_plant(plant, latest_only=True)
    folder = facts.folder
    faults: list[Fault] = []
    for source in folder.signals.sources:
        try:
            check_mapping(source)
        except AdvisorError as error:
            faults.extend(error.faults)
    if not faults:  # else each file would tell the same once more
        loads = [*read_kind(folder, "tickets")[1], *read_kind(folder, "arrivals")[1]]
        faults += [*facts.unread, *(one.refused for one in loads if one.refused)]
    with facts.records as records:
        faults.extend(disagreements(records, folder))
        lacking = list(not_yet_known(records, folder))
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
        print_json(
            {"plant": folder.plant.name, "faults": [], "found": found, "not_yet_known": lacking}
        )
        return
    click.echo(f"{folder.plant.name}: the plant folder is sound.\n")
    print_table(("what", "count"), found.items())
    if lacking:
        click.echo("\nNot known yet:")
    for sentence in lacking:
        click.echo(f"  {sentence}")
