"""How the program works out each row of cases.csv: a relation by id, or by the start of ids."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from advisor.binder import (
    SPINDLES,
    Bulb,
    Precision,
    ViscosityCurve,
    ViscosityTarget,
    aged_viscosity_pas,
    ageing_index,
    arrhenius_between,
    blend_grunberg_pas,
    blend_loglinear_pas,
    blend_loglog_pas,
    blend_refutas_m2s,
    bulb_disagreement,
    complex_viscosity_pas,
    continuous_grade_c,
    critical_temperature_c,
    cross_williamson_pas,
    crossover_frequency_rad_s,
    curve_avts,
    curve_through,
    d341_constants,
    density_15c_from_specific_gravity,
    density_kgm3,
    difference_two_results,
    dynamic_from_kinematic_pas,
    fit_avts,
    fit_vft,
    flow_energy_avts_j_mol,
    flow_exponent,
    flow_viscosity_pas,
    in_service_viscosity_pas,
    intercept_kelvin,
    kinematic_d341_m2s,
    linear_volume_factor,
    log_rankine,
    loglog_viscosity,
    original_constants,
    oxidation_energy_j_mol,
    oxidation_ratio,
    penetration_index,
    penetration_viscosity_pas,
    phase_angle_temperature_c,
    refutas_index,
    rutting_stiffness_pa,
    share_for_critical_temperature,
    shear_rate_per_s,
    steady_shear_temperature_c,
    temperature_arrhenius,
    temperature_avts,
    temperature_per_decade_k,
    torque_share,
    vacuum_capillary_reading,
    viscosity_avts,
    volume_factor,
    volume_factor_60f,
    window_for,
    wlf_constants,
)
from advisor.units import celsius_from_fahrenheit, to_si
from binder.published import Case

PRECISION = Precision("vacuum capillary", 0.025, 0.035, True, "ASTM D2171", "from memory")
RPM = to_si(1.0, "rpm", "rotation")


def _bulbs(one: Case) -> list[Bulb]:
    return [
        Bulb(name, 0.1 * one[f"K_{name}"], one[f"t_{name}"]) for name in "BCD" if f"K_{name}" in one
    ]


def _certificate(one: Case) -> ViscosityCurve:
    """The line through 60 and 135 C of a certificate with a kinematic viscosity."""
    kinematic = 1e-6 * one["nu135_cSt"]
    hot = (
        kinematic * 1000.0 * one["rho135"]
        if "rho135" in one
        else dynamic_from_kinematic_pas(
            kinematic, 135.0, density_15c_from_specific_gravity(one["SG25_25"])
        )
    )
    return curve_through(60.0, 0.1 * one["eta60_P"], 135.0, hot)


def _avts(one: Case) -> ViscosityCurve:
    return curve_avts(one["A"], one["VTS"])


def _mixing(curve: ViscosityCurve, viscosity_pas: float = 0.17) -> float:
    return float(curve.temperature_c(viscosity_pas))


def _all_four(one: Case) -> float:
    """Slope through penetration, softening point, 60 and 135 C, each counted alike."""
    line = _certificate(one)
    t = np.array([25.0, one["SP_C"], 60.0, 135.0])
    eta = np.array([
        float(penetration_viscosity_pas(one["pen"])), 1300.0, *line.viscosity_pas(t[2:]),
    ])  # fmt: skip
    return float(np.polyfit(log_rankine(t), loglog_viscosity(eta), 1)[0])


def _kinematic_target(one: Case) -> float:
    nu = 1e-6 * one["nu_cSt"]
    target = ViscosityTarget("kinematic", "mixing", "kinematic", nu, nu, nu, "test", "derived")
    return float(window_for(_avts(one), target, 1000.0 * one["rho15"]).target_c)


def _grade(one: Case) -> float:
    low, high = 1000.0 * one["p1_kPa"], 1000.0 * one["p2_kPa"]
    limit = 1000.0 * one["limit_kPa"]
    return float(continuous_grade_c(one["T1_C"], low, one["T2_C"], high, limit))


def _from_two_rheometer_points(one: Case) -> float:
    cool, warm = (flow_viscosity_pas(one[f"G{n}_Pa"], one[f"d{n}"]) for n in "12")
    return _mixing(curve_through(one["T1"], cool, one["T2"], warm))


def _vft(one: Case) -> float:
    t = np.array([100.0, 135.0, 165.0])
    eta = np.array([one[f"eta{at:.0f}_mPas"] for at in t]) / 1000.0
    return _mixing(fit_vft(t, eta, np.full(3, 0.01)).curve())


def _arrhenius(one: Case) -> tuple[float, float]:
    points = (135.0, 0.001 * one["eta135_mPas"], 165.0, 0.001 * one["eta165_mPas"])
    level, energy = arrhenius_between(*points)
    return float(level), float(energy)


def _sd_of_two(one: Case) -> float:
    """Standard deviation of the mixing temperature through two readings."""
    t = np.array([one["T1"], one["T2"]])
    eta = viscosity_avts(t, 10.98, -3.68)
    curve = fit_avts(t, eta, np.array([one["cv1"], one["cv2"]])).curve()
    return float(curve.temperature_sd_k(0.001 * one["target_mPas"]))


def _blend(one: Case, rule: Callable[..., object], unit: float = 0.1) -> float:
    pair = np.array([one["virgin_P"], one["rap_P"]]) * unit
    return float(rule(pair, [1 - one["w_rap"], one["w_rap"]])) / unit  # type: ignore[arg-type]


def _heel(one: Case, rule: Callable[..., object]) -> float:
    pair = np.array([one["eta1"], one["eta2"]]) / 1000.0
    return 1000.0 * float(rule(pair, [1 - one["w2"], one["w2"]]))  # type: ignore[arg-type]


def _penetration_ratio(pen: float, other: float) -> float:
    return float(penetration_viscosity_pas(other) / penetration_viscosity_pas(pen))


def _crossing(one: Case) -> float:
    return crossover_frequency_rad_s([one["w1"], one["w2"]], [one["d1"], one["d2"]])


def _default(one: Case) -> float:
    found = viscosity_avts(one["T_C"], one["A"], one["VTS"])
    return float(found)


def _d341(one: Case) -> tuple[float, float]:
    cool, warm = (1e-6 * one["nu1"], 1e-6 * one["nu2"])
    level, slope = d341_constants(one["T1_C"], cool, one["T2_C"], warm, one["K_offset"])
    return float(level), float(slope)


def _oxidation(one: Case) -> float:
    return float(oxidation_ratio(one["T1_C"], one["T2_C"], 1000.0 * one["Ea_kJ_mol"]))


def _in_service(one: Case) -> float:
    air = celsius_from_fahrenheit(one["MAAT_F"])
    constants = (one["A_mixlaydown"], one["VTS"])
    return 10.0 * float(in_service_viscosity_pas(*constants, one["T_C"], one["t_months"], air))


# From ASTM D2493's offset to another: the same absolute temperature, another zero.
def _other_offset(one: Case) -> float:
    return _mixing(_avts(one), one["eta_Pas"]) + (459.67 - one["offset_F"]) / 1.8


RELATIONS: dict[str, Callable[[Case], object]] = {
    "LAB01": lambda c: 10.0 * vacuum_capillary_reading(
        60.0, [Bulb("B", 0.1 * c["K_P_per_s"], c["t_s"])], PRECISION
    ).viscosity_pas,
    "LAB02": lambda c: to_si(c["eta_P"], "P", "viscosity"),
    "LAB03": lambda c: 10.0 * vacuum_capillary_reading(60.0, _bulbs(c), PRECISION).viscosity_pas,
    "LAB04": lambda c: 100.0 * bulb_disagreement(_bulbs(c)),
    "VCF08": lambda c: volume_factor(c["T_C"], "B"),
    "VCF09": lambda c: volume_factor(c["T_C"], "B"),
    "VCF11": lambda c: volume_factor_60f(celsius_from_fahrenheit(c["T_F"])),
    "VCF12": lambda c: volume_factor_60f(celsius_from_fahrenheit(c["T_F"])),
    "VCF14": lambda c: linear_volume_factor(c["T_C"]),
    "VCF": lambda c: volume_factor(c["T_C"]),
    "DEN01": lambda c: density_kgm3(c["T_C"], 1000.0 * c["rho15"]) / 1000.0,
    "DEN02": lambda c: density_15c_from_specific_gravity(c["SG25_25"]) / 1000.0,
    "DEN03": lambda c: 1000.0 * dynamic_from_kinematic_pas(
        1e-6 * c["nu_cSt"], c["T_C"], density_15c_from_specific_gravity(c["SG25_25"])
    ),
    "DEN": lambda c: 1000.0 * dynamic_from_kinematic_pas(
        1e-6 * c["nu_cSt"], c["T_C"], 1000.0 * c["rho15"]
    ),
    "RV01": lambda c: shear_rate_per_s(RPM, SPINDLES[int(c["spindle_no"])]),
    "RV02": lambda c: shear_rate_per_s(RPM, SPINDLES[int(c["spindle_no"])]),
    "RV04": lambda c: shear_rate_per_s(c["rpm"] * RPM, SPINDLES[27]),
    "RV05": lambda c: shear_rate_per_s(c["rpm"] * RPM, SPINDLES[21]),
    "RV": lambda c: 100.0 * torque_share(
        c["eta_Pas"], c["rpm"] * RPM, SPINDLES[int(c["spindle_no"])]
    ),
    "D34101": lambda c: _d341(c)[1],
    "D34102": lambda c: _d341(c)[0],
    "D34103": lambda c: 1e6 * kinematic_d341_m2s(c["T_C"], *_d341(c), c["K_offset"]),
    "DEF12": lambda c: 1000.0 * _default(c),
    "DEF14": lambda c: 1000.0 * _default(c),
    "DEF18": lambda c: 1000.0 * _default(c),
    **dict.fromkeys(("DEF19", "DEF20", "DEF22", "DEF23", "DEF24"), lambda c: 10.0 * _default(c)),
    "DEF": _default,
    "EQV12": lambda c: 1000.0 * viscosity_avts(
        c["T_C"], c["A_K"] - intercept_kelvin(0.0, c["VTS"]), c["VTS"]
    ),
    "EQV13": _kinematic_target,
    "EQV15": _other_offset,
    "EQV16": _other_offset,
    "EQV": lambda c: _mixing(_avts(c), c["eta_Pas"] if "eta_Pas" in c else c["eta_mPas"] / 1000.0),
    "CERT01": lambda c: _certificate(c).parameters[1],
    "CERT02": lambda c: _certificate(c).parameters[0],
    "CERT03": lambda c: _mixing(_certificate(c)),
    "CERT04": lambda c: _mixing(_certificate(c), 0.28),
    "CERT06": lambda c: _mixing(_certificate(c), 0.10),
    "CERT07": lambda c: _mixing(
        curve_through(60.0, 0.1 * c["eta60_P"], 135.0, 0.001 * c["nu135_cSt"])
    ),
    "CONV07": lambda c: _mixing(
        curve_through(25.0, penetration_viscosity_pas(c["pen"]), c["SP_C"], 1300.0)
    ),
    "CONV08": _all_four,
    "CONV10": lambda c: penetration_index(c["pen"], c["SP_C"]),
    "CONV": lambda c: 10.0 * penetration_viscosity_pas(c["pen"]),
    **dict.fromkeys(
        ("DSR16", "DSR17", "DSR19"),
        lambda c: rutting_stiffness_pa(1000.0 * c["G_kPa"], c["delta_deg"]) / 1000.0,
    ),
    **dict.fromkeys(
        ("DSR20", "DSR21"),
        lambda c: 1000.0 * complex_viscosity_pas(1000.0 * c["G_kPa"], c["omega"]),
    ),
    **dict.fromkeys(
        ("DSR23", "DSR24", "DSR26", "DSR27", "DSR30"),
        lambda c: flow_viscosity_pas(c["G_Pa"], c["delta_deg"], c["omega"]),
    ),
    "DSR28": lambda c: flow_exponent(c["omega"]),
    "DSR31": _from_two_rheometer_points,
    "DSR": _grade,
    "AGE": lambda c: ageing_index(c["rtfo_kPa"], c["unaged_kPa"]),
    **dict.fromkeys(
        ("CORE01", "CORE05", "CORE07", "CORE11", "CORE13"), lambda c: _mixing(_certificate(c))
    ),
    "CORE": lambda c: _certificate(c).parameters[1],
    "PMB01": lambda c: cross_williamson_pas(c["shear"], c["eta0"], c["K"], c["m"]),
    "PMB02": lambda c: cross_williamson_pas(c["shear"], c["eta0"], c["K"], c["m"]),
    **dict.fromkeys(
        ("PMB04", "PMB06", "PMB10"),
        lambda c: phase_angle_temperature_c(c["omega_rad_s"], "mixing"),
    ),
    **dict.fromkeys(
        ("PMB05", "PMB07", "PMB11"),
        lambda c: phase_angle_temperature_c(c["omega_rad_s"], "compaction"),
    ),
    "PMB12": _crossing,
    "PMB13": _crossing,
    "PMB15": lambda c: steady_shear_temperature_c(
        c.several("T_C"), c.several("eta_Pas_at_500Pa"), c["target"]
    ),
    "GAS09": lambda c: original_constants(c["A_aged"], c["VTS_aged"], c["code"])[0],
    "GAS10": lambda c: original_constants(c["A_aged"], c["VTS_aged"], c["code"])[1],
    "GAS11": lambda c: _mixing(_avts(c), c["eta_Pas"]),
    "GAS12": _in_service,
    "GAS13": _in_service,
    "GAS": lambda c: 1000.0 * aged_viscosity_pas(c["eta_orig_cP"] / 1000.0, c["code"]),
    **dict.fromkeys(("KIN01", "KIN02", "KIN03", "KIN04"), _oxidation),
    "KIN06": lambda c: oxidation_energy_j_mol(c["T1_C"], c["T2_C"], c["ratio"]) / 1000.0,
    "KIN07": lambda c: flow_energy_avts_j_mol(c["eta_mPas"] / 1000.0, c["A"], c["VTS"]) / 1000.0,
    "KIN08": lambda c: temperature_arrhenius(0.17, *_arrhenius(c)),
    "KIN09": lambda c: _arrhenius(c)[1] / 1000.0,
    "KIN11": _vft,
    "KIN12": lambda c: wlf_constants(1.0, c["T0_C"], c["T_ref_C"])[1],
    "KIN13": lambda c: wlf_constants(c["b"], 135.0 - c["C2"], 135.0)[0],
    "BLD01": lambda c: _blend(c, blend_loglog_pas),
    # the trap: poise taken for centipoise inside the logarithms
    "BLD02": lambda c: _blend(c, blend_loglog_pas, 0.001),
    "BLD03": lambda c: _blend(c, blend_loglinear_pas),
    "BLD09": lambda c: 1e6 * blend_refutas_m2s(
        1e-6 * np.array([c["nu1"], c["nu2"]]), [c["x1"], 1 - c["x1"]]
    ),
    "BLD10": lambda c: 1e4 * blend_refutas_m2s(
        1e-6 * np.array([c["virgin_cSt"], c["rap_cSt"]]), [1 - c["w_rap"], c["w_rap"]]
    ),
    "BLD11": lambda c: 10.0 * blend_grunberg_pas(
        0.1 * c["virgin_P"], 0.1 * c["rap_P"], c["w_rap"], c["G"]
    ),
    "BLD12": lambda c: share_for_critical_temperature(c["T_blend"], c["T_virgin"], c["T_rap"]),
    "BLD14": lambda c: critical_temperature_c(c["T_virgin"], c["T_rap"], c["x"]),
    "BLD15": lambda c: critical_temperature_c(c["T_virgin"], c["T_rap"], c["x"]),
    "BLD16": lambda c: _heel(c, blend_loglog_pas),
    "BLD17": lambda c: _heel(c, blend_loglinear_pas),
    "BLD19": lambda c: _mixing(
        curve_through(60.0, 0.1 * c["virgin60_P"], 135.0, 0.001 * c["virgin135_mPas"])
    ),
    "BLD": lambda c: refutas_index(1e-6 * c["nu_cSt"]),
    "UNC01": lambda c: temperature_per_decade_k(c["eta_mPas"] / 1000.0, c["A"], c["VTS"]),
    "UNC02": lambda c: temperature_per_decade_k(c["eta_mPas"] / 1000.0, c["A"], c["VTS"]),
    "UNC03": lambda c: (
        temperature_avts(c["eta_mPas"] / 1000.0 * 10**0.001, c["A"], c["VTS"])
        - temperature_avts(c["eta_mPas"] / 1000.0 / 10**0.001, c["A"], c["VTS"])
    ) / 0.002,
    "UNC04": lambda c: (
        _mixing(_avts(c), 0.17 / (1 + c["pct"] / 100.0)) - _mixing(_avts(c))
    ),
    "UNC06": lambda c: 100.0 * (
        1 - 10 ** (c["dT"] / temperature_per_decade_k(c["eta_mPas"] / 1000.0, c["A"], c["VTS"]))
    ),
    **dict.fromkeys(("UNC07", "UNC09", "UNC11", "UNC13"), _sd_of_two),
    **dict.fromkeys(
        ("UNC08", "UNC12", "UNC14"), lambda c: difference_two_results(_sd_of_two(c))
    ),
    "UNC16": lambda c: difference_two_results(c["s1_pct"]),
    "UNC17": lambda c: difference_two_results(c["s1_pct"]),
    "UNC18": lambda c: 100.0 * (
        _penetration_ratio(c["pen"] * (1 + c["pct"] / 200), c["pen"] * (1 - c["pct"] / 200)) - 1
    ),
    "UNC19": lambda c: _mixing(_certificate(c)),
    "UNC20": lambda c: _mixing(_certificate(c)),
    "UNC22": lambda c: _penetration_ratio(c["pen1"], c["pen2"]),
}  # fmt: skip


def worked_out(one: Case) -> float:
    """What the program gives for a row."""
    start = one.id.rstrip("0123456789")
    start = "D34" if one.id.startswith("D341") else start
    return float(RELATIONS.get(one.id, RELATIONS.get(start))(one))  # type: ignore[misc,arg-type]
