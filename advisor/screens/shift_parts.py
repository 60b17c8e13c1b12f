"""The pieces of the shift page, each from what it shows to components."""

from __future__ import annotations

from collections.abc import Sequence

from dash import html

from advisor.advice.result import Advice, Clash, Limit, Point, Setpoint
from advisor.errors import AdvisorError
from advisor.figures.base import degrees, whole_delta
from advisor.figures.drawn import Reading, verdict_of
from advisor.screens.ids import id_of_each
from advisor.screens.notices import Notice
from advisor.screens.shift_view import ShiftView
from advisor.screens.source import Source, is_stale
from advisor.screens.words import (
    MARKS,
    age_words,
    clock_words,
    delta_words,
    moment_words,
    temperature_words,
    unit_words,
)
from advisor.units import UnitSystem

Parts = list[object]

# The order in which the mix meets the points.
TRAVEL: tuple[Point, ...] = (
    "binder_tank",
    "hot_aggregate",
    "discharge",
    "silo",
    "load_out",
    "delivery",
)
AT_POINT: dict[Point, str] = {
    "binder_tank": "in the tank",
    "hot_aggregate": "at the aggregate",
    "discharge": "at discharge",
    "silo": "in the silo",
    "load_out": "at load-out",
    "delivery": "at the paver",
}
# The window takes the middle of the scale; what is outside has room beside it.
_WINDOW_FROM, _WINDOW_TO = 22.0, 78.0


def heading(view: ShiftView) -> Parts:
    """What the setpoints are for, and until when."""
    advice = view.advice
    until = clock_words(advice.valid_until, view.zone)
    parts: Parts = [
        html.H1(f"Set now for {advice.mix}, {advice.tank}, {advice.job_name}"),
    ]
    if advice.provisional:
        parts.append(html.Strong("Provisional", className="tag"))
    if view.expired:
        parts.append(html.Strong(f"Expired at {until}", className="tag"))
    else:
        words = ", ".join(filter(None, (f"valid until {until}", advice.valid_because)))
        parts.append(html.Span(words, className="quiet"))
    return parts


def clock(source: Source, heard: int) -> Parts:
    """Day, clock, shift and the age of the data; ``heard`` counts the answers for the page."""
    at = source.now()
    last = source.last_reading_at(at)
    words = " · ".join(one for one in (moment_words(at, source.zone), source.shift_name(at)) if one)
    age_s = (at - last).total_seconds() if last else None
    age = "no data" if age_s is None else f"data {age_words(age_s)} old"
    return [
        html.Span(words),
        html.Span(age, className="age old" if is_stale(age_s) else "age"),
        html.Span(str(heard), id="heard", hidden=True),
    ]


def alerts(view: ShiftView, faults: Sequence[str]) -> Parts:
    """Sentences across the page: stale data, and what was wrong with the address."""
    found: Parts = [html.P(one, className="banner") for one in faults]
    if view.last_reading_at is None:
        found.append(
            html.P(
                "No reading from the plant is known. The setpoints stand; whether the plant is at "
                "them cannot be told.",
                className="banner old",
                role="alert",
            )
        )
    elif view.stale and view.age_s is not None:
        found.append(
            html.P(
                f"Data {age_words(view.age_s)} old: the last reading came at "
                f"{moment_words(view.last_reading_at, view.zone)}. The setpoints stand; whether "
                "the plant is at them cannot be told. Check the link to the plant's log.",
                className="banner old",
                role="alert",
            )
        )
    return found


def setpoint_cards(view: ShiftView, units: UnitSystem) -> object:
    """The setpoints in the order the mix travels, or the sentence that stands in their place."""
    advice = view.advice
    if advice.clash is not None:
        return clash_block(advice.clash, units)
    if advice.missing or not advice.setpoints:
        return missing_block(advice)
    ordered = sorted(advice.setpoints, key=lambda one: TRAVEL.index(one.point))
    readings = {one.point: one for one in view.readings}
    return html.Ol(
        [_card(one, readings.get(one.point), units) for one in ordered],
        className=f"setpoints of-{len(ordered)}",
    )


