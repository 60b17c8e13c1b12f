"""The pieces of the binder page, each from what it shows to components."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from dash import html

from advisor.advice.assessment import Assessment
from advisor.binder import Check, Reading, SourceChange, Window
from advisor.errors import AdvisorError
from advisor.figures.base import degrees
from advisor.screens.words import temperature_words, unit_words
from advisor.units import UnitSystem, shown

Parts = list[object]
_VERDICT = {True: "inside", False: "outside", None: "not told"}


def heading(one: Assessment) -> Parts:
    """Which binder this is, who tested it, and what is likely mistyped."""
    sheet = one.certificate
    parts: Parts = [
        html.H1(f"Lot {sheet.lot}, {sheet.grade}"),
        html.Span(
            f"{sheet.product}, {sheet.source}; tested {sheet.tested_on.day} "
            f"{sheet.tested_on:%b %Y} by {sheet.laboratory}; modifier: {sheet.modifier}",
            className="quiet",
        ),
    ]
    parts += [
        html.P(f"Likely mistake. {doubt.sentence.rstrip('.')}.", className="refusal", role="alert")
        for doubt in one.doubts
    ]
    return parts


def nothing() -> object:
    """The sentence where the plant has no certificate."""
    return html.Div(
        [
            html.H1("No certificate"),
            html.P("Record one with 'advisor records import', and it is shown here."),
        ]
    )


def window_table(one: Assessment, units: UnitSystem) -> Parts:
    """Mixing and compaction: the window that governs, those beside it, and what was refused."""
    parts: Parts = []
    for governed in (one.mixing, one.compaction):
        parts.append(html.H3(governed.purpose.capitalize()))
        rows = [] if governed.governing is None else [_window_row(governed.governing, units, True)]
        rows += [_window_row(window, units, False) for window in governed.beside]
        if rows:
            head = ("rule", "low", "target", "high")
            parts.append(
                html.Table(
                    [
                        html.Caption(unit_words(units), className="note"),
                        html.Thead(html.Tr(_heads(head, head[1:]))),
                        html.Tbody(rows),
                    ]
                )
            )
        windows = [governed.governing, *governed.beside]
        told = [caution for window in windows if window for caution in window.cautions]
        parts += [
            html.P(words, className="note") for words in (*governed.refused, *dict.fromkeys(told))
        ]
    return parts


def _window_row(window: Window, units: UnitSystem, governs: bool) -> object:
    low, target, high = (
        degrees(float(part), units) for part in (window.low_c, window.target_c, window.high_c)
    )
    if low == high:
        low = high = ""
    sd = float(window.target_sd_k)
    doubt = f"; 1s {shown(sd, 'temperature_delta', units)}" if sd > 0.0 else ""
    return html.Tr(
        [
            html.Th(
                [
                    html.B(window.method) if governs else window.method,
                    html.Div(
                        f"{'governs; ' * governs}{window.source} ({window.how_known}){doubt}",
                        className="note",
                    ),
                ],
                scope="row",
            ),
            html.Td(low, className="number"),
            html.Td(html.B(target) if governs else target, className="number"),
            html.Td(high, className="number"),
        ]
    )


def moves(
    before: Assessment | None, change: SourceChange | AdvisorError | None, units: UnitSystem
) -> object:
    """The temperatures that move between two lots, whether tests can see it, what settles it."""
    if before is None or change is None:
        return html.P(
            "Choose a lot at 'against' to see what moves with this binder.", className="quiet"
        )
    if isinstance(change, AdvisorError):
        return html.Ul([html.Li(str(fault)) for fault in change.faults])
    rows = [
        html.Tr(
            [
                html.Th(f"{one.name}, {one.viscosity_pas:g} Pa.s", scope="row"),
                html.Td(degrees(one.older_c, units), className="number"),
                html.Td(degrees(one.newer_c, units), className="number"),
                html.Td(
                    [
                        html.B(_signed(one.shift_k, units)),
                        f" ± {shown(2 * one.standard_error_k, 'temperature_delta', units)}",
                    ],
                    className="number",
                ),
            ]
        )
        for one in change.shifts
    ]
    head = ("", f"{before.certificate.lot}", "now", "shift")
    return html.Div(
        [
            html.P(change.sentence),
            html.Table(
                [
                    html.Caption(unit_words(units), className="note"),
                    html.Thead(html.Tr(_heads(head, head[1:]))),
                    html.Tbody(rows),
                ]
            ),
            html.P(change.settles, className="note"),
        ]
    )


def _signed(value_k: float, units: UnitSystem) -> str:
    words = shown(abs(value_k), "temperature_delta", units).split()[0]
    return f"{'+' if value_k >= 0 else '−'}{words}"


def reading_table(one: Assessment, units: UnitSystem) -> object:
    """Every reading with its viscosity, spread and whether it was used, and why not."""
    if not one.sheet.readings:
        return html.P("Nothing was measured.", className="quiet")
    head = ("test", "at", "as written", "Pa.s", "1s", "verdict")
    rows = [
        html.Tr(
            [
                html.Th(reading.method, scope="row"),
                html.Td(temperature_words(reading.temperature_c, units), className="short"),
                html.Td(reading.as_written),
                html.Td(_three_digits(reading.viscosity_pas), className="number"),
                html.Td(f"{reading.relative_sd:.1%}", className="number"),
                html.Td(_verdict(reading)),
            ]
        )
        for reading in one.sheet.readings
    ]
    told = (one.sheet.refused, one.sheet.quality, *(one.curve.notes if one.curve else ()))
    suspicion = one.sheet.suspicion
    if suspicion is not None and suspicion.index is not None:
        told = (*told, suspicion.sentence)
    return html.Div(
        [
            html.Table(
                [html.Thead(html.Tr(_heads(head, ("Pa.s", "1s")))), html.Tbody(rows)]
            ),
            *(html.P(words) for words in told if words),
        ],
        className="scrolled",
    )  # fmt: skip


def _three_digits(value: float) -> str:
    return f"{float(f'{value:.3g}'):,.12g}"


def _heads(words: Sequence[str], numbers: Sequence[str]) -> Parts:
    """Headings of a table, those over ``numbers`` to the right."""
    return [html.Th(word, className="number" if word in numbers else "") for word in words]


def _verdict(reading: Reading) -> object:
    if reading.usable:
        return "used"
    return [html.B("kept, not used"), html.Div(" ".join(reading.unusable), className="note")]


def check_list(one: Assessment) -> object:
    """The certificate against its grade and itself, what is outside first."""
    if not one.checks:
        return html.P("The grade is not known here: nothing to check against.", className="quiet")
    order = {False: 0, None: 2, True: 1}
    checks = sorted(one.checks, key=lambda check: order[check.agrees])
    return html.Table(html.Tbody([_check_row(check) for check in checks]))


def _check_row(check: Check) -> object:
    return html.Tr(
        [
            html.Th(
                _VERDICT[check.agrees],
                scope="row",
                className=f"short check-{_VERDICT[check.agrees].replace(' ', '-')}",
            ),
            html.Td([check.sentence, html.Div(check.source, className="note")]),
        ]
    )


def tank_table(one: Assessment, units: UnitSystem) -> object:
    """What bounds the tank's temperature, and the margin to the flash point."""
    rows: Parts = []
    if one.tank is not None:
        bounds = [("at least", bound) for bound in one.tank.lows]
        bounds += [("at most", bound) for bound in one.tank.highs]
        rows = [
            html.Tr(
                [
                    html.Th(
                        [
                            f"{side}: {bound.set_by}",
                            html.Div(f"{bound.source} ({bound.how_known})", className="note"),
                        ],
                        scope="row",
                    ),
                    html.Td(temperature_words(bound.value_c, units), className="number"),
                ]
            )
            for side, bound in bounds
        ]
    told = list(one.tank.cautions) if one.tank is not None else []
    if one.flash_margin_k is not None:
        margin = shown(one.flash_margin_k, "temperature_delta", units)
        told.insert(0, f"Top of the mixing window to the flash point: {margin}.")
    return html.Div(
        [html.Table(html.Tbody(rows)), *(html.P(words, className="note") for words in told)]
    )


def sentences(told: Iterable[str] | Sequence[str]) -> object:
    """Sentences as a list, or that there are none."""
    items = [html.Li(words) for words in told]
    return html.Ul(items) if items else html.P("None.", className="quiet")
