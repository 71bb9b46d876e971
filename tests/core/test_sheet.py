"""The sheet: what must stand on it, that nothing on it is markup from a stranger, and that a saved one opens again."""
import copy
import json
import re
from html.parser import HTMLParser

import pytest

from pycore.errors import InputErrors
from pycore.sheet import open_sheet, render_sheet, save_sheet, sheet_css, sheet_filename, sheet_text
from pycore.sheet.metrics import count_lines, width_mm, wrap

ATTACK = """</script><script>alert(1)</script><img src=x onerror="alert(2)">'">&{{ 7 * 7 }}"""


def band(low, mid, high):
    return {"HRC": {"low": low, "mid": mid, "high": high}}


def place(low, mid, high):
    return {**band(low, mid, high), "phases": {"martensite": 0.9, "retained_austenite": 0.1}}


def step(n, id_, do, at, time, look, blank, hold=False, cautions=()):
    return {"n": n, "id": id_, "do": do, "at": at, "time": time, "look": look, "blank": blank, "hold": hold, "cautions": list(cautions)}


def station(id_, label, value, unit, other, note, temperature_C, order, why=None):
    return {"id": id_, "label": label, "value": value, "unit": unit, "other": other, "note": note,
            "temperature_C": temperature_C, "order": order, "why": why}


def caution(id_, signal, text):
    return {"id": id_, "signal": signal, "step": "quench", "text": text, "because": "it hurts", "source": "common practice"}


def why(name, inside=True):
    return {"name": name, "model": "a model", "inputs": "its inputs", "source": "Author 1945", "range": "100–700 °C", "inside": inside}


