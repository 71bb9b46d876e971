"""The tables: every row has a source, ranges are ordered, ids meet, and printed values are what the source prints."""
import itertools
import re

import numpy as np
import pytest

from pycore.data import FOLDER, demo_job, number, table, toml
from pycore.physics import critical

CONFIDENCE = {"read", "from memory", "common practice"}
TABLES = sorted(path.stem for path in FOLDER.glob("*.csv"))
GRADES = [row["id"] for row in table("grades")]
CURVED = [grade for grade in GRADES if any(row["grade"] == grade for row in table("tempering"))]
TABULATED = ["S7", "1.2767", "A2", "D2", "H11", "H13", "M2", "420", "440C"]
HUMPED = {"H11", "H13", "M2", "420"}      # hardness rises again before it falls
QUANTITIES = {
    "Ac1_C", "Ac3_C", "Acm_C", "Ms_C", "austenitize_C", "normalize_C", "preheat_C", "preheat2_C", "soak_min",
    "as_quenched_HRC", "dissolved_C_pct", "retained_austenite_pct", "air_hardening_mm", "oil_hardening_mm",
    "temper_C",
    "temper_cycles",
}
STEPS = {
    "ready", "stock", "normalize", "preheat", "austenitize", "soak", "transfer", "quench", "out", "check", "cold",
    "temper", "final-check", "record",
}
# The words of ISO 3864 and ANSI Z535 that a caution may open with.
SIGNALS = {"danger", "warning", "caution"}


def column(name, key, /, **only):
    """The numbers of one column, rows with a blank left out."""
    rows = [row for row in table(name) if all(row[k] == v for k, v in only.items())]
    return [number(row[key]) for row in rows if number(row[key]) is not None]


def falls(values):
    return all(b <= a for a, b in itertools.pairwise(values))


def rises(values):
    return all(b > a for a, b in itertools.pairwise(values))


def quantity(grade, name):
    """(low, value, high) of a grade's tabulated temperature or hardness, or None."""
    for row in table("temperatures"):
        if row["grade"] == grade and row["quantity"] == name:
            return tuple(number(row[k]) for k in ("low", "value", "high"))
    return None


# ---------------------------------------------------------------- every table

@pytest.mark.parametrize("name", TABLES)
def test_every_row_has_a_source_and_a_known_confidence(name):
    assert table(name)
    for row in table(name):
        assert None not in row, row             # a cell too many
        assert None not in row.values(), row    # a cell too few
        assert len(row["source"]) > 8, row
        assert row["confidence"] in CONFIDENCE, row


@pytest.mark.parametrize("name", TABLES)
def test_every_low_is_under_its_high(name):
    for row in table(name):
        for low in [key for key in row if key == "low" or "_low" in key or key.startswith("low_")]:
            ends = [number(row[low]) or 0.0, number(row[low.replace("low", "high")])]
            assert ends[0] <= ends[1], row
            for middle in ("value", "nominal"):
                if middle in row:
                    assert ends[0] <= number(row[middle]) <= ends[1], row


@pytest.mark.parametrize(("name", "key"), [
    ("grades", "id"), ("uses", "id"), ("media", "id"), ("furnace", "kind"), ("temper_ovens", "kind"),
    ("atmospheres", "id"),
])
def test_ids_are_unique_and_plain(name, key):
    ids = [row[key] for row in table(name)]
    assert len(ids) == len(set(ids))
    assert all(re.fullmatch(r"[A-Za-z0-9]+([.-][A-Za-z0-9]+)*", one) for one in ids)


@pytest.mark.parametrize("name", ["grades", "media"])
def test_no_alias_means_two_things(name):
    owners = {}
    for row in table(name):
        for alias in (row["id"], *filter(None, row["aliases"].split("|"))):
            assert owners.setdefault(alias.lower(), row["id"]) == row["id"], alias


# ---------------------------------------------------------------- steels

