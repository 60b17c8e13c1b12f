"""What config/ says of binder: precision of tests, viscosity targets, grades, modifiers."""

from __future__ import annotations

import re
from functools import cache
from typing import get_args

from advisor.binder import (
    AvtsPrior,
    Grade,
    GradeLimit,
    Modifier,
    Precision,
    PrecisionTable,
    ViscosityTarget,
    prior_from_viscosities,
)
from advisor.binder.grades import Property
from advisor.errors import FaultyInput
from advisor.settings.faults import nearest
from advisor.settings.tables import Row, load_table

ANY_BINDER = "any paving binder"


@cache
def precision_table() -> PrecisionTable:
    """Precision of every test in config/precision.yaml."""
    return PrecisionTable(tuple(_precision(row) for row in load_table("precision").rows))


def _precision(row: Row) -> Precision:
    origin = row.origin("several")
    return Precision(
        row["method"],
        row["one"],
        row["several"],
        origin.unit == "%",
        origin.source,
        origin.how_known,
        row.get("from", 0.0),
        row.get("to", float("inf")),
    )


@cache
def viscosity_targets() -> tuple[ViscosityTarget, ...]:
    """Every target in config/viscosity_targets.yaml."""
    return tuple(_target(row) for row in load_table("viscosity_targets").rows)


@cache
def viscosity_target(name: str) -> ViscosityTarget:
    """The target called ``name``; FaultyInput lists the names known where there is none."""
    return _target(load_table("viscosity_targets").row(name))


def target_shear_rate_per_s(name: str) -> float:
    """Shear rate [1/s] the target called ``name`` is meant for; 0 at rest."""
    return float(load_table("viscosity_targets").row(name).get("shear_rate", 0.0))


def _target(row: Row) -> ViscosityTarget:
    origin = row.origin("target")
    return ViscosityTarget(
        row["name"],
        row["purpose"],
        row["basis"],
        row["low"],
        row["target"],
        row["high"],
        origin.source,
        origin.how_known,
    )


@cache
def known_modifiers() -> dict[str, str]:
    """Name of a modifier in config/modifiers.yaml by every spelling of it, in small letters."""
    rows = load_table("modifiers").rows
    names = {row["name"].lower(): row["name"] for row in rows}
    return names | {row["also"].lower(): row["name"] for row in rows if "also" in row}


@cache
def modifier_named(name: str) -> Modifier:
    """The modifier called ``name``; FaultyInput lists the names known where there is none."""
    row = load_table("modifiers").row(known_modifiers().get(name.lower(), name))
    origin = next(iter(row.origins.values()), None)
    return Modifier(
        kind=row["kind"],
        name=row["name"],
        plain_rule=row["plain_rule"],
        line=row["line"],
        reason=row["reason"],
        source=row.source,
        how_known=origin.how_known if origin and not row.how_known else row.how_known,
        viscosity_low=row.get("viscosity_low", 1.0),
        viscosity_high=row.get("viscosity_high", 1.0),
        applies_above_c=row.get("applies_above"),
        offset_low_k=row.get("offset_low", 0.0),
        offset_high_k=row.get("offset_high", 0.0),
        caution=row.get("caution", ""),
    )


@cache
def grade_named(name: str) -> Grade:
    """The grade a sheet calls ``name``, however it is spaced or parted.

    Raises FaultyInput with the nearest names where config/grades.yaml has none.
    """
    found = find_grade(name)
    if found is None:
        names = [row["name"] for row in load_table("grades").rows]
        raise FaultyInput.of(
            "unknown-grade",
            f"'{name}' is no grade of config/grades.yaml.",
            nearest(name, names),
            field="grade",
            value=name,
        )
    return found


@cache
def find_grade(name: str) -> Grade | None:
    """The grade a sheet calls ``name``, or None where config/grades.yaml has none."""
    wanted = _plain(name)
    for row in load_table("grades").rows:
        if wanted in {_plain(row["name"]), _plain(row.get("also", row["name"]))}:
            return _grade(row)
    return None


def _plain(name: str) -> str:
    return re.sub(r"[\s_]", "", name.lower())


def _grade(row: Row) -> Grade:
    limits = []
    for prop in get_args(Property):
        bounds = row.get(prop)
        if bounds:
            origin = row.origin(f"{prop}.{next(iter(bounds))}")
            limits.append(
                GradeLimit(
                    prop, bounds.get("low"), bounds.get("high"), origin.source, origin.how_known
                )
            )
    return Grade(
        row["name"],
        row["standard"],
        tuple(limits),
        usual_curve(row["name"]),
        bool(row.get("modified", False)),
        row.get("high_temperature"),
    )


@cache
def usual_curve(name: str) -> AvtsPrior | None:
    """Usual curves of the grade called ``name``, un-aged; None where the grade has none."""
    for row in load_table("usual_curves").rows:
        if row["name"] == name:
            origin = row.origin("viscosity_60c")
            return prior_from_viscosities(
                [60.0, 135.0],
                [row["viscosity_60c"], row["viscosity_135c"]],
                [row["spread_60c"], row["spread_135c"]],
                row["correlation"],
                f"usual curves of {name}",
                origin.how_known,
            )
    return None


@cache
def usual_curve_of_any() -> AvtsPrior:
    """Usual curves of any unmodified paving binder, for a sheet whose grade is not known."""
    found = usual_curve(ANY_BINDER)
    if found is None:
        raise FaultyInput.of(
            "no-usual-curve", f"config/usual_curves.yaml has no row '{ANY_BINDER}'.", "Add it."
        )
    return found
