"""Where the heat goes: the window from drum to first roller pass, and the readings in it."""

from __future__ import annotations

from collections.abc import Sequence

import plotly.graph_objects as go

from advisor.advice.result import Advice, Limit, PathPoint, Point
from advisor.figures.base import (
    NOTE_PX,
    TEXT_PX,
    bare,
    degrees,
    note,
    temperature,
    temperature_axis,
    whole_delta,
)
from advisor.figures.drawn import Reading, verdict_of
from advisor.figures.ink import LIGHT, Ink
from advisor.figures.labels import Anchor, Room
from advisor.units import UnitSystem, shown_unit

# The station of the path at which a point of the advice is met.
STATIONS: dict[Point, str] = {
    "discharge": "drum",
    "silo": "silo",
    "load_out": "load-out",
    "delivery": "paver",
}
# A limit further than this from the window and the readings is named by the setpoint, not drawn.
_REACH_K = 25.0
_MARGIN = (62, 16, 24, 26)
# The size the words are laid out for; a narrow figure drops them instead.
_WIDTH, _HEIGHT, _NARROW = 890, 240, 330


def heat_path(
    advice: Advice,
    readings: Sequence[Reading] = (),
    units: UnitSystem = "si",
    ink: Ink = LIGHT,
    narrow: bool = False,
) -> go.Figure:
    """Figure of temperature against minutes after discharge: window, target, limits, readings.

    Parameters
    ----------
    advice : Advice with a ``path``; without one the figure says so
    readings : the latest reading at each point, drawn with bars of two standard deviations
    units : 'si' or 'us'
    ink : palette
    narrow : whether the figure is for a phone: fewer words
    """
    figure = bare(ink, _MARGIN)
    path = advice.path
    if len(path) < 2:
        return note(figure, "No window to draw.", ink)
    limits = _limits_drawn(advice, readings)
    reach_c = _reach(path, readings, limits)
    room = _room(path, reach_c, units, narrow)
    temperature_axis(figure, *reach_c, units, ink)
    _minutes_axis(figure, path, room, narrow)
    _ribbon(figure, path, units, ink)
    _stations(figure, path, room, ink, narrow)
    found = [(one, place) for one in readings if (place := _place(path, one.point))]
    for reading, place in found:
        if reading.value_c is not None:
            room.keep_clear(place.minutes, temperature(reading.value_c, units), 12)
    for reading, place in found:
        _reading(figure, place, reading, room, units, ink, narrow)
    for limit in limits:
        _limit(figure, path, limit, room, units, ink, narrow)
    return figure


def heat_path_words(advice: Advice, readings: Sequence[Reading], units: UnitSystem) -> str:
    """One sentence for those who cannot see the figure."""
    if len(advice.path) < 2:
        return "No heat path: there is no window to draw."
    stations = "; ".join(
        f"{one.name} {degrees(one.low_c, units)} to {degrees(one.high_c, units)}, "
        f"target {degrees(one.target_c, units)}"
        for one in advice.path
    )
    now = ", ".join(
        f"{STATIONS[one.point]} {degrees(one.value_c, units)}{_said(one, advice)}"
        for one in readings
        if one.point in STATIONS and one.value_c is not None
    )
    words = f"Window in {shown_unit('temperature', units)}: {stations}."
    return f"{words} Latest readings: {now}." if now else words


def _said(reading: Reading, advice: Advice) -> str:
    setpoint = advice.setpoint(reading.point)
    if setpoint is None:
        return ""
    verdict = verdict_of(reading.value_c, setpoint.low_c, setpoint.high_c, reading.doubt)
    return {"inside": "", "unknown": f" ({reading.doubt})"}.get(verdict, f" ({verdict})")


def _place(path: Sequence[PathPoint], point: Point) -> PathPoint | None:
    name = STATIONS.get(point)
    return next((one for one in path if one.name == name), None)


