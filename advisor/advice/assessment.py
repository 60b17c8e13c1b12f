"""What one laboratory sheet says of a binder: readings, curve, windows, tank, checks."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace

from advisor.binder import (
    HARDENING_CODES,
    Check,
    Doubt,
    FlowSweep,
    Governed,
    Grade,
    Hardening,
    SheetCurve,
    TankRange,
    ViscosityCurve,
    ViscosityTarget,
    Window,
    aged_viscosity_pas,
    check_grade,
    cross_checks,
    crossover_frequency_rad_s,
    density_kgm3,
    govern,
    kinematic_from_dynamic_m2s,
    lowered_window,
    mixing_hardening,
    off_the_line,
    phase_angle_window,
    plain_rule_refusal,
    pumping_temperature_c,
    rutting_stiffness_pa,
    shear_window,
    steady_shear_window,
    tank_range,
    typing_doubts,
    unit_confusion,
)
from advisor.binder.tank import FLASH_MARGIN_K
from advisor.binder.windows import Purpose
from advisor.errors import OutsideValidity
from advisor.settings.binder_tables import (
    find_grade,
    modifier_named,
    target_shear_rate_per_s,
    usual_curve,
    usual_curve_of_any,
    viscosity_target,
    viscosity_targets,
)
from advisor.settings.binders import (
    certificate_curve,
    certificate_modifiers,
    certificate_prior,
    certificate_readings,
    certificate_sheet,
    supplier_range,
    target_window,
)
from advisor.settings.certificate import (
    Certificate,
    FrequencySweep,
    Rheometer,
    RuttingStiffness,
    ShearSweep,
    SteadyShear,
)
from advisor.units import UnitSystem, shown

HOTTER_K = (10.0, 20.0)
_SWEEP_C = 80.0  # the phase angle method reads the master curve at 80 C, NCHRP 648 (from memory)


@dataclass(frozen=True, eq=False)
class Assessment:
    """Everything one sheet says.

    ``curve`` is None where none may be drawn; ``sheet.refused`` then says why. ``ageing`` is what
    mixing hotter does. ``tank`` is None where its bounds cross, as ``cautions`` say.
    """

    certificate: Certificate
    grade: Grade | None
    sheet: SheetCurve
    curve: ViscosityCurve | None
    mixing: Governed
    compaction: Governed
    pumping_c: tuple[float, float] | None
    tank: TankRange | None
    flash_margin_k: float | None
    ageing: tuple[Hardening, ...]
    checks: tuple[Check, ...]
    doubts: tuple[Doubt, ...]
    cautions: tuple[str, ...]


def assess(
    certificate: Certificate, target: str = "mixing", units: UnitSystem = "si"
) -> Assessment:
    """What ``certificate`` says, with the mixing rule called ``target``, told in ``units``.

    Raises FaultyInput where config/ has no such target, MissingInput where a kinematic viscosity
    comes without a density.
    """
    sheet, curve = certificate_sheet(certificate), certificate_curve(certificate)
    grade = find_grade(certificate.grade)
    mixing = _governed(certificate, curve, "mixing", viscosity_target(target))
    compaction = _governed(certificate, curve, "compaction", _of_compaction(target))
    tank, crossed = _tank(certificate, curve)
    hottest = mixing.governing
    flash = certificate.flash_c
    margin = None
    if flash is not None and hottest is not None:
        margin = flash - float(hottest.high_c)
    made_at = float(hottest.target_c) if hottest is not None else None
    ageing = [] if curve is None else [_usual_hardening(curve, units)]
    if made_at is not None:
        ageing += [mixing_hardening(made_at, one, units) for one in HOTTER_K]
    return Assessment(
        certificate,
        grade,
        sheet,
        curve,
        mixing,
        compaction,
        None if curve is None else pumping_temperature_c(curve),
        tank,
        margin,
        tuple(ageing),
        _checks(certificate, grade, sheet),
        _doubts(certificate),
        (*_cautions(certificate, grade, sheet, margin, units), *crossed),
    )


def _usual_hardening(curve: ViscosityCurve, units: UnitSystem) -> Hardening:
    """What mixing and laying do to this binder, by its resistance to hardening."""
    before = float(curve.viscosity_pas(135.0))
    low, middle, high = (
        float(aged_viscosity_pas(before, code)) / before
        for code in (min(HARDENING_CODES.values()), 0, max(HARDENING_CODES.values()))
    )
    return Hardening(
        low,
        middle,
        high,
        f"Mixing and laying make it {low:.1f} to {high:.1f} times as viscous at "
        f"{shown(135.0, 'temperature', units)}, "
        f"{middle:.1f} times with average resistance to hardening (Mirza and Witczak 1995, from "
        "memory).",
    )


def _of_compaction(target: str) -> ViscosityTarget:
    kinematic = viscosity_target(target).basis == "kinematic"
    return viscosity_target("kinematic compaction" if kinematic else "compaction")


def _governed(
    certificate: Certificate,
    curve: ViscosityCurve | None,
    purpose: Purpose,
    chosen: ViscosityTarget,
) -> Governed:
    refusal = plain_rule_refusal(certificate_modifiers(certificate))
    density = certificate.density_15c_kgm3
    plain = None if curve is None else target_window(curve, chosen, density)
    if plain is not None:
        plain = _lowered(certificate, plain)
    others = [] if refusal or curve is None else _other_rules(curve, purpose, chosen, density)
    tested, failed = _tested(certificate, purpose)
    third = certificate_sheet(certificate).third
    if third is not None and not refusal and chosen.basis == "dynamic":
        by_third = target_window(third.curve(), chosen)
        others.append(_renamed(by_third, f"{by_third.method}, VFT law"))
    found = govern(
        purpose,
        plain,
        supplier_range([certificate], purpose),
        [*others, *tested],
        modified_because=refusal,
    )
    return Governed(found.purpose, found.governing, found.beside, (*found.refused, *failed))


def _lowered(certificate: Certificate, window: Window) -> Window:
    """The window as surfactant or foam lowers it, each by its own offset."""
    acting = [*certificate_modifiers(certificate), *map(modifier_named, certificate.additives)]
    for one in acting:
        if one.offset_high_k > 0.0:
            window = lowered_window(window, one)
    return window


def _other_rules(
    curve: ViscosityCurve, purpose: Purpose, chosen: ViscosityTarget, density: float | None
) -> list[Window]:
    """Windows of the other published targets for plain binder."""
    bases = ("dynamic", "kinematic") if density is not None else ("dynamic",)
    return [
        _renamed(target_window(curve, one, density), one.name)
        for one in viscosity_targets()
        if one.purpose == purpose and one.basis in bases and one.name != chosen.name
    ]


def _renamed(window: Window, method: str) -> Window:
    return replace(window, method=method)


def _tested(certificate: Certificate, purpose: Purpose) -> tuple[list[Window], list[str]]:
    """Windows by methods for modified binder, from the tests the sheet holds, and refusals."""
    windows: list[Window] = []
    failed: list[str] = []
    for one in certificate.readings:
        if isinstance(one, FrequencySweep):
            if abs(float(one.temperature) - _SWEEP_C) > 0.5:
                failed.append(
                    f"The phase angle method reads a sweep at {_SWEEP_C:g} C, not at "
                    f"{one.temperature.text}."
                )
                continue
            pairs = sorted(zip(one.frequencies, one.phase_angles, strict=True))
            try:
                crossing = crossover_frequency_rad_s(
                    [float(w) for w, _ in pairs], [float(angle) for _, angle in pairs]
                )
            except OutsideValidity as error:
                failed.append(str(error))
                continue
            windows.append(phase_angle_window(crossing, purpose))
    sweeps = [
        FlowSweep(
            float(one.temperature),
            tuple(float(rate) for rate in one.shear_rates),
            tuple(float(value) for value in one.viscosities),
        )
        for one in certificate.readings
        if isinstance(one, ShearSweep)
    ]
    steady = [one for one in certificate.readings if isinstance(one, SteadyShear)]
    for target in viscosity_targets():
        if target.purpose != purpose:
            continue
        if target.basis in ("high shear", "low shear") and len(sweeps) >= 2:
            windows.append(shear_window(sweeps, target, target_shear_rate_per_s(target.name)))
        if target.basis == "steady shear flow" and len(steady) >= 2:
            at = [float(one.temperature) for one in steady]
            windows.append(
                steady_shear_window(at, [float(one.viscosity) for one in steady], target)
            )
    return windows, failed


def _tank(
    certificate: Certificate, curve: ViscosityCurve | None
) -> tuple[TankRange | None, tuple[str, ...]]:
    try:
        found = tank_range(
            curve,
            flash_point_c=certificate.flash_c,
            flash_method=certificate.flash_method,
            supplier_low_c=certificate.storage_low_c,
            supplier_high_c=certificate.storage_most_c,
            supplier_source=f"{certificate.source}, lot {certificate.lot}",
        )
    except OutsideValidity as error:
        return None, (str(error),)
    return found, ()


def sheet_values(certificate: Certificate, grade: Grade | None) -> dict[str, float]:
    """Values of a sheet by the property a grade limits, in the inside unit."""
    found: dict[str, float] = {}
    density = certificate.density_15c_kgm3
    for one in certificate_readings(certificate):
        suffix = {"original": "", "rtfo": "_rtfo"}.get(one.sample.condition)
        if suffix is None:
            continue
        at60, at135 = (abs(one.temperature_c - at) <= 0.5 for at in (60.0, 135.0))
        if at60 and not one.converted:
            found.setdefault(f"viscosity_60c{suffix}", one.viscosity_pas)
        if at135 and one.method == "kinematic capillary" and density is not None:
            kinematic = kinematic_from_dynamic_m2s(one.viscosity_pas, one.temperature_c, density)
            found.setdefault(f"kinematic_135c{suffix}", float(kinematic))
        if at135 and one.method in ("rotational", "dynamic viscosity") and not suffix:
            found.setdefault("viscosity_135c", one.viscosity_pas)
    for test in certificate.readings:
        if test.method == "penetration" and (test.temperature or 25.0) == 25.0:
            found.setdefault("penetration_25c", float(test.value))
        if test.method == "softening point":
            found.setdefault("softening_point", float(test.value))
        found |= _stiffness(test, grade)
    if certificate.flash_c is not None:
        found["flash_point"] = certificate.flash_c
    return found


def _stiffness(test: object, grade: Grade | None) -> dict[str, float]:
    """G*/sin(delta) at the grade's own temperature, where ``test`` gives it."""
    if not isinstance(test, Rheometer | RuttingStiffness) or grade is None:
        return {}
    named = {"original": "rutting_stiffness", "rtfo": "rutting_stiffness_rtfo"}.get(test.condition)
    high = grade.high_temperature_c
    if named is None or high is None or abs(float(test.temperature) - high) > 0.1:
        return {}
    if isinstance(test, RuttingStiffness):
        return {named: float(test.value)}
    return {named: float(rutting_stiffness_pa(float(test.modulus), float(test.phase_angle)))}


