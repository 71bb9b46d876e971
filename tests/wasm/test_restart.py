"""Python in the page, stopped and started again and again: quick, and without growing."""

import os
import shutil
import time
from pathlib import Path

import pytest

pytestmark = pytest.mark.native

PAGE = Path(__file__).resolve().parents[2] / "dist" / "quenchwright.html"
KEEP_WORKER = """
const Real = window.Worker;
window.started = 0;
window.Worker = class extends Real {
  constructor(...rest) { super(...rest); window.lastWorker = this; window.started += 1; }
};
"""
TIMES = 8


@pytest.fixture
def page():
    from browser import FLAGS
    from playwright.sync_api import sync_playwright

    chromium = os.environ.get("CHROMIUM") or shutil.which("chromium")
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=chromium, args=[*FLAGS, "--js-flags=--expose-gc"])
        page = browser.new_context(offline=True).new_page()
        page.add_init_script(KEEP_WORKER)
        page.goto(PAGE.as_uri())
        wait(page)
        yield page
        browser.close()


def wait(page):
    page.locator("html[data-state=ready]").wait_for(state="attached", timeout=120_000)


def heap_mb(page):
    """JavaScript heap of the page after a collection; the kept bytes of the parts lie outside it."""
    return page.evaluate("(gc(), performance.memory.usedJSHeapSize / 1e6)")


def test_restarts_are_quicker_than_the_start_and_leave_nothing_behind(page):
    first = page.evaluate("performance.now()") / 1000
    before, took = heap_mb(page), []
    for number in range(TIMES):
        page.evaluate("lastWorker.onerror({message: 'stopped by the test'})")
        page.locator("html[data-state=failed]").wait_for(state="attached")
        started = time.monotonic()
        page.get_by_role("button", name="Try again").click()
        page.wait_for_timeout(50)
        wait(page)
        took.append(time.monotonic() - started)
        assert page.evaluate("started") == number + 2
    assert sorted(took)[TIMES // 2] < max(first, 1.0)
    assert heap_mb(page) - before < 5


def test_the_text_of_the_parts_is_let_go(page):
    assert page.locator("script[id^=embedded-]").count() == 1  # the index
    assert page.evaluate("document.documentElement.outerHTML.length") < 1_500_000
