"""What austenite becomes as it cools: ferrite, pearlite and bainite by kinetics with additivity."""

import numpy as np

from pycore.physics.composition import amounts

R_CAL = 1.987  # cal/molK
KV_RANGE = {"C": (0.1, 0.8), "Mn": (0.0, 2.0), "Si": (0.0, 1.0), "Ni": (0.0, 4.0), "Cr": (0.0, 2.0), "Mo": (0.0, 1.0)}
EUTECTOID_C_PCT, FERRITE_C_PCT = 0.76, 0.02
# In near-eutectoid steel what forms above about 500 °C is fine pearlite, not bainite (isothermal diagram of 1080, US
# Steel atlas; from memory); the bainite speed there is counted as pearlite.
NEAR_EUTECTOID_C_PCT, PEARLITE_DOWN_TO_C = 0.60, 500.0
CARBIDE_FACTOR, CARBIDE_MN_PCT, CARBIDE_MN_TERM = 2.8, 0.30, 4.36  # see carbide_nucleation
CARBIDE_LEAST_MN_PCT, CARBIDE_FULL_AT_C_PCT = 0.09, 0.05
SEED = 1e-4  # fraction from which growth is stepped; the time integral is finite down to zero


def kirkaldy_venugopalan_1984_Bs_C(composition):
    """Start of bainite.

    Inputs: composition {element: wt %}, scalars or arrays. Returns: °C.
    Valid: KV_RANGE. Raises: nothing.
    Source: Kirkaldy & Venugopalan 1984 (from memory).
    """
    g = amounts(composition)
    return 656 - 57.7 * g("C") - 35 * g("Mn") - 75 * g("Si") - 15.3 * g("Ni") - 34 * g("Cr") - 41.2 * g("Mo")


def kirkaldy_venugopalan_1984_speeds(composition, temperature_C, *, Ae3_C, Ae1_C, Bs_C, grain_size=7.0):
    """Speeds of ferrite, pearlite and bainite at a temperature, to be multiplied by the growth term of X.

    Inputs: composition of the austenite {element: wt %}, numbers; temperature_C, array; Ae3_C, Ae1_C, Bs_C, the
        temperatures under which each runs; grain_size, ASTM number.
    Returns: (ferrite, pearlite, bainite), 1/s, shape of temperature_C; zero above their temperatures.
    Valid: KV_RANGE, 200 to 850 °C; a factor of 2 to 3 in time. Raises: nothing.
    Source: Kirkaldy & Venugopalan 1984, Phase Transformations in Ferrous Alloys, AIME (from memory; molybdenum
        in ferrite taken as 244, sources differ).
    """
    g = lambda e: float(composition.get(e, 0.0))  # noqa: E731
    C, Mn, Ni, Cr, Mo = (g(e) for e in ("C", "Mn", "Ni", "Cr", "Mo"))
    T = np.asarray(temperature_C, float)
    RT = R_CAL * (T + 273.15)
    grains = 2 ** ((grain_size - 1) / 2)
    ferrite = (
        grains * np.maximum(Ae3_C - T, 0) ** 3 * np.exp(-23500 / RT) / (59.6 * Mn + 1.45 * Ni + 67.7 * Cr + 244 * Mo)
    )
    D = 1 / (np.exp(27500 / RT) + (0.01 * Cr + 0.52 * Mo) * np.exp(37000 / RT))
    pearlite = grains * np.maximum(Ae1_C - T, 0) ** 3 * D / (1.79 + 5.42 * (Cr + Mo + 4 * Mo * Ni))
    bainite = (
        grains * np.maximum(Bs_C - T, 0) ** 2 * np.exp(-27500 / RT) / (1e-4 * (2.34 + 10.1 * C + 3.8 * Cr + 19 * Mo))
    )
    return ferrite, pearlite, bainite


