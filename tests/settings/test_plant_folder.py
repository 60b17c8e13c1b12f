"""A plant folder with something wrong in it: the message names file, line, field and remedy."""

from __future__ import annotations

import pytest

from advisor.errors import FaultyInput
from advisor.settings import read_plant

# File, what stands there, what a person writes by mistake, line it stands in, and words the
# message must have: the field, the value, and what would be right.
MISTAKES = [
    ("plant.yaml", "altitude: 4 m", "altitude: 4", 9, ["altitude", "no unit", "'4 m'"]),
    ("plant.yaml", "altitude: 4 m", "altitude: 4 kg", 9, ["'kg' is not a unit of a length", "ft"]),
    ("plant.yaml", "altitude: 4 m", "altitud: 4 m", 9, ["altitud", "Did you mean 'altitude'"]),
    ("plant.yaml", "confidence: 95 %", "confidence: 95", 68, ["confidence", "'95 %'"]),
    ("plant.yaml", "confidence: 95 %", "confidence: 100 %", 68, ["100 %", "50 to 99.9 %"]),
    ("plant.yaml", "rate_max: 240 t/h", "rate_max: -240 t/h", 18, ["rate_max", "0 t/h to 900"]),
    ("plant.yaml", "Europe/London", "Mars/Base", 6, ["time_zone", "Mars/Base", "Europe/London"]),
    ("plant.yaml", "counterflow", "counterflw", 17, ["Did you mean 'counterflow'", "batch"]),
    ("plant.yaml", "natural gas", "natural gaz", 21, ["natural gaz", "Did you mean 'natural gas'"]),
    ("plant.yaml", '"05:30"', '"25:30"', None, ["25:30", "not a time of day", "05:30"]),
    ("plant.yaml", "altitude: 4 m", "altitude: 4 m\naltitude: 5 m", 10, ["written twice", "9"]),
    ("plant.yaml", "altitude: 4 m", "altitude: 4 m\n\tname: x", 10, ["tab", "spaces"]),
    ("plant.yaml", "invented: true", "invented: yes", 4, ["invented", "true or false"]),
    ("plant.yaml", "value: 185 C", "value: 1850 C", 71, ["1850 C", "believable", "600 C"]),
    ("plant.yaml", "stack: 118 C", "stack: [118 C]", 25, ["stack", "not a quantity"]),
    ("plant.yaml", "conveyor:", "conveyr:", 29, ["conveyr", "Did you mean 'conveyor'"]),
    ("plant.yaml", "class 2", "class 7", 58, ["config/sensors.yaml", "thermocouple K class"]),
    ("plant.yaml", "tolerance: 3 C", "tolerance: 3 m", 57, ["'m'", "not a unit"]),
    ("plant.yaml", "signal: silo_1_c", "signal: silo_9_c", 43, ["silo_9_c", "signals.yaml"]),
    ("plant.yaml", "invented: true", "invented: false", 5, ["shown_at", "invented plant"]),
    ("plant.yaml", "name: Harrow Fen plant (invented)", 'name: "  "', 3, ["'  '", "One line"]),
    ("plant.yaml", "currency: GBP", "currency: pounds", None, ["'pounds'", "ISO 4217"]),
    ("plant.yaml", "Harrow Fen plant (invented)", 90 * "x", 3, ["90 characters", "at most 80"]),
    ("jobs.yaml", "name: Market street, surface course", 'name: " "', None, ["' '", "Wanted"]),
    ("mixes.yaml", "[tank 1, tank 2]", "[]", 8, ["empty", "tanks"]),
    ("tanks.yaml", "binder_tank_1_c", "binder_tank_one", 12, ["binder_tank_1_c", "Known here"]),
    ("tanks.yaml", "name: tank 2", "name: tank 1", 13, ["used twice", "line 3"]),
    ("tanks.yaml", "heel_min: 10 t", "heel_min: 100 t", 5, ["heel", "80 m3"]),
    ("mixes.yaml", "[tank 1, tank 2]", "[tank 1, tnak 2]", 8, ["tnak 2", "Did you mean 'tank 2'"]),
    ("mixes.yaml", "4.7 %", "47 %", 7, ["Binder content", "2 % to 12 %"]),
    ("mixes.yaml", "share: 20 %", "share: 20", 11, ["share", "'20 %'"]),
    ("mixes.yaml", "family: dense", "family: dens", 5, ["Did you mean 'dense'"]),
    ("jobs.yaml", "mix: AC20R", "mix: AC20", 5, ["AC20", "Did you mean 'AC20R'"]),
    ("jobs.yaml", "material: asphalt", "material: ashpalt", 7, ["Did you mean 'asphalt'"]),
    ("jobs.yaml", "value: 280 F", "value: 280", 28, ["280", "no unit", "'280 C'"]),
    ("jobs.yaml", "lift: 60 mm", "lift: 60 m", 6, ["Lift", "0.01 m to 0.35 m"]),
    ("jobs.yaml", "cover: tarpaulin", "cover: tarp", 9, ["Did you mean 'tarpaulin'"]),
    ("jobs.yaml", "35 min, spread: 6 min", "35 min", 8, ["spread", "standard deviation"]),
    ("jobs.yaml", "spread: 6 min", "spread: 60 min", 8, ["60 min", "more than the haul"]),
    ("signals.yaml", "Tank 1 temp: {signal: binder_tank_1_c",
     "Tank 1 temp: {signal: binder_tank_2_c", None, ["binder_tank_2_c", "already comes from"]),
]  # fmt: skip


