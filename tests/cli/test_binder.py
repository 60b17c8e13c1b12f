"""The command 'binder': sheets of every kind, comparisons, drift, charts, and what it refuses."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from advisor.cli.main import main

SHEETS = Path(__file__).parents[1] / "binder" / "certificates"
DEMO = Path(__file__).parents[2] / "demo_plant" / "records" / "certificates.yaml"


@pytest.fixture
def run(capsys):
    """A run of the command: its exit code, what it printed and what it complained of."""

    def once(*arguments: object) -> tuple[int, str, str]:
        with pytest.raises(SystemExit) as ended:
            main(["binder", *map(str, arguments)])
        told = capsys.readouterr()
        return int(ended.value.code or 0), told.out, told.err

    return once


def sheet(name: str) -> Path:
    return SHEETS / f"{name}.yaml"


def test_a_sheet_is_told_from_readings_to_checks(run) -> None:
    code, out, _ = run(sheet("plain"))
    assert code == 0
    for words in (
        "kept, not used", "left out: bulb B", "log10 log10(cP)", "0.15 to 0.19 Pa.s",
        "Pumps from", "30.0 °C are wanted", "Mixed 10.0 °C hotter", "Mixed 20.0 °C hotter",
        "inside    Penetration at 25 C: 58 dmm", "from memory",
    ):  # fmt: skip
        assert words in out


def test_fahrenheit_for_those_who_use_it(run) -> None:
    _, out, _ = run(sheet("plain"), "--us")
    assert "309 °F" in out
    assert "Mixed 18.0 °F hotter" in out
    assert "margin kept below the flash point" in out and " K " not in out


def test_a_modified_binder_gets_the_suppliers_range_or_no_number(run) -> None:
    _, out, _ = run(sheet("polymer"))
    assert "governs  supplier's range" in out
    assert "beside   phase angle" in out
    assert "too elastic" in out
    _, out, _ = run(sheet("polymer_without_range"))
    assert "governs" not in out
    assert "ask the supplier" in out


def test_few_readings_get_a_wide_band_and_say_so(run) -> None:
    _, out, _ = run(sheet("penetration_only"), "--json")
    wide = json.loads(out)["sheets"][0]["mixing"]["governing"]["target_sd_k"]
    _, out, _ = run(sheet("one_point"), "--json")
    one = json.loads(out)["sheets"][0]["mixing"]["governing"]["target_sd_k"]
    assert wide > 5.0 > one > 0.5
    _, out, _ = run(sheet("one_point"))
    assert "the band is wide for it" in out


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("ten_times", "ten times too high"),
        ("fahrenheit", "in Fahrenheit, 60 C in truth"),
    ],
)
def test_the_likely_mistake_stands_at_the_top(run, name: str, words: str) -> None:
    _, out, _ = run(sheet(name))
    assert words in next(line for line in out.splitlines() if line.startswith("LIKELY MISTAKE"))


def test_no_window_comes_from_a_line_no_binder_has(run) -> None:
    code, out, _ = run(sheet("fahrenheit"))
    assert code == 0
    assert "no believable line" in out
    assert "governs" not in out


def test_rubber_and_wax_are_met_by_their_own_rules(run) -> None:
    _, out, _ = run(sheet("rubber"))
    assert "None. No viscosity line is drawn with crumb rubber" in out
    _, out, _ = run(sheet("wax"))
    assert "Below 115 C the wax is not molten" in out


def test_a_surfactant_added_at_the_plant_lowers_the_window_with_its_source(run) -> None:
    _, out, _ = run(sheet("performance_grade"))
    assert "Lowered by 5 to 12 K for surfactant" in out
    assert "G*/sin(delta) at the grade temperature, original: 1.35" in out


def test_two_sources_are_compared_and_the_shift_is_judged(run) -> None:
    _, out, _ = run(sheet("second_source"), "--against", sheet("plain"))
    assert "From lot T-100 to lot T-200" in out
    assert "°C hotter, plus or minus" in out
    assert "Retained samples of both" in out


def test_successive_lots_show_the_drift_before_a_limit_is_crossed(run) -> None:
    _, out, _ = run(sheet("series"))
    assert "Drift upwards since certificate" in out
    assert "outside" in out
    _, out, _ = run(sheet("plain"), sheet("penetration_only"))
    assert "needs 5 certificates" not in out  # two grades are two sources


def test_rap_storage_and_silo_are_reckoned_where_asked(run, tmp_path: Path) -> None:
    rap = tmp_path / "rap.yaml"
    rap.write_text(
        sheet("second_source").read_text(encoding="utf-8")
        .replace("viscosity: 0.558 Pa.s", "viscosity: 1.40 Pa.s, condition: recovered")
        .replace("viscosity: 0.151 Pa.s", "viscosity: 0.330 Pa.s, condition: recovered"),
        encoding="utf-8",
    )  # fmt: skip
    _, out, _ = run(sheet("plain"), "--rap", rap, "--rap-share", "20 %")
    assert "With the RAP binder" in out
    assert "50% to 100% is taken to blend" in out
    _, out, _ = run(
        sheet("plain"), "--stored", "10 d", "--stored-at", "170 C", "--liquid", "1.2 m",
        "--in-silo", "30 h",
    )  # fmt: skip
    assert "After 240 h at 170 °C" in out
    assert "sample before use" in out


def test_the_demo_plants_certificates_are_read_as_they_are_recorded(run) -> None:
    code, out, _ = run(DEMO, "--lot", "A-2641")
    assert code == 0
    assert "terminal A (invented)" in out


def test_the_chart_is_written_as_a_page(run, tmp_path: Path) -> None:
    path = tmp_path / "chart.html"
    code, out, _ = run(sheet("second_source"), "--against", sheet("plain"), "--chart", path)
    assert code == 0
    assert "Chart written" in out
    assert "plotly" in path.read_text(encoding="utf-8").lower()


def test_json_holds_everything_the_text_says(run) -> None:
    _, out, _ = run(sheet("second_source"), "--against", sheet("plain"), "--json")
    told = json.loads(out)
    assert told["change"]["shifts"][0]["detectable"] is True
    assert told["sheets"][0]["sheet"]["readings"][0]["viscosity_pas"] == pytest.approx(0.558)
    assert told["against"]["certificate"]["lot"] == "T-100"


def test_every_fault_of_a_sheet_is_told_at_once_with_its_line(run) -> None:
    code, _, err = run(SHEETS / "bad" / "several.yaml")
    assert code == 2
    for words in (
        "several.yaml:10:", "Did you mean 'vacuum capillary'?", "135 has no unit",
        "either 'viscosity' or 'viscosities'", "Did you mean 'dmm'?", "'cup' is not a key here",
        "Did you mean 'SBS'?", "from 180 C to 165 C", "Did you mean 'flash_point'?", "8 faults.",
    ):  # fmt: skip
        assert words in err


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["no_such.yaml"], "cannot be read"),
        ([sheet("plain"), "--lot", "T-1"], "Known here: T-100"),
        ([sheet("plain"), "--target", "mixin"], "Did you mean 'mixing'?"),
        ([sheet("series"), "--against", sheet("plain")], "One sheet is wanted"),
        ([sheet("series"), "--chart", "chart.html"], "One sheet is wanted"),
        ([sheet("plain"), "--chart", "chart.png"], "ends with .html"),
        ([sheet("plain"), "--rap", sheet("plain")], "go together"),
        ([sheet("plain"), "--stored", "3 d"], "go together"),
        ([sheet("plain"), "--stored", "3 d", "--stored-at", "170", "--liquid", "1 m"], "no unit"),
        ([Path(__file__).parents[2] / "demo_plant" / "tanks.yaml"], "is not a key here"),
    ],
)
def test_what_is_wrong_is_said_and_what_would_be_right(run, arguments, words: str) -> None:
    code, _, err = run(*arguments)
    assert code == 2
    assert words in err


def test_rubber_cannot_be_compared_and_says_what_can(run) -> None:
    code, _, err = run(sheet("rubber"), "--against", sheet("plain"))
    assert code == 1
    assert "Compare the suppliers' ranges" in err
