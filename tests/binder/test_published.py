"""Every published or separately worked figure of cases.csv, each within its tolerance."""

from __future__ import annotations

import pytest

from binder.published import Case, agrees, every_case
from binder.relations import worked_out

# Grades are compared by their table, in test_grades.
WORKED = [one for one in every_case().values() if not one.id.startswith("SPEC")]


@pytest.mark.parametrize("one", WORKED, ids=str)
def test_a_published_figure_comes_out(one: Case) -> None:
    found = worked_out(one)
    assert agrees(one, found), f"{found} against {one.expected}: {one.source}"
    assert one.source
    assert one.how_known in {"LOOKED-UP", "DERIVED", "MEMORY"}


def test_elastic_binder_is_where_the_kinematic_and_dynamic_target_part() -> None:
    rows = every_case()
    assert rows["EQV13"].expected - rows["EQV03"].expected == pytest.approx(1.4, abs=0.05)
