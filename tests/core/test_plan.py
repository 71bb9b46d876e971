"""The plan of the trade's own jobs: complete, consistent, strict, and what a smith would call right."""

import json
import math

import pytest

from pycore.plan import plan
from tests.core.sample_jobs import NAMES, sample

PLACES = ("surface", "midradius", "centre")
PHASES = {"ferrite", "pearlite", "bainite", "martensite", "retained_austenite"}
# Fields every plan has (design, section 4, and the contract between core and sheet).
FIELDS = {
    "schema": None, "version": None, "data_edition": None, "date": None, "id": None, "job": None, "title": None, "quantity": None,
    "units": None, "summary": ("steel", "part", "aim", "shop"), "aim": ("HRC", "use", "name", "source"), "verdict": None,
    "reasons": None, "alternatives": None,
    "steel": ("grade", "name", "basis", "composition", "Ac1_C", "Ac3_C", "Acm_C", "Ms_C", "Mf_C", "DI_mm", "dissolved_C_pct", "prior"),
    "austenitize": ("temperature_C", "window_C", "preheat", "heat_up_min", "soak_min", "soak_max_min", "total_min", "scale_mm", "decarb_mm",
                    "stock_mm", "colour", "magnet_lets_go_C", "measured_by", "error_C"),
    "quench": ("medium", "medium_name", "kind", "bath_C", "bath_window_C", "agitation", "bath_rise_C", "volume_L", "volume_needed_L",
               "transfer_s", "bath_entry_C", "out_of_bath_C", "time_in_bath_s", "rate_704_C_per_s", "flash_C", "others"),
    "as_quenched": PLACES,
    "temper": ("temperature_C", "window_C", "hold_min", "heat_up_min", "cycles", "colour", "start_within_min", "reached", "needs_C"),
    "cold": None, "final": PLACES, "profile": None, "cooling": ("time_s", "surface_C", "centre_C"),
    "tempering_curve": ("temperature_C", "HRC", "source"), "stations": None, "critical": None, "steps": None, "faults": None,
    "cautions": None, "marks": None, "why": None, "sources": None,
}  # fmt: skip
# Numbers the sheet shows large or in its foot: each must say where it comes from.
SHOWN = (
    "austenitize.temperature_C", "austenitize.heat_up_min", "austenitize.soak_min", "austenitize.scale_mm", "austenitize.decarb_mm",
    "quench.transfer_s", "quench.time_in_bath_s", "quench.bath_rise_C", "quench.volume_needed_L", "as_quenched.surface",
    "as_quenched.centre", "temper.temperature_C", "temper.hold_min", "temper.heat_up_min", "final.surface", "final.centre",
    "steel.Ac1_C", "steel.Ms_C", "steel.DI_mm", "verdict",
)  # fmt: skip


@pytest.fixture(scope="module")
def plans():
    return {name: plan(sample(name)).to_json("2026-12-01") for name in NAMES}


@pytest.fixture(params=NAMES)
def made(request, plans):
    return plans[request.param]


def numbers(value, path=""):
    if isinstance(value, dict):
        for key, inner in value.items():
            yield from numbers(inner, f"{path}.{key}")
    elif isinstance(value, list):
        for i, inner in enumerate(value):
            yield from numbers(inner, f"{path}[{i}]")
    elif isinstance(value, float):
        yield path, value


def test_every_field_is_there(made):
    for field, inner in FIELDS.items():
        assert field in made, field
        for name in inner or ():
            assert name in made[field], f"{field}.{name}"


def test_strict_json(made):
    text = json.dumps(made, allow_nan=False)
    assert json.loads(text) == made
    assert all(math.isfinite(value) for _, value in numbers(made))


def test_bands_are_ordered(made):
    for stage in ("as_quenched", "final"):
        for place in PLACES:
            band = made[stage][place]["HRC"]
            assert 0 <= band["low"] <= band["mid"] <= band["high"] <= 70
    for window in (made["austenitize"]["window_C"], made["temper"]["window_C"], made["quench"]["bath_window_C"]):
        assert window[0] is None or window[0] <= window[1]
    low, high = made["austenitize"]["window_C"]
    assert low <= made["austenitize"]["temperature_C"] <= high


def test_fractions_sum_to_one(made):
    for place in PLACES:
        phases = made["as_quenched"][place]["phases"]
        assert set(phases) == PHASES
        assert all(0 <= share <= 1 for share in phases.values()) and sum(phases.values()) == pytest.approx(1, abs=0.003)


