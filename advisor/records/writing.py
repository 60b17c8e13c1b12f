"""New entries from a form or a program: a fact, a correction of one, a withdrawal."""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping
from typing import Any
from zoneinfo import ZoneInfo

from advisor.errors import Fault, FaultyInput
from advisor.records.entry import Entry, entry_id
from advisor.records.kinds import KINDS
from advisor.settings.faults import nearest, read_model
from advisor.settings.yaml_source import YamlSource


def new_entry(
    kind: str,
    subject: str,
    valid_from: dt.datetime,
    written: Mapping[str, Any],
    who: str,
    why: str,
    zone: ZoneInfo,
    recorded_at: dt.datetime | None = None,
    replaces: str | None = None,
) -> Entry:
    """The entry that says ``written`` (text with units) about ``subject`` from ``valid_from`` on.

    ``recorded_at`` is now where it is not given; both moments are aware. Raises FaultyInput with
    everything wrong in ``written``, field by field.
    """
    if kind not in KINDS:
        problem = f"'{kind}' is no kind of fact."
        raise FaultyInput(Fault("unknown-kind", problem, nearest(kind, KINDS), value=kind))
    source = YamlSource("", dict(written), {}, {})
    fact, faults = read_model(KINDS[kind], source, (), {"zone": zone})
    if fact is None:
        raise FaultyInput(*faults)
    said = fact.model_dump(mode="json", exclude_unset=True)
    return Entry(
        entry_id(kind, subject, valid_from, said, replaces, False),
        kind,
        subject,
        valid_from.astimezone(dt.UTC).replace(microsecond=0),
        (recorded_at or dt.datetime.now(dt.UTC)).astimezone(dt.UTC).replace(microsecond=0),
        who,
        why,
        said,
        fact,
        replaces,
    )


def correction(
    of: Entry,
    written: Mapping[str, Any],
    who: str,
    why: str,
    zone: ZoneInfo,
    valid_from: dt.datetime | None = None,
    recorded_at: dt.datetime | None = None,
) -> Entry:
    """The entry that takes the place of ``of`` from ``recorded_at`` on."""
    since = valid_from or of.valid_from
    return new_entry(of.kind, of.subject, since, written, who, why, zone, recorded_at, of.id)


def withdrawal(of: Entry, who: str, why: str, recorded_at: dt.datetime | None = None) -> Entry:
    """The entry that says, from ``recorded_at`` on, that ``of`` never was."""
    moment = (recorded_at or dt.datetime.now(dt.UTC)).astimezone(dt.UTC).replace(microsecond=0)
    return Entry(
        entry_id(of.kind, of.subject, of.valid_from, {}, of.id, True),
        of.kind,
        of.subject,
        of.valid_from,
        moment,
        who,
        why,
        {},
        None,
        of.id,
        True,
    )