def _limits_drawn(advice: Advice, readings: Sequence[Reading]) -> list[Limit]:
    """The tightest firm limit of each point and side that lies within reach of the window."""
    low, high = _span(advice.path, readings)
    tightest: dict[tuple[str, str], Limit] = {}
    for limit in advice.limits:
        if limit.authority == "computed" or _place(advice.path, limit.point) is None:
            continue
        if not low - _REACH_K <= limit.value_c <= high + _REACH_K:
            continue
        held = tightest.get((limit.point, limit.side))
        sign = 1 if limit.side == "low" else -1
        if held is None or sign * limit.value_c > sign * held.value_c:
            tightest[(limit.point, limit.side)] = limit
    return list(tightest.values())


def _span(path: Sequence[PathPoint], readings: Sequence[Reading]) -> tuple[float, float]:
    values = [one.low_c for one in path] + [one.high_c for one in path]
    for reading in readings:
        if reading.value_c is not None and _place(path, reading.point):
            values += [reading.value_c - 2 * reading.sd_k, reading.value_c + 2 * reading.sd_k]
    return min(values), max(values)


def _reach(
    path: Sequence[PathPoint], readings: Sequence[Reading], limits: Sequence[Limit]
) -> tuple[float, float]:
    """Lowest and highest temperature of the figure [C], with some room."""
    low, high = _span(path, readings)
    low = min([low, *(one.value_c for one in limits)])
    high = max([high, *(one.value_c for one in limits)])
    spare = max(3.0, 0.13 * (high - low))
    return low - spare, high + spare


def _room(
    path: Sequence[PathPoint], reach_c: tuple[float, float], units: UnitSystem, narrow: bool
) -> Room:
    end = max(path[-1].minutes, 1.0)
    left, right, top, bottom = _MARGIN
    return Room(
        width=(_NARROW if narrow else _WIDTH) - left - right,
        height=_HEIGHT - top - bottom,
        x_range=(-0.015 * end, 1.015 * end),
        y_range=(temperature(reach_c[0], units), temperature(reach_c[1], units)),
    )


def _minutes_axis(figure: go.Figure, path: Sequence[PathPoint], room: Room, narrow: bool) -> None:
    end = max(path[-1].minutes, 1.0)
    most = 5 if narrow else 9
    step = next((one for one in (5, 10, 20, 30, 60, 120, 240) if end / one <= most), 480)
    ticks = list(range(0, int(end) + 1, step))
    figure.update_xaxes(
        range=room.x_range,
        tickvals=ticks,
        ticktext=[f"{tick} min" if tick == ticks[-1] else str(tick) for tick in ticks],
    )


def _ribbon(figure: go.Figure, path: Sequence[PathPoint], units: UnitSystem, ink: Ink) -> None:
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


def _stations(
    figure: go.Figure, path: Sequence[PathPoint], room: Room, ink: Ink, narrow: bool
) -> None:
    """A thin rule at each station and its name above; names that would touch share one."""
    size = NOTE_PX if narrow else TEXT_PX
    above = Room(room.width, 20, room.x_range, (0, 1))
    groups = _grouped(path, room, size)
    # The last name has the least freedom, so it chooses first.
    for group in [*groups[-1:], *groups[:-1]]:
        words = " · ".join(one.name for one in group)
        first, last = group[0].minutes, group[-1].minutes
        spots: list[tuple[float, float, Anchor]] = [
            (first, 0, "above"),
            (first, 0, "above right"),
            (last, 0, "above left"),
        ]
        figure.add_annotation(
            {
                **above.place(words, size, spots),
                "y": 1,
                "yref": "paper",
                "text": words,
                "font": {"size": size, "color": ink.text},
            }
        )
    rules = [
        {
            "type": "line",
            "x0": one.minutes,
            "x1": one.minutes,
            "y0": 0,
            "y1": 1,
            "yref": "y domain",
            "line": {"width": 1, "color": ink.rule},
            "layer": "below",
        }
        for one in path
    ]
    # All at once: each shape added alone checks those before it again.
    figure.layout.shapes = (*figure.layout.shapes, *rules)


def _grouped(path: Sequence[PathPoint], room: Room, size: float) -> list[list[PathPoint]]:
    """Stations so close that their names would touch are told together."""
    px_per_min = room.width / (room.x_range[1] - room.x_range[0])
    groups: list[list[PathPoint]] = []
    for one in path:
        near = groups and (one.minutes - groups[-1][-1].minutes) * px_per_min < 4 * size
        if near:
            groups[-1].append(one)
        else:
            groups.append([one])
    return groups


