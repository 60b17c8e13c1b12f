"""Published measurements and tables: how near we come, and why not nearer.

Weather, base and probe depth are mostly missing from what could be seen of the sources, so each
test says what it takes for them.
"""

from __future__ import annotations

import numpy as np
import pytest

from advisor.heat import (
    BaseThermal,
    Box,
    Faces,
    Mat,
    MixThermal,
    Silo,
    cool_mat,
    growing_times_s,
    load_state,
    mat_convection_wm2k,
    retained_in_truck,
    rolling_time_s,
    stored_mix,
)
from advisor.heat.crust import shortfall
from advisor.heat.product import Span, start_share
from advisor.units import celsius_from_fahrenheit, kelvin_delta_from_fahrenheit_delta
from heat.published import Case, cases, value

DENSE = MixThermal(1.1, 2300.0, 980.0)
ASPHALT = BaseThermal(1.4, 2350.0, 920.0)
LOOSE = MixThermal(0.9, 1900.0, 950.0)
CLASSIC = MixThermal(value("CD-K"), value("CD-RHO"), value("CD-C"), 0.95, 0.85)
CLASSIC_BASE = BaseThermal(value("CD-K"), value("CD-RHO"), value("CD-C"))


def twente_excess_k(minutes: float, base_over_k: float = 20.0, wind_ms: float = 3.0) -> float:
    """Mid-depth over air [K] of 50 mm laid at 150 C in air of 15 C."""
    base_c = 15.0 + base_over_k
    mat = Mat(0.05, base_c, 15.0, mat_convection_wm2k(wind_ms), 0.0, 5.0, DENSE, ASPHALT)
    run = cool_mat(mat, 150.0, growing_times_s(minutes * 60, 40))
    return float(run.depth_c[0, -1, 0] - 15.0)


@pytest.mark.parametrize("case", cases("TERH-L2C1-1", "TERH-L2C1-2", "TERH-L2C2-1",
                                       "TERH-L2C2-2", "TERH-L3C2"), ids=str)  # fmt: skip
def test_middle_of_a_layer_on_the_road(case: Case) -> None:
    """Within 6 K of ter Huerne's regressions; weather and base were not in what was seen.

    The regression is one straight line in the logarithm and so cannot follow the flat first
    minutes at mid-depth: it lies 2 to 4 K above the model in the first 20 minutes.
    """
    assert twente_excess_k(case["t_min"]) == pytest.approx(case.expected, abs=case.tolerance)


@pytest.mark.parametrize("case", cases("TERH-L2C1-EXC0", "TERH-L2C2-EXC0"), ids=str)
def test_excess_at_laying_is_what_the_road_tests_began_with(case: Case) -> None:
    assert twente_excess_k(0.01) == pytest.approx(case.expected, abs=case.tolerance + 2.0)


@pytest.mark.parametrize("case", cases("TERH-L2C1-SLOPE", "TERH-L2C2-SLOPE"), ids=str)
def test_how_fast_the_middle_of_a_layer_cools(case: Case) -> None:
    """The measured slope lies between a calm day on a warm base and wind on a cool one."""
    minutes = np.array([5.0, 15.0, 25.0, 35.0, 45.0])

    def slope(base_over_k: float, wind_ms: float) -> float:
        excess = [twente_excess_k(float(one), base_over_k, wind_ms) for one in minutes]
        return float(np.polyfit(minutes, np.log10(excess), 1)[0])

    assert slope(0.0, 5.0) < case.expected < slope(20.0, 1.0)


@pytest.mark.parametrize(
    ("id_", "from_c", "minutes"), [("LABSLAB-130-25", 130.0, 25.0), ("LABSLAB-110-35", 110.0, 35.0)]
)
def test_small_slab_in_the_laboratory(id_: str, from_c: float, minutes: float) -> None:
    """Within 6 K of a wheel-track slab in a room of 23 C, its edges counted.

    Taken as 300 mm square and 50 mm thick on a bench, 25 W/m2K around the edges. As an endless
    mat it would stay 10 K too warm: the edges take that much.
    """
    mat = Mat(0.05, 23.0, 23.0, mat_convection_wm2k(0.0), 0.0, 23.0, DENSE, ASPHALT)
    endless = cool_mat(mat, from_c, growing_times_s(minutes * 60, 40)).mean_c[0, -1, 0] - 23.0
    edges = start_share((Span(0.3, 25.0, 25.0),) * 2, minutes * 60, DENSE)
    measured = value(id_) if id_.endswith("25") else from_c - value(id_)
    assert 23.0 + endless * edges == pytest.approx(measured, abs=6.0)
    assert endless + 23.0 > measured + 5.0