def a_plan():
    """An invented plan with every part filled."""
    curve = {"low": [60, 55, 45], "mid": [62, 57, 48], "high": [64, 60, 52]}
    return {
        "schema": "quenchwright.plan/1", "version": "0.1.0", "data_edition": "2026-12", "date": "2026-12-01", "id": "7F3A09C1",
        "job": {"schema": "quenchwright.job/1", "title": "Cold chisel", "quantity": 4, "units": "mm", "steel": {"grade": "W1"},
                "part": {"shape": "round", "dimensions_mm": {"diameter": 20.5, "length": 180}, "zone": "tip"},
                "aim": {"use": "cold-chisel"}, "shop": {"baths": [{"medium": "brine", "volume_L": 12}]}},
        "title": "Cold chisel", "quantity": 4, "units": "mm",
        "summary": {"steel": "W1 tool steel", "part": "20 mm round", "aim": "56–59 HRC (cold chisel)", "shop": "coal forge"},
        "aim": {"HRC": [56, 59], "use": "cold-chisel", "name": "Cold chisel", "source": "practice"},
        "verdict": "reachable", "reasons": ["It comes to 56–59 HRC at the surface."], "alternatives": [],
        "steel": {"grade": "W1", "composition": {"C": 1.0, "Mn": 0.25}, "DI_mm": None},
        "austenitize": {"temperature_C": 790, "window_C": [775, 805], "scale_mm": 0.04, "decarb_mm": 0.12, "stock_mm": 0.2,
                        "magnet_lets_go_C": 748, "soak_min": 6, "colour": "bright cherry"},
        "quench": {"medium": "brine", "medium_name": "10 % brine", "kind": "water", "bath_C": 20, "bath_window_C": [15, 35],
                   "agitation": "moderate", "bath_rise_C": 3.1, "volume_L": 12, "volume_needed_L": 6, "flash_C": None,
                   "out_of_bath_C": 60, "time_in_bath_s": 14, "transfer_s": 2,
                   "others": [{"medium": "fast-oil", "medium_name": "fast oil", "surface_HRC": 48, "centre_HRC": 40, "why_not": "too slow"}]},
        "as_quenched": {"surface": place(64, 65, 66), "midradius": place(58, 63, 65), "centre": place(40, 44, 50)},
        "temper": {"temperature_C": 215, "window_C": [205, 225], "hold_min": 60, "cycles": 2},
        "cold": None,
        "final": {"surface": band(56, 58, 59), "midradius": band(52, 55, 58), "centre": band(39, 42, 47)},
        "profile": {"depth_mm": [0, 5, 10], "width_mm": 20, "as_quenched_HRC": curve, "final_HRC": copy.deepcopy(curve)},
        "stations": [station("austenitize", "heat to", "790", "°C", "1455 °F", "bright cherry", 790, 1, "austenitize.temperature_C"),
                     station("soak", "soak once even", "6", "min", "", "12 at most", 790, 2),
                     station("transfer", "fire to brine", "2", "s", "", "straight down", None, 3),
                     station("quench", "10 % brine", "15–35", "°C", "60–95 °F", "out at 60 °C", 20, 3),
                     station("temper", "temper at", "215", "°C", "420 °F", "dark straw", 215, 5, "temper.temperature_C"),
                     station("hold", "hold", "2 × 1", "h", "", "cool between", 215, 5)],
        "critical": ["austenitize", "soak", "transfer", "quench", "temper", "hold"],
        "steps": [step(0, "ready", "Ready", "", "", "Oven settled at 215 °C.", "oven reads", True),
                  step(1, "austenitize", "Heat the tip to 790 °C", "790 °C (775–805) · 1455 °F", "about 8 min", "Turn it.", "was"),
                  step(2, "soak", "Soak 6 min", "", "6 min, 12 at most", "One even colour.", "in / out"),
                  step(3, "transfer", "Into the brine within 2 s", "15–35 °C", "2 s", "Tip first.", "brine at", False, ["brine"]),
                  step(4, "check", "File must skate", "expect 64–66 HRC", "", "Stone the skin first.", "HRC", True, ["shatter"]),
                  step(5, "temper", "Into the oven", "215 °C (205–225) · 420 °F", "2 × 1 h", "Dark straw.", "1st / 2nd")],
        "faults": [{"sign": "Soft", "cause": "too cold", "then": "Harden again."}, {"sign": "Hard", "cause": "oven reads high", "then": "Temper hotter."},
                   {"sign": "Bent", "cause": "uneven heat", "then": "True it warm."}, {"sign": "Cracked", "cause": "too hot", "then": "Scrap it."}],
        "cautions": [caution("shatter", "danger", "Do not strike it before the temper."), caution("brine", "warning", "Brine spits.")],
        "marks": [{"value": "steel.DI_mm", "text": "not for this grade"}],
        "why": {"austenitize.temperature_C": why("Austenitizing temperature"), "temper.temperature_C": why("Tempering temperature", False),
                "final.surface.HRC": why("Hardness after temper")},
        "sources": ["Hollomon & Jaffe 1945"],
    }


class Tags(HTMLParser):
    """The elements of a page, its attributes and its text, as a browser would see them."""

    def __init__(self, text):
        super().__init__()
        self.found, self.attributes, self.text, self.ids = [], [], "", []
        self.feed(text)

    def handle_starttag(self, tag, attrs):
        self.found.append(tag)
        self.attributes += attrs
        self.ids += [value for name, value in attrs if name == "id"]

    def handle_data(self, data):
        self.text += data


def words(html):
    return " ".join(re.sub(r"<[^>]*>", " ", html).split())     # split() also takes the spaces that do not break


def test_the_sheet_has_all_its_parts():
    sheet = render_sheet(a_plan())
    assert sheet.startswith('<article class="sheet ')
    text = words(sheet)
    for part in ("Cold chisel, 4 pieces", "W1 tool steel", "20 mm round", "56–59", "Within reach", "magnet lets go", "790", "1455 °F",
                 "2 × 1", "stop and check", "brine at", "Harden again.", "Scrap it.", "danger", "It hurts.", "date", "made by",
                 "Computed ranges, not promises: try one first. Local rules and licensed practice come first.",
                 "job 7F3A09C1", "2026-12-01", "mid-radius", "Hollomon & Jaffe 1945".replace("&", "&amp;")):
        assert part in text, part
    for needed in ('class="heatline"', 'class="section"', 'role="img"', "<title", "<desc", 'class="notes"', 'class="box"'):
        assert needed in sheet, needed


