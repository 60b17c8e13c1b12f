"""The windows of the coming hours at discharge, and where there is none."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime, timedelta
from zoneinfo import ZoneInfo

import plotly.graph_objects as go

from advisor.advice.coming_day import HourAhead
from advisor.figures.base import NOTE_PX, bare, note, temperature, temperature_axis
from advisor.figures.clock import local_ticks, naive_utc
from advisor.figures.ink import LIGHT, Ink
from advisor.units import UnitSystem

_LAST_HOUR = timedelta(hours=1)


def coming_hours(
    hours: Sequence[HourAhead],
    last_good_at: datetime | None,
    zone: ZoneInfo,
    units: UnitSystem = "si",
    ink: Ink = LIGHT,
    narrow: bool = False,
) -> go.Figure:
    """Figure of low, target and high by load-out; where limits clash, their gap is hatched.

    Parameters
    ----------
    hours : the coming hours, in order
    last_good_at : the last load-out with a window, marked; None marks nothing
    zone : time zone of the words on the time axis
    units : 'si' or 'us'
    ink : palette
    narrow : whether the figure is for a phone: fewer ticks
    """
    figure = bare(ink, (62, 16, 22, 24))
    known = [one for one in hours if one.low_c is not None and one.high_c is not None]
    if not known:
        return note(figure, "No window is known for these hours.", ink)
    ends = [one.load_out_at for one in hours[1:]] + [hours[-1].load_out_at + _LAST_HOUR]
    for one, end in zip(hours, ends, strict=True):
        if one.low_c is None or one.high_c is None:
            continue
        _block(figure, one, end, last_good_at, units, ink)
    reach = [value for one in known for value in (one.low_c, one.high_c) if value is not None]
    room = max(2.0, 0.12 * (max(reach) - min(reach)))
    temperature_axis(figure, min(reach) - room, max(reach) + room, units, ink, most=5)
    start = hours[0].load_out_at
    ticks, words = local_ticks(start, ends[-1], zone, most=4 if narrow else 9)
    figure.update_xaxes(
        type="date", range=[naive_utc(start), naive_utc(ends[-1])], tickvals=ticks, ticktext=words
    )
    if last_good_at is not None:
        at = naive_utc(last_good_at)
        figure.add_vline(x=at, line={"color": ink.text, "width": 2})
        figure.add_annotation(
            x=at, y=1, yref="paper", yanchor="bottom", showarrow=False,
            text=f"last good load {last_good_at.astimezone(zone):%H:%M}",
            font={"size": NOTE_PX + 1, "color": ink.text},
        )  # fmt: skip
    return figure


def coming_hours_words(hours: Sequence[HourAhead], zone: ZoneInfo) -> str:
    """One sentence for those who cannot see the figure."""
    shut = [one for one in hours if one.target_c is None]
    if not shut:
        return "There is a window in every hour shown."
    first = shut[0].load_out_at.astimezone(zone)
    return f"{len(shut)} of {len(hours)} hours have no window, the first at {first:%H:%M}."


def _block(
    figure: go.Figure,
    one: HourAhead,
    end: datetime,
    last_good_at: datetime | None,
    units: UnitSystem,
    ink: Ink,
) -> None:
    """One hour: its window with the target, or the gap between limits that clash."""
    assert one.low_c is not None and one.high_c is not None  # noqa: S101 - its callers look
    if one.target_c is not None and last_good_at is not None:
        # the hour in which the window shuts is drawn as far as it is open
        end = last_good_at if one.load_out_at <= last_good_at < end else end
    left, right = naive_utc(one.load_out_at), naive_utc(end)
    low, high = temperature(one.low_c, units), temperature(one.high_c, units)
    open_ = one.target_c is not None
    figure.add_scatter(
        x=[left, right, right, left, left],
        y=[low, low, high, high, low],
        mode="lines",
        line={"width": 0 if open_ else 1, "color": ink.unknown, "dash": "dot"},
        fill="toself",
        fillcolor=ink.window if open_ else "rgba(0,0,0,0)",
        fillpattern=None if open_ else {"shape": "/", "fgcolor": ink.unknown, "size": 8},
        hoverinfo="skip",
        name="window" if open_ else "no window",
    )
    if one.target_c is not None:
        target = temperature(one.target_c, units)
        figure.add_scatter(
            x=[left, right], y=[target, target], mode="lines",
            line={"color": ink.target, "width": 3}, hoverinfo="skip", name="target",
        )  # fmt: skip
