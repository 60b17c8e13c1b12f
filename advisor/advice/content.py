"""The binder in a tank as an advice uses it: curve, mixing window, suppliers' limits."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime

from advisor.advice.facts import PlantFacts
from advisor.advice.ledger import TankContent, tank_content
from advisor.binder import ViscosityCurve, Window
from advisor.binder.blending import blend_curves
from advisor.errors import MissingInput
from advisor.records import Entry
from advisor.settings.binders import certificate_curve, certificate_sheet, mixing_window
from advisor.settings.certificate import Certificate

# A tank with more than this share of a second lot is a blend nobody has tested.
_BLEND_SHARE = 0.05
# Doubt of a share reckoned from deliveries and levels; common practice, no source.
_SHARE_SD = 0.08


@dataclass(frozen=True, eq=False)
class BinderState:
    """What a tank holds, as far as temperatures go.

    ``mixing`` is the governing window, None where there is none and ``refused`` says why.
    ``provisional`` marks an estimate from deliveries that no laboratory has confirmed.
    """

    content: TankContent
    certificates: tuple[Certificate, ...]
    curve: ViscosityCurve | None
    mixing: Window | None
    refused: tuple[str, ...]
    modified: bool
    provisional: bool
    words: str
    age_s: float
    flash_c: float | None
    flash_method: str
    supplier_most_c: tuple[float, str] | None
    storage_low_c: float | None


def binder_in_tank(facts: PlantFacts, tank: str, at: datetime) -> BinderState:
    """What ``tank`` holds at ``at``, by its deliveries and their certificates.

    Raises MissingInput where the tank's content or the certificate of a lot is not known, and
    OutsideValidity where lots meet that are not blended by calculation.
    """
    content = tank_content(facts, tank, at)
    if content is None:
        raise MissingInput.of(
            "tank-content",
            f"What {tank} holds is not known: no dip or receipt names a certificate.",
            "Record a dip with the lot in the tank.",
            field=tank,
        )
    entries = [_certificate(facts, lot, at) for lot, _ in content.shares]
    certificates = tuple(entry.fact for entry in entries)
    modified = any(one.modified for one in certificates)
    blended = len(content.shares) > 1 and content.shares[1][1] >= _BLEND_SHARE
    curve = _curve(content, certificates)
    window, refused = mixing_window(certificates, curve)
    if window is None and not modified:
        raise MissingInput.of(
            "no-mixing-window",
            f"No mixing temperature can be read from lot {content.shares[0][0]}. "
            + " ".join(filter(None, (certificate_sheet(one).refused for one in certificates))),
            "Measure the viscosity at two temperatures, or correct the certificate.",
            field=tank,
        )
    noted = () if curve is None else curve.notes
    lots = " and ".join(f"{share:.0%} {lot}" for lot, share in content.shares if share >= 0.005)
    return BinderState(
        content=content,
        certificates=certificates,
        curve=curve,
        mixing=window,
        refused=(*refused, *noted),
        modified=modified,
        provisional=blended,
        words=lots if len(content.shares) > 1 else f"lot {content.shares[0][0]}",
        age_s=min((at - entry.valid_from).total_seconds() for entry in entries),
        flash_c=min((one.flash_c for one in certificates if one.flash_c is not None), default=None),
        flash_method=certificates[0].flash_method,
        supplier_most_c=_lowest_maximum(certificates),
        storage_low_c=max(
            (one.storage_low_c for one in certificates if one.storage_low_c is not None),
            default=None,
        ),
    )


def _certificate(facts: PlantFacts, lot: str, at: datetime) -> Entry:
    entry = facts.held("certificate", lot, at)
    if entry is None:
        raise MissingInput.of(
            "certificate",
            f"The certificate of lot {lot} is not recorded.",
            "Enter it; until then there is no advice for this tank.",
            field=lot,
        )
    return entry


def _curve(content: TankContent, certificates: tuple[Certificate, ...]) -> ViscosityCurve | None:
    curves = [certificate_curve(one) for one in certificates]
    known = [curve for curve in curves if curve is not None]
    if len(known) < len(curves):
        return None
    if len(known) == 1:
        return known[0]
    polymers = [one.modifier for one in certificates if one.modified]
    return blend_curves(
        known,
        [share for _, share in content.shares],
        share_sd=_SHARE_SD,
        polymer_kinds=polymers,
    )


def _lowest_maximum(certificates: tuple[Certificate, ...]) -> tuple[float, str] | None:
    """The lowest supplier's maximum [C] among the lots, and whose it is."""
    known = [
        (one.storage_most_c, f"{one.source}, lot {one.lot}")
        for one in certificates
        if one.storage_most_c is not None
    ]
    return min(known, default=None)
