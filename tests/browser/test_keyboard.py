"""A job planned, checked and undone with the keyboard alone."""

from __future__ import annotations

import pytest
from playwright.sync_api import expect

pytestmark = pytest.mark.native


def tab_to(page, selector: str, most: int = 120):
    """Press Tab until the wanted element has the focus."""
    wanted = page.locator(selector)
    for _ in range(most):
        if wanted.evaluate("element => element === document.activeElement"):
            return
        page.keyboard.press("Tab")
    raise AssertionError(f"{selector} cannot be reached with Tab")


def test_change_a_job_with_the_keyboard(start):
    page = start()
    keys = page.page.keyboard
    tab_to(page.page, "#card-steel")
    keys.press("Enter")
    tab_to(page.page, "#f-steel-grade")
    keys.press("Control+a")
    keys.type("O")
    keys.press("ArrowDown")
    keys.press("Enter")
    expect(page.field("steel.grade")).to_have_value("O1")
    expect(page.field("steel.grade")).to_have_attribute("aria-expanded", "false")
    # "Next" folds this card and goes on to the next one.
    keys.press("Tab")
    keys.press("Enter")
    expect(page.page.locator("#card-steel")).to_have_attribute("aria-expanded", "false")
    expect(page.page.locator("#card-part")).to_be_focused()
    tab_to(page.page, "#f-part-dimensions-mm-diameter")
    keys.press("Control+a")
    keys.type("16")
    tab_to(page.page, "#panel-part .next button")
    keys.press("Enter")
    expect(page.page.locator("#card-part .card-line")).to_contain_text("16 mm round")
    expect(page.page.locator("#card-aim")).to_be_focused()
    page.wait_current()
    assert "O1" in page.sheet_text()
    assert "16 mm" in page.sheet_text()


def test_skip_link_leads_to_the_sheet(start):
    page = start()
    page.page.keyboard.press("Tab")
    skip = page.page.locator(".skip")
    expect(skip).to_be_focused()
    page.page.keyboard.press("Enter")
    expect(page.page.locator("#result")).to_be_focused()


def test_every_stop_shows_where_the_focus_is(start):
    """Each element that Tab reaches is visible and has an outline."""
    page = start()
    for card in ("steel", "part", "aim", "shop"):
        page.card(card)
    page.page.locator(".skip").focus()
    bare = """() => {
      const element = document.activeElement;
      if (!element || element === document.body) return null;
      const style = getComputedStyle(element);
      const box = element.getBoundingClientRect();
      const seen = box.width > 1 && box.height > 1;
      const outlined = style.outlineStyle !== "none" && parseFloat(style.outlineWidth) >= 2;
      return seen && outlined ? null : element.outerHTML.slice(0, 120);
    }"""
    for _ in range(90):
        page.page.keyboard.press("Tab")
        assert page.page.evaluate(bare) is None


def test_suggestions_close_with_escape_and_keep_what_was_typed(start):
    page = start()
    page.card("steel")
    page.type_at("steel.grade", "51")
    field = page.field("steel.grade")
    expect(field).to_have_attribute("aria-expanded", "true")
    page.page.keyboard.press("ArrowDown")
    active = field.get_attribute("aria-activedescendant")
    expect(page.page.locator(f"#{active}")).to_have_attribute("aria-selected", "true")
    page.page.keyboard.press("Escape")
    expect(field).to_have_attribute("aria-expanded", "false")
    expect(field).to_have_value("51")


def test_focus_and_place_stay_when_the_sheet_is_renewed(start):
    page = start()
    page.page.evaluate("scrollTo(0, 300)")
    link = page.page.locator("#paper a.why:visible").nth(2)
    href = link.get_attribute("href")
    link.focus()
    place = page.page.evaluate("scrollY")
    before = page.heading()
    page.page.evaluate("""() => {
      document.getElementById('card-part').click();
      const field = document.getElementById('f-title');
      field.value = 'Gad';
      field.dispatchEvent(new Event('input', {bubbles: true}));
    }""")
    expect(page.page.locator("#paper h1")).not_to_have_text(before)
    assert page.page.evaluate("document.activeElement.getAttribute('href')") == href
    assert abs(page.page.evaluate("scrollY") - place) < 40
