"""The pages in a real browser: what stands there is what the program answers."""

from __future__ import annotations

import json
import re
import subprocess
import sys
from dataclasses import replace
from datetime import timedelta
from urllib.request import Request, urlopen

import pytest
from playwright.sync_api import expect

from screens.conftest import served
from screens.made_up import NOW, MadeUpPlant, advice, clashing

pytestmark = pytest.mark.browser
WAIT = 30_000


def setpoints_of(folder, *words):
    done = subprocess.run(
        [sys.executable, "-m", "advisor", "setpoints", str(folder), "--json", *words],
        capture_output=True,
        text=True,
        timeout=120,
    )
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout)


def shift_of(page):
    page.wait_for_selector(".setpoints .figure", timeout=WAIT)
    return page


def test_the_shift_page_shows_what_the_command_answers(
    open_page, picture, demo_address, demo_folder
):
    page = shift_of(open_page(demo_address))
    answer = setpoints_of(demo_folder)
    cards = page.locator(".setpoint")
    assert cards.count() == len(answer["setpoints"])
    for place, one in enumerate(answer["setpoints"]):
        card = cards.nth(place)
        assert card.locator("h2").inner_text() == one["label"]
        assert card.locator(".target .figure").inner_text() == f"{one['target_c']:.0f}"
        ends = card.locator(".ends span").all_inner_texts()
        assert ends == [f"{one['low_c']:.0f}", f"{one['high_c']:.0f}"]
        assert one["low_set_by"]["name"] in card.inner_text()
    assert answer["mix"] in page.locator("h1").inner_text()
    for caution in answer["cautions"]:
        assert caution["text"] in page.locator("section.cautions").inner_text()
    for reason in answer["reasons"]:
        assert reason["sentence"] in page.locator("section.reasons").inner_text()
    picture(page, "shift")


def test_the_essentials_need_no_scrolling(open_page, demo_address):
    page = shift_of(open_page(demo_address))
    page.wait_for_selector(".path .main-svg", timeout=WAIT)
    for part in (".setpoints", ".path .js-plotly-plot", ".notices", ".load"):
        box = page.locator(part).first.bounding_box()
        assert box and box["y"] + box["height"] <= 768, part
    size = page.locator(".setpoint .figure").first.evaluate("e => getComputedStyle(e).fontSize")
    assert float(size.removesuffix("px")) >= 36
    wide = page.evaluate("document.documentElement.scrollWidth")
    assert wide <= 1366


def test_a_job_without_a_safe_window_says_so_and_what_would_help(
    open_page, picture, demo_address, demo_folder
):
    page = open_page(f"{demo_address}?job=J08")
    page.wait_for_selector(".refusal", timeout=WAIT)
    answer = setpoints_of(demo_folder, "--job", "J08")["clash"]
    figures = page.locator(".against .figure").all_inner_texts()
    assert figures == [f"{answer['at_least_c']:.0f}", f"{answer['at_most_c']:.0f}"]
    told = page.locator(".clash").inner_text()
    assert answer["lower"]["name"] in told and answer["upper"]["name"] in told
    assert all(one["action"] in told for one in answer["remedies"])
    assert page.locator(".setpoints").count() == 0
    # nothing empty stands where there is nothing to tell
    assert not page.locator(".sheet.path").is_visible()
    assert not page.locator(".sheet.reasons").is_visible()
    picture(page, "clash")


def test_why_opens_beside_the_number_and_escape_closes_it(open_page, demo_address):
    page = shift_of(open_page(demo_address))
    page.locator(".setpoint.discharge .why").click()
    sheet = page.locator(".why-sheet")
    sheet.wait_for(state="visible", timeout=WAIT)
    page.wait_for_selector("#why-title", timeout=WAIT)
    assert "certificate" in sheet.inner_text() or "deliveries" in sheet.inner_text()
    assert page.locator("#why-title").evaluate("e => e === document.activeElement")
    page.keyboard.press("Escape")
    sheet.wait_for(state="hidden", timeout=WAIT)


