"""Hot aggregate for cold recycled material, and how much of it the aggregate can carry."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.dryer import (
    Feed,
    Fraction,
    Operation,
    Rap,
    aggregate_of_row,
    heat_balance,
    hot_aggregate_needed_c,
    most_rap_of_mix,
    with_rap_share,
)
from advisor.errors import FaultyInput
from advisor.settings.tables import load_table
from dryer.published import BTU_LB_F_J_KGK, Case, agrees, base, case, cases, stone


def american_feed(rap_to_aggregate: float, moisture: float, rap_c: float, one: Case) -> Feed:
    """RAP and stone alone, each with one specific heat, as the published table counts them."""
    virgin = 1.0 / (1.0 + rap_to_aggregate)
    return Feed(
        fractions=(Fraction(virgin, 0.0, 15.0, stone(one["c_a"] * BTU_LB_F_J_KGK)),),
        binder_of_mix=0.0,
        binder_c=160.0,
        rap=(Rap(1.0 - virgin, moisture, rap_c, 0.0, stone(one["c_r"] * BTU_LB_F_J_KGK)),),
    )


def american_f(rap_to_aggregate: float, moisture: float, mix_f: float) -> float:
    """Aggregate temperature [F] of the published table's form."""
    one = case("RAP01")
    feed = american_feed(rap_to_aggregate, moisture, (one["T_rap_F"] - 32.0) / 1.8, one)
    drop_k = one["loss_F"] / 1.8
    return float(hot_aggregate_needed_c((mix_f - 32.0) / 1.8, feed, drop_k)) * 1.8 + 32.0


@pytest.mark.parametrize("one", cases("RAP0", "RAP10", "RAP11"), ids=str)
def test_american_form(one: Case) -> None:
    assert agrees(one, american_f(one["rap_to_agg"], one["rap_moist_dry"], one["T_mix_F"]))


@pytest.mark.parametrize("one", cases("RAP13", "RAP14", "RAP16", "RAP17"), ids=str)
def test_remembered_recycling_table(one: Case) -> None:
    # from memory, never seen; it agrees within 10 F, which is its own rounding and ours
    moisture = one["rap_moist_dry"]
    assert agrees(one, american_f(one["rap_to_agg"], moisture, one["T_mix_F"]))


# Worked out apart from this code, F: mix at 220, 240, 260, 280 F; RAP moisture 0, 1, 3, 5 %.
AMERICAN = {
    (10, 90): ["259 282 304 327", "265 288 310 333", "277 299 322 344", "288 311 333 356"],
    (20, 80): ["284 309 335 360", "296 322 348 373", "322 348 374 399", "348 374 400 426"],
    (30, 70): ["315 344 374 403", "337 366 396 425", "381 411 441 471", "425 455 485 516"],
    (40, 60): ["356 391 425 460", "391 425 460 495", "459 495 530 565", "528 564 600 636"],
    (50, 50): ["415 456 498 540", "466 508 550 593", "569 612 655 698", "672 716 759 803"],
}


@pytest.mark.parametrize(("rap", "aggregate"), AMERICAN)
def test_american_table_within_its_rounding(rap: int, aggregate: int) -> None:
    for moisture, row in zip((0.0, 0.01, 0.03, 0.05), AMERICAN[rap, aggregate], strict=True):
        for mix_f, expected in zip((220, 240, 260, 280), row.split(), strict=True):
            assert american_f(rap / aggregate, moisture, mix_f) == pytest.approx(
                float(expected), abs=0.6
            )


def si_feed(rap: float, moisture: float, new_binder: float) -> Feed:
    return Feed(
        fractions=(Fraction(1.0 - rap - new_binder, 0.0, 15.0, stone(930.0)),),
        binder_of_mix=new_binder,
        binder_c=160.0,
        rap=(Rap(rap, moisture, 15.0, 0.05, stone(900.0)),),
    )


@pytest.mark.parametrize("one", cases("RAP19", "RAP20", "RAP22"), ids=str)
def test_form_with_binder(one: Case) -> None:
    feed = si_feed(one["x_r"], one["w_r"], one["x_b"])
    assert agrees(one, hot_aggregate_needed_c(one["T_mix_C"], feed, one["loss_C"]))


# Worked out apart from this code, C: mix at 140, 150, 160 C; RAP moisture 0, 2, 4, 5 %.
WITH_BINDER = {
    0.1: ["164 176 188", "170 183 195", "177 190 202", "180 193 206"],
    0.2: ["182 196 210", "197 212 226", "213 227 241", "220 235 249"],
    0.3: ["206 222 238", "232 248 265", "259 275 291", "272 288 304"],
    0.4: ["238 257 275", "279 298 317", "320 339 358", "340 359 379"],
    0.5: ["283 305 327", "344 367 389", "405 428 451", "436 459 482"],
}


@pytest.mark.parametrize("rap", WITH_BINDER)
def test_table_with_binder_within_its_rounding(rap: float) -> None:
    mix_c = np.array([140.0, 150.0, 160.0])
    for moisture, row in zip((0.0, 0.02, 0.04, 0.05), WITH_BINDER[rap], strict=True):
        ours = hot_aggregate_needed_c(mix_c, si_feed(rap, moisture, 0.05 - 0.05 * rap), 11.0)
        assert ours == pytest.approx([float(text) for text in row.split()], abs=0.6)


