"""Viscosity against temperature on the axes of ASTM D2493: readings, curve, band, windows."""

from __future__ import annotations

import html
from collections.abc import Iterator

import numpy as np
import plotly.graph_objects as go
from numpy.typing import NDArray

from advisor.advice.assessment import Assessment
from advisor.binder import Reading, ViscosityCurve, Window, log_rankine, loglog_viscosity
from advisor.figures.base import NOTE_PX, STILL, bare, note
from advisor.figures.ink import FONT, LIGHT, Ink, style_sheet
from advisor.units import UnitSystem, shown, shown_number, shown_unit

# The part of the chart that serves mixing; readings that were used widen it.
_RANGE_C = (90.0, 200.0)
_RANGE_PAS = (0.05, 20.0)
_TICKS_PAS = (0.03, 0.05, 0.1, 0.2, 0.5, 1.0, 2.0, 5.0, 20.0, 100.0, 1e3, 1e4, 1e5, 1e6)
_NAMED_AT = 0.72  # where along a line its name stands
_SCORE = 1.959964  # two-sided 95 %


def viscosity_chart(
    one: Assessment,
    before: Assessment | None = None,
    ink: Ink = LIGHT,
    units: UnitSystem = "si",
) -> go.Figure:
    """The chart of ``one`` sheet, with the sheet ``before`` it drawn behind where there is one."""
    figure = bare(ink, (64, 20, 44, 48))
    if one.curve is None and not one.sheet.readings:
        return note(figure, one.sheet.refused or "Nothing was measured.", ink)
    span_c, span_pas = _extent(one, before)
    _axes(figure, span_c, span_pas, ink, units)
    windows = sorted(_windows(one), key=lambda named: float(named[1].target_c))
    anchors = ("right", "left") if len(windows) == 2 else ("center",)
    for (which, window), anchor in zip(windows, anchors, strict=False):
        _shade(figure, which, window, anchor, ink, units)
    behind: list[tuple[str, ViscosityCurve]] = []
    if before is not None and before.curve is not None:
        behind.append((f"lot {before.certificate.lot}, before", before.curve))
    if one.sheet.third is not None:
        behind.append(("law of three constants (VFT)", one.sheet.third.curve()))
    for name, curve in behind:
        higher = one.curve is None or _higher(curve, one.curve, span_c)
        _line(figure, curve, span_c, ink, name, old=True, above=higher)
    if one.curve is not None:
        higher = not any(_higher(curve, one.curve, span_c) for _, curve in behind)
        _band(figure, one.curve, span_c, ink)
        _line(figure, one.curve, span_c, ink, f"lot {one.certificate.lot}", above=higher)
    if before is not None:
        _points(figure, before.sheet.readings, ink, units, old=True)
    _points(figure, one.sheet.readings, ink, units)
    return figure


def viscosity_words(
    one: Assessment, before: Assessment | None = None, units: UnitSystem = "si"
) -> str:
    """What the chart shows, in a sentence for readers who do not see it."""
    used = sum(reading.usable for reading in one.sheet.readings)
    words = [f"Lot {one.certificate.lot}: {used} of {len(one.sheet.readings)} readings used"]
    for which, window in _windows(one):
        low, high = (
            shown(float(part), "temperature", units) for part in (window.low_c, window.high_c)
        )
        words.append(f"{which} {low} to {high}")
    if one.curve is None:
        words.append("no curve")
    if before is not None:
        words.append(f"lot {before.certificate.lot} behind it")
    return ", ".join(words) + "."


def viscosity_page(one: Assessment, before: Assessment | None, units: UnitSystem) -> str:
    """A page with the chart that opens without internet, as HTML."""
    sheet = one.certificate
    figure = viscosity_chart(one, before, units=units)
    figure.update_layout(height=560)
    drawn = figure.to_html(include_plotlyjs=True, full_html=False, config=STILL)
    heading = html.escape(f"{sheet.product}, lot {sheet.lot}")
    sentences = [viscosity_words(one, before, units), one.sheet.refused, one.sheet.quality]
    sentences += [f"Likely mistake: {doubt.sentence}" for doubt in one.doubts]
    text = "".join(f"<p>{html.escape(words)}</p>" for words in sentences if words)
    return (
        f'<!doctype html><html lang="en"><head><meta charset="utf-8"><title>{heading}</title>'
        f"<style>{style_sheet()}body{{font-family:{FONT};background:{LIGHT.sheet};"
        f"color:{LIGHT.text};max-width:64rem;margin:1.5rem auto;padding:0 1rem}}</style></head>"
        f"<body><h1>{heading}</h1>{drawn}{text}<p>Advice only: nothing here sets a controller."
        "</p></body></html>"
    )


