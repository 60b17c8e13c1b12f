"""Controls that several pages have."""

from __future__ import annotations

from typing import Any

from dash import dcc, html

from advisor.screens.ids import id_of


def choice(
    page: str, label: str, part: str, options: list[dict[str, str]], value: str | None = ""
) -> Any:
    """A labelled list to choose one of ``options`` from, the ``part`` of ``page``."""
    return html.Div(
        [
            html.Label(label, htmlFor=id_of(page, part)),
            dcc.Dropdown(
                id=id_of(page, part),
                options=options,
                value=value,
                clearable=False,
                searchable=False,
            ),
        ],
        className="choose",
    )


def section(page: str, part: str, title: str) -> Any:
    """A sheet under ``title`` whose content is the ``part`` of ``page``."""
    body = html.Div(id=id_of(page, part))
    return html.Section([html.H2(title), body], className=f"sheet {part}")
