"""From the first byte to the first sheet, and what is shown when that fails."""

from __future__ import annotations

import re

import pytest
from playwright.sync_api import expect

pytestmark = pytest.mark.native


def test_form_and_example_stand_before_python(watch):
    """Without a worker there is no Python: the form works all the same and the example sheet is there."""
    page = watch(init_script="window.Worker = function () { this.postMessage = () => {}; this.terminate = () => {}; };").goto()
    expect(page.page.locator("html")).to_have_attribute("data-state", "waking")
    expect(page.page.locator("#strip-text")).to_contain_text("waking")
    assert "Cold chisel" in page.heading()
    page.card("part")
    page.type_at("title", "Early bird")
    expect(page.page.locator("#card-part")).to_contain_text("Part")
    expect(page.page.locator("html")).to_have_attribute("data-sheet", "stale")
    expect(page.page.locator("html")).to_have_attribute("data-state", "waking")
    page.shoot("waking")


def test_nothing_is_requested(watch, saved, page_file):
    page = watch()
    asked: list[str] = []
    page.page.context.on("request", lambda request: asked.append(request.url))
    page.goto().wait_current()
    page.card("part")
    page.type_at("title", "Quiet")
    page.wait_current()
    saved(page)
    page.page.get_by_role("button", name="About").click()
    away = [url for url in asked if not url.startswith(("blob:", "data:"))]
    assert away == [page_file.as_uri()]


def test_policy_forbids_the_network(start, page_file):
    page = start()
    policy = page.page.locator("meta[http-equiv='Content-Security-Policy']").get_attribute("content")
    assert "default-src 'none'" in policy
    assert "unsafe-eval'" not in policy.replace("wasm-unsafe-eval'", "")
    html = page_file.read_text()
    assert html.index("Content-Security-Policy") < html.index("<style")
    assert not re.search(r"<[^>]+\son\w+\s*=", html.split("<script", 1)[0])


def test_browser_without_webassembly_is_told(watch):
    page = watch(init_script="delete window.WebAssembly;").goto()
    expect(page.page.locator("html")).to_have_attribute("data-state", "failed")
    trouble = page.page.locator("#trouble")
    expect(trouble).to_contain_text("WebAssembly")
    expect(trouble).to_contain_text("what you typed is kept")
    expect(page.page.get_by_role("button", name="Try again")).to_be_visible()
    assert "Cold chisel" in page.heading()
    page.shoot("failed-start")
    # The form still takes what is typed, and trying again keeps it.
    page.card("part")
    page.type_at("title", "Kept over a failure")
    page.page.get_by_role("button", name="Try again").click()
    page.page.wait_for_load_state()
    page.card("part")
    expect(page.field("title")).to_have_value("Kept over a failure")


def test_damaged_file_is_told(watch, tmp_path, page_file):
    html = page_file.read_text()
    damaged = re.sub(r'(id="embedded-stdlib">)[^<]{2000}', r"\1" + "A" * 2000, html, count=1)
    assert damaged != html
    copy = tmp_path / "damaged.html"
    copy.write_text(damaged)
    page = watch(allow=[r".*"]).goto(copy)
    expect(page.page.locator("html")).to_have_attribute("data-state", "failed", timeout=60_000)
    expect(page.page.locator("#trouble")).to_contain_text("could not start")
    expect(page.page.get_by_role("button", name="Try again")).to_be_visible()


def test_file_cut_short_is_told(watch, tmp_path, page_file):
    html = page_file.read_text()
    copy = tmp_path / "short.html"
    copy.write_text(html[: html.index('id="embedded-stdlib"') + 5000])
    page = watch(allow=[r".*"]).goto(copy)
    expect(page.page.locator("html")).to_have_attribute("data-state", "failed", timeout=60_000)
    expect(page.page.get_by_role("button", name="Try again")).to_be_visible()


DYING_WORKER = """
  const Real = window.Worker;
  window.Worker = function (...rest) { const worker = new Real(...rest); window.lastWorker = worker; return worker; };
"""


def test_dead_worker_is_told_and_started_again(watch):
    page = watch(init_script=DYING_WORKER).goto().wait_current()
    page.page.evaluate("lastWorker.onerror({message: 'killed by the test'})")
    expect(page.page.locator("html")).to_have_attribute("data-state", "failed")
    expect(page.page.locator("#trouble")).to_contain_text("The planner stopped")
    page.page.get_by_role("button", name="Try again").click()
    page.wait_current()
    expect(page.page.locator("#trouble")).to_be_hidden()
    page.card("part")
    page.type_at("title", "Second life")
    expect(page.page.locator("#paper h1")).to_contain_text("Second life")


def test_about_tells_what_is_inside(start):
    page = start()
    page.page.get_by_role("button", name="About").click()
    about = page.page.locator("#about")
    expect(about).to_contain_text("0.1.0")
    expect(about).to_contain_text("2026-12")
    expect(about).to_contain_text("Licences")
    page.page.keyboard.press("Escape")
    expect(about).to_be_hidden()


def test_readable_without_scripts(watch, page_file):
    page = watch(java_script_enabled=False).goto()
    assert "Cold chisel" in page.heading()
    assert "waking" not in page.page.locator("#strip").inner_text()
    assert re.search(r"<noscript>.*needs JavaScript.*</noscript>", page_file.read_text())
