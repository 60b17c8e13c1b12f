"""Sheets beside one another: a change of source, and the drift of successive lots of one source."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from advisor.binder import (
    DriftChart,
    SourceChange,
    ViscosityCurve,
    Window,
    compare_curves,
    curve_of_sheet,
    drift_chart,
    rap_blend_curve,
)
from advisor.errors import MissingInput
from advisor.settings.binder_tables import viscosity_target
from advisor.settings.binders import certificate_readings, certificate_sheet, target_window
from advisor.settings.certificate import Certificate
from advisor.units import UnitSystem, shown_number, shown_unit


def compare(older: Certificate, newer: Certificate, units: UnitSystem = "si") -> SourceChange:
    """How far every temperature shifts from ``older`` to ``newer``, and whether tests can see it.

    Where one laboratory measured both only its own repeatability counts. Raises MissingInput where
    one of the two gives no curve.
    """
    same = older.laboratory == newer.laboratory
    curves = []
    for one in (older, newer):
        sheet = certificate_sheet(one, same)
        if sheet.curve is None:
            raise MissingInput.of(
                "no-curve",
                f"Lot {one.lot} gives no curve to compare: {sheet.refused}",
                "Compare the suppliers' ranges, or measure the viscosity at two temperatures.",
                value=one.lot,
            )
        curves.append(sheet.curve)
    asked = [(name, viscosity_target(name).target) for name in ("mixing", "compaction", "pumping")]
    return compare_curves(curves[0], curves[1], asked, same_laboratory=same, units=units)


def with_rap(
    virgin: Certificate, rap: Certificate, share_of_binder: float, low: float, high: float
) -> tuple[Window, Window]:
    """Mixing and compaction window of the ``virgin`` binder with that of RAP or RAS.

    ``share_of_binder`` is the share of the total binder the ``rap`` sheet describes, ``low`` to
    ``high`` how much of it blends. Raises MissingInput where one of the two gives no curve.
    """
    fresh = certificate_sheet(virgin).curve
    recovered = curve_of_sheet(
        [
            replace(one, sample=replace(one.sample, condition="original"))
            for one in certificate_readings(rap)
        ],
        None,
    ).curve
    if fresh is None or recovered is None:
        lot = virgin.lot if fresh is None else rap.lot
        raise MissingInput.of(
            "no-curve",
            f"Lot {lot} gives no curve to blend.",
            "Measure its viscosity at two temperatures.",
            value=lot,
        )
    blend = rap_blend_curve(fresh, recovered, share_of_binder, low, high)
    mixing, compaction = (
        target_window(blend, viscosity_target(name)) for name in ("mixing", "compaction")
    )
    return mixing, compaction


@dataclass(frozen=True, eq=False)
class SourceHistory:
    """Successive certificates of one source: mixing temperatures [C] in date order, and drift.

    The chart is in the units it was asked for.
    ``chart`` is None where there are too few; ``words`` then says so. ``left_out`` names lots
    whose readings alone fix no curve.
    """

    source: str
    lots: tuple[str, ...]
    days: tuple[str, ...]
    mixing_c: tuple[float, ...]
    chart: DriftChart | None
    words: str
    left_out: tuple[str, ...]


def histories(
    certificates: Sequence[Certificate], units: UnitSystem = "si"
) -> tuple[SourceHistory, ...]:
    """The history of every source with two certificates or more, oldest certificate first."""
    by_source: dict[str, list[Certificate]] = {}
    for one in sorted(certificates, key=lambda one: (one.tested_on, one.lot)):
        by_source.setdefault(f"{one.source}, {one.grade}", []).append(one)
    return tuple(
        _history(name, sheets, units) for name, sheets in by_source.items() if len(sheets) > 1
    )


def _history(source: str, sheets: Sequence[Certificate], units: UnitSystem) -> SourceHistory:
    wanted = viscosity_target("mixing").target
    kept = [(one, curve) for one in sheets if (curve := _measured_curve(one)) is not None]
    values = tuple(float(curve.temperature_c(wanted)) for _, curve in kept)
    test_sd_k = max((float(curve.temperature_sd_k(wanted)) for _, curve in kept), default=0.0)
    told = [shown_number(value, "temperature", units) for value in values]
    test_sd = shown_number(test_sd_k, "temperature_delta", units)
    try:
        chart: DriftChart | None = drift_chart(told, test_sd, shown_unit("temperature", units))
        words = chart.sentence if chart else ""
    except MissingInput as error:
        chart, words = None, str(error)
    return SourceHistory(
        source,
        tuple(one.lot for one, _ in kept),
        tuple(one.tested_on.isoformat() for one, _ in kept),
        values,
        chart,
        words,
        tuple(one.lot for one in sheets if one.lot not in {each.lot for each, _ in kept}),
    )


def _measured_curve(certificate: Certificate) -> ViscosityCurve | None:
    """The curve within one laboratory, where readings alone fix it."""
    sheet = certificate_sheet(certificate, True)
    return sheet.curve if sheet.fit is not None and not sheet.fit.used_prior else None
