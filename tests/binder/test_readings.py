"""What a laboratory reports: validity rules of each method, precision, what stays out of a fit."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.binder import (
    SPINDLES,
    Bulb,
    Precision,
    PrecisionTable,
    Sample,
    density_15c_from_density,
    density_kgm3,
    difference_two_results,
    dynamic_from_kinematic_pas,
    error_correlation,
    kinematic_capillary_reading,
    kinematic_from_dynamic_m2s,
    kinematic_value_reading,
    penetration_reading,
    penetration_viscosity_pas,
    rheometer_reading,
    rotational_reading,
    softening_point_reading,
    vacuum_capillary_reading,
    viscosity_value_reading,
    volume_factor,
)
from advisor.errors import FaultyInput, MissingInput, OutsideValidity
from advisor.units import to_si

VACUUM = Precision("vacuum capillary", 0.025, 0.035, True, "ASTM D2171", "from memory")
KINEMATIC = Precision("kinematic capillary", 0.0064, 0.031, True, "ASTM D2170", "from memory")
ROTATIONAL = Precision("rotational", 0.012, 0.043, True, "AASHTO T 316", "from memory")
RHEOMETER = Precision("rheometer", 0.023, 0.060, True, "AASHTO T 315", "from memory")
PENETRATION = Precision("penetration", 0.014, 0.038, True, "ASTM D5-97", "looked up", 60.0)
SOFTENING = Precision("softening point", 0.41, 0.70, False, "ASTM D36", "from memory")
# bulbs B, C, D of one tube: the first too quick, the others in agreement
TUBE = (Bulb("B", 12.84, 41.0), Bulb("C", 6.39, 84.2), Bulb("D", 4.02, 133.5))


def rpm(number: float) -> float:
    return to_si(number, "rpm", "rotation")


def test_the_first_bulb_over_a_minute_counts_and_the_average_where_the_method_says_so() -> None:
    first = vacuum_capillary_reading(60.0, TUBE, VACUUM)
    assert first.viscosity_pas == pytest.approx(6.39 * 84.2)
    assert first.usable
    assert any("left out: bulb B" in remark for remark in first.remarks)
    mean = vacuum_capillary_reading(60.0, TUBE, VACUUM, average=True)
    assert mean.viscosity_pas == pytest.approx((6.39 * 84.2 + 4.02 * 133.5) / 2)


def test_bulbs_that_drift_apart_speak_of_shear_and_stay_out_of_the_fit() -> None:
    drifting = (Bulb("C", 6.39, 84.2), Bulb("D", 4.02, 150.0))
    found = vacuum_capillary_reading(60.0, drifting, VACUUM)
    assert not found.usable
    assert "shear rate" in found.unusable[0]
    assert found.viscosity_pas > 0.0  # kept all the same


def test_a_flow_under_a_minute_is_kept_and_not_used() -> None:
    quick = vacuum_capillary_reading(60.0, TUBE[:1], VACUUM)
    assert not quick.usable
    assert "smaller tube" in quick.unusable[0]


def test_a_factor_no_tube_has_is_remarked() -> None:
    odd = vacuum_capillary_reading(60.0, [Bulb("B", 0.03, 100.0)], VACUUM)
    assert odd.usable
    assert any("far from every usual tube" in remark for remark in odd.remarks)


def test_both_capillaries_refuse_what_cannot_be() -> None:
    with pytest.raises(FaultyInput):
        vacuum_capillary_reading(60.0, [], VACUUM)
    with pytest.raises(FaultyInput):
        vacuum_capillary_reading(60.0, [Bulb("B", 12.8, 0.0)], VACUUM)
    with pytest.raises(FaultyInput):
        kinematic_value_reading(135.0, -1e-6, 1030.0, KINEMATIC)


def test_the_kinematic_capillary_turns_by_density() -> None:
    found = kinematic_capillary_reading(135.0, [Bulb("C", 1.2e-6, 361.5)], 1032.0, KINEMATIC)
    density = float(density_kgm3(135.0, 1032.0))
    assert found.viscosity_pas == pytest.approx(1.2e-6 * 361.5 * density)
    assert found.usable
    thick = kinematic_value_reading(60.0, 0.2, 1032.0, KINEMATIC)
    assert not thick.usable
    edge = kinematic_value_reading(135.0, 0.01, 1032.0, KINEMATIC)
    assert edge.usable
    assert any("precision" in remark for remark in edge.remarks)


@given(st.floats(900.0, 1100.0), st.floats(0.0, 200.0), st.floats(1e-5, 1.0))
def test_density_and_kinematic_viscosity_go_there_and_back(
    density: float, at: float, nu: float
) -> None:
    there = density_kgm3(at, density)
    assert density_15c_from_density(there, at) == pytest.approx(density, rel=1e-12)
    eta = dynamic_from_kinematic_pas(nu, at, density)
    assert kinematic_from_dynamic_m2s(eta, at, density) == pytest.approx(nu, rel=1e-12)


def test_density_at_15_c_is_itself_though_the_printed_factor_is_not_one() -> None:
    assert density_kgm3(15.0, 1030.0) == pytest.approx(1030.0, rel=1e-12)
    assert volume_factor(15.0) != pytest.approx(1.0, abs=1e-4)
    with pytest.raises(FaultyInput):
        volume_factor(15.0, "C")  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("spindle", "speed", "value", "usable"),
    [
        (21, 20.0, 0.17, False),  # 6.8 % of full scale
        (21, 50.0, 0.17, True),
        (27, 20.0, 0.45, False),  # 3.6 %: this pair measures from about 1.25 Pa.s
        (27, 20.0, 1.5, True),
        (27, 100.0, 3.0, False),  # over full scale
    ],
)
def test_the_torque_window_is_worked_out_from_spindle_and_speed(
    spindle: int, speed: float, value: float, usable: bool
) -> None:
    found = rotational_reading(
        135.0, [value] * 3, ROTATIONAL, spindle=spindle, speed_rad_s=rpm(speed)
    )
    assert found.usable is usable
    assert found.viscosity_pas == value
    assert found.shear_rate is not None


def test_the_torque_shown_goes_before_the_one_worked_out() -> None:
    found = rotational_reading(135.0, [0.45] * 3, ROTATIONAL, spindle=27, torque=0.45)
    assert found.usable
    assert found.shear_rate is None


def test_three_readings_are_averaged_and_a_spread_keeps_them_out() -> None:
    steady = rotational_reading(135.0, [0.40, 0.41, 0.42], ROTATIONAL, torque=0.3)
    assert steady.viscosity_pas == pytest.approx(0.41)
    assert steady.usable
    settling = rotational_reading(135.0, [0.40, 0.44, 0.48], ROTATIONAL, torque=0.3)
    assert not settling.usable
    alone = rotational_reading(135.0, [0.40], ROTATIONAL, torque=0.3)
    assert alone.usable
    assert any("three readings" in remark for remark in alone.remarks)
    with pytest.raises(FaultyInput):
        rotational_reading(135.0, [], ROTATIONAL)


def test_outside_the_methods_temperatures_a_rotational_reading_is_not_used() -> None:
    assert not rotational_reading(30.0, [900.0] * 3, ROTATIONAL, torque=0.5).usable


def test_an_elastic_binder_is_not_converted_for_mixing() -> None:
    viscous = rheometer_reading(64.0, 1161.0, 87.5, RHEOMETER)
    elastic = rheometer_reading(76.0, 1174.0, 67.1, RHEOMETER)
    assert viscous.usable
    assert not elastic.usable
    assert "elastic" in elastic.unusable[0]
    with pytest.raises(FaultyInput):
        rheometer_reading(64.0, 1161.0, 95.0, RHEOMETER)
    with pytest.raises(OutsideValidity):
        rheometer_reading(64.0, 1161.0, 87.0, RHEOMETER, frequency_rad_s=170.0)


def test_penetration_and_softening_point_enter_as_wide_points() -> None:
    pen = penetration_reading(64.0, PENETRATION)
    assert pen.converted
    assert pen.relative_sd > 0.5
    assert pen.viscosity_pas < float(penetration_viscosity_pas(64.0))
    assert not penetration_reading(64.0, PENETRATION, temperature_c=20.0).usable
    soft = softening_point_reading(49.6, SOFTENING)
    assert soft.temperature_c == 49.6
    assert soft.usable
    assert not softening_point_reading(62.5, SOFTENING, modified=True).usable


def test_a_value_without_its_figures_says_so() -> None:
    found = viscosity_value_reading(135.0, 0.42, ROTATIONAL)
    assert found.as_written == "0.42 Pa.s"
    assert "value only" in found.remarks[0]


def test_between_two_rows_of_a_precision_table_the_wider_counts() -> None:
    table = PrecisionTable((
        Precision("penetration", 0.35, 1.4, False, "ASTM D5-97", "looked up", 0.0, 50.0),
        Precision("penetration", 0.014, 0.038, True, "ASTM D5-97", "looked up", 60.0),
    ))  # fmt: skip
    assert table.find("penetration", 40.0).sd(40.0, "several") == 1.4
    assert table.find("penetration", 100.0).sd(100.0, "several") == pytest.approx(3.8)
    assert table.find("penetration", 55.0).sd(55.0, "several") == pytest.approx(2.09)
    with pytest.raises(MissingInput):
        table.find("ductility")


def test_readings_of_one_laboratory_share_its_bias_and_of_two_do_not() -> None:
    def at(temperature_c: float, laboratory: str):
        sample = Sample(laboratory=laboratory)
        return rotational_reading(temperature_c, [0.4] * 3, ROTATIONAL, torque=0.5, sample=sample)

    same = error_correlation([at(135.0, "a"), at(165.0, "a")])
    assert same[0, 1] == pytest.approx(1.0 - (0.012 / 0.043) ** 2)
    apart = error_correlation([at(135.0, "a"), at(165.0, "b")])
    assert apart == pytest.approx(np.eye(2))


def test_two_results_of_a_test_differ_by_2_83_deviations() -> None:
    assert difference_two_results(1.0) == pytest.approx(2.0 * np.sqrt(2.0))


def test_every_spindle_shears_less_the_thinner_it_is() -> None:
    from advisor.binder import shear_rate_per_s

    rates = [float(shear_rate_per_s(rpm(20.0), SPINDLES[number])) for number in (21, 27, 29)]
    assert rates == sorted(rates, reverse=True)