def _windows(one: Assessment) -> Iterator[tuple[str, Window]]:
    for governed in (one.mixing, one.compaction):
        if governed.governing is not None:
            yield governed.purpose, governed.governing


def _higher(one: ViscosityCurve, other: ViscosityCurve, span_c: tuple[float, float]) -> bool:
    """Whether ``one`` runs above ``other`` where the names of the lines stand."""
    at = span_c[0] + _NAMED_AT * (span_c[1] - span_c[0])
    return bool(one.viscosity_pas(at) > other.viscosity_pas(at))


def _extent(
    one: Assessment, before: Assessment | None
) -> tuple[tuple[float, float], tuple[float, float]]:
    """Temperatures [C] and viscosities [Pa.s] the chart spans."""
    sheets = [one] + ([before] if before is not None else [])
    used = [reading for each in sheets for reading in each.sheet.readings if reading.usable]
    at = [reading.temperature_c for reading in used]
    low_c, high_c = min([_RANGE_C[0], *at]) - 3.0, max([_RANGE_C[1], *at]) + 3.0
    etas = [reading.viscosity_pas for reading in used]
    for each in sheets:
        if each.curve is not None:
            etas += [float(eta) for eta in each.curve.viscosity_pas([low_c, high_c])]
    low, high = min([_RANGE_PAS[0], *etas]), max([_RANGE_PAS[1], *etas])
    return (low_c, high_c), (max(low / 1.2, 0.01), min(high * 1.3, 1e7))


def _axes(
    figure: go.Figure,
    span_c: tuple[float, float],
    span_pas: tuple[float, float],
    ink: Ink,
    units: UnitSystem,
) -> None:
    step = 20 if units == "si" or span_c[1] - span_c[0] < 130.0 else 40
    low, high = (shown_number(part, "temperature", units) for part in span_c)
    ticks = np.arange(np.ceil(low / step) * step, high, step)
    at_c = ticks if units == "si" else (ticks - 32.0) / 1.8
    figure.update_xaxes(
        range=[float(log_rankine(part)) for part in span_c],
        tickvals=log_rankine(at_c),
        ticktext=[f"{tick:.0f}" for tick in ticks],
        title={"text": f"Temperature, {shown_unit('temperature', units)} (log absolute)"},
        showgrid=True,
        gridcolor=ink.rule,
    )
    shown_pas = [eta for eta in _TICKS_PAS if span_pas[0] <= eta <= span_pas[1]]
    factor, unit = (1.0, "Pa.s") if units == "si" else (1000.0, "cP")
    figure.update_yaxes(
        range=[float(loglog_viscosity(part)) for part in span_pas],
        tickvals=loglog_viscosity(shown_pas),
        ticktext=[f"{eta * factor:,.12g}" for eta in shown_pas],
        title={"text": f"Viscosity, {unit} (log log)"},
        showgrid=True,
        gridcolor=ink.rule,
    )


def _shade(
    figure: go.Figure, which: str, window: Window, anchor: str, ink: Ink, units: UnitSystem
) -> None:
    low, target, high = (float(part) for part in (window.low_c, window.target_c, window.high_c))
    figure.add_vrect(
        x0=float(log_rankine(low)),
        x1=float(log_rankine(high)),
        fillcolor=ink.window,
        opacity=0.75,
        line={"color": ink.sheet, "width": 2},  # keeps windows that touch apart
        layer="below",
    )
    x = float(log_rankine(target))
    figure.add_vline(x=x, line={"color": ink.target, "width": 1}, layer="below")
    figure.add_annotation(
        x=x,
        y=1.0,
        yref="paper",
        yanchor="bottom",
        xanchor=anchor,
        align=anchor,
        text=f"{which}<br>{shown(target, 'temperature', units)}",
        showarrow=False,
        font={"size": NOTE_PX, "color": ink.text},
    )


