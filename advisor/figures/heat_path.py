"""Where the heat goes: the window from drum to first roller pass, and the readings in it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import plotly.graph_objects as go

from advisor.advice.result import Advice, Limit, PathPoint, Point
from advisor.figures.base import (
    NOTE_PX,
    TEXT_PX,
    bare,
    degrees,
    temperature,
    temperature_axis,
    whole_delta,
)
from advisor.figures.drawn import Reading, verdict_of
from advisor.figures.ink import LIGHT, Ink
from advisor.units import UnitSystem, shown_unit

# The station of the path at which a point of the advice is met.
STATIONS: dict[Point, str] = {
    "discharge": "drum",
    "silo": "silo",
    "load_out": "load-out",
    "delivery": "paver",
}
# Stations closer than this share of the whole path share one label.
_NEAR = 0.075
# A limit further than this from the window and the readings is named by the setpoint, not drawn.
_REACH_K = 25.0


def heat_path(
    advice: Advice,
    readings: Sequence[Reading] = (),
    units: UnitSystem = "si",
    ink: Ink = LIGHT,
    height: int | None = None,
) -> go.Figure:
    """Figure of temperature against minutes after discharge: window, target, limits, readings.

    Parameters
    ----------
    advice : Advice with a ``path``; without one the figure says so
    readings : the latest reading at each point, drawn with bars of two standard deviations
    units : 'si' or 'us'
    ink : palette
    height : px, or None to fill the space given
    """
    figure = bare(ink, height, (62, 14, 26, 44))
    if len(advice.path) < 2:
        return _empty(figure, ink)
    path = advice.path
    minutes = [one.minutes for one in path]
    end = max(minutes[-1], 1.0)
    _ribbon(figure, path, units, ink)
    _stations(figure, path, end, ink)
    limits = _limits_drawn(advice, readings)
    for spot, reading in enumerate(readings):
        _reading(figure, path, reading, end, units, ink, spot)
    _axes(figure, advice, readings, limits, end, units, ink)
    for limit in limits:
        _limit(figure, path, limit, end, units, ink)
    return figure


def heat_path_words(advice: Advice, readings: Sequence[Reading], units: UnitSystem) -> str:
    """One sentence for those who cannot see the figure."""
    if len(advice.path) < 2:
        return "No heat path: there is no window to draw."
    unit = shown_unit("temperature", units)
    stations = "; ".join(
        f"{one.name} {degrees(one.low_c, units)} to {degrees(one.high_c, units)}, "
        f"target {degrees(one.target_c, units)}"
        for one in advice.path
    )
    now = ", ".join(
        f"{STATIONS[one.point]} {degrees(one.value_c, units)}"
        for one in readings
        if one.point in STATIONS and one.value_c is not None
    )
    return f"Window in {unit}: {stations}." + (f" Latest readings: {now}." if now else "")


def _ribbon(
    figure: go.Figure, path: Sequence[PathPoint], units: UnitSystem, ink: Ink
) -> None:
    minutes = [one.minutes for one in path]
    low = [temperature(one.low_c, units) for one in path]
    high = [temperature(one.high_c, units) for one in path]
    figure.add_scatter(
        name="window",
        x=minutes + minutes[::-1],
        y=high + low[::-1],
        mode="lines",
        line={"width": 0},
        fill="toself",
        fillcolor=ink.window,
        hoverinfo="skip",
    )
    unit = shown_unit("temperature", units)
    figure.add_scatter(
        name="target",
        x=minutes,
        y=[temperature(one.target_c, units) for one in path],
        mode="lines",
        line={"width": 2.5, "color": ink.target},
        customdata=[
            [one.name, degrees(one.low_c, units), degrees(one.high_c, units)] for one in path
        ],
        hovertemplate=f"%{{customdata[0]}}, %{{x:.0f}} min<br>target %{{y:.0f}} {unit}"
        "<br>%{customdata[1]} – %{customdata[2]}<extra></extra>",
    )


def _stations(figure: go.Figure, path: Sequence[PathPoint], end: float, ink: Ink) -> None:
    groups: list[list[PathPoint]] = []
    for one in path:
        figure.add_shape(
            type="line",
            x0=one.minutes,
            x1=one.minutes,
            y0=0,
            y1=1,
            yref="paper",
            line={"width": 1, "color": ink.rule},
            layer="below",
        )
        if groups and (one.minutes - groups[-1][-1].minutes) / end < _NEAR:
            groups[-1].append(one)
        else:
            groups.append([one])
    for group in groups:
        at = group[0].minutes
        last = group[-1].minutes >= end * (1 - _NEAR)
        first = at <= end * _NEAR
        figure.add_annotation(
            x=group[-1].minutes if last else at,
            y=1,
            yref="paper",
            yanchor="bottom",
            xanchor="left" if first else "right" if last else "center",
            text=" · ".join(one.name for one in group),
            showarrow=False,
            font={"size": TEXT_PX, "color": ink.text},
        )


@dataclass(frozen=True)
class _Place:
    """Where a point of the advice lies on the path, and its window there."""

    minutes: float
    low_c: float
    high_c: float


def _place(path: Sequence[PathPoint], point: Point) -> _Place | None:
    name = STATIONS.get(point)
    found = next((one for one in path if one.name == name), None)
    return _Place(found.minutes, found.low_c, found.high_c) if found else None


def _reading(
    figure: go.Figure,
    path: Sequence[PathPoint],
    reading: Reading,
    end: float,
    units: UnitSystem,
    ink: Ink,
    spot: int,
) -> None:
    place = _place(path, reading.point)
    if place is None or reading.value_c is None:
        return
    verdict = verdict_of(reading.value_c, place.low_c, place.high_c, reading.doubt)
    colour = {"hot": ink.hot, "cold": ink.cold, "unknown": ink.unknown, "inside": ink.text}[verdict]
    symbol = {"hot": "triangle-up", "cold": "triangle-down", "unknown": "circle-open"}.get(
        verdict, "circle"
    )
    value = temperature(reading.value_c, units)
    spread = temperature(reading.value_c + 2 * reading.sd_k, units) - value
    outside = {
        "hot": reading.value_c - place.high_c,
        "cold": place.low_c - reading.value_c,
    }.get(verdict)
    words = f"<b>{round(value)}</b>"
    if outside is not None:
        words += f" {verdict} by {whole_delta(outside, units)}"
    elif verdict == "unknown":
        words += f" {reading.doubt or 'not trusted'}"
    left = place.minutes > 0.75 * end
    figure.add_scatter(
        name=f"reading {STATIONS[reading.point]}",
        x=[place.minutes],
        y=[value],
        mode="markers",
        marker={
            "symbol": symbol,
            "size": 15 if verdict in ("hot", "cold") else 12,
            "color": colour,
            "line": {"width": 2 if verdict == "unknown" else 1.5, "color": colour
                     if verdict == "unknown" else ink.sheet},
        },
        error_y={
            "type": "data",
            "array": [spread],
            "color": colour,
            "thickness": 1.5,
            "width": 5,
            "visible": spread > 0,
        },
        hovertemplate=f"{STATIONS[reading.point]} %{{y:.1f}} {shown_unit('temperature', units)}"
        "<extra></extra>",
    )
    figure.add_annotation(
        x=place.minutes,
        y=value,
        xanchor="right" if left else "left",
        yanchor="middle",
        xshift=-14 if left else 14,
        text=words,
        showarrow=False,
        font={"size": TEXT_PX + 2, "color": colour},
        bgcolor="rgba(0,0,0,0)",
        name=f"words {spot}",
    )


def _limits_drawn(advice: Advice, readings: Sequence[Reading]) -> list[Limit]:
    """The tightest firm limit of each point and side that lies within reach of the window."""
    tightest: dict[tuple[str, str], Limit] = {}
    for limit in advice.limits:
        if limit.authority == "computed" or _place(advice.path, limit.point) is None:
            continue
        held = tightest.get((limit.point, limit.side))
        tighter = held is None or (
            limit.value_c > held.value_c if limit.side == "low" else limit.value_c < held.value_c
        )
        if tighter:
            tightest[(limit.point, limit.side)] = limit
    low, high = _span(advice, readings)
    return [
        one for one in tightest.values() if low - _REACH_K <= one.value_c <= high + _REACH_K
    ]


def _span(advice: Advice, readings: Sequence[Reading]) -> tuple[float, float]:
    values = [one.low_c for one in advice.path] + [one.high_c for one in advice.path]
    for reading in readings:
        if reading.value_c is not None and _place(advice.path, reading.point):
            values += [reading.value_c - 2 * reading.sd_k, reading.value_c + 2 * reading.sd_k]
    return min(values), max(values)


def _limit(
    figure: go.Figure,
    path: Sequence[PathPoint],
    limit: Limit,
    end: float,
    units: UnitSystem,
    ink: Ink,
) -> None:
    """A dotted line with its name over the stretch of the path where the limit applies."""
    place = _place(path, limit.point)
    if place is None:
        return
    wide = 0.34 * end
    if place.minutes < end / 2:
        start, stop, anchor = place.minutes, min(place.minutes + wide, end), "left"
    else:
        start, stop, anchor = max(place.minutes - wide, 0.0), place.minutes, "right"
    value = temperature(limit.value_c, units)
    figure.add_scatter(
        name=f"limit {limit.point} {limit.side}",
        x=[start, stop],
        y=[value, value],
        mode="lines",
        line={"width": 1.5, "dash": "dot", "color": ink.text},
        hovertemplate=f"{limit.name}: {limit.as_written or degrees(limit.value_c, units)}"
        f"<br>{limit.source}<extra></extra>",
    )
    figure.add_annotation(
        x=start if anchor == "left" else stop,
        y=value,
        xanchor=anchor,
        yanchor="bottom" if limit.side == "high" else "top",
        text=f"{degrees(limit.value_c, units)} {limit.name}",
        showarrow=False,
        font={"size": NOTE_PX + 1, "color": ink.text},
    )


def _axes(
    figure: go.Figure,
    advice: Advice,
    readings: Sequence[Reading],
    limits: Sequence[Limit],
    end: float,
    units: UnitSystem,
    ink: Ink,
) -> None:
    low, high = _span(advice, readings)
    low = min([low, *(one.value_c for one in limits)])
    high = max([high, *(one.value_c for one in limits)])
    room = max(4.0, 0.14 * (high - low))
    temperature_axis(figure, low - room, high + room, units, ink)
    step = next((one for one in (5, 10, 20, 30, 60, 120, 240) if end / one <= 9), 480)
    figure.update_xaxes(
        range=[-0.015 * end, 1.02 * end],
        tickvals=list(range(0, int(end) + 1, step)),
        title_text="minutes after discharge",
        title_standoff=4,
    )


def _empty(figure: go.Figure, ink: Ink) -> go.Figure:
    figure.update_xaxes(visible=False)
    figure.update_yaxes(visible=False)
    figure.add_annotation(
        x=0.5,
        y=0.5,
        xref="paper",
        yref="paper",
        text="No window to draw",
        showarrow=False,
        font={"size": TEXT_PX, "color": ink.quiet},
    )
    return figure
