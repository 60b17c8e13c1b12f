"""Names of the parts of a page, made in one place."""

from __future__ import annotations

from typing import Any


def id_of(page: str, part: str) -> str:
    """Id of the one ``part`` of ``page``."""
    return f"{page}-{part}"


def id_of_each(page: str, part: str, key: str) -> dict[str, Any]:
    """Id of a ``part`` of ``page`` that there may be many of, told apart by ``key``."""
    return {"page": page, "part": part, "key": key}
