"""The page of what comes in a real browser: what stands there is what the command answers."""

from __future__ import annotations

import json
import re
import subprocess
import sys

import pytest
from playwright.sync_api import expect

from advisor.advice.coming_day import HourAhead
from advisor.figures.hours import coming_hours, coming_hours_words

pytestmark = pytest.mark.browser
WAIT = 60_000


def answer_of(folder, name, *words):
    done = subprocess.run(
        [sys.executable, "-m", "advisor", "ahead", name, str(folder), "--json", *words],
        capture_output=True, text=True, timeout=120,
    )  # fmt: skip
    assert done.returncode == 0, done.stderr + done.stdout
    return json.loads(done.stdout)


def ready(page):
    page.wait_for_selector(".ahead .hours tbody tr", timeout=WAIT)
    return page


def rows_of(page, part):
    return page.locator(f".ahead .{part} .answer tr")


def test_the_day_is_that_of_the_command(open_page, picture, demo_address, demo_folder):
    page = ready(open_page(f"{demo_address}ahead"))
    answer = answer_of(demo_folder, "day", "--hours", "12")
    rows = page.locator(".ahead .hours tbody tr")
    assert rows.count() == len(answer["hours"]) == 13
    for place, hour in enumerate(answer["hours"]):
        told = rows.nth(place).inner_text()
        assert f"{hour['target_c']:.0f}" in told
        assert hour["weather"] in told
    assert answer["job_name"] in page.locator(".ahead h1").inner_text()
    for caution in answer["cautions"]:
        assert caution["text"] in page.locator(".ahead .hours").inner_text()
    page.wait_for_selector(".ahead .day .main-svg", timeout=WAIT)
    picture(page, "ahead")


def test_the_load_is_the_latest_ticket_and_another_can_be_chosen(
    open_page, demo_address, demo_folder
):
    page = ready(open_page(f"{demo_address}ahead"))
    rows_of(page, "load").first.wait_for(timeout=WAIT)
    answer = answer_of(demo_folder, "load", "--ticket", "40484")
    told = page.locator(".ahead .load").inner_text()
    assert f"{answer['arrives_c']['usual']:.0f} (" in told
    assert f"{answer['wait_safe_min']:.0f} min" in told
    assert answer["need_set_by"]["name"] in told
    page.locator("#ahead-ticket").click()
    page.locator(".dash-dropdown-option", has_text="40483").click()
    expect(rows_of(page, "load").first).to_contain_text("Left 10:00", timeout=WAIT)


def test_the_silo_is_asked_about_a_time_and_refuses_in_a_sentence(
    open_page, demo_address, demo_folder
):
    page = ready(open_page(f"{demo_address}ahead"))
    answer = answer_of(demo_folder, "silo", "silo 2", "--until", "06:00")
    expect(page.locator(".ahead .silo .answer")).to_contain_text(
        f"{answer['first_out_c']['usual']:.0f} (", timeout=WAIT
    )
    assert "a rule" in page.locator(".ahead .silo").inner_text()
    box = page.locator("#ahead-silo-mass")
    for written, said in (("80", "no unit"), ("900 t", "nothing to hold"), ("much", "much")):
        box.fill(written)
        box.press("Enter")
        expect(page.locator(".ahead .silo [role=alert]")).to_contain_text(said, timeout=WAIT)
    box.fill("80 t")
    box.press("Enter")
    expect(page.locator(".ahead .silo .answer")).to_contain_text("80 t of", timeout=WAIT)
    until = page.locator("#ahead-silo-until")
    until.fill("")
    until.press("Enter")
    expect(page.locator(".ahead .silo [role=alert]")).to_contain_text("until when", timeout=WAIT)


