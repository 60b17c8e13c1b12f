"""The store of dated facts: one SQLite file, rows added and never changed.

'What held at T as it was known at K' is one query. Several threads may share one ``Records``;
several processes may open the same file on a local disk.
"""

from __future__ import annotations

import datetime as dt
import json
import sqlite3
import threading
from collections.abc import Iterable, Iterator
from contextlib import contextmanager
from importlib import resources
from pathlib import Path
from types import TracebackType
from typing import Any
from zoneinfo import ZoneInfo

from pydantic import ValidationError

from advisor.errors import Fault, FaultyInput, MissingInput, StoreRefused
from advisor.records.entry import Entry, moment_of, moment_text
from advisor.records.kinds import KINDS

_HELD = """
    SELECT * FROM entry
    WHERE kind = :kind AND subject = :subject AND valid_from <= :at
      AND recorded_at <= :known_at AND withdrawn = 0
      AND NOT EXISTS (
          SELECT 1 FROM entry AS newer
          WHERE newer.replaces = entry.id AND newer.recorded_at <= :known_at
      )
    ORDER BY valid_from DESC, row DESC LIMIT 1
"""
_ALL_HELD = """
    SELECT * FROM entry
    WHERE kind = :kind AND (:subject IS NULL OR subject = :subject)
      AND valid_from >= :start AND valid_from < :end
      AND recorded_at <= :known_at AND withdrawn = 0
      AND NOT EXISTS (
          SELECT 1 FROM entry AS newer
          WHERE newer.replaces = entry.id AND newer.recorded_at <= :known_at
      )
    ORDER BY valid_from, row
"""
_CHANGES = """
    SELECT * FROM entry
    WHERE kind = :kind
      AND max(valid_from, recorded_at) > :start AND max(valid_from, recorded_at) <= :end
    ORDER BY max(valid_from, recorded_at), row
"""
_INSERT = """
    INSERT INTO entry (
        id, kind, subject, valid_from, recorded_at, replaces, withdrawn, who, why, fact
    ) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?) ON CONFLICT (id) DO NOTHING
"""
_EVER = (dt.datetime(1900, 1, 1, tzinfo=dt.UTC), dt.datetime(2999, 12, 31, tzinfo=dt.UTC))


def migrations() -> list[str]:
    """The steps that bring an empty file to the newest form, in order."""
    folder = resources.files("advisor.records") / "migrations"
    files = sorted(each.name for each in folder.iterdir() if each.name.endswith(".sql"))
    return [(folder / name).read_text(encoding="utf-8") for name in files]


