"""advisor records: dated facts in, out and looked up."""

from __future__ import annotations

from pathlib import Path

import click

from advisor.cli.asked import json_option, plant_argument


@click.group()
def records() -> None:
    """Dated facts of a plant: certificates, receipts, dips, moisture, runs.

    Nothing is ever overwritten: a correction is a new entry, and any past moment can be looked up
    as it was known then.

    \b
    Example:
      advisor records show demo_plant --kind receipt --subject "tank 2"
    """


@records.command("import")
@plant_argument
@click.argument("files", nargs=-1, required=True, type=click.Path(path_type=Path))
@json_option
def import_(plant: Path, files: tuple[Path, ...], as_json: bool) -> None:
    """Record what the YAML or CSV FILES hold: all of it, or nothing where something is wrong.

    An entry that is already there is not recorded twice.

    \b
    Example:
      advisor records import my_plant receipts.csv certificates.yaml
    """
    from advisor.cli.output import print_json
    from advisor.records import import_files, open_records

    with open_records(plant) as store:
        report = import_files(store, files)
    if as_json:
        print_json(report)
    else:
        known = report.read - report.added
        click.echo(f"{report.read} entries read, {report.added} recorded, {known} known before.")


@records.command("export")
@plant_argument
@click.argument("folder", type=click.Path(path_type=Path, file_okay=False))
@click.option("--csv", "as_csv", is_flag=True, help="CSV where the facts fit into columns.")
@json_option
def export(plant: Path, folder: Path, as_csv: bool, as_json: bool) -> None:
    """Write everything ever recorded into FOLDER, one file per kind; import reads them back.

    \b
    Example:
      advisor records export demo_plant written --csv
    """
    from advisor.cli.output import print_json
    from advisor.records import export_files, open_records

    with open_records(plant) as store:
        written = export_files(store, folder, "csv" if as_csv else "yaml")
    if as_json:
        print_json({"written": written})
    else:
        for path in written:
            click.echo(str(path))


@records.command("show")
@plant_argument
@click.option("--kind", required=True, help="certificate, receipt, dip, moisture, job_run, ...")
@click.option("--subject", help="What it is about: a tank, a lot, a pile; all where absent.")
@click.option("--at", "at", help="What held at this moment, such as '2026-10-23 10:10'.")
@click.option("--known-at", help="As it was known at this moment; as known today where absent.")
@json_option
def show(
    plant: Path,
    kind: str,
    subject: str | None,
    at: str | None,
    known_at: str | None,
    as_json: bool,
) -> None:
    """List the facts of one KIND; with --at only the one that held for each subject.

    \b
    Example:
      advisor records show demo_plant --kind moisture --at "2026-10-22 07:00"
    """
    from advisor.cli.output import print_json, print_table
    from advisor.errors import FaultyInput
    from advisor.records import KINDS, open_records
    from advisor.settings import local_text, nearest, read_plant
    from advisor.settings.moments import utc_of

    if kind not in KINDS:
        problem = f"'{kind}' is no kind of fact."
        raise FaultyInput.of("unknown-kind", problem, nearest(kind, KINDS), value=kind)
    folder = read_plant(plant)
    known = utc_of(known_at, folder.zone) if known_at else None
    with open_records(folder) as store:
        if at is None:
            entries = store.all_held(kind, subject, known_at=known)
        else:
            subjects = [subject] if subject else store.subjects(kind)
            moment = utc_of(at, folder.zone)
            found = [store.held(kind, each, moment, known) for each in subjects]
            entries = tuple(entry for entry in found if entry)
        known_subjects = store.subjects(kind)
    if as_json:
        print_json({"kind": kind, "entries": [_without_model(entry) for entry in entries]})
        return
    if not entries:
        about = f" about '{subject}'" if subject else ""
        when = f" that held at {at}" if at else ""
        click.echo(f"No {kind}{about}{when} is recorded.{_recorded_about(known_subjects)}")
        return
    columns = list(dict.fromkeys(name for entry in entries for name in entry.written))
    print_table(
        ("from", "subject", *columns, "recorded", "who"),
        [
            (
                local_text(entry.valid_from, folder.zone),
                entry.subject,
                *(_cell(entry.written.get(name)) for name in columns),
                local_text(entry.recorded_at, folder.zone),
                entry.who,
            )
            for entry in entries
        ],
    )


def _recorded_about(subjects: tuple[str, ...]) -> str:
    return f" Facts of this kind are about: {', '.join(subjects)}." if subjects else ""


def _without_model(entry: object) -> dict[str, object]:
    said = dict(vars(entry))
    del said["fact"]
    return said


def _cell(value: object) -> str:
    """A fact's value in one cell; what has parts is told by their count."""
    if isinstance(value, list):
        return f"{len(value)} entries"
    if isinstance(value, dict):
        return ", ".join(f"{name} {_cell(part)}" for name, part in value.items())
    return "" if value is None else str(value)
