"""The built page in a real Chromium, from file://, with the network switched off.

Every page is watched from its first byte: a console error, a page error or a request for anything
but file, blob or data fails the test that opened it.
"""

from __future__ import annotations

import json
import os
import re
import shutil
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
# Another build can be tested by naming it.
PAGE = Path(os.environ.get("QUENCHWRIGHT_PAGE", ROOT / "dist" / "quenchwright.html")).resolve()
SCREENS = ROOT / "dist" / "screens"
AXE = ROOT / "web" / "node_modules" / "axe-core" / "axe.min.js"
# Python has to start on a slow machine too.
AWAKE_ms = 60_000
DESKTOP = {"width": 1360, "height": 900}
PHONE = {"width": 360, "height": 740}


def chromium() -> str | None:
    """A Chromium of the system, or None for the one Playwright brought."""
    return next((path for name in ("chromium", "chromium-browser") if (path := shutil.which(name))), None)


@pytest.fixture(scope="session")
def browser():
    from playwright.sync_api import expect, sync_playwright

    expect.set_options(timeout=20_000)  # a busy machine is not a fault
    if not PAGE.exists():
        pytest.fail(f"{PAGE} is not there; run build.py first")
    with sync_playwright() as playwright:
        started = playwright.chromium.launch(
            executable_path=chromium(), args=["--no-sandbox", "--no-first-run", "--disable-background-networking"])
        yield started
        started.close()


class Watched:
    """One open page, its troubles, and what a smith does with it."""

    def __init__(self, context, allow=()):
        self.page = context.new_page()
        self.troubles: list[str] = []
        self.allow = allow
        self.page.on("console", self._console)
        self.page.on("pageerror", lambda error: self.troubles.append(f"page error: {error}"))
        context.on("request", self._request)

    def _console(self, message):
        if message.type in ("error", "warning"):
            self.troubles.append(f"console {message.type}: {message.text}")

    def _request(self, request):
        if not request.url.startswith(("file:", "blob:", "data:")):
            self.troubles.append(f"request: {request.url}")

    def check(self):
        left = [trouble for trouble in self.troubles if not any(re.search(known, trouble) for known in self.allow)]
        assert not left, left

    # --- the state of the page --------------------------------------------------------------------

    def goto(self, path: Path = PAGE):
        self.page.goto(path.as_uri())
        return self

    def wait_current(self):
        """Wait until Python is up and the sheet matches the form."""
        from playwright.sync_api import expect

        html = self.page.locator("html")
        expect(html).to_have_attribute("data-state", "ready", timeout=AWAKE_ms)
        expect(html).to_have_attribute("data-sheet", "current", timeout=AWAKE_ms)
        return self

    def sheet_text(self) -> str:
        """The sheet's words, with every space an ordinary one."""
        return self.page.locator("#paper").inner_text().replace("\u00a0", " ")

    def sheet_html(self) -> str:
        return self.page.locator("#paper").inner_html()

    def heading(self) -> str:
        return self.page.locator("#paper h1").inner_text()

    # --- filling in the form ----------------------------------------------------------------------

    def card(self, name: str):
        """Open a card if it is folded, and answer its panel."""
        button = self.page.locator(f"#card-{name}")
        if button.get_attribute("aria-expanded") != "true":
            button.click()
        return self.page.locator(f"#panel-{name}")

    def type_at(self, path: str, text: str):
        """Type into the field of a path of the job, key by key."""
        field = self.field(path)
        field.press("Control+a")
        field.press("Delete")
        field.press_sequentially(text)

    def choose(self, path: str, value: str):
        self.field(path).select_option(value)

    def field(self, path: str):
        return self.page.locator("#f-" + re.sub(r"[^A-Za-z0-9]+", "-", path))

    def plan_by_typing(self, job: dict):
        """A new job, typed in from the first card to the last."""
        self.page.get_by_role("button", name="New job").click()
        self.card("steel")
        self.type_at("steel.grade", job["grade"])
        self.page.keyboard.press("Escape")
        self.card("part")
        self.type_at("title", job["title"])
        if "quantity" in job:
            self.type_at("quantity", job["quantity"])
        self.choose("part.shape", job["shape"])
        for name, text in job["sizes"].items():
            self.type_at(f"part.dimensions_mm.{name}", text)
        self.choose("part.zone", job.get("zone", "all"))
        if "reach" in job:
            self.type_at("part.zone_mm", job["reach"])
        self.choose("part.condition", job["condition"])
        self.card("aim")
        self.choose("aim.use", job.get("use", ""))
        for index, text in enumerate(job.get("hardness", ())):
            self.type_at(f"aim.hardness_HRC.{index}", text)
        self.card("shop")
        for name, value in job["heat"].items():
            self.set("shop.heat", name, value)
        for index, bath in enumerate(job["baths"]):
            if index:
                self.page.get_by_role("button", name="Add a bath").click()
            for name, value in bath.items():
                self.set(f"shop.baths.{index}", name, value)
        for name, value in job["temper"].items():
            self.set("shop.temper", name, value)

    def set(self, group: str, name: str, value):
        path = f"{group}.{name}"
        if value is True or value is False:
            self.field(path).set_checked(value)
        elif name in ("kind", "medium", "agitation", "atmosphere"):
            self.choose(path, value)
        else:
            self.type_at(path, value)

    # --- looking at it ----------------------------------------------------------------------------

    def shoot(self, name: str, *, full_page: bool = False):
        SCREENS.mkdir(parents=True, exist_ok=True)
        self.page.screenshot(path=SCREENS / f"{name}.png", full_page=full_page)

    def shoot_sheet(self, name: str):
        """The page in a window high enough for the whole first page of the sheet."""
        self.page.set_viewport_size({"width": DESKTOP["width"], "height": 1400})
        self.page.evaluate("scrollTo(0, 0)")
        self.shoot(name)
        self.page.set_viewport_size(DESKTOP)

    def axe(self) -> list[str]:
        """What axe finds: every rule, every impact."""
        self.page.evaluate(AXE.read_text())
        found = self.page.evaluate("axe.run(document, {resultTypes: ['violations']})")
        return [f"{rule['id']} ({rule['impact']}): {rule['help']} at {[node['target'] for node in rule['nodes']][:5]}"
                for rule in found["violations"]]


