"""The one sentence a manager reads first."""

from __future__ import annotations

from advisor.review.kernel import Findings
from advisor.review.result import Span
from advisor.units import UnitSystem, shown_number, shown_unit


def review_sentence(findings: Findings, currency: str, units: UnitSystem) -> str:
    """What the period cost above its windows, with its range, and where most of it was."""
    if findings.tonnes <= 0:
        return "No mix was made in this period."
    waste = findings.waste
    if waste.excess_tk <= 0:
        return "No mix in production was hotter than its window in this period."
    words = (
        f"{_span(_heat(waste.fuel_kwh, units))} {shown_unit('energy', units)} of fuel, "
        f"{_span(waste.money)} {currency}, went into mix hotter than its window"
    )
    mix = max(findings.mixes, key=lambda one: one.waste.excess_tk)
    share = mix.waste.excess_tk / sum(one.waste.excess_tk for one in findings.mixes)
    where = f", {share:.0%} of it into {mix.mix}" if len(findings.mixes) > 1 else ""
    early = _before_nine(findings)
    when = f", {early:.0%} of the hot tonnes before nine" if early >= 0.3 else ""
    return f"{words}{where}{when}."


def _heat(kwh: Span, units: UnitSystem) -> Span:
    return Span(
        *(shown_number(3.6e6 * one, "energy", units) for one in (kwh.low, kwh.middle, kwh.high))
    )


def _span(span: Span) -> str:
    """A range to two digits, as sure as it is."""
    return f"{_two_digits(span.low)} to {_two_digits(span.high)}"


def _two_digits(value: float) -> str:
    number = float(f"{value:.2g}")
    return f"{number:,.0f}" if abs(number) >= 10 else f"{number:g}"


def _before_nine(findings: Findings) -> float:
    hot = sum(cell.hot_tonnes for cell in findings.cells)
    early = sum(cell.hot_tonnes for cell in findings.cells if cell.hour < 9)
    return early / hot if hot > 0 else 0.0
