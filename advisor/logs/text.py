"""Bytes of a file as UTF-8 with plain line ends, whatever encoding they were written in."""

from __future__ import annotations

import codecs
from dataclasses import dataclass

from advisor.errors import FaultyInput

MOST_BYTES = 2_000_000_000


@dataclass(frozen=True)
class PlainText:
    """A file's text as UTF-8 bytes with LF line ends.

    ``ended`` says whether its last line is complete, ``encoding`` how it was written.
    """

    raw: bytes
    encoding: str
    ended: bool
    notes: tuple[str, ...]


def plain_text(raw: bytes, file: str, encoding: str | None = None) -> PlainText:
    """The text of ``raw``; ``encoding`` where its owner names it, else found from the bytes.

    Raises FaultyInput where there is no text, or where the named encoding does not fit.
    """
    if not raw.strip(b"\x00\r\n\t \xef\xbb\xbf"):
        raise FaultyInput.of("file-empty", "The file holds nothing.", "Export it again.", file=file)
    notes: list[str] = []
    if encoding is None:
        encoding = _encoding_of(raw)
    try:
        text = raw.decode(encoding)
    except LookupError as error:
        raise FaultyInput.of(
            "encoding",
            f"'{encoding}' is not an encoding.",
            "Write utf-8, utf-16 or cp1252, or leave it out.",
            file=file,
            value=encoding,
        ) from error
    except UnicodeDecodeError as error:
        # A few broken bytes do not make a file unreadable; the rows they stand in will show.
        text = raw.decode(encoding, errors="replace")
        notes.append(f"Some bytes are not {encoding} (first: byte {error.start}); shown as '�'.")
    text = text.removeprefix("\ufeff")
    if "\r" in text:
        text = text.replace("\r\n", "\n").replace("\r", "\n")
    if encoding not in ("utf-8", "utf-8-sig"):
        notes.append(f"Read as {encoding}.")
    plain = text.encode("utf-8", errors="replace")
    return PlainText(plain, encoding, plain.endswith(b"\n"), tuple(notes))


def _encoding_of(raw: bytes) -> str:
    if raw.startswith(codecs.BOM_UTF8):
        return "utf-8-sig"
    if raw.startswith((codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE)):
        return "utf-16"
    start = raw[:4000]
    # Western text in UTF-16 has a zero in every second byte.
    if len(start) >= 40:
        if start[1::2].count(0) > 0.7 * len(start[1::2]):
            return "utf-16-le"
        if start[0::2].count(0) > 0.7 * len(start[0::2]):
            return "utf-16-be"
    try:
        raw.decode("utf-8")
    except UnicodeDecodeError as error:
        # Text cut in the middle of a letter is still UTF-8; so is text with one damaged byte.
        if error.start >= len(raw) - 3 or _mostly_utf8(raw):
            return "utf-8"
        return "cp1252"
    return "utf-8"


def _mostly_utf8(raw: bytes) -> bool:
    """Whether letters of several bytes outnumber the bytes that fit nowhere."""
    text = raw.decode("utf-8", errors="replace")
    broken = text.count("\ufffd")
    whole = sum(1 for letter in text if "\x7f" < letter != "\ufffd")
    return whole > broken