def test_fahrenheit_is_shown_everywhere_at_once(open_page, demo_address, demo_folder):
    page = shift_of(open_page(demo_address))
    answer = setpoints_of(demo_folder, "--us")
    page.get_by_text("°F", exact=True).click()
    target = answer["setpoints"][1]["target_c"] * 1.8 + 32
    expect(page.locator(".setpoint.discharge .figure")).to_have_text(f"{target:.0f}", timeout=WAIT)
    main = page.locator("main").inner_text()
    words = page.locator("#shift-path-words").inner_text()
    assert f"target {target:.0f}" in words
    drawn = page.locator(".path .scatterlayer .js-line").first.bounding_box()
    sheet = page.locator(".path .plotclip rect").first
    assert drawn and drawn["height"] > 5 and sheet.count() == 1
    # what a contract or a table wrote in C stays as it was written
    assert not re.search(r"\d °C", main)
    for reason in answer["reasons"]:
        assert reason["sentence"] in page.locator("section.reasons").inner_text()


def test_another_job_is_chosen_by_keyboard(open_page, demo_address):
    page = shift_of(open_page(demo_address))
    before = page.locator("h1").inner_text()
    page.locator("#shift-job").focus()
    page.keyboard.press("Enter")
    option = page.locator(".dash-dropdown-option input:focus")
    option.wait_for(timeout=WAIT)
    page.keyboard.press("ArrowDown")
    expect(option).to_have_attribute("value", "J01")
    page.keyboard.press("Space")
    expect(page.locator("h1")).not_to_have_text(before, timeout=WAIT)


@pytest.mark.parametrize("width", [390, 768])
def test_it_fits_a_narrow_screen(open_page, picture, demo_address, width):
    page = shift_of(open_page(demo_address, width=width, height=844))
    assert page.evaluate("document.documentElement.scrollWidth") <= width
    picture(page, f"shift-{width}", whole=True)


def test_what_was_wrong_in_the_address_is_told(open_page, demo_address):
    page = shift_of(open_page(f"{demo_address}?job=J99&at=noon&colour=red"))
    told = page.locator(".alerts").inner_text()
    assert "J99" in told and "noon" in told and "colour" in told
    page = open_page(f"{demo_address}nowhere")
    page.wait_for_selector("h1", timeout=WAIT)
    assert "No such page" in page.locator("main").inner_text()


def test_the_review_page_shows_the_week_and_narrows_to_an_hour(
    open_page, picture, demo_address, demo_folder
):
    page = open_page(f"{demo_address}review")
    page.wait_for_selector(".answer h1", timeout=WAIT)
    done = subprocess.run(
        [sys.executable, "-m", "advisor", "review", str(demo_folder), "--json"],
        capture_output=True,
        text=True,
        timeout=120,
    )
    found = json.loads(done.stdout)
    assert page.locator(".answer h1").inner_text() == found["sentence"]
    page.wait_for_selector(".ag-row", timeout=WAIT)
    title = page.locator("#review-table-title")
    count = len(found["excursions"])
    title_of_all = f"Excursions: {count} of {count}"
    expect(title).to_have_text(title_of_all, timeout=WAIT)
    picture(page, "review", whole=True)
    page.locator("#review-hours").click()
    page.locator(".dash-dropdown-option").first.click()
    expect(title).not_to_have_text(title_of_all, timeout=WAIT)


def test_a_period_outside_the_log_shows_its_last_days_and_says_so(open_page, demo_address):
    page = open_page(f"{demo_address}review?from=2020-01-01&to=2020-01-07")
    page.wait_for_selector(".answer h1", timeout=WAIT)
    assert "The log runs from 2026-10-19" in page.locator(".alerts").inner_text()


def test_stale_data_cannot_be_overlooked(open_page, picture):
    old = NOW - timedelta(minutes=47)
    source = MadeUpPlant(advice(), last_reading=old)
    with served(source) as address:
        page = shift_of(open_page(address))
        told = page.locator(".alerts [role=alert]").inner_text()
        assert "47 min old" in told and "cannot be told" in told
        assert page.locator(".clock .old").count() == 1
        picture(page, "stale")


def test_missing_input_is_asked_for_in_place_of_numbers(open_page, picture):
    with served(MadeUpPlant(fails=True)) as address:
        page = open_page(address)
        page.wait_for_selector("text=Tank 2 has no certificate", timeout=WAIT)
        assert page.locator(".setpoints").count() == 0
        assert "Enter the supplier's certificate" in page.locator("main").inner_text()
        picture(page, "missing")


def test_a_reading_outside_is_told_in_words_and_mark_not_by_colour_alone(open_page):
    with served(MadeUpPlant(advice())) as address:
        page = shift_of(open_page(address))
        card = page.locator(".setpoint.discharge").inner_text()
        assert "▲" in card and "hot by 3" in card
        assert "above high since" in page.locator("section.notices").inner_text()