def test_every_linked_number_has_its_note_and_ids_are_unique():
    page = Tags(render_sheet(a_plan()))
    targets = {value[1:] for name, value in page.attributes if name == "href"}
    assert targets == {"why-austenitize.temperature_C", "why-temper.temperature_C", "why-final.surface.HRC"}
    assert targets <= set(page.ids)
    assert len(page.ids) == len(set(page.ids))


def test_a_number_outside_its_range_is_marked_and_the_mark_explained():
    text = words(render_sheet(a_plan()))
    assert "~215" in text
    assert "~ outside the range" in text
    plan = a_plan()
    plan["why"]["temper.temperature_C"]["inside"] = True
    assert "~215" not in words(render_sheet(plan))


@pytest.mark.parametrize("verdict, word", [("borderline", "Borderline"), ("out-of-reach", "Out of reach")])
def test_a_doubtful_verdict_is_framed_with_reasons_and_ways_out(verdict, word):
    plan = a_plan()
    plan.update(verdict=verdict, reasons=["The oven is too cool."], alternatives=[{"what": "Use a kiln.", "gives": "56–59 HRC"}])
    sheet = render_sheet(plan)
    assert f'class="frame {verdict}"' in sheet
    assert f"{word}. The oven is too cool. Use a kiln. Gives 56–59 HRC." in words(sheet)


def test_six_cautions_stand_on_paper_but_every_danger():
    plan = a_plan()
    plan["cautions"] = [caution(f"w{n}", "warning", f"Warning {n}.") for n in range(9)]
    care = render_sheet(plan).split('class="care"')[1].split("</section>")[0]
    assert care.count("<li ") == 6 and "3 more in the notes" in care
    plan["cautions"] += [caution(f"d{n}", "danger", f"Danger {n}.") for n in range(8)]
    sheet = render_sheet(plan)
    care = sheet.split('class="care"')[1].split("</section>")[0]
    assert care.count('<li class="danger">') == 8 and care.count("<li ") == 8
    assert all(f"Warning {n}." in sheet for n in range(9)), "the rest is in the notes"


def attacked(value):
    """The plan with every text in it replaced by an attack (keys of dictionaries as well where free)."""
    if isinstance(value, dict):
        return {key: item if key in ("verdict", "signal", "schema", "job") else attacked(item) for key, item in value.items()}
    if isinstance(value, list):
        return [attacked(item) for item in value]
    return ATTACK if isinstance(value, str) else value


def test_no_text_of_a_plan_becomes_markup():
    plan = a_plan()
    honest = Tags(render_sheet(plan))
    plan["cautions"][0]["signal"] = ATTACK
    plan["why"][ATTACK] = why(ATTACK)
    plan["steel"]["composition"][ATTACK] = 1.0
    for hostile in (attacked(plan), {**attacked(plan), "units": "in"}):
        page = Tags(render_sheet(hostile))
        assert set(page.found) <= set(honest.found) | {"li", "ul"}
        assert "script" not in page.found and "img" not in page.found
        assert not [name for name, _ in page.attributes if name.startswith("on")]
        assert not [value for name, value in page.attributes if name == "href" and not value.startswith("#why-")]
        assert "{{ 7 * 7 }}" in page.text and "49" not in words(render_sheet(hostile)).split("job")[0][:80]


def test_a_saved_sheet_with_hostile_texts_holds_one_script_block_and_opens():
    plan = attacked(a_plan())
    plan["job"] = attacked({**a_plan()["job"], "notes": "\u2028 <!-- </script "})
    plan["job"]["schema"] = "quenchwright.job/1"
    plan["version"] = "0.1.0"
    saved = save_sheet(plan)
    page = Tags(saved)
    assert page.found.count("script") == 1
    assert open_sheet(saved) == plan["job"]


