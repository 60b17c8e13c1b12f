"""Every number in config/ has a unit, a source and how it is known; a table without fails."""

from __future__ import annotations

from pathlib import Path

import pytest

from advisor.errors import FaultyInput
from advisor.settings.limits import load_limits, read_limits
from advisor.settings.shipped import shipped_folder
from advisor.settings.tables import HOW_KNOWN, Row, read_table

TABLES = sorted(shipped_folder("config").glob("*.yaml"))


def numbers(value: object, column: str) -> list[str]:
    """Names of all cells with a number in a value of a row."""
    if isinstance(value, dict):
        return [each for key, part in value.items() for each in numbers(part, f"{column}.{key}")]
    is_number = isinstance(value, float | int | tuple) and not isinstance(value, bool)
    return [column] if is_number else []


@pytest.mark.parametrize("path", TABLES, ids=lambda path: path.stem)
def test_every_number_of_a_table_has_unit_source_and_how_known(path: Path) -> None:
    table = read_table(path)
    assert table.rows
    for row in table.rows:
        for column, value in row.items():
            for name in numbers(value, column):
                origin = row.origin(name)
                assert origin.unit, (path.stem, name)
                assert origin.source, (path.stem, name)
                assert origin.how_known in HOW_KNOWN, (path.stem, name)


@pytest.mark.parametrize("path", TABLES, ids=lambda path: path.stem)
def test_rows_of_a_table_have_names_of_their_own(path: Path) -> None:
    names = [row["name"] for row in read_table(path).rows]
    assert len(names) == len(set(names))


def test_every_file_in_config_is_read_by_this_test() -> None:
    read = {*TABLES, shipped_folder("config") / "limits.csv"}
    assert {path for path in shipped_folder("config").rglob("*") if path.is_file()} == read


LACKING = {
    "no unit": "rows:\n  - {name: a, k: {value: 1, source: s, how_known: derived}}\n",
    "no source": "rows:\n  - {name: a, k: {value: 1, unit: m, how_known: derived}}\n",
    "no how known": "rows:\n  - {name: a, k: {value: 1, unit: m, source: s}}\n",
    "how known in other words": (
        "rows:\n  - {name: a, k: {value: 1, unit: m, source: s, how_known: guessed}}\n"
    ),
    "plain number": "source: s\nhow_known: derived\nrows:\n  - {name: a, k: 1}\n",
    "unknown unit": (
        "rows:\n  - {name: a, k: {value: 1, unit: furlong, source: s, how_known: derived}}\n"
    ),
}


@pytest.mark.parametrize("text", LACKING.values(), ids=LACKING.keys())
def test_a_number_that_lacks_something_is_refused(text: str, tmp_path: Path) -> None:
    path = tmp_path / "table.yaml"
    path.write_text(text, encoding="utf-8")
    with pytest.raises(FaultyInput) as refused:
        read_table(path)
    assert refused.value.faults[0].line == text.count("\n")


def test_units_are_converted_once_and_kept(tmp_path: Path) -> None:
    path = tmp_path / "table.yaml"
    path.write_text(
        "units: {hot: F, spread: K, heat: kWh/t}\nsource: s\nhow_known: derived\n"
        "rows:\n  - {name: a, hot: 320, spread: 5, heat: 10, slope: "
        "{value: [1, 2], unit: J/(kg.K2)}}\n",
        encoding="utf-8",
    )
    row: Row = read_table(path).row("a")
    assert row["hot"] == pytest.approx(160.0)
    assert row["spread"] == 5.0
    assert row["heat"] == pytest.approx(36_000.0)
    assert row["slope"] == (1.0, 2.0)
    assert row.origin("hot").unit == "F"


def test_published_limits_stand_in_the_unit_of_their_source() -> None:
    limits = {limit.id: limit for limit in load_limits()}
    airfield = limits["UFGS02749-MIX-PG64-22"]
    assert airfield.high_written == "320 F"
    assert airfield.high == pytest.approx(160.0)
    tolerance = limits["FDOT-RANGE"]  # 30 F either way is a difference: 16.7 K
    assert tolerance.high == pytest.approx(16.667, abs=1e-3)
    assert tolerance.low == pytest.approx(-16.667, abs=1e-3)


def test_a_limit_without_source_is_refused(tmp_path: Path) -> None:
    text = (shipped_folder("config") / "limits.csv").read_text(encoding="utf-8").splitlines()[:2]
    row = text[1].replace('"UFGS-02749', '"').split('"')
    path = tmp_path / "limits.csv"
    path.write_text(f'{text[0]}\n{row[0]},"note",looked up\n', encoding="utf-8")
    with pytest.raises(FaultyInput):
        read_limits(path)
