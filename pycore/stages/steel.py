"""The steel: its composition, critical temperatures, hardenability, and what dissolves at heat."""

from dataclasses import dataclass

from pycore.data import number, table
from pycore.physics import critical, hardenability, martensite
from pycore.physics.validity import outside, say
from pycore.stages.notes import mark, note, rounded

JOMINY_STATIONS = tuple(range(1, 33))
GRAIN_SIZE_ASSUMED = 7.0  # what ASTM A255 assumes; fine-grained steel after a short soak is 7 to 9
# Residuals of commercial bar where a certificate is silent (common practice): they matter for plain carbon steel. Bars
# by size ask for less (down to none), hardenability bands for twice this; between the two.
RESIDUALS_PCT = {"Cr": 0.05, "Ni": 0.05, "Mo": 0.01, "Cu": 0.07}
SILENT_PCT = {"Mn": 0.60, "Si": 0.22}
# Carbon dissolved after a short soak: a share of the Fe-C solubility, less what chromium holds in carbide. Our own
# estimate, set on retained austenite of 52100 quenched from 816-871 °C and on 1095 at 800 °C (0.80-0.90 %).
SOAK_SHARE, HELD_BY_CR = 0.93, 0.20
CR_IN_CARBIDE = 0.6  # share of Cr lost with the carbide, per share of carbon left undissolved (estimate)
MN_PER_S, COMMON_S_PCT = 54.94 / 32.06, 0.03  # what the factors of A255 already hold is left in
HYPEREUTECTOID_C_PCT = 0.77
HIGH_ALLOY_PCT = {"Cr": 3.0, "Mo": 1.0, "W": 2.0, "V": 0.6, "Ni": 4.0}


@dataclass(frozen=True)
class Steel:
    grade: str | None
    name: str
    basis: str  # modelled or tabulated
    hardening: str  # water, oil or air: what the grade is meant for
    family: str
    normalize: str  # yes or never
    prior: str
    composition: dict  # whole steel, wt %
    austenite: dict  # in solution at the austenitizing temperature, wt %
    dissolved_C_pct: float
    grain_size: float
    Ac1_C: float
    Ac3_C: float | None
    Acm_C: float | None
    Ms_C: float
    Mf_C: float
    DI_mm: float | None
    jominy: dict | None  # calculated Jominy curve at 1 to 32 sixteenths of an inch
    austenitize_C: tuple  # low, usual, high
    temperatures: dict  # every tabulated quantity of the grade: (low, value, high, source)
    marks: tuple
    why: dict


def _tabulated(grade):
    return {
        row["quantity"]: (number(row["low"]), number(row["value"]), number(row["high"]), row["source"])
        for row in table("temperatures")
        if row["grade"] == grade
    }


def dissolved_carbon_pct(composition, temperature_C):
    """Carbon in solution after a short soak at a temperature (estimate, see SOAK_SHARE)."""
    C = composition["C"]
    if C <= HYPEREUTECTOID_C_PCT:
        return C
    limit = SOAK_SHARE * float(critical.carbon_at_acm_pct(temperature_C)) - HELD_BY_CR * composition.get("Cr", 0.0)
    return min(C, max(limit, 0.5))


