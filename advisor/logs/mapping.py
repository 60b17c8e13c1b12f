"""Whether a mapping fits the kind of source it is for, before any file is opened."""

from __future__ import annotations

import difflib

from advisor.errors import Fault, raise_if_any
from advisor.logs.signals import (
    SHAPES,
    is_switch,
    is_text,
    known_signals,
    plain_signal,
    signal_quantity,
)
from advisor.settings.signals import LogSource
from advisor.units import units_of

SIGNALS_FILE = "signals.yaml"


def check_mapping(source: LogSource) -> None:
    """Raise FaultyInput where ``source`` maps a signal its kind has not, maps one twice, leaves out
    one that is needed, or names a unit of another quantity."""
    known = known_signals(source.kind)
    faults: list[Fault] = []
    seen: dict[str, str] = {}
    for heading, column in source.columns.items():
        signal = column.signal
        if plain_signal(signal) not in known:
            near = difflib.get_close_matches(signal, known, n=1)
            meant = f"Did you mean '{near[0]}'? " if near else ""
            problem = f"A source of kind {source.kind} has no signal '{signal}'."
            faults.append(_fault(heading, "unknown-signal", problem, f"{meant}{_list(known)}"))
            continue
        if signal in seen:
            problem = f"'{signal}' is mapped twice, from '{seen[signal]}' and from '{heading}'."
            faults.append(_fault(heading, "signal-twice", problem, "Keep the column to be used."))
        seen[signal] = heading
        faults.extend(_unit_faults(heading, signal, column.unit))
    for signal in SHAPES[source.kind].needed:
        if signal not in seen:
            problem = f"No column is mapped to '{signal}', which a {source.kind} needs."
            faults.append(_fault(signal, "signal-missing", problem, "Name its column."))
    raise_if_any(faults)


def _unit_faults(heading: str, signal: str, unit: str | None) -> list[Fault]:
    if unit is None:
        return []
    if is_text(signal) or is_switch(signal):
        return [_fault(heading, "unit", f"'{signal}' has no unit.", "Leave the unit out.")]
    quantity = signal_quantity(signal)
    if quantity is not None and unit not in units_of(quantity.kind):
        problem = f"'{unit}' is not a unit of '{signal}'."
        return [_fault(heading, "unit", problem, _list(units_of(quantity.kind)))]
    return []


def _fault(field: str, code: str, problem: str, remedy: str) -> Fault:
    return Fault(code, problem, remedy, file=SIGNALS_FILE, field=field)


def _list(names: tuple[str, ...]) -> str:
    return f"Known here: {', '.join(names)}."
