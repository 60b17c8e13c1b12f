"""One family of errors: each names where it is, what was given and what would be right."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import asdict, dataclass


@dataclass(frozen=True)
class Fault:
    """One thing wrong with what was given.

    ``problem`` is a plain sentence, ``remedy`` says what would be right; ``file``, ``line``,
    ``field`` and ``value`` are empty where they do not apply.
    """

    code: str
    problem: str
    remedy: str = ""
    file: str = ""
    line: int | None = None
    column: int | None = None
    field: str = ""
    value: str = ""

    def __str__(self) -> str:
        place = ":".join(str(part) for part in (self.file, self.line, self.column) if part)
        words = [part for part in (place, self.field) if part]
        sentence = ": ".join([*words, self.problem])
        return f"{sentence} {self.remedy}".rstrip()

    def as_dict(self) -> dict[str, object]:
        """The filled parts by name, for programs."""
        return {name: part for name, part in asdict(self).items() if part not in ("", None)}


class AdvisorError(Exception):
    """Anything the advisor refuses to do; carries every fault found, not only the first."""

    def __init__(self, *faults: Fault) -> None:
        self.faults = faults
        super().__init__("\n".join(str(fault) for fault in faults))

    @classmethod
    def of(cls, code: str, problem: str, remedy: str = "", **place: object) -> AdvisorError:
        """The error with one fault."""
        return cls(Fault(code, problem, remedy, **place))  # type: ignore[arg-type]


class FaultyInput(AdvisorError):
    """A file, a form or a call holds something that cannot be right."""


class OutsideValidity(AdvisorError):
    """A relation was asked for a case it was never made for."""


class MissingInput(AdvisorError):
    """Something that decides a temperature is missing or too old; it is asked for, not assumed."""


class StoreRefused(AdvisorError):
    """The record store is newer than this program, damaged, or would lose an entry."""


def raise_if_any(faults: Iterable[Fault], kind: type[AdvisorError] = FaultyInput) -> None:
    """Raise one error that carries all ``faults``, or return where there is none."""
    found = tuple(faults)
    if found:
        raise kind(*found)
