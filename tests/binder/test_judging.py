"""Judging sheets: mistakes in typing, two sources side by side, drift, the tank's bounds."""

from __future__ import annotations

import numpy as np
import pytest

from advisor.binder import (
    Precision,
    ViscosityCurve,
    compare_curves,
    curve_avts,
    drift_chart,
    fit_avts,
    flash_margin_k,
    kinematic_value_reading,
    planned_sd_k,
    prior_from_viscosities,
    rotational_reading,
    tank_range,
    typing_doubts,
    unit_confusion,
    vacuum_capillary_reading,
    viscosity_value_reading,
)
from advisor.binder.capillary import Bulb
from advisor.errors import MissingInput, OutsideValidity

VACUUM = Precision("vacuum capillary", 0.025, 0.035, True, "ASTM D2171", "from memory")
KINEMATIC = Precision("kinematic capillary", 0.0064, 0.031, True, "ASTM D2170", "from memory")
ROTATIONAL = Precision("rotational", 0.012, 0.043, True, "AASHTO T 316", "from memory")
GRADE = prior_from_viscosities(
    [60.0, 135.0], [250.0, 0.42], [0.35, 0.25], 0.5, "invented for this test", "derived"
)
ASKED = [("mixing", 0.17), ("compaction", 0.28)]


def sheet(at60: float = 250.0, at135: float = 0.42, cool_c: float = 60.0, hot_c: float = 135.0):
    vacuum = vacuum_capillary_reading(cool_c, [Bulb("B", at60 / 100.0, 100.0)], VACUUM)
    return [vacuum, viscosity_value_reading(hot_c, at135, ROTATIONAL)]


def test_a_sound_sheet_raises_no_doubt() -> None:
    assert typing_doubts(sheet(), GRADE) == ()
    assert typing_doubts([], GRADE) == ()


@pytest.mark.parametrize(
    ("typed", "index", "words"),
    [
        (sheet(at60=2500.0), 0, "ten times too high"),
        (sheet(at135=0.042), 1, "ten times too low"),
        (sheet(at135=420.0), 1, "a thousand times too high"),
        (sheet(hot_c=275.0), 1, "Fahrenheit"),
    ],
    ids=["poise for pascal-second", "a slipped point", "mPa.s for Pa.s", "Fahrenheit"],
)
def test_the_likely_slip_comes_first(typed: list, index: int, words: str) -> None:
    found = typing_doubts(typed, GRADE)
    assert found
    assert (found[0].index, words in found[0].sentence) == (index, True)
    assert found[0].odds >= 10.0


def test_a_kinematic_figure_copied_as_a_dynamic_one_is_seen() -> None:
    density_15c, at_135c = 1030.0, 954.4
    kinematic = kinematic_value_reading(135.0, 440e-6, density_15c, KINEMATIC)
    copied = rotational_reading(135.0, [0.440] * 3, ROTATIONAL, torque=0.5)
    assert "cSt" in unit_confusion([copied, kinematic], at_135c)
    sound = rotational_reading(135.0, [0.420] * 3, ROTATIONAL, torque=0.5)
    assert unit_confusion([sound, kinematic], at_135c) == ""


def binder(factor: float, sd: float = 0.02) -> ViscosityCurve:
    t = np.array([135.0, 165.0])
    eta = factor * curve_avts(11.19, -3.76).viscosity_pas(t)
    return fit_avts(t, eta, np.full(2, sd)).curve()


def test_a_stiffer_source_runs_hotter_and_is_seen_where_tests_allow() -> None:
    found = compare_curves(binder(1.0), binder(1.4), ASKED)
    first = found.shifts[0]
    assert first.shift_k == pytest.approx(7.5, abs=1.5)
    assert first.detectable
    assert "large change" in found.sentence
    back = compare_curves(binder(1.4), binder(1.0), ASKED).shifts[0]
    assert back.shift_k == pytest.approx(-first.shift_k)
    assert back.standard_error_k == pytest.approx(first.standard_error_k)


