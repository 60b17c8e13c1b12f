"""The pieces of the what-if page: its sliders, and what they lead to in words and numbers."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from typing import Any

from dash import html

from advisor.advice.otherwise import Changes
from advisor.advice.situation import Situation
from advisor.advice.wastes import Wastes
from advisor.advice.what_if import WhatIf
from advisor.screens.words import temperature_words
from advisor.units import UnitSystem, from_si, shown, shown_number, shown_unit, to_si

_J_KG_PER_KWH_T = 3600.0


@dataclass(frozen=True)
class Knob:
    """A slider: from ``low`` to ``high`` by ``step`` in the inside unit of ``kind``.

    ``now`` reads where the situation stands, None where the slider makes no sense for it.
    ``counts`` is the unit it counts in where that is the same for every reader.
    """

    name: str
    label: str
    kind: str
    low: float
    high: float
    step: float
    now: Callable[[Situation], float | None]
    counts: str = ""

    def unit(self, units: UnitSystem) -> str:
        """Unit the slider counts in."""
        return self.counts or shown_unit(self.kind, units)

    def set_to(self, situation: Situation | None, units: UnitSystem) -> Iterator[tuple[str, Any]]:
        """The slider's properties for where the situation stands."""
        now = None if situation is None else self.now(situation)
        unit = self.unit(units)
        low, high = (from_si(one, unit, self.kind) for one in (self.low, self.high))
        step = from_si(self.step, unit, self.kind) - from_si(0.0, unit, self.kind)
        step = round(step, 1) if step < 1.0 else float(round(step))
        value = low if now is None else round(from_si(now, unit, self.kind) / step) * step
        yield "min", min(round(low / step) * step, value)
        yield "max", max(round(high / step) * step, value)
        yield "step", step
        yield "value", round(value, 6)
        told = f"now {round(value, 6):g} {'' if unit == '1' else unit}".rstrip()
        yield "children", "" if now is None else told
        yield "hidden", now is None

    def read(self, value: float | None, situation: Situation, units: UnitSystem) -> float | None:
        """What the slider says in the inside unit; None where it stands where it was."""
        now = self.now(situation)
        unit = self.unit(units)
        if value is None or now is None:
            return None
        stood = dict(self.set_to(situation, units))["value"]
        return None if abs(value - stood) < 1e-6 else to_si(float(value), unit, self.kind)


SLIDERS = (
    Knob("hotter", "Discharge against the target", "temperature_delta", -20.0, 20.0, 1.0,
         lambda one: 0.0),
    Knob("moisture", "Moisture of the stone", "fraction", 0.0, 0.10, 0.001,
         lambda one: one.moisture, "%"),
    Knob("rap", "RAP in the mix", "fraction", 0.0, 0.40, 0.01,
         lambda one: float(one.mix.rap.share) if one.mix.rap else None, "%"),
    Knob("air-ratio", "Air ratio of the burner", "fraction", 1.1, 3.0, 0.1,
         lambda one: float(one.facts.folder.plant.dryer.air_ratio), "1"),
    Knob("haul", "Haul", "duration", 300.0, 7200.0, 60.0, lambda one: float(one.job.haul.time)),
    Knob("wind", "Wind", "speed", 0.0, 15.0, 0.1,
         lambda one: one.weather.wind_ms if one.weather else None),
    Knob("air", "Air", "temperature", -10.0, 35.0, 1.0,
         lambda one: one.weather.air_c if one.weather else None),
    Knob("lift", "Lift", "length", 0.02, 0.15, 0.005, lambda one: float(one.job.lift)),
)  # fmt: skip
_BY_NAME = {one.name: one for one in SLIDERS}


def changes_of(
    values: dict[str, float | None], additive: str, situation: Situation, units: UnitSystem
) -> Changes:
    """What the sliders ask for; what stands where it was stays as it is."""
    asked = {name: knob.read(values.get(name), situation, units) for name, knob in _BY_NAME.items()}
    moisture, hotter = asked["moisture"], asked["hotter"]
    return Changes(
        # With an additive, the discharge follows the window unless somebody moves it.
        cooler_k=None if additive and hotter is None else -(hotter or 0.0),
        drier=0.0 if moisture is None else situation.moisture - moisture,
        air_ratio=asked["air-ratio"],
        rap_share=asked["rap"],
        additive=additive or None,
        haul_s=asked["haul"],
        wind_ms=asked["wind"],
        air_c=asked["air"],
        lift_m=asked["lift"],
    )


def heading(found: WhatIf, changed: bool, units: UnitSystem) -> Any:
    """The answer in a sentence, with what to mind."""
    advice = found.before.advice
    if not changed:
        words = (
            f"{advice.mix}, {advice.job_name}: {temperature_words(found.before.discharge_c, units)}"
            f" at discharge takes {_heat(found.before.gross_kwh_t, units, 1)}. Move a slider."
        )
        return html.H1(words)
    low, _, high = found.saved.gross_kwh_t
    verb = "Saves" if found.saved.gross_kwh_t[1] >= 0.0 else "Costs"
    span = sorted((abs(low), abs(high)))
    money = found.saved.money_h
    worth = ""
    if money:
        least, most = sorted((abs(money[0]), abs(money[2])))
        worth = f", {least:.0f} to {most:.0f} {found.saved.currency} an hour"
    return [
        html.H1(f"{verb} {_bare(span[0], units)} to {_heat(span[1], units)}{worth}."),
        html.P(_margin_words(found, units), className=_margin_class(found)),
        *(html.P(one, className="quiet") for one in found.notes),
    ]