def test_temper_only_softens(made):
    for place in PLACES:
        assert made["final"][place]["HRC"]["mid"] <= made["as_quenched"][place]["HRC"]["mid"] + 1.0


def test_order_of_temperatures(made):
    steel, heat, quench = made["steel"], made["austenitize"], made["quench"]
    assert steel["Ms_C"] > steel["Mf_C"] and heat["temperature_C"] > steel["Ac1_C"] > steel["Ms_C"]
    assert heat["temperature_C"] >= quench["bath_entry_C"] > quench["out_of_bath_C"] > quench["bath_C"]


def test_steps_are_numbered_and_in_shop_order(made):
    steps = made["steps"]
    assert [step["n"] for step in steps] == list(range(len(steps)))
    order = ["ready", "normalize", "stock", "preheat", "austenitize", "soak", "transfer", "out", "check", "cold", "temper", "final-check", "record"]
    ranks = [order.index(step["id"]) for step in steps if step["id"] != "quench"]
    assert ranks == sorted(ranks)
    assert sum(step["hold"] for step in steps) == 2
    spoken = {caution["id"] for caution in made["cautions"]}
    assert all(set(step["cautions"]) <= spoken for step in steps)


def test_stations_are_critical_and_lead_to_steps(made):
    ids = [station["id"] for station in made["stations"]]
    assert set(made["critical"]) <= set(ids)
    numbers_ = {step["n"] for step in made["steps"]}
    for station in made["stations"]:
        assert station["order"] in numbers_
        assert station["why"] is None or station["why"] in made["why"]


def test_every_number_shown_has_its_why(made):
    for name in SHOWN:
        note = made["why"][name]
        assert note["name"] and note["model"] and isinstance(note["inside"], bool), name
        assert len(note["source"]) > 3, name
    for note in made["why"].values():
        assert note["source"] in made["sources"]


def test_what_is_not_computed_is_marked(made):
    marked = {mark["value"] for mark in made["marks"]}
    if made["steel"]["DI_mm"] is None:
        assert "steel.DI_mm" in marked
    if made["quench"]["kind"] in ("water", "oil") and made["quench"]["bath_rise_C"] is None:
        assert "quench.bath_rise_C" in marked
    assert all(mark["text"] for mark in made["marks"])


def test_cautions_say_why(made):
    assert made["cautions"]
    ranks = {"danger": 0, "warning": 1, "caution": 2}
    signals = [ranks[caution["signal"]] for caution in made["cautions"]]
    assert signals == sorted(signals)
    for caution in made["cautions"]:
        assert caution["text"] and caution["because"] and caution["source"]


def test_profile_runs_from_skin_to_centre(made):
    profile = made["profile"]
    depth = profile["depth_mm"]
    assert depth[0] == 0 and depth == sorted(depth) and depth[-1] == pytest.approx(profile["width_mm"] / 2, abs=0.02)
    for name in ("as_quenched_HRC", "final_HRC"):
        assert {len(profile[name][band]) for band in ("low", "mid", "high")} == {len(depth)}
    assert made["as_quenched"]["surface"]["HRC"]["mid"] == profile["as_quenched_HRC"]["mid"][0]
    assert made["final"]["centre"]["HRC"]["mid"] == profile["final_HRC"]["mid"][-1]


def test_cooling_falls(made):
    cooling = made["cooling"]
    assert cooling["time_s"] == sorted(cooling["time_s"])
    assert cooling["surface_C"][0] > 600 and cooling["centre_C"][-1] < 120
    assert all(s <= c + 1 for s, c in zip(cooling["surface_C"], cooling["centre_C"]))


# ---------------------------------------------------------------- the three jobs of the trade, and three more


def test_cold_chisel_of_W1(plans):
    """Coal forge and magnet, brine, kitchen oven: hard shell, tough core, tempered to the chisel's range in time."""
    made = plans["cold chisel"]
    assert made["verdict"] == "reachable" and made["quench"]["medium"] == "brine"
    assert 770 <= made["austenitize"]["temperature_C"] <= 815 and made["austenitize"]["measured_by"] == "colour and magnet"
    assert made["as_quenched"]["surface"]["HRC"]["mid"] >= 63
    assert made["as_quenched"]["centre"]["HRC"]["mid"] < 55  # 20 mm of W1 does not harden through (Tool Steels, 1/2 in)
    assert 56 <= made["final"]["surface"]["HRC"]["mid"] <= 59
    assert 200 <= made["temper"]["temperature_C"] <= 260
    assert {"brine-spits", "struck-head-soft", "untempered-shatters"} <= {c["id"] for c in made["cautions"]}
    assert not {"lid-never-water", "oil-near-flash"} & {c["id"] for c in made["cautions"]}