def _card(setpoint: Setpoint, reading: Reading | None, units: UnitSystem) -> object:
    number = degrees(setpoint.target_c, units)
    low, high = degrees(setpoint.low_c, units), degrees(setpoint.high_c, units)
    return html.Li(
        [
            html.Div([html.H2(setpoint.label), _why_button(setpoint, number)], className="name"),
            html.P(
                [
                    html.Span(number, className="figure"),
                    html.Span(unit_words(units), className="unit"),
                ],
                className="target",
            ),
            _scale(setpoint, reading),
            html.P([html.Span(low), html.Span(high)], className="ends"),
            _now(setpoint, reading, units),
            html.Dl(
                [
                    html.Dt("low"),
                    html.Dd(setpoint.low_set_by.name),
                    html.Dt("high"),
                    html.Dd(setpoint.high_set_by.name),
                ],
                className="set-by",
            ),
        ],
        className=f"setpoint {setpoint.point}",
    )  # fmt: skip


def _why_button(setpoint: Setpoint, number: str) -> object:
    return html.Button(
        "why",
        id=id_of_each("shift", "why", setpoint.point),
        type="button",
        className="why",
        **{"aria-label": f"why {number} at {setpoint.label.lower()}"},
    )


def _scale(setpoint: Setpoint, reading: Reading | None) -> object:
    width = max(setpoint.high_c - setpoint.low_c, 0.1)

    def place(value_c: float) -> dict[str, str]:
        share = (value_c - setpoint.low_c) / width
        percent = _WINDOW_FROM + share * (_WINDOW_TO - _WINDOW_FROM)
        return {"left": f"{min(max(percent, 3.0), 97.0):.1f}%"}

    parts: Parts = [
        html.Span(className="band"),
        html.Span(className="tick", style=place(setpoint.target_c)),
    ]
    if reading is not None and reading.value_c is not None:
        verdict = verdict_of(reading.value_c, setpoint.low_c, setpoint.high_c, reading.doubt)
        parts.append(html.Span(className=f"now {verdict}", style=place(reading.value_c)))
    return html.Div(parts, className="scale", **{"aria-hidden": "true"})


def _now(setpoint: Setpoint, reading: Reading | None, units: UnitSystem) -> object:
    if reading is None or reading.value_c is None:
        return html.P("no reading", className="reading unknown")
    value = degrees(reading.value_c, units)
    verdict = verdict_of(reading.value_c, setpoint.low_c, setpoint.high_c, reading.doubt)
    if verdict == "unknown":
        words = [html.B(f"{MARKS[verdict]} {value}"), " not used"]
    elif verdict == "inside":
        words = ["now ", html.B(value)]
    else:
        bound = setpoint.high_c if verdict == "hot" else setpoint.low_c
        words = [
            html.B(f"{MARKS[verdict]} {value}"),
            f" {verdict} by {whole_delta(reading.value_c - bound, units)}",
        ]
    return html.P(words, className=f"reading {verdict}")


def clash_block(clash: Clash, units: UnitSystem) -> object:
    """The two limits that no temperature satisfies, the gap, and the ways out."""
    return html.Div(
        [
            html.P(
                f"No discharge temperature satisfies both of these limits; they are "
                f"{delta_words(clash.gap_k, units)} apart. Do not load this job as it stands.",
                className="refusal",
                role="alert",
            ),
            html.Div(
                [
                    _clashing("at least", clash.at_least_c, clash.lower, units),
                    _clashing("at most", clash.at_most_c, clash.upper, units),
                ],
                className="against",
            ),
            html.H2("Ways out"),
            html.Table(
                [
                    html.Thead(
                        html.Tr(
                            [
                                html.Th("Do this"),
                                html.Th("gains"),
                                html.Th("alone"),
                                html.Th("costs"),
                            ]
                        )
                    ),
                    html.Tbody(
                        [
                            html.Tr(
                                [
                                    html.Td([one.action, _caution(one.caution)]),
                                    html.Td(delta_words(one.gain_k, units), className="number"),
                                    html.Td(
                                        "enough" if one.enough else "not enough",
                                        className="short",
                                    ),
                                    html.Td(one.cost),
                                ]
                            )
                            # What is enough by itself stands first.
                            for one in sorted(clash.remedies, key=lambda one: not one.enough)
                        ]
                    ),
                ]
            )
            if clash.remedies
            else html.P("No remedy was found that shifts either limit."),
        ],
        className="clash",
    )


