"""Modified binder: which window rules, what is refused, modifiers, blends and ageing."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.binder import (
    FlowSweep,
    Modifier,
    SupplierRange,
    ViscosityCurve,
    ViscosityTarget,
    aged_curve,
    blend_curves,
    blend_loglog_pas,
    check_line,
    cross_williamson_pas,
    crossover_frequency_rad_s,
    curve_avts,
    curve_through,
    equiviscous_window,
    exposed_surface_m2_t,
    fit_avts,
    fit_cross_williamson,
    govern,
    lowered_window,
    mixing_hardening,
    original_constants,
    oxidation_ratio,
    phase_angle_window,
    plain_rule_refusal,
    rap_binder_share,
    rap_blend_curve,
    shear_window,
    silo_ageing_caution,
    steady_shear_window,
    supplier_window,
    tank_hardening,
    waxed_curve,
)
from advisor.errors import FaultyInput, MissingInput, OutsideValidity

POLYMER = Modifier("polymer", "SBS", False, True, "SBS thins with shear.", "test", "derived")
RUBBER = Modifier("rubber", "crumb rubber", False, False, "it drifts.", "test", "derived")
WAX = Modifier(
    "wax", "wax", True, True, "", "test", "derived",
    viscosity_low=0.75, viscosity_high=0.90, applies_above_c=115.0,
)  # fmt: skip
SURFACTANT = Modifier(
    "surfactant", "surfactant", True, True, "", "test", "derived",
    offset_low_k=10.0, offset_high_k=20.0, caution="Confirm with trial mixes.",
)  # fmt: skip


@pytest.fixture
def virgin() -> ViscosityCurve:
    return fit_avts([60.0, 135.0], [200.0, 0.38], [0.035, 0.031]).curve()


@pytest.fixture
def rap() -> ViscosityCurve:
    return curve_through(60.0, 5000.0, 135.0, 1.4)


def test_for_modified_binder_the_supplier_rules_and_without_one_there_is_no_number(
    virgin: ViscosityCurve,
) -> None:
    plain = equiviscous_window(virgin, 0.17, 0.02)
    supplier = supplier_window(SupplierRange("mixing", 165.0, 180.0, "supplier's sheet (invented)"))
    beside = phase_angle_window(1.0, "mixing")
    found = govern("mixing", plain, supplier, [beside], modified_because="SBS thins with shear.")
    assert found.governing is supplier
    assert found.beside == (beside,)
    assert "SBS thins with shear." in found.refused[0]
    none = govern("mixing", plain, None, modified_because="SBS thins with shear.")
    assert none.governing is None
    assert "ask the supplier" in none.refused[1]
    assert govern("mixing", plain, supplier).governing is plain


def test_what_comes_from_memory_says_so() -> None:
    window = phase_angle_window(1.0, "mixing")
    assert window.how_known == "from memory"
    assert any("confirm" in caution for caution in window.cautions)
    with pytest.raises(OutsideValidity):
        phase_angle_window(1.0, "pumping")


def test_a_polymer_that_never_reaches_the_angle_gets_no_temperature() -> None:
    with pytest.raises(OutsideValidity):
        crossover_frequency_rad_s([0.1, 1.0, 10.0], [70.0, 68.0, 66.0])


def test_a_flow_sweep_gives_back_its_constants_and_a_window() -> None:
    rates = (0.1, 1.0, 6.8, 68.0, 500.0)

    def sweep(at: float, rest: float) -> FlowSweep:
        eta = cross_williamson_pas(rates, rest, 0.12, 0.55)
        return FlowSweep(at, rates, tuple(float(part) for part in eta))

    assert fit_cross_williamson(sweep(135.0, 6.0)) == pytest.approx((6.0, 0.12, 0.55), rel=1e-4)
    target = ViscosityTarget("500/s", "mixing", "high shear", 0.25, 0.275, 0.30, "test", "derived")
    window = shear_window([sweep(135.0, 6.0), sweep(165.0, 1.2)], target, 500.0)
    at = float(window.target_c)
    line = curve_through(
        135.0, cross_williamson_pas(500.0, 6.0, 0.12, 0.55),
        165.0, cross_williamson_pas(500.0, 1.2, 0.12, 0.55),
    )  # fmt: skip
    assert line.viscosity_pas(at) == pytest.approx(0.275, rel=1e-4)
    with pytest.raises(FaultyInput):
        shear_window([sweep(135.0, 6.0)], target, 500.0)


def test_steady_shear_is_drawn_through_all_its_points() -> None:
    target = ViscosityTarget(
        "steady", "compaction", "steady shear flow", 0.32, 0.35, 0.38, "test", "from memory"
    )
    window = steady_shear_window([76.0, 82.0, 88.0], [45.0, 24.0, 13.5], target)
    assert window.low_c < window.target_c < window.high_c
    assert window.how_known == "from memory"


def test_rubber_is_never_fitted_and_polymer_only_refused_the_plain_rule() -> None:
    check_line(POLYMER)
    with pytest.raises(OutsideValidity):
        check_line(RUBBER)
    assert plain_rule_refusal((WAX, POLYMER)) == "SBS thins with shear."
    assert plain_rule_refusal((WAX, SURFACTANT)) == ""


def test_wax_thins_above_melting_and_widens_the_curve(virgin: ViscosityCurve) -> None:
    waxed = waxed_curve(virgin, WAX)
    for at in (135.0, 150.0):
        ratio = float(waxed.viscosity_pas(at) / virgin.viscosity_pas(at))
        assert 0.75 < ratio < 0.90
    assert waxed.relative_sd(150.0) > virgin.relative_sd(150.0)
    assert "115 C" in waxed.notes[-1]
    with pytest.raises(OutsideValidity):
        waxed_curve(virgin, SURFACTANT)
    with pytest.raises(MissingInput):
        waxed_curve(virgin, Modifier("wax", "wax", True, True, "", "test", "derived"))


def test_a_surfactant_lowers_the_window_and_leaves_the_viscosity(virgin: ViscosityCurve) -> None:
    window = equiviscous_window(virgin, 0.17, 0.02)
    lower = lowered_window(window, SURFACTANT)
    assert window.target_c - lower.target_c == pytest.approx(15.0)
    assert window.low_c - lower.low_c == pytest.approx(20.0)
    assert window.high_c - lower.high_c == pytest.approx(10.0)
    assert lower.target_sd_k > window.target_sd_k
    assert "Confirm with trial mixes." in lower.cautions
    with pytest.raises(OutsideValidity):
        lowered_window(window, POLYMER)


@given(st.floats(0.0, 1.0))
def test_a_blend_lies_between_its_parts(share: float) -> None:
    found = float(blend_loglog_pas([200.0, 5000.0], [1.0 - share, share]))
    assert 200.0 * (1 - 1e-12) <= found <= 5000.0 * (1 + 1e-12)


def test_a_blend_of_a_binder_with_itself_is_itself(virgin: ViscosityCurve) -> None:
    found = blend_curves([virgin, virgin], [0.3, 0.7])
    assert found.parameters == pytest.approx(virgin.parameters, rel=1e-9)


def test_rap_stiffens_by_its_binder_share_and_the_degree_widens(
    virgin: ViscosityCurve, rap: ViscosityCurve
) -> None:
    share = float(rap_binder_share(0.30, 0.05, 0.05))
    assert share == pytest.approx(0.30)
    full = rap_blend_curve(virgin, rap, share, 1.0, 1.0)
    # 6.8 K for 30 % at full blending, worked separately from the same four viscosities
    assert float(full.temperature_c(0.17) - virgin.temperature_c(0.17)) == pytest.approx(
        6.8, abs=0.1
    )
    doubted = rap_blend_curve(virgin, rap, share)
    assert virgin.temperature_c(0.17) < doubted.temperature_c(0.17) < full.temperature_c(0.17)
    assert doubted.temperature_sd_k(0.17) > full.temperature_sd_k(0.17)
    with pytest.raises(FaultyInput):
        rap_blend_curve(virgin, rap, 1.2)
    with pytest.raises(FaultyInput):
        rap_blend_curve(virgin, rap, 0.3, 0.9, 0.5)


def test_two_polymers_and_wrong_shares_are_refused(
    virgin: ViscosityCurve, rap: ViscosityCurve
) -> None:
    with pytest.raises(OutsideValidity):
        blend_curves([virgin, rap], [0.5, 0.5], polymer_kinds=["SBS", "EVA"])
    with pytest.raises(FaultyInput):
        blend_curves([virgin, rap], [0.5, 0.6])


@given(st.floats(10.5, 12.0), st.integers(-1, 2))
def test_ageing_is_undone_by_its_inverse(level: float, code: int) -> None:
    before = curve_avts(level, -3.7)
    after = aged_curve(before, code)
    back = original_constants(after.parameters[0], after.parameters[1], code)
    assert tuple(float(part) for part in back) == pytest.approx((level, -3.7), rel=1e-9)


def test_the_poorer_the_resistance_the_harder_the_binder(virgin: ViscosityCurve) -> None:
    stages = [float(aged_curve(virgin, code).viscosity_pas(60.0)) for code in (-1, 0, 1, 2)]
    assert stages == sorted(stages)
    assert stages[0] > float(virgin.viscosity_pas(60.0))


def test_hotter_hardens_more_and_the_range_holds_its_middle() -> None:
    ten, twenty = mixing_hardening(155.0, 10.0), mixing_hardening(155.0, 20.0)
    for one in (ten, twenty):
        assert 1.0 < one.low < one.middle < one.high
    assert twenty.middle > ten.middle
    cooler = mixing_hardening(155.0, -10.0)
    assert cooler.high < 1.0
    assert oxidation_ratio(150.0, 150.0) == pytest.approx(1.0)


def test_surface_drives_the_hardening_in_a_tank() -> None:
    upright, lying = (float(exposed_surface_m2_t(height)) for height in (7.0, 1.2))
    deep, shallow = (tank_hardening(240.0, 160.0, surface) for surface in (upright, lying))
    assert shallow.high > deep.high
    assert tank_hardening(240.0, 180.0, upright).high > deep.high
    assert tank_hardening(240.0, 160.0, upright, circulated=True).high > deep.high
    assert tank_hardening(0.0, 160.0, upright).high == pytest.approx(1.0)
    with pytest.raises(FaultyInput):
        tank_hardening(-1.0, 160.0, upright)


def test_a_silo_says_nothing_while_short_and_more_for_open_mix() -> None:
    assert silo_ageing_caution(4.0) == ""
    assert silo_ageing_caution(8.0) == ""
    assert silo_ageing_caution(8.0, open_graded=True) != ""
    assert "sample before use" in silo_ageing_caution(30.0)


def test_a_range_written_upside_down_is_refused() -> None:
    with pytest.raises(FaultyInput):
        SupplierRange("mixing", 180.0, 165.0, "supplier's sheet (invented)")
    assert np.ndim(supplier_window(SupplierRange("mixing", 165, 180, "s")).target_c) == 0