def test_leaf_spring_out_of_reach_of_a_kitchen_oven(plans):
    """5160 at 42-48 HRC needs over 400 °C; 260 °C cannot. The plan says so, says why, and says what would do."""
    made = plans["leaf spring"]
    assert made["verdict"] == "out-of-reach" and made["temper"]["reached"] is False
    assert 400 <= made["temper"]["needs_C"] <= 480 and made["temper"]["temperature_C"] <= 260
    assert any("260" in reason and "kitchen oven" in reason for reason in made["reasons"])
    assert len(made["alternatives"]) >= 2 and all(a["what"] and a["gives"] for a in made["alternatives"])
    assert made["final"]["surface"]["HRC"]["low"] > 50
    assert made["as_quenched"]["centre"]["HRC"]["mid"] > 58  # 6 mm of 5160 hardens through in any oil


def test_punch_of_O1(plans):
    """Kiln, foil, medium oil: through hard at 63-66, tempered to 58-60 near 260 °C (Diamond Metals sheet: 60 at 260)."""
    made = plans["punch"]
    assert made["verdict"] == "reachable"
    assert 63 <= made["as_quenched"]["centre"]["HRC"]["mid"] <= 66
    assert 230 <= made["temper"]["temperature_C"] <= 300
    assert made["austenitize"]["preheat"] and made["austenitize"]["scale_mm"] < 0.02


def test_A2_in_air_with_dry_ice(plans):
    made = plans["shear blade"]
    assert made["quench"]["kind"] in ("gas", "plates") and made["austenitize"]["temperature_C"] >= 925
    assert made["cold"]["temperature_C"] <= -70 and made["cold"]["retained_after"] < made["cold"]["retained_before"]
    assert any(step["id"] == "cold" for step in made["steps"]) and any(s["id"] == "cold" for s in made["stations"])
    assert {"dry-ice-air", "cold-cracks", "hole-traps"} <= {c["id"] for c in made["cautions"]}
    assert made["temper"]["cycles"] == 2


def test_certificate_shaft(plans):
    """A chemistry needs no grade: assumed residuals are marked, hardenability is computed."""
    made = plans["certificate shaft"]
    assert made["steel"]["grade"] is None and made["steel"]["DI_mm"] > 60
    assert made["quench"]["medium"] == "fast-oil"  # water is not needed, and a keyway would crack
    assert 30 <= made["final"]["surface"]["HRC"]["mid"] <= 36 and made["temper"]["temperature_C"] > 500
    assert any(mark["value"].startswith("steel.composition.") for mark in made["marks"])


def test_blade_in_inches(plans):
    made = plans["blade in inches"]
    assert made["units"] == "in" and " in" in made["summary"]["part"] and "mm" not in made["summary"]["part"]
    assert made["job"]["part"]["dimensions_mm"]["spine"] == pytest.approx(4.7625)
    assert made["quench"]["medium"] == "canola"


# ---------------------------------------------------------------- what changes what


def test_the_smith_may_decide():
    job = sample(decided={"austenitize_C": 800, "temper_C": 230, "temper_hold_min": 90, "temper_cycles": 1, "medium": "brine"})
    made = plan(job).to_json()
    assert made["austenitize"]["temperature_C"] == 800
    assert (made["temper"]["temperature_C"], made["temper"]["hold_min"], made["temper"]["cycles"]) == (230, 90, 1)


def test_a_range_wins_over_a_use():
    made = plan(sample(aim={"use": "cold-chisel", "hardness_HRC": [60, 62]})).to_json()
    assert made["aim"]["HRC"] == [60, 62] and made["aim"]["source"] == "stated by you"


def test_a_bath_without_volume_is_marked():
    made = plan(sample(shop__baths=[{"medium": "brine"}])).to_json()
    assert made["quench"]["bath_rise_C"] is None and made["quench"]["volume_needed_L"] > 0
    assert any(mark["value"] == "quench.bath_rise_C" for mark in made["marks"])