def test_a_shift_within_the_tests_is_called_chance_and_says_what_would_settle_it() -> None:
    found = compare_curves(binder(1.0, 0.10), binder(1.10, 0.10), ASKED)
    assert not found.shifts[0].detectable
    assert "chance" in found.sentence
    assert "one laboratory" in found.settles


def test_a_real_shift_too_small_to_matter_is_called_that() -> None:
    found = compare_curves(binder(1.0, 0.002), binder(1.05, 0.002), ASKED, same_laboratory=True)
    assert found.shifts[0].detectable
    assert "does not matter" in found.sentence


def test_more_planned_readings_settle_more() -> None:
    curve = curve_avts(10.98, -3.68)
    two = planned_sd_k(curve, [135.0, 165.0], 0.012, 0.17)
    four = planned_sd_k(curve, [135.0, 145.0, 155.0, 165.0], 0.012, 0.17)
    # 0.22 K for 135 and 165 C at 1.2 %, worked separately by error propagation
    assert two == pytest.approx(0.22, abs=0.01)
    assert four < two


def test_a_steady_source_stays_quiet_and_a_drifting_one_is_seen_before_the_limit() -> None:
    noise = np.random.default_rng(9).normal(0.0, 1.0, 40)
    quiet = drift_chart(150.0 + noise, 0.3, "C")
    assert quiet.signal is None
    assert "No drift" in quiet.sentence
    drifting = 150.0 + noise + np.concatenate([np.zeros(12), np.linspace(0.2, 5.6, 28)])
    found = drift_chart(drifting, 0.3, "C")
    assert found.signal is not None
    assert 10 <= found.since <= found.signal
    assert "upwards" in found.sentence
    # a limit of five degrees on the single certificate would have waited longer
    assert found.signal < int(np.flatnonzero(drifting > 155.0)[0])
    assert "downwards" in drift_chart(-drifting, 0.3, "C").sentence


def test_a_source_without_noise_is_judged_by_the_test_and_few_certificates_not_at_all() -> None:
    assert drift_chart([150.0] * 8, 0.3, "C").sd == 0.3
    with pytest.raises(MissingInput):
        drift_chart([150.0] * 4, 0.3, "C")


def test_one_false_signal_in_hundreds_of_certificates() -> None:
    # average run length of this scheme without a shift: about 465 with centre and spread known
    generator = np.random.default_rng(12)
    first = []
    for _ in range(300):
        x = generator.normal(0.0, 1.0, 2000)
        x[:100] = np.tile([0.564, -0.564], 50)  # a centre of 0 and a spread of 1 for the baseline
        found = drift_chart(x, 0.1, "", baseline=100).signal
        first.append(2000 if found is None else found - 99)
    assert 380 <= float(np.mean(first)) <= 560


def test_the_tank_is_bounded_by_pumping_supplier_and_flash_point() -> None:
    curve = binder(1.0)
    found = tank_range(
        curve, flash_point_c=215.0, flash_method="open cup", supplier_low_c=140.0,
        supplier_high_c=190.0, supplier_source="sheet (invented)",
    )  # fmt: skip
    assert found.low is not None
    assert found.low.set_by == "supplier's storage range"
    assert found.high.value_c == 185.0
    assert [bound.value_c for bound in found.highs] == [185.0, 190.0, 200.0]
    assert any("vapour space" in caution for caution in found.cautions)
    assert flash_margin_k(165.0, 215.0) == 50.0


def test_a_tank_without_flash_point_says_so_and_crossing_bounds_are_refused() -> None:
    assert any("flash point" in caution for caution in tank_range(None).cautions)
    assert any(
        "open or closed cup" in caution
        for caution in tank_range(None, flash_point_c=280.0).cautions
    )
    with pytest.raises(OutsideValidity):
        tank_range(binder(1.0), supplier_low_c=190.0, flash_point_c=200.0)
