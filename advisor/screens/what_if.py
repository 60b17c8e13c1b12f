"""The what-if page: what would another way to run save, and what margin would it cost?"""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from dash import Dash, Input, Output, State, dcc, html

from advisor.advice.otherwise import Changes, additives
from advisor.advice.wastes import wastes_at
from advisor.advice.what_if import AsAdvised
from advisor.errors import AdvisorError
from advisor.figures.base import STILL, blank
from advisor.figures.energy import energy_bars, energy_height, energy_words
from advisor.figures.heat_path import heat_path, heat_path_words
from advisor.figures.ink import Ink, ink_of
from advisor.screens import what_if_parts as parts
from advisor.screens.entry import choice
from advisor.screens.ids import id_of
from advisor.screens.shift_parts import error_block
from advisor.screens.source import Source
from advisor.screens.what_if_parts import SLIDERS, Knob
from advisor.units import UnitSystem

PAGE = "what-if"
TITLE = "What if"
PATH = "/what-if"
PATH_PX = 250
# Fewer draws than an advice: a slider wants its answer at once.
DRAWS = 128
_SHOWN = ("heading", "table", "costs", "path-words", "energy-words")


def layout(source: Source, search: str | None) -> Any:
    """The page; nothing in it is kept when it is left."""
    jobs = [{"label": "the job that runs", "value": ""}] + [
        {"label": f"{one.name}, {one.mix} ({one.code})", "value": one.code} for one in source.jobs()
    ]
    return html.Div(
        [
            html.Div(
                [
                    html.Section(
                        [
                            html.H2("As it is now, and as it would be"),
                            choice(PAGE, "Job", "job", jobs),
                            *(_slider(one) for one in SLIDERS),
                            choice(
                                PAGE,
                                "Additive",
                                "additive",
                                [{"label": "as the mix has it", "value": ""}]
                                + [{"label": one, "value": one} for one in additives()],
                            ),
                            html.Button(
                                "Back to now",
                                id=id_of(PAGE, "back"),
                                type="button",
                                className="plain-button",
                            ),
                            html.P("Nothing here is saved.", className="note"),
                        ],
                        className="sheet knobs",
                    ),
                ],
                className="column",
            ),
            html.Div(
                [
                    html.Section(html.Div(id=id_of(PAGE, "heading")), className="sheet answer"),
                    _figure("Heat path, minutes after discharge", "path", PATH_PX),
                    _figure("Where the burner's heat goes", "energy", 300),
                    html.Section(
                        [html.H2("In numbers"), html.Div(id=id_of(PAGE, "table"))],
                        className="sheet numbers",
                    ),
                    html.Section(
                        [
                            html.H2("What a degree, water and air cost"),
                            html.Div(id=id_of(PAGE, "costs")),
                        ],
                        className="sheet costs",
                    ),
                ],
                className="column",
            ),
        ],
        className="page what-if",
    )


def _slider(knob: Knob) -> Any:
    return html.Div(
        [
            html.Div(
                [
                    html.Span(knob.label, id=id_of(PAGE, f"{knob.name}-label")),
                    html.Span(id=id_of(PAGE, f"{knob.name}-now"), className="quiet"),
                ],
                className="name",
            ),
            dcc.Slider(
                id=id_of(PAGE, knob.name),
                min=0,
                max=1,
                value=0,
                marks=None,
                updatemode="drag",
                included=False,
            ),
        ],
        id=id_of(PAGE, f"{knob.name}-place"),
        className="knob",
        role="group",
        **{"aria-labelledby": id_of(PAGE, f"{knob.name}-label")},
    )


def _figure(title: str, part: str, height: int) -> Any:
    return html.Section(
        [
            html.H2(title),
            dcc.Graph(
                id=id_of(PAGE, part),
                figure=blank(),
                config=STILL,
                className="graph",
                style={"height": f"{height}px"},
            ),
            html.P(id=id_of(PAGE, f"{part}-words"), className="heard-only"),
        ],
        className=f"sheet {part}",
    )


