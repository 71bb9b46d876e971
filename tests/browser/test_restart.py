"""Python in the page, stopped and started again and again: quick, and without growing."""

import time

KEEP_WORKER = """
const Real = window.Worker;
window.started = 0;
window.Worker = function (...rest) {
  window.lastWorker = new Real(...rest);
  window.started += 1;
  return window.lastWorker;
};
"""
TIMES = 6


def heap_mb(page):
    """The page's JavaScript heap after a collection; the packed bytes kept for a restart lie outside it."""
    page.context.new_cdp_session(page).send("HeapProfiler.collectGarbage")
    return page.evaluate("performance.memory.usedJSHeapSize / 1e6")


def test_restarts_are_quicker_than_the_start_and_leave_nothing_behind(watch):
    watched = watch(init_script=KEEP_WORKER).goto().wait_current()
    page = watched.page
    first_s = page.evaluate("performance.now()") / 1000
    before, took_s = heap_mb(page), []
    for number in range(TIMES):
        page.evaluate("lastWorker.onerror({message: 'stopped by the test'})")
        page.locator("html[data-state=failed]").wait_for(state="attached")
        began = time.monotonic()
        page.get_by_role("button", name="Try again").click()
        page.locator("html:not([data-state=failed])").wait_for(state="attached")
        watched.wait_current()
        took_s.append(time.monotonic() - began)
        assert page.evaluate("started") == number + 2
    assert sorted(took_s)[TIMES // 2] < max(first_s, 1.0)
    assert heap_mb(page) - before < 5


def test_the_text_of_the_parts_is_let_go(start):
    page = start().page
    assert page.locator("script[id^=embedded-]").count() == 1  # the index
    assert page.evaluate("document.documentElement.outerHTML.length") < 1_500_000