def test_an_expired_advice_says_so(open_page):
    late = replace(advice(), valid_until=NOW - timedelta(minutes=5))
    with served(MadeUpPlant(late)) as address:
        page = shift_of(open_page(address))
        assert "Expired at" in page.locator(".heading").inner_text()


def test_a_silent_program_is_noticed_by_the_open_page(open_page):
    with served(MadeUpPlant(advice()), refresh_s=0.3) as address:
        page = shift_of(open_page(address))
        page.wait_for_timeout(2500)
        expect(page.locator("#lost")).to_be_hidden()
        page.route("**/_dash-update-component*", lambda route: None)
        expect(page.locator("#lost")).to_be_visible(timeout=WAIT)
        page.context.close()
        open_page.wrong.clear()  # the questions that were never answered


def test_the_pages_print_without_their_controls(open_page, demo_address, tmp_path):
    page = shift_of(open_page(demo_address))
    page.emulate_media(media="print")
    assert not page.locator("nav").is_visible()
    assert page.locator(".setpoint").first.is_visible()
    raw = page.pdf(path=tmp_path / "shift.pdf", format="A4")
    assert raw.startswith(b"%PDF")


def test_paper_carries_every_excursion_and_figures_of_its_own_width(open_page, demo_address):
    page = open_page(f"{demo_address}review")
    page.wait_for_selector(".ag-row", timeout=WAIT)
    page.wait_for_selector(".sheet.trace .scatterlayer", state="attached", timeout=WAIT)
    rows = page.locator("#review-printed tbody tr")
    expect(page.locator("#review-table-title")).to_have_text(
        f"Excursions: {rows.count()} of {rows.count()}"
    )
    expect(rows.first).to_be_hidden()
    page.set_viewport_size({"width": 700, "height": 990})
    page.emulate_media(media="print")
    expect(rows.last).to_be_visible()
    expect(page.locator(".excursion-grid")).to_be_hidden()
    paper = page.locator(".page").bounding_box()
    for figure in page.locator(".js-plotly-plot .main-svg:first-child").all():
        box = figure.bounding_box()
        assert box["x"] + box["width"] <= paper["x"] + paper["width"]
    assert page.evaluate("document.documentElement.scrollWidth") <= 700


def test_the_clash_of_a_made_up_plant_fits_the_screen(open_page):
    with served(MadeUpPlant(clashing())) as address:
        page = open_page(address)
        page.wait_for_selector(".refusal", timeout=WAIT)
        box = page.locator(".clash").bounding_box()
        assert box["y"] + box["height"] <= 768


def test_the_server_answers_this_machine_only_and_forbids_what_comes_from_elsewhere(demo_address):
    with urlopen(demo_address, timeout=20) as answer:  # noqa: S310
        policy = answer.headers["Content-Security-Policy"]
        body = answer.read().decode()
    assert "default-src 'self'" in policy and "unsafe-eval" not in policy
    assert not re.search(r"(?:src|href)=\"(?:https?:)?//", body)
    strange = Request(demo_address, headers={"Host": "plant.example:80"})  # noqa: S310
    with pytest.raises(OSError, match="403"):
        urlopen(strange, timeout=20)  # noqa: S310


def test_a_moment_that_is_past_is_said_to_be(open_page, demo_address):
    page = shift_of(open_page(f"{demo_address}?at=2026-10-22T10:40"))
    assert "As it was known at Thu 22 Oct 10:40, not now" in page.locator(".alerts").inner_text()


def test_a_port_in_use_is_named_with_another_way(demo_folder, demo_address):
    port = demo_address.rsplit(":", 1)[1].strip("/")
    words = [sys.executable, "-m", "advisor", "dashboard", str(demo_folder)]
    done = subprocess.run(
        [*words, "--port", port, "--quiet-start"], capture_output=True, text=True, timeout=120
    )
    assert done.returncode == 2
    assert f"Port {port} is in use" in done.stderr and "--port" in done.stderr


def test_an_address_of_another_machine_is_refused(demo_folder):
    words = [sys.executable, "-m", "advisor", "dashboard", str(demo_folder), "--quiet-start"]
    done = subprocess.run(
        [*words, "--host", "203.0.113.7"], capture_output=True, text=True, timeout=120
    )
    assert done.returncode == 2
    assert "203.0.113.7" in done.stderr and "--host" in done.stderr