def li_1998_speeds(composition, temperature_C, *, Ae3_C, Ae1_C, Bs_C, grain_size=7.0):
    """Speeds by the exponential alloy factors, to be multiplied by the growth term of X.

    Inputs: as kirkaldy_venugopalan_1984_speeds.
    Returns: (ferrite, pearlite, bainite), 1/s, shape of temperature_C; zero above their temperatures.
    Valid: KV_RANGE, 200 to 850 °C; a factor of 2 to 3 in time. Raises: nothing.
    Source: Li, Niebuhr, Meekisho & Atteridge 1998, Metall. Mater. Trans. B 29, 661-672 (from memory). Reprints give
        27 500 cal/mol for all three reactions; ferrite keeps 23 500 of the parent model, because measured ferrite
        starts of 1045 and 4140 agree with it and lie a factor of 10 off with 27 500.
    """
    g = lambda e: float(composition.get(e, 0.0))  # noqa: E731
    C, Mn, Si, Ni, Cr, Mo = (g(e) for e in ("C", "Mn", "Si", "Ni", "Cr", "Mo"))
    T = np.asarray(temperature_C, float)
    RT = R_CAL * (T + 273.15)
    FC = np.exp(1.00 + 6.31 * C + 1.78 * Mn + 0.31 * Si + 1.12 * Ni + 2.70 * Cr + 4.06 * Mo)
    PC = np.exp(-4.25 + 4.12 * C + 4.36 * Mn + 0.44 * Si + 1.71 * Ni + 3.33 * Cr + 5.19 * np.sqrt(Mo))
    BC = np.exp(-10.23 + 10.18 * C + 0.85 * Mn + 0.55 * Ni + 0.90 * Cr + 0.36 * Mo)
    ferrite = 2 ** (0.41 * grain_size) * np.maximum(Ae3_C - T, 0) ** 3 * np.exp(-23500 / RT) / FC
    pearlite = 2 ** (0.32 * grain_size) * np.maximum(Ae1_C - T, 0) ** 3 * np.exp(-27500 / RT) / PC
    bainite = 2 ** (0.29 * grain_size) * np.maximum(Bs_C - T, 0) ** 2 * np.exp(-27500 / RT) / BC
    return ferrite, pearlite, bainite


def carbide_nucleation(composition, dissolved_C_pct):
    """How much faster pearlite and bainite start where carbide is left undissolved.

    Inputs: composition {element: wt %}, numbers; dissolved_C_pct, wt % carbon in the austenite. Returns: factor >= 1, -.
    Valid: hypereutectoid steel, Mn 0.09 to 0.5 % (1 is the floor beyond), C 0.94 to 1.09 %, about 790 °C. Raises: nothing.
    Source: one factor, set once on the observed critical diameters of twelve W-type heats in brine (Roberts, Krauss &
        Kennedy, Tool Steels, ASM, Table 7-3); its manganese term is Li et al. 1998's for pearlite, which
        Kirkaldy-Venugopalan lack, and fades where Li's speeds take over. It comes in over the first 0.05 % of carbon
        left undissolved (our own choice, so that there is no jump).
    """
    Mn = max(float(composition.get("Mn", 0.0)), CARBIDE_LEAST_MN_PCT)
    full = CARBIDE_FACTOR * float(np.exp(-CARBIDE_MN_TERM * (Mn - CARBIDE_MN_PCT) * (1 - alloy_weight(composition))))
    share = min(1.0, max(0.0, float(composition.get("C", 0.0)) - dissolved_C_pct) / CARBIDE_FULL_AT_C_PCT)
    return 1.0 + (max(full, 1.0) - 1.0) * share


def alloy_weight(composition):
    """How far a steel is from plain carbon steel: 0 takes Kirkaldy-Venugopalan's speeds, 1 takes Li's.

    Inputs: composition {element: wt %}, numbers. Returns: 0 to 1.
    Valid: KV_RANGE. Raises: nothing.
    Source: our own choice: the first fits measured starts of plain steel, the second those of 4140 and 4340.
    """
    alloy = sum(float(composition.get(e, 0.0)) for e in ("Cr", "Ni", "Mo"))
    return min(1.0, max(0.0, (alloy - 0.2) / 0.6))


