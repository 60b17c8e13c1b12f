"""Dated facts as text: YAML or CSV in, YAML or CSV out, the same entries both ways."""

from __future__ import annotations

import csv
import datetime as dt
import io
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any
from zoneinfo import ZoneInfo

from advisor.errors import Fault, FaultyInput, raise_if_any
from advisor.records.entry import Entry, entry_id, moment_text
from advisor.records.kinds import KINDS, Moment
from advisor.records.store import Records
from advisor.settings.faults import fault_at, nearest, read_model
from advisor.settings.fields import Name, Strict
from advisor.settings.yaml_source import Place, Steps, YamlSource, read_yaml, yaml_text


class EntryText(Strict):
    """An entry as a file writes it."""

    kind: Name
    """kind of fact"""
    subject: Name
    """what it is about: a lot, a tank, a pile, a job, 'plant'"""
    valid_from: Moment
    """from when it holds, in plant time or with an offset"""
    recorded_at: Moment | None = None
    """when it became known; the moment of the import where it is absent"""
    who: Name
    """who says so"""
    why: str = ""
    id: Name | None = None
    replaces: Name | None = None
    withdrawn: bool = False
    fact: dict[str, Any]
    """what holds"""


_ABOUT = tuple(name for name in EntryText.model_fields if name != "fact")


@dataclass(frozen=True)
class ImportReport:
    """What an import brought: entries read, and how many of them were new to the store."""

    files: tuple[str, ...]
    read: int
    added: int


def import_files(
    records: Records, paths: Iterable[Path], now: dt.datetime | None = None
) -> ImportReport:
    """Record what the YAML and CSV files at ``paths`` hold: all of it, or nothing.

    ``now`` is recorded for entries that do not say when they became known. An entry the store
    already has is not recorded twice. Raises FaultyInput with every fault of every file.
    """
    moment = now or dt.datetime.now(dt.UTC)
    files = tuple(paths)
    entries = entries_in(files, records.zone, moment)
    return ImportReport(tuple(map(str, files)), len(entries), len(records.add(entries)))


def entries_in(files: Iterable[Path], zone: ZoneInfo, now: dt.datetime) -> list[Entry]:
    """What the files say, in the order it became known. Raises FaultyInput with every fault."""
    faults: list[Fault] = []
    entries: list[Entry] = []
    for path in files:
        found, wrong = read_entries(path, zone, now)
        entries.extend(found)
        faults.extend(wrong)
    raise_if_any(faults)
    return sorted(entries, key=lambda entry: entry.recorded_at)


def read_entries(path: Path, zone: ZoneInfo, now: dt.datetime) -> tuple[list[Entry], list[Fault]]:
    """The entries in the file at ``path``, and everything wrong with it."""
    try:
        source = _csv_source(path) if path.suffix == ".csv" else read_yaml(path)
    except FaultyInput as error:
        return [], list(error.faults)
    top = source.value if isinstance(source.value, dict) else {}
    if set(top) != {"entries"} or not isinstance(top["entries"], list):
        remedy = "Write 'entries:' and below it a list of facts."
        return [], [fault_at(source, (), "no-entries", "The file has to hold 'entries'.", remedy)]
    entries: list[Entry] = []
    faults: list[Fault] = []
    for at in range(len(top["entries"])):
        entry, wrong = _entry(source, ("entries", at), zone, now)
        faults.extend(wrong)
        if entry:
            entries.append(entry)
    return entries, faults


def _entry(
    source: YamlSource, steps: Steps, zone: ZoneInfo, now: dt.datetime
) -> tuple[Entry | None, list[Fault]]:
    context = {"zone": zone}
    said, faults = read_model(EntryText, source, steps, context)
    if said is None:
        return None, faults
    if said.kind not in KINDS:
        problem = f"'{said.kind}' is no kind of fact."
        remedy = nearest(said.kind, KINDS)
        return None, [fault_at(source, (*steps, "kind"), "unknown-kind", problem, remedy)]
    fact, written = None, {}
    if not said.withdrawn:
        fact, faults = read_model(KINDS[said.kind], source, (*steps, "fact"), context)
        if fact is None:
            return None, faults
        written = fact.model_dump(mode="json", exclude_unset=True)
    name = entry_id(
        said.kind, said.subject, said.valid_from, written, said.replaces, said.withdrawn
    )
    if said.id not in (None, name):
        problem = f"The id '{said.id}' is not that of what the entry says ('{name}')."
        remedy = "Leave the id out of an entry that was changed; name the old one as 'replaces'."
        return None, [fault_at(source, (*steps, "id"), "id-differs", problem, remedy)]
    entry = Entry(
        id=name,
        kind=said.kind,
        subject=said.subject,
        valid_from=said.valid_from,
        recorded_at=said.recorded_at or now.replace(microsecond=0),
        who=said.who,
        why=said.why,
        written=written,
        fact=fact,
        replaces=said.replaces,
        withdrawn=said.withdrawn,
    )
    return entry, []


