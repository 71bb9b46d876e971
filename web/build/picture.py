"""picture.py SHEET.html OUT.png CHROMIUM: the first printed page of a sheet, as a picture. Run in .venv."""

import sys
from pathlib import Path

from browser import FLAGS
from playwright.sync_api import sync_playwright

A4 = {"width": 794, "height": 1123}  # 210 × 297 mm in CSS pixels


def main(sheet: Path, target: Path, chromium: str) -> None:
    """Show the sheet as print media on A4, twice as fine as CSS pixels, and take what one page shows."""
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=chromium, args=FLAGS)
        page = browser.new_page(viewport=A4, device_scale_factor=2)
        page.emulate_media(media="print")
        page.goto(sheet.resolve().as_uri())
        page.evaluate("document.fonts.ready")
        page.evaluate("document.body.style.paddingTop = '10mm'")  # the margin that the paper would have
        page.screenshot(path=target, clip={"x": 0, "y": 0, **A4})
        browser.close()


main(Path(sys.argv[1]), Path(sys.argv[2]), sys.argv[3])
