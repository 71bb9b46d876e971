"""The one door for the page: JSON text in, JSON text out, never an exception, whatever is sent."""

import json

import pytest

from pycore import api
from tests.core.sample_jobs import NAMES, sample


def ask(**request):
    return strict(api.run(json.dumps(request)))


def strict(text):
    """The answer, read as strictly as a browser reads JSON."""
    def refuse(name):
        raise AssertionError(f"{name} is no JSON")
    return json.loads(text, parse_constant=refuse)


@pytest.mark.parametrize("name", NAMES)
def test_plan(name):
    answer = ask(do="plan", job=sample(name), date="2026-12-01")
    assert answer["ok"] and answer["plan"]["date"] == "2026-12-01"
    assert answer["job"] == answer["plan"]["job"]
    assert answer["sheet"].lstrip().startswith("<article") and answer["sheet"].rstrip().endswith("</article>")


@pytest.mark.parametrize("name", NAMES)
def test_save_and_open_again(name):
    planned = ask(do="plan", job=sample(name))
    saved = ask(do="save", job=sample(name), date="2026-12-01")
    assert saved["filename"].endswith("-2026-12-01.html") and saved["html"].lower().startswith("<!doctype html>")
    assert len(saved["html"].encode()) <= 150_000
    opened = ask(do="open", text=saved["html"])
    assert opened["ok"] and opened["job"] == planned["job"]
    assert opened["plan"] == planned["plan"]


def test_open_a_bare_job():
    job = {"schema": "quenchwright.job/1", **sample("punch")}
    assert ask(do="open", text=json.dumps(job))["job"]["steel"] == {"grade": "O1"}


def test_faults_come_back_by_path():
    answer = ask(do="plan", job=sample(steel__grade="nope", quantity=-1))
    assert not answer["ok"] and {e["path"] for e in answer["errors"]} == {"steel.grade", "quantity"}
    for error in answer["errors"]:
        assert set(error) == {"path", "value", "expected", "message"}


HOSTILE_REQUESTS = [
    "", " ", "null", "5", "[]", "{}", "{", "\x00", '"plan"', '{"do":null}', '{"do":5}', '{"do":["plan"]}', '{"do":{"plan":1}}',
    '{"do":"fly"}', '{"do":"plan"}', '{"do":"plan","job":null}', '{"do":"plan","job":[]}', '{"do":"plan","job":"x"}',
    '{"do":"save","job":7}', '{"do":"open"}', '{"do":"open","text":null}', '{"do":"open","text":5}', '{"do":"open","text":""}',
    '{"do":"open","text":"<script>alert(1)</script>"}', '{"do":"plan","job":{"quantity":NaN}}', '{"do":"plan","job":{"quantity":1e999}}',
    '{"do":"plan","job":' + "[" * 3000 + "]" * 3000 + "}", '{"do":"plan","job":{"title":"\\ud800"}}', "\ud800",
]  # fmt: skip


@pytest.mark.parametrize("text", HOSTILE_REQUESTS, ids=range(len(HOSTILE_REQUESTS)))
def test_hostile_requests_get_an_answer(text):
    answer = strict(api.run(text))
    assert answer["ok"] is False and answer.get("errors"), answer.get("bug")


@pytest.mark.parametrize("text", [None, 5, b"{}", [], {"do": "catalogue"}], ids=str)
def test_what_is_no_text_gets_an_answer(text):
    strict(api.run(text))


MARKUP = "<img src=x onerror=alert(1)></script><script>alert(2)</script>'\"&]]>"


def test_markup_in_a_title_is_only_text():
    answer = ask(do="plan", job=sample(title=MARKUP))
    assert answer["ok"] and answer["job"]["title"] == MARKUP
    assert "<img" not in answer["sheet"] and "<script" not in answer["sheet"]
    saved = ask(do="save", job=sample(title=MARKUP))
    assert saved["html"].count("<script") == 1 and "<img" not in saved["html"]
    assert all(c.isalnum() or c in "-." for c in saved["filename"])
    assert ask(do="open", text=saved["html"])["job"]["title"] == MARKUP


