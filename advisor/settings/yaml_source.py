"""A YAML file as plain values, with the line and column of every key and value kept.

Plain words follow the core schema of YAML 1.2: ``12:30``, ``no`` and ``2026-10-23`` stay text.
A key written twice, a tab, a foreign tag or a file that unfolds to an unreasonable size is refused.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any, ClassVar

import yaml

from advisor.errors import Fault, FaultyInput

Steps = tuple[str | int, ...]  # the way from the top of a file to one value

MOST_BYTES = 4_000_000
MOST_VALUES = (
    200_000  # counted with aliases unfolded, so that a small file cannot become a huge one
)
DEEPEST = 32
LONGEST_SHOWN = 120  # characters of a faulty line repeated to the reader

_Loader: Any = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


class _PlainLoader(_Loader):  # type: ignore[misc]
    """The safe loader with the core schema's few plain words instead of YAML 1.1's many."""

    yaml_implicit_resolvers: ClassVar[dict[str, list[tuple[str, re.Pattern[str]]]]] = {}


for _tag, _written, _first in (
    ("bool", r"true|True|TRUE|false|False|FALSE", "tTfF"),
    ("null", r"~|null|Null|NULL|", "~nN\0"),
    ("int", r"[-+]?[0-9]+", "-+0123456789"),
    ("float", r"[-+]?(\.[0-9]+|[0-9]+(\.[0-9]*)?)([eE][-+]?[0-9]+)?", "-+.0123456789"),
):
    _PlainLoader.add_implicit_resolver(
        f"tag:yaml.org,2002:{_tag}",
        re.compile(rf"^(?:{_written})$"),
        ["" if letter == "\0" else letter for letter in _first],
    )


class _PlainDumper(yaml.SafeDumper):
    """Writes text in quotes exactly where the reader above would take it for something else."""

    yaml_implicit_resolvers = _PlainLoader.yaml_implicit_resolvers


def yaml_text(value: Any) -> str:
    """``value`` (text, numbers, lists, keys) as YAML that ``read_yaml`` reads back the same."""
    return str(yaml.dump(value, Dumper=_PlainDumper, sort_keys=False, allow_unicode=True, width=98))


_READERS: dict[str, Callable[[str], Any]] = {
    "tag:yaml.org,2002:str": str,
    "tag:yaml.org,2002:int": int,
    "tag:yaml.org,2002:float": float,
    "tag:yaml.org,2002:bool": lambda text: text.lower() == "true",
    "tag:yaml.org,2002:null": lambda text: None,
}


@dataclass(frozen=True)
class Place:
    """Where a key or value stands (counted from 1) and how it is written."""

    line: int
    column: int
    text: str = ""


@dataclass(frozen=True)
class YamlSource:
    """What a file says: plain values, and where each of them stands."""

    file: str
    value: Any
    places: dict[Steps, Place] = field(repr=False)
    keys: dict[Steps, Place] = field(repr=False)

    def place(self, steps: Steps) -> Place:
        """The place of the value at ``steps``, or of the nearest thing around it."""
        for length in range(len(steps), -1, -1):
            if steps[:length] in self.places:
                return self.places[steps[:length]]
        return Place(1, 1)

    def key_place(self, steps: Steps) -> Place:
        """The place of the key at ``steps``; of its value where it has none (a list)."""
        return self.keys.get(steps) or self.place(steps)


def read_yaml(path: Path) -> YamlSource:
    """Values and places of the YAML file at ``path``.

    Raises FaultyInput where the file is missing, too large, not text in UTF-8 or not sound YAML.
    """
    shown = str(path)
    try:
        raw = path.read_bytes()
    except OSError as error:
        raise FaultyInput.of(
            "file-unreadable",
            f"The file cannot be read: {error.strerror or error}.",
            "Check its name and that you may read it.",
            file=shown,
        ) from error
    if len(raw) > MOST_BYTES:
        raise FaultyInput.of(
            "file-too-large",
            f"The file has {len(raw)} bytes.",
            f"A settings file has at most {MOST_BYTES} bytes; series belong in CSV files.",
            file=shown,
        )
    try:
        text = raw.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = raw[: error.start].count(b"\n") + 1
        raise FaultyInput.of(
            "not-utf8",
            "The file is not text in UTF-8.",
            "Save it as UTF-8.",
            file=shown,
            line=line,
        ) from error
    return yaml_source(text, shown)


def yaml_source(text: str, file: str) -> YamlSource:
    """Values and places of the YAML in ``text``; ``file`` is the name to show in errors."""
    try:
        top = yaml.compose(text, Loader=_PlainLoader)
    except yaml.YAMLError as error:
        raise FaultyInput(_syntax_fault(error, file, text)) from error
    walk = _Walk(file)
    value = walk.value(top, ()) if top is not None else None
    if walk.faults:
        raise FaultyInput(*walk.faults)
    return YamlSource(file, value, walk.places, walk.keys)


class _Walk:
    """One pass over the nodes: values out, places and faults kept on the way."""

    def __init__(self, file: str) -> None:
        self.file = file
        self.places: dict[Steps, Place] = {}
        self.keys: dict[Steps, Place] = {}
        self.faults: list[Fault] = []
        self._count = 0

    def value(self, node: yaml.Node, steps: Steps) -> Any:
        self._count += 1
        if self._count > MOST_VALUES or len(steps) > DEEPEST:
            what = "too deep" if len(steps) > DEEPEST else "too large once its aliases are unfolded"
            raise FaultyInput(
                self._fault(node, steps, "unfolds", f"The file is {what}.", "Write it out plainly.")
            )
        written = node.value if isinstance(node, yaml.ScalarNode) else ""
        self.places[steps] = Place(
            node.start_mark.line + 1, node.start_mark.column + 1, str(written)
        )
        if isinstance(node, yaml.MappingNode):
            return {
                key: self.value(child, (*steps, key)) for key, child in self._pairs(node, steps)
            }
        if isinstance(node, yaml.SequenceNode):
            return [self.value(child, (*steps, index)) for index, child in enumerate(node.value)]
        reader = _READERS.get(node.tag)
        if reader is None:
            self.faults.append(
                self._fault(node, steps, "tag", f"'{node.tag}' is not read.", "Remove the tag.")
            )
            return None
        try:
            return reader(node.value)
        except ValueError:
            problem = f"'{node.value}' is not what its tag says."
            self.faults.append(self._fault(node, steps, "tag", problem, "Remove the tag."))
            return None

    def _pairs(self, node: yaml.MappingNode, steps: Steps) -> Iterator[tuple[str, yaml.Node]]:
        for key_node, child in node.value:
            if not isinstance(key_node, yaml.ScalarNode):
                problem = "A key has to be a plain word."
                self.faults.append(self._fault(key_node, steps, "key", problem, ""))
                continue
            key = str(key_node.value)
            where = (*steps, key)
            if where in self.keys:
                self.faults.append(
                    self._fault(
                        key_node,
                        where,
                        "key-twice",
                        f"'{key}' is written twice, first in line {self.keys[where].line}.",
                        "Keep one of the two.",
                    )
                )
                continue
            mark = key_node.start_mark
            self.keys[where] = Place(mark.line + 1, mark.column + 1, key)
            yield key, child

    def _fault(self, node: yaml.Node, steps: Steps, code: str, problem: str, remedy: str) -> Fault:
        mark = node.start_mark
        return Fault(
            code,
            problem,
            remedy,
            file=self.file,
            line=mark.line + 1,
            column=mark.column + 1,
            field=field_name(steps),
        )


def field_name(steps: Steps) -> str:
    """The way to a value as a person writes it: ``jobs[2].haul.time``, counted from 1."""
    name = ""
    for step in steps:
        name += f"[{step + 1}]" if isinstance(step, int) else f".{step}"
    return name.lstrip(".")


def _syntax_fault(error: yaml.YAMLError, file: str, text: str) -> Fault:
    mark = getattr(error, "problem_mark", None)
    line = mark.line + 1 if mark else None
    column = mark.column + 1 if mark else None
    lines = text.splitlines()
    written = lines[line - 1] if line and line <= len(lines) else ""
    if "\t" in written[: len(written) - len(written.lstrip())] or "'\\t'" in str(error):
        problem, remedy = "A tab is used to indent.", "Indent with spaces."
    elif "undefined alias" in str(error):
        problem = (
            f"'{written.strip()}' begins a value with '*', which means something named before."
        )
        remedy = "Put a value that begins with '*' in quotes."
    else:
        said = getattr(error, "problem", None) or str(error).splitlines()[0]
        problem, remedy = (
            f"This is not sound YAML: {said}.",
            "Check the line and the one above it for a missing colon, quote or space.",
        )
    return Fault(
        "yaml",
        problem,
        remedy,
        file=file,
        line=line,
        column=column,
        value=written.strip()[:LONGEST_SHOWN],
    )
