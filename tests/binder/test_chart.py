"""The chart: the standard's axes, points with bars, band, windows, the old curve behind the new."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from advisor.advice.assessment import Assessment, assess
from advisor.advice.sources import histories
from advisor.binder import log_rankine, loglog_viscosity
from advisor.figures.drift import drift_figure
from advisor.figures.ink import DARK
from advisor.figures.viscosity import viscosity_chart, viscosity_page, viscosity_words
from advisor.settings.certificate_files import read_certificates

SHEETS = Path(__file__).parent / "certificates"


def of(name: str) -> Assessment:
    return assess(read_certificates([SHEETS / f"{name}.yaml"])[0])


def drawn(figure, name: str):
    return next(trace for trace in figure.data if trace.name == name)


def test_the_curve_is_straight_on_the_standards_axes_and_goes_through_the_window() -> None:
    one = of("plain")
    line = drawn(viscosity_chart(one), "lot T-100")
    slope, level = np.polyfit(line.x, line.y, 1)
    assert np.asarray(line.y) == pytest.approx(level + slope * np.asarray(line.x), abs=1e-9)
    target = float(one.mixing.governing.target_c)
    at_target = 10 ** (10 ** (level + slope * float(log_rankine(target)))) / 1000
    assert at_target == pytest.approx(0.17, rel=1e-6)


def test_used_and_kept_readings_are_told_apart_and_carry_their_bars() -> None:
    one = of("plain")
    figure = viscosity_chart(one)
    used, kept = drawn(figure, "readings"), drawn(figure, "kept, not used")
    assert (len(used.x), len(kept.x)) == (3, 3)
    first = next(reading for reading in one.sheet.readings if reading.usable)
    top = float(loglog_viscosity(first.viscosity_pas * np.exp(1.96 * first.relative_sd)))
    assert used.y[0] + used.error_y.array[0] == pytest.approx(top, abs=1e-5)
    assert "conversion" in kept.text[0]
    assert used.marker.color != kept.marker.color


def test_the_band_holds_the_curve_and_widens_with_fewer_readings() -> None:
    widths = []
    for name in ("plain", "penetration_only"):
        band = drawn(viscosity_chart(of(name)), "95 % of the curve")
        half = len(band.x) // 2
        low, high = np.asarray(band.y[:half]), np.asarray(band.y[half:])[::-1]
        at = int(np.argmin(np.abs(np.asarray(band.x[:half]) - float(log_rankine(150.0)))))
        assert np.all(low < high)
        widths.append(high[at] - low[at])
    assert widths[1] > 3.0 * widths[0]


def test_the_windows_are_shaded_where_they_are() -> None:
    one = of("polymer")
    shapes = [shape for shape in viscosity_chart(one).layout.shapes if shape.type == "rect"]
    edges = {(round(shape.x0, 9), round(shape.x1, 9)) for shape in shapes}
    expected = {
        (round(float(log_rankine(low)), 9), round(float(log_rankine(high)), 9))
        for low, high in ((165.0, 180.0), (145.0, 165.0))
    }
    assert edges == expected


def test_the_old_curve_and_the_third_law_are_dashed_behind() -> None:
    figure = viscosity_chart(of("second_source"), of("plain"), DARK)
    names = [trace.name for trace in figure.data]
    assert names.index("lot T-100, before") < names.index("lot T-200")
    assert drawn(figure, "lot T-100, before").line.dash == "dash"
    assert drawn(figure, "lot T-200").line.color == DARK.target
    assert drawn(viscosity_chart(of("bent")), "law of three constants (VFT)").line.dash == "dash"


def test_the_lots_of_a_drift_stand_out_from_those_before() -> None:
    history = histories(read_certificates([SHEETS / "series.yaml"]))[0]
    lots = drift_figure(history).data[0]
    first = history.chart.since
    symbols = list(lots.marker.symbol)
    assert set(symbols[:first]) == {"circle"}
    assert set(symbols[first:]) == {"triangle-up"}
    assert len(lots.x) == len(history.lots) == 18
    fahrenheit = histories(read_certificates([SHEETS / "series.yaml"]), "us")[0]
    assert "°F" in fahrenheit.words
    assert fahrenheit.chart.signal == history.chart.signal


def test_rubber_has_its_readings_and_no_line() -> None:
    figure = viscosity_chart(of("rubber"))
    assert [trace.name for trace in figure.data] == ["readings"]
    assert "no curve" in viscosity_words(of("rubber"))


def test_fahrenheit_and_centipoise_for_those_who_use_them() -> None:
    figure = viscosity_chart(of("performance_grade"), units="us")
    assert "cP" in figure.layout.yaxis.title.text
    assert "°F" in figure.layout.xaxis.title.text
    assert "300" in figure.layout.xaxis.ticktext
    at = list(figure.layout.xaxis.ticktext).index("300")
    assert figure.layout.xaxis.tickvals[at] == pytest.approx(float(log_rankine(148.889)), abs=1e-6)


def test_the_page_needs_no_internet_and_names_the_likely_mistake() -> None:
    page = viscosity_page(of("ten_times"), None, "si")
    assert "Likely mistake" in page
    head = page.split("<script", 1)[0]
    assert "src=" not in head
    assert 'script src="http' not in page