def nulled(value):
    """The plan with every number replaced by null."""
    if isinstance(value, dict):
        return {key: item if key in ("job", "version") else nulled(item) for key, item in value.items()}
    if isinstance(value, list):
        return [nulled(item) for item in value]
    return None if isinstance(value, (int, float)) and not isinstance(value, bool) else value


@pytest.mark.parametrize("bad", [None, float("nan"), float("inf")])
def test_what_is_not_computed_is_said_and_never_printed_as_none_or_nan(bad):
    plan = nulled(a_plan()) if bad is None else a_plan()
    if bad is not None:
        plan["quench"].update(bath_rise_C=bad, out_of_bath_C=bad)
        plan["final"]["centre"]["HRC"] = {"low": bad, "mid": bad, "high": bad}
        plan["profile"]["final_HRC"]["mid"][1] = bad
        plan["stations"][0]["temperature_C"] = bad
    plan["marks"] = [{"value": "final.centre", "text": "no model for this section"}, {"value": "profile", "text": "no model"}]
    sheet = render_sheet(plan)
    assert "not computed" in sheet
    for text in (words(sheet), sheet_text(plan)):
        assert not re.search(r"\b(None|nan|inf|NaN|null)\b", text)
    assert not re.search(r'="[^"]*(None|nan|inf)\b', sheet)


def test_parts_that_are_missing_leave_a_sheet_all_the_same():
    for name in a_plan():
        plan = a_plan()
        plan.pop(name)
        assert render_sheet(plan).endswith("</article>"), name
        assert sheet_text(plan)
        plan[name] = None
        assert render_sheet(plan).endswith("</article>"), name
        assert sheet_text(plan)
    assert "not computed" in render_sheet({})


def test_long_texts_and_large_numbers_still_render():
    plan = a_plan()
    plan.update(title="A very long title of a job that nobody would ever write on a wall " * 4, quantity=123456789)
    for row in plan["stations"]:
        row.update(label="a long label " * 6, note="a long note " * 8, value="1234–5678")
    plan["stations"] += [station(f"temper{n}", "temper again at", "540", "°C", "1005 °F", "", 540, 9) for n in (2, 3)]
    for row in plan["steps"]:
        row["look"] = "Look at it for a long time. " * 20
    sheet = render_sheet(plan)
    assert "123456789 pieces" in sheet
    assert "letter-two" in sheet and "a4-two" in sheet


def boxes(sheet):
    """(left, right, baseline, size) of every text on the heat line, from the drawing itself."""
    line = sheet.split('class="heatline"')[1].split("</svg>")[0]
    for match in re.finditer(r"<text ([^>]*)>(.*?)</text>", line):
        attributes = dict(re.findall(r'([a-z-]+)="([^"]*)"', match[1]))
        bold, text = attributes.get("font-weight") == "700", re.sub(r"<[^>]*>", "", match[2])
        size_pt = float(attributes["font-size"]) * 72 / 25.4
        x, y = float(attributes["x"]), float(attributes["y"])
        x -= width_mm(text, size_pt, bold) / 2 if attributes.get("text-anchor") == "middle" else 0
        yield x, x + width_mm(text, size_pt, bold), y - float(attributes["font-size"]) * 0.67, y, text


def many_stations(preheats, cold, tempers):
    plan = a_plan()
    first = [station("preheat", "preheat", str(550 + 150 * n), "°C", f"{1020 + 270 * n} °F", "20 min", 550 + 150 * n, n) for n in range(preheats)]
    icy = [station("cold", "dry ice", "−78", "°C", "−108 °F", "60 min", -78, 6)] * cold
    again = [station(f"temper{n}", "temper again at", "540", "°C", "1005 °F", "grey", 540, 7 + n) for n in range(2, tempers + 1)]
    plan["stations"] = first + plan["stations"][:4] + icy + plan["stations"][4:] + again
    if tempers > 1:
        plan["temper"]["cycles"] = 1
    return plan