def faults_of(folder):
    with pytest.raises(FaultyInput) as refused:
        read_plant(folder)
    return refused.value.faults


def write(folder, file, old, new):
    path = folder / file
    text = path.read_text("utf-8")
    assert old in text
    path.write_text(text.replace(old, new, 1), "utf-8")


@pytest.mark.parametrize(
    ("file", "old", "new", "line", "words"), MISTAKES, ids=[f"{m[0]} {m[2]!r}" for m in MISTAKES]
)
def test_a_mistake_is_named_with_its_place_and_what_would_be_right(
    own_demo, file, old, new, line, words
):
    write(own_demo, file, old, new)
    faults = faults_of(own_demo)
    here = [fault for fault in faults if all(word in str(fault) for word in words)]
    assert here, "\n".join(map(str, faults))
    assert here[0].file.endswith(file)
    assert line is None or here[0].line == line
    assert here[0].remedy


def test_the_demo_plant_is_sound(demo_folder):
    folder = read_plant(demo_folder)
    assert len(folder.tanks) == 3 and len(folder.plant.silos) == 2
    assert len(folder.mixes) == 6 and len(folder.jobs) == 8
    assert folder.plant.invented and "invented" in folder.plant.name


def test_every_fault_of_every_file_is_told_at_once_from_the_top(own_demo):
    write(own_demo, "plant.yaml", "altitude: 4 m", "altitude: 4")
    write(own_demo, "plant.yaml", "confidence: 95 %", "confidence: 95")
    write(own_demo, "mixes.yaml", "family: dense", "family: dens")
    write(own_demo, "jobs.yaml", "lift: 60 mm", "lift: 60")
    faults = faults_of(own_demo)
    assert len(faults) == 4
    assert [fault.file.rsplit("/", 1)[-1] for fault in faults] == [
        "plant.yaml", "plant.yaml", "mixes.yaml", "jobs.yaml",
    ]  # fmt: skip
    assert faults[0].line < faults[1].line


@pytest.mark.parametrize("name", ["plant.yaml", "tanks.yaml", "mixes.yaml", "jobs.yaml"])
def test_a_missing_file_is_named_and_one_alike_is_offered(own_demo, name):
    (own_demo / name).rename(own_demo / name.replace(".yaml", ".yml"))
    (fault,) = [one for one in faults_of(own_demo) if one.code == "file-missing"]
    assert name in fault.problem and name.replace(".yaml", ".yml") in fault.remedy


def test_a_folder_that_is_none_is_refused(tmp_path):
    (fault,) = faults_of(tmp_path / "nowhere")
    assert "nowhere" in fault.problem


@pytest.mark.parametrize(
    ("raw", "words"),
    [
        (b"", "'name' is missing"),
        (b"\xff\xfe\x00bad", ""),
        (b"just words", ""),
        (b"name: [1, 2", ""),
        (b"name: x\n  y: 1\n", ""),
        ("name: Harrow\nname2: \u00fc".encode("cp1252"), ""),
    ],
)
def test_a_file_that_is_no_settings_is_refused_with_its_name(own_demo, raw, words):
    (own_demo / "plant.yaml").write_bytes(raw)
    faults = faults_of(own_demo)
    assert any(fault.file.endswith("plant.yaml") and words in str(fault) for fault in faults)
    assert all(fault.remedy for fault in faults)


def test_units_are_converted_once_where_they_are_read(own_demo):
    write(own_demo, "jobs.yaml", "lift: 60 mm", "lift: 4 in")
    write(own_demo, "plant.yaml", "control_scatter: 2.5 C", "control_scatter: 4.5 F")
    write(own_demo, "plant.yaml", "tolerance: 3 C", "tolerance: 30 F")
    folder = read_plant(own_demo)
    assert float(folder.job("J01").lift) == pytest.approx(0.1016)
    # a difference has no offset: 30 F is 16.7 K, not -1.1 C
    assert float(folder.plant.control_scatter) == pytest.approx(2.5)
    assert float(folder.plant.sensors["discharge_c"].tolerance) == pytest.approx(16.667, abs=1e-3)
    contract = [one for one in folder.job("J02").limits if one.side == "low"]
    assert float(contract[0].value) == pytest.approx(137.78, abs=0.01)
    assert contract[0].value.text == "280 F"


def test_a_name_asked_for_and_not_there_lists_the_nearest(demo_folder):
    folder = read_plant(demo_folder)
    with pytest.raises(FaultyInput, match=r"There is no job 'J99'.*Known here: J01, J02"):
        folder.job("J99")
    with pytest.raises(FaultyInput, match="Did you mean 'AC20R'"):
        folder.mix("AC20")
