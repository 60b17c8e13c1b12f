"""The invented plant for all tests, in copies nobody else writes to."""

import shutil
from pathlib import Path

import pytest
from hypothesis import HealthCheck, settings

from advisor.advice.open_plant import open_plant

# A busy machine is no fault: nothing here is timed.
settings.register_profile("untimed", deadline=None, suppress_health_check=[HealthCheck.too_slow])
settings.load_profile("untimed")

DEMO = Path(__file__).parents[1] / "demo_plant"


def copy_of_demo(folder):
    """A copy of the demo plant as it is shipped, at ``folder``."""
    built = shutil.ignore_patterns("records.sqlite*", "archive")
    return Path(shutil.copytree(DEMO, folder, ignore=built))


@pytest.fixture(scope="session")
def demo_folder(tmp_path_factory):
    """A copy of the demo plant to read from."""
    return copy_of_demo(tmp_path_factory.mktemp("demo") / "plant")


@pytest.fixture(scope="session")
def demo(demo_folder):
    """The demo plant, opened once."""
    facts = open_plant(demo_folder)
    with facts.records:
        yield facts


@pytest.fixture
def own_demo(tmp_path):
    """A copy of the demo plant for one test to change."""
    return copy_of_demo(tmp_path / "plant")
