"""Three jobs planned by typing, and a sheet that follows the form."""

from __future__ import annotations

import re

import pytest
from playwright.sync_api import expect

pytestmark = pytest.mark.native


def test_cold_chisel_by_typing(watch, jobs):
    page = watch().goto()
    page.plan_by_typing(jobs["chisel"])
    page.wait_current()
    text = page.sheet_text()
    assert "Cold chisel" in page.heading()
    assert "56–59" in text
    assert "magnet" in text and "brine" in text.lower()
    assert "four" in page.heading().lower() or "4" in page.heading()
    page.shoot_sheet("job-cold-chisel")


def test_leaf_spring_by_typing_says_that_the_oven_cannot_reach(watch, jobs):
    page = watch().goto()
    page.plan_by_typing(jobs["spring"])
    page.wait_current()
    text = page.sheet_text()
    assert "Leaf spring" in page.heading()
    assert "42–48" in text and "canola" in text.lower()
    expect(page.page.locator("#strip-text")).to_contain_text("out of reach")
    # The reason names the oven's limit and what the aim would need.
    assert re.search(r"260\s*°C", text)
    assert re.search(r"\b4\d\d\s*°C", text), "the temperature that the aim needs is missing"
    page.shoot_sheet("job-leaf-spring")


def test_punch_in_inches_by_typing(watch, jobs):
    page = watch().goto()
    page.plan_by_typing(jobs["punch"])
    page.wait_current()
    text = page.sheet_text()
    assert "Drift punch" in page.heading()
    assert "57–60" in text and "oil" in text.lower()
    # 1 in typed into a job in millimetres is 25.4 mm.
    assert "25.4 mm" in text
    page.shoot_sheet("job-punch")


def test_certificate_instead_of_grade(start):
    page = start()
    page.card("steel")
    page.page.get_by_label("By a certificate").check()
    for element, amount in {"C": "0.45", "Mn": "0.75", "Si": "0.25", "Cr": "0.1"}.items():
        page.type_at(f"steel.chemistry.{element}", amount)
    page.wait_current()
    expect(page.page.locator("#card-steel")).to_contain_text("By certificate: C 0.45, Mn 0.75")
    assert "0.45" in page.sheet_text()
    # What was typed for the grade is not lost by looking at the other way.
    page.page.get_by_label("By its grade").check()
    expect(page.field("steel.grade")).to_have_value("W1")


def test_sheet_changes_as_one_types(start):
    page = start()
    before = page.sheet_text()
    page.card("part")
    page.type_at("title", "Stone point")
    expect(page.page.locator("#paper h1")).to_contain_text("Stone point")
    page.type_at("part.dimensions_mm.diameter", "12")
    expect(page.page.locator("#paper")).to_contain_text("12 mm")
    page.wait_current()
    assert page.sheet_text() != before


def test_last_good_sheet_stays_while_a_field_is_wrong(start):
    page = start()
    heading = page.heading()
    page.card("part")
    page.type_at("part.dimensions_mm.diameter", "-3")
    field = page.field("part.dimensions_mm.diameter")
    expect(field).to_have_attribute("aria-invalid", "true")
    described = field.get_attribute("aria-describedby")
    said = " ".join(page.page.locator(f"#{name}").inner_text() for name in described.split())
    assert "-3" in said and "mm" in said
    assert "part.dimensions" not in said
    expect(page.page.locator("#strip-text")).to_contain_text("One thing to mend")
    expect(page.page.locator("html")).to_have_attribute("data-sheet", "stale")
    assert page.heading() == heading
    # The summary leads to the field, and mending it brings the sheet back.
    page.page.locator("#card-part").click()
    page.page.locator("#strip-more button").first.click()
    expect(field).to_be_focused()
    page.type_at("part.dimensions_mm.diameter", "3/4 in")
    page.wait_current()
    expect(field).not_to_have_attribute("aria-invalid", "true")
    expect(field).to_have_value("3/4 in")


def test_printing_and_saving_wait_for_a_job_that_holds(start):
    page = start()
    page.card("part")
    page.type_at("part.dimensions_mm.diameter", "wide")
    expect(page.page.locator("#strip-text")).to_contain_text("to mend")
    page.page.get_by_role("button", name="Print").click()
    expect(page.page.locator("#message")).to_contain_text("does not match the job")


def test_units_keep_their_meaning(start):
    page = start()
    page.card("part")
    page.page.get_by_label("inches", exact=True).check()
    expect(page.field("part.dimensions_mm.diameter")).to_have_value("20 mm")
    page.wait_current()
    page.type_at("part.dimensions_mm.diameter", "3/4")
    page.wait_current()
    assert "3/4 in" in page.sheet_text()
    page.page.get_by_label("millimetres", exact=True).check()
    expect(page.field("part.dimensions_mm.diameter")).to_have_value("3/4 in")


def test_fahrenheit_and_gallons_are_understood(start):
    page = start()
    page.card("shop")
    page.type_at("shop.temper.max_C", "450 F")
    expect(page.page.locator("#f-shop-temper-max-C-reading")).to_have_text("= 232.2 °C")
    page.type_at("shop.baths.0.volume_L", "3 gal")
    expect(page.page.locator("#f-shop-baths-0-volume-L-reading")).to_have_text("= 11.36 L")
    page.wait_current()
    expect(page.page.locator("#card-shop")).to_have_attribute("aria-expanded", "true")
    page.page.locator("#card-shop").click()
    expect(page.page.locator("#card-shop .card-line")).to_contain_text("232")


def test_grade_by_another_name(start):
    page = start()
    page.card("steel")
    page.type_at("steel.grade", "1.2510")
    expect(page.page.locator("#f-steel-grade-reading")).to_contain_text("O1")
    page.wait_current()
    assert "O1" in page.sheet_text()


def test_baths_come_and_go_without_loss(start):
    page = start()
    page.card("shop")
    page.page.get_by_role("button", name="Add a bath").click()
    expect(page.field("shop.baths.1.medium")).to_be_focused()
    page.choose("shop.baths.1.medium", "canola")
    page.type_at("shop.baths.1.volume_L", "8")
    page.wait_current()
    page.page.get_by_role("button", name="Remove bath 2").click()
    expect(page.field("shop.baths.1.medium")).to_have_count(0)
    page.page.get_by_role("button", name="Undo").click()
    expect(page.field("shop.baths.1.volume_L")).to_have_value("8")


def test_new_job_empties_and_undo_brings_back(start):
    page = start()
    page.page.get_by_role("button", name="New job").click()
    expect(page.field("steel.grade")).to_be_focused()
    expect(page.field("steel.grade")).to_have_value("")
    expect(page.page.locator("#strip-text")).to_contain_text("Fill in what is missing")
    # Nothing is called wrong before anybody has been there.
    expect(page.page.locator("[aria-invalid]")).to_have_count(0)
    page.page.get_by_role("button", name="Undo").click()
    page.wait_current()
    expect(page.field("steel.grade")).to_have_value("W1")


def test_where_a_number_comes_from(start):
    page = start()
    link = page.page.locator("#paper a.why:visible").first
    link.focus()
    page.page.keyboard.press("Enter")
    note = page.page.locator("#note")
    expect(note).to_be_visible()
    expect(note).to_be_focused()
    assert len(note.inner_text()) > 40
    page.shoot("note")
    page.page.keyboard.press("Escape")
    expect(note).to_be_hidden()
    expect(link).to_be_focused()