def test_the_library():
    assert len(GRADES) >= 56
    for row in table("grades"):
        assert row["basis"] in {"modelled", "tabulated"}
        assert row["hardening"] in {"water", "oil", "air"}
        assert row["normalize"] in {"yes", "never"}
        assert (row["normalize"] == "yes") == (quantity(row["id"], "normalize_C") is not None)
        assert row["prior_advice"].startswith("Never") == (row["normalize"] == "never")


@pytest.mark.parametrize("name", ["composition", "temperatures"])
def test_each_steel_table_speaks_of_every_grade_and_no_other(name):
    assert {row["grade"] for row in table(name)} == set(GRADES)
    assert {row["grade"] for row in table("tempering")} <= set(GRADES)


def nominal(grade):
    return {r["element"]: number(r["nominal"]) for r in table("composition") if r["grade"] == grade}


@pytest.mark.parametrize("grade", sorted(set(GRADES) - set(CURVED)))
def test_a_grade_without_a_curve_is_within_the_carbon_of_the_regression(grade):
    C = quantity(grade, "dissolved_C_pct")[1] if quantity(grade, "dissolved_C_pct") else nominal(grade)["C"]
    assert 0.25 <= C <= 0.82
    assert grade not in TABULATED


@pytest.mark.parametrize("grade", GRADES)
def test_composition_is_complete(grade):
    elements = [row["element"] for row in table("composition") if row["grade"] == grade]
    assert len(elements) == len(set(elements))
    assert {"C", "Mn", "Si", "Cr", "Ni"} <= set(elements)


@pytest.mark.parametrize("grade", GRADES)
def test_temperatures_stand_in_their_natural_order(grade):
    names = [row["quantity"] for row in table("temperatures") if row["grade"] == grade]
    assert len(names) == len(set(names))
    assert set(names) <= QUANTITIES
    steel, hold = nominal(grade), quantity(grade, "austenitize_C")
    Ac1 = quantity(grade, "Ac1_C") or (None, float(critical.andrews_1965_Ac1_C(steel)), None)
    Ms, upper = quantity(grade, "Ms_C"), quantity(grade, "Ac3_C") or quantity(grade, "Acm_C")
    if upper is None and steel["C"] <= 0.77:
        upper = (None, max(float(critical.andrews_1965_Ac3_C(steel)), Ac1[1] + 5), None)
    assert Ms is None or Ms[1] < Ac1[1]
    assert upper is None or Ac1[1] < upper[1]
    assert Ac1[1] + 20 < hold[0]            # above the magnet at least
    if steel["C"] <= 0.77 or grade in TABULATED:    # all ferrite gone; hypereutectoid steel keeps carbide on purpose
        assert hold[1] > upper[1] + 15
    family = next(row["family"] for row in table("grades") if row["id"] == grade)
    if grade in TABULATED or "tool steel" in family or steel["C"] > 0.95:
        dissolved = quantity(grade, "dissolved_C_pct")
        assert dissolved[2] <= steel["C"] + 0.01
    if grade in TABULATED:
        assert all(quantity(grade, q) for q in ("Ac1_C", "Ac3_C", "Ms_C", "as_quenched_HRC", "retained_austenite_pct"))
    first, second = quantity(grade, "preheat_C"), quantity(grade, "preheat2_C")
    if second:
        assert first[1] < second[1] < hold[0]


def test_tabulated_steels_say_how_thick_air_hardens_them():
    assert [row["id"] for row in table("grades") if row["basis"] == "tabulated"] == TABULATED
    assert all(quantity(grade, "air_hardening_mm") for grade in TABULATED)