def _checks(certificate: Certificate, grade: Grade | None, sheet: SheetCurve) -> tuple[Check, ...]:
    values = sheet_values(certificate, grade)
    of_grade = () if grade is None else check_grade(grade, values)
    if certificate.modified:  # the cross-checks hold for plain binder
        return of_grade
    line = sheet.fit.curve() if sheet.fit is not None and not sheet.fit.used_prior else None
    return (*of_grade, *cross_checks(line, sheet.readings, values))


def _doubts(certificate: Certificate) -> tuple[Doubt, ...]:
    known = certificate_modifiers(certificate)
    melting = max((one.applies_above_c or 0.0 for one in known), default=0.0) or None
    readings = [
        one
        for one in certificate_readings(certificate)
        if not off_the_line(one, melting) and (one.usable or not one.converted)
    ]
    prior = certificate_prior(certificate)
    if certificate.modified:
        prior = usual_curve("any modified binder")
    found = list(typing_doubts(readings, prior or usual_curve_of_any()))
    density = certificate.density_15c_kgm3
    if density is not None:
        sentence = unit_confusion(readings, float(density_kgm3(135.0, density)))
        found += [Doubt(None, sentence, None, None, float("inf"))] * bool(sentence)
    return tuple(found)


def _cautions(
    certificate: Certificate,
    grade: Grade | None,
    sheet: SheetCurve,
    margin: float | None,
    units: UnitSystem,
) -> Iterable[str]:
    if grade is None:
        yield f"The grade '{certificate.grade}' is not known here: no limits were checked."
    elif grade.modified and certificate.modifier == "none":
        yield (
            f"{grade.name} is reached with a modifier as a rule, and the sheet says none: ask the "
            "supplier before using the rule for plain binder."
        )
    if margin is not None and margin < FLASH_MARGIN_K:
        yield (
            f"The mixing window ends {shown(margin, 'temperature_delta', units)} below the flash "
            f"point; {shown(FLASH_MARGIN_K, 'temperature_delta', units)} are wanted (Eurobitume)."
        )
    if certificate.flash_c is None:
        yield "No flash point on the sheet: the margin to it cannot be checked."
    for one in (*certificate_modifiers(certificate), *map(modifier_named, certificate.additives)):
        if one.caution:
            yield f"{one.name}: {one.caution}"
    if sheet.third is not None:
        free = sheet.third.degrees_of_freedom
        fits = "goes exactly through its three" if free < 1 else "meets them"
        yield f"The line does not hold; a law of three constants (VFT) {fits} and stands beside it."
