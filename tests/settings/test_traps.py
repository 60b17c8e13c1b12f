"""Traps of the file format, and values that cannot be: refused with their line or read as meant."""

from __future__ import annotations

import pytest

from advisor.errors import FaultyInput
from advisor.settings import read_plant


def changed(folder, file, old, new):
    path = folder / file
    text = path.read_text("utf-8")
    assert old in text
    path.write_text(text.replace(old, new, 1), "utf-8")
    return folder


@pytest.mark.parametrize(
    ("old", "new", "line", "words"),
    [
        ("altitude: 4 m", "altitude: 012", 9, ["no unit", "012"]),
        ("altitude: 4 m", "altitude: 2026-10-01", 9, ["not a unit"]),
        ("altitude: 4 m", "altitude: *high", 9, ["begins with '*'", "in quotes"]),
        ("altitude: 4 m", "<<: {altitude: 4 m}", 9, ["'<<' is not a key"]),
        ("altitude: 4 m", "altitude: !!python/name:os.system 4 m", 9, ["tag"]),
        ("altitude: 4 m", "altitude:", 9, ["altitude", "number with one of these units"]),
        ("altitude: 4 m", "altitude: nan m", 9, ["not a number"]),
        ("altitude: 4 m", "altitude: 1,500 m", 9, ["point for decimals"]),
        ("altitude: 4 m", "altitude: 4 m\n---\nname: x", 10, ["another document"]),
        ("latitude: 52.6 deg", "latitude: 152.6 deg", 7, ["152.6 deg", "-90 deg to 90 deg"]),
        ("latitude: 52.6 deg", "latitude: 52.6 N", 7, ["'N' is not a unit", "deg"]),
        ("control_scatter: 2.5 C", "control_scatter: -2.5 C", 67, ["0 C to 30 C"]),
        ("control_scatter: 2.5 C", "control_scatter: 160 C", 67, ["0 C to 30 C"]),
        ("control_scatter: 2.5 C", "control_scatter: 160 F", 67, ["0 F to 54 F"]),
        ("tolerance: 3 C", "tolerance: 300 C", 57, ["tolerance", "0 C to 30 C"]),
        ("  stack_c: {kind", "  stak_c: {kind", 57, ["'stak_c'", "Did you mean 'stack_c'"]),
        ("air_ratio: 1.9", "air_ratio: 0.5", 23, ["0.5 is not at least 1"]),
        ("amount: 0.041", "amount: -0.041", 22, ["amount", "above 0"]),
        ("checked_on: 2026-10-12}   #", "checked_on: 12/10/2026}   #", 57, ["2026-10-19"]),
        ("[mon, tue, wed, thu, fri]", "[mon, tuesday]", 76, ["Did you mean 'tue'"]),
        ("currency: GBP", "currency: pounds", 11, ["pounds", "ISO 4217"]),
        ("side: low, value: 125 C", "side: low, value: 190 C", 71, ["185 C", "190 C"]),
        (", source: house rule HF-02 (invented)", "", 72, ["'source' is missing"]),
    ],
)
def test_what_cannot_be_meant_is_refused_with_its_line(own_demo, old, new, line, words):
    changed(own_demo, "plant.yaml", old, new)
    with pytest.raises(FaultyInput) as refused:
        read_plant(own_demo)
    here = [one for one in refused.value.faults if all(word in str(one) for word in words)]
    assert here, str(refused.value)
    assert here[0].line == line and here[0].file.endswith("plant.yaml") and here[0].remedy


@pytest.mark.parametrize("value", ["365 °F", "365 F", "458.15 K", "185 °C", '"185 C"'])
def test_a_temperature_in_any_unit_is_the_same_limit(own_demo, value):
    folder = read_plant(changed(own_demo, "plant.yaml", "value: 185 C", f"value: {value}"))
    assert float(folder.plant.house_limits[0].value) == pytest.approx(185.0, abs=0.01)


def test_an_anchor_is_only_another_way_to_write(own_demo):
    changed(own_demo, "jobs.yaml", "lift: 60 mm", "lift: &thick 60 mm")
    assert float(read_plant(own_demo).job("J01").lift) == pytest.approx(0.06)


@pytest.mark.parametrize("form", ["with a mark", "with line ends of another system"])
def test_a_file_saved_by_another_editor_reads_the_same(own_demo, form):
    sound = read_plant(own_demo)
    for name in ("plant.yaml", "tanks.yaml", "jobs.yaml"):
        raw = (own_demo / name).read_bytes()
        other = b"\xef\xbb\xbf" + raw if form == "with a mark" else raw.replace(b"\n", b"\r\n")
        (own_demo / name).write_bytes(other)
    again = read_plant(own_demo)
    assert (again.plant, again.tanks, again.jobs) == (sound.plant, sound.tanks, sound.jobs)


@pytest.mark.parametrize(
    "raw",
    [b"tanks: []\n", b"tanks: {}\n", b"- tank 1\n", b"tanks: \x00\n", b"[" * 5000,
     b"a: &a [x, x]\nb: &b [*a, *a]\n", "tanks: []\n".encode("utf-16"), b""],
)  # fmt: skip
def test_a_list_of_tanks_that_is_none_is_refused_by_its_file(own_demo, raw):
    (own_demo / "tanks.yaml").write_bytes(raw)
    with pytest.raises(FaultyInput) as refused:
        read_plant(own_demo)
    assert all(one.file.endswith("tanks.yaml") and one.remedy for one in refused.value.faults)
    assert "Tuple" not in str(refused.value)