@pytest.mark.parametrize("preheats, cold, tempers", [(0, 0, 1), (1, 0, 1), (2, 0, 1), (2, 1, 1), (0, 1, 2), (2, 1, 2), (1, 1, 3)])
def test_nothing_on_the_heat_line_overlaps(preheats, cold, tempers):
    plan = many_stations(preheats, cold, tempers)
    found = list(boxes(render_sheet(plan)))
    assert len(found) > 12
    for a in range(len(found)):
        assert found[a][0] >= 0 and found[a][1] <= 190, found[a]
        for b in range(a):
            one, two = found[a], found[b]
            apart = one[1] <= two[0] or two[1] <= one[0] or one[3] <= two[2] or two[3] <= one[2]
            assert apart, (one, two)


@pytest.mark.parametrize("preheats, cold", [(0, 0), (1, 0), (2, 0), (2, 1)])
def test_the_six_numbers_of_the_wall_are_at_least_32_pt(preheats, cold):
    sheet = render_sheet(many_stations(preheats, cold, 1))
    line = sheet.split('class="heatline"')[1].split("</svg>")[0]
    sizes = {text: float(size) * 72 / 25.4 for size, text in re.findall(r'font-size="([\d.]+)" class="number"[^>]*>([^<]*)<', line)}
    for value in ("790", "6", "2", "15–35", "~215", "2\u2009×\u20091"):
        assert sizes[value] >= 31.9, (value, sizes)


def test_save_then_open_gives_the_same_job_and_a_small_file_that_needs_nothing():
    plan = a_plan()
    saved = save_sheet(plan)
    assert saved.startswith("<!doctype html>")
    assert len(saved.encode()) <= 150_000
    assert open_sheet(saved) == plan["job"]
    assert open_sheet(json.dumps(plan["job"])) == plan["job"]
    assert open_sheet("\ufeff  " + json.dumps(plan["job"])) == plan["job"]
    page = Tags(saved)
    assert page.found.count("script") == 1 and "link" not in page.found
    assert "http:" not in saved and "https:" not in saved.replace("https://openfontlicense.org", "")
    assert "default-src 'none'" in saved
    block = saved.split('id="quenchwright-sheet">')[1].split("</script>")[0]
    assert "<" not in block
    assert json.loads(block)["schema"] == "quenchwright.sheet/1"


def sheet_with(block):
    return f'<!doctype html><p>x</p><script type="application/json" id="quenchwright-sheet">{block}</script>'


def block_with(**changes):
    return json.dumps({"schema": "quenchwright.sheet/1", "version": "0.1.0", "data_edition": "2026-12",
                       "job": {"schema": "quenchwright.job/1"}, **changes})


HOSTILE = {
    "empty": "", "not a sheet": "<html>hello</html>", "a list": "[1, 2]", "a number": "7", "cut short": block_with()[:-5],
    "block cut short": sheet_with('{"schema":'), "two blocks": sheet_with(block_with()) + sheet_with(block_with()),
    "wrong id": sheet_with(block_with()).replace("quenchwright-sheet", "other"), "a script": sheet_with(block_with()).replace("application/json", "text/javascript"),
    "NaN": sheet_with(block_with().replace('"0.1.0"', "NaN")), "Infinity": '{"schema": "quenchwright.job/1", "quantity": -Infinity}',
    "overflow": '{"schema": "quenchwright.job/1", "quantity": 1e999}', "long integer": '{"schema": "quenchwright.job/1", "quantity": ' + "9" * 5000 + "}",
    "deep": '{"schema": "quenchwright.job/1", "a": ' + "[" * 100_000 + "]" * 100_000 + "}",
    "deep objects": sheet_with('{"a":' * 50_000 + "1" + "}" * 50_000),
    "name twice": '{"schema": "quenchwright.job/1", "title": "a", "title": "b"}',
    "other schema": sheet_with(block_with(schema="quenchwright.sheet/2")), "other job schema": sheet_with(block_with(job={"schema": "x/1"})),
    "no job": sheet_with(block_with(job=None)), "job is a list": sheet_with(block_with(job=[])), "no version": sheet_with(block_with(version=None)),
    "odd version": sheet_with(block_with(version="0.1.0<b>")), "plan": json.dumps(a_plan()), "huge": "{" + " " * 5_000_001,
    "huge html": "<script>" * 700_000, "markup in block": sheet_with('{"schema":"<b>"}'),
}