def steel_of(job):
    """Steel from a job: a library grade with its measured values, or a certificate's chemistry by formula."""
    why, marks = {}, []
    if job.grade:
        row = next(r for r in table("grades") if r["id"] == job.grade)
        composition = {
            r["element"]: number(r["nominal"])
            for r in table("composition")
            if r["grade"] == job.grade and number(r["nominal"])
        }
        known = _tabulated(job.grade)
        name, basis, hardening, family = row["name"], row["basis"], row["hardening"], row["family"]
        normalize, prior = row["normalize"], row["prior_advice"]
        composition_note = "nominal composition of the grade"
    else:
        composition = dict(job.chemistry)
        for element, amount in {**RESIDUALS_PCT, **SILENT_PCT}.items():
            if element not in composition:
                composition[element] = amount
                marks.append(
                    mark(
                        f"steel.composition.{element}",
                        f"{element} is not on the certificate: {amount:g} % assumed, usual for commercial bar",
                    )
                )
        known, basis = {}, "modelled"
        name = f"certificate steel, {composition['C']:.2f} % C"
        family = "certificate"
        high = [e for e, limit in HIGH_ALLOY_PCT.items() if composition.get(e, 0.0) > limit]
        if high:
            marks.append(
                mark(
                    "steel",
                    "high-alloy chemistry ("
                    + ", ".join(f"{e} {composition[e]:g} %" for e in high)
                    + "): the low-alloy models do not hold; take the maker's sheet where it differs",
                )
            )
        hardening = _hardening_of(composition)
        normalize = "never" if hardening == "air" else "yes"
        prior = (
            "If it was forged or overheated, normalize once above the hardening heat and cool in still air."
            if normalize == "yes"
            else "Do not normalize: it hardens in air. Anneal after forging."
        )
        composition_note = "certificate"
    grain = job.grain_size or GRAIN_SIZE_ASSUMED
    hyper = composition["C"] > HYPEREUTECTOID_C_PCT
    Ac1 = _value(known, "Ac1_C", lambda: float(critical.andrews_1965_Ac1_C(composition)))
    Ac3 = Acm = None
    if hyper and "Ac3_C" in known and "Acm_C" not in known:
        Ac3 = known["Ac3_C"][1]  # high-alloy grades are told with the end of their austenite range
    elif hyper:
        Acm = _value(
            known,
            "Acm_C",
            lambda: float(critical.acm_Fe_C_C(composition["C"])) + Ac1 - critical.EUTECTOID_TEMPERATURE_C,
        )
    else:
        Ac3 = max(_value(known, "Ac3_C", lambda: float(critical.andrews_1965_Ac3_C(composition))), Ac1 + 5)
    low, usual, high = known["austenitize_C"][:3] if "austenitize_C" in known else _range_by_rule(Ac1, Ac3, Acm)
    temperature = job.decided.get("austenitize_C", usual)
    dissolved = _dissolved(composition, known, temperature, usual)
    austenite = dict(composition, C=dissolved)
    # Sulfur ties manganese up as MnS (atomic masses 54.94 and 32.06); the rest hardens.
    sulfide = MN_PER_S * max(0.0, composition.get("S", 0.0) - COMMON_S_PCT)
    austenite["Mn"] = max(0.0, composition.get("Mn", 0.0) - sulfide)
    austenite["Cr"] = composition.get("Cr", 0.0) * (1 - CR_IN_CARBIDE * (1 - dissolved / composition["C"]))
    Ms_formula = float(martensite.martensite_start_C(austenite))
    Ms = Ms_formula
    if "Ms_C" in known:  # measured at the usual heat; the formula carries it to another
        usual_austenite = dict(austenite, C=_dissolved(composition, known, usual, usual))
        Ms = known["Ms_C"][1] + Ms_formula - float(martensite.martensite_start_C(usual_austenite))
    if "Ms_C" not in known:
        Ms_range = martensite.MS_RANGE if dissolved <= 0.6 else martensite.VAN_BOHEMEN_RANGE
        Ms_out = outside(austenite, Ms_range)
        if Ms_out:
            marks.append(mark("steel.Ms_C", "outside the range of the formula for Ms: " + say(Ms_out)))
    DI_mm = None
    out = outside(composition, hardenability.A255_RANGE)
    if hyper or basis == "tabulated":
        marks.append(mark("steel.DI_mm", "no ideal diameter: ASTM A255 does not hold where carbides stay undissolved"))
    else:
        DI_mm = float(hardenability.a255_ideal_diameter_in(austenite, grain)) * hardenability.INCH_MM
        if out:
            marks.append(mark("steel.DI_mm", "outside the range of ASTM A255: " + say(out)))
    jominy = None
    if DI_mm is not None and not outside({"C": austenite["C"]}, {"C": hardenability.JOMINY_C_RANGE}):
        HRC = hardenability.a255_jominy_HRC(austenite, JOMINY_STATIONS, grain)
        jominy = {"distance_mm": [rounded(J * 25.4 / 16, 2) for J in JOMINY_STATIONS], "HRC": [rounded(v) for v in HRC]}
    elements = ", ".join(f"{e} {composition[e]:g}" for e in sorted(composition, key=lambda e: (e != "C", e)))
    _notes(why, known, composition, elements, composition_note, grain, temperature, hyper, bool(out), Ac3, Acm)
    return Steel(
        job.grade,
        name,
        basis,
        hardening,
        family,
        normalize,
        prior,
        composition,
        austenite,
        rounded(dissolved, 3),
        grain,
        rounded(Ac1),
        rounded(Ac3),
        rounded(Acm),
        rounded(Ms),
        rounded(Ms - martensite.STEVEN_HAYNES_MF_OFFSET_K),
        rounded(DI_mm),
        jominy,
        (low, usual, high),
        known,
        tuple(marks),
        why,
    )


