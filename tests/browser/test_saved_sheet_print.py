"""The sheet on paper, printed by a real Chromium: as many pages as it promises, and one for the usual jobs."""
import io
import re

import pytest
from pypdf import PdfReader

from pycore.plan import plan
from pycore.sheet import save_sheet

pytestmark = pytest.mark.native

CHISEL = {
    "schema": "quenchwright.job/1", "title": "Cold chisel", "quantity": 4, "steel": {"grade": "W1"},
    "part": {"shape": "round", "dimensions_mm": {"diameter": 20, "length": 180}, "zone": "tip", "zone_mm": 40, "condition": "forged"},
    "aim": {"use": "cold-chisel"},
    "shop": {"heat": {"kind": "coal-forge", "pyrometer": False},
             "baths": [{"medium": "brine", "volume_L": 12, "temperature_C": 20, "agitation": "moderate"}],
             "temper": {"kind": "kitchen-oven", "max_C": 260}},
}
PIN = {
    **CHISEL, "title": "Drift pin", "quantity": 1, "steel": {"grade": "4140"}, "aim": {"hardness_HRC": [44, 48]},
    "part": {"shape": "round", "dimensions_mm": {"diameter": 25, "length": 200}, "zone": "all", "condition": "annealed"},
    "shop": {"heat": {"kind": "kiln"}, "baths": [{"medium": "fast-oil", "volume_L": 20}], "temper": {"kind": "kiln"}},
}
SPRING = {
    **CHISEL, "title": "Leaf spring", "quantity": 1, "steel": {"grade": "5160"}, "aim": {"use": "flat-spring"},
    "part": {"shape": "flat", "dimensions_mm": {"thickness": 8, "width": 60, "length": 900}, "zone": "all", "condition": "cold-drawn"},
    "shop": {"heat": {"kind": "gas-forge"}, "baths": [{"medium": "canola", "volume_L": 15}], "temper": {"kind": "kitchen-oven", "max_C": 260}},
}
DIE = {
    **CHISEL, "title": "Blanking die, upper plate", "quantity": 2, "steel": {"grade": "A2"}, "aim": {"hardness_HRC": [58, 60]},
    "part": {"shape": "flat", "dimensions_mm": {"thickness": 50, "width": 120, "length": 160}, "zone": "all", "condition": "annealed",
             "features": ["hole", "sharp-corner"]},
    "shop": {"heat": {"kind": "kiln", "atmosphere": "foil"}, "baths": [{"medium": "fan-air"}], "temper": {"kind": "kiln"}, "cold": "dry-ice"},
}
JOBS = {"chisel": CHISEL, "pin": PIN, "spring": SPRING, "die": DIE}
SIZES_PT = {"A4": (595, 842), "Letter": (612, 792)}


def printed(browser, html, paper, **options):
    page = browser.new_page(java_script_enabled=False)
    page.set_content(html)
    pdf = page.pdf(format=paper, prefer_css_page_size=True, **options)
    page.close()
    return PdfReader(io.BytesIO(pdf))


@pytest.mark.parametrize("paper", SIZES_PT)
@pytest.mark.parametrize("name", JOBS)
def test_the_paper_has_the_pages_the_sheet_reckoned_with(browser, name, paper):
    html = save_sheet(plan(JOBS[name]).to_json("2026-12-01"))
    pdf = printed(browser, html, paper)
    expected = 2 if re.search(rf'class="sheet [^"]*\b{paper.lower()}-two\b', html) else 1
    assert len(pdf.pages) == expected
    assert (float(pdf.pages[0].mediabox.width), float(pdf.pages[0].mediabox.height)) == pytest.approx(SIZES_PT[paper], abs=2)
    text = " ".join(" ".join(page.extract_text() for page in pdf.pages).split())
    assert "try one first" in text
    assert "where the numbers come from" not in text, "the notes stay on screen"


@pytest.mark.parametrize("paper", SIZES_PT)
@pytest.mark.parametrize("name", ["chisel", "pin"])
def test_a_usual_job_takes_one_page(browser, name, paper):
    html = save_sheet(plan(JOBS[name]).to_json("2026-12-01"))
    assert len(printed(browser, html, paper).pages) == 1


def test_nothing_is_lost_without_backgrounds(browser):
    html = save_sheet(plan(CHISEL).to_json("2026-12-01"))
    with_fill, without = (printed(browser, html, "A4", print_background=fill).pages[0].extract_text() for fill in (True, False))
    assert with_fill == without


def test_a_saved_sheet_reads_without_a_script_and_asks_for_nothing(browser, tmp_path):
    file = tmp_path / "sheet.html"
    file.write_text(save_sheet(plan(CHISEL).to_json("2026-12-01")), encoding="utf-8")
    page = browser.new_page(java_script_enabled=False, viewport={"width": 900, "height": 1200})
    asked = []
    page.on("request", lambda request: asked.append(request.url))
    page.goto(file.as_uri())
    assert page.locator("h1").inner_text() == "Cold chisel, 4 pieces"
    assert page.locator(".heatline").is_visible() and page.locator(".notes").is_visible()
    assert [url for url in asked if not url.startswith(("file:", "data:"))] == []
    page.set_viewport_size({"width": 360, "height": 740})
    assert page.locator(".stations").is_visible() and not page.locator(".heatline").is_visible()
    page.close()
