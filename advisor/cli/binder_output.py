"""What 'advisor binder' prints for people."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING

import click

from advisor.cli.output import print_table
from advisor.units import shown, shown_number, shown_unit

if TYPE_CHECKING:
    from advisor.advice.assessment import Assessment
    from advisor.advice.sources import SourceHistory
    from advisor.binder import Check, Reading, SourceChange, Window
    from advisor.units import UnitSystem

# More sheets than this are shown as a table, not one by one.
_IN_FULL = 3
_WANTED_MARGIN_K = 30.0  # below the flash point, Eurobitume


def print_sheets(found: Sequence[Assessment], units: UnitSystem) -> None:
    """Print every sheet in full, or a table where there are many."""
    if len(found) > _IN_FULL:
        _print_table(found, units)
        return
    for one in found:
        _print_sheet(one, units)


def _print_sheet(one: Assessment, units: UnitSystem) -> None:
    sheet = one.certificate
    click.echo(f"\n{sheet.product}, {sheet.grade}; lot {sheet.lot}, {sheet.source}")
    added = f"; added at the plant: {', '.join(sheet.additives)}" * bool(sheet.additives)
    click.echo(f"Tested {sheet.tested_on} by {sheet.laboratory}; modifier: {sheet.modifier}{added}")
    for doubt in one.doubts:
        click.echo(f"LIKELY MISTAKE: {doubt.sentence.rstrip('.')}.")
    _print_readings(one.sheet.readings, units)
    _print_curve(one, units)
    for governed in (one.mixing, one.compaction):
        click.echo(f"\n{governed.purpose.capitalize()}:")
        print_windows(governed.governing, governed.beside, units)
        for words in governed.refused:
            click.echo(f"  {words}")
    _print_tank(one, units)
    if one.ageing:
        click.echo("\nHardening:")
        for hardening in one.ageing:
            click.echo(f"  {hardening.sentence}")
    _print_checks(one.checks)
    if one.cautions:
        click.echo("\nCautions:")
        for caution in one.cautions:
            click.echo(f"  {caution}")


def _print_readings(readings: Sequence[Reading], units: UnitSystem) -> None:
    click.echo()
    rows = [
        (
            reading.method,
            shown(reading.temperature_c, "temperature", units),
            reading.as_written,
            f"{reading.viscosity_pas:.4g} Pa.s",
            f"{reading.relative_sd:.1%}",
            f"{reading.repeat_sd:.1%}",
            "used" if reading.usable else "kept, not used",
        )
        for reading in readings
    ]
    heads = ("reading", "at", "as written", "viscosity", "1s, labs", "1s, one lab", "verdict")
    print_table(heads, rows)
    for reading in readings:
        at = shown(reading.temperature_c, "temperature", units)
        for words in reading.unusable or reading.remarks:
            click.echo(f"  {reading.method} at {at}: {words}")


def _print_curve(one: Assessment, units: UnitSystem) -> None:
    click.echo("\nCurve:")
    if one.sheet.refused:
        click.echo(f"  None. {one.sheet.refused}")
    curve = one.curve
    if curve is not None:
        intercept, slope = (float(part) for part in curve.parameters)
        click.echo(
            f"  log10 log10(cP) = {intercept:.4f} {slope:+.4f} log10(degrees Rankine), from "
            f"{curve.basis}"
        )
    if one.sheet.quality:
        click.echo(f"  {one.sheet.quality}")
    if one.sheet.suspicion and one.sheet.fit and one.sheet.fit.degrees_of_freedom > 0:
        click.echo(f"  {one.sheet.suspicion.sentence}")
    if curve is None:
        return
    for words in curve.notes:
        click.echo(f"  {words}")
    for eta in (0.17, 0.28):
        at, low, high = (
            shown(float(part), "temperature", units)
            for part in (curve.temperature_c(eta), *curve.temperature_interval_c(eta))
        )
        click.echo(f"  {eta:g} Pa.s at {at}, 95 % between {low} and {high}")


def print_windows(
    governing: Window | None, beside: Sequence[Window], units: UnitSystem
) -> None:  # fmt: skip
    """Print the governing window and those beside it, each with its source, then cautions."""
    rows = [("governs", *_cells(governing, units))] if governing is not None else []
    rows += [("beside" if governing else "", *_cells(window, units)) for window in beside]
    if rows:
        print_table(("", "rule", "low", "target", "high", "1s", "source"), rows)
    windows = [*([governing] if governing is not None else []), *beside]
    for caution in dict.fromkeys(caution for one in windows for caution in one.cautions):
        click.echo(f"  {caution}")


def _cells(window: Window, units: UnitSystem) -> tuple[str, ...]:
    low, target, high = (
        shown(float(part), "temperature", units)
        for part in (window.low_c, window.target_c, window.high_c)
    )
    if float(window.low_c) == float(window.high_c):
        low = high = ""
    sd = float(window.target_sd_k)
    return (
        window.method,
        low,
        target,
        high,
        shown(sd, "temperature_delta", units) if sd > 0.0 else "not stated",
        f"{window.source} ({window.how_known})",
    )


def _print_tank(one: Assessment, units: UnitSystem) -> None:
    click.echo("\nTank:")
    if one.pumping_c is not None:
        at, sd = one.pumping_c
        click.echo(
            f"  Pumps from {shown(at, 'temperature', units)}, 1s "
            f"{shown(sd, 'temperature_delta', units)} (2 Pa.s, European practice, from memory)."
        )
    if one.tank is not None:
        bounds = [("at least", bound) for bound in one.tank.lows]
        bounds += [("at most", bound) for bound in one.tank.highs]
        rows = [
            (
                f"  {side}",
                shown(bound.value_c, "temperature", units),
                bound.set_by,
                f"{bound.source} ({bound.how_known})",
            )
            for side, bound in bounds
        ]
        print_table(("  tank", "at", "set by", "source"), rows)
        for words in one.tank.cautions:
            click.echo(f"  {words}")
    if one.flash_margin_k is not None:
        margin, wanted = (
            shown(part, "temperature_delta", units)
            for part in (one.flash_margin_k, _WANTED_MARGIN_K)
        )
        click.echo(f"  Top of the mixing window to the flash point: {margin}; {wanted} are wanted.")


def _print_checks(checks: Sequence[Check]) -> None:
    click.echo("\nChecks:")
    if not checks:
        click.echo("  None: the grade is not known here, and no two readings cross.")
    words = {True: "inside  ", False: "OUTSIDE ", None: "not told"}
    for check in checks:
        source = f" [{check.source}]" if check.source else ""
        click.echo(f"  {words[check.agrees]}  {check.sentence}{source}")


def _print_table(found: Sequence[Assessment], units: UnitSystem) -> None:
    rows = []
    for one in found:
        window = one.mixing.governing
        cells = _cells(window, units)[1:5] if window is not None else ("", "", "", "")
        outside = sum(check.agrees is False for check in one.checks)
        notes = [f"{outside} outside"] * bool(outside) + ["likely mistake"] * bool(one.doubts)
        notes += ["no window"] * (window is None)
        sheet = one.certificate
        rows.append((sheet.lot, sheet.source, sheet.tested_on, *cells, ", ".join(notes)))
    print_table(("lot", "source", "tested", "low", "target", "high", "1s", "notes"), rows)
    click.echo("One lot in full: --lot LOT.")


def print_change(old: str, new: str, change: SourceChange, units: UnitSystem) -> None:
    """Print the shift of every temperature between two lots, and what would settle it."""
    click.echo(f"\nFrom lot {old} to lot {new}:")
    rows = [
        (
            f"{shift.name}, {shift.viscosity_pas:g} Pa.s",
            shown(shift.older_c, "temperature", units),
            shown(shift.newer_c, "temperature", units),
            shown(shift.shift_k, "temperature_delta", units),
            shown(shift.standard_error_k, "temperature_delta", units),
            "yes" if shift.detectable else "no",
        )
        for shift in change.shifts
    ]
    heads = ("temperature for", "before", "now", "shift", "standard error", "beyond test doubt")
    print_table(heads, rows)
    click.echo(f"  {change.sentence}\n  {change.settles}")


def print_history(history: SourceHistory, units: UnitSystem) -> None:
    """Print the control chart of one source as numbers."""
    click.echo(f"\nSuccessive lots of {history.source}, temperature at 0.17 Pa.s:")
    chart = history.chart
    rows = []
    for at, (lot, day, value) in enumerate(
        zip(history.lots, history.days, history.mixing_c, strict=True)
    ):
        cells = [lot, day, f"{shown_number(value, 'temperature', units):.1f}"]
        if chart is not None:
            over = bool(max(chart.rising[at], chart.falling[at]) > chart.limit)
            cells += [f"{chart.rising[at]:.1f}", f"{chart.falling[at]:.1f}", "outside" * over]
        rows.append(cells)
    heads = ["lot", "tested", shown_unit("temperature", units)]
    if chart is not None:
        heads += ["rising sum", "falling sum", f"limit {chart.limit:g}"]
    print_table(heads, rows)
    click.echo(f"  {history.words}")
    if history.left_out:
        click.echo(f"  Left out, no curve from readings alone: {', '.join(history.left_out)}.")
