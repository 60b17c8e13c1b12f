"""Cold recycled material: how hot the virgin aggregate must be, and how much it can carry.

Where recycled material, filler or binder meet the aggregate after the dryer, the aggregate has to
bring their heat along. Never compare a hot-aggregate reading with a limit of the mix.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.materials import binder_enthalpy_j_kg
from advisor.dryer.operation import Feed, Rap
from advisor.dryer.properties import Values, steam_enthalpy_j_kg, water_enthalpy_j_kg
from advisor.errors import FaultyInput


def hot_aggregate_needed_c(
    discharge_c: ArrayLike, feed: Feed, transfer_drop_k: ArrayLike
) -> Values:
    """Temperature [C] at which the dried virgin aggregate must leave the dryer.

    It brings filler, binder and recycled material, whose water leaves as steam at the temperature
    of the mix, to the mix temperature wanted. Moisture of the virgin fractions is dried before and
    does not count.

    Args:
        discharge_c: mix temperature wanted, any shape [C]
        feed: what the mix is made of
        transfer_drop_k: drop of the aggregate between dryer and mixer [K]

    Raises:
        FaultyInput: no virgin aggregate, or RAP fed into the drum, where the gas heats it too

    Source: first law at the mixer, ``sum of share c (T_agg - T_mix) = heat taken up``.
    """
    _refuse_drum_fed(feed)
    mix_c = np.asarray(discharge_c, float)
    needed = _heat_taken_j_kg(mix_c, feed)
    return np.asarray(_solved_c(mix_c, needed, feed) + np.asarray(transfer_drop_k, float))


def most_rap_of_mix(
    discharge_c: ArrayLike,
    feed: Feed,
    transfer_drop_k: ArrayLike,
    aggregate_max_c: ArrayLike,
) -> Values:
    """Largest share of dry RAP in the mix [1] that the hottest aggregate allowed can carry.

    RAP replaces virgin aggregate and, with its own binder, new binder, so that the binder in the
    mix stays the same; the proportions within RAP and within the fractions stay as in ``feed``.
    Below 0 is returned as 0: the aggregate limit is then below what the mix needs without RAP.

    Args:
        discharge_c: mix temperature wanted, any shape [C]
        feed: what the mix is made of, with at least one RAP of any share above 0
        transfer_drop_k: drop of the aggregate between dryer and mixer [K]
        aggregate_max_c: hottest aggregate the dryer or the filter allows [C]

    Source: the mixer's first law is linear in the share, so it is solved directly.
    """
    _refuse_drum_fed(feed)
    rap_share = np.asarray(sum(np.asarray(one.of_mix, float) for one in feed.rap))
    if not feed.rap or np.any(rap_share <= 0.0):
        raise FaultyInput.of(
            "no-rap",
            "There is no RAP in this mix.",
            "Give its share, moisture and temperature; any share above 0 will do.",
            field="rap",
        )
    mix_c = np.asarray(discharge_c, float)
    hottest_c = np.asarray(aggregate_max_c, float) - np.asarray(transfer_drop_k, float)

    def spare_j_kg(feed_then: Feed) -> Values:
        given = sum(
            np.asarray(one.of_mix, float)
            * (one.aggregate.enthalpy_j_kg(hottest_c) - one.aggregate.enthalpy_j_kg(mix_c))
            for one in feed_then.fractions
        )
        return np.asarray(given - _heat_taken_j_kg(mix_c, feed_then))

    here, without = spare_j_kg(feed), spare_j_kg(with_rap_share(feed, 0.0))
    return np.maximum(0.0, rap_share * without / (without - here))


def with_rap_share(feed: Feed, rap_of_mix: ArrayLike) -> Feed:
    """The same mix with another share of RAP; its stone and binder replace virgin ones.

    Args:
        feed: what the mix is made of, with at least one RAP of any share above 0
        rap_of_mix: dry RAP over mix wanted [1]
    """
    shares = [np.asarray(one.of_mix, float) for one in feed.rap]
    now = np.asarray(sum(shares))
    grown = np.asarray(rap_of_mix, float) / now
    old_binder = np.asarray(
        sum(share * np.asarray(one.binder_of_rap, float)
            for share, one in zip(shares, feed.rap, strict=True))
    )  # fmt: skip
    binder = np.asarray(feed.binder_of_mix, float) + old_binder * (1.0 - grown)
    stone_change = (now - old_binder) * (grown - 1.0)
    shrunk = 1.0 - stone_change / feed.aggregate_of_mix
    if np.any(binder < 0.0) or np.any(shrunk < 0.0):
        raise FaultyInput.of(
            "too-much-rap",
            "So much RAP leaves no room for virgin aggregate or new binder.",
            "Give a smaller share.",
            field="rap_of_mix",
        )
    return replace(
        feed,
        binder_of_mix=binder,
        rap=tuple(replace(one, of_mix=share * grown)
                  for share, one in zip(shares, feed.rap, strict=True)),
        fractions=tuple(replace(one, of_mix=np.asarray(one.of_mix, float) * shrunk)
                        for one in feed.fractions),
    )  # fmt: skip


def _refuse_drum_fed(feed: Feed) -> None:
    if any(one.point == "drum" for one in feed.rap):
        raise FaultyInput.of(
            "rap-in-drum",
            "RAP fed into the drum is heated by the gas too; no aggregate temperature answers it.",
            "Give the collar, the elevator or the mixer as its point of addition.",
            field="rap.point",
        )
    if np.any(feed.aggregate_of_mix <= 0.0):
        raise FaultyInput.of(
            "no-aggregate",
            "Without virgin aggregate nothing can carry heat to the RAP.",
            "Give the cold-feed fractions.",
            field="fractions",
        )


def _heat_taken_j_kg(mix_c: Values, feed: Feed) -> Values:
    """Heat [J/kg mix] that RAP with its water, filler and binder take up to the mix temperature."""
    density = feed.binder_relative_density

    def binder_rise(start_c: ArrayLike) -> Values:
        return binder_enthalpy_j_kg(mix_c, density) - binder_enthalpy_j_kg(start_c, density)

    taken = np.asarray(feed.binder_of_mix, float) * binder_rise(feed.binder_c)
    for cold in feed.filler:
        rise = cold.aggregate.enthalpy_j_kg(mix_c) - cold.aggregate.enthalpy_j_kg(cold.cold_c)
        taken = taken + np.asarray(cold.of_mix, float) * rise
    for rap in feed.rap:
        taken = taken + np.asarray(rap.of_mix, float) * _rap_rise_j_kg(mix_c, rap, binder_rise)
    return np.asarray(taken)


def _rap_rise_j_kg(mix_c: Values, rap: Rap, binder_rise: Callable[[ArrayLike], Values]) -> Values:
    old = np.asarray(rap.binder_of_rap, float)
    moisture = np.asarray(rap.moisture_of_dry_mass, float)
    stone = rap.aggregate.enthalpy_j_kg(mix_c) - rap.aggregate.enthalpy_j_kg(rap.cold_c)
    # RAP dried apart may be hotter than water can be; it then brings no water
    cold_c = np.where(moisture > 0.0, np.asarray(rap.cold_c, float), 0.0)
    steam = steam_enthalpy_j_kg(mix_c) - water_enthalpy_j_kg(cold_c)
    return np.asarray((1.0 - old) * stone + old * binder_rise(rap.cold_c) + moisture * steam)


def _solved_c(mix_c: Values, needed_j_kg: Values, feed: Feed) -> Values:
    """Temperature [C] at which the aggregate holds ``needed_j_kg`` more than at the mix's."""
    share = feed.aggregate_of_mix

    def specific_heat(at_c: Values) -> Values:
        whole = sum(
            np.asarray(one.of_mix, float) * one.aggregate.specific_heat_j_kgk(at_c)
            for one in feed.fractions
        )
        return np.asarray(whole / share)

    def rise(at_c: Values) -> Values:
        whole = sum(
            np.asarray(one.of_mix, float)
            * (one.aggregate.enthalpy_j_kg(at_c) - one.aggregate.enthalpy_j_kg(mix_c))
            for one in feed.fractions
        )
        return np.asarray(whole)

    at_c = mix_c + needed_j_kg / (share * specific_heat(mix_c))
    for _ in range(6):  # Newton; the curve is nearly straight, so three steps reach the last digit
        at_c = at_c + (needed_j_kg - rise(at_c)) / (share * specific_heat(at_c))
    return np.asarray(at_c)
