"""Reading a job: every fault named by its path and all at once, nothing right changed, nothing wrong let through."""

import copy
import json
import math

import pytest

from pycore.errors import InputErrors
from pycore.job import parse_job
from tests.core.sample_jobs import NAMES, sample


def faults(job):
    with pytest.raises(InputErrors) as caught:
        parse_job(job)
    return {fault.path: fault for fault in caught.value.faults}


# path of the change, what is given, path of the fault expected
FAULTY = [
    ("steel__grade", "unobtainium", "steel.grade"),
    ("steel__grade", 1095, "steel.grade"),
    ("steel", None, "steel"),
    ("steel", "W1", "steel"),
    ("steel", {"grade": "W1", "chemistry": {"C": 1.0}}, "steel"),
    ("steel", {"unknown": {"coupon": "file skates"}}, "steel"),
    ("steel", {"chemistry": {}}, "steel.chemistry.C"),
    ("steel", {"chemistry": {"C": 0.04}}, "steel.chemistry.C"),
    ("steel", {"chemistry": {"C": 0.5, "Mn": "much"}}, "steel.chemistry.Mn"),
    ("steel", {"chemistry": {"C": 0.5, "Xx": 0.5}}, "steel.chemistry.Xx"),
    ("steel", {"chemistry": {"C": math.nan}}, "steel.chemistry.C"),
    ("steel", {"chemistry": ["C", 0.5]}, "steel.chemistry"),
    ("steel__grain_size", 40, "steel.grain_size"),
    ("part", None, "part"),
    ("part__shape", "banana", "part.shape"),
    ("part__shape", None, "part.shape"),
    ("part__dimensions_mm", None, "part.dimensions_mm"),
    ("part__dimensions_mm__diameter", None, "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", -3, "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", 0, "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", 5000, "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", math.nan, "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", math.inf, "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", True, "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", "wide", "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", [20], "part.dimensions_mm.diameter"),
    ("part__dimensions_mm__diameter", 10**400, "part.dimensions_mm.diameter"),
    ("part__thinnest_mm", 25, "part.thinnest_mm"),
    ("part__features", ["dragon"], "part.features[0]"),
    ("part__features", "hole", "part.features"),
    ("part__zone", "everywhere", "part.zone"),
    ("part__zone_mm", 400, "part.zone_mm"),
    ("part__condition", "rusty", "part.condition"),
    ("aim", None, "aim"),
    ("aim", {}, "aim"),
    ("aim__use", "excalibur", "aim.use"),
    ("aim__hardness_HRC", [60, 56], "aim.hardness_HRC"),
    ("aim__hardness_HRC", [56], "aim.hardness_HRC"),
    ("aim__hardness_HRC", [56, 90], "aim.hardness_HRC"),
    ("aim__hardness_HRC", [math.nan, 60], "aim.hardness_HRC"),
    ("shop", None, "shop"),
    ("shop__heat", None, "shop.heat"),
    ("shop__heat__kind", "dragon", "shop.heat.kind"),
    ("shop__heat__max_C", 600, "shop.heat.max_C"),
    ("shop__heat__accuracy_C", -1, "shop.heat.accuracy_C"),
    ("shop__heat__atmosphere", "mist", "shop.heat.atmosphere"),
    ("shop__heat__pyrometer", "yes", "shop.heat.pyrometer"),
    ("shop__baths", [], "shop.baths"),
    ("shop__baths", None, "shop.baths"),
    ("shop__baths", {"medium": "brine"}, "shop.baths"),
    ("shop__baths", ["brine"], "shop.baths[0]"),
    ("shop__baths", [{"medium": "brine"}, {"medium": "blood"}], "shop.baths[1].medium"),
    ("shop__baths", [{"volume_L": 5}], "shop.baths[0].medium"),
    ("shop__baths", [{"medium": "brine", "volume_L": -1}], "shop.baths[0].volume_L"),
    ("shop__baths", [{"medium": "canola", "temperature_C": 330}], "shop.baths[0].temperature_C"),
    ("shop__baths", [{"medium": "fast-oil", "temperature_C": 150}], "shop.baths[0].temperature_C"),
    ("shop__baths", [{"medium": "water", "temperature_C": 99}], "shop.baths[0].temperature_C"),
    ("shop__baths", [{"medium": "brine", "agitation": "furious"}], "shop.baths[0].agitation"),
    ("shop__temper", None, "shop.temper"),
    ("shop__temper__kind", "sun", "shop.temper.kind"),
    ("shop__temper__max_C", 60, "shop.temper.max_C"),
    ("shop__cold", "moon", "shop.cold"),
    ("units", "cubits", "units"),
    ("schema", "quenchwright.job/9", "schema"),
    ("quantity", 0, "quantity"),
    ("quantity", 2.5, "quantity"),
    ("title", "x" * 500, "title"),
    ("title", 7, "title"),
    ("decided", {"austenitize_C": 5000}, "decided.austenitize_C"),
    ("decided", {"medium": "water"}, "decided.medium"),
    ("decided", {"temper_cycles": 1.5}, "decided.temper_cycles"),
    ("decided", {"magic": 1}, "decided.magic"),
    ("decided", [1], "decided"),
]  # fmt: skip


