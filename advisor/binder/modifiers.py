"""What polymer, rubber, wax, surfactant, foam and antistrip do to the curve and the window."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Literal

from advisor.binder.curve import ViscosityCurve, curve_through
from advisor.binder.windows import Window
from advisor.errors import MissingInput, OutsideValidity

Kind = Literal["polymer", "rubber", "wax", "surfactant", "foam", "antistrip"]


@dataclass(frozen=True)
class Modifier:
    """One modifier in a binder, as a table or the supplier describes it.

    ``viscosity_low`` to ``viscosity_high`` [1] is the factor on viscosity above
    ``applies_above_c``; ``offset_low_k`` to ``offset_high_k`` how far the temperatures may be
    lowered. ``plain_rule`` says whether equal viscosity still serves, ``line`` whether an A-VTS
    line may be fitted at all.
    """

    kind: Kind
    name: str
    plain_rule: bool
    line: bool
    reason: str
    source: str
    how_known: str
    viscosity_low: float = 1.0
    viscosity_high: float = 1.0
    applies_above_c: float | None = None
    offset_low_k: float = 0.0
    offset_high_k: float = 0.0
    caution: str = ""


def check_line(modifier: Modifier) -> None:
    """Refuse a viscosity line for a binder whose viscosity is not a property of temperature alone.

    Args:
        modifier: what is in the binder.

    Raises:
        OutsideValidity: crumb rubber, whose viscosity drifts with time.

    Source: J. Mater. Civ. Eng. 8(3) 1996 (looked up): viscosity falls for 30 to 40 min, then rises
    about 0.18 Pa.s per hour.
    """
    if not modifier.line:
        raise OutsideValidity.of(
            "no-line",
            f"No viscosity line is fitted to a binder with {modifier.name}: {modifier.reason}",
            "Use the supplier's range and measure the viscosity at the time of use.",
            field="modifier",
        )


def waxed_curve(curve: ViscosityCurve, wax: Modifier) -> ViscosityCurve:
    """Curve of the binder with an organic wax, at temperatures above the melting range.

    The viscosity falls by the same share at two temperatures above melting; the doubt of that
    share widens the curve.

    Args:
        curve: A-VTS curve of the binder without wax.
        wax: the wax, with its viscosity factors and melting range.

    Raises:
        OutsideValidity: not a wax.
        MissingInput: its melting range is not given.

    Source: as the modifier names; linear propagation.
    """
    if wax.kind != "wax":
        raise OutsideValidity.of(
            "not-a-wax",
            f"{wax.name} does not act by a change of viscosity.",
            "Surfactant and foam lower the temperatures by an offset with its own source.",
            field="modifier",
        )
    if wax.applies_above_c is None:
        raise MissingInput.of(
            "melting-range",
            f"The melting range of {wax.name} is not given.",
            "Enter the top of its melting range; below it the binder is stiffer.",
            field="applies_above",
        )
    middle = 0.5 * (wax.viscosity_low + wax.viscosity_high)
    low_c, high_c = max(wax.applies_above_c, 120.0), 165.0
    base = [float(curve.viscosity_pas(at)) for at in (low_c, high_c)]

    def scaled(factor: float) -> ViscosityCurve:
        return curve_through(low_c, base[0] * factor, high_c, base[1] * factor)

    centre = scaled(middle)
    # a uniform factor between its two ends: standard deviation is the range over sqrt(12)
    step = (scaled(wax.viscosity_high).parameters - scaled(wax.viscosity_low).parameters) / 12**0.5
    return replace(
        curve,
        parameters=centre.parameters,
        covariance=curve.covariance + step[:, None] * step[None, :],
        basis=f"{curve.basis}, with {wax.name}",
        notes=(
            *curve.notes,
            f"Holds above {wax.applies_above_c:g} C only: below, the wax stiffens the binder.",
        ),
    )


def lowered_window(window: Window, modifier: Modifier) -> Window:
    """Window lowered by a surfactant's or a foam's own offset, which is not a viscosity change.

    The low edge falls by the larger offset, the high edge by the smaller, so that the doubt of
    the offset widens the window; the middle of the two moves the target.

    Args:
        window: window of the binder without the additive.
        modifier: the additive, with its offsets.

    Raises:
        OutsideValidity: the modifier has no offset.

    Source: as the modifier names. The published 12 to 30 C cannot come from viscosity: 12 C would
    need 41 % less (derived).
    """
    if modifier.offset_high_k <= 0.0:
        raise OutsideValidity.of(
            "no-offset",
            f"{modifier.name} lowers no temperature of itself.",
            "Leave it out here.",
            field="modifier",
        )
    low, high = modifier.offset_low_k, modifier.offset_high_k
    sd = (high - low) / 12**0.5
    doubt = (
        f"Lowered by {low:g} to {high:g} K for {modifier.name} ({modifier.source}, "
        f"{modifier.how_known})."
    )
    cautions = [doubt, modifier.caution] if modifier.caution else [doubt]
    return replace(
        window,
        low_c=window.low_c - high,
        target_c=window.target_c - 0.5 * (low + high),
        high_c=window.high_c - low,
        low_sd_k=(window.low_sd_k**2 + sd**2) ** 0.5,
        target_sd_k=(window.target_sd_k**2 + sd**2) ** 0.5,
        high_sd_k=(window.high_sd_k**2 + sd**2) ** 0.5,
        method=f"{window.method}, with {modifier.name}",
        cautions=(*window.cautions, *cautions),
    )


def plain_rule_refusal(modifiers: tuple[Modifier, ...]) -> str:
    """Why the rule of equal viscosity does not serve, in a sentence; empty where it does.

    Args:
        modifiers: everything in the binder.
    """
    return " ".join(one.reason for one in modifiers if not one.plain_rule)
