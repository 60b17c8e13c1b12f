"""Texts of cells as numbers, switches and units; what is none of these is told, never guessed."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from advisor.errors import FaultyInput
from advisor.logs.layout import plain_name
from advisor.units import units_of

Decimal = Literal[".", ","]

# What controls write where they have no value; common practice, no source.
NO_VALUE_TEXTS = frozenset(
    (
        *("", "-", "--", "---", "----", "*", "**", "***", "?", "na", "n/a", "#n/a", "nan", "null"),
        *("none", "no data", "bad", "bad input", "fault", "over", "under", "ovr", "timeout"),
        *("i/o timeout", "comm fail", "inf", "-inf", "1.#qnan", "1.#ind", "-1.#ind", "#value!"),
        *("#ref!", "#div/0!"),
    )
)
# Numbers written by controls instead of a value: broken sensor, overflow, no reading.
NO_VALUE_NUMBERS = frozenset(
    (-9999.0, -999.0, -999.9, 9999.0, 999.9, 99999.0, 3276.7, -3276.8, 32767.0, -32768.0, 65535.0)
)
_ON = frozenset(("1", "on", "true", "yes", "y", "run", "running", "ein", "ja", "marche", "oui"))
_OFF = frozenset(("0", "off", "false", "no", "n", "stop", "stopped", "aus", "nein", "non"))

_PLAIN = {
    ".": re.compile(r"[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?"),
    ",": re.compile(r"[+-]?(?:\d+(?:,\d*)?|,\d+)(?:[eE][+-]?\d+)?"),
}
_SPACES = " '\u2019\u00a0\u202f\u2009"
_GROUPED = {
    ".": re.compile(rf"[+-]?\d{{1,3}}(?:[{_SPACES},]\d{{3}})+(?:\.\d+)?"),
    ",": re.compile(rf"[+-]?\d{{1,3}}(?:[{_SPACES}.]\d{{3}})+(?:,\d+)?"),
}
_SURE = {
    ".": re.compile(
        r"[+-]?(?:\d*\.(?:\d{1,2}|\d{4,})|0+\.\d+|\d{4,}\.\d+|\d{1,3}(?:,\d{3})+\.\d+)"
    ),
    ",": re.compile(r"[+-]?(?:\d*,(?:\d{1,2}|\d{4,})|0+,\d+|\d{4,},\d+|\d{1,3}(?:\.\d{3})+,\d+)"),
}
_EITHER = re.compile(r"[+-]?[1-9]\d{0,2}[.,]\d{3}")
# So many texts in the other decimal style are taken for damage.
_MOST_ODD, _MOST_ODD_SHARE = 2, 0.05

_UNIT_WORDS = {
    "deg c": "C", "degree c": "C", "degrees c": "C", "celsius": "C", "grad c": "C", "c": "C",
    "deg f": "F", "degree f": "F", "degrees f": "F", "fahrenheit": "F", "f": "F",
    "tonnes": "t", "to": "t", "to/h": "t/h", "tonnes/h": "t/h", "tph (short)": "ton/h",
    "pct": "%", "percent": "%", "prozent": "%", "kts": "kt", "knots": "kt", "octas": "oktas",
}  # fmt: skip


@dataclass(frozen=True)
class Numbers:
    """Number of each text, NaN where there is none; and why: no value written, or not readable."""

    inside: NDArray[np.float64]
    no_value: NDArray[np.bool_]
    unreadable: NDArray[np.bool_]


def decimal_sign(texts: list[str], file: str) -> Decimal:
    """Decimal sign of a file's number ``texts``.

    Raises FaultyInput where they can be read either way, and where both signs are in use.
    """
    point = sum(bool(_SURE["."].fullmatch(text)) for text in texts)
    comma = sum(bool(_SURE[","].fullmatch(text)) for text in texts)
    if not point and not comma:
        if any(_EITHER.fullmatch(text) and "," in text for text in texts):
            example = next(text for text in texts if _EITHER.fullmatch(text) and "," in text)
            raise FaultyInput.of(
                "decimal-sign",
                f"'{example}' can be read in two ways.",
                'Write decimal: "," or decimal: "." for this source in signals.yaml.',
                file=file,
                value=example,
            )
        return "."
    if min(point, comma) > max(_MOST_ODD, _MOST_ODD_SHARE * (point + comma)):
        raise FaultyInput.of(
            "decimal-sign",
            f"{point} numbers have a decimal point and {comma} a decimal comma.",
            "Export the file in one style, or write decimal: for this source in signals.yaml.",
            file=file,
        )
    return "." if point >= comma else ","


def numbers_from(texts: tuple[str, ...], decimal: Decimal, unit_word: str = "") -> Numbers:
    """Numbers of ``texts``; a unit written in the cell is accepted where it is ``unit_word``."""
    values = np.full(len(texts), np.nan)
    no_value = np.zeros(len(texts), bool)
    unreadable = np.zeros(len(texts), bool)
    for place, text in enumerate(texts):
        number = _number(text, decimal, unit_word)
        if number is None:
            unreadable[place] = True
        elif number in NO_VALUE_NUMBERS or np.isnan(number):
            no_value[place] = True
        else:
            values[place] = number
    return Numbers(values, no_value, unreadable)


def _number(text: str, decimal: Decimal, unit_word: str) -> float | None:
    """The number in ``text``; NaN where it says that there is none, None if it is neither."""
    if _PLAIN[decimal].fullmatch(text):
        number = float(text.replace(",", ".") if decimal == "," else text)
        return number if np.isfinite(number) else None
    if text.casefold() in NO_VALUE_TEXTS:
        return float("nan")
    if _GROUPED[decimal].fullmatch(text):
        digits = re.sub(rf"[{_SPACES}{'.' if decimal == ',' else ','}]", "", text)
        return float(digits.replace(",", "."))
    found = re.fullmatch(r"([^a-zA-Z°%]*?\d)\s*([a-zA-Z°%][\w°%/ ]*)", text)
    if found and unit_word and unit_named(found[2]) == unit_named(unit_word):
        return _number(found[1], decimal, "")
    return None


def switches_from(texts: tuple[str, ...]) -> Numbers:
    """1 for on, 0 for off, NaN where a text is neither."""
    values = np.full(len(texts), np.nan)
    no_value = np.zeros(len(texts), bool)
    unreadable = np.zeros(len(texts), bool)
    for place, text in enumerate(texts):
        word = text.casefold()
        if word in _ON or word in ("1.0", "1,0"):
            values[place] = 1.0
        elif word in _OFF or word in ("0.0", "0,0"):
            values[place] = 0.0
        elif word in NO_VALUE_TEXTS:
            no_value[place] = True
        else:
            unreadable[place] = True
    return Numbers(values, no_value, unreadable)


def unit_named(text: str) -> str:
    """``text`` as the spelling of a unit that is known inside; as it stands where it is not one."""
    plain = plain_name(text).strip(" .")
    return _UNIT_WORDS.get(plain, text.strip().replace("°", "").replace("º", "") or text.strip())


def stated_unit(text: str, kind: str) -> str | None:
    """Unit of ``kind`` that a header states in ``text``; None where it states none."""
    if not text.strip():
        return None
    known = units_of(kind)
    word = unit_named(text)
    if word in known:
        return word
    alike = [unit for unit in known if unit.casefold() == word.casefold()]
    return alike[0] if len(alike) == 1 else None