def test_the_tank_asks_for_the_air_no_forecast_tells(open_page, demo_address, demo_folder):
    page = ready(open_page(f"{demo_address}ahead"))
    tank = page.locator(".ahead .tank")
    expect(tank.locator("[role=alert]")).to_contain_text("No forecast tells", timeout=WAIT)
    page.locator("#ahead-tank-air").fill("7 C")
    page.locator("#ahead-tank-air").press("Enter")
    expect(tank).to_contain_text("Heater on again at", timeout=WAIT)
    assert "not priced" in tank.inner_text()
    assert "Water may have gathered" in tank.inner_text()
    page.locator("#ahead-tank-price").fill("0.09")
    page.locator("#ahead-tank-price").press("Enter")
    expect(tank).to_contain_text("GBP", timeout=WAIT)
    answer = answer_of(
        demo_folder, "tank", "tank 2", "--until", "2026-10-26 05:30", "--air", "7 C",
        "--price", "0.09",
    )  # fmt: skip
    assert f"{answer['saved_kwh']['usual']:.0f} (" in tank.inner_text()
    page.locator("#ahead-tank-price").fill("cheap")
    page.locator("#ahead-tank-price").press("Enter")
    expect(tank.locator("[role=alert]")).to_contain_text("no price", timeout=WAIT)


def test_a_job_without_a_window_says_which_limits_clash_once(open_page, demo_address):
    page = ready(open_page(f"{demo_address}ahead?job=J08"))
    expect(page.locator(".ahead h1")).to_contain_text("No window in these hours", timeout=WAIT)
    told = page.locator(".ahead .hours tbody").inner_text()
    assert told.count("clashes with") == 1
    assert told.count("none") == 13


def test_fahrenheit_everywhere(open_page, demo_address):
    page = ready(open_page(f"{demo_address}ahead"))
    page.get_by_text("°F", exact=True).click()
    expect(page.locator(".ahead .hours caption")).to_have_text("at discharge, °F", timeout=WAIT)
    expect(page.locator(".ahead .load .answer")).to_contain_text("°F", timeout=WAIT)
    assert not re.search(r"\d °C", page.locator(".ahead .hours").inner_text())


@pytest.mark.parametrize("width", [390, 768])
def test_it_fits_a_narrow_screen(open_page, picture, demo_address, width):
    page = ready(open_page(f"{demo_address}ahead", width=width, height=844))
    rows_of(page, "silo").first.wait_for(timeout=WAIT)
    assert page.evaluate("document.documentElement.scrollWidth") <= width
    picture(page, f"ahead-{width}", whole=True)


def test_what_was_wrong_in_the_address_is_told(open_page, demo_address):
    page = ready(open_page(f"{demo_address}ahead?job=J99&until=noon"))
    told = page.locator(".alerts").inner_text()
    assert "J99" in told and "until" in told


def hour(at, target_c):
    from datetime import UTC, datetime, timedelta

    moment = datetime(2026, 10, 23, at, tzinfo=UTC)
    return HourAhead(
        moment, moment + timedelta(minutes=30), "air 8 °C", "forecast", 150.0, target_c, 165.0,
        "need", "contract maximum", 15.0 if target_c else -5.0, None, None, "",
    )  # fmt: skip


def test_the_figure_draws_windows_and_hatches_clashes():
    from zoneinfo import ZoneInfo

    zone = ZoneInfo("Europe/London")
    hours = [hour(9, 155.0), hour(10, 155.0), hour(11, None)]
    drawn = coming_hours(hours, hours[1].laid_at, zone)
    names = [one.name for one in drawn.data]
    assert names == ["window", "target", "window", "target", "no window"]
    assert drawn.data[-1].fillpattern.shape == "/"
    # the hour in which it shuts is drawn as far as it is open
    assert drawn.data[2].x[1] == hours[1].laid_at.replace(tzinfo=None)
    assert "last good load 11:30" in drawn.layout.annotations[0].text
    assert coming_hours_words(hours, zone) == ("1 of 3 hours have no window, the first at 12:00.")
    us = coming_hours(hours, None, zone, "us")
    assert us.data[1].y[0] == pytest.approx(311.0)
    assert "every hour" in coming_hours_words(hours[:2], zone)
