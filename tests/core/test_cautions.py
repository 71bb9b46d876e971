"""Cautions: each speaks when its facts are true and only then; facts used, defined and computed are the same set."""

import ast
import inspect

import pytest

from pycore.data import toml
from pycore.job import parse_job
from pycore.plan import plan
from pycore.stages import facts as facts_module
from pycore.stages.cautions import WORST_FIRST, cautions
from tests.core.sample_jobs import NAMES, sample

RULES = toml("cautions")["rule"]
DEFINED = set(toml("cautions")["facts"])
USED = {fact for rule in RULES for fact in [*rule["when"], *rule.get("unless", ())]}


def computed():
    """Names of the facts that facts_of works out, read from its text (every string that is a key or a feature name)."""
    tree = ast.parse(inspect.getsource(facts_module))
    return {node.value for node in ast.walk(tree) if isinstance(node, ast.Constant) and isinstance(node.value, str)}


def ids(job):
    return {caution["id"] for caution in plan(job).to_json()["cautions"]}


def spoken(facts):
    return {rule["id"] for rule in cautions(frozenset(facts))}


@pytest.mark.parametrize("rule", RULES, ids=lambda r: r["id"])
def test_speaks_with_its_facts(rule):
    assert rule["id"] in spoken(rule["when"])


@pytest.mark.parametrize("rule", RULES, ids=lambda r: r["id"])
def test_is_silent_without_any_one_of_them(rule):
    for missing in rule["when"]:
        assert rule["id"] not in spoken(set(rule["when"]) - {missing})
    for against in rule.get("unless", ()):
        assert rule["id"] not in spoken({*rule["when"], against})


def test_facts_used_are_defined():
    assert USED <= DEFINED, USED - DEFINED


def test_facts_defined_are_used():
    assert DEFINED <= USED, DEFINED - USED


def test_facts_defined_are_computed():
    assert computed() >= DEFINED, DEFINED - computed()


@pytest.mark.parametrize("name", NAMES)
def test_facts_of_a_real_plan_are_defined(name):
    made = plan(sample(name))
    job = parse_job(sample(name))
    from pycore.stages import say

    true = facts_module.facts_of(job, made.steel, made.section, made.austenitize, made.quench, made.cold, made.temper, made.aim_HRC, say.use_row(job.use))
    assert true <= DEFINED, true - DEFINED
    assert "always" in true and {c["id"] for c in made.cautions} == spoken(true)


def test_worst_comes_first():
    said = cautions(frozenset(DEFINED))
    ranks = [WORST_FIRST[caution["signal"]] for caution in said]
    assert ranks == sorted(ranks) and ranks[0] == 0


# What the contents of a real job must call up, and must not.
BY_CONTENT = [
    ("cold chisel", {}, {"brine-spits", "coal-co", "no-pyrometer", "oven-food", "struck-head-soft", "normalize-forged"}, {"lid-never-water", "gas-co", "water-steam"}),
    ("cold chisel", {"shop__baths": [{"medium": "water", "volume_L": 20}]}, {"water-steam"}, {"brine-spits", "oil-tank"}),
    ("cold chisel", {"shop__baths": [{"medium": "brine", "volume_L": 0.5}]}, {"brine-too-little"}, {"oil-too-little"}),
    ("cold chisel", {"part__condition": "unknown"}, {"coupon-first", "zinc-fume"}, {"normalize-forged"}),
    ("cold chisel", {"part__condition": "hardened"}, {"anneal-hardened", "zinc-fume-reused"}, {"coupon-first"}),
    ("cold chisel", {"part__condition": "cold-drawn"}, {"stress-relieve-drawn"}, set()),
    ("cold chisel", {"shop__temper": {"kind": "torch"}}, {"torch-temper"}, {"oven-food"}),
    ("cold chisel", {"shop__temper": {"kind": "residual-heat"}}, {"residual-stop"}, {"oven-food"}),
    ("cold chisel", {"shop__temper": {"kind": "salt"}}, {"temper-salt-dry"}, {"oven-food"}),
    ("cold chisel", {"shop__heat": {"kind": "torch"}}, {"torch-gas", "torch-uneven"}, {"coal-co"}),
    ("leaf spring", {}, {"lid-never-water-vegetable", "canola-smoke", "spring-test", "gas-co", "oil-full-plunge"}, {"oil-named", "lid-never-water", "struck-head-soft"}),
    ("leaf spring", {"shop__baths": [{"medium": "canola", "volume_L": 15, "temperature_C": 310}]}, {"oil-near-flash"}, set()),
    ("leaf spring", {"shop__baths": [{"medium": "canola", "volume_L": 15, "temperature_C": 55}]}, set(), {"oil-near-flash"}),
    ("leaf spring", {"quantity": 6}, {"oil-batch-heat"}, set()),
    ("leaf spring", {"shop__baths": [{"medium": "medium-oil", "volume_L": 1}]}, {"oil-too-little", "oil-named", "lid-never-water"}, {"canola-smoke"}),
    ("punch", {}, {"foil-cuts", "foil-oil", "kiln-elements", "kiln-door-heat", "oil-tank"}, {"oven-food", "no-pyrometer"}),
    ("punch", {"part__features": ["sharp-corner", "thread"]}, {"corner-cracks-oil", "thread-cracks"}, {"hole-traps"}),
    ("shear blade", {}, {"dry-ice-air", "cold-cracks", "hole-traps", "air-draught"}, {"oil-tank", "fume-hot"}),
    ("shear blade", {"steel__grade": "D2"}, {"fume-hot"}, set()),
    ("shear blade", {"shop__cold": "liquid-nitrogen"}, {"nitrogen-air", "cold-cracks-nitrogen"}, {"dry-ice-air"}),
    ("shear blade", {"shop__cold": "freezer"}, {"freezer-food", "freezer-little"}, {"dry-ice-air"}),
    ("shear blade", {"shop__baths": [{"medium": "plates"}]}, {"plates-pinch"}, {"air-draught"}),
    ("shear blade", {"shop__heat": {"kind": "gas-forge"}}, {"high-alloy-window", "no-pyrometer"}, set()),
    ("certificate shaft", {}, {"keyway-cracks"}, {"untempered-never"}),
    ("certificate shaft", {"part__shape": "tube", "part__dimensions_mm": {"diameter": 30, "bore": 15, "length": 100}, "part__features": []}, {"tube-bursts"}, set()),
    ("blade in inches", {}, {"toaster-watch", "thin-overheats", "thin-and-thick"}, {"oven-reads-wrong"}),
]  # fmt: skip


@pytest.mark.parametrize(("name", "changes", "must", "must_not"), BY_CONTENT, ids=lambda v: str(v)[:40])
def test_cautions_follow_the_contents(name, changes, must, must_not):
    found = ids(sample(name, **changes))
    assert must <= found, must - found
    assert not must_not & found, must_not & found


@pytest.mark.parametrize("name", NAMES)
def test_what_every_plan_says(name):
    assert {"black-heat", "eyes-face", "people-out", "local-rules"} <= ids(sample(name))


def test_tempered_martensite_embrittlement():
    """4340 tempered at 350 °C sits in the trough (Korean J. Met. Mater.); at 200 and 550 °C it does not."""
    at = lambda T: ids(sample("certificate shaft", steel={"grade": "4340"}, decided={"temper_C": T}))  # noqa: E731
    assert "tme" in at(350) and "tme" not in at(200) and "tme" not in at(550)