@pytest.mark.parametrize(("change", "value", "path"), FAULTY, ids=lambda v: str(v)[:40])
def test_each_fault_is_named(change, value, path):
    found = faults(sample(**{change: value}))
    assert path in found
    fault = found[path]
    assert fault.expected and path in fault.message and "\n" not in fault.message
    json.dumps(fault.to_json(), allow_nan=False)  # fit for strict JSON, whatever was given


IMPOSSIBLE = [
    ("tube", {"diameter": 20, "bore": 20}, "bore"),
    ("tube", {"diameter": 20, "bore": 30}, "bore"),
    ("wedge", {"edge": 5, "spine": 4, "width": 30}, "edge"),
    ("taper", {"edge": 12, "diameter": 10, "length": 50}, "edge"),
    ("flat", {"thickness": 30, "width": 20}, "thickness"),
]


@pytest.mark.parametrize(("shape", "dimensions", "name"), IMPOSSIBLE, ids=lambda v: str(v)[:40])
def test_impossible_geometry(shape, dimensions, name):
    found = faults(sample(part={"shape": shape, "dimensions_mm": dimensions, "condition": "annealed"}))
    assert list(found) == [f"part.dimensions_mm.{name}"]


def test_all_faults_at_once():
    job = sample(
        steel__grade="nope", part__dimensions_mm__diameter=-1, part__condition="rusty", aim__use="nope",
        shop__heat__kind="nope", shop__temper__max_C=3, quantity=-4,
    )  # fmt: skip
    assert set(faults(job)) == {
        "steel.grade", "part.dimensions_mm.diameter", "part.condition", "aim.use", "shop.heat.kind", "shop.temper.max_C", "quantity",
    }  # fmt: skip


@pytest.mark.parametrize("job", [None, 5, "job", [], [{}], True])
def test_what_is_no_job(job):
    assert list(faults(job)) == ["job"]


def test_an_empty_job_names_every_part():
    assert {"steel", "part", "aim", "shop"} <= {path.split(".")[0] for path in faults({})}


def test_bath_at_its_flash_point_says_so():
    found = faults(sample(shop__baths=[{"medium": "canola", "temperature_C": 326}]))
    assert "flash point" in found["shop.baths[0].temperature_C"].expected
    parse_job(sample(shop__baths=[{"medium": "canola", "temperature_C": 250}]))


def test_a_fire_that_cannot_reach_says_how_far():
    found = faults(sample("shear blade", shop__heat__max_C=800))
    assert "A2" in found["shop.heat.max_C"].expected
    parse_job(sample("shear blade", shop__heat__max_C=1000))


