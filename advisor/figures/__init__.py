"""A result in, a Plotly figure out. Pure functions; nothing is read, decided or worked out here."""

from advisor.figures.bars import bars_height, cause_bars, mix_bars
from advisor.figures.drawn import Reading, TicketPoint, Trace, WindowSpan
from advisor.figures.heat_path import heat_path, heat_path_words
from advisor.figures.ink import ink_of
from advisor.figures.thinning import thinned, with_gaps
from advisor.figures.trend import trend, trend_words
from advisor.figures.week_field import field_height, field_words, week_field

__all__ = [
    "Reading",
    "TicketPoint",
    "Trace",
    "WindowSpan",
    "bars_height",
    "cause_bars",
    "field_height",
    "field_words",
    "heat_path",
    "heat_path_words",
    "ink_of",
    "mix_bars",
    "thinned",
    "trend",
    "trend_words",
    "week_field",
    "with_gaps",
]
