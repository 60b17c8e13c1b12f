"""The store of dated facts: what held when, as it was known when; nothing lost or half-written."""

from __future__ import annotations

import sqlite3
import threading
from datetime import UTC, datetime, timedelta
from zoneinfo import ZoneInfo

import pytest

from advisor.errors import FaultyInput, MissingInput, StoreRefused
from advisor.records import (
    Records,
    correction,
    export_files,
    import_files,
    new_entry,
    open_records,
    withdrawal,
)

ZONE = ZoneInfo("Europe/London")
DAY = datetime(2026, 10, 19, 6, 0, tzinfo=UTC)
HOUR = timedelta(hours=1)


@pytest.fixture
def store(tmp_path):
    with Records(tmp_path / "records.sqlite", ZONE) as records:
        yield records


def moisture(water, at=DAY, recorded=None, pile="stockpile"):
    written = {"water": water, "basis": "dry", "method": "oven"}
    return new_entry("moisture", pile, at, written, "lab", "morning", ZONE, recorded or at)


def test_what_held_is_the_latest_valid_fact_that_was_known(store):
    store.add([moisture("4 %"), moisture("5 %", DAY + 4 * HOUR, DAY + 6 * HOUR)])
    at = DAY + 5 * HOUR
    assert store.held("moisture", "stockpile", at).fact.water == pytest.approx(0.05)
    # Recorded an hour later: at that time nobody knew it yet.
    assert store.held("moisture", "stockpile", at, at).fact.water == pytest.approx(0.04)
    assert store.held("moisture", "stockpile", DAY - HOUR) is None
    assert store.held("moisture", "RAP", at) is None


def test_a_correction_takes_the_place_only_from_when_it_was_recorded(store):
    (first,) = store.add([moisture("14 %")])
    written = {"water": "4 %", "basis": "dry", "method": "oven"}
    store.add([correction(first, written, "lab", "slip", ZONE, recorded_at=DAY + 2 * HOUR)])
    assert store.held("moisture", "stockpile", DAY).fact.water == pytest.approx(0.04)
    then = store.held("moisture", "stockpile", DAY, known_at=DAY + HOUR)
    assert then.fact.water == pytest.approx(0.14)
    assert len(store.history()) == 2


def test_a_withdrawn_fact_never_was_but_stays_on_record(store):
    (first,) = store.add([moisture("4 %")])
    store.add([withdrawal(first, "lab", "wrong pile", DAY + HOUR)])
    assert store.held("moisture", "stockpile", DAY + HOUR) is None
    assert store.held("moisture", "stockpile", DAY + HOUR, DAY).fact.water == pytest.approx(0.04)
    assert [one.withdrawn for one in store.history()] == [False, True]


def test_the_same_fact_twice_is_one_entry(store):
    assert len(store.add([moisture("4 %")])) == 1
    assert store.add([moisture("4 %")]) == ()
    assert store.count() == 1


def test_nothing_can_be_changed_or_removed(store, tmp_path):
    store.add([moisture("4 %")])
    with sqlite3.connect(tmp_path / "records.sqlite") as db:
        for statement in ("UPDATE entry SET who = 'x'", "DELETE FROM entry"):
            with pytest.raises(sqlite3.Error):
                db.execute(statement)
    assert store.count() == 1


def test_what_replaces_something_unknown_is_refused_and_nothing_is_recorded(store):
    stray = correction(moisture("4 %"), {"water": "5 %", "basis": "dry", "method": "oven"},
                       "lab", "slip", ZONE)  # fmt: skip
    with pytest.raises(StoreRefused):
        store.add([moisture("6 %", pile="RAP"), stray])
    assert store.count() == 0


def test_a_wrong_fact_is_refused_field_by_field():
    with pytest.raises(FaultyInput) as refused:
        new_entry("moisture", "pile", DAY, {"water": "4", "basis": "damp"}, "x", "y", ZONE)
    text = str(refused.value)
    assert "water" in text and "no unit" in text
    assert "'damp'" in text and "dry, wet" in text
    assert "'method' is missing" in text
    with pytest.raises(FaultyInput, match="Did you mean 'moisture'"):
        new_entry("moisure", "pile", DAY, {}, "x", "y", ZONE)


def test_an_entry_asked_for_by_a_wrong_id_is_told(store):
    with pytest.raises(MissingInput, match="There is no entry 'abc'"):
        store.entry("abc")


@pytest.mark.parametrize("form", ["yaml", "csv"])
def test_what_is_written_out_and_read_in_is_the_same(demo, tmp_path, form):
    files = export_files(demo.records, tmp_path / "out", form)
    assert len(files) >= 6
    with Records(tmp_path / "again.sqlite", demo.folder.zone) as again:
        report = import_files(again, files)
        assert report.read == report.added == demo.records.count()
        assert sorted(again.history(), key=lambda one: one.id) == sorted(
            demo.records.history(), key=lambda one: one.id
        )
        assert import_files(again, files).added == 0


def test_text_that_looks_like_a_formula_survives_a_spreadsheet(store, tmp_path):
    store.add([new_entry("note", "tank 2", DAY, {"text": "=1+1, said the driver"}, "-x", "", ZONE)])
    (path,) = export_files(store, tmp_path / "out", "csv")
    assert "'=1+1" in path.read_text("utf-8")
    with Records(tmp_path / "again.sqlite", ZONE) as again:
        import_files(again, [path])
        assert again.history() == store.history()


