"""Which readings serve the mixing line, and the curve a sheet gives, few readings or many."""

from __future__ import annotations

import numpy as np
import pytest

from advisor.binder import (
    Modifier,
    Precision,
    Sample,
    curve_avts,
    curve_of_sheet,
    penetration_reading,
    select_for_mixing,
    softening_point_reading,
    viscosity_value_reading,
    viscosity_vft,
)
from advisor.settings.binder_tables import usual_curve

ROTATIONAL = Precision("rotational", 0.012, 0.043, True, "AASHTO T 316", "from memory")
PENETRATION = Precision("penetration", 0.014, 0.038, True, "ASTM D5-97", "looked up")
SOFTENING = Precision("softening point", 0.41, 0.70, False, "ASTM D36", "from memory")
RUBBER = Modifier("rubber", "crumb rubber", False, False, "it drifts.", "test", "derived")
WAX = Modifier(
    "wax", "wax", True, True, "", "test", "derived",
    viscosity_low=0.75, viscosity_high=0.90, applies_above_c=115.0,
)  # fmt: skip
LINE = curve_avts(11.19, -3.76)
GRADE = usual_curve("50/70")


def measured(at: float, factor: float = 1.0, condition="original"):
    eta = factor * float(LINE.viscosity_pas(at))
    return viscosity_value_reading(at, eta, ROTATIONAL, sample=Sample(condition))


def test_conversions_step_back_where_viscosity_was_measured() -> None:
    readings = [measured(60.0), measured(135.0), penetration_reading(58.0, PENETRATION)]
    kept = select_for_mixing(readings)
    assert [one.usable for one in kept] == [True, True, False]
    assert "conversion" in kept[2].unusable[0]
    few = select_for_mixing([measured(135.0), penetration_reading(58.0, PENETRATION)])
    assert all(one.usable for one in few)


def test_cold_aged_and_waxy_readings_stay_out_with_their_reason() -> None:
    cold, aged = select_for_mixing([measured(45.0), measured(135.0, condition="rtfo")])
    assert "Below 60 C" in cold.unusable[0]
    assert "aged" in aged.unusable[0]
    waxy = select_for_mixing([measured(90.0), measured(135.0)], melting_c=115.0)
    assert [one.usable for one in waxy] == [False, True]


def test_two_measured_temperatures_do_not_ask_the_grade() -> None:
    alone = curve_of_sheet([measured(60.0), measured(135.0)], None)
    with_grade = curve_of_sheet([measured(60.0), measured(135.0)], GRADE)
    assert alone.curve is not None
    assert with_grade.curve is not None
    assert with_grade.curve.parameters == pytest.approx(alone.curve.parameters)
    assert "cannot be said" in alone.quality


def test_fewer_readings_widen_the_answer_and_never_refuse_it() -> None:
    sheets = [
        [measured(60.0), measured(135.0)],
        [measured(135.0)],
        [penetration_reading(58.0, PENETRATION), softening_point_reading(49.6, SOFTENING)],
        [],
    ]
    sizes = []
    for sheet in sheets:
        found = curve_of_sheet(sheet, GRADE)
        assert found.curve is not None
        sizes.append(float(found.curve.temperature_sd_k(0.17)))
    assert sizes == sorted(sizes)
    assert sizes[0] < 1.0
    assert sizes[-1] > 4.0
    assert any("band is wide" in note for note in curve_of_sheet(sheets[1], GRADE).curve.notes)


def test_without_a_grade_one_reading_is_refused_with_what_would_help() -> None:
    found = curve_of_sheet([measured(135.0)], None)
    assert found.curve is None
    assert "two temperatures" in found.refused


def test_rubber_gets_no_line_but_its_readings_are_kept() -> None:
    found = curve_of_sheet([measured(135.0), measured(165.0)], None, [RUBBER])
    assert found.curve is None
    assert len(found.readings) == 2
    assert "drifts" in found.refused
    assert curve_of_sheet([measured(135.0), measured(165.0)], None, [WAX]).curve is not None


def test_a_bend_offers_the_third_law_and_a_line_does_not() -> None:
    t = (60.0, 90.0, 135.0, 165.0)
    bent = [
        viscosity_value_reading(at, float(viscosity_vft(at, -4.35, 660.0, -31.0)), ROTATIONAL,
                                sample=Sample(laboratory=f"laboratory {at:g}"))
        for at in t
    ]  # fmt: skip
    found = curve_of_sheet(bent, GRADE)
    assert found.third is not None
    assert "disagree" in found.quality
    third = found.third.curve()
    assert third.viscosity_pas(np.array(t)) == pytest.approx(
        [one.viscosity_pas for one in bent], rel=1e-6
    )
    assert curve_of_sheet([measured(at) for at in t], GRADE).third is None


def test_one_laboratory_is_narrower_than_several() -> None:
    sheet = [measured(60.0), measured(135.0)]
    several, one = (curve_of_sheet(sheet, None, same_laboratory=flag) for flag in (False, True))
    assert one.curve.temperature_sd_k(0.17) < several.curve.temperature_sd_k(0.17)
