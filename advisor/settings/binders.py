"""From a certificate to what an advice needs: readings, curve, mixing window."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from functools import lru_cache

from advisor.binder import (
    AvtsPrior,
    Bulb,
    Modifier,
    Reading,
    Sample,
    SheetCurve,
    SupplierRange,
    ViscosityCurve,
    ViscosityTarget,
    Window,
    curve_of_sheet,
    equiviscous_window,
    govern,
    kinematic_capillary_reading,
    kinematic_value_reading,
    lowered_window,
    penetration_reading,
    plain_rule_refusal,
    rheometer_reading,
    rotational_reading,
    softening_point_reading,
    supplier_window,
    vacuum_capillary_reading,
    viscosity_value_reading,
    waxed_curve,
    window_for,
)
from advisor.errors import MissingInput
from advisor.settings.binder_tables import (
    find_grade,
    modifier_named,
    precision_table,
    usual_curve_of_any,
    viscosity_target,
)
from advisor.settings.certificate import (
    Certificate,
    KinematicCapillary,
    KinematicValue,
    LabReading,
    Rotational,
    VacuumCapillary,
)


@lru_cache(maxsize=64)
def certificate_readings(certificate: Certificate) -> tuple[Reading, ...]:
    """Readings of a certificate turned into viscosity, judged by the rules of their methods.

    Tests that serve another purpose (sweeps, stiffness for grading) give none.
    """
    found = (_reading(certificate, one) for one in certificate.readings)
    return tuple(one for one in found if one is not None)


@lru_cache(maxsize=64)
def certificate_prior(certificate: Certificate) -> AvtsPrior | None:
    """Usual curves of the certificate's grade; None for a binder no grade describes.

    A plain binder of a grade not known here is met by the usual curves of any paving binder.
    """
    if certificate.modified:
        return None
    grade = find_grade(certificate.grade)
    if grade is None:
        return usual_curve_of_any()
    return grade.prior


def certificate_modifiers(certificate: Certificate) -> tuple[Modifier, ...]:
    """What was in the binder when it was tested."""
    return () if certificate.modifier == "none" else (modifier_named(certificate.modifier),)


@lru_cache(maxsize=64)
def certificate_sheet(certificate: Certificate, same_laboratory: bool = False) -> SheetCurve:
    """The readings with their verdict and the curve they give together."""
    return curve_of_sheet(
        certificate_readings(certificate),
        certificate_prior(certificate),
        certificate_modifiers(certificate),
        same_laboratory=same_laboratory,
    )


@lru_cache(maxsize=64)
def certificate_curve(certificate: Certificate) -> ViscosityCurve | None:
    """The curve of the binder with what the plant adds to it; None where none may be drawn."""
    curve = certificate_sheet(certificate).curve
    for name in certificate.additives:
        added = modifier_named(name)
        if curve is not None and added.kind == "wax":
            curve = waxed_curve(curve, added)
    return curve


def target_window(
    curve: ViscosityCurve, target: ViscosityTarget, density_15c_kgm3: float | None = None
) -> Window:
    """Window of ``curve`` for ``target``, named by its range of viscosity."""
    if target.basis == "kinematic":
        return window_for(curve, target, density_15c_kgm3)
    tolerance = 0.5 * (target.high - target.low)
    even = abs(target.target - 0.5 * (target.high + target.low)) < 1e-9
    if not even or tolerance == 0.0:
        return window_for(curve, target)
    return equiviscous_window(
        curve,
        target.target,
        tolerance,
        purpose=target.purpose,
        method=f"{target.low:.2f} to {target.high:.2f} Pa.s",
        source=target.source,
        how_known=target.how_known,
    )


def mixing_window(
    certificates: Sequence[Certificate], curve: ViscosityCurve | None, target: str = "mixing"
) -> tuple[Window | None, tuple[str, ...]]:
    """The window that governs mixing by ``target``, and what was refused and why."""
    plain = None if curve is None else target_window(curve, viscosity_target(target))
    for added in _added(certificates):
        if plain is not None and added.offset_high_k > 0.0:
            plain = lowered_window(plain, added)
    because = "; ".join(
        f"{plain_rule_refusal(certificate_modifiers(one))} ({one.modifier} in lot {one.lot})"
        for one in certificates
        if one.modified
    )
    governed = govern("mixing", plain, supplier_range(certificates), modified_because=because)
    return governed.governing, governed.refused


def _added(certificates: Sequence[Certificate]) -> list[Modifier]:
    """What acts by an offset, in the binder or added at the plant, each once."""
    names = [one.modifier for one in certificates if one.modifier != "none"]
    names += [name for one in certificates for name in one.additives]
    return [modifier_named(name) for name in dict.fromkeys(names)]


def kinds_in(certificates: Sequence[Certificate]) -> frozenset[str]:
    """Kinds of what is in a binder or added to it, such as 'surfactant', by its certificates."""
    return frozenset(one.kind for one in _added(certificates))


def supplier_range(certificates: Sequence[Certificate], purpose: str = "mixing") -> Window | None:
    """What all suppliers' ranges for ``purpose`` allow together; None where none is stated."""
    ranges = [(one, getattr(one.supplier, purpose)) for one in certificates]
    ranges = [(one, stated) for one, stated in ranges if stated is not None]
    if not ranges:
        return None
    source = " and ".join(f"{one.source}, lot {one.lot}" for one, _ in ranges)
    low = max(float(one.low) for _, one in ranges)
    high = min(float(one.high) for _, one in ranges)
    return supplier_window(SupplierRange(purpose, low, high, source))


