"""The bare sheet every figure starts from: no frame, thin rules, our type, no motion."""

from __future__ import annotations

from typing import Any

import plotly.graph_objects as go

from advisor.figures.ink import FONT, Ink
from advisor.units import UnitSystem, shown_number, shown_unit

# One look for every figure in a page: no tool bar, no logo, no zoom by accident.
STILL = {"displayModeBar": False, "responsive": True, "scrollZoom": False, "doubleClick": False}
ZOOMED = {"displayModeBar": False, "responsive": True, "scrollZoom": False, "doubleClick": "reset"}

TEXT_PX = 14
NOTE_PX = 12


def bare(ink: Ink, margin: tuple[int, int, int, int]) -> go.Figure:
    """An empty figure that fills its place, with margins left, right, top, bottom [px]."""
    left, right, top, bottom = margin
    axis: dict[str, Any] = {
        "showgrid": False,
        "zeroline": False,
        "showline": False,
        "ticks": "",
        "fixedrange": True,
        "tickfont": {"size": NOTE_PX + 1, "color": ink.quiet},
        "title": {"font": {"size": NOTE_PX + 1, "color": ink.quiet}},
        "gridcolor": ink.rule,
        "gridwidth": 1,
    }
    return go.Figure(
        layout={
            "template": None,
            "autosize": True,
            "margin": {"l": left, "r": right, "t": top, "b": bottom, "pad": 0},
            "paper_bgcolor": "rgba(0,0,0,0)",
            "plot_bgcolor": "rgba(0,0,0,0)",
            "font": {"family": FONT, "size": TEXT_PX, "color": ink.text},
            "showlegend": False,
            "dragmode": False,
            "hovermode": "closest",
            "hoverlabel": {
                "bgcolor": ink.sheet,
                "bordercolor": ink.edge,
                "font": {"family": FONT, "size": TEXT_PX, "color": ink.text},
            },
            "xaxis": axis,
            "yaxis": dict(axis),
        }
    )


def temperature(value_c: float, units: UnitSystem) -> float:
    """Number to draw for a temperature [C]."""
    return shown_number(value_c, "temperature", units)


def degrees(value_c: float, units: UnitSystem) -> str:
    """Whole degrees without the unit, such as '156'."""
    return f"{round(temperature(value_c, units)):d}"


def delta(value_k: float, units: UnitSystem) -> float:
    """Number to draw for a temperature difference [K]."""
    return shown_number(value_k, "temperature_delta", units)


def whole_delta(value_k: float, units: UnitSystem) -> str:
    """A difference in whole degrees without the unit; 'under 1' where it rounds to nothing."""
    number = abs(delta(value_k, units))
    return f"{round(number):d}" if number >= 0.5 else "under 1"


def temperature_axis(
    figure: go.Figure, low_c: float, high_c: float, units: UnitSystem, ink: Ink, most: int = 6
) -> None:
    """Give the figure a temperature axis from low to high with round ticks and the unit on top."""
    low, high = temperature(low_c, units), temperature(high_c, units)
    step = next((one for one in (5, 10, 20, 50, 100) if (high - low) / one <= most), 200)
    first = int(-(-low // step)) * step
    ticks = list(range(first, int(high) + 1, step))
    words = [str(tick) for tick in ticks]
    if words:
        words[-1] = f"{words[-1]} {shown_unit('temperature', units)}"
    figure.update_yaxes(
        range=[low, high], tickvals=ticks, ticktext=words, showgrid=True, gridcolor=ink.rule
    )


def note(figure: go.Figure, words: str, ink: Ink) -> go.Figure:
    """The figure with a sentence in the middle in place of a drawing."""
    figure.update_xaxes(visible=False, range=[0, 1])
    figure.update_yaxes(visible=False, range=[0, 1])
    figure.add_annotation(
        x=0.5,
        y=0.5,
        text=words,
        showarrow=False,
        font={"size": TEXT_PX, "color": ink.quiet},
    )
    return figure


def blank() -> go.Figure:
    """A figure with nothing in it, for the moment before there is an answer."""
    return go.Figure(
        layout={
            "template": None,
            "xaxis": {"visible": False},
            "yaxis": {"visible": False},
            "paper_bgcolor": "rgba(0,0,0,0)",
            "plot_bgcolor": "rgba(0,0,0,0)",
        }
    )