@pytest.mark.parametrize("grade", CURVED)
def test_tempering_curve_falls_from_the_as_quenched_hardness(grade):
    rows = [row for row in table("tempering") if row["grade"] == grade]
    T, HRC = [number(row["temper_C"]) for row in rows], [number(row["HRC"]) for row in rows]
    assert rises(T)
    assert quantity(grade, "as_quenched_HRC")[1] >= HRC[0]
    if grade in HUMPED:
        peak = max(i for i, h in enumerate(HRC) if h == max(HRC[1:]))
        assert 480 <= T[peak] <= 560
        assert min(HRC[:peak]) < HRC[peak]
        assert falls(HRC[peak:])
    else:
        assert falls(HRC)
    assert T[0] <= (430 if grade == "M2" else 205)   # its sheet starts there
    assert T[-1] >= (400 if grade == "O2" else 535)  # its sheet ends there
    assert len({(row["hold_h"], row["cycles"]) for row in rows}) == 1


@pytest.mark.parametrize(("grade", "temper_C", "HRC"), [
    ("1045", "204.4", 56.3), ("1045", "426.7", 40.7), ("1045", "537.8", 30.4),   # Grange & Baughman 1956, 1 h
    ("4140", "204.4", 54.4), ("4140", "426.7", 45.0), ("4140", "537.8", 38.2),   # the same
    ("4340", "204.4", 54.9), ("4340", "426.7", 45.7), ("4340", "537.8", 39.8),   # the same
    ("O1", "204", 62), ("O1", "316", 57), ("O1", "538", 44),                     # Diamond Metals O1 sheet
    ("A2", "370", 58), ("A2", "480", 58), ("D2", "480", 58), ("D2", "540", 55),  # Crucible sheets: a plateau
])
def test_printed_tempered_hardness(grade, temper_C, HRC):
    found = [number(r["HRC"]) for r in table("tempering") if (r["grade"], r["temper_C"]) == (grade, temper_C)]
    assert found == [HRC]


@pytest.mark.parametrize(("grade", "name", "value"), [
    ("52100", "Ac1_C", 755), ("52100", "Acm_C", 850),   # Lucefin 100Cr6 card, ISO 683-17
    ("D2", "Ac1_C", 788), ("D2", "Ac3_C", 845),         # D2 supplier sheet
    ("O1", "Ac1_C", 745),                               # Crucible Ketos (O1) sheet
    ("6150", "Ac3_C", 790), ("4340", "Ac3_C", 775),     # ASM Handbook vol. 4 (1991), from memory
])
def test_printed_critical_temperatures(grade, name, value):
    assert quantity(grade, name)[1] == value


# ---------------------------------------------------------------- hardness scales

@pytest.mark.parametrize("HRC, HV, HB", [   # ASTM E140 Table 1
    (20, 238, 226), (30, 302, 286), (40, 392, 371), (50, 513, 481), (58, 653, 615), (60, 697, 654), (65, 832, 739),
    (68, 940, None),
])
def test_printed_e140(HRC, HV, HB):
    row = next(row for row in table("e140") if number(row["HRC"]) == HRC)
    assert (number(row["HV"]), number(row["HB"])) == (HV, HB)


@pytest.mark.parametrize("HV, HB, HRC, Rm", [   # ISO 18265 Table A.1; 360 is often misprinted with 1115 MPa
    (200, 190, None, 640), (300, 285, 29.8, 965), (360, 342, 36.6, 1155), (400, 380, 40.8, 1290),
    (500, 475, 49.1, 1630), (650, 618, 57.8, 2180), (800, None, 64.0, None),
])
def test_printed_iso18265(HV, HB, HRC, Rm):
    row = next(row for row in table("iso18265") if number(row["HV"]) == HV)
    assert tuple(number(row[k]) for k in ("HB", "HRC", "Rm_MPa")) == (HB, HRC, Rm)


@pytest.mark.parametrize("HRC, Rm", [(59, 2420), (50, 1760), (45, 1480), (40, 1250)])   # ASTM A370-03a
def test_printed_a370(HRC, Rm):
    assert column("a370_tensile", "Rm_MPa", HRC=str(HRC)) == [Rm]