def _reading(certificate: Certificate, one: LabReading) -> Reading | None:
    found = _judged(certificate, one)
    if found is None or not isinstance(one, VacuumCapillary | KinematicCapillary | Rotational):
        return found
    return replace(found, as_written=_as_written(one))


def _as_written(one: VacuumCapillary | KinematicCapillary | Rotational) -> str:
    """The figures of a test as its sheet writes them."""
    if isinstance(one, Rotational):
        values = one.viscosities if one.viscosity is None else (one.viscosity,)
        return ", ".join(value.text for value in values)
    if one.factor is not None and one.time is not None:
        return f"{one.factor.text} x {one.time.text}"
    return "; ".join(f"{each.name}: {each.factor.text} x {each.time.text}" for each in one.bulbs)


def _judged(certificate: Certificate, one: LabReading) -> Reading | None:
    sample = Sample(one.condition, one.laboratory or certificate.laboratory)
    precision = precision_table().find
    if isinstance(one, VacuumCapillary):
        return vacuum_capillary_reading(
            float(one.temperature), _bulbs(one), precision("vacuum capillary"),
            average=one.average, sample=sample,
        )  # fmt: skip
    if isinstance(one, KinematicCapillary | KinematicValue):
        return _kinematic(certificate, one, sample)
    if isinstance(one, Rotational):
        values = [float(one.viscosity)] if one.viscosity is not None else None
        return rotational_reading(
            float(one.temperature),
            values or [float(value) for value in one.viscosities],
            precision("rotational"),
            spindle=one.spindle,
            speed_rad_s=None if one.speed is None else float(one.speed),
            torque=None if one.torque is None else float(one.torque),
            sample=sample,
        )
    if one.method == "viscosity":
        return viscosity_value_reading(
            float(one.temperature), float(one.viscosity), precision("rotational"), sample=sample
        )
    if one.method == "rheometer":
        aged = one.condition != "original"
        return rheometer_reading(
            float(one.temperature), float(one.modulus), float(one.phase_angle),
            precision("rheometer residue" if aged else "rheometer"),
            frequency_rad_s=10.0 if one.frequency is None else float(one.frequency),
            as_written=f"{one.modulus.text} at {one.phase_angle.text}", sample=sample,
        )  # fmt: skip
    if one.method == "penetration":
        return penetration_reading(
            float(one.value), precision("penetration", float(one.value)),
            temperature_c=25.0 if one.temperature is None else float(one.temperature),
            as_written=one.value.text, sample=sample,
        )  # fmt: skip
    if one.method == "softening point":
        return softening_point_reading(
            float(one.value), precision("softening point"),
            modified=certificate.modifier != "none", as_written=one.value.text, sample=sample,
        )  # fmt: skip
    return None


def _kinematic(
    certificate: Certificate, one: KinematicCapillary | KinematicValue, sample: Sample
) -> Reading:
    density = certificate.density_15c_kgm3
    if density is None:
        raise MissingInput.of(
            "density",
            f"Lot {certificate.lot} has a kinematic viscosity and no density.",
            "Enter the density of the certificate.",
            field="density",
        )
    precision = precision_table().find("kinematic capillary")
    at = float(one.temperature)
    if isinstance(one, KinematicValue):
        return kinematic_value_reading(
            at, float(one.viscosity), density, precision, as_written=one.viscosity.text,
            sample=sample,
        )  # fmt: skip
    return kinematic_capillary_reading(
        at, _bulbs(one), density, precision, average=one.average, sample=sample
    )


def _bulbs(one: VacuumCapillary | KinematicCapillary) -> list[Bulb]:
    if one.factor is not None and one.time is not None:
        return [Bulb("", float(one.factor), float(one.time))]
    return [Bulb(each.name, float(each.factor), float(each.time)) for each in one.bulbs]