@pytest.mark.parametrize("name", NAMES)
def test_round_trip(name):
    """A job read, told and read again is the same job; its own telling is complete and strict JSON."""
    job = parse_job(sample(name))
    told = json.loads(json.dumps(job.to_json(), allow_nan=False))
    again = parse_job(told)
    assert again == job and again.to_json() == told


@pytest.mark.parametrize("name", NAMES)
def test_nothing_is_mutated(name):
    given = sample(name)
    before = copy.deepcopy(given)
    parse_job(given)
    assert given == before


ALIASES = [
    ("steel__grade", "1.1545", lambda job: job.grade == "W1"),
    ("steel__grade", " w1 ", lambda job: job.grade == "W1"),
    ("steel__grade", "C105U", lambda job: job.grade == "W1"),
    ("part__shape", "Bar", lambda job: job.part.shape == "round"),
    ("part__condition", "normalised", lambda job: job.part.condition == "normalized"),
    ("part__condition", "cold drawn", lambda job: job.part.condition == "cold-drawn"),
    ("shop__heat__kind", "Coal Forge", lambda job: job.heat.kind == "coal-forge"),
    ("shop__heat__kind", "electric kiln", lambda job: job.heat.kind == "kiln"),
    ("shop__temper__kind", "oven", lambda job: job.temper.kind == "kitchen-oven"),
    ("shop__baths", [{"medium": "salt water"}], lambda job: job.baths[0].medium == "brine"),
    ("shop__baths", [{"medium": "Fast Quenching Oil"}], lambda job: job.baths[0].medium == "fast-oil"),
    ("shop__cold", "dry ice", lambda job: job.cold == "dry-ice"),
    ("aim__use", "Cold Chisel", lambda job: job.use == "cold-chisel"),
    ("units", "inches", lambda job: job.units == "in"),
    ("part__dimensions_mm__diameter", "19,5", lambda job: job.part.dimensions_mm["diameter"] == 19.5),
    ("shop__heat__max_C", "1200", lambda job: job.heat.max_C == 1200),
    ("part__features", ["Keyway", "keyway", "section step"], lambda job: job.part.features == ("keyway", "section-step")),
]


@pytest.mark.parametrize(("change", "value", "holds"), ALIASES, ids=lambda v: str(v)[:30])
def test_other_spellings(change, value, holds):
    assert holds(parse_job(sample(**{change: value})))


def test_inches():
    part = parse_job(sample("blade in inches")).part
    assert part.dimensions_mm == pytest.approx({"edge": 0.762, "spine": 4.7625, "width": 31.75, "length": 228.6})
    same = sample(units="in", part__dimensions_mm={"diameter": "3/4", "length": "180 mm"}, part__zone_mm="1 1/2")
    job = parse_job(same)
    assert job.part.dimensions_mm == pytest.approx({"diameter": 19.05, "length": 180}) and job.part.zone_mm == pytest.approx(38.1)


def test_units_may_stand_in_the_shop():
    assert parse_job(sample(units=None, shop__units="in")).units == "in"


def test_defaults():
    job = parse_job(sample(schema=None, title=None, quantity=None, units=None, part__zone=None, part__zone_mm=None, part__condition=None,
                           shop__temper={"kind": "kiln"}, shop__baths=[{"medium": "canola"}], shop__heat={"kind": "kiln"}))
    assert (job.title, job.quantity, job.units, job.part.zone, job.part.condition) == ("Cold chisel", 1, "mm", "all", "unknown")
    assert job.heat.pyrometer and job.temper.max_C >= 500 and job.baths[0].temperature_C == 60 and job.cold == "none"


def test_blank_fields_count_as_not_given():
    """An empty field of the form is no fault."""
    job = parse_job(sample(part__thinnest_mm="", part__zone_mm=" ", shop__heat__max_C="", quantity="", title=""))
    assert job.quantity == 1 and job.part.thinnest_mm is None


def test_the_job_cannot_be_changed():
    with pytest.raises(AttributeError):
        parse_job(sample()).title = "other"
