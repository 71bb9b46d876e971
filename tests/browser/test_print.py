"""On paper: the sheet alone, one page, A4 and Letter, and nothing lost without backgrounds."""

from __future__ import annotations

import io

import pytest
from pypdf import PdfReader

pytestmark = pytest.mark.native

A4_pt = (595, 842)
LETTER_pt = (612, 792)


def printed(page, **options) -> PdfReader:
    return PdfReader(io.BytesIO(page.page.pdf(**options)))


def flat(reader: PdfReader) -> str:
    return " ".join(" ".join(page.extract_text() for page in reader.pages).split())


@pytest.mark.parametrize("name", ["chisel", "spring", "punch"])
def test_one_page(watch, jobs, name):
    page = watch().goto()
    page.plan_by_typing(jobs[name])
    page.wait_current()
    heading = page.heading()
    aim = page.page.locator("#paper .aim").inner_text().split("HRC")[0].split()[-1]
    for paper, size_pt in (("A4", A4_pt), ("Letter", LETTER_pt)):
        for background in (True, False):
            case = f"{name} on {paper}, backgrounds {background}"
            reader = printed(page, format=paper, print_background=background)
            assert len(reader.pages) == 1, case
            box = reader.pages[0].mediabox
            assert (float(box.width), float(box.height)) == pytest.approx(size_pt, abs=2), case
            text = flat(reader)
            for wanted in (heading.split(",")[0], aim, "°C", "°F", "HRC", "stop and check"):
                assert wanted in text, f"{wanted} is missing: {case}"
            # Only the sheet: nothing of the form, the buttons or the notes.
            for screen_only in ("New job", "Save sheet", "The job", "up to date", "Out of date", "All notes"):
                assert screen_only not in text, f"{screen_only} is printed: {case}"


def test_css_page_size_is_respected(start):
    reader = printed(start(), prefer_css_page_size=True)
    assert len(reader.pages) == 1


def test_printing_an_outdated_sheet_says_so(start):
    page = start()
    page.card("part")
    page.type_at("part.dimensions_mm.diameter", "0")
    page.page.locator("html[data-sheet=stale]").wait_for()
    assert "Out of date" in flat(printed(page, format="A4"))


def test_print_button_calls_the_printer(watch):
    page = watch(init_script="window.print = () => { document.documentElement.dataset.printed = 'yes'; };").goto().wait_current()
    page.page.get_by_role("button", name="Print").click()
    page.page.locator("html[data-printed=yes]").wait_for()
