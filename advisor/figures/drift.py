"""Successive lots of one source: where each asks to be mixed, and since when it drifts."""

from __future__ import annotations

import plotly.graph_objects as go

from advisor.advice.sources import SourceHistory
from advisor.figures.base import NOTE_PX, bare, note, temperature, temperature_axis
from advisor.figures.ink import COLD_MARK, HOT_MARK, LIGHT, Ink
from advisor.units import UnitSystem, shown

_ROOM_K = 3.0  # left free above and below the lots


def drift_figure(history: SourceHistory, ink: Ink = LIGHT, units: UnitSystem = "si") -> go.Figure:
    """The mixing temperature of every lot in date order; the lots of a drift stand out."""
    figure = bare(ink, (46, 16, 12, 46))
    if not history.lots:
        return note(figure, history.words, ink)
    values = history.mixing_c
    temperature_axis(figure, min(values) - _ROOM_K, max(values) + _ROOM_K, units, ink, most=5)
    places = list(range(len(values)))
    drifting = _drifting(history)
    rising = drifting is not None and _rises(history)
    outside = [drifting is not None and at >= drifting for at in places]
    colour = ink.hot if rising else ink.cold
    figure.add_scatter(
        x=places,
        y=[temperature(value, units) for value in values],
        mode="lines+markers",
        line={"color": ink.quiet, "width": 1},
        marker={
            "size": [11 if one else 8 for one in outside],
            "color": [colour if one else ink.text for one in outside],
            "symbol": [
                ("triangle-up" if rising else "triangle-down") if one else "circle"
                for one in outside
            ],
        },
        text=[
            f"{lot}, {day}: {shown(value, 'temperature', units)}"
            for lot, day, value in zip(history.lots, history.days, values, strict=True)
        ],
        hovertemplate="%{text}<extra></extra>",
    )
    if history.chart is not None:
        figure.add_hline(y=history.chart.centre, line={"color": ink.target, "width": 1.5})
    if drifting is not None:
        figure.add_annotation(
            x=drifting,
            y=temperature(values[drifting], units),
            text=f"{HOT_MARK if rising else COLD_MARK} since {history.lots[drifting]}",
            showarrow=False,
            yshift=16 if rising else -16,
            font={"size": NOTE_PX, "color": colour},
        )
    figure.update_xaxes(
        range=[-0.5, len(values) - 0.5],
        tickvals=places[:: max(1, len(places) // 8)],
        ticktext=list(history.lots[:: max(1, len(places) // 8)]),
    )
    return figure


def _drifting(history: SourceHistory) -> int | None:
    """Place of the first lot of a drift that was signalled; None where all is quiet."""
    chart = history.chart
    return None if chart is None or chart.signal is None else chart.since


def _rises(history: SourceHistory) -> bool:
    chart = history.chart
    assert chart is not None and chart.signal is not None  # noqa: S101 - a drift has both
    return bool(chart.rising[chart.signal] > chart.limit)