def _value(known, quantity, compute):
    return known[quantity][1] if quantity in known else compute()


def _dissolved(composition, known, temperature_C, usual_C):
    """Tabulated dissolved carbon where the grade has it, moved along the estimate to another temperature."""
    estimate = dissolved_carbon_pct(composition, temperature_C)
    if "dissolved_C_pct" in known:
        estimate += known["dissolved_C_pct"][1] - dissolved_carbon_pct(composition, usual_C)
    return min(composition["C"], max(0.3, estimate))


def _range_by_rule(Ac1, Ac3, Acm):
    """Austenitizing range where no published one exists: common practice, 30-60 K above Ac3, or Ac1 + 40-80 K."""
    base = Ac1 + 35 if Acm is not None else Ac3 + 20
    return tuple(5 * round((base + more) / 5) for more in (10, 25, 40))


def _hardening_of(composition):
    """What a chemistry is quenched in, by its ideal diameter (common practice)."""
    DI = float(hardenability.a255_ideal_diameter_in(composition))
    return "water" if DI < 1.4 else "oil" if DI < 8 else "air"


def _notes(why, known, composition, elements, composition_note, grain, temperature, hyper, out, Ac3, Acm):
    andrews_out = outside(composition, critical.ANDREWS_RANGE)

    def entry(key, name, quantity, model, source, valid):
        if quantity in known:
            why[key] = note(name, "tabulated for the grade", composition_note, known[quantity][3])
        else:
            why[key] = note(name, model, elements, source, valid, not andrews_out)

    entry("steel.Ac1_C", "Ac1", "Ac1_C", "Andrews 1965", "Andrews 1965, JISI 203, 721-727", "low-alloy, C to 0.6 %")
    if Ac3 is not None:
        entry(
            "steel.Ac3_C",
            "Ac3",
            "Ac3_C",
            "Andrews 1965, short form",
            "Andrews 1965, JISI 203, 721-727",
            "low-alloy, C to 0.6 %",
        )
    if Acm is not None:
        entry(
            "steel.Acm_C",
            "Acm",
            "Acm_C",
            "Fe-C diagram, shifted by Ac1 - 727",
            "Gustafson 1985 (Fe-C assessment)",
            "one check: 100Cr6",
        )
    entry(
        "steel.Ms_C",
        "Martensite start",
        "Ms_C",
        "Andrews 1965 product form to 0.6 % C in solution, van Bohemen 2012 above",
        "Andrews 1965; van Bohemen 2012, Mater. Sci. Technol. 28, 487",
        "about ±15 °C",
    )
    source = known["dissolved_C_pct"][3] if "dissolved_C_pct" in known else "our estimate on 52100 and 1095"
    why["steel.dissolved_C_pct"] = note(
        "Carbon in solution",
        "Fe-C solubility at the hardening heat, short soak" if hyper else "all carbon dissolves",
        f"{composition['C']:g} % C, {temperature:g} °C",
        source if hyper else "Fe-C diagram",
        "±0.08 %" if hyper else "",
    )
    why["steel.DI_mm"] = note(
        "Ideal diameter",
        "ASTM A255 multiplying factors",
        f"{elements}; grain size ASTM {grain:g}",
        "ASTM A255 (from memory, worked example checked)",
        "C 0.10-0.70, Mn 0.5-1.65, Si 0.15-0.60, Cr to 1.35, Ni to 1.5, Mo to 0.55",
        not out and not hyper,
    )
