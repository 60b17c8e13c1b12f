"""A dated fact: what held from when, who recorded it when, and which earlier entry it replaces."""

from __future__ import annotations

import datetime as dt
import hashlib
import json
from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any

_FORM = "%Y-%m-%dT%H:%M:%SZ"


@dataclass(frozen=True)
class Entry:
    """One row of the store. ``valid_from`` and ``recorded_at`` are aware, in UTC.

    ``written`` is the fact as its owner wrote it, with units; ``fact`` is the same read by the
    model of its kind. ``withdrawn`` says that the entry it replaces never was.
    """

    id: str
    kind: str
    subject: str
    valid_from: dt.datetime
    recorded_at: dt.datetime
    who: str
    why: str
    written: Mapping[str, Any]
    fact: Any = field(compare=False, repr=False)
    replaces: str | None = None
    withdrawn: bool = False


def moment_text(moment: dt.datetime) -> str:
    """``moment`` as the store writes it, to the second, in UTC."""
    return moment.astimezone(dt.UTC).strftime(_FORM)


def moment_of(text: str) -> dt.datetime:
    """The moment the store wrote as ``text``."""
    return dt.datetime.strptime(text, _FORM).replace(tzinfo=dt.UTC)


def entry_id(
    kind: str,
    subject: str,
    valid_from: dt.datetime,
    written: Mapping[str, Any],
    replaces: str | None,
    withdrawn: bool,
) -> str:
    """The name of an entry, made of what it says: the same fact imported twice is one entry."""
    said = [kind, subject, moment_text(valid_from), written, replaces, withdrawn]
    text = json.dumps(said, sort_keys=True, ensure_ascii=False, separators=(",", ":"))
    return hashlib.sha256(text.encode()).hexdigest()[:16]
