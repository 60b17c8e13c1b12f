"""Readings in time with the window that was in force behind them."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime
from zoneinfo import ZoneInfo

import numpy as np
import plotly.graph_objects as go
from numpy.typing import NDArray

from advisor.figures.base import (
    TEXT_PX,
    bare,
    degrees,
    temperature,
    temperature_axis,
)
from advisor.figures.clock import local_ticks, naive_utc
from advisor.figures.drawn import TicketPoint, Trace, WindowSpan
from advisor.figures.ink import LIGHT, Ink
from advisor.figures.thinning import thinned
from advisor.units import UnitSystem, shown_unit


def trend(
    readings: Trace,
    windows: Sequence[WindowSpan],
    start: datetime,
    end: datetime,
    zone: ZoneInfo,
    units: UnitSystem = "si",
    ink: Ink = LIGHT,
    tickets: Sequence[TicketPoint] = (),
    zoom: bool = False,
    narrow: bool = False,
) -> go.Figure:
    """Figure of a temperature from ``start`` to ``end`` on its window, gaps left open.

    Parameters
    ----------
    readings : Trace; NaN marks a gap; long traces are thinned with their peaks kept
    windows : the windows in force, in any order
    start, end : aware datetimes, the ends of the time axis
    zone : time zone of the words on the time axis
    units : 'si' or 'us'
    ink : palette
    tickets : truck loads, drawn as small squares at their load-out temperature
    zoom : whether dragging along the time axis zooms
    narrow : whether the figure is for a phone: fewer ticks
    """
    figure = bare(ink, (62, 40, 8, 24))
    shown = thinned(readings)
    _windows(figure, windows, start, end, units, ink)
    _line(figure, shown, zone, units, ink)
    _outside(figure, shown, windows, units, ink)
    _tickets(figure, tickets, zone, units, ink)
    low, high = _reach(shown, windows, tickets, start, end)
    room = max(2.0, 0.1 * (high - low))
    temperature_axis(figure, low - room, high + room, units, ink, most=5)
    ticks, words = local_ticks(start, end, zone, most=4 if narrow else 9)
    figure.update_xaxes(
        type="date", range=[naive_utc(start), naive_utc(end)], tickvals=ticks, ticktext=words
    )
    if not zoom:
        _latest(figure, shown, units, ink)
    else:
        figure.update_layout(dragmode="zoom")
        figure.update_xaxes(fixedrange=False)
    return figure


def trend_words(readings: Trace, windows: Sequence[WindowSpan], units: UnitSystem) -> str:
    """One sentence for those who cannot see the figure."""
    known = readings.values_c[np.isfinite(readings.values_c)]
    if known.size == 0:
        return "No readings in this time."
    low, high = outside_masks(readings, windows)
    unit = shown_unit("temperature", units)
    share = 100 * (low | high).sum() / known.size
    return (
        f"From {degrees(known.min(), units)} to {degrees(known.max(), units)} {unit}, "
        f"the latest {degrees(known[-1], units)} {unit}; {share:.0f} % of readings outside the "
        "window in force."
    )


def outside_masks(
    readings: Trace, windows: Sequence[WindowSpan]
) -> tuple[NDArray[np.bool_], NDArray[np.bool_]]:
    """Where the readings lie below and where above the window that was in force."""
    low = np.full(readings.times.size, -np.inf)
    high = np.full(readings.times.size, np.inf)
    for span in windows:
        if span.low_c is None or span.high_c is None:
            continue
        inside = (readings.times >= np.datetime64(naive_utc(span.start))) & (
            readings.times < np.datetime64(naive_utc(span.end))
        )
        low[inside], high[inside] = span.low_c, span.high_c
    with np.errstate(invalid="ignore"):
        return readings.values_c < low, readings.values_c > high


def _windows(
    figure: go.Figure,
    windows: Sequence[WindowSpan],
    start: datetime,
    end: datetime,
    units: UnitSystem,
    ink: Ink,
) -> None:
    band_x: list[datetime | None] = []
    band_y: list[float | None] = []
    target_x: list[datetime | None] = []
    target_y: list[float | None] = []
    for span in windows:
        if span.low_c is None or span.high_c is None or span.end <= start or span.start >= end:
            continue
        left, right = naive_utc(max(span.start, start)), naive_utc(min(span.end, end))
        low, high = temperature(span.low_c, units), temperature(span.high_c, units)
        band_x += [left, right, right, left, left, None]
        band_y += [low, low, high, high, low, None]
        if span.target_c is not None:
            target_x += [left, right, None]
            target_y += [temperature(span.target_c, units)] * 2 + [None]
    figure.add_scatter(
        name="window",
        x=band_x,
        y=band_y,
        mode="lines",
        line={"width": 0},
        fill="toself",
        fillcolor=ink.window,
        hoverinfo="skip",
    )
    figure.add_scatter(
        name="target",
        x=target_x,
        y=target_y,
        mode="lines",
        line={"width": 2, "color": ink.target},
        hoverinfo="skip",
    )


def _line(figure: go.Figure, shown: Trace, zone: ZoneInfo, units: UnitSystem, ink: Ink) -> None:
    figure.add_scatter(
        name="readings",
        x=shown.times.astype("datetime64[ms]"),
        y=[_drawn(value, units) for value in shown.values_c],
        mode="lines",
        connectgaps=False,
        line={"width": 1.5, "color": ink.text},
        customdata=_local_words(shown.times, zone),
        hovertemplate=f"%{{customdata}}  %{{y:.1f}} {shown_unit('temperature', units)}"
        "<extra></extra>",
    )


def _outside(
    figure: go.Figure, shown: Trace, windows: Sequence[WindowSpan], units: UnitSystem, ink: Ink
) -> None:
    """Heavier ink on what lies outside, and one mark with its number at the worst of each side."""
    below, above = outside_masks(shown, windows)
    for side, mask, colour, symbol in (
        ("hot", above, ink.hot, "triangle-up"),
        ("cold", below, ink.cold, "triangle-down"),
    ):
        if not mask.any():
            continue
        values = np.where(mask, shown.values_c, np.nan)
        figure.add_scatter(
            name=side,
            x=shown.times.astype("datetime64[ms]"),
            y=[_drawn(value, units) for value in values],
            mode="lines",
            connectgaps=False,
            line={"width": 3, "color": colour},
            hoverinfo="skip",
        )
        worst = int(np.nanargmax(values) if side == "hot" else np.nanargmin(values))
        figure.add_scatter(
            name=f"{side} peak",
            x=shown.times[[worst]].astype("datetime64[ms]"),
            y=[_drawn(float(values[worst]), units)],
            mode="markers",
            marker={"symbol": symbol, "size": 12, "color": colour},
            hoverinfo="skip",
        )
        late = worst > 0.85 * shown.times.size
        figure.add_annotation(
            x=str(shown.times[worst].astype("datetime64[ms]")),
            y=_drawn(float(values[worst]), units),
            text=f"<b>{degrees(float(values[worst]), units)}</b>",
            showarrow=False,
            xanchor="right" if late else "left",
            xshift=-10 if late else 10,
            yanchor="middle",
            font={"size": TEXT_PX, "color": colour},
            bgcolor=ink.sheet,  # legible where it lies on the line of readings
            borderpad=1,
        )


def _latest(figure: go.Figure, shown: Trace, units: UnitSystem, ink: Ink) -> None:
    """The newest reading as a number at the right edge."""
    known = np.flatnonzero(np.isfinite(shown.values_c))
    if known.size == 0:
        return
    last = float(shown.values_c[known[-1]])
    figure.add_annotation(
        x=1,
        xref="paper",
        y=temperature(last, units),
        xanchor="left",
        xshift=4,
        text=f"<b>{degrees(last, units)}</b>",
        showarrow=False,
        font={"size": TEXT_PX + 1, "color": ink.text},
    )


def _tickets(
    figure: go.Figure,
    tickets: Sequence[TicketPoint],
    zone: ZoneInfo,
    units: UnitSystem,
    ink: Ink,
) -> None:
    known = [one for one in tickets if one.load_out_c is not None]
    if not known:
        return
    figure.add_scatter(
        name="loads",
        x=[naive_utc(one.time) for one in known],
        y=[_drawn(one.load_out_c, units) for one in known],
        mode="markers",
        marker={"symbol": "square-open", "size": 7, "color": ink.quiet, "line": {"width": 1.5}},
        customdata=[[one.ticket, one.truck, f"{one.time.astimezone(zone):%H:%M}"] for one in known],
        hovertemplate="load %{customdata[0]}, truck %{customdata[1]}, %{customdata[2]}<br>"
        f"load-out %{{y:.0f}} {shown_unit('temperature', units)}<extra></extra>",
    )


def _reach(
    shown: Trace,
    windows: Sequence[WindowSpan],
    tickets: Sequence[TicketPoint],
    start: datetime,
    end: datetime,
) -> tuple[float, float]:
    values = [float(one) for one in shown.values_c[np.isfinite(shown.values_c)]]
    for span in windows:
        if span.low_c is not None and span.high_c is not None and span.start < end:
            values += [span.low_c, span.high_c] if span.end > start else []
    values += [one.load_out_c for one in tickets if one.load_out_c is not None]
    return (min(values), max(values)) if values else (140.0, 170.0)


def _drawn(value_c: float | None, units: UnitSystem) -> float | None:
    if value_c is None or not np.isfinite(value_c):
        return None
    return round(temperature(float(value_c), units), 2)


def _local_words(times: NDArray[np.datetime64], zone: ZoneInfo) -> list[str]:
    utc = ZoneInfo("UTC")
    return [
        f"{one.replace(tzinfo=utc).astimezone(zone):%a %H:%M}"
        for one in times.astype("datetime64[us]").tolist()
    ]