@pytest.mark.parametrize("name, keys", [
    ("e140", ("HRC", "HV", "HB")), ("iso18265", ("HV", "HB", "HRC", "Rm_MPa")), ("a370_tensile", ("HRC", "Rm_MPa")),
    ("hodge_orehoski", ("C_pct", "M99_9", "M95", "M90", "M80", "M50")), ("acm_fe_c", ("temperature_C", "C_pct")),
])
def test_scales_rise_together(name, keys):
    for key in keys:
        assert rises(column(name, key)), key


def test_the_two_hardness_standards_agree_within_a_point():
    HV, HRC = zip(*[(number(r["HV"]), number(r["HRC"])) for r in table("iso18265") if number(r["HRC"])], strict=True)
    e140 = np.interp(HV, column("e140", "HV"), column("e140", "HRC"))
    assert np.abs(e140 - HRC).max() < 0.6


# ---------------------------------------------------------------- hardenability

@pytest.mark.parametrize("J, rate_C_s", [   # Callister, figs 14.8-14.10, rounded as printed there
    (1, 270), (2, 170), (4, 70), (6, 31), (8, 18), (12, 9), (16, 5.6), (20, 3.9), (24, 2.8), (32, 2),
])
def test_printed_jominy_rates(J, rate_C_s):
    assert column("jominy_cooling", "rate_C_s", J_sixteenths=str(J))[0] == pytest.approx(rate_C_s, rel=0.04)


def test_jominy_rates_fall_and_the_units_agree():
    assert falls(column("jominy_cooling", "rate_F_s"))
    for row in table("jominy_cooling"):
        assert number(row["rate_C_s"]) == pytest.approx(number(row["rate_F_s"]) / 1.8, rel=0.006)
        assert number(row["distance_mm"]) == pytest.approx(number(row["J_sixteenths"]) * 25.4 / 16, abs=0.006)


@pytest.mark.parametrize("C, full, half", [(0.20, 44.2, 31.8), (0.40, 56.1, 42.4), (0.60, 64.3, 50.7)])
def test_hodge_orehoski(C, full, half):   # Hodge & Orehoski 1946, from memory; agrees with the A255 polynomials
    row = next(row for row in table("hodge_orehoski") if number(row["C_pct"]) == C)
    assert (number(row["M99_9"]), number(row["M50"])) == (full, half)


def test_less_martensite_is_softer():
    for row in table("hodge_orehoski"):
        assert falls([number(row[k]) for k in ("M99_9", "M95", "M90", "M80", "M50")])


def dividing_factor(J, DI):
    row = next(row for row in table("a255_dividing") if number(row["J_sixteenths"]) == J)
    return sum(number(row[f"a{k}"]) * DI**k for k in range(6))


@pytest.mark.parametrize("J, DI, factor", [   # evaluated from the same polynomials, to catch a mistyped digit
    (2, 1.0, 1.15), (3, 1.5, 1.19), (4, 2.0, 1.29), (6, 2.5, 1.50), (8, 3.0, 1.44), (10, 2.5, 1.80), (12, 3.0, 1.73),
    (14, 4.0, 1.45), (16, 5.0, 1.31), (28, 4.0, 1.94),
])
def test_dividing_factors(J, DI, factor):
    assert dividing_factor(J, DI) == pytest.approx(factor, abs=0.006)


def test_dividing_factors_come_near_one_at_their_cutoff():
    for row in table("a255_dividing"):
        J, cutoff = number(row["J_sixteenths"]), number(row["cutoff_DI_in"])
        if J <= 12:   # beyond, the cutoff is the end of the table
            assert dividing_factor(J, cutoff) == pytest.approx(1, abs=0.12)


def test_iron_carbon_lines_meet_at_the_eutectoid():   # 727 °C, 0.76 % C
    ae3 = {number(r["C_pct"]): number(r["temperature_C"]) for r in table("ae3_fe_c")}
    assert rises(column("ae3_fe_c", "temperature_C"))
    assert falls(column("ae3_fe_c", "C_pct"))
    assert ae3[0.0] == pytest.approx(912, abs=1)
    assert number(table("acm_fe_c")[0]["temperature_C"]) == 727
    assert number(table("acm_fe_c")[0]["C_pct"]) == pytest.approx(max(ae3), abs=0.001)


