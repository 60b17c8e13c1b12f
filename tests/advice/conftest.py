"""The invented plant, opened once for all tests of advice, from a copy nobody else writes to."""

import shutil
from pathlib import Path

import pytest

from advisor.advice.open_plant import open_plant

DEMO = Path(__file__).parents[2] / "demo_plant"


@pytest.fixture(scope="session")
def demo(tmp_path_factory):
    folder = tmp_path_factory.mktemp("advice") / "plant"
    shutil.copytree(DEMO, folder, ignore=shutil.ignore_patterns("records.sqlite*", "archive"))
    facts = open_plant(folder)
    with facts.records:
        yield facts