def growth(X, late=0.0, power=2 / 3):
    """Growth term of the rate form: X^(2(1-X)/3) (1-X)^(2X/3), slowed late for bainite.

    Inputs: X, fraction 0 to 1, scalar or array; late, the bracket of bainite's exp(late X2), 0 for the others; power,
        2/3 for Kirkaldy-Venugopalan, 0.4 for Li.
    Returns: -, same shape.
    Valid: 0 to 1. Raises: nothing.
    Source: Kirkaldy & Venugopalan 1984 (from memory); I(1) = 4.3589 is its reciprocal's integral.
    """
    X = np.clip(X, SEED, 1.0)
    return X ** (power * (1 - X)) * np.maximum(1 - X, 0.0) ** (power * X) * np.exp(-late * X * X)


def decompose(time_s, temperature_C, composition, *, Ae3_C, Ae1_C, Bs_C, Ms_C, grain_size=7.0, nucleation=1.0):
    """Fractions formed along cooling curves.

    Inputs: time_s (steps,); temperature_C (places, steps), falling; composition of the austenite {element: wt %},
        numbers; Ae3_C, Ae1_C, Bs_C, Ms_C, °C; grain_size, ASTM number; nucleation, factor on the speed of pearlite
        and bainite, 1 for clean austenite.
    Returns: dict of arrays (places,): "ferrite", "pearlite", "bainite", fractions of the whole, and
        "pearlite_formed_C", mean temperature at which the pearlite formed (NaN where there is none).
    Valid: KV_RANGE; steps of at most about 15 K. Raises: nothing.
    Source: Kirkaldy & Venugopalan 1984 (from memory) with Scheil's additivity (Scheil 1935, Arch. Eisenhüttenwes.
        8, 565); ferrite limited by the lever rule against 0.76 % C.
    """
    places = temperature_C.shape[0]
    C = float(composition.get("C", 0.0))
    most_F = max(0.0, (EUTECTOID_C_PCT - C) / (EUTECTOID_C_PCT - FERRITE_C_PCT))
    middle = (temperature_C[:, 1:] + temperature_C[:, :-1]) / 2
    dt = np.diff(time_s)[None, :] * (middle > Ms_C)
    limits = {"Ae3_C": Ae3_C, "Ae1_C": Ae1_C, "Bs_C": Bs_C, "grain_size": grain_size}
    weight = alloy_weight(composition)
    plain = kirkaldy_venugopalan_1984_speeds(composition, middle, **limits)
    alloyed = li_1998_speeds(composition, middle, **limits)
    dF, dP, dB = (one ** (1 - weight) * other**weight * dt for one, other in zip(plain, alloyed))
    dP, dB = dP * nucleation, dB * nucleation
    if C >= NEAR_EUTECTOID_C_PCT:
        dP, dB = dP + dB * (middle > PEARLITE_DOWN_TO_C), dB * (middle <= PEARLITE_DOWN_TO_C)
    power = 2 / 3 * (1 - weight) + 0.4 * weight
    late = max(
        0.0,
        sum(
            k * float(composition.get(e, 0.0))
            for e, k in (("C", 1.9), ("Mn", 2.5), ("Ni", 0.9), ("Cr", 1.7), ("Mo", 4.0))
        )
        - 2.6,
    )
    XF, XP, XB, moment = (np.zeros(places) for _ in range(4))
    for i in np.flatnonzero((dF + dP + dB).max(axis=0) > 1e-6):
        left = np.maximum(1.0 - XF - XP - XB, 0.0)
        room = 1.0 - XF  # what pearlite and bainite can share
        F = dF[:, i] * growth(XF / most_F, power=power) * most_F * (XP < 0.01) if most_F > 0.01 else np.zeros(places)
        F = np.minimum(F, np.maximum(most_F - XF, 0.0))
        taken = (XP + XB) / np.maximum(room, 1e-6)  # a second product grows into what the first has left
        P = dP[:, i] * growth(taken, power=power) * room
        B = dB[:, i] * growth(taken, late * (1 - weight), power) * room
        scale = np.minimum(1.0, left / np.maximum(F + P + B, 1e-30))
        XF, XP, XB = XF + F * scale, XP + P * scale, XB + B * scale
        moment = moment + P * scale * middle[:, i]
    formed = np.where(XP > 1e-6, moment / np.maximum(XP, 1e-12), np.nan)
    return {"ferrite": XF, "pearlite": XP, "bainite": XB, "pearlite_formed_C": formed}