# ---------------------------------------------------------------- baths and kit

def test_every_liquid_has_a_boiling_curve_and_no_other():
    liquids = {row["id"] for row in table("media") if row["kind"] in ("water", "oil")}
    assert {row["medium"] for row in table("boiling")} == liquids
    assert {row["kind"] for row in table("media")} == {"water", "oil", "gas", "plates"}
    for row in table("media"):
        assert (row["kind"] == "oil") == (number(row["flash_C"]) is not None)
        assert number(row["window_low_C"]) <= number(row["default_C"]) <= number(row["window_high_C"])
        assert number(row["still"]) <= number(row["moderate"]) <= number(row["strong"])
        if row["kind"] == "oil":    # 29 CFR 1910.126(g): 50 °F, a difference of 28 K
            assert number(row["window_high_C"]) + 28 < number(row["flash_C"])


def boiling(medium, bath_C):
    rows = [r for r in table("boiling") if r["medium"] == medium and number(r["bath_C"]) == bath_C]
    assert rises([number(r["surface_C"]) for r in rows])
    return {number(r["surface_C"]): number(r["h_W_m2K"]) for r in rows}


def test_boiling_curves_behave():
    cold, warm, hot = (boiling("water", bath) for bath in (20, 40, 60))
    assert all(hot[T] <= warm[T] <= cold[T] for T in cold)      # warm water holds its blanket
    assert all(h >= cold[T] for T, h in boiling("brine", 20).items())
    fast, medium = boiling("fast-oil", 55), boiling("medium-oil", 60)
    assert max(fast, key=fast.get) > max(medium, key=medium.get)
    assert 250 <= fast[200] <= 300                              # oil convection, Kobasko


def test_canola_flash_is_the_printed_one():   # ISEO chart via Centra Foods
    assert column("media", "flash_C", id="canola") == [326]


def test_the_kit_tables_hold_the_kinds_of_the_job():
    assert {r["kind"] for r in table("furnace")} == {"kiln", "gas-forge", "coal-forge", "salt", "torch"}
    assert {r["kind"] for r in table("temper_ovens")} == {
        "kitchen-oven", "toaster-oven", "kiln", "salt", "torch", "residual-heat"}
    assert {r["id"] for r in table("atmospheres")} == {"air", "coated", "foil", "inert", "reducing"}
    for row in table("temper_ovens"):
        assert number(row["min_C"]) < number(row["max_default_C"])
    for row in (*table("furnace"), *table("temper_ovens"), *table("atmospheres")):
        assert 0 <= number(row.get("emissivity_to_part") or row.get("emissivity")) <= 1
    assert column("atmospheres", "scale_factor", id="air") == column("atmospheres", "decarb_factor", id="air") == [1]


@pytest.mark.parametrize("name, only", [
    ("heat_colours", {}), ("temper_colours", {"steel": "carbon"}), ("temper_colours", {"steel": "stainless"}),
])
def test_colour_bands_join_without_a_gap(name, only):
    low, high = column(name, "low_C", **only), column(name, "high_C", **only)
    assert high[:-1] == low[1:]
    assert rises([*low, high[-1]])


@pytest.mark.parametrize("name, T", [("light straw", 237), ("dark straw", 248), ("dark purple", 288),
                                     ("dark blue", 300), ("pale blue", 317)])
def test_temper_colours_hold_the_printed_averages(name, T):   # The Working of Steel 1921, mean of five sources
    assert column("temper_colours", "low_C", name=name)[0] < T < column("temper_colours", "high_C", name=name)[0]


# ---------------------------------------------------------------- uses and cautions