def _clashing(words: str, at_discharge_c: float, limit: Limit, units: UnitSystem) -> object:
    place = "" if limit.point == "discharge" else (
        f", for {temperature_words(limit.value_c, units)} {AT_POINT[limit.point]}"
    )  # fmt: skip
    return html.Div(
        [
            html.P(f"{words}{place}", className="quiet"),
            html.P(
                [
                    html.Span(degrees(at_discharge_c, units), className="figure"),
                    html.Span(unit_words(units), className="unit"),
                ],
                className="target",
            ),
            html.P(limit.name, className="limit-name"),
            html.P(
                f"{limit.authority}: {limit.source}"
                + (f" (written {limit.as_written})" if limit.as_written else ""),
                className="note",
            ),
        ]
    )


def _caution(text: str) -> object:
    return html.Span(f" Caution: {text.rstrip('.')}.", className="quiet") if text else ""


def missing_block(advice: Advice) -> object:
    """What is missing before there can be a number."""
    missing = advice.missing or ("The plant gave no setpoints for this job.",)
    return html.Div(
        [
            html.P(
                "No setpoints: something that decides a temperature is missing.",
                className="refusal",
                role="alert",
            ),
            html.Ul([html.Li(one) for one in missing]),
        ],
        className="clash",
    )


def error_block(error: AdvisorError, what: str = "No setpoints") -> object:
    """The faults that keep the page from answering, each with its place and its remedy."""
    return html.Div(
        [
            html.P(f"{what}: the plant's data need attention.", className="refusal", role="alert"),
            html.Ul([html.Li(str(fault)) for fault in error.faults]),
        ],
        className="clash",
    )


def notice_list(told: Sequence[Notice]) -> object:
    """The notices, or the sentence that there are none."""
    if not told:
        return html.P("Nothing outside its window, no reading in doubt.", className="quiet")
    return html.Ul(
        [
            html.Li(
                [
                    html.H3(f"{MARKS[one.kind]} {one.title}".strip(), className=one.kind),
                    *(html.P(line) for line in one.lines),
                ]
            )
            for one in told
        ],
        className="notices",
    )


def later_table(view: ShiftView, units: UnitSystem) -> object:
    """The coming hours of the shift with their drum targets."""
    if not view.later:
        return html.P("No later hour in this shift.", className="quiet")
    return html.Table(
        [
            html.Caption(f"drum target, {unit_words(units)}", className="note"),
            html.Tbody(
                [
                    html.Tr(
                        [
                            html.Th(clock_words(one.at, view.zone), scope="row"),
                            html.Td(one.change),
                            html.Td(
                                html.B(degrees(one.target_c, units))
                                if one.target_c is not None
                                else "none",
                                className="number",
                            ),
                        ]
                    )
                    for one in view.later
                ]
            ),
        ]
    )


def load_table(view: ShiftView, units: UnitSystem) -> object:
    """This load: when it arrives, how warm, how long it may wait and how long it rolls."""
    advice = view.advice
    rows: list[tuple[str, str]] = []
    if advice.arrival_c is not None:
        words = temperature_words(advice.arrival_c, units)
        if advice.arrival_sd_k is not None:
            words = (
                f"{degrees(advice.arrival_c, units)} ± "
                f"{delta_words(2 * advice.arrival_sd_k, units)}"
            )
        rows.append(("Arrives at", words))
    if advice.wait_left_min is not None:
        rows.append(("May wait at the paver", f"{advice.wait_left_min:.0f} min"))
    if advice.rolling is not None:
        rolling = advice.rolling
        rows.append(
            (
                f"Time to roll, {rolling.wanted_min:.0f} wanted",
                f"{rolling.low_min:.0f} – {rolling.high_min:.0f} min",
            )
        )
    if advice.felt_truck_min is not None and advice.felt_paver_min is not None:
        rows.append(
            (
                "A change is felt, truck · paver",
                f"{advice.felt_truck_min:.0f} · {advice.felt_paver_min:.0f} min",
            )
        )
    if not rows:
        return html.P("Nothing can be told of this load.", className="quiet")
    return html.Table(
        html.Tbody(
            [
                html.Tr([html.Th(name, scope="row"), html.Td(words, className="number")])
                for name, words in rows
            ]
        )
    )


def reason_list(advice: Advice) -> object:
    """Why the numbers are what they are, and what was passed over."""
    sentences = [one.sentence for one in advice.reasons] + list(advice.passed_over)
    if not sentences:
        return html.P("No reasons were given.", className="quiet")
    return html.Ul([html.Li(one) for one in sentences])


def caution_list(advice: Advice) -> object:
    """The cautions beside the advice."""
    return html.Ul([html.Li(one.text) for one in advice.cautions], className="cautions")
