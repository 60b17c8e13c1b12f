"""A real browser, and the pages of the demo plant and of a made-up one behind real servers."""

from __future__ import annotations

import os
import shutil
import threading
from contextlib import contextmanager
from pathlib import Path

import pytest
from cheroot.wsgi import Server

from advisor.screens.app import make_app
from advisor.screens.server import PageServer

# The browser asks nobody but the pages: no update, no search for its maker's hosts.
QUIET = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)
NAMES = ("chromium", "chromium-browser", "google-chrome")
PICTURES = Path(__file__).parents[1] / "pictures"


@pytest.fixture(scope="session")
def browser():
    """A headless Chromium; a machine without one skips these tests unless they are required."""
    named = os.environ.get("ADVISOR_BROWSER")
    path = named or next(filter(None, map(shutil.which, NAMES)), None)
    if path is None:
        reason = f"no browser: none of {', '.join(NAMES)} is on the path"
        if os.environ.get("ADVISOR_BROWSER_REQUIRED"):
            pytest.fail(reason)
        pytest.skip(reason)
    from playwright.sync_api import sync_playwright

    with sync_playwright() as driver:
        chromium = driver.chromium.launch(executable_path=path, args=list(QUIET))
        yield chromium
        chromium.close()


@pytest.fixture(scope="session")
def demo_address(demo_folder):
    """Address of the demo plant's pages."""
    server = PageServer(demo_folder, port=0)
    thread = threading.Thread(target=server.serve, daemon=True)
    thread.start()
    yield server.address
    server.stop()
    thread.join(20)


@contextmanager
def served(source, refresh_s=60.0):
    """Address of the pages of any source."""
    server = Server(("127.0.0.1", 0), make_app(source, refresh_s).server, numthreads=4)
    server.prepare()
    thread = threading.Thread(target=server.serve, daemon=True)
    thread.start()
    try:
        yield f"http://127.0.0.1:{server.bind_addr[1]}/"
    finally:
        server.stop()
        thread.join(20)


@pytest.fixture
def open_page(browser):
    """Opens an address and gives the page; what goes wrong in it, or out of it, fails the test."""
    contexts, wrong = [], []

    def opened(address, width=1366, height=768, scheme="light"):
        context = browser.new_context(
            viewport={"width": width, "height": height},
            color_scheme=scheme,
            timezone_id="Asia/Tokyo",  # the plant's time is shown wherever the reader is
        )
        contexts.append(context)
        page = context.new_page()
        host = address.split("/")[2]

        def leaves(request):
            if request.url.startswith("http") and request.url.split("/")[2] != host:
                wrong.append(f"asked {request.url}")

        page.on("request", leaves)
        page.on("requestfailed", lambda request: wrong.append(f"failed {request.url}"))
        page.on("pageerror", lambda error: wrong.append(str(error)))
        page.on(
            "console",
            lambda told: wrong.append(told.text) if told.type in ("error", "warning") else None,
        )
        page.goto(address)
        return page

    opened.wrong = wrong
    yield opened
    for context in contexts:
        context.close()
    assert not wrong


@pytest.fixture
def picture():
    """Keeps a picture of a page beside the tests, for eyes."""

    def taken(page, name, whole=False):
        PICTURES.mkdir(exist_ok=True)
        path = PICTURES / f"{name}.png"
        page.screenshot(path=path, full_page=whole)
        return path

    return taken