def _grid(span_c: tuple[float, float]) -> NDArray[np.float64]:
    return np.linspace(span_c[0], span_c[1], 121)


def _band(figure: go.Figure, curve: ViscosityCurve, span_c: tuple[float, float], ink: Ink) -> None:
    at = _grid(span_c)
    low, high = curve.viscosity_band_pas(at)
    known = (low > 0.0011) & np.isfinite(high)
    x, below, above = at[known], low[known], high[known]
    figure.add_scatter(
        x=np.concatenate([log_rankine(x), log_rankine(x)[::-1]]),
        y=np.concatenate([loglog_viscosity(below), loglog_viscosity(above)[::-1]]),
        fill="toself",
        fillcolor=_faint(ink.target),
        line={"width": 0},
        hoverinfo="skip",
        name="95 % of the curve",
    )


def _line(
    figure: go.Figure,
    curve: ViscosityCurve,
    span_c: tuple[float, float],
    ink: Ink,
    name: str,
    old: bool = False,
    above: bool = True,
) -> None:
    at = _grid(span_c)
    eta = curve.viscosity_pas(at)
    known = np.isfinite(eta) & (eta > 0.0011)
    figure.add_scatter(
        x=log_rankine(at[known]),
        y=loglog_viscosity(eta[known]),
        mode="lines",
        line={
            "color": ink.quiet if old else ink.target,
            "width": 1.5 if old else 2.5,
            "dash": "dash" if old else "solid",
        },
        hoverinfo="skip",
        name=name,
    )
    inside = np.flatnonzero(known)
    if not inside.size:
        return
    where = int(inside[int(_NAMED_AT * (inside.size - 1))])
    figure.add_annotation(
        x=float(log_rankine(at[where])),
        y=float(loglog_viscosity(eta[where])),
        text=name,
        showarrow=False,
        xanchor="left" if above else "right",
        yanchor="bottom" if above else "top",
        xshift=4 if above else -8,
        yshift=4 if above else -4,
        font={"size": NOTE_PX, "color": ink.quiet if old else ink.text},
    )


def _points(
    figure: go.Figure,
    readings: tuple[Reading, ...],
    ink: Ink,
    units: UnitSystem,
    old: bool = False,
) -> None:
    for usable in (True, False):
        chosen = [one for one in readings if one.usable is usable and one.viscosity_pas > 0.0011]
        if not chosen or (old and not usable):
            continue
        eta = np.array([one.viscosity_pas for one in chosen])
        reach = np.exp(_SCORE * np.array([one.relative_sd for one in chosen]))
        y = loglog_viscosity(eta)
        colour = ink.quiet if old or not usable else ink.text
        figure.add_scatter(
            x=log_rankine([one.temperature_c for one in chosen]),
            y=y,
            error_y={
                "type": "data",
                "symmetric": False,
                "array": loglog_viscosity(eta * reach) - y,
                "arrayminus": y - loglog_viscosity(np.maximum(eta / reach, 0.0011)),
                "color": colour,
                "thickness": 1.5,
                "width": 5,
            },
            mode="markers",
            marker={
                "size": 9,
                "color": colour if usable else ink.sheet,
                "line": {"width": 1.5, "color": colour},
                "symbol": "diamond" if old else "circle",
            },
            text=[_told(one, units) for one in chosen],
            hovertemplate="%{text}<extra></extra>",
            name="readings" if usable else "kept, not used",
        )


def _told(one: Reading, units: UnitSystem) -> str:
    at = shown(one.temperature_c, "temperature", units)
    words = [f"{one.method} at {at}: {one.viscosity_pas:.3g} Pa.s", one.as_written, *one.unusable]
    return "<br>".join(html.escape(part) for part in words)


def _faint(colour: str) -> str:
    red, green, blue = (int(colour[at : at + 2], 16) for at in (1, 3, 5))
    return f"rgba({red},{green},{blue},0.20)"
