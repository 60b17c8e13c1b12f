"""advisor binder: what laboratory sheets say, how good that is, and what to run."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

from advisor.cli.asked import json_option, us_option

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from advisor.advice.assessment import Assessment
    from advisor.settings.certificate import Certificate
    from advisor.units import UnitSystem


def _asked(command: Callable[..., Any]) -> Callable[..., Any]:
    """The options of the command, in the order its help shows them."""
    for option in reversed((
        click.option("--lot", help="Only the sheet of this lot, where FILES hold several."),
        click.option(
            "--target", default="mixing", show_default=True, metavar="RULE",
            help="Rule for mixing plain binder: a row of config/viscosity_targets.yaml.",
        ),
        click.option(
            "--against", type=click.Path(path_type=Path), metavar="FILE",
            help="Sheet of the binder used so far, to compare the one of FILES with.",
        ),
        click.option(
            "--rap", type=click.Path(path_type=Path), metavar="FILE",
            help="Sheet of recovered RAP or RAS binder to blend in; with --rap-share.",
        ),
        click.option("--rap-share", metavar="SHARE", help="Its share of the total binder: '20 %'."),
        click.option(
            "--blending", nargs=2, default=("50 %", "100 %"), show_default=True,
            metavar="LOW HIGH", help="How much of the RAP binder takes part.",
        ),
        click.option("--stored", metavar="TIME", help="Time in the tank: '72 h', '10 d'."),
        click.option("--stored-at", metavar="TEMPERATURE", help="Tank temperature: '165 C'."),
        click.option("--liquid", metavar="HEIGHT", help="Height of the liquid: '1.2 m'."),
        click.option("--circulated", is_flag=True, help="The return falls through air."),
        click.option("--in-silo", metavar="TIME", help="Time the mix spends in the silo: '12 h'."),
        click.option(
            "--chart", type=click.Path(path_type=Path, dir_okay=False), metavar="FILE",
            help="Write the chart as a page (.html) that needs no internet.",
        ),
    )):  # fmt: skip
        command = option(command)
    return command


@click.command()
@click.argument("files", nargs=-1, required=True, type=click.Path(path_type=Path))
@_asked
@us_option
@json_option
def binder(
    files: tuple[Path, ...],
    lot: str | None,
    target: str,
    against: Path | None,
    chart: Path | None,
    units: UnitSystem,
    as_json: bool,
    **also: Any,
) -> None:
    """Turn the sheets in FILES into viscosity, curve, windows and checks, with their doubt.

    FILES are YAML: the keys of one sheet, a list of sheets under 'certificates', or a records file.
    No plant folder is needed, and nothing is recorded.

    \b
    Examples:
      advisor binder demo_plant/records/certificates.yaml --lot A-2641
      advisor binder new.yaml --against old.yaml --chart both.html
      advisor binder new.yaml --rap rap.yaml --rap-share "20 %"
      advisor binder new.yaml --stored "72 h" --stored-at "165 C" --liquid "1.2 m"
      advisor binder lots/*.yaml
    """
    from advisor.advice.assessment import assess
    from advisor.advice.sources import compare, histories
    from advisor.cli import binder_output as shown
    from advisor.cli.output import print_json
    from advisor.settings.certificate_files import read_certificates

    sheets = _chosen(read_certificates(files), lot)
    older = None if against is None else _only(read_certificates([against]), "--against")
    one_sheet = older is not None or also["rap"] is not None or chart is not None
    newer = _only(sheets, "FILES") if one_sheet else sheets[0]
    found = [assess(sheet, target, units) for sheet in sheets]
    before = None if older is None else assess(older, target, units)
    change = None if older is None else compare(older, newer, units)
    blended = _blended(newer, also["rap"], also["rap_share"], also["blending"])
    kept_hot = _kept_hot(also["stored"], also["stored_at"], also["liquid"], also["circulated"],
                         also["in_silo"], units)  # fmt: skip
    past = histories(sheets, units)
    if chart is not None:
        _write_chart(chart, found[0], before, units)
    if as_json:
        print_json({
            "sheets": found, "against": before, "change": change, "with_rap": blended,
            "kept_hot": kept_hot, "histories": past,
        })  # fmt: skip
        return
    shown.print_sheets(found, units)
    if blended:
        click.echo("\nWith the RAP binder:")
        shown.print_windows(None, blended, units)
    for words in kept_hot:
        click.echo(f"\n{words}")
    if change is not None and older is not None:
        shown.print_change(older.lot, newer.lot, change, units)
    for history in past:
        shown.print_history(history, units)
    if chart is not None:
        click.echo(f"\nChart written: {chart}")


def _chosen(sheets: Sequence[Certificate], lot: str | None) -> list[Certificate]:
    from advisor.errors import FaultyInput
    from advisor.settings.faults import nearest

    kept = [one for one in sheets if lot in (None, one.lot)]
    if not kept:
        problem = f"No sheet is of lot '{lot}'."
        remedy = nearest(str(lot), [one.lot for one in sheets])
        raise FaultyInput.of("no-such-lot", problem, remedy, value=str(lot))
    return kept


def _only(sheets: Sequence[Certificate], where: str) -> Certificate:
    from advisor.errors import FaultyInput

    if len(sheets) != 1:
        raise FaultyInput.of(
            "one-sheet",
            f"One sheet is wanted for this; {where} hold{'s' * (where != 'FILES')} {len(sheets)}.",
            "Choose one with --lot, or give a file with one sheet.",
        )
    return sheets[0]


def _blended(
    virgin: Certificate, rap: Path | None, share: str | None, blending: tuple[str, str]
) -> tuple[Any, ...]:
    """Windows with RAP binder; none where it is not asked for."""
    from advisor.advice.sources import with_rap
    from advisor.errors import FaultyInput
    from advisor.settings.certificate_files import read_certificates
    from advisor.units import parse_quantity

    if (rap is None) != (share is None):
        raise FaultyInput.of(
            "half-a-blend", "--rap and --rap-share go together.", "Give both, or none."
        )
    if rap is None:
        return ()
    low, high = (parse_quantity(one, "fraction") for one in blending)
    sheet = _only(read_certificates([rap]), "--rap")
    return with_rap(virgin, sheet, parse_quantity(share, "fraction"), low, high)


def _kept_hot(
    stored: str | None,
    at: str | None,
    liquid: str | None,
    circulated: bool,
    in_silo: str | None,
    units: UnitSystem,
) -> tuple[str, ...]:
    """What tank and silo do to the binder, in sentences; none where it is not asked for."""
    from advisor.binder import exposed_surface_m2_t, silo_ageing_caution, tank_hardening
    from advisor.errors import FaultyInput
    from advisor.units import parse_quantity

    found = []
    together = (stored, at, liquid)
    if any(together) and not all(together):
        raise FaultyInput.of(
            "half-a-storage",
            "--stored, --stored-at and --liquid go together.",
            "Time, temperature and the height of the liquid decide the hardening in a tank.",
        )
    if all(together):
        height = parse_quantity(liquid, "length")
        if height <= 0.0:
            raise FaultyInput.of(
                "no-liquid", f"A height of '{liquid}' holds nothing.", "Write it as '1.2 m'."
            )
        hours = parse_quantity(stored, "duration") / 3600.0
        hot_c = parse_quantity(at, "temperature")
        surface = float(exposed_surface_m2_t(height))
        hardening = tank_hardening(hours, hot_c, surface, circulated, units)
        found.append(f"In the tank: {hardening.sentence}")
    if in_silo is not None:
        hours = parse_quantity(in_silo, "duration") / 3600.0
        quiet = f"{hours:.0f} h in the silo: no hardening to reckon with in dense mix."
        found.append(f"In the silo: {silo_ageing_caution(hours) or quiet}")
    return tuple(found)


def _write_chart(path: Path, one: Assessment, before: Assessment | None, units: UnitSystem) -> None:
    from advisor.errors import FaultyInput
    from advisor.figures.viscosity import viscosity_page

    if path.suffix.lower() not in (".html", ".htm"):
        raise FaultyInput.of(
            "chart-kind",
            f"A chart is written as a page, not as '{path.suffix or path.name}'.",
            "Give a name that ends with .html.",
            value=str(path),
        )
    path.write_text(viscosity_page(one, before, units), encoding="utf-8")