def table_minutes(case: Case, wind_ms: float, sun_wm2: float) -> float:
    """Minutes to 175 F from the temperature of the table, air as warm as the base."""
    ends = case.inputs["base_degF"].rstrip("+").split("-")
    base = celsius_from_fahrenheit(sum(map(float, ends)) / len(ends))
    mat = Mat(
        case["thickness_in"] * 0.0254,
        base,
        base,
        mat_convection_wm2k(wind_ms),
        sun_wm2,
        base - 10.0,
        CLASSIC,
        CLASSIC_BASE,
    )
    laid, end = celsius_from_fahrenheit(case.expected), celsius_from_fahrenheit(175.0)
    return float(rolling_time_s(mat, laid, end)) / 60


ROLLING_MIN = {float(size): value(f"FOSTER-RT-{size}") for size in ("0.5", "0.75", "1.5", "2")} | {
    1.0: 8.0,  # the table's own row between, from memory as the rest
    3.0: 15.0,  # a cap
}


@pytest.mark.parametrize("case", cases("FOSTER-2", "FOSTER-3", "FOSTER-4", "FOSTER-5", "FOSTER-6",
                                       "FOSTER-7", "FOSTER-8", "FOSTER-9"), ids=str)  # fmt: skip
def test_table_of_laydown_temperatures(case: Case) -> None:
    """The remembered table of 1970 lies between a windy and a sunny day for 3/4 to 2 in.

    1/2 in cools a quarter faster than the table gives, so the table reads as a rule of practice
    there. For 3 in it is a practical minimum, not a cooling time: the mat lasts twice as long.
    """
    printed, thickness = ROLLING_MIN[case["thickness_in"]], case["thickness_in"]
    windy, sunny = table_minutes(case, 5.1, 0.0), table_minutes(case, 2.0, 300.0)
    if thickness == 0.5:
        assert 0.65 * printed < windy < sunny < printed
    elif thickness == 3.0:
        assert windy > 1.6 * printed
    else:
        assert 0.9 * windy < printed < 1.05 * sunny


def test_time_grows_with_thickness_between_a_plate_and_a_half_space() -> None:
    """UK work gives the power 1.8 (abstract); this solver 1.53 to 1.59 for 25 to 100 mm.

    A thin plate would give 1, pure conduction to a cold base 2. The source's layers and weather
    are not known, so the difference stays open; no exponent is used anywhere.
    """
    lift = np.array([0.025, 0.05, 0.1])
    for wind in (0.0, 3.0, 10.0):
        mat = Mat(lift, 10.0, 10.0, mat_convection_wm2k(wind), 0.0, 0.0, DENSE, ASPHALT)
        powers = np.diff(np.log(rolling_time_s(mat, 150.0, 80.0))) / np.log(2.0)
        assert ((powers > 1.45) & (powers < value("DAINES-EXP"))).all()


def test_what_is_lost_before_the_first_roller_pass() -> None:
    """Eight tests lost 9.1 K from laying to the first pass: 1 to 6 minutes of ours at 5 to 8 cm."""
    mat = Mat(np.array([0.05, 0.08]), 25.0, 20.0, mat_convection_wm2k(2.0), 0.0, 10.0,
              DENSE, ASPHALT)  # fmt: skip
    waits = rolling_time_s(mat, value("PK-LAY"), value("PK-LAY") - value("PK-LOSS"))
    assert ((waits > 60.0) & (waits < 360.0)).all()


def test_rolling_goes_on_below_the_usual_end() -> None:
    """Eight tests ended at 62.9 C, not at 80 C: ours takes 1.5 to 2 times as long to get there.

    So the end of rolling is an input with a doubt of its own, never a constant.
    """
    mat = Mat(np.array([0.05, 0.08]), 25.0, 20.0, mat_convection_wm2k(2.0), 0.0, 10.0,
              DENSE, ASPHALT)  # fmt: skip
    usual, real = (rolling_time_s(mat, value("PK-LAY"), end) for end in (80.0, value("PK-END")))
    assert ((real / usual > 1.5) & (real / usual < 2.1)).all()