@pytest.fixture
def page_file() -> Path:
    return PAGE


@pytest.fixture
def watch(browser):
    """Opens watched pages: watch(viewport=…, allow=[…]). Not yet at any address."""
    opened: list[tuple] = []

    def make(*, allow=(), init_script=None, viewport=None, **options):
        context = browser.new_context(offline=True, viewport=viewport or DESKTOP, accept_downloads=True, **options)
        if init_script:
            context.add_init_script(init_script)
        watched = Watched(context, allow)
        opened.append((context, watched))
        return watched

    yield make
    for context, watched in opened:
        context.close()
        watched.check()


@pytest.fixture
def start(watch):
    """A page with Python up and the example planned."""

    def make(**options):
        return watch(**options).goto().wait_current()

    return make


@pytest.fixture
def saved(tmp_path):
    """Saves the sheet of a page by its button; answers the file."""

    def make(watched, name="saved.html"):
        with watched.page.expect_download() as download:
            watched.page.get_by_role("button", name="Save sheet").click()
        path = tmp_path / name
        download.value.save_as(path)
        return path, download.value.suggested_filename

    return make


@pytest.fixture
def job_in():
    """The job that a saved sheet carries."""

    def read(path: Path) -> dict:
        found = re.search(r'<script type="application/json" id="quenchwright-sheet">(.*?)</script>', path.read_text(), re.S)
        return json.loads(found[1])["job"]

    return read


JOBS = {
    "chisel": {
        "grade": "W1", "title": "Cold chisel", "quantity": "4", "shape": "round", "sizes": {"diameter": "20", "length": "180"},
        "zone": "tip", "reach": "40", "condition": "forged", "use": "cold-chisel",
        "heat": {"kind": "coal-forge", "atmosphere": "reducing", "accuracy_C": "40", "pyrometer": False},
        "baths": [{"medium": "brine", "volume_L": "12", "temperature_C": "20", "agitation": "moderate"}],
        "temper": {"kind": "kitchen-oven", "max_C": "260", "accuracy_C": "10"},
    },
    "spring": {
        "grade": "5160", "title": "Leaf spring", "shape": "flat", "sizes": {"thickness": "6", "width": "60", "length": "600"},
        "condition": "annealed", "use": "flat-spring",
        "heat": {"kind": "kiln", "atmosphere": "air", "max_C": "1100", "accuracy_C": "10"},
        "baths": [{"medium": "canola", "volume_L": "20", "temperature_C": "55", "agitation": "moderate"}],
        "temper": {"kind": "kitchen-oven", "max_C": "500 F", "accuracy_C": "10"},
    },
    "punch": {
        "grade": "O1", "title": "Drift punch", "shape": "round", "sizes": {"diameter": "1 in", "length": "5 in"},
        "condition": "annealed", "use": "punch", "hardness": ("57", "60"),
        "heat": {"kind": "kiln", "atmosphere": "coated", "max_C": "1100", "accuracy_C": "5"},
        "baths": [{"medium": "medium-oil", "volume_L": "10", "temperature_C": "60", "agitation": "moderate"},
                  {"medium": "still-air"}],
        "temper": {"kind": "kiln", "max_C": "700", "accuracy_C": "5"},
    },
}


@pytest.fixture
def jobs():
    return JOBS
