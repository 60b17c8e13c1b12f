"""Records: dated facts in one SQLite file, added and never changed; text in, text out."""

from advisor.records.agreement import disagreements, not_yet_known
from advisor.records.entry import Entry
from advisor.records.files import ImportReport, export_files, import_files
from advisor.records.kinds import KINDS
from advisor.records.opening import open_records, store_path
from advisor.records.store import Records
from advisor.records.writing import correction, new_entry, withdrawal

__all__ = [
    "KINDS",
    "Entry",
    "ImportReport",
    "Records",
    "correction",
    "disagreements",
    "export_files",
    "import_files",
    "new_entry",
    "not_yet_known",
    "open_records",
    "store_path",
    "withdrawal",
]