def test_a_published_point_is_not_reproduced() -> None:
    # 608 C for 50 % RAP at 5 % is far above this balance; not a target, whatever its losses were
    one = case("RAP23")
    ours = float(hot_aggregate_needed_c(160.0, si_feed(one["x_r"], one["w_r"], 0.025), 11.0))
    assert 470.0 < ours < 490.0 < one.expected


def test_stone_that_warms_harder_when_hot_needs_less_superheat() -> None:
    rock = aggregate_of_row(load_table("aggregates").row("mixed aggregate"))
    real = Feed(
        fractions=(Fraction(0.56, 0.0, 15.0, rock),),
        binder_of_mix=0.04,
        binder_c=160.0,
        rap=(Rap(0.4, 0.04, 15.0, 0.05, stone(900.0)),),
    )
    hot = float(hot_aggregate_needed_c(160.0, real, 0.0))
    given_j = 0.56 * float(rock.enthalpy_j_kg(hot) - rock.enthalpy_j_kg(160.0))
    plain = si_feed(0.4, 0.04, 0.04)
    needed_j = 0.56 * 930.0 * (float(hot_aggregate_needed_c(160.0, plain, 0.0)) - 160.0)
    assert given_j == pytest.approx(needed_j, rel=1e-9)
    assert hot < float(hot_aggregate_needed_c(160.0, plain, 0.0))


@given(
    rap=st.floats(0.05, 0.6),
    moisture=st.floats(0.0, 0.08),
    mix_c=st.floats(120.0, 180.0),
    drop_k=st.floats(0.0, 20.0),
)
def test_most_rap_needs_just_the_hottest_aggregate(
    rap: float, moisture: float, mix_c: float, drop_k: float
) -> None:
    feed = si_feed(rap, moisture, 0.05 - 0.05 * rap)
    hottest = hot_aggregate_needed_c(mix_c, feed, drop_k)
    assert float(most_rap_of_mix(mix_c, feed, drop_k, hottest)) == pytest.approx(rap, rel=1e-9)
    # and asked from another share of the same mix, the answer is the same
    other = with_rap_share(feed, 0.1)
    assert float(most_rap_of_mix(mix_c, other, drop_k, hottest)) == pytest.approx(rap, rel=1e-9)


def test_no_rap_where_the_aggregate_may_not_even_be_as_hot_as_the_mix() -> None:
    assert float(most_rap_of_mix(160.0, si_feed(0.2, 0.04, 0.04), 11.0, 165.0)) == 0.0


@given(rap=st.floats(0.0, 0.6))
def test_another_share_keeps_the_binder_and_the_mass(rap: float) -> None:
    feed = with_rap_share(si_feed(0.2, 0.04, 0.04), rap)
    (old,) = feed.rap
    whole = feed.aggregate_of_mix + old.of_mix + feed.binder_of_mix
    assert float(whole) == pytest.approx(1.0, rel=1e-12)
    assert float(feed.binder_of_mix + 0.05 * old.of_mix) == pytest.approx(0.05, rel=1e-12)


def test_rap_moisture_is_worth_measuring() -> None:
    # 1 % of RAP moisture moves the aggregate by 8 C at 20 %, 31 C at 50 %
    for rap, degrees in ((0.2, 8.0), (0.5, 31.0)):
        drier = hot_aggregate_needed_c(160.0, si_feed(rap, 0.04, 0.05 - 0.05 * rap), 11.0)
        wetter = hot_aggregate_needed_c(160.0, si_feed(rap, 0.05, 0.05 - 0.05 * rap), 11.0)
        assert float(wetter - drier) == pytest.approx(degrees, abs=0.7)


def test_hot_aggregate_and_balance_agree_on_the_heat() -> None:
    # a drum that dries the stone alone to the hot temperature takes the heat of the whole mix
    feed = si_feed(0.3, 0.04, 0.035)
    hot_c = float(hot_aggregate_needed_c(160.0, feed, 0.0))
    plant = Operation(base().fuel, feed, base().air, 160.0, 160.0, 2.2, 0.06)
    stone_only = Feed((Fraction(1.0, 0.0, 15.0, stone(930.0)),), 0.0, 160.0)
    hot = heat_balance(Operation(base().fuel, stone_only, base().air, hot_c, 160.0, 2.2, 0.06))
    assert float(hot.useful_j_kg) * 0.665 == pytest.approx(
        float(heat_balance(plant).useful_j_kg), rel=1e-9
    )


def test_what_cannot_be_answered_is_refused() -> None:
    feed = si_feed(0.2, 0.04, 0.04)
    (rap,) = feed.rap
    drum = Rap(rap.of_mix, 0.04, 15.0, 0.05, rap.aggregate, point="drum")
    with pytest.raises(FaultyInput, match="heated by the gas too"):
        hot_aggregate_needed_c(160.0, Feed(feed.fractions, 0.04, 160.0, rap=(drum,)), 0.0)
    with pytest.raises(FaultyInput, match="Without virgin aggregate"):
        hot_aggregate_needed_c(160.0, Feed((), 0.04, 160.0, rap=(rap,)), 0.0)
    with pytest.raises(FaultyInput, match="no RAP"):
        most_rap_of_mix(160.0, Feed(feed.fractions, 0.04, 160.0), 0.0, 300.0)
    with pytest.raises(FaultyInput, match="no room"):
        with_rap_share(feed, 1.3)