@pytest.mark.parametrize("do", ["plan", "save"])
def test_half_a_surrogate_pair_does_not_leave_the_core(do):
    """Legal JSON, but no text: a browser or a file cannot take it. A fault or a cleaned title."""
    api.run(json.dumps({"do": do, "job": sample(title="\ud800 chisel")})).encode("utf-8")


HALF = "\ud800"


@pytest.mark.parametrize(
    "changes",
    [{"steel__grade": HALF}, {"part__features": [HALF]}, {"decided": {HALF: 1}}, {"steel": {"chemistry": {"C": 0.5, HALF: 1}}},
     {"part__dimensions_mm__diameter": HALF}, {"shop__baths": [{"medium": [HALF]}]}, {"schema": HALF}, {"units": HALF}],
    ids=lambda c: next(iter(c)),
)
def test_nor_does_it_leave_in_a_fault(changes):
    text = api.run(json.dumps({"do": "plan", "job": sample(**changes)}))
    text.encode("utf-8")
    assert strict(text)["errors"]


def test_a_number_too_long_to_read():
    """5000 digits: Python refuses to read them; that is the sender's fault, not a bug of ours."""
    answer = strict(api.run('{"do":"plan","job":{"quantity":' + "9" * 5000 + "}}"))
    assert not answer["ok"] and answer.get("errors"), answer.get("bug")


@pytest.mark.parametrize("field", ["steel__grade", "part__shape", "aim__use", "shop__heat__kind", "units", "schema"])
def test_markup_in_any_field_is_a_fault(field):
    answer = ask(do="plan", job=sample(**{field: MARKUP}))
    assert not answer["ok"] and answer["errors"]


@pytest.mark.parametrize("title", ["\u0000\u0007bell", "\u202eright to left", "😀 hammer", "日本の鏨", "a\nb\tc", "{{ 7*7 }}", "%s %d", "../../etc"])
def test_odd_titles(title):
    answer = ask(do="save", job=sample(title=title))
    assert answer["ok"] and "/" not in answer["filename"] and ".." not in answer["filename"]


@pytest.mark.parametrize("date", ["", "yesterday", "2026-13", 5, None, ["2026-12-01"], "<b>2026</b>", "٢٠٢٦-12-01"])
def test_a_date_that_is_none_is_left_out(date):
    assert ask(do="plan", job=sample(), date=date)["plan"]["date"] is None


def test_a_bug_of_ours_is_an_answer_too(monkeypatch):
    def broken(request):
        raise ZeroDivisionError("inside")

    monkeypatch.setitem(api.ACTIONS, "catalogue", broken)
    answer = ask(do="catalogue")
    assert not answer["ok"] and answer["bug"]["what"] == "ZeroDivisionError: inside"
    assert answer["bug"]["id"] and answer["bug"]["where"] and answer["bug"]["versions"]["quenchwright"]


def test_catalogue():
    catalogue = ask(do="catalogue")["catalogue"]
    for name in ("grades", "uses", "media", "shapes", "features", "zones", "conditions", "heats", "atmospheres", "tempers", "colds"):
        assert catalogue[name] and all({"id", "name"} <= set(entry) for entry in catalogue[name]), name
    assert catalogue["elements"][0] == "C" and catalogue["limits"]
    assert ask(do="plan", job=catalogue["demo_job"])["ok"]


def test_every_grade_use_and_medium_of_the_catalogue_can_be_planned():
    catalogue = ask(do="catalogue")["catalogue"]
    for grade in catalogue["grades"]:
        assert ask(do="plan", job=sample(steel__grade=grade["id"], shop__heat={"kind": "kiln"}))["ok"], grade
    for use in catalogue["uses"]:
        assert ask(do="plan", job=sample(aim={"use": use["id"]}))["ok"], use
    for medium in catalogue["media"]:
        assert ask(do="plan", job=sample(shop__baths=[{"medium": medium["id"]}]))["ok"], medium