def test_uses():
    assert len(table("uses")) >= 24
    for row in table("uses"):
        assert row["zone"] in {"all", "edge", "tip"}
        assert row["struck"] in {"yes", "no"}
        assert row["shock"] in {"low", "medium", "high"}
        assert 2 <= number(row["HRC_high"]) - number(row["HRC_low"]) <= 10
        if row["shock"] == "high":
            assert number(row["HRC_high"]) <= 60
        if row["struck"] == "yes":    # ASME B107.50M: a struck face stays soft
            assert row["body"]


RULES = toml("cautions")["rule"]


def spoken(facts):
    """Ids of the rules that speak for a set of facts."""
    return {r["id"] for r in RULES if set(r["when"]) <= facts and not set(r["unless"]) & facts}


def test_rules_are_whole():
    ids = [rule["id"] for rule in RULES]
    assert len(ids) >= 25
    assert len(ids) == len(set(ids))
    for rule in RULES:
        assert set(rule) == {"id", "signal", "step", "when", "unless", "text", "because", "source"}, rule["id"]
        assert rule["signal"] in SIGNALS, rule["id"]
        assert rule["step"] in STEPS, rule["id"]
        assert rule["when"], rule["id"]
        assert not set(rule["when"]) & set(rule["unless"]), rule["id"]
        assert len(rule["text"]) <= 120, rule["id"]        # it has to fit the foot of a printed page
        assert len(rule["because"]) <= 110, rule["id"]
        assert rule["because"].endswith("."), rule["id"]
        assert "NFPA" not in rule["source"], rule["id"]    # its clauses were not read


def test_rules_use_the_catalogue_of_facts_and_all_of_it():
    used = {fact for rule in RULES for fact in (*rule["when"], *rule["unless"])}
    assert used == set(toml("cautions")["facts"])


@pytest.mark.parametrize("facts, expected", [
    ({"oil"}, "lid-never-water"),
    ({"oil", "near-flash"}, "oil-near-flash"),
    ({"oil", "partial-quench"}, "oil-partial-flare"),
    ({"brine"}, "brine-spits"),
    ({"coal-forge"}, "coal-co"),
    ({"gas-forge"}, "gas-co"),
    ({"tube"}, "tube-bursts"),
    ({"untempered"}, "untempered-shatters"),
    ({"struck"}, "struck-head-soft"),
    ({"shock-high"}, "struck-eyes"),
    ({"domestic-oven"}, "oven-food"),
    ({"kiln"}, "kiln-elements"),
    ({"liquid-nitrogen"}, "nitrogen-air"),
    ({"unknown-condition"}, "zinc-fume"),
    (set(), "black-heat"),
])
def test_a_hazard_is_never_silent(facts, expected):
    assert expected in spoken(facts | {"always"})


def test_a_full_plunge_is_not_asked_of_a_partial_quench():
    assert "oil-full-plunge" not in spoken({"always", "oil", "partial-quench"})


def test_a_tool_made_to_be_struck_is_not_told_never_to_be_struck():
    said = spoken({"always", "struck", "hardness-over-58"})
    assert "hard-edge-chips" in said
    assert "hard-brittle" not in said


def test_the_flash_margin_is_28_kelvin():   # 29 CFR 1910.126(g): 50 °F as a difference; its printed 10 °C is a slip
    rule = next(rule for rule in RULES if rule["id"] == "oil-near-flash")
    assert "28 °C" in rule["text"]
    assert "1910.126(g)" in rule["source"]


def test_demo_job_asks_for_things_that_exist():
    job = demo_job()
    assert job["schema"] == "quenchwright.job/1"
    assert job["steel"]["grade"] in GRADES
    assert job["aim"]["use"] in {row["id"] for row in table("uses")}
    assert {bath["medium"] for bath in job["shop"]["baths"]} <= {row["id"] for row in table("media")}
    assert job["shop"]["heat"]["kind"] in {row["kind"] for row in table("furnace")}
    assert job["shop"]["heat"]["atmosphere"] in {row["id"] for row in table("atmospheres")}
    assert job["shop"]["temper"]["kind"] in {row["kind"] for row in table("temper_ovens")}
