"""The what-if page in a real browser, and its figure."""

from __future__ import annotations

import json
import re
import subprocess
import sys

import pytest
from playwright.sync_api import expect

from advisor.figures.energy import energy_bars, energy_words, shown_parts
from advisor.figures.ink import DARK, LIGHT

WAIT = 30_000
PARTS = (
    ("aggregate", 33.0), ("recycled", 0.0), ("filler", 0.4), ("binder", 1.1), ("evaporation", 29.0),
    ("superheat", 1.2), ("residual water", 0.0), ("combustion gas", 3.2), ("excess air", 2.5),
    ("leakage air", 0.0), ("casing", 2.2), ("transfer", 0.0), ("fuel hydrogen", 8.0),
)  # fmt: skip


def answered(folder, *words):
    done = subprocess.run(
        [sys.executable, "-m", "advisor", "what-if", str(folder), "--json", *words],
        capture_output=True,
        text=True,
        timeout=120,
    )
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout)["ways"][0]


def open_what_if(open_page, address, **size):
    page = open_page(f"{address}what-if", **size)
    expect(page.locator("h1")).to_contain_text("Move a slider", timeout=WAIT)
    return page


def set_to(page, knob, value):
    field = page.locator(f"#what-if-{knob}-place input")
    field.fill(str(value))
    field.press("Enter")


@pytest.mark.browser
def test_cooler_is_told_as_the_command_tells_it(open_page, picture, demo_address, demo_folder):
    page = open_what_if(open_page, demo_address)
    way = answered(demo_folder, "--cooler", "10 C")
    set_to(page, "hotter", -10)
    expect(page.locator("h1")).to_contain_text("Saves", timeout=WAIT)
    low, high = (
        float(one) for one in re.findall(r"([\d.]+) to ([\d.]+) kWh/t", page.inner_text("h1"))[0]
    )
    saved = way["saved"]["gross_kwh_t"]
    assert (low, high) == pytest.approx((saved[0], saved[2]), abs=0.03)
    assert "below the lowest allowed" in page.locator(".answer .refusal").inner_text()
    table = page.locator(".numbers").inner_text()
    assert f"{way['after']['discharge_c']:.0f} °C" in table
    picture(page, "what-if")
    page.get_by_text("Back to now").click()
    expect(page.locator("h1")).to_contain_text("Move a slider", timeout=WAIT)


@pytest.mark.browser
def test_wetter_stone_costs_and_a_longer_haul_moves_the_path(open_page, demo_address):
    page = open_what_if(open_page, demo_address)
    set_to(page, "moisture", 6)
    expect(page.locator("h1")).to_contain_text("Costs", timeout=WAIT)
    page.get_by_text("Back to now").click()
    expect(page.locator("h1")).to_contain_text("Move a slider", timeout=WAIT)
    before = page.locator("#what-if-path-words").inner_text()
    set_to(page, "haul", 60)
    expect(page.locator("#what-if-path-words")).not_to_have_text(before, timeout=WAIT)


@pytest.mark.browser
def test_a_job_with_rap_has_its_slider_and_one_without_a_window_says_so(
    open_page, demo_address, demo_folder
):
    page = open_what_if(open_page, demo_address)
    expect(page.locator("#what-if-rap-place")).to_be_hidden()
    page.locator("#what-if-job").click()
    page.locator(".dash-dropdown-option", has_text="J01").click()
    expect(page.locator("#what-if-rap-place")).to_be_visible(timeout=WAIT)
    set_to(page, "rap", 30)
    way = answered(demo_folder, "--job", "J01", "--rap-share", "30 %")
    expect(page.locator(".numbers")).to_contain_text(
        f"{way['after']['aggregate_c']:.0f} °C", timeout=WAIT
    )
    page.locator("#what-if-job").click()
    page.locator(".dash-dropdown-option", has_text="J08").click()
    expect(page.locator(".answer")).to_contain_text("no safe window", timeout=WAIT)


@pytest.mark.browser
def test_sliders_count_in_the_reader_s_units(open_page, demo_address):
    page = open_what_if(open_page, demo_address)
    page.get_by_text("°F", exact=True).click()
    expect(page.locator("#what-if-air-now")).to_contain_text("°F", timeout=WAIT)
    set_to(page, "hotter", -18)
    expect(page.locator("h1")).to_contain_text("Btu/ton", timeout=WAIT)
    assert not re.search(r"\d (°C|kWh)", page.locator("main").inner_text())


@pytest.mark.browser
def test_it_fits_a_phone(open_page, picture, demo_address):
    page = open_what_if(open_page, demo_address, width=390, height=844)
    assert page.evaluate("document.documentElement.scrollWidth") <= 390
    picture(page, "what-if-390", whole=True)


@pytest.mark.parametrize("ink", [LIGHT, DARK], ids=["light", "dark"])
def test_the_bars_hold_all_of_the_heat_and_show_where_it_would_change(ink):
    told = shown_parts(PARTS)
    assert sum(value for _, value in told) == pytest.approx(sum(value for _, value in PARTS))
    assert "heating RAP" not in dict(told)
    after = tuple((name, value * (0.9 if name == "aggregate" else 1.0)) for name, value in PARTS)
    figure = energy_bars(PARTS, after, "si", ink)
    assert list(figure.data[0].x) == pytest.approx([value for _, value in told])
    words = " ".join(one.text for one in figure.layout.annotations)
    assert "-3.3" in words
    assert len(figure.layout.shapes) == len(told)
    assert "heating stone 33.0, then 29.7" in energy_words(PARTS, after, "si")
    assert energy_bars((), None).layout.annotations[0].text == "No heat to show."
