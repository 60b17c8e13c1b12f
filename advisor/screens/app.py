"""The pages as one web application, made for one source."""

from __future__ import annotations

from types import ModuleType
from typing import Any

from dash import ClientsideFunction, Dash, Input, Output, dcc, html

from advisor.figures.ink import style_sheet
from advisor.screens import ahead, binder, review, shift, what_if
from advisor.screens.shift_parts import clock
from advisor.screens.source import Source

# The pages that exist, in the order of the navigation.
PAGES: tuple[ModuleType, ...] = (shift, ahead, review, binder, what_if)

_INDEX = """<!DOCTYPE html>
<html lang="en">
<head>
{%metas%}
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>{%title%}</title>
{%favicon%}
<style>__INK__</style>
{%css%}
</head>
<body>
{%app_entry%}
{%config%}
{%scripts%}
{%renderer%}
</body>
</html>"""


def make_app(source: Source, refresh_s: float = 10.0) -> Dash:
    """The application that shows ``source``.

    Parameters
    ----------
    source : the plant the pages ask
    refresh_s : how often an open page asks again [s]
    """
    app = Dash(
        __name__,
        title=f"{source.plant_name}: mix temperatures",
        update_title="",
        index_string=_INDEX.replace("__INK__", style_sheet()),
        serve_locally=True,
        suppress_callback_exceptions=True,
        enable_mcp=False,
        add_log_handler=False,
    )
    app.layout = _shell(source, refresh_s)
    _register_shell(app, source)
    for page in PAGES:
        page.register(app, source)
    return app


def _shell(source: Source, refresh_s: float) -> Any:
    return html.Div(
        [
            dcc.Location(id="address", refresh=False),
            dcc.Store(id="scheme"),
            dcc.Store(id="narrow"),
            dcc.Interval(id="tick", interval=int(1000 * refresh_s)),
            html.A("Skip to the page", href="#content", className="skip"),
            html.Header(
                [
                    html.P(source.plant_name, className="plant"),
                    html.Nav(id="nav", **{"aria-label": "Pages"}),
                    html.Div(id="clock", className="clock"),
                    dcc.RadioItems(
                        id="units",
                        options=[{"label": "°C", "value": "si"}, {"label": "°F", "value": "us"}],
                        value="si",
                        inline=True,
                        persistence=True,
                        persistence_type="local",
                        className="units",
                    ),
                ]
            ),
            html.P(
                "No answer from the advisor. What is below is old; reload the page or check that "
                "the program runs.",
                id="lost",
                className="banner old",
                role="alert",
                **{"data-every-s": str(refresh_s)},
            ),
            html.Main(id="content", tabIndex=-1),
        ],
        id="shell",
    )


def _register_shell(app: Dash, source: Source) -> None:
    app.clientside_callback(
        ClientsideFunction("screens", "room"),
        Output("scheme", "data"),
        Output("narrow", "data"),
        Input("address", "pathname"),
    )

    @app.callback(
        Output("content", "children"),
        Output("nav", "children"),
        Input("address", "pathname"),
        Input("address", "search"),
    )
    def open_page(pathname: str | None, search: str | None) -> tuple[Any, Any]:
        page = next((one for one in PAGES if (pathname or "/") == one.PATH), None)
        links = [
            dcc.Link(
                one.TITLE,
                href=one.PATH,
                className="current" if one is page else "",
            )
            for one in PAGES
        ]
        if page is None:
            return _no_such_page(pathname), links
        return page.layout(source, search), links

    @app.callback(Output("clock", "children"), Input("tick", "n_intervals"))
    def tell_clock(tick: int | None) -> Any:
        return clock(source, tick or 0)


def _no_such_page(pathname: str | None) -> Any:
    return html.Div(
        [
            html.H1("No such page"),
            html.P(f"There is nothing at '{pathname}'. The pages are named above."),
        ],
        className="page sheet",
    )
