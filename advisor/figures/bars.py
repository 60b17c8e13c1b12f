"""Ranked bars: what ran outside by cause and by mix."""

from __future__ import annotations

from collections.abc import Sequence

import plotly.graph_objects as go

from advisor.figures.base import NOTE_PX, TEXT_PX, bare, note
from advisor.figures.ink import COLD_MARK, HOT_MARK, LIGHT, Ink
from advisor.review.ranking import cause_shares
from advisor.review.result import Excursion, Review
from advisor.units import UnitSystem, shown_number, shown_unit

_ROW_PX = 46
_MARGIN = (8, 124, 2, 30)


def cause_bars(
    excursions: Sequence[Excursion], units: UnitSystem = "si", ink: Ink = LIGHT
) -> go.Figure:
    """Figure of tonnes outside the window at the drum by likely cause, the most fuel on top.

    Parameters
    ----------
    excursions : those to rank
    units : 'si' or 'us'
    ink : palette
    """
    shares = cause_shares(excursions)
    figure = bare(ink, _MARGIN)
    if not shares:
        return note(figure, "No excursion to explain.", ink)
    names = [f"{one.cause}, {one.count} ×" for one in shares]
    return _sides(
        figure,
        names,
        [one.hot_tonnes for one in shares],
        [one.cold_tonnes for one in shares],
        [],
        units,
        ink,
    )


def mix_bars(review: Review, units: UnitSystem = "si", ink: Ink = LIGHT) -> go.Figure:
    """Figure of tonnes inside, hot and cold by mix, the most outside on top.

    Parameters
    ----------
    review : Review
    units : 'si' or 'us'
    ink : palette
    """
    figure = bare(ink, _MARGIN)
    if not review.mixes:
        return note(figure, "No mix was made.", ink)
    mixes = sorted(review.mixes, key=lambda one: -one.hot_tonnes - one.cold_tonnes)
    return _sides(
        figure,
        [one.mix for one in mixes],
        [one.hot_tonnes for one in mixes],
        [one.cold_tonnes for one in mixes],
        [one.inside_tonnes for one in mixes],
        units,
        ink,
    )


def bars_height(count: int) -> int:
    """Height [px] of a figure of ``count`` bars."""
    return max(count, 1) * _ROW_PX + _MARGIN[2] + _MARGIN[3]


def _sides(
    figure: go.Figure,
    names: Sequence[str],
    hot: Sequence[float],
    cold: Sequence[float],
    inside: Sequence[float],
    units: UnitSystem,
    ink: Ink,
) -> go.Figure:
    """Stacked bars hot, cold, inside; the name lies above its bar, the numbers behind it."""
    unit = shown_unit("mass", units)
    rows = list(range(len(names)))
    parts = [("hot", hot, ink.hot, "/"), ("cold", cold, ink.cold, "\\")]
    if inside:
        parts.append(("inside", inside, ink.window, ""))
    for name, tonnes, colour, hatch in parts:
        figure.add_bar(
            name=name,
            orientation="h",
            y=rows,
            x=[_mass(one, units) for one in tonnes],
            width=0.36,
            marker={
                "color": colour,
                "line": {"width": 0},
                "pattern": {"shape": hatch, "fgcolor": ink.sheet, "size": 6, "solidity": 0.16},
            },
            hovertemplate=f"{name} %{{x:.0f}} {unit}<extra></extra>",
        )
    longest = max(
        _mass(h + c + (inside[row] if inside else 0.0), units)
        for row, (h, c) in enumerate(zip(hot, cold, strict=True))
    )
    for row, name in enumerate(names):
        figure.add_annotation(
            x=0,
            y=row - 0.24,
            xanchor="left",
            yanchor="bottom",
            text=name,
            showarrow=False,
            font={"size": TEXT_PX, "color": ink.text},
        )
        told = [
            f"{mark} {_mass(tonnes, units):,.0f}"
            for mark, tonnes in ((HOT_MARK, hot[row]), (COLD_MARK, cold[row]))
            if _mass(tonnes, units) >= 0.5
        ]
        whole = hot[row] + cold[row] + (inside[row] if inside else 0.0)
        figure.add_annotation(
            x=_mass(whole, units),
            y=row,
            xanchor="left",
            xshift=6,
            text="  ".join(told) or "none",
            showarrow=False,
            font={"size": NOTE_PX + 1, "color": ink.text},
        )
    step = _round_step(longest)
    ticks = [step * n for n in range(int(longest / step) + 1)]
    figure.update_layout(barmode="stack")
    figure.update_xaxes(
        range=[0, longest * 1.02],
        tickvals=ticks,
        ticktext=[f"{one:,.0f} {unit}" if one == ticks[-1] else f"{one:,.0f}" for one in ticks],
        showgrid=True,
    )
    figure.update_yaxes(range=[len(names) - 0.6, -0.68], visible=False)
    return figure


def _mass(tonnes: float, units: UnitSystem) -> float:
    return shown_number(1000 * tonnes, "mass", units)


def _round_step(longest: float) -> float:
    """A round step that makes three to six ticks up to ``longest``."""
    steps = (m * 10**e for e in range(6) for m in (1, 2, 5))
    return float(next((one for one in steps if longest / one <= 4.5), 1_000_000))