def test_rule_of_thumb_from_plant_to_site() -> None:
    """A trade rule says 5 to 25 F; a tarped load of ours loses that in 10 min to 2 h."""
    least, most = (
        kelvin_delta_from_fahrenheit_delta(value(f"LOAD-LOSS-{end}")) for end in ("LO", "HI")
    )
    faces = Faces(28.0, 20.0, 28.0, 7.5, 20.0)
    lost = 140 * (
        1 - retained_in_truck(np.array([600.0, 7200.0]), Box(5.4, 2.3, 0.9), faces, LOOSE)
    )
    assert 0.7 * least < lost[0] < most
    assert least < lost[1] < 1.3 * most


TARPED = {"TRIS-MIN": 4.0, "TRIS-MAX": 8.0}


@pytest.mark.parametrize("case", cases(*TARPED), ids=str)
def test_tarped_loads_in_a_hot_country(case: Case) -> None:
    """The measured loss lies between that of a probe 15 cm deep and that of the bulk.

    Taken as 150 C in air of 31 C, 4 and 8 W/m2K through the tarpaulin, 25 elsewhere. A probe
    does not average the crust, so the bulk of the model must have lost more than it showed.
    """
    seconds, cover = case["t_min"] * 60, TARPED[case.id]
    box, faces = Box(5.0, 2.2, 1.0), Faces(25.0, 25.0, 25.0, cover, 25.0)
    bulk = (150 - 31) * (1 - retained_in_truck(seconds, box, faces, LOOSE))
    probe = (150 - 31) * shortfall(0.15, cover, seconds, 0.9, LOOSE.diffusivity_m2s)
    assert probe < case.expected < bulk


def test_wood_lined_body_over_seven_hours() -> None:
    """Wall zone within 5 K, centre all but untouched, as measured in a 25 t load.

    Taken as a wood lining of 0.1 m2K/W, air 30 C, the probe 1 to 2 cm from the wall. The measured
    centre lost 1.3 K, the model's 0.1 K: less than a thermocouple tells.
    """
    outside = 1.0 / (0.1 + 1.0 / 15.0)
    hours_s, start = 420 * 60.0, value("SENGON-C0")
    gone = shortfall(np.array([0.01, 0.02, 0.45]), outside, hours_s, 0.9, LOOSE.diffusivity_m2s)
    near, further, centre = 30.0 + (start - 30.0) * (1.0 - gone)
    assert near == pytest.approx(value("SENGON-W1"), abs=5.0)
    assert further == pytest.approx(value("SENGON-W1"), abs=5.0)
    assert start - centre < 1.3


def test_spread_in_the_load_after_three_hours() -> None:
    """Over 30 K bare, less in an insulated bed, as reported from Italy."""
    box = Box(5.0, 2.2, 1.0)
    bare = load_state(3 * 3600.0, box, Faces(28.0, 20.0, 28.0, 40.0, 20.0), LOOSE)
    insulated = load_state(3 * 3600.0, box, Faces(0.7, 0.7, 0.7, 2.0, 0.7), LOOSE)
    assert 140 * (bare.core - bare.crust) > value("BOCCI-3H")
    assert 140 * (insulated.core - insulated.crust) < value("BOCCI-3H")


def test_flanks_of_a_load_on_a_long_haul() -> None:
    """Mississippi: most holds its temperature for hours, flanks fall 15 to 20 K behind.

    Ours fall that far 10 to 20 cm under a bare wall in two to six hours, while mix half a metre
    in has lost nothing.
    """
    hours_s = np.array([2.0, 6.0]) * 3600
    flank = 140 * shortfall(np.array([0.1, 0.2]), 25.0, hours_s, 0.9, LOOSE.diffusivity_m2s)
    assert ((flank > value("HOWARD-FLANK") - 3) & (flank < value("HOWARD-FLANK2") + 3)).all()
    assert 140 * shortfall(0.5, 25.0, 6 * 3600.0, 0.9, LOOSE.diffusivity_m2s) < 0.1


def test_first_truck_out_of_the_silo() -> None:
    """A trade article: the first truck is 10 to 20 F under the next ones.

    Ours is after 8 to 16 h with 2.5 W/m2K through cone and gate; with a cone as well insulated as
    the barrel it would be a third of that.
    """
    silo = Silo(2.0, 7.0, 2.8, wall_wm2k=0.8, top_wm2k=0.8, cone_wm2k=2.5)
    held = stored_mix(np.array([8.0, 16.0]) * 3600, silo, LOOSE, 160.0, 10.0)
    least = kelvin_delta_from_fahrenheit_delta(value("FIRSTTRUCK-LO"))
    behind = held.mean_c - held.first_out_c
    assert ((behind > least) & (behind < 2.0 * least)).all()