def export_files(records: Records, folder: Path, form: str = "yaml") -> tuple[Path, ...]:
    """The files written into ``folder``, one per kind, with all that was ever recorded.

    With ``form`` 'csv' the kinds that are flat are written as CSV, the others as YAML.
    """
    folder.mkdir(parents=True, exist_ok=True)
    history = records.history()
    written = []
    for kind in KINDS:
        entries = [_as_written(entry) for entry in history if entry.kind == kind]
        if not entries:
            continue
        flat = form == "csv" and all(_is_flat(entry["fact"]) for entry in entries)
        path = folder / f"{kind}.{'csv' if flat else 'yaml'}"
        text = _csv_text(entries) if flat else yaml_text({"entries": entries})
        path.write_text(text, encoding="utf-8", newline="\n")
        written.append(path)
    return tuple(written)


def _as_written(entry: Entry) -> dict[str, Any]:
    said: dict[str, Any] = {
        "id": entry.id,
        "kind": entry.kind,
        "subject": entry.subject,
        "valid_from": moment_text(entry.valid_from),
        "recorded_at": moment_text(entry.recorded_at),
        "who": entry.who,
        "why": entry.why,
    }
    if entry.replaces:
        said["replaces"] = entry.replaces
    if entry.withdrawn:
        said["withdrawn"] = True
    return {**said, "fact": dict(entry.written)}


def _is_flat(fact: dict[str, Any]) -> bool:
    return all(isinstance(value, str) for value in fact.values())


def _csv_text(entries: list[dict[str, Any]]) -> str:
    facts = list(dict.fromkeys(name for entry in entries for name in entry["fact"]))
    about = [name for name in _ABOUT if any(name in entry for entry in entries)]
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow([*about, *facts])
    for entry in entries:
        cells = [
            *(entry.get(name, "") for name in about),
            *(entry["fact"].get(f, "") for f in facts),
        ]
        writer.writerow([_guarded(cell) for cell in cells])
    return out.getvalue()


def _guarded(cell: object) -> str:
    """The cell so that no spreadsheet takes it for a formula; ``_unguarded`` undoes it."""
    text = "true" if cell is True else str(cell)
    return f"'{text}" if text[:1] in ("=", "+", "-", "@", "'") else text


def _unguarded(text: str) -> str:
    return text[1:] if text.startswith("'") else text


def _csv_source(path: Path) -> YamlSource:
    """The CSV file as if it had been written as entries, with line and field number as place."""
    shown = str(path)
    try:
        lines = path.read_text(encoding="utf-8-sig").splitlines(keepends=True)
    except (OSError, UnicodeDecodeError) as error:
        raise FaultyInput.of(
            "file-unreadable", f"It cannot be read: {error}.", file=shown
        ) from error
    reader = csv.reader(lines)
    header = [name.strip() for name in next(reader, [])]
    places: dict[Steps, Place] = {(): Place(1, 1)}
    entries: list[dict[str, Any]] = []
    for cells in reader:
        if not any(cells):
            continue
        line = reader.line_num
        if len(cells) != len(header):
            raise FaultyInput.of(
                "csv-width",
                f"The line has {len(cells)} fields, the headings are {len(header)}.",
                "Put a field that holds a comma in double quotes.",
                file=shown,
                line=line,
            )
        steps: Steps = ("entries", len(entries))
        entry, there = _csv_entry(header, cells)
        entries.append(entry)
        places[steps] = places[(*steps, "fact")] = Place(line, 1)
        for inside, column, text in there:
            places[(*steps, *inside)] = Place(line, column, text)
    return YamlSource(shown, {"entries": entries}, places, {})


def _csv_entry(
    header: list[str], cells: list[str]
) -> tuple[dict[str, Any], Iterator[tuple[Steps, int, str]]]:
    entry: dict[str, Any] = {"fact": {}}
    there: list[tuple[Steps, int, str]] = []
    for column, (name, cell) in enumerate(zip(header, cells, strict=True), 1):
        text = _unguarded(cell.strip())
        if not text:
            continue
        inside: Steps = (name,) if name in _ABOUT else ("fact", name)
        there.append((inside, column, text))
        if name == "withdrawn":
            entry[name] = {"true": True, "false": False}.get(text, text)
        elif name in _ABOUT:
            entry[name] = text
        else:
            entry["fact"][name] = text
    return entry, iter(there)