def _reading(
    figure: go.Figure,
    place: PathPoint,
    reading: Reading,
    room: Room,
    units: UnitSystem,
    ink: Ink,
    narrow: bool,
) -> None:
    if reading.value_c is None:
        return
    verdict = verdict_of(reading.value_c, place.low_c, place.high_c, reading.doubt)
    colour = {"hot": ink.hot, "cold": ink.cold, "unknown": ink.unknown}.get(verdict, ink.text)
    symbol = {"hot": "triangle-up", "cold": "triangle-down", "unknown": "circle-open"}.get(
        verdict, "circle"
    )
    x, value = place.minutes, temperature(reading.value_c, units)
    spread = temperature(reading.value_c + 2 * reading.sd_k, units) - value
    figure.add_scatter(
        name=f"reading {place.name}",
        x=[x],
        y=[value],
        mode="markers",
        marker={
            "symbol": symbol,
            "size": 15 if verdict in ("hot", "cold") else 12,
            "color": colour,
            "line": {"width": 2, "color": colour if verdict == "unknown" else ink.sheet},
        },
        error_y={"type": "data", "array": [spread], "color": colour, "thickness": 1.5, "width": 5},
        hovertemplate=f"{place.name} %{{y:.1f}} {shown_unit('temperature', units)} "
        f"{reading.doubt}<extra></extra>",
    )
    after = {
        "hot": f" hot by {whole_delta(reading.value_c - place.high_c, units)}",
        "cold": f" cold by {whole_delta(place.low_c - reading.value_c, units)}",
        "unknown": " not used",
        "inside": "",
    }[verdict]
    spots: list[tuple[float, float, Anchor]] = [
        (x, value, "right"),
        (x, value, "left"),
        (x, value, "above"),
        (x, value, "below"),
    ]
    # Mark and colour say the side too; by how much stands in the setpoint where room is short.
    if narrow or not room.fits(f"{round(value)}{after}", TEXT_PX + 2, spots, away=13):
        after = ""
    figure.add_annotation(
        {
            **room.place(f"{round(value)}{after}", TEXT_PX + 2, spots, away=13),
            "text": f"<b>{round(value)}</b>{after}",
            "font": {"size": TEXT_PX + 2, "color": colour},
        }
    )


def _limit(
    figure: go.Figure,
    path: Sequence[PathPoint],
    limit: Limit,
    room: Room,
    units: UnitSystem,
    ink: Ink,
    narrow: bool,
) -> None:
    """A dotted line with its name over the stretch of the path where the limit applies."""
    place = _place(path, limit.point)
    if place is None:
        return
    end = max(path[-1].minutes, 1.0)
    wide = 0.34 * end
    early = place.minutes < end / 2
    start = place.minutes if early else max(place.minutes - wide, 0.0)
    stop = min(place.minutes + wide, end) if early else place.minutes
    value = temperature(limit.value_c, units)
    figure.add_scatter(
        name=f"limit {limit.point} {limit.side}",
        x=[start, stop],
        y=[value, value],
        mode="lines",
        line={"width": 1.5, "dash": "dot", "color": ink.text},
        hovertemplate=f"{limit.name}, {limit.as_written or degrees(limit.value_c, units)}"
        f"<br>{limit.source}<extra></extra>",
    )
    words = degrees(limit.value_c, units) + ("" if narrow else f" {limit.name}")
    near, far = ("above", "below") if limit.side == "high" else ("below", "above")
    spots: list[tuple[float, float, Anchor]] = [
        (stop, value, "right"),
        (start, value, "left"),
        (stop, value, f"{near} left"),  # type: ignore[list-item]
        (start, value, f"{near} right"),  # type: ignore[list-item]
        (stop, value, f"{far} left"),  # type: ignore[list-item]
        (start, value, f"{far} right"),  # type: ignore[list-item]
    ]
    if not early:
        spots[:2] = spots[1::-1]
    figure.add_annotation(
        {
            **room.place(words, NOTE_PX + 1, spots, away=5),
            "text": words,
            "font": {"size": NOTE_PX + 1, "color": ink.text},
        }
    )