def register(app: Dash, source: Source) -> None:
    """Give the page's callbacks to ``app``."""

    @app.callback(
        output={
            f"{one.name} {what}": Output(id_of(PAGE, f"{one.name}{ending}"), what)
            for one in SLIDERS
            for what, ending in (
                ("min", ""), ("max", ""), ("step", ""), ("value", ""), ("children", "-now"),
                ("hidden", "-place"),
            )
        } | {"additive": Output(id_of(PAGE, "additive"), "value")},
        inputs={
            "job": Input(id_of(PAGE, "job"), "value"),
            "units": Input("units", "value"),
            "_back": Input(id_of(PAGE, "back"), "n_clicks"),
        },
    )  # fmt: skip
    def start(job: str, units: UnitSystem, _back: int | None) -> dict[str, Any]:
        try:
            found = source.situation(job or None, units)
        except AdvisorError:
            found = None
        told: dict[str, Any] = {"additive": ""}
        for one in SLIDERS:
            told.update({f"{one.name} {what}": value for what, value in one.set_to(found, units)})
        return told

    @app.callback(
        output={
            **{name: Output(id_of(PAGE, name), "children") for name in _SHOWN},
            "path": Output(id_of(PAGE, "path"), "figure"),
            "energy": Output(id_of(PAGE, "energy"), "figure"),
            "energy_style": Output(id_of(PAGE, "energy"), "style"),
        },
        inputs={
            "values": {one.name: Input(id_of(PAGE, one.name), "value") for one in SLIDERS},
            "additive": Input(id_of(PAGE, "additive"), "value"),
            "scheme": Input("scheme", "data"),
            "narrow": Input("narrow", "data"),
            "job": State(id_of(PAGE, "job"), "value"),
            "units": State("units", "value"),
        },
    )
    def show(
        values: dict[str, float | None],
        additive: str,
        scheme: str,
        narrow: bool,
        job: str,
        units: UnitSystem,
    ) -> dict[str, Any]:
        try:
            return _shown(source, values, additive, units, ink_of(scheme), narrow, job)
        except AdvisorError as error:
            empty = dict.fromkeys(_SHOWN, "")
            refused = error_block(error, "Nothing to compare")
            return {
                **empty,
                "heading": refused,
                "path": blank(),
                "energy": blank(),
                "energy_style": {"height": "120px"},
            }


def _shown(
    source: Source,
    values: dict[str, float | None],
    additive: str,
    units: UnitSystem,
    ink: Ink,
    narrow: bool,
    job: str,
) -> dict[str, Any]:
    """Every part of the page for what the sliders say."""
    situation = source.situation(job or None, units)
    changes = parts.changes_of(values, additive, situation, units)
    # Drawn once, since every move of a slider is compared with the same.
    advised = source.ask(
        (PAGE, "as advised", job, units), situation.at, lambda _: AsAdvised(situation, DRAWS)
    )
    (found,) = advised.against([changes])
    wastes = source.ask(
        (PAGE, "wastes", job, units),
        situation.at,
        lambda _: wastes_at(situation, found.before.discharge_c),
    )
    changed = changes != Changes(cooler_k=0.0)
    after = replace(found.after.advice, path=found.after.path)
    return {
        "heading": parts.heading(found, changed, units),
        "table": parts.numbers(found, changed, units),
        "costs": parts.costs(wastes, units),
        "path": heat_path(after, (), units, ink, narrow),
        "path-words": heat_path_words(after, (), units),
        "energy": energy_bars(
            found.before.parts, found.after.parts if changed else None, units, ink, narrow
        ),
        "energy-words": energy_words(
            found.before.parts, found.after.parts if changed else None, units
        ),
        "energy_style": {"height": f"{energy_height(found.before.parts)}px"},
    }
