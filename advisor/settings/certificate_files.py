"""Certificates from files outside a plant folder: one sheet, a list of them, or a records file."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path

from advisor.errors import AdvisorError, Fault, FaultyInput, raise_if_any
from advisor.settings.certificate import Certificate
from advisor.settings.faults import fault_at, read_model
from advisor.settings.yaml_source import Steps, YamlSource, read_yaml


def read_certificates(paths: Iterable[Path]) -> tuple[Certificate, ...]:
    """Every certificate in the YAML files at ``paths``, in the order written.

    A file holds the keys of one sheet, a list of sheets under 'certificates', or the entries of a
    records file. Raises FaultyInput with every fault of every file.
    """
    faults: list[Fault] = []
    found: list[Certificate] = []
    for path in paths:
        try:
            source = read_yaml(path)
            places = _places(source)
        except AdvisorError as error:
            faults.extend(error.faults)
            continue
        for steps in places:
            sheet, wrong = read_model(Certificate, source, steps)
            faults.extend(wrong)
            if sheet is not None:
                found.append(sheet)
    raise_if_any(faults)
    return tuple(found)


def _places(source: YamlSource) -> list[Steps]:
    """The way to each sheet in a file."""
    top = source.value
    if isinstance(top, dict) and isinstance(top.get("entries"), list):
        entries = enumerate(top["entries"])
        places: list[Steps] = [
            ("entries", at, "fact")
            for at, entry in entries
            if isinstance(entry, dict) and entry.get("kind") == "certificate" and "fact" in entry
        ]
    elif isinstance(top, dict) and isinstance(top.get("certificates"), list):
        places = [("certificates", at) for at in range(len(top["certificates"]))]
    else:
        places = [()]
    if not isinstance(top, dict) or not places:
        raise FaultyInput(
            fault_at(
                source,
                (),
                "no-certificate",
                "There is no certificate in this file.",
                "Write the keys of a sheet: product, grade, source, lot, readings and so on.",
            )
        )
    return places
