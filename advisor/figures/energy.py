"""Where the burner's heat goes, as the plant runs and as it would run."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import plotly.graph_objects as go

from advisor.figures.base import NOTE_PX, TEXT_PX, bare, note
from advisor.figures.ink import LIGHT, Ink
from advisor.units import UnitSystem, shown_number, shown_unit

_ROW_PX = 29
_MARGIN = (176, 96, 4, 28)
_J_KG_PER_KWH_T = 3600.0
# What a reader is told, and the parts of the balance it is made of.
SHOWN: tuple[tuple[str, tuple[str, ...]], ...] = (
    ("drying stone and RAP", ("evaporation", "superheat", "residual water")),
    ("heating stone", ("aggregate", "transfer")),
    ("heating RAP", ("recycled",)),
    ("heating filler, binder", ("filler", "binder")),
    ("water from the fuel", ("fuel hydrogen",)),
    ("flue gas", ("combustion gas",)),
    ("excess and leaked air", ("excess air", "leakage air")),
    ("shell", ("casing",)),
)

Parts = Sequence[tuple[str, float]]


def energy_bars(
    before: Parts,
    after: Parts | None,
    units: UnitSystem = "si",
    ink: Ink = LIGHT,
    narrow: bool = False,
) -> go.Figure:
    """Figure of gross heat by where it goes, a bar as it runs and a line where it would end.

    Parameters
    ----------
    before, after : name and heat [kWh/t] of each part; ``after`` is None where nothing changes
    units : 'si' or 'us'
    ink : palette
    narrow : whether it has to fit a phone
    """
    figure = bare(ink, _MARGIN)
    now = shown_parts(before)
    if not now:
        return note(figure, "No heat to show.", ink)
    then = dict(shown_parts(after)) if after is not None else None
    unit = shown_unit("heat_per_mass", units)
    rows = list(range(len(now)))
    values = [_number(value, units) for _, value in now]
    figure.add_bar(
        name="now",
        orientation="h",
        y=rows,
        x=values,
        width=0.5,
        marker={"color": ink.window, "line": {"width": 0}},
        hovertemplate=f"now %{{x:.1f}} {unit}<extra></extra>",
    )
    words: list[dict[str, object]] = []
    ends: list[dict[str, object]] = []
    for row, (name, value) in enumerate(now):
        other = None if then is None else then.get(name, 0.0)
        words.append(
            {"x": 0, "xanchor": "right", "xshift": -8, "text": name, "font": {"size": TEXT_PX}}
        )
        words.append(
            {
                "x": max(_number(value, units), _number(other or 0.0, units)),
                "xanchor": "left",
                "xshift": 8,
                "text": _told(value, other, units),
                "font": {"size": NOTE_PX + 1},
            }
        )
        for one in words[-2:]:
            one.update({"y": row, "showarrow": False, "font_color": ink.text})
        if other is not None:
            end = _number(other, units)
            ends.append(
                {
                    "type": "line",
                    "x0": end,
                    "x1": end,
                    "y0": row - 0.36,
                    "y1": row + 0.36,
                    "line": {"color": ink.target, "width": 3},
                }
            )
    # All at once: each one added alone checks those before it again.
    figure.update_layout(annotations=words, shapes=ends)
    longest = max(*values, *(_number(one, units) for one in (then or {"": 0.0}).values()))
    figure.update_xaxes(
        range=[min(0.0, *values), longest * 1.02],
        showgrid=True,
        ticksuffix=f" {unit}",
        showticksuffix="last",
        tickangle=0,
        nticks=2 if narrow else 4,
    )
    figure.update_yaxes(range=[len(now) - 0.5, -0.5], visible=False)
    return figure


def energy_words(before: Parts, after: Parts | None, units: UnitSystem) -> str:
    """One sentence for those who cannot see the figure."""
    unit = shown_unit("heat_per_mass", units)
    then = dict(shown_parts(after)) if after is not None else {}
    told = "; ".join(
        f"{name} {_number(value, units):.1f}"
        + (f", then {_number(then[name], units):.1f}" if name in then else "")
        for name, value in shown_parts(before)
    )
    return f"Gross heat in {unit}: {told}."


def energy_height(before: Parts) -> int:
    """Height [px] of the figure."""
    return max(len(shown_parts(before)), 1) * _ROW_PX + _MARGIN[2] + _MARGIN[3]


def shown_parts(parts: Parts) -> list[tuple[str, float]]:
    """The parts of a balance [kWh/t] put together as they are told; those of no size left out."""
    by_name: Mapping[str, float] = dict(parts)
    told = [(name, sum(by_name.get(one, 0.0) for one in of)) for name, of in SHOWN]
    return [(name, value) for name, value in told if abs(value) >= 0.05]


def _number(kwh_t: float, units: UnitSystem) -> float:
    return shown_number(kwh_t * _J_KG_PER_KWH_T, "heat_per_mass", units)


def _told(value: float, other: float | None, units: UnitSystem) -> str:
    places = 1 if units == "si" else 0
    number = _number(value, units)
    if other is None:
        return f"{number:,.{places}f}"
    change = _number(other, units) - number
    if abs(change) < 0.5 * 10**-places:
        return f"{number:,.{places}f}"
    return f"{number:,.{places}f}  {change:+,.{places}f}"
