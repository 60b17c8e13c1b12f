"""A hundred broken exports: each is read with its counts adding up, or refused in plain words."""

from __future__ import annotations

import io
import random

import pytest
import xlsxwriter

from advisor.errors import FaultyInput
from advisor.logs import read_export
from advisor.settings.folder import read_plant

SEED = 20261019
COUNT = 100


@pytest.fixture(scope="module")
def sound(demo_folder):
    """The mapping of the plant log, its time zone, and two hours of an export as text and sheet."""
    folder = read_plant(demo_folder)
    (source,) = folder.signals.of_kind("plant_log")
    lines = (demo_folder / "logs/plant_2026-10-21.csv").read_bytes().split(b"\r\n")
    text = b"\r\n".join([*lines[:3], *lines[330:450]]) + b"\r\n"
    out = io.BytesIO()
    with xlsxwriter.Workbook(out, {"in_memory": True}) as book:
        sheet = book.add_worksheet()
        for number, line in enumerate(text.decode("cp1252").splitlines()):
            sheet.write_row(number, 0, line.split(";"))
    return source, folder.plant.time_zone, text, out.getvalue()


def flip_bytes(raw, chance):
    broken = bytearray(raw)
    for _ in range(chance.randint(1, 60)):
        broken[chance.randrange(len(broken))] = chance.randrange(256)
    return bytes(broken)


def cut(raw, chance):
    return raw[: chance.randrange(len(raw))]


def drop_a_piece(raw, chance):
    start = chance.randrange(len(raw))
    return raw[:start] + raw[start + chance.randint(1, 800) :]


def repeat_a_piece(raw, chance):
    start = chance.randrange(len(raw))
    return raw[: start + 500] + raw[start:]


def shuffle_lines(raw, chance):
    lines = raw.split(b"\n")
    chance.shuffle(lines)
    return b"\n".join(lines)


def insert_words(raw, chance):
    words = (b'"', b"\x00", b"\xff\xfe", b"\r", b";;;;", b"=1+1", b"99/99/9999", b"\t", b"1e999")
    for _ in range(chance.randint(1, 12)):
        at = chance.randrange(len(raw))
        raw = raw[:at] + chance.choice(words) + raw[at:]
    return raw


def swap_letters(raw, chance):
    old, new = chance.choice(
        [(b";", b","), (b",", b"."), (b"/", b"-"), (b":", b"."), (b"\n", b""), (b"2", b"O")]
    )
    return raw.replace(old, new)


BREAKERS = (
    flip_bytes, cut, drop_a_piece, repeat_a_piece, shuffle_lines, insert_words, swap_letters,
)  # fmt: skip


@pytest.mark.parametrize("number", range(COUNT))
def test_a_broken_file_is_read_or_refused_with_every_row_accounted_for(sound, tmp_path, number):
    source, zone, text, sheet = sound
    chance = random.Random(f"{SEED} {number}")  # noqa: S311 - only to break files
    as_sheet = number % 4 == 3
    raw = sheet if as_sheet else text
    for breaker in chance.sample(BREAKERS, chance.randint(1, 3)):
        raw = breaker(raw, chance) if raw else raw
    path = tmp_path / f"broken.{'xlsx' if as_sheet else 'csv'}"
    path.write_bytes(raw)
    intake, faults = None, ()
    try:
        intake = read_export(path, source, zone)
    except FaultyInput as refused:
        faults = refused.faults
    assert all(one.problem and one.remedy and "broken" in one.file for one in faults)
    if intake is None:
        assert faults
        return
    report = intake.report
    assert report.rows_read == report.rows_used + len(report.set_aside)
    assert len(intake.frame) == len(intake.lines) == report.rows_used
    assert all(row.reason and row.line >= 1 for row in report.set_aside)
    assert intake.frame["time"].is_monotonic_increasing and intake.frame["time"].is_unique


def test_the_file_they_were_made_from_is_sound(sound, tmp_path):
    source, zone, *both = sound
    for raw, name in zip(both, ("sound.csv", "sound.xlsx"), strict=True):
        path = tmp_path / name
        path.write_bytes(raw)
        report = read_export(path, source, zone).report
        assert (report.rows_read, report.rows_used) == (120, 120)
