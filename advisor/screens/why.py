"""The sheet that answers 'why': limits, inputs, defaults and sources behind one setpoint."""

from __future__ import annotations

from collections.abc import Sequence
from zoneinfo import ZoneInfo

from dash import html

from advisor.advice.result import AUTHORITIES, Advice, InputUsed, Limit, Point
from advisor.figures.base import degrees
from advisor.screens.words import age_words, delta_words, moment_words, unit_words
from advisor.units import UnitSystem


def why_sheet(advice: Advice, point: Point, zone: ZoneInfo, units: UnitSystem) -> list[object]:
    """The contents of the side sheet for one point of the advice."""
    setpoint = advice.setpoint(point)
    if setpoint is None:
        return [html.P("This setpoint is no longer part of the advice.")]
    target = degrees(setpoint.target_c, units)
    given = [one for one in advice.inputs if not one.assumed]
    assumed = [one for one in advice.inputs if one.assumed]
    binding = (setpoint.low_set_by, setpoint.high_set_by)
    limits = [
        *binding,
        *(one for one in advice.limits if one.point == point and one not in binding),
    ]
    return [
        html.H2(
            f"Why {target} {unit_words(units)} at {setpoint.label.lower()}",
            id="why-title",
            tabIndex=-1,
        ),
        html.P(
            f"{advice.plant}: {advice.mix} {advice.mix_name}, {advice.tank}, {advice.job_name}. "
            f"Worked out {moment_words(advice.at, zone)}, valid until "
            f"{moment_words(advice.valid_until, zone)} {advice.valid_because}.",
            className="quiet",
        ),
        html.P(
            [
                "Low ",
                html.B(degrees(setpoint.low_c, units)),
                f" ± {delta_words(2 * setpoint.sd_k, units)}, target ",
                html.B(target),
                ", high ",
                html.B(degrees(setpoint.high_c, units)),
                f" {unit_words(units)}; met with {100 * advice.confidence:.0f} % confidence.",
            ]
        ),
        html.H3("Limits, the binding ones first"),
        _limits(limits, binding, units),
        html.H3("Reasons"),
        html.Ul([html.Li(one.sentence) for one in advice.reasons]),
        *_passed_over(advice.passed_over),
        html.H3("Inputs"),
        _inputs(given),
        html.H3("Defaults used"),
        _inputs(assumed) if assumed else html.P("None."),
        html.H3("What to measure next"),
        _contributions(advice, units),
        html.H3("Cautions"),
        html.Ul([html.Li(one.text) for one in advice.cautions]),
        html.P(f"Advisor version {advice.version}" if advice.version else "", className="note"),
    ]


def _limits(limits: Sequence[Limit], binding: Sequence[Limit], units: UnitSystem) -> object:
    rank = {name: place for place, name in enumerate(AUTHORITIES)}
    ordered = sorted(limits, key=lambda one: (one not in binding, rank[one.authority]))
    rows = []
    for one in ordered:
        value = degrees(one.value_c, units)
        if one.sd_k:
            value += f" ± {delta_words(2 * one.sd_k, units)}"
        written = f", written {one.as_written}" if one.as_written else ""
        rows.append(
            html.Tr(
                [
                    html.Td(one.side),
                    html.Td(value, className="number"),
                    html.Td(
                        [
                            html.B(one.name) if one in binding else one.name,
                            html.Br(),
                            html.Span(
                                f"{one.authority}: {one.source}{written} ({one.how_known})",
                                className="note",
                            ),
                        ]
                    ),
                ]
            )
        )
    return html.Table(
        [
            html.Thead(html.Tr([html.Th("side"), html.Th(unit_words(units)), html.Th("set by")])),
            html.Tbody(rows),
        ]
    )


def _passed_over(sentences: Sequence[str]) -> list[object]:
    if not sentences:
        return []
    return [html.H3("Passed over"), html.Ul([html.Li(one) for one in sentences])]


def _inputs(inputs: Sequence[InputUsed]) -> object:
    return html.Table(
        html.Tbody(
            [
                html.Tr(
                    [
                        html.Th(one.name, scope="row"),
                        html.Td(one.shown, className="number"),
                        html.Td(
                            [
                                one.origin,
                                f", {age_words(one.age_s)} old" if one.age_s is not None else "",
                                html.Br() if one.note else "",
                                html.Span(one.note, className="note") if one.note else "",
                            ]
                        ),
                    ]
                )
                for one in inputs
            ]
        )
    )


def _contributions(advice: Advice, units: UnitSystem) -> object:
    if not advice.contributions:
        return html.P("The advice carries no ranking of its uncertainty.")
    return html.Table(
        html.Tbody(
            [
                html.Tr(
                    [
                        html.Th(one.name, scope="row"),
                        html.Td(f"± {delta_words(2 * one.sd_k, units)}", className="number"),
                    ]
                )
                for one in advice.contributions
            ]
        )
    )
