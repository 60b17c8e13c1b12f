"""The binder page in a real browser: what stands there is what the sheet says."""

from __future__ import annotations

from pathlib import Path

import pytest
from playwright.sync_api import expect

from advisor.advice.assessment import assess
from advisor.advice.sources import compare
from advisor.screens.query import binder_query
from advisor.settings.certificate_files import read_certificates
from screens.conftest import served
from screens.made_up import MadeUpPlant

SHEETS = Path(__file__).parents[1] / "binder" / "certificates"
WAIT = 30_000


def certificates(folder):
    found = read_certificates([folder / "records" / "certificates.yaml"])
    return {one.lot: one for one in found}


def opened(page):
    page.wait_for_selector(".binder h1", timeout=WAIT)
    page.wait_for_selector("#binder-chart .main-svg", timeout=WAIT)
    return page


def test_the_address_names_the_lots_and_a_wrong_one_is_told() -> None:
    asked = binder_query("?lot=A-2641&against=B-4410", ("A-2641", "B-4410"))
    assert (asked.lot, asked.against, asked.faults) == ("A-2641", "B-4410", ())
    wrong = binder_query("?lot=A-2640&tank=1", ("A-2641", "B-4410"))
    assert wrong.lot is None
    assert any("A-2641" in fault for fault in wrong.faults)
    assert len(wrong.faults) == 2


@pytest.mark.browser
def test_the_page_shows_the_windows_and_what_moves(open_page, picture, demo_address, demo_folder):
    sheets = certificates(demo_folder)
    page = opened(open_page(f"{demo_address}binder?lot=B-4410&against=A-2641"))
    one = assess(sheets["B-4410"])
    change = compare(sheets["A-2641"], sheets["B-4410"])
    windows = page.locator("section.windows").inner_text()
    governing = one.mixing.governing
    for value in (governing.low_c, governing.target_c, governing.high_c):
        assert f"{float(value):.0f}" in windows
    assert "Asphalt Institute MS-2 section 4.2.1 (looked up)" in windows
    moves = page.locator("section.moves").inner_text()
    assert change.sentence in moves
    assert f"+{change.shifts[0].shift_k:.1f}" in moves
    readings = page.locator("section.readings").inner_text()
    assert "0.558" in readings
    checks = page.locator("section.checks").inner_text()
    assert all(check.sentence in checks for check in one.checks)
    picture(page, "binder")


@pytest.mark.browser
def test_chart_and_windows_need_no_scrolling(open_page, demo_address):
    page = opened(open_page(f"{demo_address}binder?lot=B-4410&against=A-2641"))
    chart = page.locator("#binder-chart").bounding_box()
    assert chart
    assert chart["y"] + chart["height"] <= 768
    assert page.locator("section.windows").bounding_box()["y"] < 500
    assert page.evaluate("document.documentElement.scrollWidth") <= 1366


@pytest.mark.browser
def test_another_lot_and_fahrenheit_are_shown_at_once(open_page, demo_address, demo_folder):
    page = opened(open_page(f"{demo_address}binder"))
    page.locator("#binder-lot").click()
    page.get_by_role("option", name="P-0917, PMB 45/80-55").click()
    expect(page.locator(".binder h1")).to_have_text("Lot P-0917, PMB 45/80-55", timeout=WAIT)
    expect(page.locator("section.windows")).to_contain_text("supplier's range", timeout=WAIT)
    expect(page.locator("section.windows")).to_contain_text("equal viscosity is not used")
    page.get_by_text("°F", exact=True).click()
    high = assess(certificates(demo_folder)["P-0917"]).mixing.governing.high_c
    expect(page.locator("section.windows")).to_contain_text(
        f"{float(high) * 1.8 + 32:.0f}", timeout=WAIT
    )


@pytest.mark.browser
def test_a_telephone_shows_it_without_scrolling_sideways(open_page, picture, demo_address):
    page = opened(open_page(f"{demo_address}binder?lot=B-4410&against=A-2641", 390, 844))
    assert page.evaluate("document.documentElement.scrollWidth") <= 390
    picture(page, "binder-narrow", whole=True)


class WithSheets(MadeUpPlant):
    """The made-up plant with sheets of its own, one mistyped and one of rubber."""

    def certificates(self, at):
        names = ("ten_times", "rubber", "series")
        return read_certificates([SHEETS / f"{name}.yaml" for name in names])


@pytest.mark.browser
def test_a_likely_mistake_stands_at_the_top_and_rubber_has_no_curve(open_page):
    with served(WithSheets()) as address:
        page = opened(open_page(f"{address}binder"))
        expect(page.locator(".binder .refusal")).to_contain_text("ten times too high", timeout=WAIT)
        page = opened(open_page(f"{address}binder?lot=T-600&against=T-900"))
        expect(page.locator("section.readings")).to_contain_text("No viscosity line", timeout=WAIT)
        expect(page.locator("section.moves")).to_contain_text("gives no curve to compare")


@pytest.mark.browser
def test_a_drifting_source_is_seen_beside_its_newest_lot(open_page, picture):
    with served(WithSheets()) as address:
        page = opened(open_page(f"{address}binder?lot=S-18"))
        lots = page.locator("section.lots")
        expect(lots).to_contain_text("Drift upwards since certificate", timeout=WAIT)
        page.wait_for_selector("section.lots .main-svg", timeout=WAIT)
        picture(page, "binder-drift", whole=True)
        page = opened(open_page(f"{address}binder?lot=T-600"))
        expect(page.locator("section.lots")).to_be_hidden(timeout=WAIT)


@pytest.mark.browser
def test_a_plant_without_certificates_says_so(open_page):
    with served(MadeUpPlant()) as address:
        page = open_page(f"{address}binder")
        expect(page.locator(".binder h1")).to_have_text("No certificate", timeout=WAIT)
