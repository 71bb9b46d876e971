"""What is typed survives a reload, and a browser that keeps nothing is said plainly."""

from __future__ import annotations

import pytest
from playwright.sync_api import expect

pytestmark = pytest.mark.native


def test_reload_keeps_the_draft_as_typed(start):
    page = start()
    page.card("part")
    page.type_at("title", "Half-done hatchet")
    page.type_at("part.dimensions_mm.diameter", "1 1/4 in")
    page.page.reload()
    page.card("part")
    expect(page.field("title")).to_have_value("Half-done hatchet")
    expect(page.field("part.dimensions_mm.diameter")).to_have_value("1 1/4 in")
    page.wait_current()
    assert "Half-done hatchet" in page.heading()


def test_typing_during_the_start_is_kept_and_planned(watch):
    page = watch().goto()
    page.card("part")
    page.type_at("title", "Typed too early")
    page.wait_current()
    assert "Typed too early" in page.heading()
    expect(page.field("title")).to_have_value("Typed too early")


def test_faulty_draft_survives_too(start):
    page = start()
    page.card("part")
    page.type_at("part.dimensions_mm.diameter", "about so")
    page.page.reload()
    page.card("part")
    expect(page.field("part.dimensions_mm.diameter")).to_have_value("about so")


@pytest.mark.parametrize("draft", ["{", "null", "[]", '{"form": {"baths": 7, "features": {}, "heat": null, "title": {"a": 1}}}', '{"form": {}}'])
def test_damaged_draft_does_not_break_the_page(watch, draft):
    page = watch(init_script=f"localStorage.setItem('quenchwright.draft', {draft!r});").goto()
    expect(page.page.locator("#card-steel")).to_be_visible()
    page.card("shop")
    expect(page.page.get_by_role("button", name="Add a bath")).to_be_visible()


def test_blocked_storage_is_said(watch):
    blocked = "Object.defineProperty(window, 'localStorage', { get() { throw new DOMException('blocked', 'SecurityError'); } });"
    page = watch(init_script=blocked).goto().wait_current()
    expect(page.page.locator("#message")).to_contain_text("does not let the page keep a draft")
    page.card("part")
    page.type_at("title", "Works all the same")
    expect(page.page.locator("#paper h1")).to_contain_text("Works all the same")