def _margin_words(found: WhatIf, units: UnitSystem) -> str:
    after, before = found.after, found.before
    if after.above_low_k is None or after.kept is None:
        return "There is no safe window then."
    place = shown(abs(after.above_low_k), "temperature_delta", units, 0)
    if after.above_low_k < 0.0:
        return (
            f"The discharge lies {place} below the lowest allowed: only {after.kept:.0%} of the "
            "mix would do."
        )
    was = f" ({before.kept:.0%} now)" if before.kept is not None else ""
    return f"{place} above the lowest allowed; {after.kept:.0%} of the mix stays above it{was}."


def _margin_class(found: WhatIf) -> str:
    below = found.after.above_low_k is None or found.after.above_low_k < 0.0
    return "refusal" if below else ""


def numbers(found: WhatIf, changed: bool, units: UnitSystem) -> Any:
    """Now and then, line by line; nothing under then while nothing is ``changed``."""
    before, after, saved = found.before, found.after, found.saved

    def window(way: Any) -> str:
        one = way.advice.setpoint("discharge")
        if one is None:
            return "none"
        return f"{temperature_words(one.low_c, units)} to {temperature_words(one.high_c, units)}"

    def rolling(way: Any) -> str:
        return f"{way.rolling_min[0]:.0f} to {way.rolling_min[2]:.0f} min"

    def aggregate(way: Any) -> str:
        return "" if way.aggregate_c is None else temperature_words(way.aggregate_c, units)

    slow, fast = (f"{one - 1.0:+.0%}" for one in found.oxidation_of_before)
    rows = [
        ("Window at discharge", window(before), window(after)),
        (
            "Discharge",
            temperature_words(before.discharge_c, units),
            temperature_words(after.discharge_c, units),
        ),
        (
            "At the paver",
            temperature_words(before.arrives_c, units),
            temperature_words(after.arrives_c, units),
        ),
        ("Virgin aggregate", aggregate(before), aggregate(after)),
        ("Time to roll", rolling(before), rolling(after)),
        ("Fuel, gross", _heat(before.gross_kwh_t, units, 1), _heat(after.gross_kwh_t, units, 1)),
        ("CO2 saved", "", _carbon(saved.co2_kg_t, units)),
        ("Fume at load-out", "", f"{found.fume_of_before - 1.0:+.0%}"),
        ("Binder oxidises", "", slow if slow == fast else f"{slow} to {fast}"),
    ]
    return [
        html.Table(
            [
                html.Thead(
                    html.Tr(
                        [
                            html.Th(""),
                            html.Th("now", className="number"),
                            html.Th("then", className="number"),
                        ]
                    )
                ),
                html.Tbody(
                    [
                        html.Tr(
                            [
                                html.Th(name, scope="row"),
                                html.Td(now, className="number"),
                                html.Td(then if changed else "", className="number"),
                            ]
                        )
                        for name, now, then in rows
                        if now or (then and changed)
                    ]
                ),
            ]
        ),
        html.P(
            "From two heat balances and how far the stack follows the mix; no saving is told surer "
            "than 10 %. Fume: AP-42 section 11.1, from memory. Oxidation: activation energies of "
            "1996, used beyond their range. Mix design and site decide.",
            className="note",
        ),
    ]


def costs(found: Wastes, units: UnitSystem) -> Any:
    """What a degree, a percent of water and a tenth of air cost, each on its line."""
    rows = []
    for one in found.each():
        by = 1.0 / 1.8 if units == "us" and one is found.overheating else 1.0
        low, _, high = (value * by for value in one.gross_kwh_t)
        told: list[Any] = [f"{_bare(low, units)} to {_heat(high, units)}"]
        if one.money_h:
            told += [
                html.Br(),
                f"{one.money_h[0] * by:.1f} to {one.money_h[2] * by:.1f} {found.currency}/h",
            ]
        unit = one.unit.replace("Celsius", "Fahrenheit") if units == "us" else one.unit
        rows.append(
            html.Tr(
                [html.Th(f"{one.name}: {unit}", scope="row"), html.Td(told, className="number")]
            )
        )
    least, most = (
        shown(found.percent_in_k[place], "temperature_delta", units, 0) for place in (0, 2)
    )
    return [
        html.Table(html.Tbody(rows)),
        html.P(
            f"A percent of moisture takes as much fuel as {least} to {most} too much; only heat "
            "makes fume and ages the binder.",
        ),
        *(
            html.P(f"{one.name}: from {one.found_from}; {one.how_sure}.", className="note")
            for one in found.each()
        ),
    ]


def _heat(kwh_t: float, units: UnitSystem, places: int = 2) -> str:
    return shown(kwh_t * _J_KG_PER_KWH_T, "heat_per_mass", units, 0 if units == "us" else places)


def _bare(kwh_t: float, units: UnitSystem) -> str:
    number = shown_number(kwh_t * _J_KG_PER_KWH_T, "heat_per_mass", units)
    return f"{number:.0f}" if units == "us" else f"{number:.2f}"


def _carbon(kg_t: tuple[float, float, float], units: UnitSystem) -> str:
    by, unit = (2.0, "lb/ton") if units == "us" else (1.0, "kg/t")
    return f"{kg_t[0] * by:.1f} to {kg_t[2] * by:.1f} {unit}"
