"""Where a plant's records are kept, and how they come to be there on first use."""

from __future__ import annotations

import datetime as dt
import hashlib
import os
import sys
import tempfile
from pathlib import Path

from advisor.records.files import entries_in
from advisor.records.store import Records
from advisor.settings.folder import PlantFolder, read_plant

STORE = "records.sqlite"


def open_records(plant: PlantFolder | str | Path) -> Records:
    """The records of a plant, built from the text files in its folder ``records`` on first use.

    The store stands in the plant folder, or in the user's cache folder where the plant folder may
    not be written. The store of an invented plant is built again when those files change, as long
    as nobody recorded anything in it. Raises FaultyInput with every fault of the text files.
    """
    folder = plant if isinstance(plant, PlantFolder) else read_plant(plant)
    path = store_path(folder.path)
    texts = text_files(folder.path)
    digest = _digest(texts)
    records = Records(path, folder.zone)
    try:
        if folder.plant.invented and _outdated(records, digest):
            records.close()
            _remove(path)
            records = Records(path, folder.zone)
        if texts and records.built_from() is None:
            now = dt.datetime.now(dt.UTC)
            records.add(entries_in(texts, folder.zone, now), built_from=digest)
    except BaseException:
        records.close()
        raise
    return records


def store_path(folder: Path) -> Path:
    """Where the store of the plant folder ``folder`` stands or is going to stand."""
    if os.access(folder, os.W_OK):
        return folder / STORE
    base = os.environ.get("LOCALAPPDATA" if sys.platform == "win32" else "XDG_CACHE_HOME")
    cache = Path(base) if base else Path.home() / ".cache"
    name = hashlib.sha256(str(folder.resolve()).encode()).hexdigest()[:16]
    own = cache / "mix-temperature-advisor" / name
    try:
        own.mkdir(parents=True, exist_ok=True)
    except OSError:
        own = Path(tempfile.gettempdir()) / "mix-temperature-advisor" / name
        own.mkdir(parents=True, exist_ok=True)
    return own / STORE


def text_files(folder: Path) -> tuple[Path, ...]:
    """The dated facts of a plant folder that stand there as text."""
    inside = folder / "records"
    found = (path for form in ("*.yaml", "*.csv") for path in inside.glob(form))
    return tuple(sorted(found))


def _digest(texts: tuple[Path, ...]) -> str:
    digest = hashlib.sha256()
    for path in texts:
        digest.update(path.name.encode() + b"\0" + path.read_bytes() + b"\0")
    return digest.hexdigest()


def _outdated(records: Records, digest: str) -> bool:
    """Whether the store holds nothing but what was built from files that have changed since."""
    built = records.built_from()
    return built is not None and built[0] != digest and built[1] == records.count()


def _remove(path: Path) -> None:
    for ending in ("", "-wal", "-shm"):
        Path(f"{path}{ending}").unlink(missing_ok=True)
