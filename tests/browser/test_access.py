"""axe in every state, and the shape of the page where space is short."""

from __future__ import annotations

import pytest
from playwright.sync_api import expect

pytestmark = pytest.mark.native

PHONE = {"width": 360, "height": 740}
CARDS = ("steel", "part", "aim", "shop")


def open_all(page):
    for card in CARDS:
        page.card(card)


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("viewport", [None, PHONE], ids=["desk", "phone"])
def test_result_is_clean(start, scheme, viewport):
    page = start(color_scheme=scheme, viewport=viewport)
    assert page.axe() == []
    name = f"{'phone' if viewport else 'desktop'}-{scheme}"
    page.shoot(name, full_page=bool(viewport))
    open_all(page)
    assert page.axe() == []
    page.page.get_by_label("By a certificate").check()
    assert page.axe() == []


def test_start_is_clean(watch):
    page = watch(init_script="window.Worker = function () { this.postMessage = () => {}; this.terminate = () => {}; };").goto()
    assert page.axe() == []


@pytest.mark.parametrize("scheme", ["light", "dark"])
def test_faults_are_clean(start, scheme):
    page = start(color_scheme=scheme)
    page.card("part")
    page.type_at("part.dimensions_mm.diameter", "-3")
    page.type_at("part.dimensions_mm.length", "long")
    page.card("shop")
    page.type_at("shop.temper.max_C", "warm")
    expect(page.page.locator("[aria-invalid=true]")).to_have_count(3)
    assert page.axe() == []
    page.shoot(f"faults-{scheme}")


def test_failure_suggestions_note_and_about_are_clean(start, watch):
    failed = watch(init_script="delete window.WebAssembly;").goto()
    expect(failed.page.locator("#trouble")).to_be_visible()
    assert failed.axe() == []
    page = start()
    page.page.locator("#paper a.why:visible").first.click()
    expect(page.page.locator("#note")).to_be_visible()
    assert page.axe() == []
    page.page.locator("#note-close").click()
    page.card("steel")
    page.type_at("steel.grade", "1")
    expect(page.page.locator("[role=option]").first).to_be_visible()
    assert page.axe() == []
    page.shoot("suggestions")
    page.page.keyboard.press("Escape")
    page.page.get_by_role("button", name="About").click()
    assert page.axe() == []
    page.shoot("about")


WIDTHS = (320, 360, 640, 700, 900, 1024, 1200, 1280, 1600)
BEYOND = """() => {
  const paper = document.getElementById('paper').getBoundingClientRect();
  return [...document.querySelectorAll('#paper *')].filter(e => {
    const box = e.getBoundingClientRect();
    return box.width > 1 && (box.right > paper.right + 1 || box.left < paper.left - 1);
  }).map(e => e.outerHTML.slice(0, 80)).slice(0, 5);
}"""


def test_nothing_runs_off_the_side(start):
    page = start()
    open_all(page)
    page.page.get_by_role("button", name="Add a bath").click()
    for width in WIDTHS:
        page.page.set_viewport_size({"width": width, "height": 800})
        assert page.page.evaluate("document.documentElement.scrollWidth") <= width, width
        assert page.page.evaluate(BEYOND) == [], width


def test_touch_targets(start):
    page = start(viewport=PHONE, has_touch=True, is_mobile=True)
    open_all(page)
    small = page.page.evaluate("""() => [...document.querySelectorAll('.top button, .job button, .job select, .job input[type=text], .choice, summary, .page-foot button')]
      .filter(e => e.offsetParent && e.getBoundingClientRect().height < 44).map(e => e.outerHTML.slice(0, 80))""")
    assert small == []


def test_forced_colours_and_wide_spacing(start):
    page = start(forced_colors="active")
    open_all(page)
    assert page.axe() == []
    page.shoot("forced-colours")
    roomy = start()
    open_all(roomy)
    roomy.page.add_style_tag(content="* { line-height: 1.5 !important; letter-spacing: 0.12em !important; word-spacing: 0.16em !important; }")
    cut = roomy.page.evaluate("""() => [...document.querySelectorAll('.job label, .job legend, .job .hint, .job button, .top button')]
      .filter(e => e.offsetParent && e.scrollWidth > e.clientWidth + 1 && getComputedStyle(e).display !== 'inline').map(e => e.outerHTML.slice(0, 80))""")
    assert cut == []
