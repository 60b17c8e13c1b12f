"""The glossary keeps the promises it makes about names, units and ranges."""

import pytest

from advisor.glossary import QUANTITIES, Quantity
from advisor.units import ABSOLUTE_ZERO_C, kinds, units_of

# How a name ends, by the unit it claims. A fraction says of what instead: moisture_of_dry_mass.
ENDING = {
    "C": "_c",
    "K": "_delta_k",
    "Pa.s": "_pas",
    "m2/s": "_m2s",
    "kg/m3": "_kgm3",
    "dmm": "_dmm",
    "kg/s": "_kgs",
    "kg": "_kg",
    "W": "_w",
    "m/s": "_ms",
    "W/m2": "_wm2",
    "m": "_m",
    "s": "_s",
}
EVERY_QUANTITY = pytest.mark.parametrize("known", QUANTITIES.values(), ids=str)


def _ends_with_its_unit(known: Quantity) -> bool:
    if known.unit == "1":
        # "of what", or a share that is its own word, such as the load of the burner
        return "_of_" in known.name or known.name.endswith("_load")
    return known.name.endswith(ENDING[known.unit])


@EVERY_QUANTITY
def test_a_name_ends_with_its_unit(known: Quantity) -> None:
    assert _ends_with_its_unit(known)


@EVERY_QUANTITY
def test_the_unit_is_the_one_used_inside(known: Quantity) -> None:
    assert known.kind in kinds()
    inside = "1" if known.kind == "fraction" else units_of(known.kind)[0]
    assert known.unit == inside


@EVERY_QUANTITY
def test_the_believable_range_is_one(known: Quantity) -> None:
    assert known.low < known.high
    if known.kind == "temperature":
        assert known.low > ABSOLUTE_ZERO_C


@EVERY_QUANTITY
def test_every_quantity_is_explained(known: Quantity) -> None:
    assert known.symbol
    assert known.label[0].isupper()
    assert len(known.meaning.split()) >= 1


def test_no_two_quantities_share_a_name_a_symbol_or_a_label() -> None:
    for part in ("name", "symbol", "label"):
        parts = [getattr(known, part) for known in QUANTITIES.values()]
        assert len(parts) == len(set(parts))
    assert all(name == known.name for name, known in QUANTITIES.items())
