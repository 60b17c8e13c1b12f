"""How sure a thermometer is, against the tolerances of its standard."""

from __future__ import annotations

import pytest

from advisor.advice.advise import sensor_sd_k
from advisor.settings.plant import Sensor

# Class, temperature [C], tolerance both ways [K].
PUBLISHED = [
    ("RTD class A", 160.0, 0.47),  # IEC 60751: 0.15 + 0.002 |t|
    ("RTD class B", 160.0, 1.1),  # IEC 60751: 0.30 + 0.005 |t|
    ("RTD class B", 400.0, 2.3),
    ("thermocouple K class 1", 500.0, 2.0),  # IEC 60584: the greater of 1.5 and 0.004 |t|
    ("thermocouple K class 2", 160.0, 2.5),  # IEC 60584: the greater of 2.5 and 0.0075 |t|
    ("thermocouple T class 1", 160.0, 0.64),  # IEC 60584: the greater of 0.5 and 0.004 |t|
]


@pytest.mark.parametrize(("kind", "at_c", "tolerance_k"), PUBLISHED)
def test_a_class_gives_the_tolerance_of_its_standard(kind, at_c, tolerance_k):
    # bounds with nothing said between them: even, so the bound over the root of three
    sensor = Sensor.model_validate({"kind": kind})
    assert sensor_sd_k(sensor, at_c) * 3.0**0.5 == pytest.approx(tolerance_k, abs=1e-3)


def test_a_tolerance_found_on_site_goes_before_the_class():
    sensor = Sensor.model_validate({"kind": "RTD class A", "tolerance": "3 C"})
    assert sensor_sd_k(sensor, 160.0) * 3.0**0.5 == pytest.approx(3.0)