@pytest.mark.parametrize("name", HOSTILE)
def test_a_hostile_file_is_refused_in_one_plain_sentence(name):
    with pytest.raises(InputErrors) as refused:
        open_sheet(HOSTILE[name])
    faults = refused.value.to_json()
    assert [fault["path"] for fault in faults] == ["file"]
    assert len(str(faults[0]["value"])) <= 60 and faults[0]["expected"]
    json.dumps(faults, allow_nan=False)


@pytest.mark.parametrize("text", [None, 7, b"{}", {"schema": "quenchwright.job/1"}])
def test_what_is_no_text_is_refused(text):
    with pytest.raises(InputErrors):
        open_sheet(text)


@pytest.mark.parametrize("title, date, name", [
    ("Cold chisel", "2026-12-01", "cold-chisel-2026-12-01.html"), ("../../etc/passwd\x00", "2026-12-01", "etc-passwd-2026-12-01.html"),
    ("Étau à main", "2026-12-01", "etau-a-main-2026-12-01.html"), ("刀", "2026-12-01", "sheet-2026-12-01.html"),
    ("CON", None, "con-7f3a09c1.html"), ("", "tomorrow", "sheet-7f3a09c1.html"), ("x" * 500, "2026-12-01", "x" * 60 + "-2026-12-01.html"),
    (None, None, "sheet-7f3a09c1.html"), ("a", "2026-12-01/../x", "a-7f3a09c1.html")])
def test_file_names_are_safe(title, date, name):
    assert sheet_filename({**a_plan(), "title": title, "date": date}) == name
    assert re.fullmatch(r"[a-z0-9][a-z0-9-]*\.html", name)


def test_the_text_sheet_is_complete_and_eighty_columns():
    plan = a_plan()
    plan["title"] = "Cold \x1b[31mchisel\x07"
    text = sheet_text(plan)
    assert max(map(len, text.splitlines())) <= 80
    assert "\x1b" not in text and "\x07" not in text
    for part in ("WITHIN REACH", "HEAT LINE", "790 °C", "[ ]  1  Heat the tip to 790 °C", "** stop and check **", "56–59",
                 "TAKE CARE", "! DANGER", "Scrap it.", "Computed ranges, not promises", "job 7F3A09C1", "~ steel.DI_mm"):
        assert part in text, part


def test_style_carries_both_fonts_only_when_asked():
    assert sheet_css(True).count("@font-face") == 2
    assert "@font-face" not in sheet_css(False)
    assert "</style" not in sheet_css(True).lower()
    assert "url(" not in sheet_css(False), "the sheet loads nothing"


def test_precompiled_templates_give_the_same_sheet():
    from jinja2 import Template

    from pycore.sheet import templates
    from pycore.sheet.view import view_of

    sources = templates.compiled_modules()
    assert set(sources) == {"_compiled_sheet.py", "_compiled_saved.py"}
    names = {"__file__": "sheet"}
    exec(compile(sources["_compiled_sheet.py"], "sheet", "exec"), names)
    made = Template.from_module_dict(templates.environment(), names, templates.environment().globals)
    assert made.render(view_of(a_plan())).strip() == render_sheet(a_plan())


def test_counting_lines_agrees_with_breaking_them():
    text = "Turn it. When the magnet lets go, one shade brighter; the last dark shadow has crawled out."
    for room_mm in (20, 40, 70, 200):
        assert count_lines([(text, False)], 10, room_mm) == len(wrap(text, 10, room_mm))
        assert all(width_mm(line, 10) <= room_mm for line in wrap(text, 10, room_mm))
