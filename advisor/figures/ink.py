"""The inks of every figure and page: one palette for a light room, one for a dark one.

Colour is spent only on what is outside its window, and never alone: hot is a burnt red that
points up, cold a deep blue that points down, unknown a grey ring. The window is always the same
muted band and the target always the same line.
"""

from __future__ import annotations

from dataclasses import asdict, dataclass
from typing import Literal

Scheme = Literal["light", "dark"]


@dataclass(frozen=True)
class Ink:
    """The colours of one scheme, as #rrggbb."""

    ground: str
    sheet: str
    rule: str
    edge: str  # outline of controls: at least 3:1 on sheet and ground
    text: str
    quiet: str  # second text: at least 4.5:1 on sheet and ground
    window: str
    target: str
    hot: str
    hot_weak: str
    cold: str
    cold_weak: str
    unknown: str


LIGHT = Ink(
    ground="#eeece7",
    sheet="#fbfaf7",
    rule="#d6d3cb",
    edge="#85827a",
    text="#22272b",
    quiet="#565a5c",
    window="#cdd3cf",
    target="#41565a",
    hot="#a3330f",
    hot_weak="#ecc3b0",
    cold="#1c4a8c",
    cold_weak="#b9cde8",
    unknown="#6a6a66",
)
DARK = Ink(
    ground="#15181a",
    sheet="#1d2124",
    rule="#383d40",
    edge="#7d8386",
    text="#e9e6df",
    quiet="#b0b2b0",
    window="#3b4648",
    target="#b5c4c4",
    hot="#ff9673",
    hot_weak="#6e3523",
    cold="#8dbbff",
    cold_weak="#2a456e",
    unknown="#a3a39e",
)
INKS: dict[Scheme, Ink] = {"light": LIGHT, "dark": DARK}

FONT = 'system-ui, "Segoe UI", "Noto Sans", "DejaVu Sans", "Helvetica Neue", Arial, sans-serif'

HOT_MARK = "▲"
COLD_MARK = "▼"
UNKNOWN_MARK = "○"


def ink_of(scheme: str | None) -> Ink:
    """The palette called ``scheme``; the light one for any other word."""
    return DARK if scheme == "dark" else LIGHT


def style_sheet() -> str:
    """The palettes as CSS custom properties, so that pages and figures share one source."""

    def block(ink: Ink) -> str:
        return "".join(
            f"--{name.replace('_', '-')}:{value};" for name, value in asdict(ink).items()
        )

    return (
        f":root{{color-scheme:light dark;--font:{FONT};{block(LIGHT)}}}"
        f"@media screen and (prefers-color-scheme:dark){{:root{{{block(DARK)}}}}}"
    )


def contrast(one: str, other: str) -> float:
    """Contrast ratio 1-21 of two #rrggbb colours.

    Source: Web Content Accessibility Guidelines 2.2, definitions of contrast ratio and relative
    luminance (from memory).
    """

    def luminance(colour: str) -> float:
        parts = (int(colour[at : at + 2], 16) / 255 for at in (1, 3, 5))
        red, green, blue = (
            part / 12.92 if part <= 0.04045 else ((part + 0.055) / 1.055) ** 2.4 for part in parts
        )
        return 0.2126 * red + 0.7152 * green + 0.0722 * blue

    dark, light = sorted((luminance(one), luminance(other)))
    return (light + 0.05) / (dark + 0.05)