def test_a_thick_piece_beyond_the_sheet_is_not_guessed():
    """A2 of 300 mm square in still air (its sheet ends at about 100 mm): null with a mark, and no promise."""
    thick = {"thickness": 300, "width": 300, "length": 900}
    made = plan(sample("shear blade", part__dimensions_mm=thick, shop__baths=[{"medium": "still-air"}])).to_json()
    assert made["as_quenched"]["surface"]["HRC"]["mid"] is None and made["final"]["centre"]["HRC"]["mid"] is None
    assert made["profile"] is None and made["verdict"] != "reachable"
    assert any(mark["value"] == "as_quenched" for mark in made["marks"])


def test_mild_quench_of_shallow_steel_is_out_of_reach():
    """W1 of 20 mm round in still air does not harden: the plan refuses and names a better way."""
    made = plan(sample(shop__baths=[{"medium": "still-air"}])).to_json()
    assert made["verdict"] == "out-of-reach" and made["as_quenched"]["surface"]["HRC"]["mid"] < 50
    assert made["alternatives"]


def test_id_belongs_to_the_job():
    first, same, other = (plan(sample(quantity=n)).to_json()["id"] for n in (4, 4, 5))
    assert first == same != other and len(first) == 8


def test_dates_are_the_callers():
    assert plan(sample()).to_json()["date"] is None
    assert plan(sample()).to_json("2026-12-01")["date"] == "2026-12-01"


def test_sulfur_ties_manganese_up():
    """MnS: 1.71 % manganese to 1 % sulfur (atomic masses 54.94 and 32.06); free-cutting steel hardens less deep for it."""

    def steel(S):
        chemistry = {"C": 0.45, "Mn": 1.5, "Si": 0.2, "S": S}
        return plan(dict(sample("punch"), steel={"chemistry": chemistry})).steel

    assert steel(0.28).austenite["Mn"] == pytest.approx(1.5 - 1.714 * 0.25, abs=0.005)
    assert steel(0.28).DI_mm < steel(0.02).DI_mm


def test_jominy_curve_where_the_model_holds(plans):
    """ASTM A255: 32 stations of 1/16 in (1.5875 mm), never harder further from the quenched end; none for W1."""
    made = plan(dict(sample("punch"), steel={"grade": "4140"})).to_json()["steel"]["jominy"]
    assert made["distance_mm"][0] == pytest.approx(1.59, abs=0.01) and made["distance_mm"][-1] == pytest.approx(50.8)
    assert len(made["HRC"]) == 32 and made["HRC"] == sorted(made["HRC"], reverse=True)
    assert plans["cold chisel"]["steel"]["jominy"] is None


def test_a_quench_that_may_crack_it_says_what_would_be_gentler():
    job = dict(sample("cold chisel"), steel={"grade": "O1"})
    job["part"] = dict(job["part"], features=["sharp-corner"])
    made = plan(job).to_json()
    assert made["quench"]["crack_risk"]["grade"] == "high" and made["verdict"] != "reachable"
    assert any("oil" in one["what"] for one in made["alternatives"])


def test_a_thin_edge_is_at_heat_longer_than_the_thick_back():
    job = dict(sample("cold chisel"), steel={"grade": "1095"})
    job["part"] = {"shape": "wedge", "dimensions_mm": {"edge": 1, "spine": 12, "width": 50, "length": 200}, "zone": "all"}
    heat = plan(job).to_json()["austenitize"]
    assert heat["soak_min"] < heat["thin_at_heat_min"] < heat["heat_up_min"] + heat["soak_min"]
    assert plan(sample("cold chisel")).to_json()["austenitize"]["thin_at_heat_min"] is None


def test_tempers_of_high_alloy_steel_follow_the_sheet():
    """M2 three tempers past its peak (ASM practice, triple at a high hardening heat); 440C not in 425-595 °C unasked."""
    shop = dict(sample("punch")["shop"], heat={"kind": "kiln", "max_C": 1250}, baths=[{"medium": "still-air"}],
                temper={"kind": "kiln", "max_C": 650})  # fmt: skip
    high_speed = plan(dict(sample("punch"), steel={"grade": "M2"}, aim={"hardness_HRC": [62, 64]}, shop=shop)).to_json()
    assert high_speed["temper"]["cycles"] == 3 and high_speed["temper"]["temperature_C"] >= 540
    stainless = plan(dict(sample("punch"), steel={"grade": "440C"}, aim={"hardness_HRC": [51, 53]}, shop=shop)).to_json()
    assert stainless["verdict"] != "reachable" and any("sheet" in reason for reason in stainless["reasons"])
