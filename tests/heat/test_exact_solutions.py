"""The conduction solver against closed solutions, all to 0.05 C (issue 4)."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.special import erf

from advisor.heat import (
    BaseThermal,
    Conduction,
    Face,
    Layer,
    Mat,
    MixThermal,
    Series,
    conduct,
    contact_temperature_c,
    cool_mat,
    growing_times_s,
    rolling_time_s,
)
from heat.published import Case, cases

WITHIN_C = 0.05
STEPS = 40


def every(*starts: str) -> pytest.MarkDecorator:
    return pytest.mark.parametrize("case", cases(*starts), ids=str)


def cooled_slab(case: Case, depth_m: float, start_c: float, air: float | Series) -> Conduction:
    return conduct(
        (Layer(case["L"], case["k"], case["rho"] * case["cp"], start_c, cells=10),),
        Face(case["h_top"], air),
        growing_times_s(case["t_s"], STEPS),
        bottom=Face(case["h_bottom"], air),
        depths_m=np.array([depth_m]),
    )


@every("SER")
def test_plane_wall_with_convection(case: Case) -> None:
    # half thickness 1, conductivity 1, capacity 1: Bi is the coefficient, Fo the time
    run = conduct(
        (Layer(1.0, 1.0, 1.0, 1.0, cells=10),),
        Face(case["Bi"], 0.0),
        growing_times_s(case["Fo"], STEPS),
    )
    found = {"surface": run.top_c, "centre": run.bottom_c}[case.inputs["where"]]
    # 0.05 C of an excess of 140 K
    assert found[-1, 0] == pytest.approx(case.expected, abs=WITHIN_C / 140)


@every("EIG-", "SLAB2-EIG1")
def test_first_mode_of_a_plane_wall(case: Case) -> None:
    """Late in the cooling only the first eigenvalue is left: it is the rate of decay."""
    one, other = (case["Bi"], 0.0) if "Bi" in case.inputs else (case["Bi1"], case["Bi2"])
    late, later = np.array([1.0, 1.5])
    run = conduct(
        (Layer(1.0, 1.0, 1.0, 1.0, cells=10),),
        Face(one, 0.0),
        np.union1d(growing_times_s(late, STEPS), np.linspace(late, later, 21)),
        bottom=Face(other, 0.0),
    )
    at = run.times_s[:, 0]
    first, last = (run.mean_c[0, np.argmin(abs(at - time)), 0] for time in (late, later))
    assert np.sqrt(np.log(first / last) / (later - late)) == pytest.approx(case.expected, rel=1e-3)


@every("C1-")
def test_one_term_of_a_plane_wall(case: Case) -> None:
    """Middle of the wall late in the cooling: C1 exp(-eigenvalue^2 Fo)."""
    root = next(row.expected for row in cases("EIG-") if row["Bi"] == case["Bi"])
    run = conduct(
        (Layer(1.0, 1.0, 1.0, 1.0, cells=10),), Face(case["Bi"], 0.0), growing_times_s(0.8, STEPS)
    )
    assert run.bottom_c[-1, 0] == pytest.approx(
        case.expected * np.exp(-0.8 * root**2), abs=WITHIN_C / 140
    )


@every("SLAB1", "SLAB2-T", "SLAB2-M", "SLAB2-B")
def test_slab_with_convection(case: Case) -> None:
    run = cooled_slab(case, case["L"] / 2, case["T0"], case["Tair"])
    found = {
        "top": run.top_c[-1],
        "bottom": run.bottom_c[-1],
        "mid": run.depth_c[0, -1],
        "mean": run.mean_c[0, -1],
    }[case.inputs["where"]]
    assert found[0] == pytest.approx(case.expected, abs=WITHIN_C)


@every("RAMP")
def test_slab_under_air_that_warms(case: Case) -> None:
    end = case["t_s"]
    warming = case["Tair_rate_K_per_h"] / 3600 * end
    air = Series(np.array([0.0, end]), case["Tair0"] + np.array([0.0, warming]))
    run = cooled_slab(case, case["L"] / 2, case["T0"], air)
    found = run.top_c if case["x"] == 0 else run.bottom_c
    assert found[-1, 0] == pytest.approx(case.expected, abs=WITHIN_C)


@every("SEMI")
def test_thick_body_with_convection_or_flux(case: Case) -> None:
    capacity = case["rho"] * case["cp"]
    reach = 6 * np.sqrt(case["k"] / capacity * case["t_s"]) + case["x"]
    layer = Layer(reach, case["k"], capacity, case["T0"], cells=16, spacing="top")
    face = (
        Face(case["h"], case["Tair"])
        if case.id.startswith("SEMI-H")
        else Face(1e-9, case["T0"], gain_wm2=case["q"])
    )
    run = conduct(
        (layer,), face, growing_times_s(case["t_s"], STEPS), depths_m=np.array([case["x"]])
    )
    found = run.top_c[-1] if case["x"] == 0 else run.depth_c[0, -1]
    assert found[0] == pytest.approx(case.expected, abs=WITHIN_C)


@every("CYL")
def test_long_cylinder_with_convection(case: Case) -> None:
    run = conduct(
        (
            Layer(
                case["R"], case["k"], case["rho"] * case["cp"], case["T0"], cells=16, spacing="top"
            ),
        ),
        Face(case["U"], case["Tair"]),
        growing_times_s(case["t_s"], STEPS),
        radius_m=case["R"],
    )
    found = {"mean": run.mean_c[0], "wall": run.top_c}[case.inputs["where"]]
    assert found[-1, 0] == pytest.approx(case.expected, abs=WITHIN_C)


def _pair(case: Case) -> tuple[MixThermal, BaseThermal]:
    upper, lower = (
        (case[f"k{i}"], case[f"rho{i}"], case[f"cp{i}"])
        if f"rho{i}" in case.inputs
        else (case[f"k{i}"], 2300.0, case[f"C{i}_J_m3K"] / 2300.0)
        for i in (1, 2)
    )
    return MixThermal(*upper, emissivity=0.0, absorptivity=1.0), BaseThermal(*lower)


@every("CONTACT-")
def test_two_bodies_in_perfect_contact(case: Case) -> None:
    mix, base = _pair(case)
    found = contact_temperature_c(mix, case["T1"], base, case["T2"])
    assert found == pytest.approx(case.expected, abs=case.tolerance)


@every("CONTACTR")
def test_two_bodies_with_a_contact_resistance(case: Case) -> None:
    mix, base = _pair(case)
    end = case["t_s"]
    upper = 8 * np.sqrt(mix.diffusivity_m2s * end)
    lower = 8 * np.sqrt(base.diffusivity_m2s * end)
    run = conduct(
        (
            Layer(upper, mix.conductivity_wmk, mix.capacity_jm3k, case["T1"], cells=16),
            Layer(
                lower,
                base.conductivity_wmk,
                base.capacity_jm3k,
                case["T2"],
                contact_m2kw=1 / case["h_contact"],
                cells=16,
                spacing="top",
            ),
        ),
        Face(0.0, case["T1"]),
        growing_times_s(end, STEPS),
        depths_m=np.asarray([upper]),
    )
    assert run.depth_c[0, -1, 0] == pytest.approx(case.expected, abs=WITHIN_C)


def _laid(case: Case) -> Mat:
    mix, base = _pair(case)
    eps = case["eps"] if "eps" in case.inputs else 0.0
    return Mat(
        lift_m=case["d"],
        base_c=case["T_base"],
        air_c=case["Tair"],
        coefficient_wm2k=case["h_conv"] if "h_conv" in case.inputs else case["h"],
        sun_wm2=case["q_sun_abs"] if "q_sun_abs" in case.inputs else 0.0,
        sky_c=case["Tsky_K"] - 273.15 if "Tsky_K" in case.inputs else 0.0,
        mix=MixThermal(mix.conductivity_wmk, mix.density_kgm3, mix.specific_heat_jkgk, eps, 1.0),
        base=base,
        contact_m2kw=1 / case["h_contact"],
    )


@every(
    "MATSAME", "MATCONC", "NL1-mean", "NL1-mid", "NL2-mean", "NL2-mid", "NL3-mean", "NL3-mid",
    "NL4-mean", "NL4-mid", "NL5-mean", "NL5-mid",
)  # fmt: skip
def test_mat_on_its_base(case: Case) -> None:
    """Linear cases are exact; NL cases have full radiation, from a fine stiff run to 0.02 C."""
    mat = _laid(case)
    run = cool_mat(mat, case["T_mat"], growing_times_s(case["t_s"], STEPS))
    found = {
        "mean": run.mean_c[0],
        "mid": run.depth_c[0],
        "surface": run.top_c,
        "interface": run.depth_c[1],
        "mat_bottom": run.depth_c[1],
    }[case.inputs["where"]]
    assert found[-1, 0] == pytest.approx(case.expected, abs=WITHIN_C)


@every("T80", "NL1-t80", "NL2-t80", "NL3-t80", "NL4-t80", "NL5-t80")
def test_time_to_the_end_of_rolling(case: Case) -> None:
    found = rolling_time_s(
        _laid(case), case["T_mat"], case["T_stop"], criterion=case.inputs["where"]
    )
    # 0.1 % is 0.05 C of the mean; the rows of fine runs are good to 1 s
    assert found == pytest.approx(case.expected, rel=1e-3, abs=1.0)


@every("RAD-LUMP")
def test_plate_that_only_radiates(case: Case) -> None:
    layer = Layer(0.01, 5000.0, case["C_J_per_m2K"] / 0.01, case["T1"])
    face = Face(0.0, 0.0, case["eps"], case["Tsky_K"] - 273.15)
    run = conduct((layer,), face, np.linspace(0.0, 9000.0, 91))
    found = np.interp(-case["T2"], -run.mean_c[0, :, 0], run.times_s[:, 0])
    assert found == pytest.approx(case.expected, abs=1.0)


@every("LUMP-RAMP")
def test_thin_plate_under_air_that_cools(case: Case) -> None:
    end, heat = case["t_s"], 1.0e6
    air = case["Tair0"] + case["Tair_rate_K_per_h"] / 3600 * np.array([0.0, end])
    layer = Layer(0.01, 5000.0, heat / 0.01, case["T0"])
    run = conduct(
        (layer,), Face(heat / case["tau_s"], Series(np.array([0.0, end]), air)),
        np.linspace(0.0, end, STEPS),
    )  # fmt: skip
    assert run.mean_c[0, -1, 0] == pytest.approx(case.expected, abs=WITHIN_C)


@every("SOM46")
def test_metal_plate_of_a_textbook(case: Case) -> None:
    capacity = case["k"] / case["alpha"]
    run = conduct(
        (Layer(case["L_half"], case["k"], capacity, case["T0"], cells=10),),
        Face(case["h"], case["Tair"]),
        growing_times_s(case["t_s"], STEPS),
        depths_m=np.array([case["L_half"] - case["x_from_centre"]]),
    )
    assert run.depth_c[0, -1, 0] == pytest.approx(case.expected, abs=WITHIN_C)


def test_frozen_ground_thaws_as_the_exact_solution_says() -> None:
    """Melting front of Neumann's problem (Carslaw and Jaeger 1959, 11.2; from memory).

    Ice and water with the same properties, the surface held at 40 C, the ground at -1 C, which is
    where melting begins. The front is at 2 m sqrt(a t); the heat taken is the flux through the
    surface. Melting here is spread over 1 K, so 2 % are allowed.
    """
    k, capacity, latent, hot = 2.0, 2.0e6, 33.4e6, 40.0
    end = 3600.0
    diffusivity = k / capacity
    spread = np.sqrt(diffusivity * end)
    stefan = capacity * (hot + 0.5) / latent
    low, high = 0.0, 3.0  # m exp(m^2) erf(m) = stefan/sqrt(pi)
    for _ in range(60):
        m = (low + high) / 2
        over = m * np.exp(m * m) * erf(m) > stefan / np.sqrt(np.pi)
        low, high = (low, m) if over else (m, high)
    exact = 2 * k * (hot + 0.5) * spread / (erf(m) * np.sqrt(np.pi) * diffusivity)
    layer = Layer(8 * spread, k, capacity, -1.0, latent_jm3=latent, cells=40, spacing="top")
    run = conduct((layer,), Face(1e6, hot), growing_times_s(end, 200))
    assert run.stored_jm2[-1, 0] == pytest.approx(exact, rel=0.02)
