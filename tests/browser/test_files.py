"""Save, open again, drop; and files that mean harm or are broken."""

from __future__ import annotations

import json

import pytest
from playwright.sync_api import expect

pytestmark = pytest.mark.native

BLOCK = '<script type="application/json" id="quenchwright-sheet">'


def open_file(page, path):
    page.page.set_input_files("#file", path)


def refused(page):
    message = page.page.locator("#message.bad")
    expect(message).to_be_visible()
    expect(message).to_contain_text("unchanged")
    return message.inner_text()


@pytest.mark.parametrize("name", ["chisel", "spring", "punch"])
def test_saved_sheet_opens_to_the_same_plan(watch, jobs, saved, job_in, name):
    page = watch().goto()
    page.plan_by_typing(jobs[name])
    page.wait_current()
    sheet = page.sheet_html()
    first, filename = saved(page, "first.html")
    assert filename.endswith(".html")
    assert first.stat().st_size <= 150_000
    expect(page.page.locator("#message")).to_contain_text("new copy in your downloads")

    page.page.get_by_role("button", name="New job").click()
    open_file(page, first)
    expect(page.page.locator("#message")).to_contain_text("Opened first.html")
    page.wait_current()
    assert page.sheet_html() == sheet

    # Planned again from the form that was filled from the file, it is still the same job.
    page.card("part")
    page.type_at("title", page.field("title").input_value())
    page.wait_current()
    assert page.sheet_html() == sheet
    second, _ = saved(page, "second.html")
    assert job_in(second) == job_in(first)


def test_inches_survive_saving(start, saved, job_in):
    page = start()
    page.card("part")
    page.page.get_by_label("inches", exact=True).check()
    page.type_at("part.dimensions_mm.diameter", "1 3/16")
    page.type_at("part.dimensions_mm.length", "7.1")
    page.wait_current()
    first, _ = saved(page, "first.html")
    open_file(page, first)
    expect(page.page.locator("#message")).to_contain_text("Opened")
    page.card("part")
    expect(page.field("part.dimensions_mm.diameter")).to_have_value("1 3/16")
    expect(page.field("part.dimensions_mm.length")).to_have_value("7.1")
    page.wait_current()
    second, _ = saved(page, "second.html")
    assert job_in(second) == job_in(first)


def test_opening_can_be_undone(start, saved):
    page = start()
    first, _ = saved(page)
    page.card("part")
    page.type_at("title", "Something else")
    page.wait_current()
    open_file(page, first)
    expect(page.page.locator("#paper h1")).to_contain_text("Cold chisel")
    page.page.get_by_role("button", name="Undo").click()
    expect(page.page.locator("#paper h1")).to_contain_text("Something else")


def test_job_json_opens_too(start, saved, job_in, tmp_path):
    page = start()
    first, _ = saved(page)
    job = job_in(first)
    job["title"] = "From a plain job file"
    plain = tmp_path / "job.json"
    plain.write_text(json.dumps(job))
    open_file(page, plain)
    expect(page.page.locator("#paper h1")).to_contain_text("From a plain job file")


HOSTILE_TITLE = "<img src=x onerror=\"document.documentElement.dataset.ran='yes'\"><script>document.documentElement.dataset.ran='yes'</script>"


def test_markup_in_a_job_stays_text(start, saved, job_in, tmp_path):
    page = start()
    first, _ = saved(page)
    job = job_in(first)
    job["title"] = HOSTILE_TITLE[:190]
    block = json.dumps({"schema": "quenchwright.sheet/1", "version": "0.1.0", "data_edition": "2026-12", "job": job}).replace("<", "\\u003c")
    hostile = tmp_path / "hostile.html"
    hostile.write_text(f"<!doctype html><script>document.documentElement.dataset.ran='yes'</script><h1 onclick='1'>x</h1>{BLOCK}{block}</script>")
    open_file(page, hostile)
    expect(page.page.locator("#message")).to_contain_text("Opened hostile.html")
    assert page.page.locator("html").get_attribute("data-ran") is None
    assert page.page.locator("#paper img, #paper script").count() == 0
    assert "<img src=x" in page.sheet_text()


def _with_block(text: str) -> str:
    return f"<!doctype html><p>sheet</p>{BLOCK}{text}</script>"


BROKEN = {
    "empty page": "<!doctype html><p>Nothing here",
    "plain text": "quench it well",
    "cut short": _with_block('{"schema": "quenchwright.sheet/1", "job": {"steel":'),
    "another schema": _with_block('{"schema": "somebody.else/7", "job": {}}'),
    "job is a list": _with_block('{"schema": "quenchwright.sheet/1", "job": [1, 2, 3]}'),
    "wild values": _with_block('{"schema": "quenchwright.sheet/1", "job": {"steel": {"grade": {"__proto__": 1}}, "part": 7, "aim": [], "shop": "none"}}'),
    "not a number": _with_block('{"schema": "quenchwright.sheet/1", "job": {"quantity": NaN}}'),
    "deeply nested": _with_block("[" * 20_000 + "]" * 20_000),
    "binary": "\x00\x01\x02\ufffd" * 500,
}


def test_broken_files_are_refused_in_words(start, tmp_path):
    page = start()
    before = page.sheet_html()
    for number, (kind, text) in enumerate(BROKEN.items()):
        broken = tmp_path / f"broken{number}.html"
        broken.write_text(text)
        open_file(page, broken)
        expect(page.page.locator("#message.bad")).to_contain_text(broken.name)
        said = refused(page)
        assert "Traceback" not in said, kind
        assert "stumbled" not in said, f"{kind} ran into a bug: {said}"
        assert page.sheet_html() == before, kind
    expect(page.field("steel.grade")).to_have_value("W1")
    # The planner still answers afterwards.
    page.card("part")
    page.type_at("title", "Still planning")
    expect(page.page.locator("#paper h1")).to_contain_text("Still planning")


def test_too_large_and_empty_files_are_refused(start, tmp_path):
    page = start()
    large = tmp_path / "large.html"
    large.write_bytes(b"x" * (5 * 1024 * 1024 + 1))
    open_file(page, large)
    assert "5 MB" in refused(page)
    empty = tmp_path / "empty.html"
    empty.write_bytes(b"")
    open_file(page, empty)
    expect(page.page.locator("#message")).to_contain_text("is empty")


def test_drop_anywhere(start, saved):
    page = start()
    first, _ = saved(page)
    page.card("part")
    page.type_at("title", "Another")
    page.wait_current()
    page.page.evaluate("""text => {
      const carrier = new DataTransfer();
      carrier.items.add(new File([text], 'dropped.html', {type: 'text/html'}));
      for (const kind of ['dragenter', 'dragover', 'drop']) {
        document.querySelector('footer').dispatchEvent(new DragEvent(kind, {dataTransfer: carrier, bubbles: true, cancelable: true}));
      }
    }""", first.read_text())
    expect(page.page.locator("#paper h1")).to_contain_text("Cold chisel")
    expect(page.page.locator("#drop")).to_be_hidden()