EMPTY_DIP = """entries:
  - {kind: dip, subject: tank 1, valid_from: 2026-10-19 06:00, who: x, fact: {temperature: 160 C}}
"""
CSV = "kind,subject,valid_from,who,water,basis,method\n"


@pytest.mark.parametrize(
    ("name", "text", "words"),
    [
        ("a.csv", CSV + "moisture,pile,2026-10-19 06:00,lab,4 %,dry\n", ["a.csv:2", "6 fields"]),
        ("a.csv", CSV + "moisture,pile,2026-10-19 06:00,lab,4,dry,oven\n", ["a.csv:2", "water"]),
        ("a.csv", CSV + "moisture,pile,someday,lab,4 %,dry,oven\n", ["a.csv:2", "someday"]),
        ("a.csv", CSV + "moistur,pile,2026-10-19 06:00,lab,4 %,dry,oven\n", ["'moisture'"]),
        ("a.csv", CSV.replace("water", "watr") + "moisture,p,2026-10-19 06:00,lab,4 %,dry,oven\n",
         ["watr", "Did you mean 'water'"]),
        ("a.yaml", "entris: []\n", ["a.yaml", "'entries'"]),
        ("a.yaml", "", ["a.yaml", "entries"]),
        ("a.yaml", EMPTY_DIP, ["a.yaml:2", "mass", "volume"]),
    ],
)  # fmt: skip
def test_a_faulty_file_is_refused_whole_with_its_place(store, tmp_path, name, text, words):
    good = tmp_path / "good.csv"
    good.write_text(CSV + "moisture,pile,2026-10-19 05:00,lab,4 %,dry,oven\n", "utf-8")
    bad = tmp_path / name
    bad.write_text(text, "utf-8")
    with pytest.raises(FaultyInput) as refused:
        import_files(store, [good, bad])
    for word in words:
        assert word in str(refused.value)
    assert store.count() == 0


def test_a_file_that_is_not_there_is_named(store, tmp_path):
    with pytest.raises(FaultyInput, match=r"missing\.csv"):
        import_files(store, [tmp_path / "missing.csv"])


def test_a_damaged_store_is_left_as_it_is(tmp_path):
    path = tmp_path / "records.sqlite"
    path.write_bytes(b"this is no database, it was a note once " * 40)
    with pytest.raises(StoreRefused, match=r"records\.sqlite"):
        Records(path, ZONE)
    assert path.read_bytes().startswith(b"this is no database")


def test_a_store_of_a_newer_program_is_refused_and_not_changed(tmp_path):
    path = tmp_path / "records.sqlite"
    Records(path, ZONE).close()
    with sqlite3.connect(path) as db:
        db.execute("PRAGMA user_version = 99")
    db.close()
    with pytest.raises(StoreRefused, match="form 99"):
        Records(path, ZONE)


def test_a_store_damaged_inside_is_refused_where_it_is_read(own_demo):
    with open_records(own_demo) as records:
        path = records.path
    for ending in ("-wal", "-shm"):
        (path.parent / f"{path.name}{ending}").unlink(missing_ok=True)
    raw = bytearray(path.read_bytes())
    for page in range(3, len(raw) // 4096, 3):
        raw[page * 4096 : (page + 1) * 4096] = 4096 * b"?"
    path.write_bytes(raw)
    with (
        pytest.raises(StoreRefused, match=r"records\.sqlite: The store cannot be .*backup"),
        open_records(own_demo) as records,
    ):
        records.all_held("certificate")


def test_several_threads_may_write_at_once(store):
    def write(number):
        for k in range(10):
            store.add([moisture(f"{number + 1}.{k} %", DAY + k * HOUR, pile=f"pile {number}")])

    threads = [threading.Thread(target=write, args=(number,)) for number in range(6)]
    for one in threads:
        one.start()
    for one in threads:
        one.join()
    assert store.count() == 60


def test_two_programs_may_have_the_store_open(store):
    with Records(store.path, ZONE) as other:
        other.add([moisture("4 %")])
        assert store.held("moisture", "stockpile", DAY).fact.water == pytest.approx(0.04)


def test_a_copy_is_whole_and_never_over_another_file(store, tmp_path):
    store.add([moisture("4 %")])
    store.backup(tmp_path / "copy.sqlite")
    with Records(tmp_path / "copy.sqlite", ZONE) as copy:
        assert copy.history() == store.history()
    with pytest.raises(FaultyInput, match="exists"):
        store.backup(tmp_path / "copy.sqlite")


def test_the_store_of_an_invented_plant_follows_its_text_until_somebody_writes(own_demo):
    with open_records(own_demo) as records:
        before = records.count()
    path = own_demo / "records" / "moisture.csv"
    lines = path.read_text("utf-8").splitlines(keepends=True)
    path.write_text("".join(lines[:-1]), "utf-8")
    with open_records(own_demo) as records:
        assert records.count() == before - 1
        records.add([moisture("9 %")])
    path.write_text("".join(lines), "utf-8")
    with open_records(own_demo) as records:
        assert records.count() == before


def test_the_moments_at_which_something_came_to_count(store):
    store.add([moisture("4 %"), moisture("5 %", DAY, DAY + 3 * HOUR)])
    found = store.changes("moisture", DAY - HOUR, DAY + 5 * HOUR)
    assert [at for at, _ in found] == [DAY, DAY + 3 * HOUR]
    assert store.changes("moisture", DAY, DAY + 5 * HOUR)[0][0] == DAY + 3 * HOUR
