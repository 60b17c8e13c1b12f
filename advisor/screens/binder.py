"""The binder page: what does this certificate allow, how sure, and what moves with a new source?"""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

from dash import Dash, Input, Output, State, dcc, html

from advisor.advice.assessment import Assessment, assess
from advisor.advice.sources import compare, histories
from advisor.binder import SourceChange
from advisor.errors import AdvisorError
from advisor.figures.base import STILL, blank
from advisor.figures.drift import drift_figure
from advisor.figures.ink import Ink, ink_of
from advisor.figures.viscosity import viscosity_chart, viscosity_words
from advisor.screens import binder_parts as parts
from advisor.screens.entry import choice, section
from advisor.screens.ids import id_of
from advisor.screens.query import binder_query
from advisor.screens.shift_parts import error_block
from advisor.screens.source import Source
from advisor.settings.certificate import Certificate
from advisor.units import UnitSystem

PAGE = "binder"
TITLE = "Binder"
PATH = "/binder"
CHART_PX = 420
LOTS_PX = 190
# What the page is made of, in the columns it stands in.
_LEFT = (
    ("checks", "Checks"),
    ("hardening", "Hardening"),
    ("cautions", "Cautions"),
)
_RIGHT = (("moves", "What moves"), ("windows", "Windows"), ("tank", "Tank"))
_NAMES = tuple(dict((*_LEFT, *_RIGHT)))


def layout(source: Source, search: str | None) -> Any:
    """The page for an address such as '/binder?lot=A-2641&against=B-4410'."""
    sheets = source.certificates(source.now())
    asked = binder_query(search, tuple(one.lot for one in sheets))
    options = [{"label": f"{one.lot}, {one.grade}", "value": one.lot} for one in sheets]
    lot = asked.lot or (sheets[0].lot if sheets else "")
    return html.Div(
        [
            html.Div([html.P(one, className="banner") for one in asked.faults], className="alerts"),
            html.Div(
                [
                    html.Section(
                        [
                            html.Div(
                                [
                                    html.Div(id=id_of(PAGE, "heading"), className="heading"),
                                    html.Div(
                                        [
                                            choice(PAGE, "Lot", "lot", options, lot),
                                            choice(
                                                PAGE,
                                                "against",
                                                "against",
                                                [{"label": "nothing", "value": ""}, *options],
                                                asked.against or "",
                                            ),
                                        ],
                                        className="pair",
                                    ),
                                ],
                                className="top",
                            ),
                            dcc.Graph(
                                id=id_of(PAGE, "chart"),
                                figure=blank(),
                                config=STILL,
                                className="graph",
                                style={"height": f"{CHART_PX}px"},
                            ),
                            html.P(id=id_of(PAGE, "chart-words"), className="heard-only"),
                        ],
                        className="sheet chart",
                    ),
                    section(PAGE, "readings", "Readings"),
                    html.Section(
                        [
                            html.H2("Lots of this source, temperature at 0.17 Pa.s"),
                            html.P(id=id_of(PAGE, "lots-words")),
                            dcc.Graph(
                                id=id_of(PAGE, "lots"),
                                figure=blank(),
                                config=STILL,
                                className="graph",
                                style={"height": f"{LOTS_PX}px"},
                            ),
                        ],
                        id=id_of(PAGE, "lots-place"),
                        className="sheet lots",
                        hidden=True,
                    ),
                    *(section(PAGE, part, title) for part, title in _LEFT),
                ],
                className="column",
            ),
            html.Div(
                [section(PAGE, part, title) for part, title in _RIGHT],
                className="column aside",
            ),
        ],
        className="page binder",
    )


def register(app: Dash, source: Source) -> None:
    """Give the page's callback to ``app``."""

    @app.callback(
        output={
            **{
                name: Output(id_of(PAGE, name), "children")
                for name in ("heading", "chart-words", "readings", "lots-words", *_NAMES)
            },
            **{name: Output(id_of(PAGE, name), "figure") for name in ("chart", "lots")},
            "lots-hidden": Output(id_of(PAGE, "lots-place"), "hidden"),
        },
        inputs={
            "lot": Input(id_of(PAGE, "lot"), "value"),
            "against": Input(id_of(PAGE, "against"), "value"),
            "units": Input("units", "value"),
            "scheme": Input("scheme", "data"),
            "_page": State("address", "pathname"),
        },
    )
    def show(
        lot: str | None, against: str | None, units: UnitSystem, scheme: str, _page: str
    ) -> dict[str, Any]:
        sheets = {one.lot: one for one in source.certificates(source.now())}
        if lot not in sheets:
            return _empty(parts.nothing())
        try:
            found = _shown(sheets[lot], sheets.get(against or ""), units, ink_of(scheme))
            return found | _lots(sheets[lot], sheets.values(), units, ink_of(scheme))
        except AdvisorError as error:
            return _empty(error_block(error, f"Lot {lot} cannot be judged"))


def _shown(
    sheet: Certificate, older: Certificate | None, units: UnitSystem, ink: Ink
) -> dict[str, Any]:
    """Every part of the page for one certificate and the one it is compared with."""
    one = assess(sheet, units=units)
    before = None if older is None or older.lot == sheet.lot else assess(older, units=units)
    change = _change(before, one, units)
    return {
        "heading": parts.heading(one),
        "chart": viscosity_chart(one, before, ink, units),
        "chart-words": viscosity_words(one, before, units),
        "readings": parts.reading_table(one, units),
        "checks": parts.check_list(one),
        "windows": parts.window_table(one, units),
        "moves": parts.moves(before, change, units),
        "tank": parts.tank_table(one, units),
        "hardening": parts.sentences([hardening.sentence for hardening in one.ageing]),
        "cautions": parts.sentences(one.cautions),
    }


def _lots(
    sheet: Certificate, sheets: Iterable[Certificate], units: UnitSystem, ink: Ink
) -> dict[str, Any]:
    """The lots of the same source and grade, where there is more than one."""
    alike = [one for one in sheets if (one.source, one.grade) == (sheet.source, sheet.grade)]
    found = histories(alike, units)
    if not found:
        return {"lots": blank(), "lots-words": "", "lots-hidden": True}
    return {
        "lots": drift_figure(found[0], ink, units),
        "lots-words": found[0].words,
        "lots-hidden": False,
    }


def _change(
    before: Assessment | None, one: Assessment, units: UnitSystem
) -> SourceChange | AdvisorError | None:
    if before is None:
        return None
    try:
        return compare(before.certificate, one.certificate, units)
    except AdvisorError as error:
        return error


def _empty(instead: Any) -> dict[str, Any]:
    """The page where there is no certificate to show, or it cannot be judged."""
    return {
        "heading": instead,
        "chart": blank(),
        "chart-words": "No chart.",
        "lots": blank(),
        "lots-words": "",
        "lots-hidden": True,
        **dict.fromkeys(
            ("readings", *_NAMES), html.P("Not known without a certificate.", className="quiet")
        ),
    }