class Records:
    """The store at ``path``; times people wrote without offset are in ``zone``.

    Raises StoreRefused where the file is no store, or one of a newer program.
    """

    def __init__(self, path: Path, zone: ZoneInfo, read_only: bool = False) -> None:
        self.path, self.zone, self.read_only = path, zone, read_only
        self._lock = threading.RLock()
        self._db = self._open()
        try:
            self._bring_up_to_date()
        except BaseException:
            self._db.close()
            raise

    def __enter__(self) -> Records:
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        self.close()

    def close(self) -> None:
        """Close the file."""
        self._db.close()

    def held(
        self, kind: str, subject: str, at: dt.datetime, known_at: dt.datetime | None = None
    ) -> Entry | None:
        """The fact of ``kind`` about ``subject`` that held ``at``, as it was known ``known_at``.

        Without ``known_at`` everything recorded until today counts. None where nothing was known.
        """
        values = {"kind": kind, "subject": subject, "at": moment_text(at), **_known(known_at)}
        found = self._read(_HELD, values)
        return found[0] if found else None

    def all_held(
        self,
        kind: str,
        subject: str | None = None,
        start: dt.datetime | None = None,
        end: dt.datetime | None = None,
        known_at: dt.datetime | None = None,
    ) -> tuple[Entry, ...]:
        """Facts of ``kind`` valid from ``start`` (in) to ``end`` (out) in that order, as known."""
        values = {
            "kind": kind,
            "subject": subject,
            "start": moment_text(start or _EVER[0]),
            "end": moment_text(end or _EVER[1]),
            **_known(known_at),
        }
        return self._read(_ALL_HELD, values)

    def changes(
        self, kind: str, start: dt.datetime, end: dt.datetime
    ) -> tuple[tuple[dt.datetime, Entry], ...]:
        """The moments after ``start`` until ``end`` at which an entry of ``kind`` came to count.

        An entry counts once it is both valid and recorded; a correction or withdrawal does too.
        """
        values = {"kind": kind, "start": moment_text(start), "end": moment_text(end)}
        return tuple(
            (max(entry.valid_from, entry.recorded_at), entry)
            for entry in self._read(_CHANGES, values)
        )

    def subjects(self, kind: str) -> tuple[str, ...]:
        """Everything that facts of ``kind`` are about, in order of name."""
        query = "SELECT DISTINCT subject FROM entry WHERE kind = ? ORDER BY subject"
        return tuple(row[0] for row in self._rows(query, (kind,)))

    def history(self) -> tuple[Entry, ...]:
        """Every entry ever recorded, corrected and withdrawn ones too, in the order recorded."""
        return self._read("SELECT * FROM entry ORDER BY recorded_at, row", {})

    def entry(self, name: str) -> Entry:
        """The entry with the id ``name``."""
        found = self._read("SELECT * FROM entry WHERE id = :id", {"id": name})
        if not found:
            raise MissingInput.of("no-entry", f"There is no entry '{name}'.", value=name)
        return found[0]

    def add(self, entries: Iterable[Entry], built_from: str = "") -> tuple[Entry, ...]:
        """The entries that were new; all of them are recorded, or none.

        With ``built_from``, the digest of the files they are from, nothing is recorded where the
        store was built before. Raises StoreRefused where an entry replaces one that is unknown or
        already replaced.
        """
        with self.transaction() as db:
            if built_from and self.built_from() is not None:
                return ()
            added = tuple(entry for entry in entries if self._insert(entry))
            if built_from:
                db.execute("INSERT INTO built_from VALUES (?, ?)", (built_from, len(added)))
        return added

    def built_from(self) -> tuple[str, int] | None:
        """Digest of the files the store was built from, and how many entries they brought."""
        rows = self._rows("SELECT digest, entries FROM built_from")
        return (str(rows[0][0]), int(rows[0][1])) if rows else None

    def count(self) -> int:
        """How many entries were ever recorded."""
        return int(self._rows("SELECT count(*) FROM entry")[0][0])

    @contextmanager
    def transaction(self) -> Iterator[sqlite3.Connection]:
        """One writing transaction: all or nothing, one writer at a time."""
        with self._lock:
            try:
                self._db.execute("BEGIN IMMEDIATE")
            except sqlite3.OperationalError as error:
                raise self._refused("cannot be written", error) from error
            try:
                yield self._db
                self._db.execute("COMMIT")
            except BaseException as error:
                if self._db.in_transaction:
                    self._db.execute("ROLLBACK")
                if isinstance(error, sqlite3.Error):
                    raise self._refused("refuses the change", error) from error
                raise

    def backup(self, to: Path) -> None:
        """Write a whole and sound copy of the store to the new file ``to`` while it is in use."""
        if to.exists():
            raise FaultyInput.of("exists", f"'{to}' exists.", "Name a new file.", value=str(to))
        copy = sqlite3.connect(to)
        try:
            with self._lock:
                self._db.backup(copy)
        finally:
            copy.close()

    def _fact(self, kind: str, written: Any) -> Any:
        try:
            return KINDS[kind].model_validate(written, context={"zone": self.zone})
        except (KeyError, ValidationError) as error:
            raise StoreRefused.of(
                "store-unreadable",
                f"The store holds a fact of kind '{kind}' that this program cannot read: {error}.",
                "Use the program that recorded it, or a newer one.",
                file=str(self.path),
            ) from error

    def _insert(self, entry: Entry) -> bool:
        row = (
            entry.id,
            entry.kind,
            entry.subject,
            moment_text(entry.valid_from),
            moment_text(entry.recorded_at),
            entry.replaces,
            int(entry.withdrawn),
            entry.who,
            entry.why,
            json.dumps(dict(entry.written), ensure_ascii=False, sort_keys=True),
        )
        return self._db.execute(_INSERT, row).rowcount == 1

    def _read(self, query: str, values: dict[str, Any]) -> tuple[Entry, ...]:
        return tuple(self._entry(row) for row in self._rows(query, values))

    def _rows(self, query: str, values: Any = ()) -> list[tuple[Any, ...]]:
        try:
            with self._lock:
                return self._db.execute(query, values).fetchall()
        except sqlite3.Error as error:
            raise self._refused("cannot be read", error) from error

    def _entry(self, row: tuple[Any, ...]) -> Entry:
        _, name, kind, subject, valid_from, recorded_at, replaces, withdrawn, who, why, text = row
        written = json.loads(text)
        return Entry(
            id=name,
            kind=kind,
            subject=subject,
            valid_from=moment_of(valid_from),
            recorded_at=moment_of(recorded_at),
            who=who,
            why=why,
            written=written,
            fact=None if withdrawn else self._fact(kind, written),
            replaces=replaces,
            withdrawn=bool(withdrawn),
        )

    def _open(self) -> sqlite3.Connection:
        try:
            if self.read_only:
                return sqlite3.connect(
                    f"{self.path.absolute().as_uri()}?mode=ro",
                    uri=True,
                    isolation_level=None,
                    check_same_thread=False,
                )
            db = sqlite3.connect(
                self.path, isolation_level=None, check_same_thread=False, timeout=10
            )
            db.execute("PRAGMA journal_mode = WAL")
            db.execute("PRAGMA synchronous = FULL")
            db.execute("PRAGMA foreign_keys = ON")
            return db
        except sqlite3.Error as error:
            raise self._refused("cannot be opened", error) from error

    def _bring_up_to_date(self) -> None:
        steps = migrations()
        try:
            version = self._version()
            if version > len(steps):
                raise StoreRefused.of(
                    "store-newer",
                    f"The store has form {version}; this program knows up to {len(steps)}.",
                    "Use the newer program. Nothing was changed.",
                    file=str(self.path),
                )
            if version == len(steps):
                return
        except sqlite3.Error as error:
            raise self._refused("cannot be read", error) from error
        if self.read_only:
            raise StoreRefused.of(
                "store-older",
                f"The store has form {version} and is opened for reading only.",
                "Open it once where it may be written.",
                file=str(self.path),
            )
        with self.transaction() as db:
            for number, step in enumerate(steps[self._version() :], self._version() + 1):
                for statement in _statements(step):
                    db.execute(statement)
                db.execute(f"PRAGMA user_version = {number}")

    def _version(self) -> int:
        return int(self._db.execute("PRAGMA user_version").fetchone()[0])

    def _refused(self, what: str, error: sqlite3.Error) -> StoreRefused:
        remedy = "Nothing was changed."
        code = getattr(error, "sqlite_errorcode", None)
        if code in (sqlite3.SQLITE_CORRUPT, sqlite3.SQLITE_NOTADB):
            remedy += (
                " Put your backup of it in its place; without one, move the file away and it is "
                "built again from the folder 'records': what was only recorded in it is lost."
            )
        elif code in (sqlite3.SQLITE_READONLY, sqlite3.SQLITE_CANTOPEN):
            remedy += " Look who may read and write the file and its folder."
        return StoreRefused(
            Fault("store", f"The store {what}: {error}.", remedy, file=str(self.path))
        )


def _known(known_at: dt.datetime | None) -> dict[str, str]:
    return {"known_at": moment_text(known_at or _EVER[1])}


def _statements(script: str) -> Iterator[str]:
    """The statements of a script; a trigger has semicolons inside."""
    statement = ""
    for line in script.splitlines(keepends=True):
        statement += line
        if sqlite3.complete_statement(statement):
            yield statement
            statement = ""
