"""The rows of cases.csv, and the dryer at work that they describe."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from pathlib import Path

from advisor.dryer import (
    Aggregate,
    Air,
    Feed,
    Fraction,
    Fuel,
    HeatBalance,
    Operation,
    Rap,
    fuel_of_row,
    heat_balance,
)
from advisor.settings.tables import load_table
from published import Case, read_cases

SHORT_TON_KG = 907.18474
BTU_J = 1055.05585262
POUND_KG = 0.45359237
BTU_LB_F_J_KGK = BTU_J / POUND_KG * 1.8

FUELS = {
    "natural gas": "natural gas",
    "propane": "propane",
    "No.6": "heavy oil",
    "used oil": "recycled oil",
    "NG": "natural gas",
    "No2": "distillate oil",
    "No6": "heavy oil",
}


@cache
def every_case() -> dict[str, Case]:
    """All rows by id."""
    return read_cases(Path(__file__).with_name("cases.csv"))


def case(name: str) -> Case:
    """The row called ``name``."""
    return every_case()[name]


def cases(*starts: str) -> list[Case]:
    """The rows whose id begins with one of ``starts``."""
    return [one for one in every_case().values() if one.id.startswith(starts)]


def agrees(one: Case, value: float) -> bool:
    """Whether ``value`` lies within the tolerance of the row; a row of 0 wants its last digit."""
    slack = one.tolerance or 1e-9 * abs(one.expected)
    return abs(float(value) - one.expected) <= slack


@cache
def fuel(name: str) -> Fuel:
    """A fuel of the rows."""
    return fuel_of_row(load_table("fuels").row(FUELS[name]))


def stone(specific_heat_j_kgk: float) -> Aggregate:
    """Stone whose specific heat does not change."""
    return Aggregate("constant", specific_heat_j_kgk)


def operation(one: Case) -> Operation:
    """The dryer before the change a row may make."""
    rap_share = one["x_r"]
    aggregate = stone(1000.0 * one["c_a"])
    rap = (
        (Rap(rap_share, one["w_r"], one["T_in"], one["rap_binder"], aggregate),)
        if rap_share
        else ()
    )
    return Operation(
        fuel=fuel(one.inputs["fuel"]),
        feed=Feed(
            fractions=(Fraction(1.0 - rap_share - one["x_b"], one["w_a"], one["T_in"], aggregate),),
            binder_of_mix=one["x_b"],
            binder_c=one["T_b"],
            rap=rap,
        ),
        air=Air(one["T_amb"], one["RH"], one["P"]),
        discharge_c=one["T_mix"],
        stack_c=one["T_stack"],
        air_ratio=one["lam"],
        casing_of_net=one["f_c"],
    )


def changed(one: Case) -> Operation:
    """The dryer after the change a row makes: every input that ends with ``_to``."""
    before = operation(one)
    (fraction,) = before.feed.fractions
    fraction = replace(
        fraction,
        moisture_of_dry_mass=float(one.inputs.get("w_a_to", one["w_a"])),
        cold_c=float(one.inputs.get("T_in_to", one["T_in"])),
    )
    return replace(
        before,
        feed=replace(before.feed, fractions=(fraction,)),
        air=replace(before.air, air_c=float(one.inputs.get("T_amb_to", one["T_amb"]))),
        discharge_c=float(one.inputs.get("T_mix_to", one["T_mix"])),
        stack_c=float(one.inputs.get("T_stack_to", one["T_stack"])),
        casing_of_net=float(one.inputs.get("f_c_to", one["f_c"])),
    )


@cache
def base() -> Operation:
    """The reference plant: 160 C mix, 5 % binder, 5 % moisture, natural gas, stack 120 C."""
    return operation(case("BAL02"))


@cache
def base_balance() -> HeatBalance:
    """Its balance."""
    return heat_balance(base())
