"""A sheet as it is written: every kind of test is read, kept and judged, every fault is told."""

from __future__ import annotations

from pathlib import Path

import pytest

from advisor.advice.assessment import assess
from advisor.errors import FaultyInput, MissingInput
from advisor.settings.binders import certificate_prior, certificate_readings, certificate_sheet
from advisor.settings.certificate import Certificate
from advisor.settings.certificate_files import read_certificates

SHEETS = Path(__file__).parent / "certificates"
NAMES = sorted(path.stem for path in SHEETS.glob("*.yaml"))
SHEET = {
    "product": "binder (invented)",
    "grade": "50/70",
    "source": "terminal A (invented)",
    "lot": "T-1",
    "sampled_on": "2026-09-01",
    "tested_on": "2026-09-02",
    "laboratory": "laboratory A (invented)",
    "modifier": "none",
    "readings": (),
}


def sheet(*readings: dict, **more: object) -> Certificate:
    return Certificate.model_validate({**SHEET, "readings": readings, **more})


@pytest.mark.parametrize("name", NAMES)
def test_a_sheet_written_out_is_read_back_the_same(name: str) -> None:
    for one in read_certificates([SHEETS / f"{name}.yaml"]):
        again = Certificate.model_validate(one.model_dump(mode="json"))
        assert again == one
        assert hash(again) == hash(one)


@pytest.mark.parametrize("name", NAMES)
def test_every_sheet_is_judged_without_an_exception(name: str) -> None:
    for one in read_certificates([SHEETS / f"{name}.yaml"]):
        found = assess(one)
        assert found.curve is not None or found.sheet.refused
        assert found.mixing.governing is not None or found.mixing.refused or found.sheet.refused


def test_a_rheometer_alone_is_not_stretched_to_mixing() -> None:
    # two points near 64 C extrapolated would give 145.9 C with a doubt of more than 10 C
    one = sheet(
        {"method": "rheometer", "temperature": "64.02 C", "modulus": "1.161 kPa",
         "phase_angle": "87.47 deg"},
        {"method": "rheometer", "temperature": "70.01 C", "modulus": "0.55 kPa",
         "phase_angle": "88.38 deg"},
        grade="PG 64-22",
    )  # fmt: skip
    found = certificate_sheet(one)
    assert found.fit.used_prior
    assert found.curve.temperature_sd_k(0.17) > 3.0
    assert any("grade" in note for note in found.curve.notes)


def test_centistokes_copied_as_centipoise_are_seen_on_the_sheet() -> None:
    one = sheet(
        {"method": "kinematic viscosity", "temperature": "135 C", "viscosity": "434 cSt"},
        {"method": "rotational", "temperature": "135 C", "viscosity": "434 cP"},
        {"method": "viscosity", "temperature": "60 C", "viscosity": "2690 P"},
        density={"value": "1032 kg/m3", "temperature": "15 C"},
    )
    assert any("cSt may have been copied as cP" in doubt.sentence for doubt in assess(one).doubts)


def test_a_grade_made_with_polymer_and_no_modifier_asks_the_supplier() -> None:
    one = sheet(
        {"method": "viscosity", "temperature": "135 C", "viscosity": "1.9 Pa.s"},
        {"method": "viscosity", "temperature": "165 C", "viscosity": "0.5 Pa.s"},
        grade="PG 76-22",
    )
    assert any("ask the supplier" in caution for caution in assess(one).cautions)


def test_a_grade_not_known_here_is_said_and_met_by_any_binder() -> None:
    one = sheet({"method": "penetration", "value": "58 dmm"}, grade="local 60")
    found = assess(one)
    assert any("not known here" in caution for caution in found.cautions)
    assert certificate_prior(one).source == "usual curves of any paving binder"
    assert found.mixing.governing.target_sd_k > 5.0


def test_aged_residue_is_checked_against_the_grade_and_kept_out_of_the_curve() -> None:
    one = read_certificates([SHEETS / "performance_grade.yaml"])[0]
    found = assess(one)
    assert {check.code for check in found.checks} >= {
        "grade-rutting_stiffness", "grade-rutting_stiffness_rtfo",
    }  # fmt: skip
    aged = [reading for reading in found.sheet.readings if reading.sample.condition == "rtfo"]
    assert aged
    assert not any(reading.usable for reading in aged)


def test_the_average_of_bulbs_is_taken_where_the_sheet_says_so() -> None:
    bulbs = [
        {"name": "C", "factor": "32 P/s", "time": "83.1 s"},
        {"name": "D", "factor": "16 P/s", "time": "168.4 s"},
    ]
    first, mean = (
        certificate_readings(
            sheet({"method": "vacuum capillary", "temperature": "60 C", "bulbs": bulbs,
                   "average": average})
        )[0]
        for average in (False, True)
    )  # fmt: skip
    assert first.viscosity_pas == pytest.approx(265.92)
    assert mean.viscosity_pas == pytest.approx((265.92 + 269.44) / 2)


def test_a_kinematic_viscosity_without_a_density_is_asked_for() -> None:
    one = sheet({"method": "kinematic viscosity", "temperature": "135 C", "viscosity": "434 cSt"})
    with pytest.raises(MissingInput):
        assess(one)


def test_a_file_without_a_certificate_is_refused(tmp_path: Path) -> None:
    path = tmp_path / "records.yaml"
    path.write_text("entries:\n  - {kind: note, fact: {text: x}}\n", encoding="utf-8")
    with pytest.raises(FaultyInput) as refused:
        read_certificates([path])
    assert "no certificate" in refused.value.faults[0].problem
