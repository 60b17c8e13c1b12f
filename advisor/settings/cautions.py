"""Texts of the cautions shown beside advice."""

from __future__ import annotations

from advisor.settings.tables import load_table


def caution_text(code: str, **words: str) -> str:
    """Text of the caution ``code`` (C1 to C16) with the ``words`` it has in braces filled in.

    Raises KeyError where a word it needs is not given, FaultyInput where the code is unknown.
    """
    return str(load_table("cautions").row(code)["text"]).format(**words)
